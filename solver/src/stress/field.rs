//! Unit fields at the lattice points of every triangle, and their superposition.
//!
//! Normal stress: `σ = e (N/A + f_x x + f_y y + B ω/∫eω²)` with `(f_x, f_y)` from the full inertia
//! tensor, area and inertia weighted by `e = E/E₀` of each piece.
//! Shear stress: the mean of primal and dual field for V_x, V_y, T and T_w. The four unit fields are
//! combined so that each integrates back to exactly its own force and to none of the others: on
//! curved triangles the primal fields alone miss that by the error of x in the space.

use rayon::prelude::*;
use sectile_mesh::{Point, Vector};

use super::forces::SectionForces;
use super::state::Stress;
use crate::evaluate::{Evaluator, PointFields, PointTable};
use crate::problem::{COUNT, SOURCES};
use crate::property::shear::unit_flexure;
use crate::sample::{Lattice, reference, unit_weights, weighted};
use crate::solution::{Solution, Solved};

/// What turns section forces into stresses.
#[derive(Clone, Debug)]
pub struct Superposition {
    /// Weights of the problems in the shear stress of unit V_x, V_y, T, T_w.
    weights: [[f64; COUNT]; 4],
    /// `∫ τ·τ / g` of the mean unit fields, in the solver's coordinates times length².
    energy: [[f64; 4]; 4],
    /// `∫ (τ_p − τ*)·(τ_p − τ*) / g` of the unit fields.
    gap: [[f64; 4]; 4],
    /// Bound on what projections leave out, by unit field.
    oscillation: [f64; 4],
}

/// Normal stress of unit N, M_x, M_y, B and shear stress of unit V_x, V_y, T, T_w at a point.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct UnitStress {
    sigma: [f64; 4],
    tau: [Vector; 4],
}

impl UnitStress {
    /// The stress under section forces.
    #[must_use]
    pub fn under(&self, f: &SectionForces) -> Stress {
        let [n, mx, my, b] = self.sigma;
        let [vx, vy, t, tw] = self.tau;
        Stress {
            sigma: n * f.n + mx * f.mx + my * f.my + b * f.b,
            tau: vx * f.vx + vy * f.vy + t * f.t + tw * f.tw,
        }
    }
}

/// The unit fields at lattice points, made once a solution.
#[derive(Clone, Debug)]
pub struct UnitFields {
    /// The lattice.
    pub lattice: Lattice,
    /// Positions in the axes of the section file, shape `[triangles × lattice points]`.
    pub positions: Vec<Point>,
    /// Unit stresses there.
    pub units: Vec<UnitStress>,
    /// How they are made.
    pub superposition: Superposition,
}

/// A point of a rule that integrates over the section, with its unit stresses.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WeightedPoint {
    /// The triangle that it lies in.
    pub triangle: u32,
    /// Where, in the axes of the section file.
    pub at: Point,
    /// Its share of the area, length²: sums of weight times stress are section forces.
    pub weight: f64,
    /// Unit stresses there.
    pub unit: UnitStress,
}

/// The solver's own integration points: the fields' sums over them give the section forces back to
/// rounding. Empty for a section in separate parts.
#[must_use]
pub fn weighted_points(solution: &Solution, fields: &UnitFields) -> Vec<WeightedPoint> {
    let Some(evaluator) = Evaluator::new(solution) else {
        return Vec::new();
    };
    let solved = evaluator.solved;
    let tables = solved.tables;
    let rules = [&tables.straight.table.rule, &tables.curved.table.rule];
    let points = rules.map(|r| PointTable::new(tables, r.points.clone()));
    (0..evaluator.triangles())
        .into_par_iter()
        .flat_map_iter(|t| {
            let ready = evaluator.ready(t);
            let k = usize::from(!evaluator.map(t).is_straight());
            rules[k]
                .weights
                .iter()
                .enumerate()
                .map(|(p, w)| {
                    let at = evaluator.at(&ready, &points[k], p);
                    WeightedPoint {
                        triangle: t as u32,
                        at: solved.frame.outward(Point::new(at.x, at.y)),
                        weight: w * at.det * solved.frame.scale.powi(2),
                        unit: fields.superposition.unit_stress(solved, &at),
                    }
                })
                .collect::<Vec<_>>()
        })
        .collect()
}

