//! Weld metal as pieces of the domain, and what is wrong with where it lies.

use super::fillet::Metal;
use super::request::SeamRequest;
use crate::domain::fault::{Fault, Misfit, Obstacle, SeamFault};
use crate::outline::piece::Piece;

/// A seam for the fillers: its request, its name and its weld metal.
pub type Laid<'a> = (usize, &'a str, Option<&'a Metal>);

/// The weld metal of all seams, to follow the pieces.
pub struct Fillers<'a> {
    requests: &'a [SeamRequest],
    /// Number of pieces before the first filler.
    before: usize,
    /// The halves.
    pub pieces: Vec<Piece>,
    /// Index of each half's request.
    request_of: Vec<usize>,
    /// By seam the halves' numbers as pieces.
    pub halves: Vec<Option<[u32; 2]>>,
}

impl<'a> Fillers<'a> {
    /// The metal of `seams`, to follow `before` pieces.
    pub fn new<'b>(
        before: usize,
        requests: &'a [SeamRequest],
        seams: impl Iterator<Item = Laid<'b>>,
    ) -> Self {
        let mut fillers = Self {
            requests,
            before,
            pieces: Vec::new(),
            request_of: Vec::new(),
            halves: Vec::new(),
        };
        for (request, name, metal) in seams {
            fillers.halves.push(metal.map(|metal| {
                let first = (before + fillers.pieces.len()) as u32;
                for outline in &metal.halves {
                    fillers.request_of.push(request);
                    fillers.pieces.push(Piece {
                        name: name.to_owned(),
                        outline: outline.clone(),
                        material: requests[request].material,
                    });
                }
                [first, first + 1]
            }));
        }
        fillers
    }

    /// The request of a piece that is weld metal.
    fn request_of(&self, piece: usize) -> Option<usize> {
        self.request_of
            .get(piece.checked_sub(self.before)?)
            .copied()
    }

    /// Faults of pieces and metal together as faults of seams, each once.
    pub fn tell(&self, found: &[Fault]) -> Vec<Fault> {
        let mut faults: Vec<Fault> = Vec::new();
        let mut seen: Vec<(usize, Option<Obstacle>)> = Vec::new();
        for fault in found {
            let Some((seam, with)) = self.obstacle(fault) else {
                faults.push(fault.clone());
                continue;
            };
            if seen.contains(&(seam, with)) {
                continue;
            }
            seen.push((seam, with));
            let at = match *fault {
                Fault::PiecesOverlap { at, .. } | Fault::SelfCrossing { at, .. } => Some(at),
                _ => None,
            };
            let metal = (0..self.request_of.len()).find(|&m| self.request_of[m] == seam);
            let start = metal.map(|m| self.pieces[m].outline.outer.sides[0].to);
            let at = at.or(start).unwrap_or_default();
            let fault = match with {
                Some(with) => SeamFault::Overlap { with, at },
                None => SeamFault::Misfit {
                    at,
                    cause: Misfit::InTheWay,
                },
            };
            faults.push(Fault::Seam { seam, fault });
        }
        faults
    }

    /// The seam that a fault concerns, and what else it meets; `None` for its own pieces.
    fn obstacle(&self, fault: &Fault) -> Option<(usize, Option<Obstacle>)> {
        match *fault {
            Fault::PiecesOverlap { a, b, .. } => match (self.request_of(a), self.request_of(b)) {
                (Some(s), Some(t))
                    if b == a + 1 && (a - self.before).is_multiple_of(2) && s == t =>
                {
                    Some((s, None))
                }
                (Some(s), Some(t)) => Some((s, Some(Obstacle::Seam(t)))),
                (Some(s), None) => Some((s, self.stranger(s, b))),
                (None, Some(t)) => Some((t, self.stranger(t, a))),
                (None, None) => None,
            },
            Fault::SelfCrossing { a, .. } => Some((self.request_of(a.piece)?, None)),
            Fault::NoArea { piece } | Fault::NotSimple { piece, .. } => {
                Some((self.request_of(piece)?, None))
            }
            _ => None,
        }
    }

    fn stranger(&self, seam: usize, piece: usize) -> Option<Obstacle> {
        (!self.requests[seam].between.contains(&piece)).then_some(Obstacle::Piece(piece))
    }

    /// The fault of pieces that hang by nothing, by their numbers.
    pub fn hanging(&self, hanging: &[usize]) -> Fault {
        let pieces: Vec<usize> = hanging
            .iter()
            .copied()
            .filter(|&p| p < self.before)
            .collect();
        // Metal alone does not touch the pieces along its legs.
        match hanging.first().filter(|_| pieces.is_empty()) {
            Some(&metal) => Fault::Seam {
                seam: self.request_of(metal).unwrap_or(0),
                fault: SeamFault::Misfit {
                    at: self.pieces[metal - self.before].outline.outer.sides[0].to,
                    cause: Misfit::InTheWay,
                },
            },
            None => Fault::PiecesHanging { pieces },
        }
    }
}
