//! Sides, neighbours and boundary loops of a set of triangles.

use crate::mesh::{Mesh, MeshSide, NONE};
use crate::outline::side::Circle;
use crate::point::Point;

/// Makes a mesh of triangles that run anticlockwise. `circle_of` says which circle (index) the side
/// between two vertices lies on, or [`NONE`].
///
/// Each triangle is turned so that side 0 is its longest (the first of equals), as bisection expects.
#[must_use]
pub fn connect(
    vertices: Vec<Point>,
    mut triangles: Vec<[u32; 3]>,
    piece: Vec<u32>,
    circles: Vec<Circle>,
    circle_of: impl Fn(u32, u32) -> u32,
) -> Mesh {
    for t in &mut triangles {
        longest_first(t, &vertices);
    }
    // Every side as (lower vertex, higher vertex, triangle, place), neighbours next to each other.
    let mut ends: Vec<(u32, u32, u32, u32)> = Vec::with_capacity(3 * triangles.len());
    for (t, v) in triangles.iter().enumerate() {
        for k in 0..3 {
            let (a, b) = (v[(k + 1) % 3], v[(k + 2) % 3]);
            ends.push((a.min(b), a.max(b), t as u32, k as u32));
        }
    }
    ends.sort_unstable();
    let mut sides = Vec::with_capacity(ends.len() / 2 + 1);
    let mut triangle_sides = vec![[NONE; 3]; triangles.len()];
    let mut i = 0;
    while i < ends.len() {
        let (a, b, t, k) = ends[i];
        let v = triangles[t as usize];
        let index = sides.len() as u32;
        let mut side = MeshSide {
            vertices: [v[(k as usize + 1) % 3], v[(k as usize + 2) % 3]],
            left: t,
            right: NONE,
            circle: circle_of(a, b),
            boundary: NONE,
        };
        triangle_sides[t as usize][k as usize] = index;
        i += 1;
        if let Some(&(c, d, u, l)) = ends.get(i)
            && (c, d) == (a, b)
        {
            side.right = u;
            triangle_sides[u as usize][l as usize] = index;
            i += 1;
        }
        sides.push(side);
    }
    let loop_is_outer = number_loops(&vertices, &triangles, &mut sides);
    Mesh {
        vertices,
        triangles,
        piece,
        sides,
        triangle_sides,
        circles,
        loop_is_outer,
    }
}

fn longest_first(t: &mut [u32; 3], vertices: &[Point]) {
    let p = t.map(|v| vertices[v as usize]);
    let length = |k: usize| p[(k + 1) % 3].distance(p[(k + 2) % 3]);
    let mut best = 0;
    for k in 1..3 {
        // A hair's breadth: equal sides must not be told apart by rounding.
        if length(k) > length(best) * (1.0 + 1e-12) {
            best = k;
        }
    }
    t.rotate_left(best);
}

/// Numbers the boundary loops, sides that share a boundary vertex being in one loop, and says of each
/// whether it is an outer edge: of each connected part the loop that encloses the greatest area with
/// material to its left. A closed slit encloses none but for the divisions of its hands.
fn number_loops(vertices: &[Point], triangles: &[[u32; 3]], sides: &mut [MeshSide]) -> Vec<bool> {
    let mut leader: Vec<u32> = (0..vertices.len() as u32).collect();
    for side in sides.iter().filter(|s| s.right == NONE) {
        unite(&mut leader, side.vertices[0], side.vertices[1]);
    }
    let mut number = vec![NONE; vertices.len()];
    let mut area = Vec::new();
    let mut reference: Vec<u32> = Vec::new();
    for side in sides.iter_mut().filter(|s| s.right == NONE) {
        let root = find(&mut leader, side.vertices[0]);
        if number[root as usize] == NONE {
            number[root as usize] = area.len() as u32;
            area.push(0.0);
            reference.push(root);
        }
        side.boundary = number[root as usize];
        let l = side.boundary as usize;
        let [a, b] = side
            .vertices
            .map(|v| vertices[v as usize] - vertices[reference[l] as usize]);
        area[l] += a.cross(b);
    }
    for t in triangles {
        unite(&mut leader, t[0], t[1]);
        unite(&mut leader, t[0], t[2]);
    }
    let mut outer = vec![NONE; vertices.len()];
    for (l, &v) in reference.iter().enumerate() {
        let largest = &mut outer[find(&mut leader, v) as usize];
        if *largest == NONE || area[l] > area[*largest as usize] {
            *largest = l as u32;
        }
    }
    let mut is_outer = vec![false; area.len()];
    for l in outer.into_iter().filter(|&l| l != NONE) {
        is_outer[l as usize] = true;
    }
    is_outer
}

fn unite(leader: &mut [u32], a: u32, b: u32) {
    let (a, b) = (find(leader, a), find(leader, b));
    leader[a.max(b) as usize] = a.min(b);
}

fn find(leader: &mut [u32], mut x: u32) -> u32 {
    while leader[x as usize] != x {
        leader[x as usize] = leader[leader[x as usize] as usize];
        x = leader[x as usize];
    }
    x
}
