//! The triangles of one piece, by spade's constrained Delaunay triangulation and refinement.

use spade::handles::FixedVertexHandle;
use spade::{
    AngleLimit, ConstrainedDelaunayTriangulation, HasPosition, InsertionError, Point2,
    RefinementParameters, Triangulation,
};

use super::chain::Chains;
use super::ladder::Ladder;
use super::{MeshError, Sizing};
use crate::domain::Domain;
use crate::point::Point;
use crate::tree::{EMPTY, hull};

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
    let (mut shared, mut parts) = edge_parts(domain, chains, piece, &ladders);
    let position = |v: u32| {
        let v = v as usize;
        let n = domain.points.len();
        if v < n {
            domain.points[v]
        } else {
            chains.points[v - n]
        }
    };
    let positions: Vec<Point> = shared.iter().map(|&v| position(v)).collect();
    let known = positions.len();
    let too_close = |at: usize| MeshError::TooClose {
        piece: name(),
        at: positions[at.min(known - 1)],
    };
    let order = coarse_first(known);
    let mut handles = vec![FixedVertexHandle::from_index(0); known];
    for (rank, &i) in order.iter().enumerate() {
        handles[i] = FixedVertexHandle::from_index(FRAME + rank);
    }
    let mut cdt = load(&positions, &order).map_err(|e| MeshError::Coordinate {
        piece: name(),
        reason: e.to_string(),
    })?;
    let given = known + FRAME;
    if cdt.num_vertices() != given {
        return Err(too_close(0));
    }
    for part in &mut parts {
        let ends = [part.from, part.to].map(|v| handles[v]);
        if cdt.try_add_constraint(ends[0], ends[1]).is_empty() {
            return Err(too_close(part.from));
        }
        [part.from, part.to] = ends.map(|v| v.index());
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
        .skip(given)
        .map(|v| Point::new(v.position().x, v.position().y))
        .collect();
    // What ladders have beyond their last rung follows the other shared vertices, then what is added.
    let mut inner: Vec<u32> = ladders.iter().flat_map(Ladder::inner).collect();
    inner.sort_unstable();
    inner.dedup();
    let number = |v: FixedVertexHandle| {
        let v = v.index() - FRAME;
        order.get(v).map_or(v + inner.len(), |&i| i) as u32
    };
    let mut triangles: Vec<[u32; 3]> = cdt
        .inner_faces()
        .filter(|f| inside[f.fix().index()])
        .map(|f| f.vertices().map(|v| number(v.fix())))
        .collect();
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
            .map(|v| number(FixedVertexHandle::from_index(v)))
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

/// The Delaunay triangulation of `positions` within a [`frame`], whose points come first, the others
/// in the given order. One by one: spade's loading in bulk walks through hash sets, in another order in
/// each run, and takes quadratic time where most points are on one line.
fn load(positions: &[Point], order: &[usize]) -> Result<Cdt, InsertionError> {
    let n = positions.len();
    let mut cdt = Cdt::with_capacity(n + FRAME, 3 * n, 2 * n);
    for p in frame(positions)
        .iter()
        .chain(order.iter().map(|&i| &positions[i]))
    {
        cdt.insert(Vertex(Point2::new(p.x, p.y)))?;
    }
    Ok(cdt)
}

/// 0 to n − 1, coarse first: every 2^k-th, then those halfway between, and so on. Neighbours along a
/// side follow one another, yet no fan of them grows that later points must undo.
fn coarse_first(n: usize) -> Vec<usize> {
    let mut order = Vec::with_capacity(n);
    let mut step = n.next_power_of_two();
    order.extend((0..n).step_by(step));
    while step > 1 {
        order.extend((step / 2..n).step_by(step));
        step /= 2;
    }
    order
}

/// Number of points of the [`frame`].
const FRAME: usize = 4;

/// Four points around a piece, well away from it. Without them the hull would run along the piece's
/// own sides, and where a divided side is straight but for rounding, its outside would be slivers that
/// keep spade from dividing it further.
fn frame(points: &[Point]) -> [Point; FRAME] {
    let around = points
        .iter()
        .fold(EMPTY, |m, p| hull(m, [p.x, p.x, p.y, p.y]));
    let margin = (around[1] - around[0]).max(around[3] - around[2]);
    let (l, r) = (around[0] - margin, around[1] + margin);
    let (b, t) = (around[2] - margin, around[3] + margin);
    [
        Point::new(l, b),
        Point::new(r, b),
        Point::new(r, t),
        Point::new(l, t),
    ]
}

/// The piece's vertices and the parts of its edge; last the outer rungs of `ladders` in order.
fn edge_parts(
    domain: &Domain,
    chains: &Chains,
    piece: u32,
    ladders: &[Ladder],
) -> (Vec<u32>, Vec<EdgePart>) {
    let mut parts: Vec<EdgePart> = Vec::new();
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
            parts.push(EdgePart {
                from: from as usize,
                to: to as usize,
                tied: tied.then_some((s, k)),
            });
        }
    }
    for ladder in ladders {
        if let (Some(&from), Some(&to)) = (ladder.arriving.last(), ladder.leaving.last()) {
            parts.push(EdgePart {
                from: from as usize,
                to: to as usize,
                tied: None,
            });
        }
    }
    let mut shared: Vec<u32> = parts
        .iter()
        .flat_map(|p| [p.from as u32, p.to as u32])
        .collect();
    shared.sort_unstable();
    shared.dedup();
    for part in &mut parts {
        for end in [&mut part.from, &mut part.to] {
            *end = shared.partition_point(|&s| (s as usize) < *end);
        }
    }
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
