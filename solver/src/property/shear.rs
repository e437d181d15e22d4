//! Torsion, warping and shear from the solved fields, with their bounds.
//!
//! Write `e_p`, `e_d` for the errors of the primal and the dual stress of a problem. Both are
//! orthogonal in the sense of Galerkin and `e_p ⟂ e_d`, so for two problems a, b
//!
//! - with known fields and no source: `∫τ_p·τ_p = Q + ∫e_p·e_p`, `∫τ*·τ* = Q − ∫e_d·e_d`;
//! - with sources and no known field: the signs change places;
//! - `∫ω f = R − ∫e_p·e_p` and `−∫(xτ*_y − yτ*_x) = R + ∫e_d·e_d` for torsion with a source problem.
//!
//! Each mean of the two is therefore within `½ √(gap_a gap_b)` of the truth. Where a source had to be
//! projected on curved triangles, `√gap` grows by twice the oscillation. The identity
//! `difference of the two = ± ∫(τ_p − τ*)·(τ_p − τ*)` holds exactly, so by how much it is missed
//! measures rounding and quadrature; that is added to every half-width.

use crate::figure::{Figure, ROUNDING, Trust};
use crate::kernel::Energies;
use crate::problem::{
    COUNT, FLEXURE_X, FLEXURE_Y, POISSON_X, POISSON_Y, RESTRAINED, SOURCES, TORSION, pair,
};
use crate::property::area::AreaMoments;

/// The fields' integrals with their errors, in the solver's coordinates.
#[derive(Clone, Copy, Debug)]
pub struct Enclosures {
    energies: Energies,
    /// `√gap` with the oscillation, by problem.
    pub root_gap: [f64; COUNT],
}

/// Torsion, warping and shear properties in the solver's coordinates (centroidal).
#[derive(Clone, Copy, Debug)]
pub struct ShearProperties {
    /// Torsion constant.
    pub torsion: Figure,
    /// Warping constant.
    pub warping: Figure,
    /// Shear centre independent of ν.
    pub centre: [Figure; 2],
    /// Flexure centre (zero mean rotation).
    pub flexure_centre: [Figure; 2],
    /// Shear areas for forces along x and y.
    pub shear_area: [Figure; 2],
    /// By direction of the force: the rate of twist (times GJ) that the flexure field with zero mean
    /// rotation contains and the force through the shear centre must not.
    pub twist: [f64; 2],
}

/// The flexure loads `(f_x, f_y)`, `∂σ/∂z = f_x x + f_y y`, of unit forces along x and y.
#[must_use]
pub fn unit_flexure(m: &AreaMoments) -> [[f64; 2]; 2] {
    let delta = m.xx * m.yy - m.xy * m.xy;
    [[m.xx / delta, -m.xy / delta], [-m.xy / delta, m.yy / delta]]
}

impl Enclosures {
    /// From the sum of the energies.
    #[must_use]
    pub fn new(energies: Energies) -> Self {
        let mut root_gap = energies.gaps().map(|g| g.max(0.0).sqrt());
        for (k, &problem) in SOURCES.iter().enumerate() {
            root_gap[problem] += 2.0 * energies.oscillation[k].max(0.0).sqrt();
        }
        Self { energies, root_gap }
    }

    /// `√gap` of the combination `v` of two problems.
    fn combined_root(&self, v: [f64; 2], problems: [usize; 2]) -> f64 {
        let [a, b] = problems;
        let g = |i, j| self.energies.gap[pair(i, j)];
        let gap = v[0] * v[0] * g(a, a) + 2.0 * v[0] * v[1] * g(a, b) + v[1] * v[1] * g(b, b);
        let mut root = gap.max(0.0).sqrt();
        for (k, &problem) in SOURCES.iter().enumerate() {
            for i in 0..2 {
                if problems[i] == problem {
                    root += 2.0 * v[i].abs() * self.energies.oscillation[k].max(0.0).sqrt();
                }
            }
        }
        root
    }

