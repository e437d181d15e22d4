//! The mesh in the solver's own coordinates, and the map of each triangle.
//!
//! Lengths are scaled and the origin moved to the centroid, so that a 2 mm wire and a 4 m box girder
//! are equally well conditioned. Triangles with circular sides are mapped exactly (see
//! [`sectile_mesh::map`]), so the bounds speak of the true outline.

use sectile_mesh::Point;
use sectile_mesh::map::TriangleMap;
use sectile_mesh::mesh::Mesh;
use sectile_mesh::outline::side::Circle;

/// A similarity from the section file's axes to the solver's: `x̂ = (x − origin) / scale`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Frame {
    /// The centroid, in the file's axes.
    pub origin: Point,
    /// The length that becomes 1.
    pub scale: f64,
}

impl Frame {
    /// Into the solver's coordinates.
    #[must_use]
    pub fn inward(&self, p: Point) -> Point {
        Point::new(
            (p.x - self.origin.x) / self.scale,
            (p.y - self.origin.y) / self.scale,
        )
    }

    /// Back into the file's axes.
    #[must_use]
    pub fn outward(&self, p: Point) -> Point {
        Point::new(
            p.x * self.scale + self.origin.x,
            p.y * self.scale + self.origin.y,
        )
    }
}

/// The mesh in the solver's coordinates.
#[derive(Clone, Debug)]
pub struct Geometry<'a> {
    /// Its topology.
    pub mesh: &'a Mesh,
    points: Vec<Point>,
    circles: Vec<Circle>,
}

impl<'a> Geometry<'a> {
    /// `mesh` seen through `frame`.
    #[must_use]
    pub fn new(mesh: &'a Mesh, frame: &Frame) -> Self {
        Self {
            mesh,
            points: mesh.vertices.iter().map(|&p| frame.inward(p)).collect(),
            circles: mesh
                .circles
                .iter()
                .map(|c| Circle {
                    centre: frame.inward(c.centre),
                    radius: c.radius / frame.scale,
                })
                .collect(),
        }
    }

    /// Length of the chord of a side.
    #[must_use]
    pub fn chord(&self, side: usize) -> f64 {
        let [a, b] = self.mesh.sides[side].vertices;
        self.points[a as usize].distance(self.points[b as usize])
    }

    /// The map of triangle `t`.
    #[must_use]
    pub fn map(&self, t: usize) -> TriangleMap {
        TriangleMap::of(self.mesh, t, &self.points, &self.circles)
    }
}
