//! Thin-wall formulas against solid sections of falling thickness: the difference is of a known order
//! in t, and the rate at which it falls is asserted: 2 for shear centres and warping constants (some
//! head for it from below), 1 for torsion constants, whose corners and ends are of the order of t. A
//! formula with a wrong factor would leave a difference that does not fall at all.

mod common;

use common::{channel, eye, figure, solve_loops, solve_polygon, zed};
use sectile_solver::quantity::Quantity;
use sectile_validation::outline::{CornerText, Loop, polygon};

/// `|ours/formula − 1|` at the thicknesses t, t/2, t/4 and the two rates (powers of t) between them.
fn rates(formula_and_ours: impl Fn(f64) -> (f64, f64)) -> ([f64; 3], [f64; 2]) {
    let d = [1.0, 0.5, 0.25].map(|s| {
        let (formula, ours) = formula_and_ours(s);
        (ours / formula - 1.0).abs()
    });
    (d, [(d[0] / d[1]).log2(), (d[1] / d[2]).log2()])
}

fn check(name: &str, least: f64, most: f64, formula_and_ours: impl Fn(f64) -> (f64, f64)) {
    let (d, r) = rates(formula_and_ours);
    assert!(d[2] < 0.02, "{name}: {d:?}");
    for rate in r {
        assert!(
            least < rate && rate < most,
            "{name}: differences {d:?} fall with rates {r:?}, expected {least} to {most}"
        );
    }
}

const TOLERANCE: f64 = 1e-6;

/// e = 3 b² t_f / (6 b t_f + h t_w) from the web's centreline; C_w = t_f b³ h²/12 ·
/// (3 b t_f + 2 h t_w)/(6 b t_f + h t_w). Source: V. Z. Vlasov, Thin-Walled Elastic Beams, 1961;
/// S. P. Timoshenko, J. M. Gere, Theory of Elastic Stability, 2nd ed., New York 1961, appendix.
#[test]
fn channel_shear_centre_and_warping_constant() {
    let (h, b) = (200.0, 80.0);
    let section = |s: f64| {
        let (tf, tw) = (10.0 * s, 6.0 * s);
        (tf, tw, solve_polygon(&channel(h, b, tf, tw), TOLERANCE))
    };
    check("channel e", 1.8, 2.2, |s| {
        let (tf, tw, solution) = section(s);
        let e = 3.0 * b * b * tf / (6.0 * b * tf + h * tw);
        (e, -figure(&solution, Quantity::ShearCentreX).value)
    });
    check("channel C_w", 1.8, 2.2, |s| {
        let (tf, tw, solution) = section(s);
        let cw =
            tf * b.powi(3) * h * h / 12.0 * (3.0 * b * tf + 2.0 * h * tw) / (6.0 * b * tf + h * tw);
        (cw, figure(&solution, Quantity::WarpingConstant).value)
    });
}

/// C_w = h² b³ t_f/12 · (b t_f + 2 h t_w)/(2 b t_f + h t_w). Sources as for the channel.
#[test]
fn zed_warping_constant() {
    let (h, b) = (200.0, 80.0);
    check("Z C_w", 1.65, 2.2, |s| {
        let (tf, tw) = (10.0 * s, 6.0 * s);
        let solution = solve_polygon(&zed(h, b, tf, tw), TOLERANCE);
        let cw = h * h * b.powi(3) * tf / 12.0 * (b * tf + 2.0 * h * tw) / (2.0 * b * tf + h * tw);
        (cw, figure(&solution, Quantity::WarpingConstant).value)
    });
}

