//! Outlines of straight and circular sides.

pub mod corner;
pub mod piece;
pub mod side;
