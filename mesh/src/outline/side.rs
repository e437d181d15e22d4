//! A side of a ring: straight, or an arc of a circle.

use crate::point::Point;

/// The circle that a side lies on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Circle {
    /// Its centre.
    pub centre: Point,
    /// Its radius, positive.
    pub radius: f64,
}

/// An arc: the circle and the signed angle swept from the side's first to its last point, radians,
/// positive anticlockwise, `0 < |sweep| ≤ 2π`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arc {
    /// The circle.
    pub circle: Circle,
    /// Signed angle from the first to the last point.
    pub sweep: f64,
}

/// A straight or circular side from one point to another.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Side {
    /// Where it starts.
    pub from: Point,
    /// Where it ends.
    pub to: Point,
    /// The arc that it follows; `None`: it is straight.
    pub arc: Option<Arc>,
    /// The corner, as its writer counts from 0, that the side arrives at; the arc of a rounded corner
    /// belongs to that corner. Messages name sides by it.
    pub corner: usize,
}
