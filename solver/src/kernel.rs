//! Element integrals: stiffness, loads, and the energies of the finished fields.

use rayon::prelude::*;
use sectile_mesh::map::MapPoint;

use crate::geometry::Geometry;
use crate::mixture::Ratio;
use crate::problem::{COUNT, PAIRS, SOURCES, known_field};
use crate::space::Space;
use crate::tables::{Tables, Tabulated, source_modes, source_total};

/// Values at nodes of the six problems, padded to the width of vector registers.
pub type NodeValues = [f64; 8];

/// A source of a problem: `f` at a point of the section, e the piece's Young's modulus over the
/// reference's.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Source {
    /// `f = e x`.
    X,
    /// `f = e y`.
    Y,
    /// `f = e (ω − c₀ − c₁ x − c₂ y)`, ω the primal torsion field.
    Warping([f64; 3]),
}

/// The element integrals of one mesh.
#[derive(Clone, Copy, Debug)]
pub struct Kernel<'a> {
    /// The mesh in the solver's coordinates.
    pub geometry: &'a Geometry<'a>,
    /// Its nodes.
    pub space: Space<'a>,
    /// Tables of the order.
    pub tables: &'a Tables,
    /// Moduli over the reference's, by piece.
    pub ratios: &'a [Ratio],
}

/// A problem to be loaded: its source, if it has one, with the fluxes of the spanning tree.
#[derive(Clone, Copy, Debug)]
pub struct Term<'a> {
    /// Which problem.
    pub problem: usize,
    /// Its source and the outward fluxes through the sides of each triangle.
    pub source: Option<(Source, &'a [[f64; 3]])>,
}

/// Loads of several problems on every triangle, shape `[triangle × local × problem]`.
#[derive(Clone, Debug, Default)]
pub struct Loads {
    /// `∫ (f v − g h·grad v)`.
    pub primal: Vec<f64>,
    /// `∫ (h − τ₀/g)·curl v`.
    pub dual: Vec<f64>,
}

/// Integrals over one triangle, or their sum over all.
#[derive(Clone, Copy, Debug)]
pub struct Energies {
    /// `∫ τ_p·τ_p / g` by [`PAIRS`].
    pub primal: [f64; PAIRS.len()],
    /// `∫ τ*·τ* / g` by [`PAIRS`].
    pub dual: [f64; PAIRS.len()],
    /// `∫ (τ_p − τ*)·(τ_p − τ*) / g` by [`PAIRS`].
    pub gap: [f64; PAIRS.len()],
    /// `∫ ω f` by [`SOURCES`], ω the primal torsion field.
    pub warping_moment: [f64; 3],
    /// `∫ (x τ*_y − y τ*_x)` by [`SOURCES`].
    pub dual_torque: [f64; 3],
    /// `∫ f²/e` of the restrained-warping source.
    pub source_square: f64,
    /// By [`SOURCES`]: the square of a bound on the energy of what the projection of the source on
    /// curved triangles leaves out, see [`Kernel::energies`].
    pub oscillation: [f64; 3],
}

impl Default for Energies {
    fn default() -> Self {
        Self {
            primal: [0.0; PAIRS.len()],
            dual: [0.0; PAIRS.len()],
            gap: [0.0; PAIRS.len()],
            warping_moment: [0.0; 3],
            dual_torque: [0.0; 3],
            source_square: 0.0,
            oscillation: [0.0; 3],
        }
    }
}

impl Energies {
    /// Adds another triangle's.
    pub fn add(&mut self, other: &Self) {
        let lists = [
            (&mut self.primal, &other.primal),
            (&mut self.dual, &other.dual),
            (&mut self.gap, &other.gap),
        ];
        for (to, from) in lists {
            for (a, b) in to.iter_mut().zip(from) {
                *a += b;
            }
        }
        for k in 0..3 {
            self.warping_moment[k] += other.warping_moment[k];
            self.dual_torque[k] += other.dual_torque[k];
            self.oscillation[k] += other.oscillation[k];
        }
        self.source_square += other.source_square;
    }

    /// Squared gap of each problem.
    #[must_use]
    pub fn gaps(&self) -> [f64; COUNT] {
        std::array::from_fn(|k| self.gap[crate::problem::pair(k, k)])
    }
}

/// Buffers of one thread.
#[derive(Default)]
struct Workspace {
    nodes: Vec<usize>,
    maps: Vec<MapPoint>,
    source: Vec<f64>,
    modes: Vec<f64>,
    projected: [Vec<f64>; 3],
}

