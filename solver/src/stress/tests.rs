#![allow(clippy::unwrap_used)]

use sectile_mesh::Point;
use sectile_mesh::domain::{Domain, build};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::profile::{Dimensions, Form, profile};
use sectile_mesh::outline::shape::{circle, polygon, tube};

use super::cut::cut;
use super::extreme::{DEFAULT_EXCLUSION, Quotable, extremes, load_factor_to_yield};
use super::field::{UnitFields, UnitStress};
use super::forces::SectionForces;
use super::locate::locate;
use super::measure::Measure;
use super::probe::at_point;
use crate::evaluate::{Evaluator, PointTable};
use crate::material::Material;
use crate::quantity::Quantity;
use crate::solution::{Settings, Solution, solve};

fn piece(outline: Outline) -> Vec<Piece> {
    vec![Piece {
        name: "body".into(),
        outline,
        material: 0,
    }]
}

fn corners(points: &[[f64; 2]]) -> Outline {
    let points: Vec<Point> = points.iter().map(|p| Point::new(p[0], p[1])).collect();
    Outline {
        outer: polygon(&points),
        holes: Vec::new(),
    }
}

fn formed(form: Form, d: Dimensions) -> Outline {
    profile(form, &d).unwrap()
}

fn solved(outline: Outline, poisson: f64, tolerance: f64) -> (Domain, Solution) {
    let domain = build(&piece(outline)).unwrap();
    let material = Material {
        name: "steel".into(),
        young: 210_000.0,
        poisson,
        shear: 80_769.0,
        yield_stress: Some(355.0),
        density: None,
    };
    let settings = Settings {
        tolerance,
        order: None,
        max_unknowns: 500_000,
        reference: None,
    };
    let solution = solve(&domain, &[material], 1e-3, &settings, &mut |_| {}).unwrap();
    (domain, solution)
}

/// Ten sections, with holes and without symmetry among them.
fn ten() -> Vec<(&'static str, Outline)> {
    let with_hole = |mut outline: Outline, x: f64, y: f64, d: f64| {
        outline.holes.push(circle(Point::new(x, y), d));
        outline
    };
    let steel = Dimensions {
        h: 200.0,
        b: 90.0,
        tw: 7.0,
        tf: 11.0,
        r: 8.0,
        ..Dimensions::default()
    };
    vec![
        (
            "rectangle",
            corners(&[[0., 0.], [40., 0.], [40., 90.], [0., 90.]]),
        ),
        ("triangle", corners(&[[0., 0.], [70., 10.], [20., 60.]])),
        (
            "unsymmetric tube",
            with_hole(
                corners(&[[0., 0.], [100., 0.], [90., 60.], [5., 50.]]),
                40.0,
                28.0,
                30.0,
            ),
        ),
        (
            "disc",
            Outline {
                outer: circle(Point::new(3.0, 4.0), 50.0),
                holes: Vec::new(),
            },
        ),
        (
            "eccentric tube",
            with_hole(
                Outline {
                    outer: circle(Point::default(), 80.0),
                    holes: Vec::new(),
                },
                8.0,
                3.0,
                45.0,
            ),
        ),
        ("tube", tube(Point::default(), 100.0, 5.0)),
        ("I", formed(Form::I, steel)),
        (
            "unequal I",
            formed(
                Form::I,
                Dimensions {
                    b2: Some(150.0),
                    tf2: Some(14.0),
                    ..steel
                },
            ),
        ),
        ("channel", formed(Form::Channel, steel)),
        (
            "unequal angle",
            formed(
                Form::Angle,
                Dimensions {
                    h: 120.0,
                    b: 80.0,
                    tw: 10.0,
                    r: 11.0,
                    ..Dimensions::default()
                },
            ),
        ),
    ]
}

fn unit_forces() -> [SectionForces; 8] {
    SectionForces {
        n: 1.0,
        vx: 1.0,
        vy: 1.0,
        mx: 1.0,
        my: 1.0,
        t: 1.0,
        b: 1.0,
        tw: 1.0,
    }
    .parts()
}

