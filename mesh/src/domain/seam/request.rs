//! Seams: what is asked for, and what it has become.

use crate::point::Point;

/// How two pieces are to be joined.
#[derive(Clone, Debug, PartialEq)]
pub struct SeamRequest {
    /// Its name.
    pub name: String,
    /// Indices of the two pieces.
    pub between: [usize; 2],
    /// Where there are several corners or faying lines, the one nearest to this point; of a groove with
    /// a depth also the end that it starts from.
    pub near: Option<Point>,
    /// Fillet or groove.
    pub kind: SeamKind,
    /// Seams at both ends of the faying line; a groove of full depth is one seam either way.
    pub both: bool,
    /// Declared fit-up of a fillet: the pieces may be up to this far apart; 0: they must touch.
    pub gap: f64,
    /// Material (index) of the weld metal of a fillet.
    pub material: usize,
}

/// What joins the pieces.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum SeamKind {
    /// A triangle of weld metal in an inside corner.
    Fillet {
        /// Legs on the first and the second piece, measured along their sides (arcs along the arc) from
        /// where the two sides, or their lines, meet.
        legs: [f64; 2],
    },
    /// The faying line is fused.
    Groove {
        /// Over this length from the end nearest to `near`; `None`: all of it.
        depth: Option<f64>,
    },
}

/// A seam as made. A request for both ends makes two, "NAME, end 1" and "NAME, end 2", from left to
/// right and, one above the other, upwards.
#[derive(Clone, Debug, PartialEq)]
pub struct Seam {
    /// Index of its request.
    pub request: usize,
    /// Its name.
    pub name: String,
    /// The pieces that it joins, as requested.
    pub between: [u32; 2],
    /// The domain's pieces on the first and on the second piece's side of the throat: the halves of a
    /// fillet's weld metal, or the pieces themselves.
    pub hands: [u32; 2],
    /// The domain's pieces that are its weld metal: two of a fillet, none of a groove.
    pub metal: Vec<u32>,
    /// The domain's points along the throat: from root to face of a fillet, from the inner to the outer
    /// end of a groove. A closed line ends with the point that it starts with.
    pub throat: Vec<u32>,
    /// Length of the throat on the true line.
    pub throat_length: f64,
    /// What the throat would be without fit-up: the same but for a fillet with a gap.
    pub full_throat: f64,
    /// Legs of a fillet on the first and the second piece.
    pub legs: Option<[f64; 2]>,
    /// The fit-up found at a fillet's corner.
    pub gap: f64,
    /// The root of a fillet, the middle of a groove's fused line.
    pub at: Point,
}
