//! Everything that depends on the order of the elements alone, made once.

use std::sync::OnceLock;

use crate::element::divergence::DivergenceFields;
use crate::element::lagrange::{Lagrange, MAX_ORDER};
use crate::element::table::Table;

/// A table with the fields of given divergence at its points.
#[derive(Clone, Debug)]
pub struct Tabulated {
    /// Node functions and orthonormal polynomials.
    pub table: Table,
    /// σ_m, shape `[point × modes]`.
    pub fields: Vec<[f64; 2]>,
}

/// The tables of one order.
#[derive(Clone, Debug)]
pub struct Tables {
    /// The basis.
    pub basis: Lagrange,
    /// For affine triangles: exact for all that is integrated on them.
    pub straight: Tabulated,
    /// For triangles with a circular side: the map is analytic, not polynomial, so the rule goes well
    /// beyond the degree of the node functions and sources are projected to a higher degree.
    pub curved: Tabulated,
    /// The generating fields of [`Tabulated::fields`], for evaluation elsewhere: up to
    /// the degree used on straight triangles and on curved ones.
    pub divergence: [DivergenceFields; 2],
    /// `∫ ∂_a N_i ∂_b N_j` on the reference triangle for (a, b) = (ξ,ξ), (ξ,η) + (η,ξ), (η,η).
    pub stiffness: [Vec<f64>; 3],
}

/// Degree to which the sources are projected on straight triangles: they are polynomials of the
/// order of the elements (at least linear), so nothing is lost.
#[must_use]
pub const fn straight_source_degree(order: usize) -> usize {
    order
}

/// Degree to which the sources are projected on curved triangles.
#[must_use]
pub const fn curved_source_degree(order: usize) -> usize {
    order + 4
}

/// By order, from 1.
static MADE: [OnceLock<Tables>; MAX_ORDER] = [const { OnceLock::new() }; MAX_ORDER];

impl Tables {
    /// The tables of `order`, from 1 to [`MAX_ORDER`], made when they are first asked for: they depend on
    /// nothing else, and many sections need the same.
    #[must_use]
    pub fn of(order: usize) -> &'static Self {
        MADE[order - 1].get_or_init(|| Self::new(order))
    }

    /// The tables of `order`.
    #[must_use]
    pub fn new(order: usize) -> Self {
        let basis = Lagrange::new(order);
        let divergence = [
            DivergenceFields::new(straight_source_degree(order)),
            DivergenceFields::new(curved_source_degree(order)),
        ];
        // Straight: equilibrated fields of degree order + 1, squared.
        let straight = tabulate(
            Table::new(&basis, 2 * order + 2, straight_source_degree(order)),
            &divergence[0],
        );
        let curved = tabulate(
            Table::new(&basis, 2 * order + 12, curved_source_degree(order)),
            &divergence[1],
        );
        let stiffness = reference_stiffness(&straight.table);
        Self {
            basis,
            straight,
            curved,
            divergence,
            stiffness,
        }
    }
}

fn tabulate(table: Table, fields: &DivergenceFields) -> Tabulated {
    let fields = table
        .rule
        .points
        .iter()
        .flat_map(|p| fields.evaluate(p[0], p[1]))
        .collect();
    Tabulated { table, fields }
}

fn reference_stiffness(table: &Table) -> [Vec<f64>; 3] {
    let n = table.functions;
    let mut out = [vec![0.0; n * n], vec![0.0; n * n], vec![0.0; n * n]];
    for (q, w) in table.rule.weights.iter().enumerate() {
        let xi = &table.d_xi[q * n..(q + 1) * n];
        let eta = &table.d_eta[q * n..(q + 1) * n];
        for i in 0..n {
            for j in 0..n {
                out[0][i * n + j] += w * xi[i] * xi[j];
                out[1][i * n + j] += w * (xi[i] * eta[j] + eta[i] * xi[j]);
                out[2][i * n + j] += w * eta[i] * eta[j];
            }
        }
    }
    out
}

/// Coefficients of a reference source `f·det` in the orthonormal polynomials, `∫ f̂ ψ_m`; `source`
/// has one value a point.
pub fn source_modes(table: &Table, source: &[f64], out: &mut Vec<f64>) {
    out.clear();
    out.resize(table.modes, 0.0);
    for (q, w) in table.rule.weights.iter().enumerate() {
        let s = w * source[q];
        let mode = &table.mode[q * table.modes..(q + 1) * table.modes];
        for (o, m) in out.iter_mut().zip(mode) {
            *o += s * m;
        }
    }
}

/// `∫ f̂` over the reference triangle from the coefficients: the constant polynomial is √2.
#[must_use]
pub fn source_total(modes: &[f64]) -> f64 {
    modes[0] * std::f64::consts::FRAC_1_SQRT_2
}
