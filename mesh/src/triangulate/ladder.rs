//! The triangles of a sharp corner that was cut off: a ladder whose rungs join the divisions of its two
//! sides, so that its angles stay in proportion to the corner's own angle α. Divisions come by halving,
//! so a rung's parts are no longer than its distance from the corner, and the diagonal between two rungs
//! leaves the side at no less than `atan(sin α / (2 − cos α))`, about α where α is small.

use super::chain::Chains;
use super::sharp::Sharp;
use crate::domain::Domain;

/// A cut-off corner of one piece by vertex numbers of domain and chains. Both sides start with the
/// corner itself and have as many vertices.
#[derive(Clone, Debug)]
pub struct Ladder {
    /// Along the side that arrives at the corner, the piece to its left, seen from the corner.
    pub arriving: Vec<u32>,
    /// Along the side that leaves it.
    pub leaving: Vec<u32>,
}

impl Ladder {
    /// The ladder of `piece` at a sharp corner of it.
    #[must_use]
    pub fn new(domain: &Domain, chains: &Chains, corner: &Sharp, piece: u32) -> Self {
        let mut ladder = Self {
            arriving: Vec::new(),
            leaving: Vec::new(),
        };
        for &(s, starts) in &corner.ends {
            let side = &domain.sides[s];
            let mut along = chains.vertices_of(domain, s);
            if !starts {
                along.reverse();
            }
            along.truncate(corner.steps + 1);
            // Seen as it leaves the corner.
            let (left, right) = if starts {
                (side.left, side.right)
            } else {
                (side.right, side.left)
            };
            if left == Some(piece) {
                ladder.leaving = along;
            } else if right == Some(piece) {
                ladder.arriving = along;
            }
        }
        ladder
    }

    /// Its vertices short of the last rung.
    pub fn inner(&self) -> impl Iterator<Item = u32> {
        let n = self.arriving.len() - 1;
        self.arriving[..n]
            .iter()
            .chain(&self.leaving[1..n])
            .copied()
    }

    /// Its triangles; `rung` are the vertices of the last rung from the arriving to the leaving side.
    #[must_use]
    pub fn triangles(&self, rung: &[u32]) -> Vec<[u32; 3]> {
        let (a, b) = (&self.arriving, &self.leaving);
        let last = a.len() - 1;
        let mut out = Vec::new();
        for i in 1..last {
            if i == 1 {
                out.push([a[1], a[0], b[1]]);
            } else {
                out.extend([[a[i], a[i - 1], b[i - 1]], [a[i], b[i - 1], b[i]]]);
            }
        }
        let hub = a[last - 1];
        out.extend(rung.windows(2).map(|w| [w[0], hub, w[1]]));
        if last > 1 {
            out.push([hub, b[last - 1], b[last]]);
        }
        out
    }
}