impl<'a> Kernel<'a> {
    fn triangles(&self) -> usize {
        self.space.mesh.triangles.len()
    }

    /// The moduli of triangle `t` over the reference's.
    #[must_use]
    pub fn ratio(&self, t: usize) -> Ratio {
        self.ratios[self.space.mesh.piece[t] as usize]
    }

    fn tabulated(&self, straight: bool) -> &'a Tabulated {
        if straight {
            &self.tables.straight
        } else {
            &self.tables.curved
        }
    }

    /// Maps of triangle `t` at the points of its table.
    fn enter(&self, t: usize, work: &mut Workspace) -> &'a Tabulated {
        let map = self.geometry.map(t);
        let tabulated = self.tabulated(map.is_straight());
        map.fill(&tabulated.table.rule.points, &mut work.maps);
        self.space.fill_nodes(t, &mut work.nodes);
        tabulated
    }

    /// Stiffness of the curved triangles, `None` for straight ones (see [`Self::stiffness`]).
    #[must_use]
    pub fn curved_stiffness(&self) -> Vec<Option<Vec<f64>>> {
        (0..self.triangles())
            .into_par_iter()
            .map(|t| {
                let map = self.geometry.map(t);
                if map.is_straight() {
                    return None;
                }
                let table = &self.tables.curved.table;
                let n = table.functions;
                let mut k = vec![0.0; n * n];
                let mut gradients = vec![[0.0; 2]; n];
                for (q, (p, w)) in table
                    .rule
                    .points
                    .iter()
                    .zip(&table.rule.weights)
                    .enumerate()
                {
                    let at = map.at(p[0], p[1]);
                    for (i, g) in gradients.iter_mut().enumerate() {
                        *g = at.gradient(table.d_xi[q * n + i], table.d_eta[q * n + i]);
                    }
                    let w = w * at.det;
                    for i in 0..n {
                        for j in 0..=i {
                            k[i * n + j] += w
                                * (gradients[i][0] * gradients[j][0]
                                    + gradients[i][1] * gradients[j][1]);
                        }
                    }
                }
                for i in 0..n {
                    for j in 0..i {
                        k[j * n + i] = k[i * n + j];
                    }
                }
                balance(&mut k, n);
                Some(k)
            })
            .collect()
    }

    /// `factor ∫ grad N_i · grad N_j` of triangle `t` into `out`, shape `[local × local]`. Since curls
    /// are turned gradients, it serves both operators: with g for the primal, 1/g for the dual.
    pub fn stiffness(&self, t: usize, curved: &[Option<Vec<f64>>], factor: f64, out: &mut [f64]) {
        if let Some(k) = &curved[t] {
            for (o, k) in out.iter_mut().zip(k) {
                *o = factor * k;
            }
            return;
        }
        let [a, b, c, d] = self.geometry.map(t).at(0.0, 0.0).jacobian;
        let det = (a * d - b * c) / factor;
        let (xx, xy, yy) = (
            (b * b + d * d) / det,
            -(a * b + c * d) / det,
            (a * a + c * c) / det,
        );
        let [kxx, kxy, kyy] = &self.tables.stiffness;
        for (((o, p), q), r) in out.iter_mut().zip(kxx).zip(kxy).zip(kyy) {
            *o = xx * p + xy * q + yy * r;
        }
        balance(out, self.space.local_nodes());
    }

    /// Values of a source at the points of a triangle of modulus ratio `e`, times the determinant.
    fn fill_source(
        &self,
        source: Source,
        e: f64,
        table: &crate::element::table::Table,
        torsion: Option<&[f64]>,
        work: &mut Workspace,
    ) {
        work.source.clear();
        let n = table.functions;
        for (q, at) in work.maps.iter().enumerate() {
            let f = match source {
                Source::X => at.x,
                Source::Y => at.y,
                Source::Warping([c0, c1, c2]) => {
                    let values = &table.value[q * n..(q + 1) * n];
                    let omega = torsion.map_or(0.0, |u| {
                        work.nodes.iter().zip(values).map(|(&i, v)| u[i] * v).sum()
                    });
                    omega - c0 - c1 * at.x - c2 * at.y
                }
            };
            work.source.push(e * f * at.det);
        }
    }

    /// `∫ f` over every triangle; `torsion`: node values of ω for a warping source.
    #[must_use]
    pub fn source_integrals(&self, source: Source, torsion: Option<&[f64]>) -> Vec<f64> {
        (0..self.triangles())
            .into_par_iter()
            .map_init(Workspace::default, |work, t| {
                let tabulated = self.enter(t, work);
                self.fill_source(source, self.ratio(t).e, &tabulated.table, torsion, work);
                source_modes(&tabulated.table, &work.source, &mut work.modes);
                source_total(&work.modes)
            })
            .collect()
    }

    /// Coefficients of the reference source `f·det` of one triangle in the orthonormal polynomials.
    #[must_use]
    pub fn modes_of(&self, t: usize, source: Source, torsion: Option<&[f64]>) -> Vec<f64> {
        let mut work = Workspace::default();
        let tabulated = self.enter(t, &mut work);
        self.fill_source(
            source,
            self.ratio(t).e,
            &tabulated.table,
            torsion,
            &mut work,
        );
        source_modes(&tabulated.table, &work.source, &mut work.modes);
        work.modes
    }

    /// `∫ e {ω, ω x, ω y, ω²}` of a node field.
    #[must_use]
    pub fn moments(&self, field: &[f64]) -> [f64; 4] {
        let parts: Vec<[f64; 4]> = (0..self.triangles())
            .into_par_iter()
            .map_init(Workspace::default, |work, t| {
                let table = &self.enter(t, work).table;
                let n = table.functions;
                let e = self.ratio(t).e;
                let mut sum = [0.0; 4];
                for (q, at) in work.maps.iter().enumerate() {
                    let values = &table.value[q * n..(q + 1) * n];
                    let u: f64 = work
                        .nodes
                        .iter()
                        .zip(values)
                        .map(|(&i, v)| field[i] * v)
                        .sum();
                    let w = e * table.rule.weights[q] * at.det;
                    sum[0] += w * u;
                    sum[1] += w * u * at.x;
                    sum[2] += w * u * at.y;
                    sum[3] += w * u * u;
                }
                sum
            })
            .collect();
        parts.iter().fold([0.0; 4], |mut s, p| {
            for (a, b) in s.iter_mut().zip(p) {
                *a += b;
            }
            s
        })
    }

    /// `e w det` at the points of every triangle's table, one triangle after the other: what
    /// [`Self::mass_times`] takes, so that the maps are not made again for every field.
    #[must_use]
    pub fn mass_weights(&self) -> Vec<f64> {
        let mut work = Workspace::default();
        let mut out = Vec::new();
        for t in 0..self.triangles() {
            let weights = &self.enter(t, &mut work).table.rule.weights;
            let e = self.ratio(t).e;
            out.extend(work.maps.iter().zip(weights).map(|(at, w)| e * w * at.det));
        }
        out
    }

    /// `∫ e u v` against every node function: the mass matrix times a node field, over the nodes.
    /// `weights`: those of [`Self::mass_weights`].
    #[must_use]
    pub fn mass_times(&self, weights: &[f64], field: &[f64]) -> Vec<f64> {
        let mut out = vec![0.0; field.len()];
        let mut nodes = Vec::new();
        let mut rest = weights;
        for t in 0..self.triangles() {
            let table = &self.tabulated(self.geometry.map(t).is_straight()).table;
            self.space.fill_nodes(t, &mut nodes);
            let n = table.functions;
            let (own, others) = rest.split_at(table.rule.weights.len());
            rest = others;
            for (values, weight) in table.value.chunks_exact(n).zip(own) {
                let u: f64 = nodes.iter().zip(values).map(|(&i, v)| field[i] * v).sum();
                let w = weight * u;
                for (&i, v) in nodes.iter().zip(values) {
                    out[i] += w * v;
                }
            }
        }
        out
    }

    /// Loads of several problems on every triangle, in one pass over the triangles.
    #[must_use]
    pub fn loads<const N: usize>(&self, terms: &[Term; N], torsion: Option<&[f64]>) -> Loads {
        let n = self.space.local_nodes();
        let mut loads = Loads {
            primal: vec![0.0; N * n * self.triangles()],
            dual: vec![0.0; N * n * self.triangles()],
        };
        loads
            .primal
            .par_chunks_mut(N * n)
            .zip(loads.dual.par_chunks_mut(N * n))
            .enumerate()
            .for_each_init(
                || {
                    (
                        Workspace::default(),
                        vec![Vec::new(); N],
                        vec![Vec::new(); N],
                    )
                },
                |(work, values, modes), (t, (primal, dual))| {
                    let tabulated = self.enter(t, work);
                    let table = &tabulated.table;
                    let ratio = self.ratio(t);
                    for k in 0..N {
                        if let Some((source, _)) = terms[k].source {
                            self.fill_source(source, ratio.e, table, torsion, work);
                            source_modes(table, &work.source, &mut modes[k]);
                            std::mem::swap(&mut values[k], &mut work.source);
                        }
                    }
                    for (q, at) in work.maps.iter().enumerate() {
                        let w = table.rule.weights[q];
                        // By problem: against v, against the reference gradients of v (primal, dual).
                        let mut f = [0.0; N];
                        let mut p = [[0.0; N]; 2];
                        let mut d = [[0.0; N]; 2];
                        for k in 0..N {
                            let mut a = known_field(terms[k].problem, at.x, at.y);
                            if let Some((_, flux)) = terms[k].source {
                                f[k] = w * values[k][q];
                                let s = self.particular(tabulated, q, &flux[t], &modes[k]);
                                let s = at.piola(s);
                                a = [a[0] - s[0] / ratio.g, a[1] - s[1] / ratio.g];
                            } else {
                                let g = pull_back(at, a, w * ratio.g);
                                p[0][k] = -g[0];
                                p[1][k] = -g[1];
                            }
                            // a·curl v = (−a_y, a_x)·grad v.
                            let g = pull_back(at, [-a[1], a[0]], w);
                            d[0][k] = g[0];
                            d[1][k] = g[1];
                        }
                        for i in 0..n {
                            let v = table.value[q * n + i];
                            let (x, y) = (table.d_xi[q * n + i], table.d_eta[q * n + i]);
                            let primal = &mut primal[i * N..(i + 1) * N];
                            let dual = &mut dual[i * N..(i + 1) * N];
                            for k in 0..N {
                                primal[k] += f[k] * v + p[0][k] * x + p[1][k] * y;
                                dual[k] += d[0][k] * x + d[1][k] * y;
                            }
                        }
                    }
                },
            );
        loads
    }

    /// τ̂₀ at a point of the table: fluxes through the sides and the fields of the source's shape.
    fn particular(
        &self,
        tabulated: &Tabulated,
        q: usize,
        flux: &[f64; 3],
        modes: &[f64],
    ) -> [f64; 2] {
        let table = &tabulated.table;
        let fields = &tabulated.fields[q * table.modes..(q + 1) * table.modes];
        particular_flux(table.rule.points[q], flux, modes, fields)
    }

    /// The energies of the finished fields, triangle by triangle.
    ///
    /// On curved triangles the source is projected to polynomials on the reference triangle, `f̂ =
    /// Πf̂ + r`. A field with divergence `−r` and no flux through the sides exists whose energy is at
    /// most `(√2/π)² max(σ_max(F)²/det) ∫ r²` (Payne & Weinberger, "An optimal Poincaré inequality
    /// for convex domains", Arch. Rational Mech. Anal. 5 (1960) 286–292, on the reference triangle of
    /// diameter √2): its root is the oscillation that the bounds add.
    #[must_use]
    pub fn energies(
        &self,
        primal: &[NodeValues],
        dual: &[NodeValues],
        sources: &[Source; 3],
        fluxes: &[Vec<[f64; 3]>; 3],
        torsion: &[f64],
    ) -> Vec<Energies> {
        (0..self.triangles())
            .into_par_iter()
            .map_init(Workspace::default, |work, t| {
                self.triangle_energies(t, primal, dual, sources, fluxes, torsion, work)
            })
            .collect()
    }

    fn triangle_energies(
        &self,
        t: usize,
        primal: &[NodeValues],
        dual: &[NodeValues],
        sources: &[Source; 3],
        fluxes: &[Vec<[f64; 3]>; 3],
        torsion: &[f64],
        work: &mut Workspace,
    ) -> Energies {
        let tabulated = self.enter(t, work);
        let table = &tabulated.table;
        let n = table.functions;
        let Ratio { e, g } = self.ratio(t);
        let mut out = Energies::default();
        let straight = self.geometry.map(t).is_straight();
        let mut values: [Vec<f64>; 3] = Default::default();
        for k in 0..3 {
            self.fill_source(sources[k], e, table, Some(torsion), work);
            source_modes(table, &work.source, &mut work.modes);
            std::mem::swap(&mut work.projected[k], &mut work.modes);
            values[k].clone_from(&work.source);
        }
        if !straight {
            let stretch = work
                .maps
                .iter()
                .map(MapPoint::piola_stretch)
                .fold(0.0, f64::max);
            let constant = 2.0 / (std::f64::consts::PI * std::f64::consts::PI) * stretch;
            for k in 0..3 {
                let mut square = 0.0;
                for (q, w) in table.rule.weights.iter().enumerate() {
                    let mode = &table.mode[q * table.modes..(q + 1) * table.modes];
                    let r = values[k][q]
                        - mode
                            .iter()
                            .zip(&work.projected[k])
                            .map(|(m, c)| m * c)
                            .sum::<f64>();
                    square += w * r * r;
                }
                out.oscillation[k] = constant * square / g;
            }
        }
        for (q, at) in work.maps.iter().enumerate() {
            let mut sums = [[0.0; 8]; 5];
            let d_xi = &table.d_xi[q * n..(q + 1) * n];
            let d_eta = &table.d_eta[q * n..(q + 1) * n];
            let value = &table.value[q * n..(q + 1) * n];
            for (i, &node) in work.nodes.iter().enumerate() {
                let (u, p) = (&primal[node], &dual[node]);
                for k in 0..8 {
                    sums[0][k] += d_xi[i] * u[k];
                    sums[1][k] += d_eta[i] * u[k];
                    sums[2][k] += d_xi[i] * p[k];
                    sums[3][k] += d_eta[i] * p[k];
                }
                sums[4][0] += value[i] * torsion[node];
            }
            let mut tau_p = [[0.0; 2]; COUNT];
            let mut tau_d = [[0.0; 2]; COUNT];
            for k in 0..COUNT {
                let h = known_field(k, at.x, at.y);
                let u = at.gradient(sums[0][k], sums[1][k]);
                tau_p[k] = [g * (u[0] + h[0]), g * (u[1] + h[1])];
                let c = at.gradient(sums[2][k], sums[3][k]);
                tau_d[k] = [c[1], -c[0]];
            }
            let w = table.rule.weights[q] * at.det;
            for (k, &problem) in SOURCES.iter().enumerate() {
                let s = self.particular(tabulated, q, &fluxes[k][t], &work.projected[k]);
                let s = at.piola(s);
                let tau = &mut tau_d[problem];
                tau[0] += s[0];
                tau[1] += s[1];
                out.warping_moment[k] += table.rule.weights[q] * values[k][q] * sums[4][0];
                out.dual_torque[k] += w * (at.x * tau[1] - at.y * tau[0]);
            }
            out.source_square += table.rule.weights[q] * values[2][q] * values[2][q] / (e * at.det);
            let w = w / g;
            for (i, &(a, b)) in PAIRS.iter().enumerate() {
                let (pa, pb, da, db) = (tau_p[a], tau_p[b], tau_d[a], tau_d[b]);
                out.primal[i] += w * (pa[0] * pb[0] + pa[1] * pb[1]);
                out.dual[i] += w * (da[0] * db[0] + da[1] * db[1]);
                out.gap[i] +=
                    w * ((pa[0] - da[0]) * (pb[0] - db[0]) + (pa[1] - da[1]) * (pb[1] - db[1]));
            }
        }
        out
    }
}

