//! Faults of the geometry as a whole, told by the text of the pieces.

use std::ops::Range;

use sectile_mesh::Point;
use sectile_mesh::domain::fault::{Fault as Found, Place};
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::side::Side;

use super::fault::Fault;
use super::joint;
use super::ring::RingText;
use super::seam::SeamText;
use crate::section::SeamInput;

/// Where a piece is written.
#[derive(Clone, Debug)]
pub(super) struct PieceText {
    /// Its name, or its heading where it has none.
    pub(super) head: Range<usize>,
    /// Its rings: the outer edge, then the holes.
    pub(super) rings: Vec<RingText>,
}

/// What a fault's places are looked up in.
#[derive(Clone, Copy)]
pub(super) struct Sources<'a> {
    pub(super) pieces: &'a [Piece],
    pub(super) texts: &'a [PieceText],
    pub(super) seams: &'a [SeamInput],
    pub(super) seam_texts: &'a [SeamText],
    /// The unit of length.
    pub(super) unit: &'a str,
}

impl<'a> Sources<'a> {
    /// `found`, with its places marked.
    pub(super) fn fault(self, found: &Found) -> Fault {
        match *found {
            Found::NotSimple { piece, ref reason } => Fault::at(
                self.head(piece),
                "this piece",
                format!(
                    "piece \"{}\" is not one simple region: {reason}",
                    self.name(piece)
                ),
                "check its corners; every loop is one closed line that nowhere meets itself",
            ),
            Found::SelfCrossing { a, b, at } => {
                let (a, b) = if self.corner(b) < self.corner(a) {
                    (b, a)
                } else {
                    (a, b)
                };
                let message = format!(
                    "two sides of {} of piece \"{}\" meet at {}: {} and {}",
                    self.ring_name(a),
                    self.name(a.piece),
                    point(at),
                    self.side_name(a),
                    self.side_name(b),
                );
                self.two(a, b, message, "list the corners in their order along the edge; an edge may not cross, touch or run along itself")
            }
            Found::HoleCrossesEdge { hole, edge, at } => {
                let message = format!(
                    "{} of piece \"{}\" reaches its outer edge at {}",
                    self.ring_name(hole),
                    self.name(hole.piece),
                    point(at)
                );
                self.two(hole, edge, message, "move the hole inside, make it smaller, or draw the opening as part of the outline")
            }
            Found::HoleOutside { hole } => Fault::at(
                self.ring(hole).map_or(0..0, |ring| ring.whole.clone()),
                "",
                format!(
                    "{} lies outside of piece \"{}\"",
                    self.ring_name(hole),
                    self.name(hole.piece)
                ),
                "move it inside the outline; holes are in the axes of their piece, before `place`",
            ),
            Found::HolesMeet { a, b, at } => {
                let (a, b) = if b.ring < a.ring { (b, a) } else { (a, b) };
                let message = format!(
                    "{} and {} of piece \"{}\" touch or overlap at {}",
                    self.ring_name(a),
                    self.ring_name(b),
                    self.name(a.piece),
                    point(at)
                );
                self.two(a, b, message, "move them apart, or draw them as one hole")
            }
            Found::PiecesOverlap { a, b, at, area } => Fault::at(
                self.head(a),
                "this piece",
                format!(
                    "the pieces \"{}\" and \"{}\" overlap by {} {}² around {}",
                    self.name(a),
                    self.name(b),
                    short(area),
                    self.unit,
                    point(at)
                ),
                "move one of them (`place`) or cut it back: pieces may share sides, not area",
            )
            .and(self.head(b), "and this piece"),
            Found::PiecesTouchInPoint { a, b, at } => Fault::at(
                self.head(a),
                "this piece",
                format!(
                    "the pieces \"{}\" and \"{}\" touch in the single point {}",
                    self.name(a),
                    self.name(b),
                    point(at)
                ),
                "let them share a part of a side, or move them apart: a point transfers no stress",
            )
            .and(self.head(b), "and this piece"),
            Found::NoArea { piece } => Fault::at(
                self.outline(piece),
                "no area inside",
                format!("piece \"{}\" encloses no area", self.name(piece)),
                "check the corners: they lie in line, or the outline crosses itself and its parts cancel",
            ),
            Found::Seam { seam, ref fault } => joint::fault(self, seam, fault),
            Found::PiecesHanging { ref pieces } => joint::hanging(self, pieces),
        }
    }

