//! Polynomial vector fields of given divergence and no flux through the sides of the triangle.
//!
//! For each orthonormal polynomial ψ_m of degree d ≥ 1 a field σ_m of degree d + 1 with
//! `div σ_m = ψ_m` and `σ_m·n = 0` on the three sides. The fields are sought as
//! `Σ_i λ_i q_i (x − x_i)`, `q_i` of degree d − 1: (x − x_i) has no flux through the two sides that
//! meet in corner i, and λ_i vanishes on the third. Of the many solutions the one with the smallest
//! coefficients is taken, degree by degree: a field must not be rougher than its divergence, or the
//! equilibrated stresses would lose their order of convergence.

use faer::linalg::solvers::Llt;
use faer::prelude::Solve;
use faer::{Mat, Side};

use super::orthonormal::{count, evaluate};
use super::quadrature::triangle_rule;

/// The fields σ_m, as coefficients of the generators of their degree.
#[derive(Clone, Debug)]
pub struct DivergenceFields {
    /// Highest degree of the divergence.
    degree: usize,
    /// For degree d (from 1): entry `(generator, k)` of the k-th polynomial of that degree.
    blocks: Vec<Mat<f64>>,
}

/// The generator fields `λ_i ψ_j (x − x_i)` at a point, `j < count(degree)`, i slowest.
fn generators(degree: usize, xi: f64, eta: f64) -> Vec<[f64; 2]> {
    let q = evaluate(degree, xi, eta);
    let lambda = [1.0 - xi - eta, xi, eta];
    let from_corner = [[xi, eta], [xi - 1.0, eta], [xi, eta - 1.0]];
    let mut out = Vec::with_capacity(3 * q.len());
    for i in 0..3 {
        for jet in &q {
            let s = lambda[i] * jet[0];
            out.push([s * from_corner[i][0], s * from_corner[i][1]]);
        }
    }
    out
}

impl DivergenceFields {
    /// The fields for every polynomial of degree 1 to `degree`.
    ///
    /// # Panics
    /// Never: the small systems are positive definite by construction (tested up to degree 12).
    #[must_use]
    pub fn new(degree: usize) -> Self {
        let mut blocks = Vec::with_capacity(degree);
        for d in 1..=degree {
            let rule = triangle_rule(2 * d);
            let rows = count(d) - 1;
            let columns = 3 * count(d - 1);
            // ∫ ψ_m div g = −∫ grad ψ_m · g, since g has no flux through the sides.
            let mut a = Mat::<f64>::zeros(rows, columns);
            for (p, w) in rule.points.iter().zip(&rule.weights) {
                let modes = evaluate(d, p[0], p[1]);
                for (c, g) in generators(d - 1, p[0], p[1]).iter().enumerate() {
                    for r in 0..rows {
                        let m = modes[r + 1];
                        a[(r, c)] -= w * (m[1] * g[0] + m[2] * g[1]);
                    }
                }
            }
            let first = count(d - 1) - 1;
            let mut unit = Mat::<f64>::zeros(rows, d + 1);
            for k in 0..=d {
                unit[(first + k, k)] = 1.0;
            }
            let normal = &a * a.transpose();
            let solved = match Llt::new(normal.as_ref(), Side::Lower) {
                Ok(llt) => llt.solve(&unit),
                Err(_) => unreachable!("the divergence maps onto the polynomials of zero mean"),
            };
            blocks.push(a.transpose() * solved);
        }
        Self { degree, blocks }
    }

    /// σ_m at (ξ, η) for every polynomial m of degree up to the limit; entry 0 (the constant, which
    /// only fluxes through the sides can balance) is zero.
    #[must_use]
    pub fn evaluate(&self, xi: f64, eta: f64) -> Vec<[f64; 2]> {
        let mut out = Vec::with_capacity(count(self.degree));
        out.push([0.0; 2]);
        for (d, block) in (1..).zip(&self.blocks) {
            let g = generators(d - 1, xi, eta);
            for k in 0..=d {
                let mut s = [0.0; 2];
                for (c, field) in g.iter().enumerate() {
                    s[0] += block[(c, k)] * field[0];
                    s[1] += block[(c, k)] * field[1];
                }
                out.push(s);
            }
        }
        out
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fields_have_the_divergence_asked_for_and_no_flux_through_the_sides() {
        let degree = 12;
        let fields = DivergenceFields::new(degree);
        let h = 1e-5;
        for &(x, y) in &[(0.2, 0.3), (0.6, 0.1), (0.05, 0.9)] {
            let modes = evaluate(degree, x, y);
            let (e, w) = (fields.evaluate(x + h, y), fields.evaluate(x - h, y));
            let (n, s) = (fields.evaluate(x, y + h), fields.evaluate(x, y - h));
            for m in 1..modes.len() {
                let div = (e[m][0] - w[m][0] + n[m][1] - s[m][1]) / (2.0 * h);
                assert!(
                    (div - modes[m][0]).abs() < 2e-6,
                    "{m}: {div} {}",
                    modes[m][0]
                );
            }
        }
        for i in 0..=10 {
            let t = f64::from(i) / 10.0;
            for f in fields.evaluate(t, 0.0) {
                assert!(f[1].abs() < 1e-11);
            }
            for f in fields.evaluate(0.0, t) {
                assert!(f[0].abs() < 1e-11);
            }
            for f in fields.evaluate(t, 1.0 - t) {
                assert!((f[0] + f[1]).abs() < 1e-11);
            }
        }
    }
}
