//! Edges that meet, and what is wrong with those of one piece that do.

use std::collections::BTreeMap;

use super::contact::contacts;
use super::edge::{Edge, extent};
use super::fault::{Fault, Place};
use crate::point::Point;
use crate::tree::{Extent, Tree};

/// Faults of crossing sides reported for one ring or pair of rings: more would be the same mistake.
const MOST_CROSSINGS: usize = 10;

/// Meetings for each edge after which the search ends. In a sound section an edge meets the two beside
/// it and those that touch it from other pieces.
const MOST_MEETINGS: usize = 32;

/// Two edges that meet.
pub struct Meeting {
    /// Index of one edge.
    pub a: usize,
    /// Index of the other, higher.
    pub b: usize,
    /// Where.
    pub at: Vec<Point>,
}

/// All pairs of edges that meet, sorted; of a hopeless drawing, the first of more than any sound one
/// can have.
#[must_use]
pub fn meetings(edges: &[Edge], tolerance: f64) -> Vec<Meeting> {
    let boxes: Vec<Extent> = edges.iter().map(|e| extent(&e.side, tolerance)).collect();
    let tree = Tree::new(&boxes);
    let mut found = Vec::new();
    for (a, range) in boxes.iter().enumerate() {
        if found.len() > MOST_MEETINGS * (edges.len() + 1_000) {
            break;
        }
        let mut near = Vec::new();
        tree.overlapping(range, &mut |b| {
            if b > a {
                near.push(b);
            }
        });
        near.sort_unstable();
        found.extend(near.into_iter().filter_map(|b| {
            let at = contacts(&edges[a].side, &edges[b].side, tolerance);
            (!at.is_empty()).then_some(Meeting { a, b, at })
        }));
    }
    found
}

impl Meeting {
    /// What is wrong with two edges of one piece that meet: nothing, if they follow one another and
    /// share no more than that end.
    #[must_use]
    pub fn fault_within_piece(&self, edges: &[Edge], tolerance: f64) -> Option<Fault> {
        let (p, q) = (&edges[self.a], &edges[self.b]);
        let (a, b) = (p.place, q.place);
        let common: Vec<Point> = [(p.side.to, q.side.from), (q.side.to, p.side.from)]
            .into_iter()
            .filter(|(u, v)| u == v)
            .map(|(u, _)| u)
            .collect();
        let at = *self.at.iter().find(|c| {
            a.ring != b.ring || common.iter().all(|e| e.distance(**c) > 4.0 * tolerance)
        })?;
        let (a, b) = (a.min(b), a.max(b));
        Some(match (a.ring, b.ring) {
            (r, s) if r == s => Fault::SelfCrossing { a, b, at },
            (0, _) => Fault::HoleCrossesEdge {
                hole: b,
                edge: a,
                at,
            },
            _ => Fault::HolesMeet { a, b, at },
        })
    }
}

/// Keeps the first few crossings of each kind and ring.
pub fn limit_crossings(faults: &mut Vec<Fault>) {
    let mut seen: BTreeMap<(u8, Place, Place), usize> = BTreeMap::new();
    let ring = |p: &Place| Place { side: 0, ..*p };
    faults.retain(|fault| {
        let key = match fault {
            Fault::SelfCrossing { a, b, .. } => (0, ring(a), ring(b)),
            Fault::HoleCrossesEdge { hole, edge, .. } => (1, ring(hole), ring(edge)),
            Fault::HolesMeet { a, b, .. } => (2, ring(a), ring(b)),
            _ => return true,
        };
        let count = seen.entry(key).or_default();
        *count += 1;
        *count <= MOST_CROSSINGS
    });
}
