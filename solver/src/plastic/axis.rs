//! The neutral axis of pure plastic bending, and the moment about it.

use super::half::{Slices, Sums};
use super::root::zero;

/// The line of one direction that halves the yield force.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PlasticAxis {
    /// Its η, across its direction; the middle, where a range of lines does it (a gap in the section).
    pub offset: f64,
    /// `∫w |η − offset| dA`.
    pub moment: f64,
}

/// The axis for the lines of `slices`.
#[must_use]
pub fn plastic_axis(slices: &Slices) -> PlasticAxis {
    let force = slices.total[0];
    // Over a gap the force beyond stays at one half, but for rounding.
    let slack = 1e-13 * force;
    let offset_at = |wanted: f64| zero(|c| slices.beyond(c)[0] - wanted, slices.low, slices.high);
    let offset = 0.5 * (offset_at(0.5 * force + slack) + offset_at(0.5 * force - slack));
    PlasticAxis {
        offset,
        moment: moment_about(slices.beyond(offset), slices.total, offset),
    }
}

/// `∫w |η − c| dA` from the sums beyond `c` and over the whole section.
#[must_use]
pub fn moment_about(beyond: Sums, total: Sums, c: f64) -> f64 {
    2.0 * (beyond[2] - c * beyond[0]) - (total[2] - c * total[0])
}
