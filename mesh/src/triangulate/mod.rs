//! A domain becomes a mesh: constrained Delaunay triangles of good shape, curved ones included.

mod cdt;
mod chain;
mod crowd;
mod ladder;
mod sharp;

use std::collections::BTreeMap;

use crate::domain::Domain;
use crate::mesh::{Mesh, NONE};
use crate::outline::side::Circle;
use crate::point::Point;
use crate::topology::connect;

use chain::Chains;

/// What the triangulation may be asked for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sizing {
    /// Largest area of a triangle; `None`: as few triangles as their shape allows.
    pub max_area: Option<f64>,
    /// Most vertices that may be added to one piece.
    pub max_vertices: usize,
}

impl Default for Sizing {
    fn default() -> Self {
        Self {
            max_area: None,
            max_vertices: 1_000_000,
        }
    }
}

/// Why a domain cannot be meshed.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum MeshError {
    /// The limit of vertices was reached before every triangle was of good shape.
    #[error(
        "piece {piece} needs more than {limit} mesh vertices: it has details too small for its size"
    )]
    TooManyVertices {
        /// Name of the piece.
        piece: String,
        /// The limit.
        limit: usize,
    },
    /// Sides come so close that they cannot be told apart.
    #[error("sides of piece {piece} come too close to each other near ({}, {})", at.x, at.y)]
    TooClose {
        /// Name of the piece.
        piece: String,
        /// Where.
        at: Point,
    },
    /// A coordinate is out of the range that can be meshed.
    #[error("piece {piece} has a coordinate that cannot be meshed: {reason}")]
    Coordinate {
        /// Name of the piece.
        piece: String,
        /// Why.
        reason: String,
    },
    /// A curved side folds over a neighbour however finely it is divided.
    #[error("a curved side folds over its neighbourhood near ({}, {})", at.x, at.y)]
    Folded {
        /// Where.
        at: Point,
    },
}

/// Rounds of division of arcs and interfaces before what is left is forced.
const ROUNDS: usize = 24;

/// Triangulates a domain.
///
/// Straight free sides are divided as the shape of triangles asks. Arcs and interfaces are divided
/// beforehand, on the true curve and alike for both sides; where refinement still wants to divide one
/// of their parts, or a curved triangle would fold, that part is halved and the pieces it bounds are
/// triangulated anew. Triangles have no angle below 25° but in corners of a piece below 60°, which are
/// cut off: there angles stay in proportion to the corner's own (see `ladder`).
///
/// # Errors
/// See [`MeshError`].
pub fn triangulate(domain: &Domain, sizing: &Sizing) -> Result<Mesh, MeshError> {
    let mut chains = Chains::new(domain, sizing.max_area)?;
    let pieces = domain.piece_names.len();
    let mut made: Vec<Option<cdt::PieceMesh>> = vec![None; pieces];
    let mut round = 0;
    loop {
        let last = round == ROUNDS;
        round += 1;
        let mut split: Vec<(usize, usize)> = Vec::new();
        for piece in 0..pieces {
            if made[piece].is_none() {
                let mesh = cdt::triangulate_piece(domain, &chains, piece as u32, sizing, last)?;
                split.extend(&mesh.wanted_splits);
                made[piece] = Some(mesh);
            }
        }
        if split.is_empty() || last {
            let parts: Vec<&cdt::PieceMesh> = made.iter().flatten().collect();
            let mesh = merge(domain, &chains, &parts);
            let folded = folded_parts(&mesh, &chains, domain);
            if folded.is_empty() {
                return Ok(mesh);
            }
            if last {
                return Err(MeshError::Folded { at: folded[0].1 });
            }
            split = folded.into_iter().map(|(part, _)| part).collect();
        }
        let touched = chains.split(domain, &split);
        for (piece, touched) in touched.into_iter().enumerate() {
            if !touched {
                continue;
            }
            if chains.points.len() > sizing.max_vertices {
                return Err(MeshError::TooManyVertices {
                    piece: domain.piece_names[piece].clone(),
                    limit: sizing.max_vertices,
                });
            }
            made[piece] = None;
        }
    }
}

/// Joins the pieces' triangles along the shared parts of chains.
fn merge(domain: &Domain, chains: &Chains, parts: &[&cdt::PieceMesh]) -> Mesh {
    let mut vertices = domain.points.clone();
    vertices.extend_from_slice(&chains.points);
    let mut triangles = Vec::new();
    let mut piece = Vec::new();
    for (p, part) in parts.iter().enumerate() {
        let base = vertices.len() as u32;
        vertices.extend_from_slice(&part.added);
        let shared = part.shared.len() as u32;
        for t in &part.triangles {
            triangles.push(t.map(|v| {
                if v < shared {
                    part.shared[v as usize]
                } else {
                    base + v - shared
                }
            }));
            piece.push(p as u32);
        }
    }
    let mut circles: Vec<Circle> = Vec::new();
    let mut known: BTreeMap<[u64; 3], usize> = BTreeMap::new();
    let mut curved: Vec<(u32, u32, u32)> = Vec::new();
    for (s, side) in domain.sides.iter().enumerate() {
        let Some(arc) = side.arc else { continue };
        let Circle { centre, radius } = arc.circle;
        let bits = [centre.x, centre.y, radius].map(f64::to_bits);
        let c = *known.entry(bits).or_insert_with(|| {
            circles.push(arc.circle);
            circles.len() - 1
        });
        for w in chains.vertices_of(domain, s).windows(2) {
            curved.push((w[0].min(w[1]), w[0].max(w[1]), c as u32));
        }
    }
    curved.sort_unstable();
    let circle_of = |a: u32, b: u32| match curved.binary_search_by(|c| (c.0, c.1).cmp(&(a, b))) {
        Ok(i) => curved[i].2,
        Err(_) => NONE,
    };
    connect(vertices, triangles, piece, circles, circle_of)
}

/// The parts of arcs beside which a curved triangle's map would fold, with a place.
fn folded_parts(mesh: &Mesh, chains: &Chains, domain: &Domain) -> Vec<((usize, usize), Point)> {
    let mut bad: Vec<(u32, u32, Point)> = Vec::new();
    for (t, sides) in mesh.triangle_sides.iter().enumerate() {
        if sides.iter().all(|&s| mesh.sides[s as usize].circle == NONE)
            || crate::quality::least_jacobian_ratio(mesh, t) > LEAST_RATIO
        {
            continue;
        }
        for &s in sides {
            let side = mesh.sides[s as usize];
            if side.circle != NONE {
                let [a, b] = side.vertices;
                let at = mesh.vertices[a as usize].lerp(mesh.vertices[b as usize], 0.5);
                bad.push((a.min(b), a.max(b), at));
            }
        }
    }
    if bad.is_empty() {
        return Vec::new();
    }
    bad.sort_by_key(|b| (b.0, b.1));
    let mut out = Vec::new();
    for (s, side) in domain.sides.iter().enumerate() {
        if side.arc.is_none() {
            continue;
        }
        for (k, w) in chains.vertices_of(domain, s).windows(2).enumerate() {
            let ends = (w[0].min(w[1]), w[0].max(w[1]));
            if let Ok(b) = bad.binary_search_by_key(&ends, |b| (b.0, b.1)) {
                out.push(((s, k), bad[b].2));
            }
        }
    }
    out
}

/// A curved triangle's least Jacobian over its chord triangle's must be above this.
const LEAST_RATIO: f64 = 0.15;
