//! Pieces that are no section, each with the fault that says so.

use sectile_mesh::domain::build;
use sectile_mesh::domain::fault::{Fault, Place};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::shape::{circle, polygon};
use sectile_mesh::triangulate::{MeshError, Sizing, triangulate};

use crate::shapes::{arc, line, moved, of_points, of_rings, piece, point, points, rectangle};

fn faults(outlines: Vec<Outline>) -> Vec<Fault> {
    let pieces: Vec<Piece> = outlines.into_iter().map(|o| piece("p", o)).collect();
    build(&pieces).expect_err("no section")
}

fn with_holes(holes: Vec<Ring>) -> Outline {
    of_rings(rectangle(0.0, 0.0, 10.0, 10.0).outer, holes)
}

#[test]
fn a_figure_of_eight_names_both_sides_and_the_crossing() {
    let found = faults(vec![of_points(&[
        [0.0, 0.0],
        [4.0, 4.0],
        [4.0, 0.0],
        [0.0, 4.0],
    ])]);
    let place = |side| Place {
        piece: 0,
        ring: 0,
        side,
    };
    // Its area is zero too, for that reason.
    assert_eq!(
        found,
        [Fault::SelfCrossing {
            a: place(1),
            b: place(3),
            at: point(2.0, 2.0),
        }]
    );
    // One loop larger than the other: now only the crossing is wrong.
    let found = faults(vec![of_points(&[
        [0.0, 0.0],
        [6.0, 6.0],
        [6.0, 0.0],
        [0.0, 4.0],
    ])]);
    let [Fault::SelfCrossing { a, b, at }] = &found[..] else {
        panic!("{found:?}")
    };
    assert_eq!((a.side, b.side), (1, 3));
    assert!(at.distance(point(2.4, 2.4)) < 1e-12);
}

#[test]
fn spikes_and_touching_sides_cross_themselves() {
    for ring in [
        // A spike out and back.
        vec![
            [0.0, 0.0],
            [10.0, 0.0],
            [10.0, 5.0],
            [20.0, 5.0],
            [10.0, 5.0],
            [10.0, 10.0],
            [0.0, 10.0],
        ],
        // A fold back along a side.
        vec![[0.0, 0.0], [10.0, 0.0], [6.0, 0.0], [6.0, 5.0], [0.0, 5.0]],
        // A corner that touches a side.
        vec![
            [0.0, 0.0],
            [10.0, 0.0],
            [10.0, 10.0],
            [5.0, 0.0],
            [0.0, 10.0],
        ],
        // Two corners in one place.
        vec![
            [0.0, 0.0],
            [4.0, 0.0],
            [2.0, 2.0],
            [4.0, 4.0],
            [0.0, 4.0],
            [2.0, 2.0],
        ],
    ] {
        let found = faults(vec![of_points(&ring)]);
        let named = |f: &Fault| matches!(f, Fault::SelfCrossing { .. } | Fault::NotSimple { .. });
        assert!(found.iter().all(named), "{ring:?}: {found:?}");
    }
}

#[test]
fn nearly_coincident_points_are_a_side_of_no_length() {
    let found = faults(vec![of_points(&[
        [0.0, 0.0],
        [1.0, 0.0],
        [1.0, 1e-12],
        [1.0, 1.0],
        [0.0, 1.0],
    ])]);
    assert!(
        matches!(&found[..], [Fault::NotSimple { reason, .. }] if reason.contains("no length")),
        "{found:?}"
    );
}

#[test]
fn holes_where_none_belong() {
    let hole = |x: f64, y: f64, d: f64| circle(point(x, y), d);
    let square = |a: f64, b: f64| rectangle(a, a, b, b).outer;
    // Touching along, in a corner, tangentially, crossing.
    for bad in [
        rectangle(0.0, 2.0, 5.0, 8.0).outer,
        polygon(&points(&[[0.0, 5.0], [3.0, 3.0], [3.0, 7.0]])),
        hole(2.0, 5.0, 4.0),
        hole(0.0, 5.0, 4.0),
    ] {
        let found = faults(vec![with_holes(vec![bad])]);
        let named = |f: &Fault| {
            matches!(
                f,
                Fault::HoleCrossesEdge {
                    hole: Place { ring: 1, .. },
                    edge: Place { ring: 0, .. },
                    ..
                }
            )
        };
        assert!(found.iter().all(named), "{found:?}");
    }
    let found = faults(vec![with_holes(vec![hole(20.0, 5.0, 4.0)])]);
    assert!(
        matches!(
            found[..],
            [Fault::HoleOutside {
                hole: Place { ring: 1, .. }
            }]
        ),
        "{found:?}"
    );
    for bad in [
        vec![square(1.0, 9.0), square(2.0, 3.0)],
        vec![square(2.0, 3.0), square(1.0, 9.0)],
        vec![square(1.0, 5.0), square(5.0, 9.0)],
        vec![square(1.0, 5.0), square(4.0, 9.0)],
        vec![hole(3.0, 5.0, 2.0), hole(5.0, 5.0, 2.0)],
        vec![hole(5.0, 5.0, 2.0), hole(5.0, 5.0, 2.0)],
        vec![hole(5.0, 5.0, 2.0), hole(5.0, 5.0, 4.0)],
    ] {
        let found = faults(vec![with_holes(bad)]);
        let named = |f: &Fault| matches!(f, Fault::HolesMeet { .. });
        assert!(!found.is_empty() && found.iter().all(named), "{found:?}");
    }
    // A hole as large as its piece.
    let found = faults(vec![with_holes(vec![square(0.0, 10.0)])]);
    assert!(
        found
            .iter()
            .all(|f| matches!(f, Fault::HoleCrossesEdge { .. })),
        "{found:?}"
    );
    // Larger than its piece: outside.
    let found = faults(vec![with_holes(vec![square(-5.0, 15.0)])]);
    assert!(
        matches!(found[..], [Fault::HoleOutside { .. }]),
        "{found:?}"
    );
}

