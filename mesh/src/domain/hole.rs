//! Holes that are not where holes belong.

use super::edge::{Edge, extent, middle, winding};
use super::fault::Fault;
use crate::tree::{EMPTY, Extent, Tree, hull};

/// Holes outside of their piece or inside one another. `edges` are in the order of pieces and rings,
/// and no two rings meet.
#[must_use]
pub fn misplaced_holes(edges: &[Edge]) -> Vec<Fault> {
    edges
        .chunk_by(|a, b| a.place.piece == b.place.piece)
        .flat_map(misplaced_in_piece)
        .collect()
}

fn misplaced_in_piece(edges: &[Edge]) -> Vec<Fault> {
    let rings: Vec<&[Edge]> = edges
        .chunk_by(|a, b| a.place.ring == b.place.ring)
        .collect();
    let Some((outer, holes)) = rings.split_first() else {
        return Vec::new();
    };
    let boxes: Vec<Extent> = holes
        .iter()
        .map(|h| h.iter().fold(EMPTY, |m, e| hull(m, extent(&e.side, 0.0))))
        .collect();
    let tree = Tree::new(&boxes);
    let mut faults = Vec::new();
    for (h, hole) in holes.iter().enumerate() {
        let at = middle(&hole[0].side);
        if winding(outer.iter(), at) == 0 {
            faults.push(Fault::HoleOutside {
                hole: hole[0].place,
            });
        }
        let mut about = Vec::new();
        tree.overlapping(&[at.x, at.x, at.y, at.y], &mut |g| {
            if g != h && winding(holes[g].iter(), at) != 0 {
                about.push(g);
            }
        });
        about.sort_unstable();
        faults.extend(about.into_iter().map(|g| Fault::HolesMeet {
            a: hole[0].place,
            b: holes[g][0].place,
            at,
        }));
    }
    faults
}
