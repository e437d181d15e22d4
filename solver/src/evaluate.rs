//! The fields of all problems at chosen points of a triangle.

use sectile_mesh::map::TriangleMap;

use crate::geometry::Geometry;
use crate::kernel::{Kernel, Source, particular_flux};
use crate::mixture::Ratio;
use crate::problem::{COUNT, SOURCES, known_field};
use crate::solution::{Solution, Solved};
use crate::space::Space;
use crate::tables::Tables;

/// Node functions and fields of given divergence at reference points.
#[derive(Clone, Debug)]
pub struct PointTable {
    /// Reference coordinates (ξ, η).
    pub points: Vec<[f64; 2]>,
    /// `[N, ∂N/∂ξ, ∂N/∂η]`, by point and node function.
    functions: Vec<Vec<[f64; 3]>>,
    /// σ_m by point, for straight and for curved triangles.
    fields: [Vec<Vec<[f64; 2]>>; 2],
}

impl PointTable {
    /// The table of the points `(ξ, η)`.
    #[must_use]
    pub fn new(tables: &Tables, points: Vec<[f64; 2]>) -> Self {
        Self::of(tables, points, [true, true])
    }

    /// The table of one point for one kind of triangle.
    #[must_use]
    pub fn single(tables: &Tables, point: [f64; 2], ready: &Ready) -> Self {
        let straight = ready.map.is_straight();
        Self::of(tables, vec![point], [straight, !straight])
    }

    fn of(tables: &Tables, points: Vec<[f64; 2]>, kinds: [bool; 2]) -> Self {
        let functions = points
            .iter()
            .map(|p| tables.basis.evaluate(p[0], p[1]))
            .collect();
        let fields = [0, 1].map(|k| {
            let wanted = if kinds[k] { &points[..] } else { &[] };
            wanted
                .iter()
                .map(|p| tables.divergence[k].evaluate(p[0], p[1]))
                .collect()
        });
        Self {
            points,
            functions,
            fields,
        }
    }
}

/// All fields at a point, in the solver's coordinates.
#[derive(Clone, Copy, Debug)]
pub struct PointFields {
    /// Position relative to the centroid.
    pub x: f64,
    /// Position relative to the centroid.
    pub y: f64,
    /// Determinant of the triangle's map.
    pub det: f64,
    /// Moduli over the reference's.
    pub ratio: Ratio,
    /// Warping function about the shear centre, zero mean.
    pub omega: f64,
    /// Its gradient.
    pub omega_gradient: [f64; 2],
    /// `τ_p` by problem.
    pub primal: [[f64; 2]; COUNT],
    /// `τ*` by problem.
    pub dual: [[f64; 2]; COUNT],
}

/// Evaluates the fields of a solution.
#[derive(Debug)]
pub struct Evaluator<'a> {
    /// The fields' data.
    pub solved: &'a Solved,
    geometry: Geometry<'a>,
    space: Space<'a>,
}

/// A triangle made ready for evaluation.
#[derive(Clone, Debug)]
pub struct Ready {
    map: TriangleMap,
    nodes: Vec<usize>,
    modes: [Vec<f64>; 3],
    triangle: usize,
    ratio: Ratio,
}

impl<'a> Evaluator<'a> {
    /// `None` for a section in separate parts.
    #[must_use]
    pub fn new(solution: &'a Solution) -> Option<Self> {
        let solved = solution.solved.as_ref()?;
        Some(Self {
            solved,
            geometry: Geometry::new(&solution.mesh, &solved.frame),
            space: Space::new(&solution.mesh, solution.order),
        })
    }

    /// Number of triangles.
    #[must_use]
    pub fn triangles(&self) -> usize {
        self.space.mesh.triangles.len()
    }

    /// The map of a triangle in the solver's coordinates.
    #[must_use]
    pub fn map(&self, t: usize) -> TriangleMap {
        self.geometry.map(t)
    }

    /// Everything about a triangle that its points have in common.
    #[must_use]
    pub fn ready(&self, t: usize) -> Ready {
        let kernel = Kernel {
            geometry: &self.geometry,
            space: self.space,
            tables: self.solved.tables,
            ratios: &self.solved.ratios,
        };
        let mut nodes = Vec::new();
        self.space.fill_nodes(t, &mut nodes);
        let torsion = &self.solved.fields.torsion;
        Ready {
            map: self.geometry.map(t),
            nodes,
            modes: self
                .solved
                .fields
                .sources
                .map(|s| kernel.modes_of(t, s, Some(torsion))),
            triangle: t,
            ratio: kernel.ratio(t),
        }
    }

    /// All fields at point `p` of `table` in a triangle.
    #[must_use]
    pub fn at(&self, ready: &Ready, table: &PointTable, p: usize) -> PointFields {
        let [xi, eta] = table.points[p];
        let fields = &table.fields[usize::from(!ready.map.is_straight())][p];
        let at = ready.map.at(xi, eta);
        let data = &self.solved.fields;
        let mut gradient = [[0.0; 8]; 4];
        let mut omega = 0.0;
        for (&i, f) in ready.nodes.iter().zip(&table.functions[p]) {
            let (u, phi) = (&data.primal[i], &data.dual[i]);
            for k in 0..8 {
                gradient[0][k] += f[1] * u[k];
                gradient[1][k] += f[2] * u[k];
                gradient[2][k] += f[1] * phi[k];
                gradient[3][k] += f[2] * phi[k];
            }
            omega += f[0] * data.torsion[i];
        }
        let mut out = PointFields {
            x: at.x,
            y: at.y,
            det: at.det,
            ratio: ready.ratio,
            omega: 0.0,
            omega_gradient: [0.0; 2],
            primal: [[0.0; 2]; COUNT],
            dual: [[0.0; 2]; COUNT],
        };
        let modulus = ready.ratio.g;
        for k in 0..COUNT {
            let h = known_field(k, at.x, at.y);
            let g = at.gradient(gradient[0][k], gradient[1][k]);
            out.primal[k] = [modulus * (g[0] + h[0]), modulus * (g[1] + h[1])];
            let c = at.gradient(gradient[2][k], gradient[3][k]);
            out.dual[k] = [c[1], -c[0]];
        }
        for (k, &problem) in SOURCES.iter().enumerate() {
            let flux = &data.fluxes[k][ready.triangle];
            let s = at.piola(particular_flux([xi, eta], flux, &ready.modes[k], fields));
            out.dual[problem][0] += s[0];
            out.dual[problem][1] += s[1];
        }
        if let Source::Warping([mean, a, b]) = data.sources[2] {
            out.omega = omega - mean - a * at.x - b * at.y;
            let tau = out.primal[crate::problem::TORSION];
            // τ = g (grad ω + (−y, x)).
            out.omega_gradient = [tau[0] / modulus + at.y - a, tau[1] / modulus - at.x - b];
        }
        out
    }
}
