//! One turn of the adaptive loop: all problems and their duals on one mesh.

use std::time::Instant;

use rayon::join;
use sectile_mesh::mesh::Mesh;

use crate::factor::Factor;
use crate::geometry::{Frame, Geometry};
use crate::kernel::{Energies, Kernel, NodeValues, Source, Term};
use crate::mixture::Ratio;
use crate::ordering::elimination_order;
use crate::problem::{COUNT, FLEXURE_X, FLEXURE_Y, POISSON_X, POISSON_Y, RESTRAINED, TORSION};
use crate::property::area::AreaMoments;
use crate::solution::{SolveError, Timings};
use crate::space::Space;
use crate::system::{Condition, System};
use crate::tables::Tables;
use crate::tree_flux::SpanningTree;

/// The fields of all problems on one mesh, in the solver's coordinates.
#[derive(Clone, Debug)]
pub struct Fields {
    /// Node values of the primal fields `u`.
    pub primal: Vec<NodeValues>,
    /// Node values of the dual stress functions `φ`.
    pub dual: Vec<NodeValues>,
    /// The sources.
    pub sources: [Source; 3],
    /// Outward fluxes through the sides of each triangle, by source.
    pub fluxes: [Vec<[f64; 3]>; 3],
    /// The warping function: node values of the primal torsion field.
    pub torsion: Vec<f64>,
}

/// What a level yields.
#[derive(Debug)]
pub struct LevelResult {
    /// The fields.
    pub fields: Fields,
    /// Energies by triangle.
    pub local: Vec<Energies>,
    /// Their sum.
    pub total: Energies,
    /// Unknowns of the larger system.
    pub unknowns: usize,
    /// An estimate, halved for safety, of the least eigenvalue of the section's free membrane; only
    /// where it was asked for.
    pub eigenvalue: Option<f64>,
}

/// Unknowns that the larger of the two systems has on a mesh.
#[must_use]
pub fn unknowns(mesh: &Mesh, order: usize) -> usize {
    Space::new(mesh, order).nodes().saturating_sub(1)
}

/// Runs `f` and adds its seconds to `clock`.
fn timed<T>(clock: &mut f64, f: impl FnOnce() -> T) -> T {
    let start = Instant::now();
    let out = f();
    *clock += start.elapsed().as_secs_f64();
    out
}

/// Solves every problem on `mesh`; `m` are the area's weighted moments in the solver's coordinates,
/// `ratios` the moduli over the reference's by piece.
///
/// # Errors
/// If memory runs out or a factorisation fails.
pub fn solve_level(
    mesh: &Mesh,
    frame: &Frame,
    m: &AreaMoments,
    ratios: &[Ratio],
    tables: &Tables,
    want_eigenvalue: bool,
    clock: &mut Timings,
) -> Result<LevelResult, SolveError> {
    let geometry = Geometry::new(mesh, frame);
    let space = Space::new(mesh, tables.basis.order);
    let kernel = Kernel {
        geometry: &geometry,
        space,
        tables,
        ratios,
    };
    let order = timed(&mut clock.order, || elimination_order(mesh))?;
    let (free, tied, tree) = timed(&mut clock.assemble, || {
        let (free, (tied, tree)) = join(
            || System::new(&space, Condition::FreeUpToConstant, &order),
            || {
                (
                    System::new(&space, Condition::ConstantOnLoops, &order),
                    SpanningTree::new(mesh, |s| geometry.chord(s)),
                )
            },
        );
        (free, tied, tree)
    });

    // The five problems whose sources are known beforehand.
    let flexure_flux = timed(&mut clock.bounds, || {
        [Source::X, Source::Y].map(|s| tree.route(mesh, &kernel.source_integrals(s, None)))
    });
    let (matrices, mut rhs) = timed(&mut clock.assemble, || {
        let curved = kernel.curved_stiffness();
        let matrices = join(
            || {
                free.assemble(&space, |t, k| {
                    kernel.stiffness(t, &curved, kernel.ratio(t).g, k);
                })
            },
            || {
                tied.assemble(&space, |t, k| {
                    kernel.stiffness(t, &curved, 1.0 / kernel.ratio(t).g, k);
                })
            },
        );
        let [flux_x, flux_y] = &flexure_flux;
        let plain = |problem| Term {
            problem,
            source: None,
        };
        let terms = [
            plain(TORSION),
            Term {
                problem: FLEXURE_X,
                source: Some((Source::X, flux_x)),
            },
            Term {
                problem: FLEXURE_Y,
                source: Some((Source::Y, flux_y)),
            },
            plain(POISSON_X),
            plain(POISSON_Y),
        ];
        let loads = kernel.loads(&terms, None);
        let rhs = join(
            || free.gather(&space, &loads.primal, terms.len()),
            || tied.gather(&space, &loads.dual, terms.len()),
        );
        (matrices, rhs)
    });
    let (free_factor, tied_factor) = timed(&mut clock.factor, || {
        let (a, b) = join(|| Factor::new(&matrices.0), || Factor::new(&matrices.1));
        Ok::<_, SolveError>((a?, b?))
    })?;
    timed(&mut clock.solve, || {
        let (a, b) = join(
            || free_factor.solve(&mut rhs.0),
            || tied_factor.solve(&mut rhs.1),
        );
        a.and(b)
    })?;

    let mut primal = vec![[0.0; 8]; space.nodes()];
    let mut dual = vec![[0.0; 8]; space.nodes()];
    let store = |to: &mut [NodeValues], problem: usize, system: &System, x: &[f64]| {
        for (row, value) in to.iter_mut().zip(system.expand(x)) {
            row[problem] = value;
        }
    };
    for problem in 0..RESTRAINED {
        store(&mut primal, problem, &free, &rhs.0[problem]);
        store(&mut dual, problem, &tied, &rhs.1[problem]);
    }

    // Restrained warping: its source is the warping function, less its mean and linear part.
    let torsion: Vec<f64> = primal.iter().map(|v| v[TORSION]).collect();
    let (source, flux, loads) = timed(&mut clock.bounds, || {
        let [mean, rx, ry, _] = kernel.moments(&torsion);
        let [a, b] = super::property::shear::unit_flexure(m).map(|f| f[0] * rx + f[1] * ry);
        // unit_flexure is the inverse of the inertia tensor: (a, b) are the slopes of the linear part.
        let source = Source::Warping([mean / m.area, a, b]);
        let flux = tree.route(mesh, &kernel.source_integrals(source, Some(&torsion)));
        let term = Term {
            problem: RESTRAINED,
            source: Some((source, &flux)),
        };
        let loads = kernel.loads(&[term], Some(&torsion));
        (source, flux, loads)
    });
    let mut restrained = (
        free.gather(&space, &loads.primal, 1),
        tied.gather(&space, &loads.dual, 1),
    );
    timed(&mut clock.solve, || {
        let (a, b) = join(
            || free_factor.solve(&mut restrained.0),
            || tied_factor.solve(&mut restrained.1),
        );
        a.and(b)
    })?;
    store(&mut primal, RESTRAINED, &free, &restrained.0[0]);
    store(&mut dual, RESTRAINED, &tied, &restrained.1[0]);

    let [flux_x, flux_y] = flexure_flux;
    let fields = Fields {
        primal,
        dual,
        sources: [Source::X, Source::Y, source],
        fluxes: [flux_x, flux_y, flux],
        torsion,
    };
    let (local, total) = timed(&mut clock.bounds, || {
        let local = kernel.energies(
            &fields.primal,
            &fields.dual,
            &fields.sources,
            &fields.fluxes,
            &fields.torsion,
        );
        let total = sum(&local);
        (local, total)
    });
    let eigenvalue = if want_eigenvalue {
        Some(timed(&mut clock.solve, || {
            least_eigenvalue(&kernel, &free, &free_factor, m.area)
        })?)
    } else {
        None
    };
    Ok(LevelResult {
        fields,
        local,
        total,
        unknowns: free.len.max(tied.len),
        eigenvalue,
    })
}

