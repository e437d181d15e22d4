//! Newest-vertex bisection.
//!
//! A triangle is halved across side 0, opposite to its newest vertex; the midpoint becomes the newest
//! vertex of both halves. Closure marks sides, not triangles: while a triangle has a marked side but
//! an unmarked side 0, side 0 is marked too. That ends after at most all sides are marked, whatever
//! the labelling, and each triangle is then cut into two, three or four at once. Angles stay bounded:
//! only four shapes arise from a triangle (E. G. Sewell 1972; W. F. Mitchell 1991).

use crate::mesh::{Mesh, MeshSide, NONE};
use crate::point::Point;

/// A bisected mesh.
#[derive(Clone, Debug, PartialEq)]
pub struct Bisected {
    /// The finer mesh; the vertices of the coarser one keep their indices.
    pub mesh: Mesh,
    /// The triangle of the coarser mesh that each triangle lies in.
    pub parent: Vec<u32>,
}

/// Bisects each marked triangle at least once, and as many others as conformity asks for.
///
/// New vertices on circular sides lie on the true arc, at the middle of its angle. Pieces, circles and
/// boundary loops are inherited.
#[must_use]
pub fn bisect(mesh: &Mesh, marked: &[bool]) -> Bisected {
    let cut = closure(mesh, marked);

    let mut vertices = mesh.vertices.clone();
    // For each old side: its midpoint if cut, and its first new side (the second follows).
    let mut middle = vec![NONE; mesh.sides.len()];
    let mut first = vec![0u32; mesh.sides.len()];
    let mut count = 0u32;
    for (s, side) in mesh.sides.iter().enumerate() {
        first[s] = count;
        count += 1;
        if cut[s] {
            middle[s] = vertices.len() as u32;
            vertices.push(midpoint(mesh, side));
            count += 1;
        }
    }
    let inside: usize = mesh
        .triangle_sides
        .iter()
        .map(|t| t.iter().filter(|&&s| cut[s as usize]).count())
        .sum();
    let blank = MeshSide {
        vertices: [NONE; 2],
        left: NONE,
        right: NONE,
        circle: NONE,
        boundary: NONE,
    };
    let mut sides = vec![blank; count as usize + inside];
    for (s, side) in mesh.sides.iter().enumerate() {
        for k in 0..=usize::from(cut[s]) {
            let new = &mut sides[first[s] as usize + k];
            new.circle = side.circle;
            new.boundary = side.boundary;
        }
    }

    let mut builder = Builder {
        triangles: Vec::with_capacity(mesh.triangles.len() + inside),
        triangle_sides: Vec::with_capacity(mesh.triangles.len() + inside),
        sides,
    };
    let mut parent = Vec::with_capacity(mesh.triangles.len() + inside);
    let mut next_inside = count;
    for (t, (&v, &s)) in mesh.triangles.iter().zip(&mesh.triangle_sides).enumerate() {
        let before = builder.triangles.len();
        // The new side between `end`, an end of old side `old`, and its midpoint (or all of it).
        let part = |old: u32, end: u32| {
            let o = old as usize;
            first[o] + u32::from(cut[o] && mesh.sides[o].vertices[1] == end)
        };
        let [m0, m1, m2] = s.map(|s| middle[s as usize]);
        if m0 == NONE {
            builder.push(v, s.map(|s| first[s as usize]));
        } else {
            let spine = next_inside;
            next_inside += 1;
            let halves = [
                // (m, v0, v1) across old side 2; (m, v2, v0) across old side 1.
                ([m0, v[0], v[1]], s[2], m2, part(s[0], v[1]), spine),
                ([m0, v[2], v[0]], s[1], m1, spine, part(s[0], v[2])),
            ];
            for (half, old, mid, side1, side2) in halves {
                if mid == NONE {
                    builder.push(half, [first[old as usize], side1, side2]);
                } else {
                    let rib = next_inside;
                    next_inside += 1;
                    let [m, a, b] = half;
                    builder.push([mid, m, a], [side2, part(old, a), rib]);
                    builder.push([mid, b, m], [side1, rib, part(old, b)]);
                }
            }
        }
        parent.extend(std::iter::repeat_n(
            t as u32,
            builder.triangles.len() - before,
        ));
    }
    let piece = parent.iter().map(|&t| mesh.piece[t as usize]).collect();
    Bisected {
        mesh: Mesh {
            vertices,
            triangles: builder.triangles,
            piece,
            sides: builder.sides,
            triangle_sides: builder.triangle_sides,
            circles: mesh.circles.clone(),
            loop_is_outer: mesh.loop_is_outer.clone(),
        },
        parent,
    }
}

struct Builder {
    triangles: Vec<[u32; 3]>,
    triangle_sides: Vec<[u32; 3]>,
    sides: Vec<MeshSide>,
}

impl Builder {
    /// Adds a triangle; the first triangle at a side gives the side its direction and lies left.
    fn push(&mut self, vertices: [u32; 3], sides: [u32; 3]) {
        let t = self.triangles.len() as u32;
        for k in 0..3 {
            let side = &mut self.sides[sides[k] as usize];
            if side.left == NONE {
                side.left = t;
                side.vertices = [vertices[(k + 1) % 3], vertices[(k + 2) % 3]];
            } else {
                side.right = t;
            }
        }
        self.triangles.push(vertices);
        self.triangle_sides.push(sides);
    }
}

/// The sides to cut.
fn closure(mesh: &Mesh, marked: &[bool]) -> Vec<bool> {
    let mut cut = vec![false; mesh.sides.len()];
    let mut queue: Vec<u32> = Vec::new();
    for (t, _) in marked.iter().enumerate().filter(|(_, m)| **m) {
        let s = mesh.triangle_sides[t][0];
        if !cut[s as usize] {
            cut[s as usize] = true;
            queue.push(s);
        }
    }
    while let Some(s) = queue.pop() {
        let side = mesh.sides[s as usize];
        for t in [side.left, side.right] {
            if t == NONE {
                continue;
            }
            let base = mesh.triangle_sides[t as usize][0];
            if !cut[base as usize] {
                cut[base as usize] = true;
                queue.push(base);
            }
        }
    }
    cut
}

/// The middle of a side, on its arc.
fn midpoint(mesh: &Mesh, side: &MeshSide) -> Point {
    let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
    let middle = a.lerp(b, 0.5);
    match mesh.circles.get(side.circle as usize) {
        None => middle,
        Some(circle) => {
            let out = middle - circle.centre;
            circle.centre + out * (circle.radius / out.length())
        }
    }
}