    /// `∫τ_a·τ_b` and how far the identity is missed; sign +1 for known fields, −1 for sources.
    fn product(&self, a: usize, b: usize, sign: f64) -> (f64, f64) {
        let i = pair(a, b);
        let (p, d, g) = (
            self.energies.primal[i],
            self.energies.dual[i],
            self.energies.gap[i],
        );
        (0.5 * (p + d), (sign * (p - d) - g).abs())
    }

    /// `∫|τ|²` of the combination `v` of two problems of one kind.
    fn quadratic(&self, v: [f64; 2], [a, b]: [usize; 2], sign: f64) -> Figure {
        let terms = [
            (v[0] * v[0], a, a),
            (2.0 * v[0] * v[1], a, b),
            (v[1] * v[1], b, b),
        ];
        let (mut value, mut missed, mut size) = (0.0, 0.0, 0.0);
        for (c, i, j) in terms {
            let (q, e) = self.product(i, j, sign);
            value += c * q;
            missed += c.abs() * e;
            size += (c * q).abs();
        }
        let root = self.combined_root(v, [a, b]);
        Figure::around(
            value,
            0.5 * root * root + missed + ROUNDING * size,
            Trust::Bounded,
        )
    }

    /// `∫ω f` for the combination `v` of two source problems (by index into [`SOURCES`]).
    fn moment(&self, v: [f64; 2], sources: [usize; 2], size: f64) -> Figure {
        let (mut value, mut missed) = (0.0, 0.0);
        for (c, k) in v.into_iter().zip(sources) {
            let (p, d) = (
                self.energies.warping_moment[k],
                -self.energies.dual_torque[k],
            );
            let g = self.energies.gap[pair(TORSION, SOURCES[k])];
            value += c * 0.5 * (p + d);
            missed += c.abs() * ((d - p) - g).abs();
        }
        let root = self.root_gap[TORSION] * self.combined_root(v, sources.map(|k| SOURCES[k]));
        Figure::around(value, 0.5 * root + missed + ROUNDING * size, Trust::Bounded)
    }

    /// `∫τ_T·τ_h` for the combination `v` of the two Poisson problems.
    fn poisson_moment(&self, v: [f64; 2]) -> Figure {
        let problems = [POISSON_X, POISSON_Y];
        let (mut value, mut missed, mut size) = (0.0, 0.0, 0.0);
        for (c, k) in v.into_iter().zip(problems) {
            let (q, e) = self.product(TORSION, k, 1.0);
            let scale = (self.product(TORSION, TORSION, 1.0).0 * self.product(k, k, 1.0).0)
                .max(0.0)
                .sqrt();
            value += c * q;
            missed += c.abs() * e;
            size += c.abs() * scale;
        }
        let root = self.root_gap[TORSION] * self.combined_root(v, problems);
        Figure::around(value, 0.5 * root + missed + ROUNDING * size, Trust::Bounded)
    }

