//! The valid planar regions that a section consists of: a planar graph of sides, each knowing which
//! piece lies on either hand.

mod arrange;
mod contact;
mod cut;
mod edge;
pub(crate) mod fan;
pub mod fault;
mod hole;
mod meeting;
mod overlap;
mod pinch;
mod side;
mod sound;
mod stack;
mod within;

use crate::outline::piece::Piece;
use crate::outline::side::Arc;
use crate::point::Point;
use fault::Fault;

/// A side of the planar graph; two sides meet only at their ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DomainSide {
    /// Index of its first point.
    pub from: u32,
    /// Index of its last point (equal to `from` never: full circles are split).
    pub to: u32,
    /// The arc that it follows, less than half a turn; `None`: it is straight.
    pub arc: Option<Arc>,
    /// The piece to the left when going from `from` to `to`; `None`: no material.
    pub left: Option<u32>,
    /// The piece to the right.
    pub right: Option<u32>,
}

/// Valid planar regions: pieces that share sides, or parts of sides, are one connected region.
#[derive(Clone, Debug, PartialEq)]
pub struct Domain {
    /// The points where sides meet.
    pub points: Vec<Point>,
    /// The sides; those with material on both hands are interfaces between pieces.
    pub sides: Vec<DomainSide>,
    /// The name of each piece.
    pub piece_names: Vec<String>,
    /// The material index of each piece.
    pub piece_materials: Vec<usize>,
    /// Number of separate connected parts; torsion needs exactly one.
    pub parts: usize,
}

/// Points closer than this part of the section's size are one.
pub const TOLERANCE: f64 = 1e-9;

/// Makes one valid domain of the pieces: shared sides and parts of sides become interfaces.
///
/// Sides are compared on their true lines and circles, with a tolerance of [`TOLERANCE`] times the
/// section's size; points keep the coordinates of the corner that was given first.
///
/// # Errors
/// Every fault found.
pub fn build(pieces: &[Piece]) -> Result<Domain, Vec<Fault>> {
    arrange::arrange(pieces)
}
