//! Fields at the points of a lattice in every triangle, for figures and tables.

use rayon::prelude::*;
use sectile_mesh::{Point, Vector};

use crate::geometry::Geometry;
use crate::kernel::{Kernel, Source, particular_flux};
use crate::problem::{COUNT, FLEXURE_X, FLEXURE_Y, POISSON_X, POISSON_Y, TORSION, known_field};
use crate::property::shear::unit_flexure;
use crate::solution::{Solution, Solved};
use crate::space::Space;

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
/// section file. Shape `[triangles × lattice points]`, as for all that follow; empty for a section in
/// separate parts.
#[must_use]
pub fn positions(solution: &Solution, lattice: &Lattice) -> Vec<Point> {
    let Some(solved) = &solution.solved else {
        return Vec::new();
    };
    let geometry = Geometry::new(&solution.mesh, &solved.frame);
    (0..solution.mesh.triangles.len())
        .flat_map(|t| {
            let map = geometry.map(t);
            lattice.points.iter().map(move |l| {
                let at = map.at(l[1], l[2]);
                solved.frame.outward(Point::new(at.x, at.y))
            })
        })
        .collect()
}

/// Warping function ω about the shear centre, zero mean, length²: `u_z = θ′ ω`.
#[must_use]
pub fn warping(solution: &Solution, lattice: &Lattice) -> Vec<f64> {
    let Some(solved) = &solution.solved else {
        return Vec::new();
    };
    let (Source::Warping([mean, a, b]), square) =
        (solved.fields.sources[2], solved.frame.scale.powi(2))
    else {
        return Vec::new();
    };
    let basis = tabulate(solved, lattice);
    let geometry = Geometry::new(&solution.mesh, &solved.frame);
    let space = Space::new(&solution.mesh, solution.order);
    let mut nodes = Vec::new();
    let mut out = Vec::with_capacity(solution.mesh.triangles.len() * lattice.points.len());
    for t in 0..solution.mesh.triangles.len() {
        space.fill_nodes(t, &mut nodes);
        let map = geometry.map(t);
        for (l, functions) in lattice.points.iter().zip(&basis) {
            let at = map.at(l[1], l[2]);
            let omega: f64 = nodes
                .iter()
                .zip(functions)
                .map(|(&i, f)| solved.fields.torsion[i] * f[0])
                .sum();
            out.push((omega - mean - a * at.x - b * at.y) * square);
        }
    }
    out
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
    let factor = solved.poisson / (1.0 + solved.poisson);
    let torsion = solved.shear.torsion.value;
    let mut weights = [0.0; COUNT];
    let size = match force {
        UnitForce::Torque => {
            weights[TORSION] = 1.0 / torsion;
            solved.frame.scale.powi(3)
        }
        UnitForce::ShearX | UnitForce::ShearY => {
            let i = usize::from(force == UnitForce::ShearY);
            let f = unit_flexure(&solved.moments)[i];
            weights[FLEXURE_X] = f[0];
            weights[FLEXURE_Y] = f[1];
            weights[POISSON_X] = factor * f[0];
            weights[POISSON_Y] = factor * f[1];
            weights[TORSION] = -solved.shear.twist[i] / torsion;
            solved.frame.scale.powi(2)
        }
    };
    for w in &mut weights {
        *w /= size;
    }

    let geometry = Geometry::new(&solution.mesh, &solved.frame);
    let space = Space::new(&solution.mesh, solution.order);
    let kernel = Kernel {
        geometry: &geometry,
        space,
        tables: &solved.tables,
    };
    let basis = tabulate(solved, lattice);
    let fields = [0, 1].map(|k| {
        lattice
            .points
            .iter()
            .map(|l| solved.tables.divergence[k].evaluate(l[1], l[2]))
            .collect::<Vec<_>>()
    });
    let flexure = [(0, Source::X, FLEXURE_X), (1, Source::Y, FLEXURE_Y)];
    (0..solution.mesh.triangles.len())
        .into_par_iter()
        .flat_map_iter(|t| {
            let mut nodes = Vec::new();
            space.fill_nodes(t, &mut nodes);
            let map = geometry.map(t);
            let modes = flexure.map(|(_, source, _)| kernel.modes_of(t, source));
            let fields = &fields[usize::from(!map.is_straight())];
            let mut out = Vec::with_capacity(lattice.points.len());
            for (p, l) in lattice.points.iter().enumerate() {
                let at = map.at(l[1], l[2]);
                let mut primal = [0.0; 2];
                let mut dual = [0.0; 2];
                for (&i, f) in nodes.iter().zip(&basis[p]) {
                    let (u, phi) = (&solved.fields.primal[i], &solved.fields.dual[i]);
                    for (k, w) in weights.iter().enumerate() {
                        for c in 0..2 {
                            primal[c] += w * u[k] * f[1 + c];
                            dual[c] += w * phi[k] * f[1 + c];
                        }
                    }
                }
                let g = at.gradient(primal[0], primal[1]);
                let c = at.gradient(dual[0], dual[1]);
                let mut tau_p = Vector::new(g[0], g[1]);
                let mut tau_d = Vector::new(c[1], -c[0]);
                for (k, w) in weights.iter().enumerate() {
                    let h = known_field(k, at.x, at.y);
                    tau_p += Vector::new(h[0], h[1]) * *w;
                }
                for (k, _, problem) in flexure {
                    let flux = &solved.fields.fluxes[k][t];
                    let s = at.piola(particular_flux([l[1], l[2]], flux, &modes[k], &fields[p]));
                    tau_d += Vector::new(s[0], s[1]) * weights[problem];
                }
                out.push([tau_p, tau_d]);
            }
            out
        })
        .collect()
}

/// Node functions `[N, ∂N/∂ξ, ∂N/∂η]` at the points of a lattice.
fn tabulate(solved: &Solved, lattice: &Lattice) -> Vec<Vec<[f64; 3]>> {
    lattice
        .points
        .iter()
        .map(|l| solved.tables.basis.evaluate(l[1], l[2]))
        .collect()
}