/// `[N, Vx, Vy, Mx, My, T, B, Tw]` of a stress field, by the solver's quadrature.
fn resultants(solution: &Solution, fields: &UnitFields, forces: &SectionForces) -> [f64; 8] {
    let evaluator = Evaluator::new(solution).unwrap();
    let solved = evaluator.solved;
    let tables = solved.tables;
    let rules = [&tables.straight.table.rule, &tables.curved.table.rule];
    let points = rules.map(|r| PointTable::new(tables, r.points.clone()));
    let length = solved.frame.scale;
    let centre = solved.shear.centre.map(|c| c.value * length);
    let mut out = [0.0; 8];
    for t in 0..evaluator.triangles() {
        let ready = evaluator.ready(t);
        let k = usize::from(!evaluator.map(t).is_straight());
        for (p, w) in rules[k].weights.iter().enumerate() {
            let at = evaluator.at(&ready, &points[k], p);
            let s = fields.superposition.unit_stress(solved, &at).under(forces);
            let w = w * at.det * length * length;
            let (x, y) = (at.x * length, at.y * length);
            let omega = at.omega * length * length;
            let gradient = at.omega_gradient.map(|g| g * length);
            let warping = -(s.tau.x * gradient[0] + s.tau.y * gradient[1]);
            let torque = (x - centre[0]) * s.tau.y - (y - centre[1]) * s.tau.x;
            for (o, v) in out.iter_mut().zip([
                s.sigma,
                s.tau.x,
                s.tau.y,
                s.sigma * y,
                s.sigma * x,
                torque - warping,
                s.sigma * omega,
                warping,
            ]) {
                *o += w * v;
            }
        }
    }
    out
}

/// Powers of the section's size in N, Vx, Vy, Mx, My, T, B, Tw.
const POWERS: [i32; 8] = [0, 0, 0, 1, 1, 1, 2, 1];

#[test]
fn each_unit_action_integrates_back_to_itself_and_to_none_of_the_others() {
    for (name, outline) in ten() {
        let (_, solution) = solved(outline, 0.3, 1e-4);
        let fields = UnitFields::new(&solution, 2).unwrap();
        let length = solution.solved.as_ref().unwrap().frame.scale;
        for (i, forces) in unit_forces().iter().enumerate() {
            // A section that does not warp carries no bimoment.
            let warps = solution.get(Quantity::WarpingConstant).unwrap().low > 0.0;
            if !warps && (i == 6 || i == 7) {
                continue;
            }
            let got = resultants(&solution, &fields, forces);
            for (j, value) in got.iter().enumerate() {
                let size = length.powi(POWERS[i] - POWERS[j]);
                let expected = f64::from(u8::from(i == j));
                let relative = (value * size - expected).abs();
                assert!(relative < 1e-8, "{name}: unit {i} gives {value} as {j}");
            }
        }
    }
}

/// The equilibrated field has no component normal to a free edge, to 1e-10 of its largest value.
#[test]
fn no_shear_crosses_a_free_edge() {
    for (name, outline) in ten() {
        let (_, solution) = solved(outline, 0.3, 1e-3);
        let fields = UnitFields::new(&solution, 2).unwrap();
        let evaluator = Evaluator::new(&solution).unwrap();
        let tables = evaluator.solved.tables;
        let steps = [0.0, 0.13, 0.5, 0.77, 1.0];
        let corner = [[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]];
        for forces in unit_forces().iter().filter(|f| f.vx + f.vy + f.t != 0.0) {
            let (mut normal, mut largest) = (0.0_f64, 0.0_f64);
            for (t, sides) in solution.mesh.triangle_sides.iter().enumerate() {
                for (k, &s) in sides.iter().enumerate() {
                    if solution.mesh.sides[s as usize].right != sectile_mesh::mesh::NONE {
                        continue;
                    }
                    let (a, b) = (corner[(k + 1) % 3], corner[(k + 2) % 3]);
                    let points: Vec<[f64; 2]> = steps
                        .iter()
                        .map(|u| [a[0] + u * (b[0] - a[0]), a[1] + u * (b[1] - a[1])])
                        .collect();
                    let table = PointTable::new(tables, points.clone());
                    let ready = evaluator.ready(t);
                    for (p, point) in points.iter().enumerate() {
                        let tau = fields
                            .superposition
                            .equilibrated(&evaluator.at(&ready, &table, p), forces);
                        let j = evaluator.map(t).at(point[0], point[1]).jacobian;
                        let (dx, dy) = (b[0] - a[0], b[1] - a[1]);
                        let tangent = [j[0] * dx + j[1] * dy, j[2] * dx + j[3] * dy];
                        let size = tangent[0].hypot(tangent[1]);
                        normal =
                            normal.max(((tau.x * tangent[1] - tau.y * tangent[0]) / size).abs());
                        largest = largest.max(tau.length());
                    }
                }
            }
            assert!(normal < 1e-10 * largest, "{name}: {normal} of {largest}");
        }
    }
}