#[test]
fn pieces_that_share_area() {
    let square = |a: f64, b: f64| rectangle(a, a, b, b);
    let disc = |x: f64, y: f64, d: f64| of_rings(circle(point(x, y), d), Vec::new());
    let with_hole = with_holes(vec![circle(point(5.0, 5.0), 4.0)]);
    for (a, b, shared) in [
        (square(0.0, 10.0), square(5.0, 15.0), 25.0),
        (square(0.0, 10.0), square(0.0, 10.0), 100.0),
        (square(0.0, 10.0), square(2.0, 5.0), 9.0),
        (square(2.0, 5.0), square(0.0, 10.0), 9.0),
        // Inside, sharing a side, a part of one, a corner.
        (square(0.0, 10.0), rectangle(0.0, 0.0, 5.0, 10.0), 50.0),
        (square(0.0, 10.0), rectangle(0.0, 2.0, 5.0, 8.0), 30.0),
        (square(0.0, 10.0), square(0.0, 3.0), 9.0),
        // Crossed, with no corner of one inside the other.
        (
            rectangle(0.0, 4.0, 10.0, 6.0),
            rectangle(4.0, 0.0, 6.0, 10.0),
            4.0,
        ),
        (
            disc(0.0, 0.0, 4.0),
            disc(0.0, 0.0, 4.0),
            4.0 * std::f64::consts::PI,
        ),
        (
            disc(0.0, 0.0, 4.0),
            moved(&disc(0.0, 0.0, 4.0), 0.0, 0.0, 20.0),
            4.0 * std::f64::consts::PI,
        ),
        (
            disc(0.0, 0.0, 4.0),
            disc(1.0, 0.0, 2.0),
            std::f64::consts::PI,
        ),
        (
            with_hole.clone(),
            disc(5.0, 5.0, 5.0),
            std::f64::consts::PI * (6.25 - 4.0),
        ),
        (
            with_hole,
            square(0.0, 10.0),
            100.0 - 4.0 * std::f64::consts::PI,
        ),
    ] {
        let found = faults(vec![a, b]);
        let [
            Fault::PiecesOverlap {
                a: 0, b: 1, area, ..
            },
        ] = found[..]
        else {
            panic!("{found:?}")
        };
        // The area is measured on polygons of 2° steps.
        assert!(
            (area / shared - 1.0).abs() < 2e-2,
            "{area}, expected {shared}"
        );
    }
}

#[test]
fn pieces_that_hang_by_a_point() {
    let disc = |x: f64, y: f64, d: f64| of_rings(circle(point(x, y), d), Vec::new());
    for (a, b, at) in [
        // Tangent to a straight side, to a round one outside and inside, at any place.
        (
            rectangle(-20.0, -5.0, 20.0, 0.0),
            disc(0.0, 3.0, 6.0),
            point(0.0, 0.0),
        ),
        (
            rectangle(-20.0, -5.0, 20.0, 0.0),
            disc(1.234, 0.7, 1.4),
            point(1.234, 0.0),
        ),
        (
            disc(0.0, 0.0, 2.0),
            disc(3.0 / 5.0_f64.sqrt(), 6.0 / 5.0_f64.sqrt(), 4.0),
            point(1.0 / 5.0_f64.sqrt(), 2.0 / 5.0_f64.sqrt()),
        ),
        (
            with_holes(vec![circle(point(5.0, 5.0), 4.0)]),
            disc(6.0, 5.0, 2.0),
            point(7.0, 5.0),
        ),
        // Corner on corner, corner on side.
        (
            rectangle(0.0, 0.0, 1.0, 1.0),
            rectangle(1.0, 1.0, 2.0, 2.0),
            point(1.0, 1.0),
        ),
        (
            rectangle(-1.0, -1.0, 1.0, 0.0),
            of_points(&[[0.2, 0.0], [1.0, 1.0], [-1.0, 1.0]]),
            point(0.2, 0.0),
        ),
    ] {
        for turn in [0.0, 90.0, 23.0] {
            let there = moved(
                &of_points(&[[at.x, at.y], [9.0, 9.0], [-9.0, 9.0]]),
                0.0,
                0.0,
                turn,
            )
            .outer
            .sides[0]
                .to;
            let found = faults(vec![moved(&a, 0.0, 0.0, turn), moved(&b, 0.0, 0.0, turn)]);
            let [Fault::PiecesTouchInPoint { a: 0, b: 1, at }] = found[..] else {
                panic!("{found:?}")
            };
            assert!(at.distance(there) < 1e-6, "{at:?}, expected {there:?}");
        }
    }
}

