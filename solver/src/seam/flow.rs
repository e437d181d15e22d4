//! Shear flow through the throats of seams.
//!
//! ```text
//! q = ∫_throat τ*·n ds,   n from the first piece to the second, force per length of bar
//! ```
//!
//! τ* is the equilibrated field: `τ* = τ₀ + curl φ`, where τ₀ has a known flux through every side of
//! every triangle and `∫_a^b (curl φ)·n ds = φ(b) − φ(a)` along a side that leaves its triangle to the
//! left. So the flow is a sum of known numbers, without quadrature, and on each part that seams hold the
//! flows balance what the normal stress gains along the bar: `Σ q = −∫ ∂σ/∂z dA`, to rounding. Where that
//! balance alone settles a flow it is exact; where a closed slit leaves a choice it is as good as φ.

use std::collections::BTreeMap;

use sectile_mesh::domain::Domain;
use sectile_mesh::domain::seam::Seam;
use sectile_mesh::mesh::{Mesh, NONE};

use crate::problem::{COUNT, SOURCES};
use crate::solution::{Solution, Solved};
use crate::stress::field::Superposition;
use crate::stress::forces::SectionForces;

/// The flows through the throats of a domain's seams.
#[derive(Clone, Debug, PartialEq)]
pub struct SeamFlows {
    /// By seam, for unit V_x, V_y (1/length) and T, T_w (1/length²).
    units: Vec<[f64; 4]>,
}

impl SeamFlows {
    /// The flows through the seams of `domain`, in their order; `None` for a section in separate parts.
    #[must_use]
    pub fn new(
        solution: &Solution,
        domain: &Domain,
        superposition: &Superposition,
    ) -> Option<Self> {
        let solved = solution.solved.as_ref()?;
        let mesh = &solution.mesh;
        let points = domain.points.len();
        let units = domain
            .seams
            .iter()
            .map(|seam| {
                let mut flux = [0.0; COUNT];
                for side in throat(mesh, points, seam) {
                    for (sum, part) in flux.iter_mut().zip(outward(mesh, solved, side)) {
                        *sum += part;
                    }
                }
                superposition
                    .combined(&flux)
                    .map(|q| q * solved.frame.scale)
            })
            .collect();
        Some(Self { units })
    }

    /// The flow through seam `seam` under section forces, force per length, positive from the first
    /// piece to the second in the sense of τ.
    ///
    /// # Panics
    /// If there is no such seam.
    #[must_use]
    pub fn under(&self, seam: usize, f: &SectionForces) -> f64 {
        let [vx, vy, t, tw] = self.units[seam];
        vx * f.vx + vy * f.vy + t * f.t + tw * f.tw
    }

    /// Number of seams.
    #[must_use]
    pub fn len(&self) -> usize {
        self.units.len()
    }

    /// Whether there is no seam.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.units.is_empty()
    }
}

/// The sides of the mesh along a throat, each as a triangle on the first hand and the number of the side
/// in it. They are walked from one of the throat's points, the mesh's first `points` vertices, to the
/// next: the same pieces may share other sides that are another seam's.
fn throat(mesh: &Mesh, points: usize, seam: &Seam) -> Vec<(usize, usize)> {
    let mut at: BTreeMap<u32, Vec<usize>> = BTreeMap::new();
    for (s, side) in mesh.sides.iter().enumerate() {
        if side.right == NONE {
            continue;
        }
        let [l, r] = [side.left, side.right].map(|t| mesh.piece[t as usize]);
        if [l, r] == seam.hands || [r, l] == seam.hands {
            for v in side.vertices {
                at.entry(v).or_default().push(s);
            }
        }
    }
    let mut used: Vec<usize> = Vec::new();
    for ends in seam.throat.windows(2) {
        let starts = at.get(&ends[0]).map_or(&[][..], Vec::as_slice);
        let found = starts.iter().find_map(|&first| {
            let way = walk(mesh, points, &at, ends[0], first);
            let fresh = !way.0.iter().any(|s| used.contains(s));
            (way.1 == ends[1] && fresh).then_some(way.0)
        });
        used.extend(found.unwrap_or_default());
    }
    used.into_iter()
        .filter_map(|s| {
            let side = &mesh.sides[s];
            let t = [side.left, side.right]
                .into_iter()
                .find(|&t| mesh.piece[t as usize] == seam.hands[0])? as usize;
            let k = mesh.triangle_sides[t]
                .iter()
                .position(|&x| x as usize == s)?;
            Some((t, k))
        })
        .collect()
}

/// The sides from vertex `from` over side `first` to the next of the domain's points, and that point.
fn walk(
    mesh: &Mesh,
    points: usize,
    at: &BTreeMap<u32, Vec<usize>>,
    from: u32,
    first: usize,
) -> (Vec<usize>, u32) {
    let other = |s: usize, v: u32| {
        let [a, b] = mesh.sides[s].vertices;
        if a == v { b } else { a }
    };
    let mut way = vec![first];
    let mut v = other(first, from);
    while v as usize >= points {
        let last = way[way.len() - 1];
        let Some(&next) = at[&v].iter().find(|&&s| s != last) else {
            break;
        };
        way.push(next);
        v = other(next, v);
    }
    (way, v)
}

/// `∫ τ*·n ds` through side `k` of triangle `t`, outward, by problem, in the solver's coordinates.
fn outward(mesh: &Mesh, solved: &Solved, (t, k): (usize, usize)) -> [f64; COUNT] {
    let corners = mesh.triangles[t];
    let (a, b) = (corners[(k + 1) % 3] as usize, corners[(k + 2) % 3] as usize);
    let fields = &solved.fields;
    let mut flux = [0.0; COUNT];
    for (problem, q) in flux.iter_mut().enumerate() {
        *q = fields.dual[b][problem] - fields.dual[a][problem];
    }
    for (source, &problem) in SOURCES.iter().enumerate() {
        flux[problem] += fields.fluxes[source][t][k];
    }
    flux
}
