//! What can be wrong with pieces, each fault with the places that it concerns.

use crate::point::Point;

/// A side of a piece: ring 0 is the outer edge, ring k the k-th hole.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Place {
    /// Index of the piece.
    pub piece: usize,
    /// 0: outer edge; k: hole k.
    pub ring: usize,
    /// Index into the ring's sides.
    pub side: usize,
}

/// A fault of the geometry.
#[derive(Clone, Debug, PartialEq)]
pub enum Fault {
    /// Two sides of one ring cross, touch or run along each other.
    SelfCrossing {
        /// One side.
        a: Place,
        /// The other.
        b: Place,
        /// Where.
        at: Point,
    },
    /// A hole crosses or touches the outer edge of its piece.
    HoleCrossesEdge {
        /// The hole's side.
        hole: Place,
        /// The outer edge's side.
        edge: Place,
        /// Where.
        at: Point,
    },
    /// A hole lies outside its piece.
    HoleOutside {
        /// A side of the hole.
        hole: Place,
    },
    /// Two holes of a piece cross, touch or contain one another.
    HolesMeet {
        /// A side of one.
        a: Place,
        /// A side of the other.
        b: Place,
        /// Where.
        at: Point,
    },
    /// Two pieces overlap.
    PiecesOverlap {
        /// One piece.
        a: usize,
        /// The other.
        b: usize,
        /// A point inside both.
        at: Point,
        /// The area that they share.
        area: f64,
    },
    /// Two pieces touch in a single point only, so that the material hangs by nothing.
    PiecesTouchInPoint {
        /// One piece.
        a: usize,
        /// The other.
        b: usize,
        /// Where.
        at: Point,
    },
    /// A piece encloses no area worth the name.
    NoArea {
        /// The piece.
        piece: usize,
    },
    /// The piece is not a simple region, for another reason.
    NotSimple {
        /// The piece.
        piece: usize,
        /// What the check says.
        reason: String,
    },
}