impl UnitFields {
    /// The fields on the lattice with `divisions` of each side; `None` for a section in separate
    /// parts.
    #[must_use]
    pub fn new(solution: &Solution, divisions: usize) -> Option<Self> {
        let evaluator = Evaluator::new(solution)?;
        let superposition = Superposition::new(&evaluator);
        let lattice = Lattice::new(divisions);
        let table = PointTable::new(evaluator.solved.tables, reference(&lattice));
        let all: Vec<(Point, UnitStress)> = (0..evaluator.triangles())
            .into_par_iter()
            .flat_map_iter(|t| {
                let ready = evaluator.ready(t);
                (0..table.points.len())
                    .map(|p| {
                        let at = evaluator.at(&ready, &table, p);
                        let place = evaluator.solved.frame.outward(Point::new(at.x, at.y));
                        (place, superposition.unit_stress(evaluator.solved, &at))
                    })
                    .collect::<Vec<_>>()
            })
            .collect();
        let (positions, units) = all.into_iter().unzip();
        Some(Self {
            lattice,
            positions,
            units,
            superposition,
        })
    }

    /// The stress at every lattice point.
    #[must_use]
    pub fn stresses(&self, forces: &SectionForces) -> Vec<Stress> {
        self.units.iter().map(|u| u.under(forces)).collect()
    }

    /// Relative error in energy of the shear stress under `forces`: half the root of the gap over the
    /// root of the energy. Guaranteed; 0 without shear.
    #[must_use]
    pub fn energy_error(&self, forces: &SectionForces) -> f64 {
        self.superposition.energy_error(forces)
    }
}

impl Superposition {
    /// Integrates the unit fields and combines them.
    pub(crate) fn new(evaluator: &Evaluator) -> Self {
        let solved = evaluator.solved;
        let raw = unit_weights(solved);
        let tables = solved.tables;
        let rules = [&tables.straight.table.rule, &tables.curved.table.rule];
        let points = rules.map(|r| PointTable::new(tables, r.points.clone()));
        let centre = solved.shear.centre.map(|c| c.value);
        let parts: Vec<Integrals> = (0..evaluator.triangles())
            .into_par_iter()
            .map(|t| {
                let ready = evaluator.ready(t);
                let k = usize::from(!evaluator.map(t).is_straight());
                let mut sum = Integrals::default();
                for (p, w) in rules[k].weights.iter().enumerate() {
                    let at = evaluator.at(&ready, &points[k], p);
                    sum.add_point(&at, w * at.det, &raw, centre);
                }
                sum
            })
            .collect();
        let mut total = Integrals::default();
        for block in parts.chunks(64) {
            let mut sum = Integrals::default();
            for part in block {
                sum.add(part);
            }
            total.add(&sum);
        }
        let length = solved.frame.scale;
        // Resultants in the unit of the file: forces L² times, torques L³ times.
        let mut resultants = total.resultants;
        for (i, row) in resultants.iter_mut().enumerate() {
            let size = if i < 2 {
                length.powi(2)
            } else {
                length.powi(3)
            };
            for r in row.iter_mut() {
                *r *= size;
            }
        }
        if solved.warping_square <= 0.0 {
            resultants[3][3] = 1.0;
        }
        let mix = inverse(resultants);
        let mut weights = [[0.0; COUNT]; 4];
        for j in 0..4 {
            for i in 0..4 {
                for k in 0..COUNT {
                    weights[j][k] += raw[i][k] * mix[i][j];
                }
            }
        }
        let transform = |m: [[f64; 4]; 4]| {
            let mut out = [[0.0; 4]; 4];
            for a in 0..4 {
                for b in 0..4 {
                    for i in 0..4 {
                        for j in 0..4 {
                            out[a][b] += mix[i][a] * m[i][j] * mix[j][b];
                        }
                    }
                }
            }
            out
        };
        let oscillation = weights.map(|w| {
            SOURCES
                .iter()
                .zip(solved.oscillation)
                .map(|(&problem, o)| w[problem].abs() * o)
                .sum()
        });
        Self {
            weights,
            energy: transform(total.energy),
            gap: transform(total.gap),
            oscillation,
        }
    }

    /// Unit stresses from the fields at a point.
    #[must_use]
    pub(crate) fn unit_stress(&self, solved: &Solved, at: &PointFields) -> UnitStress {
        let tau = self
            .weights
            .map(|w| (weighted(&w, &at.primal) + weighted(&w, &at.dual)) * 0.5);
        UnitStress {
            sigma: unit_sigma(solved, at),
            tau,
        }
    }

    /// The equilibrated shear stress under section forces: exactly balanced on every part of the
    /// section, and without a component normal to free edges.
    #[must_use]
    pub(crate) fn equilibrated(&self, at: &PointFields, f: &SectionForces) -> Vector {
        let [vx, vy, t, tw] = self.weights.map(|w| weighted(&w, &at.dual));
        vx * f.vx + vy * f.vy + t * f.t + tw * f.tw
    }

