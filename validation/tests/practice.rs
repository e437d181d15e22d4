//! Facts of the trade: common practice, no source.

mod common;

use common::{channel, eye, figure, shear_centre, solve_loops, solve_polygon};
use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::{Point, Vector};
use sectile_solver::quantity::Quantity;
use sectile_solver::sample::{Lattice, UnitForce, both_fields, positions};
use sectile_solver::solution::Solution;
use sectile_validation::cases;
use sectile_validation::outline::{piece, polygon};
use sectile_validation::probe::Sampled;
use sectile_validation::solve::{settings, solve_pieces};

const FORCES: [UnitForce; 3] = [UnitForce::Torque, UnitForce::ShearX, UnitForce::ShearY];

/// Indices (triangle, lattice point, outward normal) of the lattice points on free edges.
fn edge_points(solution: &Solution, lattice: &Lattice, at: &[Point]) -> Vec<(usize, Vector)> {
    let mesh: &Mesh = &solution.mesh;
    let n = lattice.points.len();
    let mut out = Vec::new();
    for (t, sides) in mesh.triangle_sides.iter().enumerate() {
        for (k, &s) in sides.iter().enumerate() {
            let side = &mesh.sides[s as usize];
            if side.right != NONE {
                continue;
            }
            let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
            let chord = b - a;
            for (i, l) in lattice.points.iter().enumerate() {
                if l[k] != 0.0 {
                    continue;
                }
                let normal = if side.circle == NONE {
                    -chord.perpendicular()
                } else {
                    at[t * n + i] - mesh.circles[side.circle as usize].centre
                };
                out.push((t * n + i, normal * (1.0 / normal.length())));
            }
        }
    }
    out
}

/// Largest normal component of the equilibrated field and root mean square of that of the primal
/// field on the free edges, over the largest stress.
fn normal_components(solution: &Solution, force: UnitForce) -> (f64, f64) {
    let lattice = Lattice::new(4);
    let at = positions(solution, &lattice);
    let edge = edge_points(solution, &lattice, &at);
    assert!(edge.len() > 20);
    let fields = both_fields(solution, force, &lattice);
    let largest = fields.iter().map(|f| f[1].length()).fold(0.0, f64::max);
    let mut balanced = 0.0_f64;
    let mut square = 0.0;
    for &(i, normal) in &edge {
        balanced = balanced.max(fields[i][1].dot(normal).abs() / largest);
        square += (fields[i][0].dot(normal) / largest).powi(2);
    }
    (balanced, (square / edge.len() as f64).sqrt())
}

#[test]
fn no_shear_stress_acts_normal_to_a_free_edge() {
    let cases = cases::all().expect("case files");
    // Sections without sharp re-entrant corners, where the primal field has no limit.
    for id in [
        "ipe-300",
        "upn-200",
        "semicircle",
        "annular-sector-thick-90",
        "eccentric-bore-far",
    ] {
        let case = cases.iter().find(|c| c.id == id).expect("case");
        let [coarse, fine] = [1e-2, 1e-7].map(|t| solve_loops(&case.outline, &case.holes, 0.3, t));
        for force in FORCES {
            let (balanced, primal) = normal_components(&fine, force);
            let (_, before) = normal_components(&coarse, force);
            // The equilibrated field has none at all; the other loses it as the mesh is refined.
            assert!(balanced < 1e-9, "{id} {force:?}: {balanced:e}");
            assert!(
                primal < 3e-3 && primal < 0.5 * before,
                "{id} {force:?}: {primal:e} after {before:e}"
            );
        }
    }
}

/// A force along the web of a thin channel: τ in the flange grows in proportion to the distance from
/// the tip, τ in the web follows a parabola, and the flanges' forces times their distance over the
/// force are the distance of the shear centre from the web.
#[test]
fn thin_channel_carries_linear_and_parabolic_shear() {
    let (h, b, tf, tw) = (200.0, 80.0, 2.0, 1.2);
    let solution = solve_polygon(&channel(h, b, tf, tw), 1e-5);
    let field = Sampled::new(&solution, UnitForce::ShearY, 4);
    let inertia = figure(&solution, Quantity::SecondMomentX).value;
    let close = |found: f64, expected: f64, what: &str| {
        assert!(
            (found - expected).abs() < 0.01 * expected.abs(),
            "{what}: {found:e} for {expected:e}"
        );
    };
    for part in [0.125, 0.25, 0.5, 0.75, 0.9] {
        let s = part * b;
        let tau = field.at(Point::new(b - s, 0.5 * h));
        // dσ/dz > 0 above the axis drives the flow in the upper flange towards its tip … the web.
        close(tau.length(), s * 0.5 * h / inertia, "flange");
        assert!(tau.y.abs() < 0.01 * tau.x.abs());
    }
    for part in [-0.4, -0.2, 0.0, 0.2, 0.4] {
        let y = part * h;
        let tau = field.at(Point::new(0.0, y));
        let moment = tf * b * 0.5 * h + 0.5 * tw * (0.25 * h * h - y * y);
        close(tau.y, moment / (inertia * tw), "web");
        assert!(tau.x.abs() < 0.01 * tau.y);
    }
    let flange = field.integral(|p, tau| {
        if p.y > 0.5 * (h - tf) - 1e-9 && p.x > -1e-9 {
            tau.x
        } else {
            0.0
        }
    });
    let e = -figure(&solution, Quantity::ShearCentreX).value;
    close(flange.abs() * h, e, "V_flange d / V");
}

