//! The triangles of one piece, by spade's constrained Delaunay triangulation and refinement.

use spade::handles::FixedVertexHandle;
use spade::{
    AngleLimit, ConstrainedDelaunayTriangulation, HasPosition, Point2, RefinementParameters,
    Triangulation,
};

use super::chain::Chains;
use super::ladder::Ladder;
use super::{MeshError, Sizing};
use crate::domain::Domain;
use crate::point::Point;

/// Least angle of the triangles, where the outline allows it.
const LEAST_ANGLE: f64 = 25.0;

/// The triangles of one piece. Vertices below `shared.len()` are the piece's vertices on domain
/// points and chains, the others its own.
#[derive(Clone, Debug)]
pub struct PieceMesh {
    /// Vertex numbers of the domain and its chains.
    pub shared: Vec<u32>,
    /// The piece's own vertices.
    pub added: Vec<Point>,
    /// Triangles, anticlockwise.
    pub triangles: Vec<[u32; 3]>,
    /// Parts `(side, part)` of arcs and interfaces that refinement wants halved.
    pub wanted_splits: Vec<(usize, usize)>,
}

#[derive(Clone, Copy, Debug)]
struct Vertex(Point2<f64>);

impl HasPosition for Vertex {
    type Scalar = f64;
    fn position(&self) -> Point2<f64> {
        self.0
    }
}

impl From<Point2<f64>> for Vertex {
    fn from(p: Point2<f64>) -> Self {
        Self(p)
    }
}

type Cdt = ConstrainedDelaunayTriangulation<Vertex>;

/// A part of the piece's edge, the piece to its left.
struct EdgePart {
    from: usize,
    to: usize,
    /// `(side, part)` if it must be divided alike elsewhere or on a curve.
    tied: Option<(usize, usize)>,
}

/// Triangulates one piece. With `force` the tied parts are left undivided, whatever the shape of the
/// triangles.
pub fn triangulate_piece(
    domain: &Domain,
    chains: &Chains,
    piece: u32,
    sizing: &Sizing,
    force: bool,
) -> Result<PieceMesh, MeshError> {
    let name = || domain.piece_names[piece as usize].clone();
    let ladders: Vec<Ladder> = chains
        .sharp
        .iter()
        .filter(|corner| corner.pieces.contains(&piece))
        .map(|corner| Ladder::new(domain, chains, corner, piece))
        .collect();
    let (mut shared, parts) = edge_parts(domain, chains, piece, &ladders);
    let position = |v: u32| {
        let v = v as usize;
        let n = domain.points.len();
        if v < n {
            domain.points[v]
        } else {
            chains.points[v - n]
        }
    };
    let points: Vec<Vertex> = shared
        .iter()
        .map(|&v| {
            let p = position(v);
            Vertex(Point2::new(p.x, p.y))
        })
        .collect();
    let edges: Vec<[usize; 2]> = parts.iter().map(|p| [p.from, p.to]).collect();
    let mut conflict = None;
    let mut cdt = Cdt::try_bulk_load_cdt(points, edges, |e| conflict = Some(e)).map_err(|e| {
        MeshError::Coordinate {
            piece: name(),
            reason: e.to_string(),
        }
    })?;
    if conflict.is_some() || cdt.num_vertices() != shared.len() {
        let at = conflict.map_or(0, |e| e[0]);
        return Err(MeshError::TooClose {
            piece: name(),
            at: position(shared[at.min(shared.len() - 1)]),
        });
    }
    let mut parameters = RefinementParameters::<f64>::new()
        .with_angle_limit(AngleLimit::from_deg(LEAST_ANGLE))
        .with_max_additional_vertices(sizing.max_vertices)
        .exclude_outer_faces(true);
    if let Some(area) = sizing.max_area {
        parameters = parameters.with_max_allowed_area(area);
    }
    if force {
        parameters = parameters.keep_constraint_edges();
    }
    if !cdt.refine(parameters).refinement_complete {
        return Err(MeshError::TooManyVertices {
            piece: name(),
            limit: sizing.max_vertices,
        });
    }

    let (inside, wanted_splits) = classify(&cdt, &parts);
    let added = cdt
        .vertices()
        .skip(shared.len())
        .map(|v| Point::new(v.position().x, v.position().y))
        .collect();
    let mut triangles: Vec<[u32; 3]> = cdt
        .inner_faces()
        .filter(|f| inside[f.fix().index()])
        .map(|f| f.vertices().map(|v| v.fix().index() as u32))
        .collect();
    // What ladders have beyond their last rung follows the other shared vertices.
    let known = shared.len();
    let mut inner: Vec<u32> = ladders.iter().flat_map(Ladder::inner).collect();
    inner.sort_unstable();
    inner.dedup();
    let moved = |v: u32| {
        if (v as usize) < known {
            v
        } else {
            v + inner.len() as u32
        }
    };
    for t in &mut triangles {
        *t = t.map(moved);
    }
    let own = |v: u32| match inner.binary_search(&v) {
        Ok(i) => (known + i) as u32,
        Err(_) => shared.partition_point(|&s| s < v) as u32,
    };
    for (ladder, part) in ladders.iter().zip(&parts[parts.len() - ladders.len()..]) {
        let ladder = Ladder {
            arriving: ladder.arriving.iter().map(|&v| own(v)).collect(),
            leaving: ladder.leaving.iter().map(|&v| own(v)).collect(),
        };
        let steps = walk(&cdt, part.from, part.to);
        let rung: Vec<u32> = std::iter::once(part.from)
            .chain(steps.iter().map(|s| s.1))
            .map(|v| moved(v as u32))
            .collect();
        triangles.extend(ladder.triangles(&rung));
    }
    shared.extend(inner);
    Ok(PieceMesh {
        shared,
        added,
        triangles,
        wanted_splits,
    })
}

