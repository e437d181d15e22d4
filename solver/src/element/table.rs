//! Node functions and orthonormal polynomials tabulated at the points of a rule.

use super::lagrange::Lagrange;
use super::orthonormal;
use super::quadrature::{Rule, triangle_rule};

/// What the kernels read at every quadrature point. Shapes are `[point × function]`, row by row.
#[derive(Clone, Debug)]
pub struct Table {
    /// The rule.
    pub rule: Rule,
    /// Number of node functions.
    pub functions: usize,
    /// Node functions.
    pub value: Vec<f64>,
    /// Their ξ derivatives.
    pub d_xi: Vec<f64>,
    /// Their η derivatives.
    pub d_eta: Vec<f64>,
    /// Number of orthonormal polynomials.
    pub modes: usize,
    /// Orthonormal polynomials.
    pub mode: Vec<f64>,
}

impl Table {
    /// Tabulates `basis` and the orthonormal polynomials up to `mode_degree` at the points of the
    /// rule exact to `degree`.
    #[must_use]
    pub fn new(basis: &Lagrange, degree: usize, mode_degree: usize) -> Self {
        let rule = triangle_rule(degree);
        let functions = basis.count();
        let modes = orthonormal::count(mode_degree);
        let n = rule.points.len();
        let mut table = Self {
            rule,
            functions,
            value: Vec::with_capacity(n * functions),
            d_xi: Vec::with_capacity(n * functions),
            d_eta: Vec::with_capacity(n * functions),
            modes,
            mode: Vec::with_capacity(n * modes),
        };
        for q in 0..n {
            let [xi, eta] = table.rule.points[q];
            for jet in basis.evaluate(xi, eta) {
                table.value.push(jet[0]);
                table.d_xi.push(jet[1]);
                table.d_eta.push(jet[2]);
            }
            for jet in orthonormal::evaluate(mode_degree, xi, eta) {
                table.mode.push(jet[0]);
            }
        }
        table
    }
}
