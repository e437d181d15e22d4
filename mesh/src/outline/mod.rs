//! Outlines of straight and circular sides.

pub mod corner;
pub mod piece;
pub mod place;
pub mod profile;
pub mod shape;
pub mod side;
