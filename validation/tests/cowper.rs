//! Cowper's shear coefficient in Cowper's own definition, from the solver's fields.
//!
//! Cowper compares the section's mean deflection W = (1/A) ∫u_x dA with its mean rotation
//! Φ = −(1/I) ∫x u_z dA: V/(K A G) = W′ − Φ. In Saint-Venant's flexure with curvature κ,
//! u_x = U − ½νκ(x² − y²), u_y = −νκxy, κ′ = V/(E I). Let τ₀ be the stress of the unit force at ν = 0
//! (−div τ₀ = x/I, no normal component on the edges). Then ∫(τ/G)·τ₀ dA gives the rotation by parts, and
//! because the part of τ that ν adds is free of divergence, ∫τ·τ₀ dA = ∫τ₀·τ₀ dA = 1/(k₀ A):
//!
//! 1/K = 1/k₀ − ν A/(2(1+ν) I) · [ (I − I′)/(2A) − ∫(½(x² − y²) τ₀x + x y τ₀y) dA ],
//!
//! I about the axis across the force, I′ about the other, origin at the centroid. Derived here for
//! sections with an axis of symmetry along or across the force.

mod common;

use common::{figure, solve_loops};
use sectile_mesh::{Point, Vector};
use sectile_solver::quantity::Quantity;
use sectile_solver::sample::UnitForce;
use sectile_solver::solution::Solution;
use sectile_validation::cases::{self, Case};
use sectile_validation::probe::Sampled;

/// Cowper's K from a solution at ν = 0.
fn cowper(solution: &Solution, nu: f64, force: UnitForce) -> f64 {
    use Quantity as Q;
    let value = |q| figure(solution, q).value;
    let centroid = Point::new(value(Q::CentroidX), value(Q::CentroidY));
    let along_x = force == UnitForce::ShearX;
    let (k0, inertia, other) = if along_x {
        (Q::ShearCoefficientX, Q::SecondMomentY, Q::SecondMomentX)
    } else {
        (Q::ShearCoefficientY, Q::SecondMomentX, Q::SecondMomentY)
    };
    let (k0, inertia, other) = (value(k0), value(inertia), value(other));
    let moment = |divisions: usize| {
        Sampled::new(solution, force, divisions).integral(|p: Point, tau: Vector| {
            let v = p - centroid;
            let (x, y, tx, ty) = if along_x {
                (v.x, v.y, tau.x, tau.y)
            } else {
                (v.y, v.x, tau.y, tau.x)
            };
            0.5 * (x * x - y * y) * tx + x * y * ty
        })
    };
    // Linear between lattice points: the error falls with the square of the cells.
    let (coarse, fine) = (moment(6), moment(12));
    let moment = fine + (fine - coarse) / 3.0;
    let area = value(Q::Area);
    let bracket = (inertia - other) / (2.0 * area) - moment;
    1.0 / (1.0 / k0 - nu * area / (2.0 * (1.0 + nu) * inertia) * bracket)
}

fn case(id: &str) -> Case {
    let cases = cases::all().expect("case files");
    cases.into_iter().find(|c| c.id == id).expect("case")
}

fn check(id: &str, nu: f64, force: UnitForce, expected: f64, tolerance: f64) {
    let case = case(id);
    let solution = solve_loops(&case.outline, &case.holes, 0.0, 1e-6);
    let k = cowper(&solution, nu, force);
    assert!(
        (k - expected).abs() < tolerance * expected,
        "{id}, ν = {nu}: {k} for {expected}"
    );
}

use UnitForce::{ShearX, ShearY};

/// Source: G. R. Cowper, The shear coefficient in Timoshenko's beam theory, J. Appl. Mech. 33, 1966,
/// 335-340 (front page read, formulas from memory; they agree with finite elements to nine digits).
#[test]
fn rectangle_circle_ellipse_and_hollow_circle() {
    for nu in [0.0, 0.3, 0.5] {
        let rectangle = 10.0 * (1.0 + nu) / (12.0 + 11.0 * nu);
        for id in [
            "rectangle-depth-2",
            "rectangle-depth-1",
            "rectangle-depth-0.5",
        ] {
            check(id, nu, ShearY, rectangle, 1e-5);
        }
        let circle = 6.0 * (1.0 + nu) / (7.0 + 6.0 * nu);
        check("circle-flexure", nu, ShearX, circle, 1e-5);
        for (force, a, b) in [(ShearX, 2.0_f64, 1.0_f64), (ShearY, 1.0, 2.0)] {
            let (a2, b2) = (a * a, b * b);
            let ellipse = 12.0 * (1.0 + nu) * a2 * (3.0 * a2 + b2)
                / ((40.0 + 37.0 * nu) * a2 * a2 + (16.0 + 10.0 * nu) * a2 * b2 + nu * b2 * b2);
            check("ellipse-flexure", nu, force, ellipse, 1e-5);
        }
        for (id, m) in [("hollow-circle-0.5", 0.5_f64), ("hollow-circle-0.9", 0.9)] {
            let s = (1.0 + m * m).powi(2);
            let hollow = 6.0 * (1.0 + nu) * s / ((7.0 + 6.0 * nu) * s + (20.0 + 12.0 * nu) * m * m);
            check(id, nu, ShearX, hollow, 1e-5);
        }
    }
}

/// Converged finite elements made for this collection, ν = 0.3, nine digits or more.
#[test]
fn hexagon_triangle_and_semicircle() {
    check("hexagon", 0.3, ShearX, 0.878_130_142, 1e-5);
    check("equilateral-flexure", 0.3, ShearY, 0.751_965_908, 1e-5);
    check("semicircle", 0.3, ShearX, 0.770_744_502, 1e-5);
    check("semicircle", 0.3, ShearY, 0.873_490_460, 1e-5);
}

/// (1+ν)/(1.305 + 1.273 ν) for the semicircle, four-figure constants. Source: G. R. Cowper as above,
/// from memory; the force acts along the axis of symmetry.
#[test]
fn semicircle_by_cowpers_own_constants() {
    for nu in [0.0, 0.3, 0.5] {
        let printed = (1.0 + nu) / (1.305 + 1.273 * nu);
        check("semicircle", nu, ShearX, printed, 1e-3);
    }
}

/// The two definitions are not one: comparing like with unlike would be seen.
#[test]
fn energy_and_cowper_differ_once_nu_is_not_zero() {
    let case = case("circle-flexure");
    let k = |nu: f64| {
        let solution = solve_loops(&case.outline, &case.holes, nu, 1e-6);
        figure(&solution, Quantity::ShearCoefficientX).value
    };
    let solution = solve_loops(&case.outline, &case.holes, 0.0, 1e-6);
    assert!((cowper(&solution, 0.0, ShearX) - k(0.0)).abs() < 1e-7);
    assert!(cowper(&solution, 0.3, ShearX) - k(0.3) > 0.03);
}
