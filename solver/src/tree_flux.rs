//! Fluxes through the sides of the triangles that balance a source triangle by triangle.
//!
//! The sources' integrals are routed along a spanning tree of the triangles' adjacency from the
//! leaves to the root, with nothing through free edges: no equations are solved, whatever holes the
//! section has. The tree prefers long sides, so that the small triangles at re-entrant corners are
//! leaves and carry little; its roughness is cancelled by the dual solution.

use sectile_mesh::mesh::{Mesh, NONE};

/// A rooted spanning tree of the triangles.
#[derive(Clone, Debug)]
pub struct SpanningTree {
    /// Triangles from the root outwards: each after its parent.
    order: Vec<u32>,
    /// The side to the parent; [`NONE`] for roots.
    parent_side: Vec<u32>,
}

impl SpanningTree {
    /// The tree that prefers sides of great `length` (Kruskal's algorithm; ties by index).
    #[must_use]
    pub fn new(mesh: &Mesh, length: impl Fn(usize) -> f64) -> Self {
        let mut sides: Vec<(f64, u32)> = mesh
            .sides
            .iter()
            .enumerate()
            .filter(|(_, s)| s.right != NONE)
            .map(|(i, _)| (length(i), i as u32))
            .collect();
        sides.sort_unstable_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        let n = mesh.triangles.len();
        let mut leader: Vec<u32> = (0..n as u32).collect();
        let mut chosen = vec![false; mesh.sides.len()];
        for (_, s) in sides {
            let side = mesh.sides[s as usize];
            let (a, b) = (find(&mut leader, side.left), find(&mut leader, side.right));
            if a != b {
                leader[b as usize] = a;
                chosen[s as usize] = true;
            }
        }
        let mut order = Vec::with_capacity(n);
        let mut parent_side = vec![NONE; n];
        let mut seen = vec![false; n];
        for root in 0..n as u32 {
            if seen[root as usize] {
                continue;
            }
            seen[root as usize] = true;
            let mut next = order.len();
            order.push(root);
            while next < order.len() {
                let t = order[next];
                next += 1;
                for &s in &mesh.triangle_sides[t as usize] {
                    let side = mesh.sides[s as usize];
                    if !chosen[s as usize] {
                        continue;
                    }
                    let other = if side.left == t {
                        side.right
                    } else {
                        side.left
                    };
                    if !seen[other as usize] {
                        seen[other as usize] = true;
                        parent_side[other as usize] = s;
                        order.push(other);
                    }
                }
            }
        }
        Self { order, parent_side }
    }

    /// Outward flux through each side of each triangle, given the integral of `f` over each
    /// triangle: the fluxes of a triangle sum to `−∫f`, those of the two triangles at a side cancel,
    /// none leaves through an edge. What rounding leaves of the total stays in the root.
    #[must_use]
    pub fn route(&self, mesh: &Mesh, integrals: &[f64]) -> Vec<[f64; 3]> {
        let mut carried = integrals.to_vec();
        let mut flux = vec![[0.0; 3]; integrals.len()];
        for &t in self.order.iter().rev() {
            let s = self.parent_side[t as usize];
            if s == NONE {
                continue;
            }
            let side = mesh.sides[s as usize];
            let parent = if side.left == t {
                side.right
            } else {
                side.left
            };
            let total = carried[t as usize];
            carried[parent as usize] += total;
            for (triangle, value) in [(t, -total), (parent, total)] {
                let sides = mesh.triangle_sides[triangle as usize];
                if let Some(k) = sides.iter().position(|&x| x == s) {
                    flux[triangle as usize][k] = value;
                }
            }
        }
        flux
    }
}

fn find(leader: &mut [u32], mut x: u32) -> u32 {
    while leader[x as usize] != x {
        leader[x as usize] = leader[leader[x as usize] as usize];
        x = leader[x as usize];
    }
    x
}
