//! Sections by chance.

use proptest::prelude::*;

use sectile_mesh::Vector;
use sectile_mesh::domain::build;
use sectile_mesh::domain::fault::Fault;
use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::shape::circle;
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::quality::least_angle;
use sectile_mesh::triangulate::{Sizing, triangulate};

use crate::check::{check_triangulation, exact_area};
use crate::shapes::{moved, of_points, piece, point};

/// A star-shaped loop about the origin with some corners rounded, and round holes.
fn star() -> impl Strategy<Value = Outline> {
    let corner = (0.5..1.0_f64, 0.0..0.8_f64, prop::option::of(0.001..0.2_f64));
    let hole = (-0.4..0.4_f64, -0.4..0.4_f64, 0.005..0.3_f64);
    (
        prop::collection::vec(corner, 3..14),
        prop::collection::vec(hole, 0..4),
    )
        .prop_map(|(corners, holes)| {
            let n = corners.len() as f64;
            let list: Vec<Corner> = corners
                .iter()
                .enumerate()
                .map(|(k, &(r, shift, round))| Corner {
                    at: point(0.0, 0.0)
                        + Vector::at_angle(std::f64::consts::TAU * (k as f64 + shift) / n)
                            * (100.0 * r),
                    round: round.map(|r| 100.0 * r),
                    via: None,
                })
                .collect();
            // Radii that do not fit are left out.
            let sharp: Vec<Corner> = list.iter().map(|c| Corner { round: None, ..*c }).collect();
            let outer = ring_from_corners(&list)
                .or_else(|_| ring_from_corners(&sharp))
                .unwrap();
            let holes = holes
                .iter()
                .map(|&(x, y, d)| circle(point(100.0 * x, 100.0 * y), 100.0 * d))
                .collect();
            Outline { outer, holes }
        })
}

/// Any ring at all: open, wound, degenerate, with few distinct points so that much coincides.
fn garbage() -> impl Strategy<Value = Ring> {
    let number = prop_oneof![
        8 => (-3..4_i32).prop_map(f64::from),
        2 => -3.0..3.0_f64,
        1 => prop::sample::select(vec![1e-12, 1e-300, 1e12, 1e300, f64::NAN, f64::INFINITY]),
    ];
    let corner = (number.clone(), number.clone());
    let bend = prop::option::of((number.clone(), number.clone(), number.clone(), number));
    prop::collection::vec((corner, bend), 0..9).prop_map(|list| {
        let n = list.len();
        let sides = (0..n)
            .map(|k| {
                let (from, to) = (list[k].0, list[(k + 1) % n].0);
                let arc = list[k].1.map(|(x, y, radius, sweep)| Arc {
                    circle: Circle {
                        centre: point(x, y),
                        radius,
                    },
                    sweep,
                });
                Side {
                    from: point(from.0, from.1),
                    to: point(to.0, to.1),
                    arc,
                    corner: k,
                }
            })
            .collect();
        Ring { sides }
    })
}

/// Loops of corners on a small lattice, some sides round: sound rings that may cross and touch.
fn lattice() -> impl Strategy<Value = Ring> {
    let via = prop::option::weighted(0.3, (-6..7_i32, -6..7_i32));
    prop::collection::vec((-3..4_i32, -3..4_i32, via), 2..8).prop_filter_map("no ring", |list| {
        let corners: Vec<Corner> = list
            .iter()
            .map(|&(x, y, via)| Corner {
                at: point(f64::from(x), f64::from(y)),
                round: None,
                via: via.map(|(x, y)| point(0.5 * f64::from(x), 0.5 * f64::from(y))),
            })
            .collect();
        ring_from_corners(&corners).ok()
    })
}

/// Up to three such loops as pieces.
pub fn lattice_pieces() -> impl Strategy<Value = Vec<Piece>> {
    prop::collection::vec(lattice(), 1..4).prop_map(|rings| {
        let outline = |outer| Outline {
            outer,
            holes: Vec::new(),
        };
        rings
            .into_iter()
            .map(|outer| piece("lattice", outline(outer)))
            .collect()
    })
}

