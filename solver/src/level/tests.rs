#![allow(clippy::unwrap_used)]

use sectile_mesh::Point;

use super::*;
use crate::figure::Figure;
use crate::mixture::UNIT;
use crate::property::shear::{Enclosures, ShearProperties};
use crate::testing::{annulus, grid};

/// Frame and moments of a straight-sided mesh: x and y lie in the space, so its quadrature is exact.
fn moments_of(mesh: &Mesh) -> (Frame, AreaMoments) {
    let tables = Tables::new(4);
    let moments = |origin: Point| {
        let frame = Frame { origin, scale: 1.0 };
        let geometry = Geometry::new(mesh, &frame);
        let space = Space::new(mesh, 4);
        let kernel = Kernel {
            geometry: &geometry,
            space,
            tables: &tables,
            ratios: &[UNIT],
        };
        let ones = vec![1.0; space.nodes()];
        let [a, x, y, _] = kernel.moments(&ones);
        let mut xs = vec![0.0; space.nodes()];
        let mut ys = vec![0.0; space.nodes()];
        let mut nodes = Vec::new();
        for t in 0..mesh.triangles.len() {
            space.fill_nodes(t, &mut nodes);
            for (&i, r) in nodes.iter().zip(&tables.basis.nodes) {
                let at = geometry.map(t).at(r[0], r[1]);
                xs[i] = at.x;
                ys[i] = at.y;
            }
        }
        let [_, xx, xy, _] = kernel.moments(&xs);
        let [_, _, yy, _] = kernel.moments(&ys);
        (a, x, y, xx, xy, yy)
    };
    let (a, x, y, ..) = moments(Point::default());
    let origin = Point::new(x / a, y / a);
    let (_, _, _, ixx, ixy, iyy) = moments(origin);
    let m = AreaMoments {
        area: a,
        centroid: Point::default(),
        xx: iyy,
        yy: ixx,
        xy: ixy,
        third_y: 0.0,
        third_x: 0.0,
        extent: [-1.0, 1.0, -1.0, 1.0],
        reach: 1.0,
    };
    (Frame { origin, scale: 1.0 }, m)
}

/// Moments of an annulus of outer radius 1.
fn annulus_moments(inner: f64) -> AreaMoments {
    let pi = std::f64::consts::PI;
    let second = 0.25 * pi * (1.0 - inner.powi(4));
    AreaMoments {
        area: pi * (1.0 - inner * inner),
        centroid: Point::default(),
        xx: second,
        yy: second,
        xy: 0.0,
        third_y: 0.0,
        third_x: 0.0,
        extent: [-1.0, 1.0, -1.0, 1.0],
        reach: 1.0,
    }
}

fn solved(mesh: &Mesh, order: usize, poisson: f64) -> (Enclosures, ShearProperties, LevelResult) {
    let (frame, m) = if mesh.circles.is_empty() {
        moments_of(mesh)
    } else {
        let inner = mesh.circles[1].radius;
        (
            Frame {
                origin: Point::default(),
                scale: 1.0,
            },
            annulus_moments(inner),
        )
    };
    let tables = Tables::new(order);
    let result = solve_level(
        mesh,
        &frame,
        &m,
        &[UNIT],
        &tables,
        true,
        &mut Timings::default(),
    )
    .unwrap();
    let enclosures = Enclosures::new(result.total);
    let properties =
        enclosures.properties(&m, poisson / (1.0 + poisson), result.eigenvalue.unwrap());
    (enclosures, properties, result)
}

fn inside(name: &str, figure: Figure, exact: f64) {
    assert!(
        figure.contains(exact),
        "{name}: {exact} is not in [{}, {}]",
        figure.low,
        figure.high
    );
}

