//! Heaps against closed forms. From memory of A. Nadai, Theory of Flow and Fracture of Solids 1, 1950,
//! or by elementary integration; holes after M. A. Sadowsky, J. Appl. Mech. 8, 1941.
#![allow(clippy::unwrap_used)]

use std::f64::consts::{FRAC_PI_3, PI, SQRT_2};

use approx::assert_relative_eq;
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::domain::{Domain, build, build_seamed};
use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::shape::{bar, circle, polygon, tube};
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::triangulate::{Sizing, triangulate};
use sectile_mesh::{Point, Vector};

use super::torsion_modulus;
use crate::figure::{Figure, Trust};

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn domain(outer: Ring, holes: Vec<Ring>) -> Domain {
    let outline = Outline { outer, holes };
    let piece = Piece {
        name: "body".into(),
        outline,
        material: 0,
    };
    build(&[piece]).unwrap()
}

fn solid(corners: &[[f64; 2]]) -> Domain {
    let corners: Vec<Point> = corners.iter().map(|&[x, y]| p(x, y)).collect();
    domain(polygon(&corners), Vec::new())
}

fn modulus(domain: &Domain, tolerance: f64) -> Figure {
    let mesh = triangulate(domain, &Sizing::default()).unwrap();
    torsion_modulus(domain, &mesh, tolerance).unwrap()
}

/// The figure is closed form and right to rounding.
fn exact(domain: &Domain, expected: f64) {
    let figure = modulus(domain, 1e-5);
    assert_eq!(figure.trust, Trust::Exact, "{figure:?} {expected}");
    assert!(figure.contains(expected), "{figure:?} {expected}");
    assert!(figure.half_width() < 3e-11 * expected, "{figure:?}");
}

/// The figure encloses the value within the tolerance, at every tolerance.
fn enclosed(domain: &Domain, expected: f64) {
    for tolerance in [1e-2, 1e-4, 1e-6] {
        let figure = modulus(domain, tolerance);
        assert!(figure.contains(expected), "{figure:?} {expected}");
        assert!(
            figure.half_width() <= 1.001 * tolerance * expected,
            "{figure:?}"
        );
    }
}

#[test]
fn polygons_without_re_entrant_corners_are_exact() {
    // Rectangle a ≥ b: b²(3a − b)/6.
    exact(
        &solid(&[[0.0, 0.0], [2.0, 0.0], [2.0, 1.0], [0.0, 1.0]]),
        5.0 / 6.0,
    );
    exact(
        &solid(&[[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]]),
        1.0 / 3.0,
    );
    exact(
        &solid(&[[0.0, 0.0], [500.0, 0.0], [500.0, 3.0], [0.0, 3.0]]),
        9.0 * 1497.0 / 6.0,
    );
    // With an inscribed circle that touches all sides: (2/3) A r.
    exact(
        &solid(&[[0.0, 0.0], [1.0, 0.0], [0.5, 0.75_f64.sqrt()]]),
        1.0 / 12.0,
    );
    exact(
        &solid(&[[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]]),
        2.0 / 3.0 * 0.5 * (1.0 - 0.5 * SQRT_2),
    );
    let around = |n: u32| -> Vec<[f64; 2]> {
        (0..n)
            .map(|k| {
                let v = Vector::at_angle(2.0 * PI * f64::from(k) / f64::from(n));
                [v.x, v.y]
            })
            .collect()
    };
    exact(&solid(&around(6)), 1.5);
    // Of a hundred sides many are near at once: bounded, not exact.
    let n = 100.0;
    let apothem = (PI / n).cos();
    enclosed(
        &solid(&around(100)),
        2.0 / 3.0 * n * (PI / n).sin() * apothem * apothem,
    );
}

#[test]
fn discs_and_tubes() {
    // (2/3) π (R³ − r³). In a tube the ways from within and from without are equal along the inner edge.
    exact(
        &domain(circle(p(3.0, -2.0), 2.0), Vec::new()),
        2.0 / 3.0 * PI,
    );
    let ring = |d: f64, t: f64| {
        let outline = tube(p(0.0, 0.0), d, t);
        domain(outline.outer, outline.holes)
    };
    enclosed(&ring(2.0, 0.4), 2.0 / 3.0 * PI * (1.0 - 0.216));
    enclosed(
        &ring(200.0, 0.5),
        2.0 / 3.0 * PI * (100.0_f64.powi(3) - 99.5_f64.powi(3)),
    );
}

