//! Orthonormal polynomials on the reference triangle.
//!
//! The collapsed-coordinate polynomials of Proriol (1957), Koornwinder (1975) and Dubiner (1991),
//! evaluated by the singularity-free recurrence of R. C. Kirby, "Singularity-free evaluation of
//! collapsed-coordinate orthogonal polynomials", ACM Trans. Math. Softw. 37 (2010) 5.

/// Number of polynomials of degree at most `degree`.
#[must_use]
pub const fn count(degree: usize) -> usize {
    (degree + 1) * (degree + 2) / 2
}

/// Value and gradient of a polynomial at a point.
#[derive(Clone, Copy, Debug, Default)]
struct Jet {
    v: f64,
    dx: f64,
    dy: f64,
}

impl Jet {
    fn times(self, o: Self) -> Self {
        Self {
            v: self.v * o.v,
            dx: self.dx * o.v + self.v * o.dx,
            dy: self.dy * o.v + self.v * o.dy,
        }
    }
    fn scaled(self, s: f64) -> Self {
        Self {
            v: self.v * s,
            dx: self.dx * s,
            dy: self.dy * s,
        }
    }
    fn minus(self, o: Self) -> Self {
        Self {
            v: self.v - o.v,
            dx: self.dx - o.dx,
            dy: self.dy - o.dy,
        }
    }
}

/// `[ψ, ∂ψ/∂ξ, ∂ψ/∂η]` at (ξ, η) of every orthonormal polynomial of degree at most `degree`, by
/// rising degree (so that the first [`count`]`(d)` span degree `d`): `∫ ψ_i ψ_j = δ_ij`.
#[must_use]
pub fn evaluate(degree: usize, xi: f64, eta: f64) -> Vec<[f64; 3]> {
    // Kirby works on the triangle (−1,−1), (1,−1), (−1,1).
    let (x, y) = (2.0 * xi - 1.0, 2.0 * eta - 1.0);
    let f1 = Jet {
        v: 0.5 * (1.0 + 2.0 * x + y),
        dx: 1.0,
        dy: 0.5,
    };
    let f2 = Jet {
        v: 0.5 * (1.0 - y),
        dx: 0.0,
        dy: -0.5,
    };
    let f3 = f2.times(f2);
    // rows[p][q]
    let mut rows = vec![vec![Jet::default(); degree + 1]; degree + 1];
    rows[0][0] = Jet {
        v: 1.0,
        dx: 0.0,
        dy: 0.0,
    };
    for p in 0..degree {
        let pf = p as f64;
        let mut next = f1.times(rows[p][0]).scaled((2.0 * pf + 1.0) / (pf + 1.0));
        if p > 0 {
            next = next.minus(f3.times(rows[p - 1][0]).scaled(pf / (pf + 1.0)));
        }
        rows[p + 1][0] = next;
    }
    for p in 0..degree {
        let alpha = 2.0 * p as f64 + 1.0;
        rows[p][1] = rows[p][0].times(Jet {
            v: 0.5 * (alpha + (alpha + 2.0) * y),
            dx: 0.0,
            dy: 0.5 * (alpha + 2.0),
        });
        for q in 1..degree - p {
            let n = q as f64;
            let a = (2.0 * n + 1.0 + alpha) * (2.0 * n + 2.0 + alpha)
                / (2.0 * (n + 1.0) * (n + 1.0 + alpha));
            let b = alpha * alpha * (2.0 * n + 1.0 + alpha)
                / (2.0 * (n + 1.0) * (n + 1.0 + alpha) * (2.0 * n + alpha));
            let c = n * (n + alpha) * (2.0 * n + 2.0 + alpha)
                / ((n + 1.0) * (n + 1.0 + alpha) * (2.0 * n + alpha));
            let line = Jet {
                v: a * y + b,
                dx: 0.0,
                dy: a,
            };
            rows[p][q + 1] = rows[p][q].times(line).minus(rows[p][q - 1].scaled(c));
        }
    }
    let mut out = Vec::with_capacity(count(degree));
    for d in 0..=degree {
        for p in 0..=d {
            let q = d - p;
            // Norm on the double-sized triangle, times 2 for the reference triangle.
            let norm = 2.0 * ((p as f64 + 0.5) * (d as f64 + 1.0)).sqrt();
            let j = rows[p][q];
            out.push([norm * j.v, 2.0 * norm * j.dx, 2.0 * norm * j.dy]);
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::element::quadrature::triangle_rule;

    #[test]
    fn polynomials_are_orthonormal() {
        let degree = 9;
        let rule = triangle_rule(2 * degree);
        let n = count(degree);
        let mut gram = vec![0.0; n * n];
        for (p, w) in rule.points.iter().zip(&rule.weights) {
            let v = evaluate(degree, p[0], p[1]);
            for i in 0..n {
                for j in 0..n {
                    gram[i * n + j] += w * v[i][0] * v[j][0];
                }
            }
        }
        for i in 0..n {
            for j in 0..n {
                let delta = f64::from(u8::from(i == j));
                assert!((gram[i * n + j] - delta).abs() < 1e-12, "{i} {j}");
            }
        }
    }

    #[test]
    fn gradients_agree_with_differences() {
        let (x, y, h) = (0.31, 0.22, 1e-6);
        let at = evaluate(6, x, y);
        let (e, w) = (evaluate(6, x + h, y), evaluate(6, x - h, y));
        let (n, s) = (evaluate(6, x, y + h), evaluate(6, x, y - h));
        for i in 0..at.len() {
            assert!((at[i][1] - (e[i][0] - w[i][0]) / (2.0 * h)).abs() < 1e-7);
            assert!((at[i][2] - (n[i][0] - s[i][0]) / (2.0 * h)).abs() < 1e-7);
        }
    }
}
