//! Small structured meshes for unit tests that must not depend on the mesher.

use std::collections::BTreeMap;

use sectile_mesh::Point;
use sectile_mesh::mesh::{Mesh, MeshSide, NONE};
use sectile_mesh::outline::side::Circle;

/// A mesh from its triangles; sides that lie on `circle` at both ends and on the edge are curved.
pub fn mesh_from(vertices: Vec<Point>, triangles: Vec<[u32; 3]>, circles: Vec<Circle>) -> Mesh {
    let mut index: BTreeMap<(u32, u32), usize> = BTreeMap::new();
    let mut sides: Vec<MeshSide> = Vec::new();
    let mut triangle_sides = Vec::new();
    for (t, v) in triangles.iter().enumerate() {
        let mut own = [0; 3];
        for k in 0..3 {
            let (a, b) = (v[(k + 1) % 3], v[(k + 2) % 3]);
            let s = *index.entry((a.min(b), a.max(b))).or_insert_with(|| {
                sides.push(MeshSide {
                    vertices: [a, b],
                    left: t as u32,
                    right: NONE,
                    circle: NONE,
                    boundary: NONE,
                });
                sides.len() - 1
            });
            if sides[s].left != t as u32 {
                sides[s].right = t as u32;
            }
            own[k] = s as u32;
        }
        triangle_sides.push(own);
    }
    let mut next: BTreeMap<u32, usize> = BTreeMap::new();
    for (i, side) in sides.iter().enumerate() {
        if side.right == NONE {
            next.insert(side.vertices[0], i);
        }
    }
    let mut loop_is_outer = Vec::new();
    for i in 0..sides.len() {
        if sides[i].right != NONE || sides[i].boundary != NONE {
            continue;
        }
        let (mut s, mut area) = (i, 0.0);
        while sides[s].boundary == NONE {
            sides[s].boundary = loop_is_outer.len() as u32;
            let [a, b] = sides[s].vertices.map(|v| vertices[v as usize]);
            area += a.x * b.y - a.y * b.x;
            s = next[&sides[s].vertices[1]];
        }
        loop_is_outer.push(area > 0.0);
    }
    for side in sides.iter_mut().filter(|s| s.right == NONE) {
        for (c, circle) in circles.iter().enumerate() {
            let on = |v: u32| {
                (vertices[v as usize].distance(circle.centre) - circle.radius).abs() < 1e-12
            };
            if side.vertices.iter().all(|&v| on(v)) {
                side.circle = c as u32;
            }
        }
    }
    Mesh {
        piece: vec![0; triangles.len()],
        vertices,
        triangles,
        sides,
        triangle_sides,
        circles,
        loop_is_outer,
    }
}

/// Unit cells of a `columns × rows` grid scaled to `width × height`, those for which `keep` holds,
/// each cut into two triangles in alternating directions.
pub fn grid(
    columns: usize,
    rows: usize,
    width: f64,
    height: f64,
    keep: impl Fn(usize, usize) -> bool,
) -> Mesh {
    let mut number = BTreeMap::new();
    let mut vertices = Vec::new();
    let mut triangles = Vec::new();
    for i in 0..columns {
        for j in 0..rows {
            if !keep(i, j) {
                continue;
            }
            let mut at = |i: usize, j: usize| {
                *number.entry((i, j)).or_insert_with(|| {
                    vertices.push(Point::new(
                        width * i as f64 / columns as f64,
                        height * j as f64 / rows as f64,
                    ));
                    vertices.len() as u32 - 1
                })
            };
            let (a, b, c, d) = (at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j + 1));
            if (i + j) % 2 == 0 {
                triangles.extend([[a, b, c], [a, c, d]]);
            } else {
                triangles.extend([[a, b, d], [b, c, d]]);
            }
        }
    }
    mesh_from(vertices, triangles, Vec::new())
}

/// A disc or annulus of radius 1 about the origin: `around` sectors, `rings` rings.
pub fn annulus(inner: f64, around: usize, rings: usize) -> Mesh {
    let mut vertices = Vec::new();
    for r in 0..=rings {
        let radius = inner + (1.0 - inner) * r as f64 / rings as f64;
        for k in 0..around {
            let angle = std::f64::consts::TAU * (k as f64 + 0.5 * r as f64) / around as f64;
            vertices.push(Point::new(radius * angle.cos(), radius * angle.sin()));
        }
    }
    let mut triangles = Vec::new();
    for r in 0..rings {
        for k in 0..around {
            let at = |r: usize, k: usize| (r * around + k % around) as u32;
            triangles.push([at(r, k), at(r + 1, k), at(r, k + 1)]);
            triangles.push([at(r, k + 1), at(r + 1, k), at(r + 1, k + 1)]);
        }
    }
    let circles = [1.0, inner]
        .map(|radius| Circle {
            centre: Point::default(),
            radius,
        })
        .to_vec();
    mesh_from(vertices, triangles, circles)
}
