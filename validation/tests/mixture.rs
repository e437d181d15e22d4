//! Sections of several materials against closed forms and series.
#![allow(clippy::unwrap_used)]

use sectile_mesh::Point;
use sectile_mesh::domain::{Domain, build};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::shape::{bar, circle};
use sectile_solver::figure::Figure;
use sectile_solver::material::Material;
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::{Settings, Solution, solve};
use sectile_solver::stress::cut::cut;
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::probe::at_point;

fn material(young: f64, shear: f64, poisson: f64) -> Material {
    Material {
        name: format!("E {young}"),
        young,
        poisson,
        shear,
        yield_stress: None,
        density: None,
    }
}

/// A full disc.
fn disc(at: Point, d: f64) -> Outline {
    Outline {
        outer: circle(at, d),
        holes: Vec::new(),
    }
}

/// A rectangle between two corners.
fn block(material: usize, from: [f64; 2], to: [f64; 2]) -> Piece {
    let middle = Point::new(0.5 * (from[0] + to[0]), 0.5 * (from[1] + to[1]));
    Piece {
        name: format!("block {material}"),
        outline: bar(middle, to[0] - from[0], to[1] - from[1]),
        material,
    }
}

fn solved(
    pieces: &[Piece],
    materials: &[Material],
    tolerance: f64,
    reference: Option<usize>,
) -> (Domain, Solution) {
    let domain = build(pieces).unwrap();
    let settings = Settings {
        tolerance,
        order: None,
        max_unknowns: 400_000,
        reference,
    };
    let solution = solve(&domain, materials, 1.0, &settings, &mut |_| ()).unwrap();
    assert!(solution.reached, "{:?}", solution.levels.last());
    (domain, solution)
}

fn get(solution: &Solution, quantity: Quantity) -> Figure {
    solution.get(quantity).unwrap()
}

fn holds(solution: &Solution, quantity: Quantity, exact: f64) {
    let figure = get(solution, quantity);
    let slack = 1e-13 * exact.abs();
    assert!(
        figure.low - slack <= exact && exact <= figure.high + slack,
        "{}: {exact} is outside of {figure:?}",
        quantity.key()
    );
}

/// N. I. Muskhelishvili, Some Basic Problems of the Mathematical Theory of Elasticity, part on the
/// torsion of compound bars (from memory): two rectangles side by side. The single series in
/// sin(nπy/h), derived afresh: in each part φ = G y(h − y) + Σ (A cosh kx + B sinh kx) sin(ky), k = nπ/h,
/// zero on the outer edges, φ and (1/G)∂φ/∂x alike at the bond.
fn two_rectangles(w1: f64, w2: f64, h: f64, g1: f64, g2: f64) -> f64 {
    let mut torque = 2.0 * (g1 * w1 + g2 * w2) * h.powi(3) / 6.0;
    for n in (1..2000).step_by(2) {
        let k = f64::from(n) * std::f64::consts::PI / h;
        // y(h − y) = Σ c sin(ky).
        let c = 8.0 * h * h / (f64::from(n) * std::f64::consts::PI).powi(3);
        // By part: tanh kw, 1/cosh kw, p = G c.
        let part = |g: f64, w: f64| ((k * w).tanh(), 1.0 / (k * w).cosh(), g * c);
        let ((t1, s1, p1), (t2, s2, p2)) = (part(g1, w1), part(g2, w2));
        // With the value f at the bond and the distance s from it
        // φ(s) = p + (f − p) sinh k(w−s)/sinh kw − p sinh ks/sinh kw, so φ'(0)/k = (p − f)/tanh kw −
        // p/sinh kw; the slopes of both parts away from the bond, each over its G, add up to nothing.
        let a = 1.0 / (g1 * t1) + 1.0 / (g2 * t2);
        let b = p1 / g1 * (1.0 - s1) / t1 + p2 / g2 * (1.0 - s2) / t2;
        let f = b / a;
        // ∫ φ over a part, less the polynomial's: (f − 2p)(cosh kw − 1)/(k sinh kw) each, × ∫sin = 2/k.
        let area = |t: f64, s: f64, p: f64| (f - 2.0 * p) * (1.0 - s) / (k * t);
        torque += 2.0 * (2.0 / k) * (area(t1, s1, p1) + area(t2, s2, p2));
    }
    torque
}