/// Roof over a box's wall: the inner edge lies at the height of the wall t, with a flat top.
/// Outer b × h: volume of the whole pyramid roof cut off at t.
#[test]
fn a_box_has_a_flat_top() {
    let (b, h, t) = (60.0, 100.0, 5.0);
    let hole = bar(p(0.0, 0.0), b - 2.0 * t, h - 2.0 * t).outer;
    let outer = bar(p(0.0, 0.0), b, h).outer;
    // ∫_0^t area of what lies higher: (b − 2s)(h − 2s).
    let volume = b * h * t - (b + h) * t * t + 4.0 / 3.0 * t.powi(3);
    exact(&domain(outer, vec![hole]), 2.0 * volume);
}

#[test]
fn a_tee_has_parabolic_valleys() {
    // Stem t × h below a flange b × t: away from the joint a roof of slope 1; within, the re-entrant
    // corners at (±t/2, 0) are points of the edge. Over the joint's column |x| < t/2: from the top t − y,
    // from the corners √((t/2 − |x|)² + y²). A grid of plain distances is the check.
    let t = 2.0;
    let tee = solid(&[
        [-1.0, -8.0],
        [1.0, -8.0],
        [1.0, 0.0],
        [6.0, 0.0],
        [6.0, t],
        [-6.0, t],
        [-6.0, 0.0],
        [-1.0, 0.0],
    ]);
    let phi = |x: f64, y: f64| {
        let x = x.abs();
        let segment = |ax: f64, ay: f64, bx: f64, by: f64| {
            let (dx, dy) = (bx - ax, by - ay);
            let s = ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy);
            let s = s.clamp(0.0, 1.0);
            (x - ax - s * dx).hypot(y - ay - s * dy)
        };
        segment(-1.0, -8.0, 1.0, -8.0)
            .min(segment(1.0, -8.0, 1.0, 0.0))
            .min(segment(1.0, 0.0, 6.0, 0.0))
            .min(segment(6.0, 0.0, 6.0, t))
            .min(segment(-6.0, t, 6.0, t))
    };
    let n = 1000;
    let cell = 1.0 / f64::from(n);
    let mut sum = 0.0;
    for i in 0..6 * n {
        for j in -8 * n..2 * n {
            let (x, y) = ((f64::from(i) + 0.5) * cell, (f64::from(j) + 0.5) * cell);
            if x < 1.0 || y > 0.0 {
                sum += phi(x, y);
            }
        }
    }
    let grid = 4.0 * sum * cell * cell;
    let figure = modulus(&tee, 1e-8);
    assert_relative_eq!(figure.value, grid, max_relative = 2e-6);
    assert!(figure.half_width() <= 1.001e-8 * figure.value);
    enclosed(&tee, figure.value);
}

#[test]
fn half_disc_has_a_curved_ridge() {
    // Where the distances from diameter and arc are equal, y = 1 − ρ, the ridge is ρ = 1/(1 + sin θ):
    // ∫φ = ∫_0^π [∫_0^ridge ρ sin θ ρ dρ + ∫_ridge^1 (1 − ρ) ρ dρ] dθ, the inner ones in closed form.
    let half = Ring {
        sides: vec![
            Side {
                from: p(1.0, 0.0),
                to: p(-1.0, 0.0),
                arc: Some(Arc {
                    circle: Circle {
                        centre: p(0.0, 0.0),
                        radius: 1.0,
                    },
                    sweep: PI,
                }),
                corner: 0,
            },
            Side {
                from: p(-1.0, 0.0),
                to: p(1.0, 0.0),
                arc: None,
                corner: 1,
            },
        ],
    };
    let n = 200_000;
    let integral: f64 = (0..n)
        .map(|k| {
            let theta = PI * (f64::from(k) + 0.5) / f64::from(n);
            let r = 1.0 / (1.0 + theta.sin());
            let outer = (0.5 - 1.0 / 3.0) - (0.5 * r * r - r.powi(3) / 3.0);
            theta.sin() * r.powi(3) / 3.0 + outer
        })
        .sum::<f64>()
        * PI
        / f64::from(n);
    enclosed(&domain(half, Vec::new()), 2.0 * integral);
}