/// Courses of blocks like a wall's, each course with widths of its own, some blocks missing, some cut in
/// two along a diagonal, all turned: pieces that share sides and parts of sides at any angle.
pub fn wall() -> impl Strategy<Value = Vec<Piece>> {
    let block = (0.05..1.0_f64, 0..5_u8);
    let course = (0.05..1.0_f64, prop::collection::vec(block, 1..4));
    let courses = prop::collection::vec(course, 1..4);
    (courses, 0.0..90.0_f64).prop_filter_map("all missing", |(courses, turn)| {
        let mut pieces = Vec::new();
        let mut y = 0.0;
        for (height, blocks) in courses {
            let mut x = 0.0;
            for (width, kind) in blocks {
                let p = [
                    [x, y],
                    [x + width, y],
                    [x + width, y + height],
                    [x, y + height],
                ];
                let triangles = [
                    of_points(&[p[0], p[1], p[2]]),
                    of_points(&[p[0], p[2], p[3]]),
                ];
                let outlines = match kind {
                    0 => vec![],
                    1 => triangles[..1].to_vec(),
                    2 => triangles.to_vec(),
                    _ => vec![of_points(&p)],
                };
                pieces.extend(
                    outlines
                        .iter()
                        .map(|o| piece("block", moved(o, 3.0, -7.0, turn))),
                );
                x += width;
            }
            y += height;
        }
        (!pieces.is_empty()).then_some(pieces)
    })
}

/// The least angle of a piece with straight sides, radians.
fn sharpest(piece: &Piece) -> f64 {
    let sides = &piece.outline.outer.sides;
    (0..sides.len())
        .map(|k| {
            let (a, b) = (&sides[k], &sides[(k + 1) % sides.len()]);
            let (u, v) = (a.from - a.to, b.to - b.from);
            u.cross(v).abs().atan2(u.dot(v))
        })
        .fold(std::f64::consts::PI, f64::min)
}

/// Builds and meshes; what is built must mesh without defects or say why not.
fn hold(pieces: &[Piece], must_mesh: bool) {
    let Ok(domain) = build(pieces) else { return };
    match triangulate(
        &domain,
        &Sizing {
            max_area: None,
            max_vertices: 20_000,
        },
    ) {
        Ok(mesh) => check_triangulation("by chance", &mesh, &domain, exact_area(pieces)),
        Err(e) => assert!(!must_mesh, "{e}"),
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 200, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn stars_with_holes_mesh(outline in star()) {
        hold(&[piece("star", outline)], true);
    }

    #[test]
    fn walls_of_blocks_mesh(pieces in wall()) {
        if let Err(faults) = build(&pieces) {
            let touch = |f: &Fault| matches!(f, Fault::PiecesTouchInPoint { .. });
            prop_assert!(faults.iter().all(touch), "{:?}", faults);
            return Ok(());
        }
        hold(&pieces, true);
        let mesh = triangulate(&build(&pieces).unwrap(), &Sizing::default()).unwrap();
        // What the ladder of a sharp corner keeps of its angle where its sides are halved.
        let halved = |piece: &Piece| {
            let (sin, cos) = sharpest(piece).sin_cos();
            sin.atan2(2.0 - cos).to_degrees()
        };
        let asked = pieces.iter().map(halved).fold(25.0, f64::min);
        prop_assert!(least_angle(&mesh) > asked - 0.01, "{} of {asked}", least_angle(&mesh));
    }

    #[test]
    fn garbage_never_panics(rings in prop::collection::vec(garbage(), 1..4)) {
        let mut rings = rings.into_iter();
        let outer = rings.next().unwrap();
        hold(&[piece("garbage", Outline { outer, holes: rings.collect() })], false);
    }

    #[test]
    fn lattice_pieces_never_panic(pieces in lattice_pieces()) {
        hold(&pieces, false);
        for p in &pieces {
            hold(std::slice::from_ref(p), false);
        }
    }
}