/// Circle of radius a under V along y: Saint-Venant's solution, Timoshenko & Goodier, Theory of
/// Elasticity, flexure of a circular bar: on the horizontal diameter
/// `τ = V (3+2ν)/(8(1+ν)I) (a² − y² − (1−2ν)/(3+2ν) x²)`. Formula from memory, checked against the
/// boundary conditions.
#[test]
fn circle_under_shear_meets_the_exact_field() {
    let a: f64 = 25.0;
    for nu in [0.0, 0.3, 0.5 - 1e-9] {
        let disc = Outline {
            outer: circle(Point::default(), 2.0 * a),
            holes: Vec::new(),
        };
        let (_, solution) = solved(disc, nu, 1e-9);
        let fields = UnitFields::new(&solution, 2).unwrap();
        let force = SectionForces {
            vy: 1.0,
            ..SectionForces::default()
        };
        let i = 0.25 * std::f64::consts::PI * a.powi(4);
        for (x, y) in [
            (0.0, 0.0),
            (10.0, 0.0),
            (0.0, 12.0),
            (9.0, -7.0),
            (25.0, 0.0),
        ] {
            let exact = (3.0 + 2.0 * nu) / (8.0 * (1.0 + nu) * i)
                * (a * a - y * y - (1.0 - 2.0 * nu) / (3.0 + 2.0 * nu) * x * x);
            let across = -(1.0 + 2.0 * nu) / (4.0 * (1.0 + nu) * i) * x * y;
            let got = at_point(&solution, &fields, &force, Point::new(x, y))[0]
                .stress
                .tau;
            let scale = 1.0 / (a * a);
            assert!(
                (got.y - exact).abs() < 1e-5 * scale,
                "{nu} {x} {y}: {} {exact}",
                got.y
            );
            assert!(
                (got.x - across).abs() < 1e-5 * scale,
                "{nu} {x} {y}: {} {across}",
                got.x
            );
        }
    }
}

/// Rectangle of depth 2a and width 2b under V along the depth: at the centre and at the ends of the
/// neutral axis. The problem and its table for ν = 1/4 are those of S. P. Timoshenko, J. N. Goodier,
/// Theory of Elasticity, ch. 11 (0.983, 0.940, 0.856, 0.805 and 1.033, 1.126, 1.396, 1.988 times
/// 1.5 V/A for a/b = 2, 1, 1/2, 1/4; from memory); the single series that gives other ν is derived
/// here: the parabola `V (a² − y²)/(2I)` plus curl φ with `Δφ = ν/(1+ν) V x/I`, φ zero on the edge,
/// x in sines of nπx/b.
#[test]
fn rectangle_under_shear_meets_timoshenkos_table_at_every_poisson_ratio() {
    let table = [
        (2.0, 0.983, 1.033),
        (1.0, 0.940, 1.126),
        (0.5, 0.856, 1.396),
        (0.25, 0.805, 1.988),
    ];
    for (a, printed_centre, printed_edge) in table {
        for nu in [0.0, 0.25, 0.4] {
            let (mut centre, mut edge) = (1.0, 1.0);
            for n in 1..4000_i32 {
                let k = f64::from(n) * std::f64::consts::PI;
                // Over 1.5 V/A = V a²/(2I): 2 ν/(1+ν) · 2/(n²π²) · (1 − sech(nπa)) / a², b = 1.
                let term = nu / (1.0 + nu) * 4.0 / (k * k * a * a) * (1.0 - 1.0 / (k * a).cosh());
                centre -= if n % 2 == 1 { term } else { -term };
                edge += term;
            }
            if nu == 0.25 {
                assert!((centre - printed_centre).abs() < 6e-4, "{a}: {centre}");
                assert!((edge - printed_edge).abs() < 6e-4, "{a}: {edge}");
            }
            let outline = corners(&[[-1., -a], [1., -a], [1., a], [-1., a]]);
            let (_, solution) = solved(outline, nu, 1e-8);
            let fields = UnitFields::new(&solution, 2).unwrap();
            let force = SectionForces {
                vy: 4.0 * a / 1.5,
                ..SectionForces::default()
            };
            for (x, expected) in [(0.0, centre), (1.0, edge)] {
                let found = at_point(&solution, &fields, &force, Point::new(x, 0.0));
                let tau = found[0].stress.tau.y;
                // The edge's series falls like 1/n²: 4000 terms leave 1e-4 of it.
                assert!(
                    (tau - expected).abs() < 1e-3 * expected,
                    "a/b = {a}, ν = {nu}, x = {x}: {tau} for {expected}"
                );
            }
        }
    }
}