    /// The properties, for weighted area moments `m` in the solver's coordinates; `factor`: on what
    /// Poisson's ratio adds, ν/(1+ν) in one material.
    ///
    /// The warping constant needs more care. With `F = ω_h` less its mean and its linear part and
    /// `e = ω_h − ω`, `C_w = 2∫Fω − ∫F² + |e|²` (`|e|` less its mean and linear part): the first term
    /// is a moment with the bound above, the last is at most `gap / μ`, μ the least eigenvalue of the
    /// section's free membrane. `eigenvalue` is an estimate of μ on the safe side, not a bound: hence
    /// `estimated`, though the lower end is guaranteed.
    #[must_use]
    pub fn properties(&self, m: &AreaMoments, factor: f64, eigenvalue: f64) -> ShearProperties {
        let polar = (m.xx + m.yy) / m.area;
        let torsion = self.quadratic([1.0, 0.0], [TORSION, POISSON_X], 1.0);
        let unit = unit_flexure(m);
        // ∫ω f of a unit force has the size of the polar radius.
        let size = polar.sqrt();
        let plain = unit.map(|f| self.moment(f, [0, 1], size));
        let poisson_part = unit.map(|f| self.poisson_moment(f).scaled(factor));
        let centre = [plain[1].scaled(-1.0), plain[0]];
        let flexure_centre = [
            centre[0].plus(poisson_part[1]),
            centre[1].minus(poisson_part[0]),
        ];
        let shear_area = [0, 1].map(|i| {
            let f = unit[i];
            let plain = self.quadratic(f, [FLEXURE_X, FLEXURE_Y], -1.0);
            let extra = self
                .quadratic(f, [POISSON_X, POISSON_Y], 1.0)
                .scaled(factor * factor);
            let torsion_part = poisson_part[i].squared().over(torsion);
            let one = Figure::around(1.0, 0.0, Trust::Exact);
            one.over(plain.plus(extra).minus(torsion_part))
        });
        ShearProperties {
            torsion,
            warping: self.warping_constant(torsion.value * polar, eigenvalue),
            centre,
            flexure_centre,
            shear_area,
            twist: poisson_part.map(|p| p.value),
        }
    }

    fn warping_constant(&self, size: f64, eigenvalue: f64) -> Figure {
        let square = self.energies.source_square;
        let twice = self.moment([1.0, 0.0], [2, 2], size).scaled(2.0);
        let value = twice.value - square;
        let second = self.root_gap[TORSION] * self.root_gap[TORSION] / eigenvalue;
        Figure {
            value: value.max(0.0),
            low: (twice.low - square).max(0.0),
            high: twice.high - square + second,
            trust: Trust::Estimated,
        }
    }

    /// Weights `w_k` of the problems' squared gaps in the half-width of each property, in the order
    /// torsion, warping, centre (x, y), flexure centre (x, y), shear area (x, y): to first order
    /// `half-width = Σ_k w_k gap_k`, products of two roots being shared out evenly.
    #[must_use]
    pub fn gap_weights(
        &self,
        m: &AreaMoments,
        factor: f64,
        eigenvalue: f64,
        areas: [f64; 2],
    ) -> [[f64; COUNT]; 8] {
        let factor = factor.abs();
        let unit = unit_flexure(m);
        let mut out = [[0.0; COUNT]; 8];
        out[0][TORSION] = 0.5;
        let share = |row: &mut [f64; COUNT], a: usize, b: usize, c: f64| {
            let (ra, rb) = (self.root_gap[a], self.root_gap[b]);
            if ra > 0.0 && rb > 0.0 {
                row[a] += 0.5 * c * rb / ra;
                row[b] += 0.5 * c * ra / rb;
            }
        };
        share(&mut out[1], TORSION, RESTRAINED, 1.0);
        out[1][TORSION] += 1.0 / eigenvalue;
        for i in 0..2 {
            // The x coordinate of a centre comes from a force along y.
            let f = unit[1 - i].map(f64::abs);
            for (c, k) in f.into_iter().zip([FLEXURE_X, FLEXURE_Y]) {
                share(&mut out[2 + i], TORSION, k, 0.5 * c);
                share(&mut out[4 + i], TORSION, k, 0.5 * c);
            }
            for (c, k) in f.into_iter().zip([POISSON_X, POISSON_Y]) {
                share(&mut out[4 + i], TORSION, k, 0.5 * c * factor);
            }
            let f = unit[i].map(f64::abs);
            let slope = areas[i] * areas[i];
            for (c, k) in f.into_iter().zip([FLEXURE_X, FLEXURE_Y]) {
                out[6 + i][k] = 0.5 * slope * c * (f[0] + f[1]);
            }
            for (c, k) in f.into_iter().zip([POISSON_X, POISSON_Y]) {
                out[6 + i][k] = 0.5 * slope * factor * factor * c * (f[0] + f[1]);
            }
        }
        out
    }
}