#[test]
fn every_fault_at_once() {
    let eight = of_points(&[[0.0, 0.0], [6.0, 6.0], [6.0, 0.0], [0.0, 4.0]]);
    let found = faults(vec![
        eight.clone(),
        with_holes(vec![circle(point(0.0, 5.0), 4.0)]),
        eight,
    ]);
    assert_eq!(
        found
            .iter()
            .filter(|f| matches!(f, Fault::SelfCrossing { .. }))
            .count(),
        2
    );
    assert!(
        found
            .iter()
            .any(|f| matches!(f, Fault::HoleCrossesEdge { .. }))
    );
}

#[test]
fn rings_that_are_none() {
    let p = point;
    let ring = |sides| of_rings(Ring { sides }, Vec::new());
    let open = ring(vec![
        line(p(0.0, 0.0), p(1.0, 0.0)),
        line(p(1.0, 0.0), p(1.0, 1.0)),
        line(p(0.0, 1.0), p(0.0, 0.0)),
    ]);
    let off_circle = ring(vec![
        line(p(0.0, 0.0), p(2.0, 0.0)),
        arc(p(1.0, 0.0), p(2.0, 0.0), p(0.0, 0.1), std::f64::consts::PI),
        line(p(0.0, 0.1), p(0.0, 0.0)),
    ]);
    let wound = ring(vec![
        line(p(0.0, 0.0), p(2.0, 0.0)),
        arc(p(1.0, 0.0), p(2.0, 0.0), p(0.0, 0.0), 1e9),
    ]);
    let flat = of_points(&[[0.0, 0.0], [1.0, 0.0], [0.0, 0.0]]);
    for bad in [
        open,
        off_circle,
        wound,
        ring(Vec::new()),
        of_points(&[[0.0, 0.0], [f64::NAN, 0.0], [1.0, 1.0]]),
        of_points(&[[0.0, 0.0], [f64::INFINITY, 0.0], [1.0, 1.0]]),
        of_points(&[[0.0, 0.0], [1e200, 0.0], [1.0, 1e200]]),
        of_rings(circle(p(0.0, 0.0), f64::INFINITY), Vec::new()),
        with_holes(vec![polygon(&points(&[[2.0, 2.0], [3.0, 3.0]]))]),
        with_holes(vec![Ring { sides: Vec::new() }]),
    ] {
        let found = faults(vec![bad]);
        assert!(
            matches!(found[..], [Fault::NotSimple { piece: 0, .. }]),
            "{found:?}"
        );
    }
    let found = faults(vec![flat]);
    assert!(
        matches!(
            found[..],
            [Fault::NoArea { piece: 0 } | Fault::NotSimple { .. }]
        ),
        "{found:?}"
    );
}

#[test]
fn no_pieces_are_no_fault_and_no_mesh() {
    let domain = build(&[]).unwrap();
    assert_eq!(domain.parts, 0);
    let mesh = triangulate(&domain, &Sizing::default()).unwrap();
    assert!(mesh.triangles.is_empty());
}

/// A cusp of two arcs that leave in one direction cannot be meshed; the place is named.
#[test]
fn cusps_are_refused() {
    let (a, b) = (point(0.0, 0.0), point(0.0, 4.0));
    let horn = of_rings(
        Ring {
            sides: vec![
                arc(point(0.0, 2.0), a, b, std::f64::consts::PI),
                line(b, point(0.0, 2.0)),
                arc(point(0.0, 1.0), point(0.0, 2.0), a, -std::f64::consts::PI),
            ],
        },
        Vec::new(),
    );
    let domain = build(&[piece("horn", horn)]).unwrap();
    let error = triangulate(&domain, &Sizing::default()).expect_err("a cusp");
    assert!(
        matches!(error, MeshError::TooClose { at, .. } if at == a),
        "{error}"
    );
}
