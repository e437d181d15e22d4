//! The Lagrange triangle of order `p` on equally spaced nodes.
//!
//! Reference corners: 0 at (0,0), 1 at (1,0), 2 at (0,1). Node order: the three corners; the `p − 1`
//! inner nodes of each side, side `k` opposite to corner `k`, running from corner `k+1` to `k+2`
//! (mod 3); the inner nodes of the triangle, row by row.

use faer::Mat;
use faer::prelude::Solve;

use super::orthonormal;

/// Highest order offered: equally spaced nodes stay well conditioned up to here.
pub const MAX_ORDER: usize = 6;

/// The Lagrange basis of one order.
#[derive(Clone, Debug)]
pub struct Lagrange {
    /// Polynomial order `p`.
    pub order: usize,
    /// Reference coordinates of the nodes.
    pub nodes: Vec<[f64; 2]>,
    /// Coefficients of node function `i` in the orthonormal polynomials `m`: entry `(m, i)`.
    coefficients: Mat<f64>,
}

impl Lagrange {
    /// The basis of `order` in `1..=`[`MAX_ORDER`].
    #[must_use]
    pub fn new(order: usize) -> Self {
        let p = order;
        let corner = [[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]];
        let mut nodes: Vec<[f64; 2]> = corner.to_vec();
        for k in 0..3 {
            let (a, b) = (corner[(k + 1) % 3], corner[(k + 2) % 3]);
            for j in 1..p {
                let t = j as f64 / p as f64;
                nodes.push([a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]);
            }
        }
        for i in 1..p {
            for j in 1..p - i {
                nodes.push([j as f64 / p as f64, i as f64 / p as f64]);
            }
        }
        let n = nodes.len();
        let mut vandermonde = Mat::zeros(n, n);
        for (i, node) in nodes.iter().enumerate() {
            for (m, jet) in orthonormal::evaluate(p, node[0], node[1])
                .iter()
                .enumerate()
            {
                vandermonde[(i, m)] = jet[0];
            }
        }
        let coefficients = vandermonde.partial_piv_lu().solve(Mat::identity(n, n));
        Self {
            order,
            nodes,
            coefficients,
        }
    }

    /// Number of nodes, `(p+1)(p+2)/2`.
    #[must_use]
    pub fn count(&self) -> usize {
        self.nodes.len()
    }

    /// `[N, ∂N/∂ξ, ∂N/∂η]` of every node function at (ξ, η).
    #[must_use]
    pub fn evaluate(&self, xi: f64, eta: f64) -> Vec<[f64; 3]> {
        let jets = orthonormal::evaluate(self.order, xi, eta);
        (0..self.count())
            .map(|i| {
                let mut out = [0.0; 3];
                for (m, jet) in jets.iter().enumerate() {
                    let c = self.coefficients[(m, i)];
                    for (o, j) in out.iter_mut().zip(jet) {
                        *o += c * j;
                    }
                }
                out
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn node_functions_are_one_at_their_node_and_sum_to_one() {
        for order in 1..=MAX_ORDER {
            let basis = Lagrange::new(order);
            assert_eq!(basis.count(), orthonormal::count(order));
            for (i, node) in basis.nodes.iter().enumerate() {
                for (j, jet) in basis.evaluate(node[0], node[1]).iter().enumerate() {
                    let delta = f64::from(u8::from(i == j));
                    assert!((jet[0] - delta).abs() < 1e-12);
                }
            }
            let jets = basis.evaluate(0.17, 0.58);
            let sum = |c: usize| jets.iter().map(|j| j[c]).sum::<f64>();
            assert!((sum(0) - 1.0).abs() < 1e-13);
            assert!(sum(1).abs() < 1e-12 && sum(2).abs() < 1e-12);
        }
    }
}
