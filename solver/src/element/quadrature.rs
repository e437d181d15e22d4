//! Gauss–Legendre rules on `[0, 1]` and, collapsed, on the reference triangle.

/// A rule on the reference triangle with corners (0,0), (1,0), (0,1): points and positive weights
/// that sum to ½.
#[derive(Clone, Debug)]
pub struct Rule {
    /// Reference coordinates (ξ, η).
    pub points: Vec<[f64; 2]>,
    /// Weights.
    pub weights: Vec<f64>,
}

/// Abscissae and weights of the `n`-point Gauss–Legendre rule on `[0, 1]`, exact to degree `2n − 1`.
///
/// Newton's iteration on the Legendre polynomial from Tricomi's asymptotic start.
#[must_use]
pub fn gauss_legendre(n: usize) -> Vec<(f64, f64)> {
    let nf = n as f64;
    (0..n)
        .map(|i| {
            let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (nf + 0.5)).cos();
            let mut slope = 1.0;
            for _ in 0..100 {
                let (mut p0, mut p1) = (1.0, x);
                for k in 2..=n {
                    let k = k as f64;
                    (p0, p1) = (p1, ((2.0 * k - 1.0) * x * p1 - (k - 1.0) * p0) / k);
                }
                slope = nf * (x * p1 - p0) / (x * x - 1.0);
                let step = p1 / slope;
                x -= step;
                if step.abs() < 1e-16 {
                    break;
                }
            }
            (0.5 * (1.0 - x), 1.0 / ((1.0 - x * x) * slope * slope))
        })
        .collect()
}

/// The collapsed product rule exact to `degree` on the reference triangle.
///
/// `ξ = u, η = (1 − u) v`, `dξ dη = (1 − u) du dv`: the factor costs one degree in `u`. All weights
/// are positive, so a sum of squares stays one.
#[must_use]
pub fn triangle_rule(degree: usize) -> Rule {
    let n = (degree + 2).div_ceil(2);
    let line = gauss_legendre(n);
    let mut rule = Rule {
        points: Vec::with_capacity(n * n),
        weights: Vec::with_capacity(n * n),
    };
    for &(u, wu) in &line {
        for &(v, wv) in &line {
            rule.points.push([u, (1.0 - u) * v]);
            rule.weights.push(wu * wv * (1.0 - u));
        }
    }
    rule
}

#[cfg(test)]
mod tests {
    use super::*;

    /// ∫ ξ^a η^b over the reference triangle = a! b! / (a + b + 2)!.
    fn monomial(a: usize, b: usize) -> f64 {
        let factorial = |n: usize| (1..=n).map(|k| k as f64).product::<f64>();
        factorial(a) * factorial(b) / factorial(a + b + 2)
    }

    #[test]
    fn each_rule_is_exact_to_its_degree() {
        for degree in 0..=18 {
            let rule = triangle_rule(degree);
            for a in 0..=degree {
                for b in 0..=degree - a {
                    let sum: f64 = rule
                        .points
                        .iter()
                        .zip(&rule.weights)
                        .map(|(p, w)| w * p[0].powi(a as i32) * p[1].powi(b as i32))
                        .sum();
                    let exact = monomial(a, b);
                    assert!(
                        (sum - exact).abs() < 1e-14 * exact.max(1e-3),
                        "{degree} {a} {b}"
                    );
                }
            }
        }
    }
}
