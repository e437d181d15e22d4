//! The arrangement of the pieces' sides, and what can be wrong with it.

use super::cut::{cut, join};
use super::edge::{Edge, distance, edges_of};
use super::fault::Fault;
use super::hole::misplaced_holes;
use super::meeting::{limit_crossings, meetings};
use super::overlap::second_opinion;
use super::pinch::{connected_parts, pinches};
use super::sound::{empty_rings, unsound};
use super::stack::overlaps;
use super::{Domain, TOLERANCE};
use crate::outline::piece::Piece;
use crate::point::Point;
use crate::tree::{EMPTY, hull};

/// Pieces with more sides than this are not shown to the second judge, whose time grows with the square
/// of their number: 1 ms at this many.
const SECOND_OPINION_LIMIT: usize = 300;

/// See [`super::build`].
pub fn arrange(pieces: &[Piece]) -> Result<Domain, Vec<Fault>> {
    let Fused { domain, .. } = fuse(pieces, &[])?;
    let faults = pinches(&domain.points, &domain.sides, pieces.len());
    if faults.is_empty() {
        Ok(domain)
    } else {
        Err(faults)
    }
}

/// Pieces fused along all that they share, points in which they only touch among it.
pub struct Fused {
    /// The planar graph.
    pub domain: Domain,
    /// The length within which points are one.
    pub tolerance: f64,
}

/// The arrangement of the pieces, sides cut at `stops` besides.
///
/// # Errors
/// Every fault found.
pub fn fuse(pieces: &[Piece], stops: &[Point]) -> Result<Fused, Vec<Fault>> {
    let tolerance = tolerance(pieces);
    let mut faults = unsound(pieces, tolerance);
    if !faults.is_empty() {
        return Err(faults);
    }
    let edges: Vec<Edge> = pieces
        .iter()
        .enumerate()
        .flat_map(|(i, p)| edges_of(i, p))
        .collect();
    let mut cuts: Vec<Vec<Point>> = vec![Vec::new(); edges.len()];
    for meeting in meetings(&edges, tolerance) {
        if edges[meeting.a].place.piece == edges[meeting.b].place.piece {
            faults.extend(meeting.fault_within_piece(&edges, tolerance));
        } else {
            cuts[meeting.a].extend(&meeting.at);
            cuts[meeting.b].extend(&meeting.at);
        }
    }
    limit_crossings(&mut faults);
    faults.extend(empty_rings(pieces, &faults, tolerance));
    if faults.is_empty() {
        faults.extend(misplaced_holes(&edges));
    }
    if faults.is_empty() {
        faults.extend(second_opinions(pieces));
    }
    if !faults.is_empty() {
        return Err(faults);
    }

    for (edge, cuts) in edges.iter().zip(&mut cuts) {
        cuts.extend(
            stops
                .iter()
                .filter(|&&p| distance(&edge.side, p) <= tolerance),
        );
    }
    let (points, parts) = cut(&edges, &cuts, tolerance);
    let (sides, stacked) = join(&parts, tolerance);
    faults.extend(overlaps(
        pieces, &edges, &parts, &sides, &stacked, tolerance,
    ));
    if !faults.is_empty() {
        return Err(faults);
    }
    let parts = connected_parts(pieces.len(), &sides);
    Ok(Fused {
        domain: Domain {
            points,
            sides,
            piece_names: pieces.iter().map(|p| p.name.clone()).collect(),
            piece_materials: pieces.iter().map(|p| p.material).collect(),
            parts,
            seams: Vec::new(),
        },
        tolerance,
    })
}

/// [`TOLERANCE`] times the section's size, but no less than what far coordinates can resolve.
fn tolerance(pieces: &[Piece]) -> f64 {
    let mut around = EMPTY;
    for p in pieces {
        for ring in std::iter::once(&p.outline.outer).chain(&p.outline.holes) {
            for side in &ring.sides {
                let p = side.from;
                around = hull(around, [p.x, p.x, p.y, p.y]);
                if let Some(arc) = side.arc
                    && side.from == side.to
                {
                    let (c, r) = (arc.circle.centre, arc.circle.radius);
                    around = hull(around, [c.x - r, c.x + r, c.y - r, c.y + r]);
                }
            }
        }
    }
    let size = (around[1] - around[0]).max(around[3] - around[2]);
    let farthest = around.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    (TOLERANCE * size).max(16.0 * f64::EPSILON * farthest)
}

fn second_opinions(pieces: &[Piece]) -> Vec<Fault> {
    let mut faults = Vec::new();
    for (piece, p) in pieces.iter().enumerate() {
        let count: usize = p.outline.outer.sides.len()
            + p.outline.holes.iter().map(|h| h.sides.len()).sum::<usize>();
        if count <= SECOND_OPINION_LIMIT
            && let Some(reason) = second_opinion(p)
        {
            faults.push(Fault::NotSimple { piece, reason });
        }
    }
    faults
}
