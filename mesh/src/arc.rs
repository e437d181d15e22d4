//! The bulge of a circular side over its chord, smooth to the last digit.
//!
//! For an arc of half-angle β from `a` to `b`, parameter `t ∈ [0, 1]` along the angle, the deviation
//! from the chord is `d(t) = c(t) − ((1−t) a + t b) = t (1−t) g(t)` with `g` analytic. A triangle with
//! that side is mapped by `x(λ) = Σ λ_i x_i + λ_a λ_b g((1 + λ_b − λ_a)/2)`: exact on the arc, nothing
//! added on the other two sides, smooth at all three corners.

use crate::outline::side::Circle;
use crate::point::{Point, Vector};

/// The divided deviation `g(t)` of the shorter arc between two points of a circle.
#[derive(Clone, Copy, Debug)]
pub struct Bulge {
    /// Half of the angle that the arc subtends, β in (0, π/2].
    pub half_angle: f64,
    radius: f64,
    /// Unit vector along the chord.
    along: Vector,
    /// Unit vector from the chord to the arc.
    outward: Vector,
}

impl Bulge {
    /// The shorter arc of `circle` from `a` to `b`; both are taken to lie on the circle.
    #[must_use]
    pub fn new(circle: Circle, a: Point, b: Point) -> Self {
        let chord = b - a;
        let length = chord.length();
        let along = chord * (1.0 / length);
        let middle = a.lerp(b, 0.5);
        let normal = along.perpendicular();
        let outward = if (middle - circle.centre).dot(normal) < 0.0 {
            -normal
        } else {
            normal
        };
        Self {
            half_angle: (0.5 * length / circle.radius).min(1.0).asin(),
            radius: circle.radius,
            along,
            outward,
        }
    }

    /// `g(t)` and `dg/dt`.
    ///
    /// Across the chord `g = 2 R β² sinc(βt) sinc(β(1−t))`; along it, with `x = 2t − 1`,
    /// `g = 4 R β x Σ_{k≥1} (−1)^{k+1} β^{2k}/(2k+1)! Σ_{m<k} x^{2m}`.
    #[must_use]
    pub fn at(&self, t: f64) -> (Vector, Vector) {
        let beta = self.half_angle;
        let (s0, d0) = sinc(beta * t);
        let (s1, d1) = sinc(beta * (1.0 - t));
        let scale = 2.0 * self.radius * beta * beta;
        let across = scale * s0 * s1;
        let across_d = scale * beta * (d0 * s1 - s0 * d1);

        let x = 2.0 * t - 1.0;
        let (mut sum, mut sum_d) = (0.0, 0.0);
        let (mut inner, mut inner_d, mut power, mut power_d) = (0.0, 0.0, 1.0, 0.0);
        let mut factor = 1.0;
        for k in 1..=16 {
            inner += power;
            inner_d += power_d;
            let m = 2.0 * f64::from(k);
            // d/dx of x^{2k} from x^{2k−2}.
            power_d = power_d * x * x + 2.0 * power * x;
            power *= x * x;
            factor *= -beta * beta / (m * (m + 1.0));
            sum -= factor * inner;
            sum_d -= factor * inner_d;
            if factor.abs() * m < 1e-18 {
                break;
            }
        }
        let scale = 4.0 * self.radius * beta;
        let tangential = scale * x * sum;
        let tangential_d = 2.0 * scale * (sum + x * sum_d);
        (
            self.along * tangential + self.outward * across,
            self.along * tangential_d + self.outward * across_d,
        )
    }
}

/// `sin(x)/x` and its derivative.
fn sinc(x: f64) -> (f64, f64) {
    if x.abs() < 0.1 {
        let q = x * x;
        (
            1.0 - q / 6.0 * (1.0 - q / 20.0 * (1.0 - q / 42.0 * (1.0 - q / 72.0))),
            -x / 3.0 * (1.0 - q / 10.0 * (1.0 - q / 28.0 * (1.0 - q / 54.0))),
        )
    } else {
        let s = x.sin() / x;
        (s, (x.cos() - s) / x)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn chord_plus_bulge_lies_on_the_arc_at_equal_angles() {
        for &(start, sweep) in &[(0.3, 0.9), (2.0, -0.4), (1.0, 1e-4), (-1.0, 2.9)] {
            let circle = Circle {
                centre: Point::new(3.0, -2.0),
                radius: 1.7,
            };
            let on = |t: f64| circle.centre + Vector::at_angle(start + t * sweep) * circle.radius;
            let (a, b) = (on(0.0), on(1.0));
            let bulge = Bulge::new(circle, a, b);
            for i in 0..=20 {
                let t = f64::from(i) / 20.0;
                let (g, _) = bulge.at(t);
                let p = a.lerp(b, t) + g * (t * (1.0 - t));
                assert!(p.distance(on(t)) < 1e-14, "{start} {sweep} {t}");
            }
        }
    }

    #[test]
    fn derivative_agrees_with_differences() {
        let circle = Circle {
            centre: Point::default(),
            radius: 2.0,
        };
        let bulge = Bulge::new(circle, Point::new(2.0, 0.0), Point::new(0.0, 2.0));
        for i in 1..20 {
            let t = f64::from(i) / 20.0;
            let h = 1e-5;
            let difference = (bulge.at(t + h).0 - bulge.at(t - h).0) * (0.5 / h);
            assert!((difference - bulge.at(t).1).length() < 1e-9);
        }
    }
}
