//! A piece: one outline with its holes, of one material.

use super::side::Side;

/// A closed loop of sides, each starting where the one before ends.
#[derive(Clone, Debug, PartialEq)]
pub struct Ring {
    /// The sides in order; a full circle is one side whose ends coincide.
    pub sides: Vec<Side>,
}

/// The region inside `outer` and outside every hole. Rings may run in either sense.
#[derive(Clone, Debug, PartialEq)]
pub struct Outline {
    /// The outer edge.
    pub outer: Ring,
    /// The holes.
    pub holes: Vec<Ring>,
}

/// A named region of one material.
#[derive(Clone, Debug, PartialEq)]
pub struct Piece {
    /// The name that messages and results use.
    pub name: String,
    /// Its outline.
    pub outline: Outline,
    /// Index into the section's materials.
    pub material: usize,
}
