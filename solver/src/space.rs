//! The nodes of a Lagrange space on a mesh.
//!
//! Every node belongs to an entity: a vertex (one node), a side (`p − 1`) or a triangle
//! (`(p−1)(p−2)/2`). Nodes are numbered vertices first, then sides, then triangles.

use sectile_mesh::mesh::Mesh;

/// Node numbering of order `p` on a mesh.
#[derive(Clone, Copy, Debug)]
pub struct Space<'a> {
    /// The mesh.
    pub mesh: &'a Mesh,
    /// Nodes inside a side.
    pub per_side: usize,
    /// Nodes inside a triangle.
    pub per_triangle: usize,
}

/// A vertex, side or triangle.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Entity {
    /// A vertex.
    Vertex(usize),
    /// A side.
    Side(usize),
    /// A triangle.
    Triangle(usize),
}

impl<'a> Space<'a> {
    /// The space of `order` on `mesh`.
    #[must_use]
    pub fn new(mesh: &'a Mesh, order: usize) -> Self {
        Self {
            mesh,
            per_side: order - 1,
            per_triangle: (order - 1) * (order.max(2) - 2) / 2,
        }
    }

    /// Number of nodes.
    #[must_use]
    pub fn nodes(&self) -> usize {
        self.first(Entity::Triangle(self.mesh.triangles.len()))
    }

    /// Number of nodes of one triangle with its sides and vertices.
    #[must_use]
    pub fn local_nodes(&self) -> usize {
        3 + 3 * self.per_side + self.per_triangle
    }

    /// The first node of an entity; its others follow.
    #[must_use]
    pub fn first(&self, entity: Entity) -> usize {
        let sides = self.mesh.vertices.len();
        let triangles = sides + self.mesh.sides.len() * self.per_side;
        match entity {
            Entity::Vertex(v) => v,
            Entity::Side(s) => sides + s * self.per_side,
            Entity::Triangle(t) => triangles + t * self.per_triangle,
        }
    }

    /// Number of nodes of an entity.
    #[must_use]
    pub fn count(&self, entity: Entity) -> usize {
        match entity {
            Entity::Vertex(_) => 1,
            Entity::Side(_) => self.per_side,
            Entity::Triangle(_) => self.per_triangle,
        }
    }

    /// The entities of triangle `t`: vertices 0, 1, 2; sides 0, 1, 2; itself.
    #[must_use]
    pub fn entities(&self, t: usize) -> [Entity; 7] {
        let v = self.mesh.triangles[t];
        let s = self.mesh.triangle_sides[t];
        [
            Entity::Vertex(v[0] as usize),
            Entity::Vertex(v[1] as usize),
            Entity::Vertex(v[2] as usize),
            Entity::Side(s[0] as usize),
            Entity::Side(s[1] as usize),
            Entity::Side(s[2] as usize),
            Entity::Triangle(t),
        ]
    }

    /// The nodes of triangle `t` in the order of [`crate::element::lagrange`], into `out`.
    pub fn fill_nodes(&self, t: usize, out: &mut Vec<usize>) {
        out.clear();
        let v = self.mesh.triangles[t];
        out.extend(v.iter().map(|&i| i as usize));
        for (k, &s) in self.mesh.triangle_sides[t].iter().enumerate() {
            let first = self.first(Entity::Side(s as usize));
            let along = self.mesh.sides[s as usize].vertices[0] == v[(k + 1) % 3];
            for j in 0..self.per_side {
                out.push(first + if along { j } else { self.per_side - 1 - j });
            }
        }
        let first = self.first(Entity::Triangle(t));
        out.extend(first..first + self.per_triangle);
    }
}
