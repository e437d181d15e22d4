//! Measures and checks of a mesh.

use crate::map::TriangleMap;
use crate::mesh::{Mesh, NONE};

/// Points a side at which a curved triangle's Jacobian is looked at.
const SAMPLES: u32 = 6;

/// The least Jacobian of a triangle's map over that of its chord triangle: 1 for a straight triangle,
/// positive as long as the map does not fold (looked at on a lattice).
#[must_use]
pub fn least_jacobian_ratio(mesh: &Mesh, t: usize) -> f64 {
    let map = TriangleMap::of(mesh, t, &mesh.vertices, &mesh.circles);
    if map.is_straight() {
        return 1.0;
    }
    let [a, b, c] = mesh.triangles[t].map(|v| mesh.vertices[v as usize]);
    let chord = (b - a).cross(c - a);
    let mut least = f64::INFINITY;
    for i in 0..=SAMPLES {
        for j in 0..=SAMPLES - i {
            let at = map.at(
                f64::from(i) / f64::from(SAMPLES),
                f64::from(j) / f64::from(SAMPLES),
            );
            least = least.min(at.det / chord);
        }
    }
    least
}

/// The least angle between chords of all triangles, degrees.
#[must_use]
pub fn least_angle(mesh: &Mesh) -> f64 {
    let mut least = 180.0_f64;
    for t in &mesh.triangles {
        let p = t.map(|v| mesh.vertices[v as usize]);
        for k in 0..3 {
            let (u, v) = (p[(k + 1) % 3] - p[k], p[(k + 2) % 3] - p[k]);
            least = least.min(u.cross(v).atan2(u.dot(v)).to_degrees());
        }
    }
    least
}

/// Everything that is wrong with a mesh's topology and shape; empty if it keeps every promise of
/// [`Mesh`].
#[must_use]
pub fn defects(mesh: &Mesh) -> Vec<String> {
    let mut out = Vec::new();
    let n = mesh.triangles.len();
    if mesh.piece.len() != n || mesh.triangle_sides.len() != n {
        out.push("arrays of triangles differ in length".into());
        return out;
    }
    let mut uses = vec![0usize; mesh.sides.len()];
    for (t, (v, s)) in mesh.triangles.iter().zip(&mesh.triangle_sides).enumerate() {
        let [a, b, c] = v.map(|i| mesh.vertices[i as usize]);
        if (b - a).cross(c - a) <= 0.0 {
            out.push(format!("triangle {t} does not run anticlockwise"));
        }
        if least_jacobian_ratio(mesh, t) <= 0.0 {
            out.push(format!("triangle {t} folds"));
        }
        for k in 0..3 {
            let side = mesh.sides[s[k] as usize];
            uses[s[k] as usize] += 1;
            let ends = [v[(k + 1) % 3], v[(k + 2) % 3]];
            let as_left = side.left == t as u32 && side.vertices == ends;
            let as_right = side.right == t as u32 && side.vertices == [ends[1], ends[0]];
            if !as_left && !as_right {
                out.push(format!("side {k} of triangle {t} does not know it"));
            }
        }
    }
    let mut used = vec![false; mesh.vertices.len()];
    for &v in mesh.triangles.iter().flatten() {
        used[v as usize] = true;
    }
    for (v, used) in used.iter().enumerate() {
        if !used {
            out.push(format!("vertex {v} belongs to no triangle"));
        }
    }
    for (s, side) in mesh.sides.iter().enumerate() {
        let expected = if side.right == NONE { 1 } else { 2 };
        if uses[s] != expected {
            out.push(format!("side {s} is used {} times", uses[s]));
        }
        if side.right != NONE && side.right < side.left {
            out.push(format!("side {s} has the later triangle to its left"));
        }
        if (side.boundary == NONE) != (side.right != NONE) {
            out.push(format!("side {s} is wrong about the boundary"));
        }
        if let Some(circle) = mesh.circles.get(side.circle as usize) {
            for v in side.vertices {
                let off = mesh.vertices[v as usize].distance(circle.centre) - circle.radius;
                if off.abs() > 1e-9 * circle.radius {
                    out.push(format!("vertex {v} is off its circle by {off:e}"));
                }
            }
        }
    }
    // Euler: vertices − sides + triangles = parts − holes.
    let outer = mesh.loop_is_outer.iter().filter(|o| **o).count() as i64;
    let holes = mesh.loop_is_outer.len() as i64 - outer;
    let euler = mesh.vertices.len() as i64 - mesh.sides.len() as i64 + n as i64;
    if euler != outer - holes {
        out.push(format!("Euler's number is {euler}, not {}", outer - holes));
    }
    out
}