    fn two(self, a: Place, b: Place, message: String, remedy: &str) -> Fault {
        let (first, second) = (self.range(a), self.range(b));
        let remark = |place| {
            let name = self.side_name(place);
            if self.corner(place).is_some() {
                name
            } else {
                String::new()
            }
        };
        let fault = Fault::at(first.clone(), remark(a), message, remedy);
        if second == first {
            fault
        } else {
            fault.and(second, remark(b))
        }
    }

    pub(super) fn name(self, piece: usize) -> String {
        self.pieces
            .get(piece)
            .map_or_else(String::new, |piece| super::syntax::printable(&piece.name))
    }

    fn outline(self, piece: usize) -> Range<usize> {
        let ring = self.texts.get(piece).and_then(|text| text.rings.first());
        ring.map_or(0..0, |ring| ring.whole.clone())
    }

    pub(super) fn head(self, piece: usize) -> Range<usize> {
        self.texts.get(piece).map_or(0..0, |text| text.head.clone())
    }

    fn ring(self, place: Place) -> Option<&'a RingText> {
        self.texts.get(place.piece)?.rings.get(place.ring)
    }

    fn ring_name(self, place: Place) -> String {
        self.ring(place)
            .map_or_else(|| "the outline".to_owned(), |ring| ring.what.clone())
    }

    /// The corner, as the file counts them from 0, at which a side arrives; `None` in a ring that
    /// comes from a shape.
    fn corner(self, place: Place) -> Option<usize> {
        let side = self.side(place)?;
        (side.corner < self.ring(place)?.corners.len()).then_some(side.corner)
    }

    fn side(self, place: Place) -> Option<&'a Side> {
        let outline = &self.pieces.get(place.piece)?.outline;
        let ring = match place.ring {
            0 => &outline.outer,
            hole => outline.holes.get(hole - 1)?,
        };
        ring.sides.get(place.side)
    }

    /// The text of the corner at which a side arrives, or of its whole ring.
    fn range(self, place: Place) -> Range<usize> {
        let Some(ring) = self.ring(place) else {
            return 0..0;
        };
        self.corner(place).map_or(ring.whole.clone(), |corner| {
            ring.corners[corner].span.clone()
        })
    }

    fn side_name(self, place: Place) -> String {
        let (Some(ring), Some(side)) = (self.ring(place), self.side(place)) else {
            return String::new();
        };
        let Some(corner) = self.corner(place) else {
            return format!("the side from {} to {}", point(side.from), point(side.to));
        };
        let count = ring.corners.len();
        let text = &ring.corners[corner];
        if text.rounded && side.arc.is_some() && !text.by_arc {
            format!("the rounding of corner {}", corner + 1)
        } else {
            format!(
                "the side from corner {} to corner {}",
                (corner + count - 1) % count + 1,
                corner + 1
            )
        }
    }
}

/// A point for a message.
pub(super) fn point(at: Point) -> String {
    format!("({}, {})", short(at.x), short(at.y))
}

/// Six significant digits, without trailing zeros and without a negative zero.
pub(super) fn short(value: f64) -> String {
    if value == 0.0 || !value.is_finite() {
        return "0".to_owned();
    }
    let digits = (5 - value.abs().log10().floor() as i32).clamp(0, 12) as usize;
    let text = format!("{value:.digits$}");
    let text = if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.')
    } else {
        &text
    };
    if text == "-0" {
        "0".to_owned()
    } else {
        text.to_owned()
    }
}