/// `w det F⁻¹ g`: a field against the reference derivatives of the node functions.
fn pull_back(at: &MapPoint, g: [f64; 2], w: f64) -> [f64; 2] {
    let [a, b, c, d] = at.jacobian;
    [w * (d * g[0] - b * g[1]), w * (a * g[1] - c * g[0])]
}

/// τ̂₀ at a reference point: the lowest-order fluxes `Σ F_k (ξ − ξ_k)` and `−Σ c_m σ_m`.
#[must_use]
pub fn particular_flux(
    [xi, eta]: [f64; 2],
    flux: &[f64; 3],
    modes: &[f64],
    fields: &[[f64; 2]],
) -> [f64; 2] {
    let total = flux[0] + flux[1] + flux[2];
    let mut s = [total * xi - flux[1], total * eta - flux[2]];
    for (c, f) in modes.iter().zip(fields) {
        s[0] -= c * f[0];
        s[1] -= c * f[1];
    }
    s
}

/// Sets each diagonal to minus the rest of its row, so that constants carry no stress at all: the
/// rounding of the entries would act like springs to the ground.
fn balance(k: &mut [f64], n: usize) {
    for i in 0..n {
        let row = &mut k[i * n..(i + 1) * n];
        row[i] = 0.0;
        row[i] = -row.iter().sum::<f64>();
    }
}