/// Sums in blocks, so that rounding grows with the root of the number of triangles only.
fn sum(local: &[Energies]) -> Energies {
    let mut total = Energies::default();
    for block in local.chunks(64) {
        let mut part = Energies::default();
        for e in block {
            part.add(e);
        }
        total.add(&part);
    }
    total
}

/// Half of the Rayleigh quotient after a few inverse iterations from a scattered start.
fn least_eigenvalue(
    kernel: &Kernel,
    system: &System,
    factor: &Factor,
    area: f64,
) -> Result<f64, SolveError> {
    let dot = |a: &[f64], b: &[f64]| a.iter().zip(b).map(|(p, q)| p * q).sum::<f64>();
    let ones = vec![1.0; kernel.space.nodes()];
    let weights = kernel.mass_weights();
    let mass_of_one = kernel.mass_times(&weights, &ones);
    // A fixed sequence without structure: the multiples of the golden ratio, modulo 1.
    let mut field: Vec<f64> = (0..kernel.space.nodes())
        .map(|i| (i as f64 * 0.618_033_988_749_894_9).fract() - 0.5)
        .collect();
    let mut quotient = f64::INFINITY;
    let mut last: Option<f64> = None;
    for _ in 0..ITERATIONS {
        let mean = dot(&field, &mass_of_one) / area;
        for v in &mut field {
            *v -= mean;
        }
        let load = kernel.mass_times(&weights, &field);
        let norm = dot(&field, &load);
        if let Some(energy) = last {
            quotient = energy / norm;
        }
        let mut column = vec![vec![0.0; system.len]];
        for (&u, &b) in system.unknown.iter().zip(&load) {
            if let Some(x) = column[0].get_mut(u as usize) {
                *x = b / norm.sqrt();
            }
        }
        let b = column[0].clone();
        factor.solve(&mut column)?;
        last = Some(dot(&b, &column[0]));
        field = system.expand(&column[0]);
    }
    Ok(0.5 * quotient)
}

/// Inverse iterations: the quotient is within a few per cent of the eigenvalue, and is halved.
const ITERATIONS: usize = 5;

impl LevelResult {
    /// Squared gap of every problem on every triangle.
    #[must_use]
    pub fn local_gaps(&self) -> Vec<[f64; COUNT]> {
        self.local.iter().map(Energies::gaps).collect()
    }
}

#[cfg(test)]
mod tests;
