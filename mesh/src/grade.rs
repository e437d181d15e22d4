//! Geometric grading of a mesh towards chosen vertices.

use crate::bisect::bisect;
use crate::mesh::Mesh;

/// Bisects until every triangle at vertex `v` of a target `(v, size)` has no side longer than `size`.
///
/// Sizes below what the coordinates resolve, a thousand roundings of the largest, are taken as that.
///
/// Each pass halves the triangles at the vertex and, for conformity, their surroundings, so sizes grow
/// in proportion to the distance from it: about a dozen triangles for each halving.
#[must_use]
pub fn grade_to(mesh: &Mesh, targets: &[(u32, f64)]) -> Mesh {
    let largest = mesh
        .vertices
        .iter()
        .fold(0.0_f64, |m, p| m.max(p.x.abs()).max(p.y.abs()));
    let least = 1e3 * f64::EPSILON * largest;
    let mut limit = vec![f64::INFINITY; mesh.vertices.len()];
    for &(v, size) in targets {
        if let Some(l) = limit.get_mut(v as usize) {
            *l = l.min(size.max(least));
        }
    }
    let mut graded = mesh.clone();
    loop {
        let marked: Vec<bool> = graded
            .triangles
            .iter()
            .map(|t| {
                let size = t
                    .iter()
                    .filter_map(|&v| limit.get(v as usize))
                    .fold(f64::INFINITY, |m, &l| m.min(l));
                size.is_finite() && longest_side(&graded, t) > size
            })
            .collect();
        if !marked.contains(&true) {
            return graded;
        }
        graded = bisect(&graded, &marked).mesh;
    }
}

fn longest_side(mesh: &Mesh, t: &[u32; 3]) -> f64 {
    let p = t.map(|v| mesh.vertices[v as usize]);
    (0..3).fold(0.0_f64, |m, k| m.max(p[k].distance(p[(k + 1) % 3])))
}