/// Rectangle under T: the largest stress is in the middle of the long side, from Saint-Venant's series
/// (2 × 1: 0.930060269797 G θ′ with J = 0.457363354239), and zero at the corners.
#[test]
fn rectangle_under_torque_peaks_at_its_long_side_and_rests_at_its_corners() {
    let (_, solution) = solved(
        corners(&[[0., 0.], [2., 0.], [2., 1.], [0., 1.]]),
        0.3,
        1e-9,
    );
    let fields = UnitFields::new(&solution, 10).unwrap();
    let quotable = Quotable::new(&solution, &fields, DEFAULT_EXCLUSION);
    let torque = SectionForces {
        t: 1.0,
        ..SectionForces::default()
    };
    let found = extremes(&solution, &fields, &quotable, &torque, &[Some(10.0)]);
    let tau = found.get(Measure::Tau).unwrap();
    let exact = 0.930_060_269_797 / 0.457_363_354_239;
    assert!(
        (tau.value - exact).abs() < 1e-4 * exact,
        "{} {exact}",
        tau.value
    );
    assert!((tau.at.x - 1.0).abs() < 0.02);
    assert!(tau.at.y < 1e-6 || tau.at.y > 1.0 - 1e-6);
    // The equilibrated field vanishes there, bound to two edges; the mean keeps half of the primal's error.
    let corner = at_point(&solution, &fields, &torque, Point::new(0.0, 0.0));
    assert!(corner[0].stress.shear() < 2e-3 * exact, "{:?}", corner);
    // Von Mises: √3 τ.
    let factor = load_factor_to_yield(&found).unwrap();
    assert!((factor - 10.0 / (3.0_f64.sqrt() * exact)).abs() < 1e-3 * factor);
}

/// Circle with a circular groove in torsion: the bottom of the groove has 1.8 G θ′ exactly, at radius
/// ratio 0.2 (C. Weber 1921; Timoshenko & Goodier, Theory of Elasticity, torsion), J = 1.46523065788832.
#[test]
fn grooved_shaft_meets_its_exact_peak() {
    use sectile_mesh::outline::corner::{Corner, ring_from_corners};
    let half = 168.521_659_045_466_43_f64.to_radians();
    let tip = |s: f64| Point::new(1.0 + half.cos(), s * half.sin());
    let corner = |at: Point, via: Point| Corner {
        at,
        round: None,
        via: Some(via),
    };
    let ring = ring_from_corners(&[
        corner(tip(1.0), Point::new(2.0, 0.0)),
        corner(tip(-1.0), Point::new(0.2, 0.0)),
    ])
    .unwrap();
    let (_, solution) = solved(
        Outline {
            outer: ring,
            holes: Vec::new(),
        },
        0.3,
        1e-6,
    );
    assert!(
        solution
            .get(Quantity::TorsionConstant)
            .unwrap()
            .contains(1.465_230_657_888_317_9)
    );
    let fields = UnitFields::new(&solution, 10).unwrap();
    let quotable = Quotable::new(&solution, &fields, DEFAULT_EXCLUSION);
    let torque = SectionForces {
        t: 1.465_230_657_888_317_9,
        ..SectionForces::default()
    };
    let found = extremes(&solution, &fields, &quotable, &torque, &[None]);
    let tau = found.get(Measure::Tau).unwrap();
    assert!((tau.value - 1.8).abs() < 1e-3, "{}", tau.value);
    assert!(tau.at.distance(Point::new(0.2, 0.0)) < 1e-2);
    assert!(found.get(Measure::Utilisation).is_none());
}