/// Two flanges: shear centre at h I₂/(I₁ + I₂) from the first, C_w = h² I₁ I₂/(I₁ + I₂), I the
/// flanges' second moments about the web. Sources as for the channel.
#[test]
fn unequal_eye_shear_centre_and_warping_constant() {
    let h = 300.0;
    let section = |s: f64| {
        let t = 20.0 * s;
        let solution = solve_polygon(&eye(h, [150.0, t], [90.0, t], 0.8 * t), TOLERANCE);
        let inertia = |b: f64| t * b * b * b / 12.0;
        (inertia(150.0), inertia(90.0), solution)
    };
    check("unequal I shear centre", 1.8, 2.2, |s| {
        let (i1, i2, solution) = section(s);
        (
            h * i2 / (i1 + i2),
            figure(&solution, Quantity::ShearCentreY).value + 0.5 * h,
        )
    });
    check("unequal I C_w", 1.75, 2.2, |s| {
        let (i1, i2, solution) = section(s);
        (
            h * h * i1 * i2 / (i1 + i2),
            figure(&solution, Quantity::WarpingConstant).value,
        )
    });
}

/// Circular arc of half-angle α: e = 2 r (sin α − α cos α)/(α − sin α cos α) from the centre, C_w =
/// (2 t r⁵/3)[α³ − 6 (sin α − α cos α)²/(α − sin α cos α)]. Source: S. P. Timoshenko, J. M. Gere,
/// Theory of Elastic Stability, 2nd ed., New York 1961, appendix.
#[test]
fn circular_arc_shear_centre_and_warping_constant() {
    let r = 100.0;
    for degrees in [45.0_f64, 90.0, 150.0] {
        let a = degrees.to_radians();
        let section = |s: f64| {
            let t = if degrees < 60.0 { 4.0 } else { 16.0 } * s;
            let (outer, inner) = (r + 0.5 * t, r - 0.5 * t);
            let at = |radius: f64, angle: f64| [radius * angle.cos(), radius * angle.sin()];
            let arc = |from_radius: f64, angle: f64| CornerText::Rich {
                at: at(from_radius, angle),
                round: None,
                via: Some([from_radius, 0.0]),
            };
            let outline = Loop::Corners(vec![
                arc(inner, -a),
                CornerText::Plain(at(outer, -a)),
                arc(outer, a),
                CornerText::Plain(at(inner, a)),
            ]);
            (t, solve_loops(&outline, &[], 0.3, TOLERANCE))
        };
        let (c, d) = (a.sin() - a * a.cos(), a - a.sin() * a.cos());
        check(&format!("arc {degrees}° e"), 1.8, 2.2, |s| {
            let (_, solution) = section(s);
            (
                2.0 * r * c / d,
                figure(&solution, Quantity::ShearCentreX).value,
            )
        });
        check(&format!("arc {degrees}° C_w"), 1.8, 2.2, |s| {
            let (t, solution) = section(s);
            (
                2.0 * t * r.powi(5) / 3.0 * (a.powi(3) - 6.0 * c * c / d),
                figure(&solution, Quantity::WarpingConstant).value,
            )
        });
    }
}

