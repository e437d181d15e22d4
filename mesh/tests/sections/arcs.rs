//! Stars with arcs, roundings and holes by chance, meshed and bisected; fans of pieces about a point.

use std::f64::consts::TAU;

use proptest::prelude::*;

use sectile_mesh::bisect::bisect;
use sectile_mesh::domain::{Domain, build};
use sectile_mesh::mesh::Mesh;
use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::shape::polygon;
use sectile_mesh::triangulate::{Sizing, triangulate};
use sectile_mesh::{Point, Vector};

use crate::check::{check_mesh, check_triangulation, exact_area};
use crate::shapes::{moved, piece};

fn solid(outer: sectile_mesh::outline::piece::Ring) -> Outline {
    Outline {
        outer,
        holes: Vec::new(),
    }
}

fn meshed(domain: &Domain, pieces: &[Piece]) -> Mesh {
    let mesh = triangulate(domain, &Sizing::default()).unwrap();
    check_triangulation("by chance", &mesh, domain, exact_area(pieces));
    mesh
}

/// A star-shaped ring with radii between `low` and `high`, some of its corners rounded or reached by
/// an arc.
fn star(radii: &[f64], centre: Point, scale: f64, round: &[u8]) -> Option<Outline> {
    let n = radii.len();
    let at = |k: usize| {
        let (s, c) = (TAU * k as f64 / n as f64).sin_cos();
        centre + Vector::new(c, s) * (scale * radii[k % n])
    };
    let corners: Vec<Corner> = (0..n)
        .map(|k| {
            let at_k = at(k);
            let before = at((k + n - 1) % n);
            let middle = before.lerp(at_k, 0.5);
            let bulge = (at_k - before).perpendicular() * 0.08;
            Corner {
                at: at_k,
                round: (round[k % round.len()] == 1).then_some(0.05 * scale),
                via: match round[k % round.len()] {
                    2 => Some(middle + bulge),
                    3 => Some(middle - bulge),
                    _ => None,
                },
            }
        })
        .collect();
    Some(solid(ring_from_corners(&corners).ok()?))
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 150, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn stars_with_holes_and_arcs_mesh_and_bisect(
        radii in prop::collection::vec(0.35f64..1.0, 5..14),
        inner in prop::collection::vec(0.1f64..0.3, 4..9),
        round in prop::collection::vec(0u8..4, 1..7),
        turn in 0.0f64..360.0,
        marks in prop::collection::vec(any::<bool>(), 1..40),
    ) {
        let Some(mut outline) = star(&radii, Point::default(), 10.0, &round) else { return Ok(()) };
        if let Some(hole) = star(&inner, Point::default(), 10.0, &round) {
            outline.holes.push(hole.outer);
        }
        let pieces = [piece("star", moved(&outline, -50.0, 20.0, turn))];
        let Ok(domain) = build(&pieces) else { return Ok(()) };
        let mut mesh = meshed(&domain, &pieces);
        for _ in 0..3 {
            let marked: Vec<bool> = (0..mesh.triangles.len()).map(|t| marks[t % marks.len()]).collect();
            mesh = bisect(&mesh, &marked).mesh;
            check_mesh("bisected", &mesh, exact_area(&pieces));
        }
    }

    #[test]
    fn fans_of_triangles_of_several_pieces_mesh(
        radii in prop::collection::vec(0.2f64..3.0, 3..9), cut in 1usize..8
    ) {
        // Wedges around one point, each its own piece, leaving the last `cut` out.
        let n = radii.len();
        let rim: Vec<Point> = (0..n)
            .map(|k| {
                let (s, c) = (TAU * k as f64 / n as f64).sin_cos();
                Point::new(c * radii[k], s * radii[k])
            })
            .collect();
        let wedges = (0..n.saturating_sub(cut).max(1)).map(|k| {
            solid(polygon(&[Point::default(), rim[k], rim[(k + 1) % n]]))
        });
        let pieces: Vec<Piece> = wedges.map(|o| piece("wedge", o)).collect();
        let domain = build(&pieces).unwrap();
        prop_assert_eq!(domain.parts, 1);
        meshed(&domain, &pieces);
    }
}