/// Beside sharp corners the largest stress lies on the rim of what is left out: no point of it, looked at
/// closely, has more than is quoted.
#[test]
fn no_point_of_the_rim_has_more_than_is_quoted() {
    let channel = corners(&[
        [0., 0.],
        [80., 0.],
        [80., 12.],
        [8., 12.],
        [8., 188.],
        [60., 188.],
        [60., 200.],
        [0., 200.],
    ]);
    let (_, solution) = solved(channel, 0.3, 1e-3);
    let fields = UnitFields::new(&solution, 8).unwrap();
    let evaluator = Evaluator::new(&solution).unwrap();
    for share in [0.1, 0.25] {
        let quotable = Quotable::new(&solution, &fields, share);
        // Many places on each circle, those on sides of triangles once for each.
        let rim: Vec<UnitStress> = solution
            .corners
            .iter()
            .flat_map(|corner| {
                (0..3000).map(move |k| {
                    let angle = std::f64::consts::TAU * f64::from(k) / 3000.0;
                    corner.at + sectile_mesh::Vector::at_angle(angle) * (share * corner.wall)
                })
            })
            .flat_map(|p| locate(&evaluator, p))
            .map(|at| {
                let ready = evaluator.ready(at.triangle);
                let table = PointTable::single(evaluator.solved.tables, at.reference, &ready);
                let point = evaluator.at(&ready, &table, 0);
                fields.superposition.unit_stress(evaluator.solved, &point)
            })
            .collect();
        assert!(rim.len() > 3000);
        let mut on_rim = 0;
        for (t, vx, vy, mx) in [
            (1.0, 0.0, 0.0, 0.0),
            (0.0, 1.0, 0.0, 0.0),
            (0.0, 0.0, 1.0, 0.0),
            (30.0, -2.0, 1.0, 40.0),
            (-8.0, 0.5, 1.0, -90.0),
        ] {
            let forces = SectionForces {
                t,
                vx,
                vy,
                mx,
                ..SectionForces::default()
            };
            let found = extremes(&solution, &fields, &quotable, &forces, &[None]);
            for measure in [Measure::Tau, Measure::VonMises, Measure::Principal1] {
                let quoted = found.get(measure).unwrap();
                let most = rim
                    .iter()
                    .filter_map(|unit| measure.of(&unit.under(&forces), None))
                    .fold(0.0, f64::max);
                assert!(
                    most <= quoted.value * (1.0 + 1e-4),
                    "{share} {measure:?} {forces:?}: {most} on the rim, {} quoted",
                    quoted.value
                );
                on_rim += usize::from(most > quoted.value * (1.0 - 1e-4));
            }
        }
        assert!(on_rim > 4, "{on_rim}: the rim matters");
    }
}

/// A cut across the web of a channel: the flow of V is `V Q / I` (common practice, no source), exactly so for the
/// equilibrated field on a cut that severs the section; σ sums to the moment's force.
#[test]
fn a_cut_that_severs_the_section_carries_vq_over_i() {
    let channel = corners(&[
        [0., 0.],
        [80., 0.],
        [80., 12.],
        [8., 12.],
        [8., 188.],
        [80., 188.],
        [80., 200.],
        [0., 200.],
    ]);
    let (_, solution) = solved(channel, 0.3, 1e-3);
    let fields = UnitFields::new(&solution, 4).unwrap();
    let i = solution.get(Quantity::SecondMomentX).unwrap().value;
    let force = SectionForces {
        vy: 1.0,
        ..SectionForces::default()
    };
    // Through the web at y = 150, from left to right: what flows to the right of it flows down.
    let through = cut(
        &solution,
        &fields,
        &force,
        Point::new(-5.0, 150.0),
        Point::new(20.0, 150.0),
    )
    .unwrap();
    let q = 80.0 * 12.0 * 94.0 + 8.0 * 38.0 * (88.0 - 19.0);
    assert!((through.material - 8.0).abs() < 1e-9);
    assert!(
        (-through.shear_flow - q / i).abs() < 1e-10 * q / i,
        "{} {}",
        through.shear_flow,
        q / i
    );
    assert!(through.runs.len() == 1 && through.normal_force.abs() < 1e-12);
    let bending = SectionForces {
        mx: 1.0,
        ..SectionForces::default()
    };
    let bent = cut(
        &solution,
        &fields,
        &bending,
        Point::new(-5.0, 150.0),
        Point::new(20.0, 150.0),
    )
    .unwrap();
    assert!((bent.normal_force - 8.0 * 50.0 / i).abs() < 1e-12);
    assert!(
        cut(
            &solution,
            &fields,
            &force,
            Point::new(20.0, 100.0),
            Point::new(70.0, 100.0)
        )
        .is_none()
    );
}

#[test]
fn energy_error_halves_the_root_of_the_gap() {
    let (_, solution) = solved(
        corners(&[
            [0., 0.],
            [60., 0.],
            [60., 8.],
            [8., 8.],
            [8., 60.],
            [0., 60.],
        ]),
        0.3,
        1e-3,
    );
    let fields = UnitFields::new(&solution, 2).unwrap();
    let torque = SectionForces {
        t: 5.0,
        ..SectionForces::default()
    };
    let j = solution.get(Quantity::TorsionConstant).unwrap();
    // half-width of J = gap/2, so the error of the mean field is √(half/2)/√J of its energy's root.
    let expected = (0.5 * j.half_width() / j.value).sqrt();
    let got = fields.energy_error(&torque);
    assert!((got - expected).abs() < 2e-2 * expected, "{got} {expected}");
    assert_eq!(fields.energy_error(&SectionForces::default()), 0.0);
}
