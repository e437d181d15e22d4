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
pub mod seam;
mod side;
mod sound;
mod stack;
mod within;

use crate::outline::piece::Piece;
use crate::outline::side::Arc;
use crate::point::Point;
use fault::Fault;
use seam::{Seam, SeamRequest};

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
    /// Whether it is one hand of a slit: another side with the other hand lies on the same line, and
    /// nothing joins the two.
    pub faying: bool,
}

/// Valid planar regions: pieces that share sides, or parts of sides, are one connected region.
#[derive(Clone, Debug, PartialEq)]
pub struct Domain {
    /// The points where sides meet.
    pub points: Vec<Point>,
    /// The sides; those with material on both hands are interfaces between pieces.
    pub sides: Vec<DomainSide>,
    /// The name of each piece; weld metal follows the pieces and has its seam's name.
    pub piece_names: Vec<String>,
    /// The material index of each piece.
    pub piece_materials: Vec<usize>,
    /// Number of separate connected parts; torsion needs exactly one.
    pub parts: usize,
    /// The seams that join pieces; none where pieces are fused wherever they touch.
    pub seams: Vec<Seam>,
}

/// Points closer than this part of the section's size are one.
pub const TOLERANCE: f64 = 1e-9;

/// A distance if it is more than `least`, else infinity: what is nearer lies upon it.
pub(crate) fn beyond(distance: f64, least: f64) -> f64 {
    if distance > least {
        distance
    } else {
        f64::INFINITY
    }
}

/// The box about a piece, `[x_min, x_max, y_min, y_max]`.
#[must_use]
pub fn piece_extent(piece: &Piece) -> [f64; 4] {
    let sides = &piece.outline.outer.sides;
    sides.iter().fold(crate::tree::EMPTY, |around, side| {
        crate::tree::hull(around, edge::extent(side, 0.0))
    })
}

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

/// Makes one valid domain of pieces that only seams join: where they lie against each other otherwise
/// there is a slit, which transfers nothing. Weld metal is added to the pieces.
///
/// # Errors
/// Every fault found in the pieces; else in the places of the seams; else in what the seams make of them.
pub fn build_seamed(pieces: &[Piece], requests: &[SeamRequest]) -> Result<Domain, Vec<Fault>> {
    seam::seamed::join_by_seams(pieces, requests)
}
