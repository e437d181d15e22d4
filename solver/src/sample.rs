//! Fields at the points of a lattice in every triangle, for figures and tables.

use rayon::prelude::*;
use sectile_mesh::{Point, Vector};

use crate::evaluate::{Evaluator, PointFields, PointTable};
use crate::problem::{COUNT, FLEXURE_X, FLEXURE_Y, POISSON_X, POISSON_Y, RESTRAINED, TORSION};
use crate::property::shear::unit_flexure;
use crate::solution::{Solution, Solved};

/// The unit section force whose shear stress is asked for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum UnitForce {
    /// Unit torque about the shear centre.
    Torque,
    /// Unit shear force along x through the shear centre.
    ShearX,
    /// Unit shear force along y through the shear centre.
    ShearY,
}

/// The points `(i, j, n−i−j)/n` of a triangle, in rows: for `i` from 0 to `n`, `j` from 0 to `n − i`;
/// `i` belongs to vertex 1, `j` to vertex 2, the rest to vertex 0.
#[derive(Clone, Debug)]
pub struct Lattice {
    /// Divisions of a triangle's side.
    pub divisions: usize,
    /// Barycentric coordinates of the points.
    pub points: Vec<[f64; 3]>,
    /// The `n²` small triangles, anticlockwise, as indices into `points`.
    pub cells: Vec<[usize; 3]>,
}

impl Lattice {
    /// The lattice with `divisions ≥ 1` on each side.
    #[must_use]
    pub fn new(divisions: usize) -> Self {
        let n = divisions.max(1);
        let index = |i: usize, j: usize| i * (n + 1) - i * i.saturating_sub(1) / 2 + j;
        let mut points = Vec::new();
        let mut cells = Vec::new();
        for i in 0..=n {
            for j in 0..=n - i {
                let (a, b) = (i as f64 / n as f64, j as f64 / n as f64);
                points.push([(n - i - j) as f64 / n as f64, a, b]);
                if i + j < n {
                    cells.push([index(i, j), index(i + 1, j), index(i, j + 1)]);
                }
                if i + j + 1 < n {
                    cells.push([index(i + 1, j), index(i + 1, j + 1), index(i, j + 1)]);
                }
            }
        }
        Self {
            divisions: n,
            points,
            cells,
        }
    }
}

/// The lattice's points as reference coordinates.
#[must_use]
pub(crate) fn reference(lattice: &Lattice) -> Vec<[f64; 2]> {
    lattice.points.iter().map(|l| [l[1], l[2]]).collect()
}

/// `f` at the lattice points of every triangle.
fn everywhere<T: Send>(
    solution: &Solution,
    lattice: &Lattice,
    f: impl Fn(&Solved, &PointFields) -> T + Sync,
) -> Vec<T> {
    let Some(evaluator) = Evaluator::new(solution) else {
        return Vec::new();
    };
    let table = PointTable::new(evaluator.solved.tables, reference(lattice));
    (0..evaluator.triangles())
        .into_par_iter()
        .flat_map_iter(|t| {
            let ready = evaluator.ready(t);
            (0..table.points.len())
                .map(|p| f(evaluator.solved, &evaluator.at(&ready, &table, p)))
                .collect::<Vec<T>>()
        })
        .collect()
}

/// Lattice points of every triangle, true positions on curved triangles, in the axes and unit of the
/// section file. Shape `[triangles × lattice points]`, as for all that follow; empty for a section in
/// separate parts.
#[must_use]
pub fn positions(solution: &Solution, lattice: &Lattice) -> Vec<Point> {
    everywhere(solution, lattice, |solved, at| {
        solved.frame.outward(Point::new(at.x, at.y))
    })
}

/// Warping function ω about the shear centre, zero mean, length²: `u_z = θ′ ω`.
#[must_use]
pub fn warping(solution: &Solution, lattice: &Lattice) -> Vec<f64> {
    everywhere(solution, lattice, |solved, at| {
        at.omega * solved.frame.scale.powi(2)
    })
}

/// Shear stress of a unit force: per length² for a shear force, per length³ for a torque. The mean of
/// the primal and the dual field, whose error in energy is half the root of the gap.
///
/// A shear force acts through the shear centre: the part of torsion that the flexure field of zero
/// mean rotation contains is taken out.
#[must_use]
pub fn shear_stress(solution: &Solution, force: UnitForce, lattice: &Lattice) -> Vec<Vector> {
    both_fields(solution, force, lattice)
        .into_iter()
        .map(|[p, d]| (p + d) * 0.5)
        .collect()
}

/// The shear stress of a unit force as the primal field and as the equilibrated field, which has no
/// component normal to a free edge at all.
#[must_use]
pub fn both_fields(solution: &Solution, force: UnitForce, lattice: &Lattice) -> Vec<[Vector; 2]> {
    let Some(solved) = &solution.solved else {
        return Vec::new();
    };
    let [vx, vy, t, _] = unit_weights(solved);
    let weights = match force {
        UnitForce::Torque => t,
        UnitForce::ShearX => vx,
        UnitForce::ShearY => vy,
    };
    everywhere(solution, lattice, |_, at| {
        [weighted(&weights, &at.primal), weighted(&weights, &at.dual)]
    })
}

/// `Σ w_k τ_k`.
pub(crate) fn weighted(weights: &[f64; COUNT], fields: &[[f64; 2]; COUNT]) -> Vector {
    let mut out = Vector::default();
    for (w, f) in weights.iter().zip(fields) {
        out += Vector::new(w * f[0], w * f[1]);
    }
    out
}

/// The problems' weights in the shear stress of a unit V_x, V_y, T and T_w, in the unit of the file.
///
/// V through the shear centre: the flexure fields, with Poisson's part, less the torsion in them. T:
/// the torsion field over J. T_w: minus the field of restrained warping over C_w.
pub(crate) fn unit_weights(solved: &Solved) -> [[f64; COUNT]; 4] {
    let factor = solved.poisson_factor;
    let torsion = solved.shear.torsion.value;
    let length = solved.frame.scale;
    let flexure = unit_flexure(&solved.moments);
    let mut out = [[0.0; COUNT]; 4];
    for i in 0..2 {
        let f = flexure[i];
        out[i][FLEXURE_X] = f[0];
        out[i][FLEXURE_Y] = f[1];
        out[i][POISSON_X] = factor * f[0];
        out[i][POISSON_Y] = factor * f[1];
        out[i][TORSION] = -solved.shear.twist[i] / torsion;
        out[i] = out[i].map(|w| w / length.powi(2));
    }
    out[2][TORSION] = 1.0 / torsion / length.powi(3);
    if solved.warping_square > 0.0 {
        out[3][RESTRAINED] = -1.0 / solved.warping_square / length.powi(3);
    }
    out
}
