//! What every mesh must keep.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::map::TriangleMap;
use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::outline::piece::{Piece, Ring};
use sectile_mesh::quality::defects;

/// The area that a ring encloses, from its true sides.
pub fn ring_area(ring: &Ring) -> f64 {
    let origin = ring.sides[0].from;
    let signed: f64 = ring
        .sides
        .iter()
        .map(|side| {
            let chord = 0.5 * (side.from - origin).cross(side.to - origin);
            chord
                + side.arc.map_or(0.0, |arc| {
                    0.5 * arc.circle.radius.powi(2) * sweep_less_sine(arc.sweep)
                })
        })
        .sum();
    signed.abs()
}

/// `s − sin s` without cancellation.
fn sweep_less_sine(s: f64) -> f64 {
    if s.abs() > 0.5 {
        return s - s.sin();
    }
    let (mut sum, mut term) = (0.0, s);
    for k in 1..12 {
        let m = 2.0 * f64::from(k);
        term *= -s * s / (m * (m + 1.0));
        sum -= term;
    }
    sum
}

pub fn exact_area(pieces: &[Piece]) -> f64 {
    pieces
        .iter()
        .map(|p| ring_area(&p.outline.outer) - p.outline.holes.iter().map(ring_area).sum::<f64>())
        .sum()
}

/// Nodes and weights of Gauss and Legendre's rule on (0, 1), by Newton's method.
fn gauss(n: usize) -> Vec<(f64, f64)> {
    (0..n)
        .map(|i| {
            let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n as f64 + 0.5)).cos();
            let mut slope = 1.0;
            for _ in 0..20 {
                let (mut p0, mut p1) = (1.0, x);
                for k in 2..=n {
                    let k = k as f64;
                    (p0, p1) = (p1, ((2.0 * k - 1.0) * x * p1 - (k - 1.0) * p0) / k);
                }
                slope = n as f64 * (x * p1 - p0) / (x * x - 1.0);
                x -= p1 / slope;
            }
            (0.5 + 0.5 * x, 1.0 / ((1.0 - x * x) * slope * slope))
        })
        .collect()
}

/// The area of all triangles, curved ones integrated through their map.
pub fn true_area(mesh: &Mesh) -> f64 {
    let rule = gauss(12);
    (0..mesh.triangles.len())
        .map(|t| {
            let map = TriangleMap::of(mesh, t, &mesh.vertices, &mesh.circles);
            if map.is_straight() {
                return 0.5 * map.at(0.0, 0.0).det;
            }
            let mut area = 0.0;
            for &(u, wu) in &rule {
                for &(v, wv) in &rule {
                    // The square folded onto the triangle: ξ = u, η = (1 − u) v.
                    area += wu * wv * (1.0 - u) * map.at(u, (1.0 - u) * v).det;
                }
            }
            area
        })
        .sum()
}

/// The shape of every mesh: no defects, the true area, arcs in parts of at most 30°.
pub fn check_mesh(name: &str, mesh: &Mesh, area: f64) {
    let found = defects(mesh);
    assert!(found.is_empty(), "{name}: {found:?}");
    let off = true_area(mesh) / area - 1.0;
    // Every vertex on the edge is off by the rounding of its coordinates.
    let (mut largest, mut edge) = (0.0_f64, 0.0);
    for side in mesh.sides.iter().filter(|s| s.right == NONE) {
        let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
        largest = largest.max(a.x.abs()).max(a.y.abs());
        edge += a.distance(b);
    }
    let rounding = f64::EPSILON * largest * edge / area;
    assert!(
        off.abs() < 1e-10 + rounding,
        "{name}: area is off by {off:e}"
    );
    for side in mesh.sides.iter().filter(|s| s.circle != NONE) {
        let radius = mesh.circles[side.circle as usize].radius;
        let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
        let sweep = 2.0 * (0.5 * a.distance(b) / radius).min(1.0).asin();
        assert!(
            sweep.to_degrees() < 30.0 + 1e-6,
            "{name}: an arc of {sweep}"
        );
    }
}

/// What a triangulation keeps beyond [`check_mesh`]: the domain's points come first, and every
/// interface and free edge of the domain is made of mesh sides.
pub fn check_triangulation(name: &str, mesh: &Mesh, domain: &Domain, area: f64) {
    check_mesh(name, mesh, area);
    assert_eq!(
        mesh.vertices[..domain.points.len()],
        domain.points[..],
        "{name}: the domain's points come first"
    );
    let length = |a: Point, b: Point| a.distance(b);
    // Chords are shorter than arcs: compare straight interfaces only, and the perimeter of arcs.
    let mut between = 0.0;
    let mut edge = 0.0;
    for side in &mesh.sides {
        let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
        let l = match mesh.circles.get(side.circle as usize) {
            None => length(a, b),
            Some(c) => 2.0 * c.radius * (0.5 * length(a, b) / c.radius).min(1.0).asin(),
        };
        if side.right == NONE {
            edge += l;
        } else if mesh.piece[side.left as usize] != mesh.piece[side.right as usize] {
            between += l;
        }
    }
    let (mut wanted_between, mut wanted_edge) = (0.0, 0.0);
    for side in &domain.sides {
        let l = match side.arc {
            None => length(
                domain.points[side.from as usize],
                domain.points[side.to as usize],
            ),
            Some(arc) => arc.circle.radius * arc.sweep.abs(),
        };
        if side.left.is_some() && side.right.is_some() {
            wanted_between += l;
        } else {
            wanted_edge += l;
        }
    }
    assert!(
        (edge / wanted_edge - 1.0).abs() < 1e-9,
        "{name}: free edge {edge}, wanted {wanted_edge}"
    );
    assert!(
        (between - wanted_between).abs() < 1e-9 * wanted_edge,
        "{name}: interfaces {between}, wanted {wanted_between}"
    );
    let parts = mesh.loop_is_outer.iter().filter(|o| **o).count();
    assert!(parts >= domain.parts, "{name}: {parts} outer loops");
}
