//! The order in which entities are eliminated.
//!
//! Approximate minimum degree on the graph of the vertices alone; then each triangle's own unknowns
//! and each side's go just before the earliest of its vertices. Fill is as good as ordering all
//! unknowns, at a fifth or less of the time.

use faer::dyn_stack::{MemBuffer, MemStack};
use faer::sparse::SymbolicSparseColMatRef;
use faer::sparse::linalg::amd;

use sectile_mesh::mesh::Mesh;

use crate::solution::SolveError;
use crate::space::Entity;

/// Every entity of the mesh in the order of elimination.
///
/// # Errors
/// If the ordering runs out of memory.
pub fn elimination_order(mesh: &Mesh) -> Result<Vec<Entity>, SolveError> {
    let vertices = vertex_order(mesh)?;
    let mut position = vec![0u32; vertices.len()];
    for (i, &v) in vertices.iter().enumerate() {
        position[v] = i as u32;
    }
    let earliest = |ends: &[u32]| {
        ends.iter()
            .map(|&v| position[v as usize])
            .min()
            .unwrap_or(0) as usize
    };
    let triangles = bucket(vertices.len(), mesh.triangles.iter().map(|t| earliest(t)));
    let sides = bucket(
        vertices.len(),
        mesh.sides.iter().map(|s| earliest(&s.vertices)),
    );
    let mut order =
        Vec::with_capacity(mesh.vertices.len() + mesh.sides.len() + mesh.triangles.len());
    for (i, &v) in vertices.iter().enumerate() {
        order.extend(
            triangles
                .of(i)
                .iter()
                .map(|&t| Entity::Triangle(t as usize)),
        );
        order.extend(sides.of(i).iter().map(|&s| Entity::Side(s as usize)));
        order.push(Entity::Vertex(v));
    }
    Ok(order)
}

/// Approximate minimum degree order of the vertex graph: the vertices, first eliminated first.
fn vertex_order(mesh: &Mesh) -> Result<Vec<usize>, SolveError> {
    let n = mesh.vertices.len();
    let upper = bucket(
        n,
        mesh.sides
            .iter()
            .map(|s| s.vertices[0].max(s.vertices[1]) as usize),
    );
    let rows: Vec<usize> = upper
        .items
        .iter()
        .map(|&s| {
            let [a, b] = mesh.sides[s as usize].vertices;
            a.min(b) as usize
        })
        .collect();
    let graph = SymbolicSparseColMatRef::new_unsorted_checked(n, n, &upper.start, None, &rows);
    let (mut forward, mut inverse) = (vec![0usize; n], vec![0usize; n]);
    let mut memory = MemBuffer::try_new(amd::order_maybe_unsorted_scratch::<usize>(n, rows.len()))
        .map_err(|_| SolveError::Factor("out of memory while ordering".into()))?;
    amd::order_maybe_unsorted(
        &mut forward,
        &mut inverse,
        graph,
        amd::Control::default(),
        MemStack::new(&mut memory),
    )
    .map_err(|e| SolveError::Factor(format!("ordering failed: {e:?}")))?;
    Ok(forward)
}

/// Items grouped by a key, in their own order within a group.
#[derive(Clone, Debug)]
pub struct Buckets {
    /// Where each group starts in `items`; one entry more than groups.
    pub start: Vec<usize>,
    /// The items.
    pub items: Vec<u32>,
}

impl Buckets {
    /// The items of group `k`.
    #[must_use]
    pub fn of(&self, k: usize) -> &[u32] {
        &self.items[self.start[k]..self.start[k + 1]]
    }
}

/// Counting sort of `0..keys.len()` by key.
pub fn bucket(groups: usize, keys: impl Iterator<Item = usize> + Clone) -> Buckets {
    let mut start = vec![0usize; groups + 1];
    let mut total = 0;
    for k in keys.clone() {
        start[k + 1] += 1;
        total += 1;
    }
    for k in 0..groups {
        start[k + 1] += start[k];
    }
    let mut next = start.clone();
    let mut items = vec![0u32; total];
    for (i, k) in keys.enumerate() {
        items[next[k]] = i as u32;
        next[k] += 1;
    }
    Buckets { start, items }
}