#[test]
fn an_eccentric_hole_is_as_high_as_its_thinnest_wall() {
    // Radius 1, hole of radius 0.3 at (0.4, 0): wall 0.3. Beside the hole's level the ways from the
    // hole's edge and from the outer edge meet where 1 − ρ = 0.3 + ρ' − 0.3, ρ + ρ' = 1: an ellipse of
    // foci 0 and 0.4. Inside φ = ρ', the distance from the hole's centre: ∫(1 − ρ) over the disc less
    // the ellipse, plus ∫ρ' over the ellipse less the hole, plus the top. By symmetry of the ellipse
    // ∫ρ' = ∫ρ over it, so ∫(1 − ρ) − ∫ρ' = ∫(1 − 2ρ) needs ∫ρ over the ellipse from a focus:
    // with major semi-axis a = 1/2, e = 0.4, l = a(1 − e²): ∫ r³/3 dθ, r = l/(1 + e cos θ).
    let outer = circle(p(0.0, 0.0), 2.0);
    let hole = circle(p(0.4, 0.0), 0.6);
    let (a, e) = (0.5_f64, 0.4_f64);
    let n = 4000;
    let radius_integral: f64 = (0..n)
        .map(|k| {
            let theta = 2.0 * PI * f64::from(k) / f64::from(n);
            (a * (1.0 - e * e) / (1.0 + e * theta.cos())).powi(3) / 3.0
        })
        .sum::<f64>()
        * 2.0
        * PI
        / f64::from(n);
    let ellipse = PI * a * a * (1.0 - e * e).sqrt();
    let volume = PI / 3.0 - (ellipse - 2.0 * radius_integral)
        // The hole: its level 0.3 in place of ρ'.
        + 0.3 * PI * 0.09
        - 2.0 * PI * 0.3_f64.powi(3) / 3.0;
    enclosed(&domain(outer, vec![hole]), 2.0 * volume);
}

#[test]
fn a_way_through_another_hole_costs_nothing() {
    // A bar 40 × 10 with holes 6 × 6 in line, 2 from the long sides each: from the middle hole the way
    // out is 2 in any case. Moved into a bar of height 30, 12 from the long sides, the first hole is 4
    // from the short side, the second 1 farther across the first: 5.
    let outer = bar(p(20.0, 0.0), 40.0, 30.0).outer;
    let first = bar(p(7.0, 0.0), 6.0, 6.0).outer;
    let second = bar(p(14.0, 0.0), 6.0, 6.0).outer;
    let section = domain(outer, vec![first, second]);
    let edge = super::height::Edge::new(&section);
    let mut heights = edge.heights.clone();
    heights.sort_by(f64::total_cmp);
    assert_eq!(heights, [0.0, 4.0, 5.0]);
    assert_relative_eq!(edge.tops, 9.0 * 36.0, max_relative = 1e-15);
    // Against a grid.
    let n = 40;
    let cell = 1.0 / f64::from(n);
    let level = |x: f64, y: f64, c: f64, height: f64| {
        let dx = ((x - c).abs() - 3.0).max(0.0);
        let dy = (y.abs() - 3.0).max(0.0);
        height + dx.hypot(dy)
    };
    let mut sum = 0.0;
    for i in 0..40 * n {
        for j in -15 * n..15 * n {
            let (x, y) = ((f64::from(i) + 0.5) * cell, (f64::from(j) + 0.5) * cell);
            let roof = x.min(40.0 - x).min(15.0 - y.abs());
            sum += roof.min(level(x, y, 7.0, 4.0)).min(level(x, y, 14.0, 5.0));
        }
    }
    let figure = modulus(&section, 1e-6);
    assert_relative_eq!(figure.value, 2.0 * sum * cell * cell, max_relative = 1e-4);
}

