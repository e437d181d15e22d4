//! Corners as they are written, and the ring that they make.

use super::piece::Ring;
use crate::point::Point;

/// A corner of a loop as its writer gives it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Corner {
    /// Where it is (where the two sides would meet, if it is rounded).
    pub at: Point,
    /// Radius of the rounding arc, tangent to both sides.
    pub round: Option<f64>,
    /// A point on the circular arc by which the side arrives at this corner; `None`: a straight side.
    pub via: Option<Point>,
}

/// What is wrong with a corner.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum CornerFault {
    /// Fewer than three corners (two, if a side is an arc).
    #[error("a loop needs at least three corners, this one has {0}")]
    TooFew(usize),
    /// A coordinate or radius is not a finite number.
    #[error("not a finite number")]
    NotFinite,
    /// The side that arrives here has no length.
    #[error("the side that arrives here has no length")]
    ZeroLength,
    /// `via` coincides with an end of the side, or lies in line with both ends outside of them.
    #[error("no circular arc runs through these three points")]
    NoArc,
    /// The radius is not positive or does not fit; the largest that does.
    #[error("a rounding radius of {given} does not fit; the largest that does is {largest}")]
    RoundTooLarge {
        /// As written.
        given: f64,
        /// The largest radius that fits here, the other corners' radii kept.
        largest: f64,
    },
    /// Rounding is asked for at a corner where the two sides are in line or fold back.
    #[error("there is no corner to round here")]
    NothingToRound,
}

/// The ring through `corners`, closed by itself; each fault with its corner's index.
///
/// # Errors
/// Every fault found, not the first only.
pub fn ring_from_corners(_corners: &[Corner]) -> Result<Ring, Vec<(usize, CornerFault)>> {
    unreachable!("placeholder")
}
