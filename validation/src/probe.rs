//! The shear stress of a unit force at any point of a solved section.

use sectile_mesh::{Point, Vector};
use sectile_solver::sample::{Lattice, UnitForce, positions, shear_stress};
use sectile_solver::solution::Solution;

/// A sampled stress field: lattice points and their stresses.
#[derive(Clone, Debug)]
pub struct Sampled {
    lattice: Lattice,
    points: Vec<Point>,
    stress: Vec<Vector>,
}

impl Sampled {
    /// The field of `force`, `divisions` lattice cells along each triangle's side.
    #[must_use]
    pub fn new(solution: &Solution, force: UnitForce, divisions: usize) -> Self {
        let lattice = Lattice::new(divisions);
        Self {
            points: positions(solution, &lattice),
            stress: shear_stress(solution, force, &lattice),
            lattice,
        }
    }

    /// Every sampled point with its stress.
    pub fn values(&self) -> impl Iterator<Item = (Point, Vector)> + '_ {
        self.points.iter().copied().zip(self.stress.iter().copied())
    }

    /// The stress at `at`, linear between lattice points; outside the lattice (within the bulge of
    /// an arc) that of the nearest point.
    #[must_use]
    pub fn at(&self, at: Point) -> Vector {
        let n = self.lattice.points.len();
        let mut nearest = (f64::INFINITY, Vector::default());
        for (t, corner_points) in self.points.chunks(n).enumerate() {
            let stress = &self.stress[t * n..(t + 1) * n];
            for cell in &self.lattice.cells {
                let [a, b, c] = cell.map(|i| corner_points[i]);
                let whole = (b - a).cross(c - a);
                let weights = [
                    (b - at).cross(c - at) / whole,
                    (c - at).cross(a - at) / whole,
                    (a - at).cross(b - at) / whole,
                ];
                if weights.iter().all(|&w| w >= -1e-9) {
                    return cell
                        .iter()
                        .zip(weights)
                        .fold(Vector::default(), |sum, (&i, w)| sum + stress[i] * w);
                }
            }
            for (p, s) in corner_points.iter().zip(stress) {
                let d = p.distance(at);
                if d < nearest.0 {
                    nearest = (d, *s);
                }
            }
        }
        nearest.1
    }

    /// `∫f dA` over the section, `f` linear between lattice points.
    #[must_use]
    pub fn integral(&self, f: impl Fn(Point, Vector) -> f64) -> f64 {
        let n = self.lattice.points.len();
        let mut sum = 0.0;
        for (t, corner_points) in self.points.chunks(n).enumerate() {
            let stress = &self.stress[t * n..(t + 1) * n];
            for cell in &self.lattice.cells {
                let [a, b, c] = cell.map(|i| corner_points[i]);
                let mean = cell
                    .iter()
                    .map(|&i| f(corner_points[i], stress[i]))
                    .sum::<f64>()
                    / 3.0;
                sum += 0.5 * (b - a).cross(c - a) * mean;
            }
        }
        sum
    }
}