    /// Sums over the problems, one number each, for unit V_x, V_y, T, T_w: what the numbers measure in
    /// the solver's coordinates, over length² (forces) or length³ (torques).
    #[must_use]
    pub(crate) fn combined(&self, by_problem: &[f64; COUNT]) -> [f64; 4] {
        self.weights
            .map(|w| w.iter().zip(by_problem).map(|(w, x)| w * x).sum())
    }

    fn energy_error(&self, f: &SectionForces) -> f64 {
        let v = [f.vx, f.vy, f.t, f.tw];
        let form = |m: &[[f64; 4]; 4]| {
            let mut sum = 0.0;
            for i in 0..4 {
                for j in 0..4 {
                    sum += v[i] * m[i][j] * v[j];
                }
            }
            sum.max(0.0)
        };
        let energy = form(&self.energy).sqrt();
        if energy == 0.0 {
            return 0.0;
        }
        let lost: f64 = v
            .iter()
            .zip(self.oscillation)
            .map(|(v, o)| v.abs() * o)
            .sum();
        (0.5 * form(&self.gap).sqrt() + lost) / energy
    }
}

/// Normal stress of unit N, M_x, M_y, B.
fn unit_sigma(solved: &Solved, at: &PointFields) -> [f64; 4] {
    let m = &solved.moments;
    let length = solved.frame.scale;
    let e = at.ratio.e;
    let [about_y, about_x] = unit_flexure(m).map(|f| f[0] * at.x + f[1] * at.y);
    let warping = if solved.warping_square > 0.0 {
        at.omega / solved.warping_square
    } else {
        0.0
    };
    [
        e / m.area / length.powi(2),
        e * about_x / length.powi(3),
        e * about_y / length.powi(3),
        e * warping / length.powi(4),
    ]
}

/// Integrals of the raw unit fields.
#[derive(Clone, Copy, Debug, Default)]
struct Integrals {
    /// Row i: V_x, V_y, T, T_w of raw field j. `T_w = −∫τ·grad ω`, T what is left of the torque about
    /// the shear centre.
    resultants: [[f64; 4]; 4],
    energy: [[f64; 4]; 4],
    gap: [[f64; 4]; 4],
}

impl Integrals {
    fn add_point(&mut self, at: &PointFields, w: f64, raw: &[[f64; COUNT]; 4], centre: [f64; 2]) {
        let primal = raw.map(|r| weighted(&r, &at.primal));
        let dual = raw.map(|r| weighted(&r, &at.dual));
        let [gx, gy] = at.omega_gradient;
        for j in 0..4 {
            let mean = (primal[j] + dual[j]) * 0.5;
            let gap = primal[j] - dual[j];
            let warping = -(mean.x * gx + mean.y * gy);
            let torque = (at.x - centre[0]) * mean.y - (at.y - centre[1]) * mean.x;
            self.resultants[0][j] += w * mean.x;
            self.resultants[1][j] += w * mean.y;
            self.resultants[2][j] += w * (torque - warping);
            self.resultants[3][j] += w * warping;
            for i in 0..4 {
                let other = (primal[i] + dual[i]) * 0.5;
                self.energy[i][j] += w / at.ratio.g * mean.dot(other);
                self.gap[i][j] += w / at.ratio.g * gap.dot(primal[i] - dual[i]);
            }
        }
    }

    fn add(&mut self, o: &Self) {
        for i in 0..4 {
            for j in 0..4 {
                self.resultants[i][j] += o.resultants[i][j];
                self.energy[i][j] += o.energy[i][j];
                self.gap[i][j] += o.gap[i][j];
            }
        }
    }
}

/// Inverse of a matrix close to the identity, by Gauss and Jordan with column pivots.
fn inverse(m: [[f64; 4]; 4]) -> [[f64; 4]; 4] {
    let mut a = m;
    let mut b = [[0.0; 4]; 4];
    for (i, row) in b.iter_mut().enumerate() {
        row[i] = 1.0;
    }
    for k in 0..4 {
        let pivot = (k..4)
            .max_by(|&i, &j| a[i][k].abs().total_cmp(&a[j][k].abs()))
            .unwrap_or(k);
        a.swap(k, pivot);
        b.swap(k, pivot);
        let d = a[k][k];
        for j in 0..4 {
            a[k][j] /= d;
            b[k][j] /= d;
        }
        for i in 0..4 {
            if i != k {
                let f = a[i][k];
                for j in 0..4 {
                    a[i][j] -= f * a[k][j];
                    b[i][j] -= f * b[k][j];
                }
            }
        }
    }
    b
}
