//! Sections, meshes and fields for the tests of figures: made by formula, without the solver.

use std::collections::BTreeMap;
use std::f64::consts::{FRAC_PI_2, PI, TAU};

use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::domain::{Domain, DomainSide, build_seamed};
use sectile_mesh::mesh::{Mesh, MeshSide, NONE};
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::shape::bar;
use sectile_mesh::outline::side::{Arc, Circle};
use sectile_mesh::{Point, Vector};
use sectile_solver::material::Material;
use sectile_solver::sample::Lattice;
use sectile_solver::solution::{Settings, Solution, solve};

use super::surface::Surface;

/// A domain of one piece from rings of points; each ring runs with material to its left; an arc
/// replaces the side that leaves a point.
pub fn domain(rings: &[Vec<(Point, Option<Arc>)>]) -> Domain {
    let mut domain = Domain {
        points: Vec::new(),
        sides: Vec::new(),
        piece_names: vec!["body".into()],
        piece_materials: vec![0],
        parts: 1,
        seams: Vec::new(),
    };
    for ring in rings {
        let first = domain.points.len() as u32;
        let n = ring.len() as u32;
        for (i, (point, arc)) in ring.iter().enumerate() {
            domain.points.push(*point);
            domain.sides.push(DomainSide {
                from: first + i as u32,
                to: first + (i as u32 + 1) % n,
                arc: *arc,
                left: Some(0),
                right: None,
                faying: false,
            });
        }
    }
    domain
}

pub fn polygon(corners: &[(f64, f64)]) -> Vec<(Point, Option<Arc>)> {
    corners
        .iter()
        .map(|&(x, y)| (Point::new(x, y), None))
        .collect()
}

/// A full circle of three arcs, anticlockwise or not.
pub fn circle(x: f64, y: f64, radius: f64, anticlockwise: bool) -> Vec<(Point, Option<Arc>)> {
    let circle = Circle {
        centre: Point::new(x, y),
        radius,
    };
    let sweep = if anticlockwise { TAU / 3.0 } else { -TAU / 3.0 };
    (0..3)
        .map(|k| {
            let p = circle.centre + Vector::at_angle(0.4 + f64::from(k) * sweep) * radius;
            (p, Some(Arc { circle, sweep }))
        })
        .collect()
}

pub fn annulus(x: f64, y: f64, outer: f64, inner: f64) -> Domain {
    domain(&[circle(x, y, outer, true), circle(x, y, inner, false)])
}

pub fn rectangle(b: f64, h: f64) -> Domain {
    domain(&[polygon(&[(0.0, 0.0), (b, 0.0), (b, h), (0.0, h)])])
}

/// A channel with sharp corners, open to the right.
pub fn channel() -> Domain {
    domain(&[polygon(&[
        (0.0, 0.0),
        (80.0, 0.0),
        (80.0, 12.0),
        (8.0, 12.0),
        (8.0, 188.0),
        (80.0, 188.0),
        (80.0, 200.0),
        (0.0, 200.0),
    ])])
}

/// An unequal angle with sharp corners.
pub fn angle() -> Domain {
    domain(&[polygon(&[
        (0.0, 0.0),
        (75.0, 0.0),
        (75.0, 9.0),
        (9.0, 9.0),
        (9.0, 150.0),
        (0.0, 150.0),
    ])])
}

/// A plate with a row of seven holes, a little off its middle.
pub fn plate_with_holes() -> Domain {
    let mut rings = vec![polygon(&[
        (0.0, 0.0),
        (200.0, 0.0),
        (200.0, 60.0),
        (0.0, 60.0),
    ])];
    rings.extend((0..7).map(|i| circle(20.0 + 26.0 * f64::from(i), 30.0, 11.0, false)));
    domain(&rings)
}

/// Two squares apart.
pub fn two_parts() -> Domain {
    let square = |x: f64| polygon(&[(x, 0.0), (x + 10.0, 0.0), (x + 10.0, 10.0), (x, 10.0)]);
    let mut domain = domain(&[square(0.0), square(30.0)]);
    domain.parts = 2;
    domain
}

