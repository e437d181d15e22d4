//! Pieces joined by seams: weld metal in corners, fused lines, and slits where nothing joins them.

mod face;
mod faying;
mod filler;
mod fillet;
mod fit_up;
mod groove;
mod inside_corner;
mod request;
pub(super) mod seamed;
mod unfuse;

pub use request::{Seam, SeamKind, SeamRequest};
