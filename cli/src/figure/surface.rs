//! A field over the section as small triangles that share their points.
//!
//! Values at points that several elements share are averaged, within a piece: a stress that jumps a
//! little between elements becomes continuous, one that jumps between materials keeps its jump. Points
//! are shared by topology, not by position, so that the two faces of a slit stay apart.

use std::collections::BTreeMap;

use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::{Point, Vector};
use sectile_solver::sample::Lattice;

/// Small triangles that share their points.
#[derive(Clone, Debug, PartialEq)]
pub struct Surface {
    /// Positions.
    pub points: Vec<Point>,
    /// Triangles, all in the same sense.
    pub cells: Vec<[u32; 3]>,
    /// Directed edges with a cell on one hand only.
    pub rim: Vec<[u32; 2]>,
}

impl Surface {
    /// From points and triangles.
    #[must_use]
    pub fn new(points: Vec<Point>, cells: Vec<[u32; 3]>) -> Self {
        let mut edges: Vec<(u32, u32, bool)> = Vec::with_capacity(3 * cells.len());
        for cell in &cells {
            for k in 0..3 {
                let (a, b) = (cell[k], cell[(k + 1) % 3]);
                edges.push((a.min(b), a.max(b), a > b));
            }
        }
        edges.sort_unstable();
        let mut rim = Vec::new();
        let mut i = 0;
        while i < edges.len() {
            let (a, b, reversed) = edges[i];
            let mut j = i + 1;
            while j < edges.len() && (edges[j].0, edges[j].1) == (a, b) {
                j += 1;
            }
            if j == i + 1 {
                rim.push(if reversed { [b, a] } else { [a, b] });
            }
            i = j;
        }
        Self { points, cells, rim }
    }
}

/// Which lattice points of which triangles are one point.
#[derive(Clone, Debug)]
pub struct Sharing {
    /// The shared point of each lattice point, shape `[triangles × lattice points]`.
    ids: Vec<u32>,
    count: usize,
    lattice: Lattice,
}

impl Sharing {
    /// Numbers the lattice points of a mesh.
    #[must_use]
    pub fn new(mesh: &Mesh, lattice: &Lattice) -> Self {
        let n = lattice.divisions;
        let per_side = n.saturating_sub(1) as u32;
        let mut count = 0u32;
        let mut take = |amount: u32| {
            let first = count;
            count += amount;
            first
        };
        let mut corners: BTreeMap<(u32, u32), u32> = BTreeMap::new();
        // By side and hand; the hands differ where the pieces do.
        let mut sides = vec![[NONE; 2]; mesh.sides.len()];
        let mut ids = Vec::with_capacity(mesh.triangles.len() * lattice.points.len());
        for (t, vertices) in mesh.triangles.iter().enumerate() {
            let piece = mesh.piece[t];
            let corner = vertices.map(|v| *corners.entry((v, piece)).or_insert_with(|| take(1)));
            let edge = [0, 1, 2].map(|k| {
                let index = mesh.triangle_sides[t][k] as usize;
                let side = mesh.sides[index];
                let shared = side.right == NONE
                    || mesh.piece[side.left as usize] == mesh.piece[side.right as usize];
                let hand = usize::from(!shared && side.right == t as u32);
                if sides[index][hand] == NONE {
                    sides[index][hand] = take(per_side);
                }
                // Whether the side runs from vertex k+1 to k+2, as the triangle goes round.
                (
                    sides[index][hand],
                    side.vertices[0] == vertices[(k + 1) % 3],
                )
            });
            for i in 0..=n {
                for j in 0..=n - i {
                    // Weights of the vertices, in n-ths.
                    let w = [n - i - j, i, j];
                    let id = if let Some(k) = w.iter().position(|&x| x == n) {
                        corner[k]
                    } else if let Some(k) = w.iter().position(|&x| x == 0) {
                        let (first, along) = edge[k];
                        let step = if along {
                            w[(k + 2) % 3]
                        } else {
                            w[(k + 1) % 3]
                        };
                        first + step as u32 - 1
                    } else {
                        take(1)
                    };
                    ids.push(id);
                }
            }
        }
        Self {
            ids,
            count: count as usize,
            lattice: lattice.clone(),
        }
    }

    /// The mean of what the triangles say at each shared point.
    #[must_use]
    pub fn mean(&self, values: &[f64]) -> Vec<f64> {
        let mut sum = vec![0.0; self.count];
        let mut times = vec![0u32; self.count];
        for (&id, &value) in self.ids.iter().zip(values) {
            sum[id as usize] += value;
            times[id as usize] += 1;
        }
        sum.iter()
            .zip(&times)
            .map(|(s, &n)| s / f64::from(n.max(1)))
            .collect()
    }

    /// The mean vector at each shared point.
    #[must_use]
    pub fn mean_vectors(&self, values: &[Vector]) -> Vec<Vector> {
        let x = self.mean(&values.iter().map(|v| v.x).collect::<Vec<_>>());
        let y = self.mean(&values.iter().map(|v| v.y).collect::<Vec<_>>());
        x.iter().zip(&y).map(|(&x, &y)| Vector::new(x, y)).collect()
    }

    /// The surface, given the position of every lattice point.
    #[must_use]
    pub fn surface(&self, positions: &[Point]) -> Surface {
        let mut points = vec![Point::default(); self.count];
        for (&id, &p) in self.ids.iter().zip(positions) {
            points[id as usize] = p;
        }
        let per_triangle = self.lattice.points.len();
        let cells = self
            .ids
            .chunks(per_triangle)
            .flat_map(|ids| self.lattice.cells.iter().map(|c| c.map(|p| ids[p])))
            .collect();
        Surface::new(points, cells)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::samples;

    #[test]
    fn shared_points_are_numbered_once() {
        let mesh = samples::rectangle_mesh(3, 2, 3.0, 2.0);
        for n in 1..=5 {
            let lattice = Lattice::new(n);
            let sharing = Sharing::new(&mesh, &lattice);
            assert_eq!(sharing.count, (3 * n + 1) * (2 * n + 1));
            let positions = samples::straight_positions(&mesh, &lattice);
            // All triangles agree where a point is.
            let surface = sharing.surface(&positions);
            for (&id, &p) in sharing.ids.iter().zip(&positions) {
                assert!(surface.points[id as usize].distance(p) < 1e-14);
            }
            assert_eq!(surface.cells.len(), mesh.triangles.len() * n * n);
            assert_eq!(surface.rim.len(), 2 * (3 + 2) * n);
            let xs: Vec<f64> = positions.iter().map(|p| p.x).collect();
            for (mean, p) in sharing.mean(&xs).iter().zip(&surface.points) {
                assert!((mean - p.x).abs() < 1e-14);
            }
        }
    }

    #[test]
    fn pieces_share_no_points() {
        let mut mesh = samples::rectangle_mesh(2, 1, 2.0, 1.0);
        for (t, triangle) in mesh.triangles.iter().enumerate() {
            let x: f64 = triangle.iter().map(|&v| mesh.vertices[v as usize].x).sum();
            mesh.piece[t] = u32::from(x > 3.0);
        }
        let sharing = Sharing::new(&mesh, &Lattice::new(2));
        assert_eq!(sharing.count, 9 + 9);
    }
}