#[test]
fn rounded_corners_and_keyways() {
    // A square of side 2 with corners rounded by r, under the roof: inside the corner r − ρ, so each
    // corner's r × r square loses ∫ roof and gains π r³/12, plus nothing elsewhere while the ridges meet
    // at the centres of the arcs.
    let r = 0.5;
    let corner = |cx: f64, cy: f64, start: f64| Side {
        from: p(cx + r * start.cos(), cy + r * start.sin()),
        to: p(
            cx + r * (start + 0.5 * PI).cos(),
            cy + r * (start + 0.5 * PI).sin(),
        ),
        arc: Some(Arc {
            circle: Circle {
                centre: p(cx, cy),
                radius: r,
            },
            sweep: 0.5 * PI,
        }),
        corner: 0,
    };
    let line = |from: Point, to: Point| Side {
        from,
        to,
        arc: None,
        corner: 0,
    };
    let arcs = [
        corner(0.5, -0.5, -0.5 * PI),
        corner(0.5, 0.5, 0.0),
        corner(-0.5, 0.5, 0.5 * PI),
        corner(-0.5, -0.5, PI),
    ];
    let mut sides = Vec::new();
    for k in 0..4 {
        sides.push(arcs[k]);
        sides.push(line(arcs[k].to, arcs[(k + 1) % 4].from));
    }
    // Roof over a square of side 2: 4/3; over each corner's square r³/3.
    let volume = 4.0 / 3.0 - 4.0 * r.powi(3) / 3.0 + 4.0 * PI * r.powi(3) / 12.0;
    let rounded = domain(Ring { sides }, Vec::new());
    exact(&rounded, 2.0 * volume);

    // A disc of radius 1 about (1, 0) with a groove of radius 0.2 about (0, 0): equal distances
    // 1 − ρ₁ = ρ₀ − 0.2 on an ellipse of foci (0, 0) and (1, 0), major axis 1.2. From the focus (0, 0)
    // in polar coordinates, θ = 0 along x: ellipse r_e = l/(1 − e cos θ), disc's edge 2 cos θ.
    let n = 4000;
    let (a, e) = (0.6_f64, 0.5 / 0.6);
    // Edge and groove meet where 2 cos θ = 0.2.
    let end = 0.1_f64.acos();
    let grid = |theta: f64| {
        let ridge = a * (1.0 - e * e) / (1.0 - e * theta.cos());
        let edge = 2.0 * theta.cos();
        let m = 4000;
        let mut sum = (ridge.powi(3) - 0.008) / 3.0 - 0.1 * (ridge * ridge - 0.04);
        for k in 0..m {
            let r = ridge + (edge - ridge) * (f64::from(k) + 0.5) / f64::from(m);
            let far = (r * theta.cos() - 1.0).hypot(r * theta.sin());
            sum += (1.0 - far) * r * (edge - ridge) / f64::from(m);
        }
        sum
    };
    let volume: f64 = (0..n)
        .map(|k| grid(end * (2.0 * (f64::from(k) + 0.5) / f64::from(n) - 1.0)))
        .sum::<f64>()
        * 2.0
        * end
        / f64::from(n);
    let at = |c: f64, x: f64| p(x, c * (1.0 - (x - 1.0) * (x - 1.0)).sqrt());
    let x = 0.02;
    let groove = (0.04_f64 - x * x).sqrt();
    let about = |centre: Point, radius: f64, from: Point, to: Point, sweep: f64| Side {
        from,
        to,
        arc: Some(Arc {
            circle: Circle { centre, radius },
            sweep,
        }),
        corner: 0,
    };
    let (low, high) = (at(-1.0, x), at(1.0, x));
    assert_relative_eq!(high.y, groove, max_relative = 1e-12);
    let half = (high - p(1.0, 0.0)).angle();
    let open = (high - p(0.0, 0.0)).angle();
    let grooved = domain(
        Ring {
            sides: vec![
                about(p(1.0, 0.0), 1.0, low, high, 2.0 * half),
                about(p(0.0, 0.0), 0.2, high, low, -2.0 * open),
            ],
        },
        Vec::new(),
    );
    let figure = modulus(&grooved, 1e-6);
    assert_relative_eq!(figure.value, 2.0 * volume, max_relative = 1.2e-6);
}

#[test]
fn pieces_that_share_an_interface_are_one_heap() {
    let piece = |outline| Piece {
        name: "half".into(),
        outline,
        material: 0,
    };
    let joined = build(&[
        piece(bar(p(0.5, 0.5), 1.0, 1.0)),
        piece(bar(p(1.5, 0.5), 1.0, 1.0)),
    ])
    .unwrap();
    exact(&joined, 5.0 / 6.0);
    let apart = build(&[
        piece(bar(p(0.5, 0.5), 1.0, 1.0)),
        piece(bar(p(2.5, 0.5), 1.0, 1.0)),
    ])
    .unwrap();
    let mesh = triangulate(&apart, &Sizing::default()).unwrap();
    assert!(torsion_modulus(&apart, &mesh, 1e-4).is_none());
}