/// The piece's vertices and the parts of its edge; last the outer rungs of `ladders` in order.
fn edge_parts(
    domain: &Domain,
    chains: &Chains,
    piece: u32,
    ladders: &[Ladder],
) -> (Vec<u32>, Vec<EdgePart>) {
    let mut runs: Vec<(u32, u32, Option<(usize, usize)>)> = Vec::new();
    for (s, side) in domain.sides.iter().enumerate() {
        let (left, right) = (side.left == Some(piece), side.right == Some(piece));
        if left == right {
            continue;
        }
        let tied = side.arc.is_some() || (side.left.is_some() && side.right.is_some());
        let vertices = chains.vertices_of(domain, s);
        let [start, end] = chains.cut_off(s, piece);
        for k in start..vertices.len() - 1 - end {
            let (a, b) = (vertices[k], vertices[k + 1]);
            let (from, to) = if left { (a, b) } else { (b, a) };
            runs.push((from, to, tied.then_some((s, k))));
        }
    }
    for ladder in ladders {
        if let (Some(&from), Some(&to)) = (ladder.arriving.last(), ladder.leaving.last()) {
            runs.push((from, to, None));
        }
    }
    let mut shared: Vec<u32> = runs.iter().flat_map(|r| [r.0, r.1]).collect();
    shared.sort_unstable();
    shared.dedup();
    let local = |v: u32| shared.partition_point(|&s| s < v);
    let parts = runs
        .iter()
        .map(|&(from, to, tied)| EdgePart {
            from: local(from),
            to: local(to),
            tied,
        })
        .collect();
    (shared, parts)
}

/// Which faces lie in the piece: those to the left of its edge, and all that can be reached from them
/// without crossing it. And the tied parts that were divided.
fn classify(cdt: &Cdt, parts: &[EdgePart]) -> (Vec<bool>, Vec<(usize, usize)>) {
    let mut inside = vec![false; cdt.num_all_faces()];
    let mut queue = Vec::new();
    let mut divided = Vec::new();
    for part in parts {
        let walk = walk(cdt, part.from, part.to);
        if walk.len() > 1
            && let Some(tied) = part.tied
        {
            divided.push(tied);
        }
        for (a, b) in walk {
            let (a, b) = (
                FixedVertexHandle::from_index(a),
                FixedVertexHandle::from_index(b),
            );
            if let Some(edge) = cdt.get_edge_from_neighbors(a, b)
                && let Some(face) = edge.face().as_inner()
                && !inside[face.fix().index()]
            {
                inside[face.fix().index()] = true;
                queue.push(face.fix());
            }
        }
    }
    while let Some(face) = queue.pop() {
        for edge in cdt.face(face).adjacent_edges() {
            if edge.is_constraint_edge() {
                continue;
            }
            if let Some(next) = edge.rev().face().as_inner()
                && !inside[next.fix().index()]
            {
                inside[next.fix().index()] = true;
                queue.push(next.fix());
            }
        }
    }
    (inside, divided)
}

/// The constraint edges that the edge part `from → to` has become, in order.
fn walk(cdt: &Cdt, from: usize, to: usize) -> Vec<(usize, usize)> {
    let position = |v: usize| {
        let p = cdt.vertex(FixedVertexHandle::from_index(v)).position();
        Point::new(p.x, p.y)
    };
    let goal = position(to);
    let mut steps = Vec::new();
    let mut at = from;
    while at != to {
        let here = position(at);
        let direction = goal - here;
        // The constraint that points most nearly at the goal, and not away from it.
        let next = cdt
            .vertex(FixedVertexHandle::from_index(at))
            .out_edges()
            .filter(|e| e.is_constraint_edge())
            .map(|e| {
                let v = e.to().fix().index();
                let d = position(v) - here;
                let cosine = d.dot(direction) / (d.length() * direction.length());
                let sine = d.cross(direction) / (d.length() * direction.length());
                (if cosine > 0.0 { sine.abs() } else { 2.0 }, v)
            })
            .min_by(|a, b| a.0.total_cmp(&b.0));
        match next {
            Some((off, v)) if off < 1.0 && steps.len() < cdt.num_vertices() => {
                steps.push((at, v));
                at = v;
            }
            _ => break,
        }
    }
    steps
}