/// J = 4 A₀²/∮ds/t, A₀ within the centreline; the corners make a difference of the order of t. Source: R. Bredt, Kritische Bemerkungen zur
/// Drehungselastizität, Zeitschrift des VDI 40, Berlin 1896.
#[test]
fn closed_tube_torsion_constant() {
    let (b, h) = (2.0, 1.0);
    check("Bredt, one cell", 0.95, 1.1, |s| {
        let (t1, t2) = (0.05 * s, 0.08 * s);
        let rectangle = |w: f64, d: f64| {
            let (x, y) = (0.5 * w, 0.5 * d);
            polygon(&[[-x, -y], [x, -y], [x, y], [-x, y]])
        };
        let solution = solve_loops(
            &rectangle(b + t2, h + t1),
            &[rectangle(b - t2, h - t1)],
            0.3,
            TOLERANCE,
        );
        let j = 4.0 * (b * h).powi(2) / (2.0 * b / t1 + 2.0 * h / t2);
        (j, figure(&solution, Quantity::TorsionConstant).value)
    });
    // Two cells, b₁ = 1 and b₂ = 2 wide: q₁ δ₁ − q₂ δ₁₂ = 2 A₁, −q₁ δ₁₂ + q₂ δ₂ = 2 A₂.
    check("Bredt, two cells", 0.95, 1.1, |s| {
        let t = 0.05 * s;
        let i = 0.5 * t;
        let cell = |x0: f64, x1: f64, y: f64| polygon(&[[x0, -y], [x1, -y], [x1, y], [x0, y]]);
        let solution = solve_loops(
            &cell(-i, 3.0 + i, 0.5 + i),
            &[cell(i, 1.0 - i, 0.5 - i), cell(1.0 + i, 3.0 - i, 0.5 - i)],
            0.3,
            TOLERANCE,
        );
        let (a1, a2) = (1.0, 2.0);
        let (d1, d2, d12) = (4.0 / t, 6.0 / t, 1.0 / t);
        let determinant = d1 * d2 - d12 * d12;
        let q1 = 2.0 * (a1 * d2 + a2 * d12) / determinant;
        let q2 = 2.0 * (a2 * d1 + a1 * d12) / determinant;
        (
            2.0 * (a1 * q1 + a2 * q2),
            figure(&solution, Quantity::TorsionConstant).value,
        )
    });
}

/// Open sections: J = Σ b t³/3, each free end and each junction changing it by a multiple of t⁴, so
/// that the relative difference falls with t. A strip loses 0.105 t⁴ at each end (A. Barré de
/// Saint-Venant, 1855; the constant is 32/π⁵ Σ 1/n⁵ over odd n, derived and summed for this
/// collection).
#[test]
fn open_section_torsion_constant() {
    check("channel J", 0.85, 1.15, |s| {
        let (tf, tw) = (10.0 * s, 6.0 * s);
        let solution = solve_polygon(&channel(200.0, 80.0, tf, tw), TOLERANCE);
        let j = (2.0 * 80.0 * tf.powi(3) + 200.0 * tw.powi(3)) / 3.0;
        (j, figure(&solution, Quantity::TorsionConstant).value)
    });
    for t in [10.0_f64, 2.0] {
        let x = 50.0;
        let y = 0.5 * t;
        let solution = solve_polygon(&[[-x, -y], [x, -y], [x, y], [-x, y]], 1e-7);
        let loss = 100.0 * t.powi(3) / 3.0 - 2.0 * 0.105_041_479_380_644_49 * t.powi(4);
        let j = figure(&solution, Quantity::TorsionConstant);
        assert!(
            (j.value - loss).abs() <= j.half_width() + 1e-12 * loss,
            "{j:?} {loss}"
        );
    }
}

/// Second-order warping of sections whose legs meet in a point: angle t³(b₁³ + b₂³)/36, strip
/// b³t³/144. Source: F. Bleich, Buckling Strength of Metal Structures, New York 1952; S. P. Timoshenko,
/// J. M. Gere as above. These are the leading terms in t/b.
#[test]
fn second_order_warping_constants() {
    let b = 100.0_f64;
    check("angle C_w", 1.9, 2.1, |s| {
        let t = 4.0 * s;
        let (o, i) = (-0.5 * t, 0.5 * t);
        let solution = solve_polygon(&[[o, o], [b, o], [b, i], [i, i], [i, b], [o, b]], TOLERANCE);
        (
            t.powi(3) * 2.0 * b.powi(3) / 36.0,
            figure(&solution, Quantity::WarpingConstant).value,
        )
    });
    check("strip C_w", 1.9, 2.05, |s| {
        let t = 10.0 * s;
        let (x, y) = (0.5 * b, 0.5 * t);
        let solution = solve_polygon(&[[-x, -y], [x, -y], [x, y], [-x, y]], TOLERANCE);
        (
            b.powi(3) * t.powi(3) / 144.0,
            figure(&solution, Quantity::WarpingConstant).value,
        )
    });
}