/// A groove between two pieces, nearest to a point: of a depth from one end or both, or full.
fn groove(between: [usize; 2], near: Point, depth: Option<f64>, both: bool) -> SeamRequest {
    SeamRequest {
        name: "groove".into(),
        between,
        near: Some(near),
        kind: SeamKind::Groove { depth },
        both,
        gap: 0.0,
        material: 0,
    }
}

fn seamed(outlines: Vec<Outline>, seams: &[SeamRequest]) -> Domain {
    let pieces: Vec<Piece> = outlines
        .into_iter()
        .enumerate()
        .map(|(i, outline)| Piece {
            name: format!("piece {i}"),
            outline,
            material: 0,
        })
        .collect();
    build_seamed(&pieces, seams).unwrap()
}

#[test]
fn a_slit_is_a_hole_without_width() {
    // Flats 40 × 5 on each other, fused over 2 from either end: the slit between is an edge of its own
    // at the height 2.
    let flats = || vec![bar(p(20.0, 2.5), 40.0, 5.0), bar(p(20.0, 7.5), 40.0, 5.0)];
    let seam = |both| groove([0, 1], p(0.0, 5.0), Some(2.0), both);
    let section = seamed(flats(), &[seam(true)]);
    let edge = super::height::Edge::new(&section);
    let mut heights = edge.heights.clone();
    heights.sort_by(f64::total_cmp);
    assert_relative_eq!(heights[..], [0.0, 2.0], epsilon = 1e-12);
    assert_relative_eq!(edge.tops, 0.0, epsilon = 1e-12);
    let n = 40;
    let cell = 1.0 / f64::from(n);
    let mut sum = 0.0;
    for i in 0..40 * n {
        for j in 0..10 * n {
            let (x, y) = ((f64::from(i) + 0.5) * cell, (f64::from(j) + 0.5) * cell);
            let roof = x.min(40.0 - x).min(y).min(10.0 - y);
            let aside = ((x - 20.0).abs() - 18.0).max(0.0);
            sum += roof.min(2.0 + aside.hypot(y - 5.0));
        }
    }
    let figure = modulus(&section, 1e-6);
    assert_relative_eq!(figure.value, 2.0 * sum * cell * cell, max_relative = 3e-5);

    // Fused from one end only, the slit is part of the outer edge: no height of its own.
    let open = seamed(flats(), &[seam(false)]);
    assert_eq!(super::height::Edge::new(&open).heights, [0.0]);
    let mut sum = 0.0;
    for i in 0..40 * n {
        for j in 0..10 * n {
            let (x, y) = ((f64::from(i) + 0.5) * cell, (f64::from(j) + 0.5) * cell);
            let roof = x.min(40.0 - x).min(y).min(10.0 - y);
            sum += roof.min((2.0 - x).max(0.0).hypot(y - 5.0));
        }
    }
    let figure = modulus(&open, 1e-6);
    assert_relative_eq!(figure.value, 2.0 * sum * cell * cell, max_relative = 3e-5);

    // A slit along a line of equal height changes nothing: a core of radius 1 in a sleeve of radius 2
    // made of two halves, the core joined to one of them wholly and to the other at the ends of their
    // common arc, bears what the disc bears, (2/3) π R³.
    let core = Outline {
        outer: circle(p(0.0, 0.0), 2.0),
        holes: Vec::new(),
    };
    let half = |start: f64| {
        let at = |radius: f64, angle: f64| p(0.0, 0.0) + Vector::at_angle(angle) * radius;
        let side = |from: Point, to: Point, arc: Option<(f64, f64)>| Side {
            from,
            to,
            arc: arc.map(|(radius, sweep)| Arc {
                circle: Circle {
                    centre: p(0.0, 0.0),
                    radius,
                },
                sweep,
            }),
            corner: 0,
        };
        let end = start + PI;
        Outline {
            outer: Ring {
                sides: vec![
                    side(at(2.0, start), at(2.0, end), Some((2.0, PI))),
                    side(at(2.0, end), at(1.0, end), None),
                    side(at(1.0, end), at(1.0, start), Some((1.0, -PI))),
                    side(at(1.0, start), at(2.0, start), None),
                ],
            },
            holes: Vec::new(),
        }
    };
    let section = seamed(
        vec![core, half(0.0), half(PI)],
        &[
            groove([1, 2], p(1.5, 0.0), None, false),
            groove([1, 2], p(-1.5, 0.0), None, false),
            groove([0, 1], p(0.0, 1.0), None, false),
            groove([0, 2], p(1.0, 0.0), Some(0.3), true),
        ],
    );
    let heights = super::height::Edge::new(&section).heights;
    assert_eq!(heights.len(), 2);
    assert_relative_eq!(heights[0].max(heights[1]), 1.0, max_relative = 1e-12);
    enclosed(&section, 16.0 / 3.0 * PI);
}