#[test]
fn shear_centre_lies_on_an_axis_of_symmetry() {
    let tee = [
        [-5.0, 0.0],
        [5.0, 0.0],
        [5.0, 140.0],
        [60.0, 140.0],
        [60.0, 152.0],
        [-60.0, 152.0],
        [-60.0, 140.0],
        [-5.0, 140.0],
    ];
    for degrees in [0.0_f64, 17.0, 90.0, 133.0] {
        let (s, c) = degrees.to_radians().sin_cos();
        let turned: Vec<[f64; 2]> = tee
            .iter()
            .map(|[x, y]| [c * x - s * y, s * x + c * y])
            .collect();
        let solution = solve_polygon(&turned, 1e-4);
        for [qx, qy] in [
            [Quantity::ShearCentreX, Quantity::ShearCentreY],
            [Quantity::FlexureCentreX, Quantity::FlexureCentreY],
        ] {
            let (x, y) = (figure(&solution, qx), figure(&solution, qy));
            let off_axis = c * x.value + s * y.value;
            let error = c.abs() * x.half_width() + s.abs() * y.half_width();
            assert!(off_axis.abs() <= error + 1e-11, "{degrees}°: {off_axis:e}");
            assert!(error < 1e-4 * 200.0);
        }
        if degrees == 0.0 {
            // What vanishes by symmetry is given as zero, without noise.
            assert_eq!(figure(&solution, Quantity::ShearCentreX).value, 0.0);
        }
    }
}

/// Thin legs that meet in one point carry their forces through it.
#[test]
fn legs_that_meet_in_a_point_put_the_shear_centre_there() {
    let l = 100.0;
    let angle = |t: f64| {
        let (o, i) = (-0.5 * t, 0.5 * t);
        vec![[o, o], [l, o], [l, i], [i, i], [i, l], [o, l]]
    };
    let unequal = |t: f64| {
        let (o, i) = (-0.5 * t, 0.5 * t);
        vec![[o, o], [0.6 * l, o], [0.6 * l, i], [i, i], [i, l], [o, l]]
    };
    let tee = |t: f64| {
        let i = 0.5 * t;
        vec![
            [-i, -l],
            [i, -l],
            [i, -i],
            [0.5 * l, -i],
            [0.5 * l, i],
            [-0.5 * l, i],
            [-0.5 * l, -i],
            [-i, -i],
        ]
    };
    let cross = |t: f64| {
        let i = 0.5 * t;
        vec![
            [-i, -l],
            [i, -l],
            [i, -i],
            [0.7 * l, -i],
            [0.7 * l, i],
            [i, i],
            [i, 0.4 * l],
            [-i, 0.4 * l],
            [-i, i],
            [-0.5 * l, i],
            [-0.5 * l, -i],
            [-i, -i],
        ]
    };
    type Shape<'a> = &'a dyn Fn(f64) -> Vec<[f64; 2]>;
    let shapes: [(&str, Shape); 4] = [
        ("angle", &angle),
        ("unequal angle", &unequal),
        ("tee", &tee),
        ("cross", &cross),
    ];
    for (name, shape) in shapes {
        let mut previous = f64::INFINITY;
        for t in [8.0, 4.0, 2.0] {
            let solution = solve_polygon(&shape(t), 1e-5);
            let distance = shear_centre(&solution).distance(Point::default());
            assert!(distance < 0.15 * t, "{name}, t = {t}: {distance}");
            // It shrinks at least with t (the last digits are those of the tolerance).
            assert!(distance < 0.6 * previous + 1e-5 * l, "{name}: {distance}");
            previous = distance;
        }
    }
}

#[test]
fn closing_plates_raise_the_torsion_constant_by_orders_of_magnitude() {
    let outline = |corners: &[[f64; 2]]| piece(&polygon(corners), &[]).expect("geometry").0;
    let body = outline(&eye(190.0, [100.0, 10.0], [100.0, 10.0], 6.0));
    let plate = |x: f64| outline(&[[x, -100.0], [x + 6.0, -100.0], [x + 6.0, 100.0], [x, 100.0]]);
    let j = |pieces: &[_]| {
        let solution = solve_pieces(pieces, 0.3, &settings(1e-4)).expect("solved");
        figure(&solution, Quantity::TorsionConstant)
    };
    let open = j(std::slice::from_ref(&body));
    let half = j(&[body.clone(), plate(50.0)]);
    let closed = j(&[body, plate(50.0), plate(-56.0)]);
    assert!(half.low > 50.0 * open.high, "{half:?} {open:?}");
    assert!(closed.low > 200.0 * open.high, "{closed:?} {open:?}");
    assert!(closed.low > half.high);
}