/// A half disc, whose arc sweeps half a turn.
pub fn half_disc(radius: f64) -> Domain {
    let circle = Circle {
        centre: Point::default(),
        radius,
    };
    domain(&[vec![
        (Point::new(-radius, 0.0), None),
        (Point::new(radius, 0.0), Some(Arc { circle, sweep: PI })),
    ]])
}

/// Two squares side by side.
pub fn two_pieces() -> Domain {
    let p = Point::new;
    let side = |from, to, left, right| DomainSide {
        from,
        to,
        arc: None,
        left,
        right,
        faying: false,
    };
    Domain {
        points: vec![
            p(0.0, 0.0),
            p(50.0, 0.0),
            p(100.0, 0.0),
            p(100.0, 50.0),
            p(50.0, 50.0),
            p(0.0, 50.0),
        ],
        sides: vec![
            side(0, 1, Some(0), None),
            side(1, 2, Some(1), None),
            side(2, 3, Some(1), None),
            side(3, 4, Some(1), None),
            side(4, 5, Some(0), None),
            side(5, 0, Some(0), None),
            side(1, 4, Some(0), Some(1)),
        ],
        piece_names: vec!["left".into(), "right".into()],
        piece_materials: vec![0, 0],
        parts: 1,
        seams: Vec::new(),
    }
}

/// A flat with a cover held by two fillets and a rib by a groove over half of its thickness; three
/// materials and weld metal of the first.
pub fn joined() -> Domain {
    let piece = |name: &str, material, outline| Piece {
        name: name.into(),
        outline,
        material,
    };
    let seam = |name: &str, between, near, kind, both| SeamRequest {
        name: name.into(),
        between,
        near,
        kind,
        both,
        gap: 0.0,
        material: 0,
    };
    let p = Point::new;
    build_seamed(
        &[
            piece("flat", 0, bar(p(0.0, 0.0), 120.0, 20.0)),
            piece("cover", 1, bar(p(0.0, 16.0), 70.0, 12.0)),
            piece("rib", 2, bar(p(0.0, -30.0), 10.0, 40.0)),
        ],
        &[
            seam(
                "cover to flat",
                [0, 1],
                None,
                SeamKind::Fillet { legs: [6.0, 8.0] },
                true,
            ),
            seam(
                "rib to flat",
                [2, 0],
                Some(p(-5.0, -10.0)),
                SeamKind::Groove { depth: Some(5.0) },
                false,
            ),
        ],
    )
    .expect("a sound section")
}

/// A mesh with its sides from vertices and triangles; `circle_of` names the circle of a boundary side.
pub fn mesh(
    vertices: Vec<Point>,
    triangles: Vec<[u32; 3]>,
    circles: Vec<Circle>,
    circle_of: impl Fn(u32, u32) -> u32,
) -> Mesh {
    let mut sides: Vec<MeshSide> = Vec::new();
    let mut index: BTreeMap<[u32; 2], usize> = BTreeMap::new();
    let mut triangle_sides = vec![[NONE; 3]; triangles.len()];
    for (t, triangle) in triangles.iter().enumerate() {
        for k in 0..3 {
            let (a, b) = (triangle[(k + 1) % 3], triangle[(k + 2) % 3]);
            triangle_sides[t][k] = if let Some(&i) = index.get(&[b, a]) {
                sides[i].right = t as u32;
                i as u32
            } else {
                index.insert([a, b], sides.len());
                sides.push(MeshSide {
                    vertices: [a, b],
                    left: t as u32,
                    right: NONE,
                    circle: NONE,
                    boundary: NONE,
                });
                sides.len() as u32 - 1
            };
        }
    }
    for side in &mut sides {
        if side.right == NONE {
            side.boundary = 0;
            side.circle = circle_of(side.vertices[0], side.vertices[1]);
        }
    }
    let piece = vec![0; triangles.len()];
    Mesh {
        vertices,
        triangles,
        piece,
        sides,
        triangle_sides,
        circles,
        loop_is_outer: vec![true],
    }
}