#[test]
fn two_bonded_rectangles_meet_muskhelishvilis_series() {
    // With one modulus it is the rectangle 2 × 1: Saint-Venant's series.
    let single = 0.457_363_354_239_141_5;
    assert!((two_rectangles(1.0, 1.0, 1.0, 1.0, 1.0) - single).abs() < 1e-12);
    for (w1, w2, g1, g2) in [
        (1.0, 1.0, 1.0, 3.0),
        (0.5, 1.5, 1.0, 10.0),
        (1.0, 1.0, 1.0, 1e-6),
        (0.2, 3.0, 30.0, 1.0),
    ] {
        let exact = two_rectangles(w1, w2, 1.0, g1, g2);
        let (_, solution) = solved(
            &[
                block(0, [-w1, 0.0], [0.0, 1.0]),
                block(1, [0.0, 0.0], [w2, 1.0]),
            ],
            &[material(2.6 * g1, g1, 0.3), material(2.6 * g2, g2, 0.3)],
            1e-5,
            None,
        );
        holds(&solution, Quantity::TorsionStiffness, exact);
    }
}

#[test]
fn core_in_a_sleeve_is_exact() {
    let pieces = |r: f64| {
        [
            Piece {
                name: "core".into(),
                outline: disc(Point::default(), 2.0 * r),
                material: 0,
            },
            Piece {
                name: "sleeve".into(),
                outline: Outline {
                    outer: circle(Point::default(), 2.0),
                    holes: vec![circle(Point::default(), 2.0 * r)],
                },
                material: 1,
            },
        ]
    };
    let (core, sleeve) = (material(2.6, 1.0, 0.3), material(10.4, 4.0, 0.3));
    let r = 0.5_f64;
    let exact = std::f64::consts::FRAC_PI_2 * (r.powi(4) + 4.0 * (1.0 - r.powi(4)));
    let mut stiffness = Vec::new();
    for reference in [None, Some(1)] {
        let (_, solution) = solved(&pieces(r), &[core.clone(), sleeve.clone()], 1e-6, reference);
        holds(&solution, Quantity::TorsionStiffness, exact);
        holds(&solution, Quantity::WarpingConstant, 0.0);
        stiffness.push(get(&solution, Quantity::TorsionStiffness).value);
        let fields = UnitFields::new(&solution, 4).unwrap();
        let twist = SectionForces {
            t: exact,
            ..SectionForces::default()
        };
        // Both sides of the bond: τ = G r θ′.
        let at_bond = at_point(&solution, &fields, &twist, Point::new(r, 0.0));
        assert_eq!(at_bond.len(), 2);
        for (side, tau) in at_bond.iter().zip([0.5, 2.0]) {
            assert!(
                (side.stress.shear() - tau).abs() < 1e-4 * tau,
                "piece {}: {} against {tau}",
                side.piece,
                side.stress.shear()
            );
        }
        let edge = at_point(&solution, &fields, &twist, Point::new(0.0, -1.0));
        assert!((edge[0].stress.shear() - 4.0).abs() < 4e-4);
    }
    assert!((stiffness[0] / stiffness[1] - 1.0).abs() < 1e-6);
}

