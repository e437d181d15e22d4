//! Sections that several tests share.

#![allow(dead_code)]

use sectile_mesh::Point;
use sectile_solver::figure::Figure;
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::Solution;
use sectile_validation::outline::{Loop, piece, polygon};
use sectile_validation::solve::{settings, solve_pieces};

/// Solves one outline with holes.
pub fn solve_loops(outline: &Loop, holes: &[Loop], nu: f64, tolerance: f64) -> Solution {
    let (piece, _) = piece(outline, holes).expect("geometry");
    solve_pieces(&[piece], nu, &settings(tolerance)).expect("solved")
}

/// Solves one polygon, ν = 0.3.
pub fn solve_polygon(corners: &[[f64; 2]], tolerance: f64) -> Solution {
    solve_loops(&polygon(corners), &[], 0.3, tolerance)
}

/// The figure of a quantity.
pub fn figure(solution: &Solution, q: Quantity) -> Figure {
    solution.get(q).unwrap_or_else(|| panic!("no {}", q.key()))
}

/// The shear centre's value.
pub fn shear_centre(solution: &Solution) -> Point {
    Point::new(
        figure(solution, Quantity::ShearCentreX).value,
        figure(solution, Quantity::ShearCentreY).value,
    )
}

/// Channel open to the right: web centreline on x = 0, flange centrelines at y = ±h/2, flange tips at
/// x = b.
pub fn channel(h: f64, b: f64, tf: f64, tw: f64) -> Vec<[f64; 2]> {
    let (o, i, w) = (0.5 * (h + tf), 0.5 * (h - tf), 0.5 * tw);
    vec![
        [-w, -o],
        [b, -o],
        [b, -i],
        [w, -i],
        [w, i],
        [b, i],
        [b, o],
        [-w, o],
    ]
}

/// Z: as the channel, the lower flange to the left.
pub fn zed(h: f64, b: f64, tf: f64, tw: f64) -> Vec<[f64; 2]> {
    let (o, i, w) = (0.5 * (h + tf), 0.5 * (h - tf), 0.5 * tw);
    vec![
        [-b, -o],
        [w, -o],
        [w, i],
        [b, i],
        [b, o],
        [-w, o],
        [-w, -i],
        [-b, -i],
    ]
}

/// I: flange centrelines at y = ±h/2, lower flange b1 × t1, upper flange b2 × t2, web tw.
pub fn eye(h: f64, [b1, t1]: [f64; 2], [b2, t2]: [f64; 2], tw: f64) -> Vec<[f64; 2]> {
    let (x1, x2, w) = (0.5 * b1, 0.5 * b2, 0.5 * tw);
    let (l, u) = (-0.5 * h, 0.5 * h);
    let (l0, l1, u0, u1) = (l - 0.5 * t1, l + 0.5 * t1, u - 0.5 * t2, u + 0.5 * t2);
    vec![
        [-x1, l0],
        [x1, l0],
        [x1, l1],
        [w, l1],
        [w, u0],
        [x2, u0],
        [x2, u1],
        [-x2, u1],
        [-x2, u0],
        [-w, u0],
        [-w, l1],
        [-x1, l1],
    ]
}
