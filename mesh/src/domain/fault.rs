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
    /// A seam that cannot be made as asked for.
    Seam {
        /// Index of the request.
        seam: usize,
        /// What is wrong with it.
        fault: SeamFault,
    },
    /// No path of seams joins these pieces to the first one.
    PiecesHanging {
        /// The pieces.
        pieces: Vec<usize>,
    },
}

/// What is wrong with a seam.
#[derive(Clone, Debug, PartialEq)]
pub enum SeamFault {
    /// A seam does not join two different pieces.
    Pieces,
    /// A leg, a depth, a gap or a coordinate of a seam is no number or not of the sign that it has.
    Measure,
    /// The pieces do not touch, or are farther apart than the declared fit-up.
    Apart {
        /// How far they are apart.
        distance: f64,
        /// Where.
        at: Point,
    },
    /// The pieces have no inside corner for a fillet.
    NoCorner {
        /// The end of the faying line that is no corner; `None`: no end is.
        at: Option<Point>,
    },
    /// The pieces touch in points only, which no groove fuses.
    NoLine {
        /// Where they touch.
        at: Point,
    },
    /// There are several places for the seam.
    Choice {
        /// The places.
        places: Vec<Point>,
    },
    /// The free angle between the faces is too small or too large for a fillet.
    Angle {
        /// Where.
        at: Point,
        /// The angle, radians.
        angle: f64,
    },
    /// A leg is longer than the side that it runs along.
    Leg {
        /// The piece that it lies on.
        piece: usize,
        /// The leg.
        leg: f64,
        /// The room that there is.
        room: f64,
        /// Where the side ends.
        at: Point,
    },
    /// The weld metal has no sound shape.
    Misfit {
        /// Where.
        at: Point,
        /// Why.
        cause: Misfit,
    },
    /// A groove is deeper than the faying line is long.
    Depth {
        /// The depth.
        depth: f64,
        /// Length of the faying line.
        length: f64,
    },
    /// Grooves from both ends meet, so that the whole line is fused.
    DepthsMeet {
        /// The depth of each.
        depth: f64,
        /// Length of the faying line.
        length: f64,
    },
    /// A groove with a depth on a closed faying line, which has no end to start from.
    NoEnd {
        /// Length of the faying line.
        length: f64,
    },
    /// A seam lies where something else is.
    Overlap {
        /// What is there.
        with: Obstacle,
        /// Where.
        at: Point,
    },
}

/// Why weld metal has no sound shape.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Misfit {
    /// The perpendicular from the root does not meet the line between the toes, or close to a toe: one
    /// leg is too short for the other.
    FootOutside,
    /// The fit-up takes up the whole leg.
    GapTakesLeg,
    /// The pieces' own sides run through it: they bend towards it, or are interrupted.
    InTheWay,
    /// It is too small to be told apart from nothing.
    TooSmall,
}

/// What a seam may run into.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Obstacle {
    /// A piece that it does not join.
    Piece(usize),
    /// Another seam, or its own other end.
    Seam(usize),
}