/// The transformed section, elementary: timber 100 × 200 on a steel plate 100 × 10, E ratio 20.
#[test]
fn flitch_beam_bends_and_shears_as_the_transformed_section() {
    let (steel, timber) = (
        material(200_000.0, 77_000.0, 0.3),
        material(10_000.0, 700.0, 0.3),
    );
    let (_, solution) = solved(
        &[
            block(0, [-50.0, 0.0], [50.0, 10.0]),
            block(1, [-50.0, 10.0], [50.0, 210.0]),
        ],
        &[steel, timber],
        1e-4,
        Some(1),
    );
    holds(&solution, Quantity::AxialStiffness, 4e8);
    holds(&solution, Quantity::CentroidY, 57.5);
    let stiffness = 200_000.0 * (100.0 * 1000.0 / 12.0 + 1000.0 * 52.5 * 52.5)
        + 10_000.0 * (100.0 * 8e6 / 12.0 + 20_000.0 * 52.5 * 52.5);
    holds(&solution, Quantity::BendingStiffnessX, stiffness);
    holds(&solution, Quantity::SecondMomentX, stiffness / 10_000.0);
    holds(&solution, Quantity::Area, 21_000.0);
    holds(&solution, Quantity::WeightedArea, 40_000.0);

    let fields = UnitFields::new(&solution, 4).unwrap();
    // 10 kN m with tension below.
    let moment = SectionForces {
        mx: -1e7,
        ..SectionForces::default()
    };
    let sigma = |y: f64| -> Vec<f64> {
        at_point(&solution, &fields, &moment, Point::new(3.0, y))
            .iter()
            .map(|p| p.stress.sigma)
            .collect()
    };
    let curvature = 1e7 / stiffness;
    let expected = |y: f64, young: f64| curvature * young * (57.5 - y);
    for (found, exact) in [
        (sigma(0.0)[0], expected(0.0, 200_000.0)),
        (sigma(210.0)[0], expected(210.0, 10_000.0)),
        (sigma(10.0)[0], expected(10.0, 200_000.0)),
        (sigma(10.0)[1], expected(10.0, 10_000.0)),
    ] {
        assert!(
            (found - exact).abs() < 1e-9 * exact.abs(),
            "{found} against {exact}"
        );
    }
    // The flow across a horizontal cut is V ∫E y dA / ∫E y² dA, whatever the distribution.
    let force = SectionForces {
        vy: 1000.0,
        ..SectionForces::default()
    };
    for y in [5.0, 10.0 + 1e-7, 100.0] {
        let result = cut(
            &solution,
            &fields,
            &force,
            Point::new(60.0, y),
            Point::new(-60.0, y),
        )
        .unwrap();
        let below_steel = 100.0 * f64::min(y, 10.0);
        let steel = 200_000.0 * below_steel * (0.5 * f64::min(y, 10.0) - 57.5);
        let h = f64::max(y - 10.0, 0.0);
        let timber = 10_000.0 * 100.0 * h * (10.0 + 0.5 * h - 57.5);
        let flow = -1000.0 * (steel + timber) / stiffness;
        assert!(
            (result.shear_flow.abs() - flow.abs()).abs() < 1e-7 * flow.abs(),
            "y = {y}: {} against {flow}",
            result.shear_flow
        );
    }
}

/// Bounds to a loose tolerance hold the answer to a tight one, for a section without any symmetry,
/// with a curved bond and different ν.
#[test]
fn bounds_hold_for_an_unsymmetric_mixture() {
    let pieces = [
        block(0, [0.0, 0.0], [8.0, 3.0]),
        block(1, [2.0, 3.0], [5.0, 9.0]),
        Piece {
            name: "disc".into(),
            outline: disc(Point::new(6.5, 1.5), 2.0),
            material: 2,
        },
    ];
    let mut pieces = pieces.to_vec();
    let hole = pieces[2].outline.outer.clone();
    pieces[0].outline.holes.push(hole);
    let materials = [
        material(70_000.0, 26_000.0, 0.33),
        material(3_000.0, 1_000.0, 0.4),
        material(210_000.0, 81_000.0, 0.3),
    ];
    let (_, loose) = solved(&pieces, &materials, 1e-3, None);
    let (_, tight) = solved(&pieces, &materials, 3e-7, None);
    for (quantity, figure) in &loose.properties {
        let fine = get(&tight, *quantity);
        assert!(
            figure.low <= fine.high && fine.low <= figure.high && figure.contains(fine.value),
            "{}: {fine:?} outside of {figure:?}",
            quantity.key()
        );
    }
    // The reference changes the unit, not the section.
    let (_, other) = solved(&pieces, &materials, 3e-7, Some(2));
    for quantity in [
        Quantity::TorsionStiffness,
        Quantity::WarpingStiffness,
        Quantity::ShearCentreX,
        Quantity::ShearCentreY,
        Quantity::FlexureCentreX,
    ] {
        let (a, b) = (get(&tight, quantity), get(&other, quantity));
        assert!(a.low <= b.high && b.low <= a.high, "{}", quantity.key());
    }
    let shear = |s: &Solution, reference: usize| {
        get(s, Quantity::ShearAreaY).scaled(materials[reference].shear)
    };
    let (a, b) = (shear(&tight, 0), shear(&other, 2));
    assert!(a.low <= b.high && b.low <= a.high);
}
