//! Triangles with their topology, on plain arrays.

use crate::outline::side::Circle;
use crate::point::Point;

/// "No triangle" / "no circle" / "no boundary loop" in the index arrays below.
pub const NONE: u32 = u32::MAX;

/// A side of the triangulation.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct MeshSide {
    /// Its end vertices.
    pub vertices: [u32; 2],
    /// The triangle to the left of the direction `vertices[0] → vertices[1]`; never [`NONE`].
    pub left: u32,
    /// The triangle to the right, or [`NONE`] on the boundary.
    pub right: u32,
    /// The circle that the side is an arc of (index into [`Mesh::circles`]), or [`NONE`]: straight.
    /// The arc is the shorter one between its ends, so it bulges away from the centre.
    pub circle: u32,
    /// The boundary loop that the side belongs to, or [`NONE`] inside the material.
    pub boundary: u32,
}

/// A conforming triangulation of a [`crate::domain::Domain`].
///
/// Invariants: triangles run anticlockwise; side `k` of a triangle lies opposite to its vertex `k`,
/// from vertex `k+1` to vertex `k+2` (mod 3); at most one side of a triangle pair is stored, with the
/// triangle of lower index to its left.
#[derive(Clone, Debug, PartialEq)]
pub struct Mesh {
    /// Vertex positions; boundary vertices lie on the true straight or circular side.
    pub vertices: Vec<Point>,
    /// The three vertices of each triangle.
    pub triangles: Vec<[u32; 3]>,
    /// The piece that each triangle belongs to.
    pub piece: Vec<u32>,
    /// All sides.
    pub sides: Vec<MeshSide>,
    /// The three sides of each triangle, side `k` opposite to vertex `k`.
    pub triangle_sides: Vec<[u32; 3]>,
    /// The circles of the curved sides.
    pub circles: Vec<Circle>,
    /// For each boundary loop, whether it is a connected part's outer edge (a hole otherwise).
    pub loop_is_outer: Vec<bool>,
}