#[test]
fn moved_turned_and_scaled() {
    let corners = [
        [0.0, 0.0],
        [8.0, 0.0],
        [8.0, 1.0],
        [1.0, 1.5],
        [1.0, 6.0],
        [0.0, 6.0],
    ];
    let plain = modulus(&solid(&corners), 1e-6).value;
    for (scale, turn, by) in [(1e-3, 0.3, 0.0), (1.0, FRAC_PI_3, 1e4), (1e3, 2.0, -1e5)] {
        let moved = corners.map(|[x, y]| {
            let v = Vector::new(x, y);
            let (c, s) = (
                Vector::at_angle(turn),
                Vector::at_angle(turn).perpendicular(),
            );
            let v = c * v.x + s * v.y;
            [v.x * scale + by, v.y * scale - by]
        });
        let figure = modulus(&solid(&moved), 1e-6);
        assert_relative_eq!(
            figure.value,
            plain * f64::powi(scale, 3),
            max_relative = 2e-6
        );
    }
}

/// Stars with rounded corners and two holes, without order: the enclosures of a rough division hold
/// what a fine one gives, and that is what a grid of plain distances gives.
#[test]
fn enclosures_of_chance_sections_hold() {
    let mut state = 7u64;
    let mut next = || {
        state = state
            .wrapping_mul(6364136223846793005)
            .wrapping_add(1442695040888963407);
        (state >> 40) as f64 / (1u64 << 24) as f64
    };
    let mut tried = 0;
    for round in 0..30 {
        let n = 5 + (next() * 5.0) as usize;
        let corners: Vec<Corner> = (0..n)
            .map(|k| {
                let angle = 2.0 * PI * (k as f64 + 0.6 * next()) / n as f64;
                Corner {
                    at: p(0.0, 0.0) + Vector::at_angle(angle) * (1.0 + next()),
                    round: (next() < 0.6).then(|| 0.02 + 0.1 * next()),
                    via: None,
                }
            })
            .collect();
        let Ok(outer) = ring_from_corners(&corners) else {
            continue;
        };
        let holes = vec![
            circle(p(0.25 + 0.02 * next(), 0.1 * next()), 0.3 + 0.1 * next()),
            bar(p(-0.25, 0.1 * next()), 0.3, 0.2 + 0.1 * next()).outer,
        ];
        let built = |holes| {
            build(&[Piece {
                name: "body".into(),
                outline: Outline {
                    outer: outer.clone(),
                    holes,
                },
                material: 0,
            }])
        };
        let (Ok(whole), Ok(domain)) = (built(Vec::new()), built(holes)) else {
            continue;
        };
        tried += 1;
        let fine = modulus(&domain, 1e-6);
        for tolerance in [0.3, 1e-2, 1e-3, 1e-5] {
            let figure = modulus(&domain, tolerance);
            assert!(
                figure.low <= fine.high && fine.low <= figure.high,
                "{round}: {figure:?} {fine:?}"
            );
            assert!(figure.half_width() <= 1.001 * tolerance * fine.value);
        }
        let edge = super::height::Edge::new(&domain);
        let (n, cell) = (200, 0.02);
        let mut sum = 0.0;
        for i in -n / 2..n / 2 {
            for j in -n / 2..n / 2 {
                let at = p((f64::from(i) + 0.5) * cell, (f64::from(j) + 0.5) * cell);
                let distances = edge.faces.iter().map(|f| (f.distance(at), edge.height(f)));
                if domain.contains(at, 0.0) {
                    sum += distances.map(|(d, h)| d + h).fold(f64::INFINITY, f64::min);
                } else if whole.contains(at, 0.0) {
                    // In a hole: the height of the edge about.
                    let nearest = distances.min_by(|a, b| a.0.total_cmp(&b.0));
                    sum += nearest.unwrap().1;
                }
            }
        }
        let volume = sum * cell * cell;
        assert_relative_eq!(fine.value, 2.0 * volume, max_relative = 2e-5);
    }
    assert!(tried >= 15, "{tried}");
}