/// Rectangle 2 × 1, ν = 1/4: J and C_w by Saint-Venant's series, shear coefficients by Renton's
/// (J. D. Renton, Int. J. Solids Struct. 27, 1991), both summed to 15 digits outside the project.
#[test]
fn rectangle_is_enclosed_at_every_order() {
    let mesh = grid(8, 4, 2.0, 1.0, |_, _| true);
    for order in 1..=6 {
        let (_, p, _) = solved(&mesh, order, 0.25);
        inside("J", p.torsion, 0.457_363_354_239_141_53);
        inside("C_w", p.warping, 0.020_322_671_768_585_059);
        inside("A_sx", p.shear_area[0], 2.0 * 0.833_039_158_932);
        inside("A_sy", p.shear_area[1], 2.0 * 0.796_066_271_097);
        inside("x_s", p.centre[0], 0.0);
        inside("y_s", p.centre[1], 0.0);
    }
}

/// Annulus with radii 1 and 1/2: `J = π (1 − 1/16) / 2`, no warping, and the shear coefficient at
/// ν = 0.3 from the polar solution (A. E. H. Love, Mathematical Theory of Elasticity; 12 digits).
#[test]
fn annulus_is_enclosed_to_the_last_digits() {
    let exact = 0.5 * std::f64::consts::PI * (1.0 - 0.0625);
    for order in 1..=6 {
        let mesh = annulus(0.5, 12, 2);
        let (_, p, _) = solved(&mesh, order, 0.3);
        inside("J", p.torsion, exact);
        inside("C_w", p.warping, 0.0);
        let area = 0.75 * std::f64::consts::PI;
        inside("A_sx", p.shear_area[0], 0.587_131_739_855 * area);
        if order >= 5 {
            assert!(p.torsion.half_width() < 1e-12 * exact);
        }
    }
}

/// A frame without symmetry about y: the bounds of each order hold the values of the next.
#[test]
fn unsymmetric_hole_is_enclosed() {
    let mesh = grid(8, 8, 1.0, 1.0, |i, j| {
        !(3..6).contains(&i) || !(2..6).contains(&j)
    });
    let fine = grid(32, 32, 1.0, 1.0, |i, j| {
        !(12..24).contains(&i) || !(8..24).contains(&j)
    });
    let (_, best, _) = solved(&fine, 4, 0.3);
    for order in 1..=5 {
        let (_, p, _) = solved(&mesh, order, 0.3);
        for (figure, reference) in [
            (p.torsion, best.torsion),
            (p.warping, best.warping),
            (p.centre[0], best.centre[0]),
            (p.flexure_centre[0], best.flexure_centre[0]),
            (p.shear_area[0], best.shear_area[0]),
            (p.shear_area[1], best.shear_area[1]),
        ] {
            inside("figure", figure, reference.value);
        }
    }
}

/// The gap falls with the order of the elements where the field is smooth: on the annulus all are.
#[test]
fn gaps_fall_at_the_order_of_the_elements() {
    for order in 1..=4 {
        let coarse = solved(&annulus(0.5, 48, 4), order, 0.3).0.root_gap;
        let fine = solved(&annulus(0.5, 96, 8), order, 0.3).0.root_gap;
        for problem in [crate::problem::FLEXURE_X, crate::problem::POISSON_Y] {
            let rate = (coarse[problem] / fine[problem]).log2();
            assert!(
                rate > order as f64 - 0.2,
                "order {order}, problem {problem}: rate {rate}"
            );
        }
    }
}

/// Prager and Synge: the energies of the two fields differ by the gap, to rounding.
#[test]
fn energies_of_the_pair_differ_by_the_gap() {
    let mesh = grid(8, 8, 1.0, 1.0, |i, j| {
        !(3..6).contains(&i) || !(2..6).contains(&j)
    });
    let (_, _, result) = solved(&mesh, 3, 0.3);
    for (i, &(a, b)) in crate::problem::PAIRS.iter().enumerate() {
        let e = &result.total;
        let scale = e.primal[i].abs().max(1e-3);
        if a == b {
            let difference = (e.primal[i] - e.dual[i]).abs();
            assert!((difference - e.gap[i]).abs() < 1e-11 * scale, "{a} {b}");
        }
    }
    for k in 0..3 {
        let e = &result.total;
        let pair = crate::problem::pair(TORSION, crate::problem::SOURCES[k]);
        let difference = -e.dual_torque[k] - e.warping_moment[k];
        assert!((difference - e.gap[pair]).abs() < 1e-12, "{k}");
    }
}