/// Three materials, ν = 0.3, the others half and a tenth as stiff as the first.
pub fn materials() -> Vec<Material> {
    [
        ("steel", 210_000.0),
        ("half", 105_000.0),
        ("tenth", 21_000.0),
    ]
    .map(|(name, young)| Material {
        name: name.into(),
        young,
        poisson: 0.3,
        shear: young / 2.6,
        yield_stress: None,
        density: Some(7850.0),
    })
    .to_vec()
}

/// Solved with these materials to a tolerance of 1e-3.
pub fn solved(domain: &Domain) -> Solution {
    let settings = Settings {
        tolerance: 1e-3,
        order: None,
        max_unknowns: 100_000,
        reference: None,
    };
    solve(domain, &materials(), 1e-3, &settings, &mut |_| {}).expect("a sound section")
}

/// `nx × ny` cells of two triangles on `b × h`.
pub fn rectangle_mesh(nx: u32, ny: u32, b: f64, h: f64) -> Mesh {
    let mut vertices = Vec::new();
    for j in 0..=ny {
        for i in 0..=nx {
            vertices.push(Point::new(
                b * f64::from(i) / f64::from(nx),
                h * f64::from(j) / f64::from(ny),
            ));
        }
    }
    let mut triangles = Vec::new();
    for j in 0..ny {
        for i in 0..nx {
            let v = |di: u32, dj: u32| (j + dj) * (nx + 1) + i + di;
            triangles.push([v(0, 0), v(1, 0), v(1, 1)]);
            triangles.push([v(0, 0), v(1, 1), v(0, 1)]);
        }
    }
    mesh(vertices, triangles, Vec::new(), |_, _| NONE)
}

/// An annulus of `n` sectors, one cell deep.
pub fn annulus_mesh(n: u32, outer: f64, inner: f64) -> Mesh {
    let mut vertices = Vec::new();
    for r in [inner, outer] {
        for i in 0..n {
            vertices
                .push(Point::default() + Vector::at_angle(TAU * f64::from(i) / f64::from(n)) * r);
        }
    }
    let mut triangles = Vec::new();
    for i in 0..n {
        let j = (i + 1) % n;
        triangles.push([i, n + i, n + j]);
        triangles.push([i, n + j, j]);
    }
    let centre = Point::default();
    let circles = vec![
        Circle {
            centre,
            radius: inner,
        },
        Circle {
            centre,
            radius: outer,
        },
    ];
    mesh(vertices, triangles, circles, move |a, b| {
        u32::from(a >= n && b >= n)
    })
}

/// Lattice points on the straight triangles of a mesh.
pub fn straight_positions(mesh: &Mesh, lattice: &Lattice) -> Vec<Point> {
    let mut out = Vec::new();
    for triangle in &mesh.triangles {
        let [a, b, c] = triangle.map(|v| mesh.vertices[v as usize]);
        for l in &lattice.points {
            out.push(Point::new(
                l[0] * a.x + l[1] * b.x + l[2] * c.x,
                l[0] * a.y + l[1] * b.y + l[2] * c.y,
            ));
        }
    }
    out
}

pub const WAVY_HEIGHT: f64 = 0.6;

pub fn wavy_rectangle() -> (Surface, Vec<f64>) {
    let mesh = rectangle_mesh(40, 24, 1.0, WAVY_HEIGHT);
    let surface = Surface::new(mesh.vertices, mesh.triangles);
    let values = surface
        .points
        .iter()
        .map(|p| (9.0 * p.x).sin() * (7.0 * p.y).cos() + 0.3 * p.x)
        .collect();
    (surface, values)
}

pub fn wavy_annulus() -> (Surface, Vec<f64>) {
    let mesh = annulus_mesh(60, 2.0, 1.0);
    let lattice = Lattice::new(4);
    let sharing = super::surface::Sharing::new(&mesh, &lattice);
    let surface = sharing.surface(&straight_positions(&mesh, &lattice));
    let values = surface
        .points
        .iter()
        .map(|p| (3.0 * p.y.atan2(p.x) + FRAC_PI_2).sin() * p.x.hypot(p.y))
        .collect();
    (surface, values)
}
