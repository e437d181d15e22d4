use std::f64::consts::PI;

use approx::assert_relative_eq;

use super::*;

fn corner(x: f64, y: f64) -> Corner {
    Corner {
        at: Point::new(x, y),
        round: None,
        via: None,
    }
}

fn rounded(x: f64, y: f64, r: f64) -> Corner {
    Corner {
        round: Some(r),
        ..corner(x, y)
    }
}

fn closed_and_smooth(ring: &Ring) {
    let n = ring.sides.len();
    for k in 0..n {
        let (a, b) = (&ring.sides[k], &ring.sides[(k + 1) % n]);
        assert_eq!(a.to, b.from);
        if let Some(arc) = a.arc {
            for p in [a.from, a.to] {
                assert!((p.distance(arc.circle.centre) - arc.circle.radius).abs() < 1e-12);
            }
        }
    }
}

#[test]
fn rounding_touches_both_sides() {
    let ring = ring_from_corners(&[
        corner(0.0, 0.0),
        corner(10.0, 0.0),
        rounded(10.0, 5.0, 2.0),
        corner(0.0, 5.0),
    ])
    .expect("it fits");
    closed_and_smooth(&ring);
    assert_eq!(ring.sides.len(), 5);
    assert_eq!(ring.sides[3].from, Point::new(10.0, 3.0));
    assert_eq!(ring.sides[3].to, Point::new(8.0, 5.0));
}

#[test]
fn too_large_a_radius_names_the_largest() {
    let faults = ring_from_corners(&[
        corner(0.0, 0.0),
        corner(10.0, 0.0),
        rounded(10.0, 5.0, 6.0),
        rounded(0.0, 5.0, 1.0),
    ])
    .expect_err("the side is 5 long");
    let CornerFault::RoundTooLarge { largest, .. } = faults[0].1 else {
        panic!("{faults:?}");
    };
    assert!((largest - 5.0).abs() < 1e-9);
}

#[test]
fn full_round_ends_use_their_side_up() {
    let ring = ring_from_corners(&[
        rounded(0.0, 0.0, 1.0),
        rounded(10.0, 0.0, 1.0),
        rounded(10.0, 2.0, 1.0),
        rounded(0.0, 2.0, 1.0),
    ])
    .expect("two quarters make a half");
    closed_and_smooth(&ring);
    assert_eq!(ring.sides.len(), 6);
}

#[test]
fn rounds_between_an_arc_and_a_line() {
    let ring = ring_from_corners(&[
        rounded(-1.0, 0.0, 0.1),
        rounded(1.0, 0.0, 0.1),
        Corner {
            at: Point::new(-1.0, 0.0),
            round: Some(0.1),
            via: Some(Point::new(0.0, 1.0)),
        },
    ]);
    // The third corner repeats the first: its side has no length.
    assert!(ring.is_err());
    let ring = ring_from_corners(&[
        Corner {
            at: Point::new(-1.0, 0.0),
            round: Some(0.1),
            via: Some(Point::new(0.0, 1.0)),
        },
        rounded(1.0, 0.0, 0.1),
    ])
    .expect("a half disc with rounded corners");
    closed_and_smooth(&ring);
    assert_eq!(ring.sides.len(), 4);
}

#[test]
fn arcs_run_over_their_middle_point() {
    for via in [1.0, -1.0] {
        let ring = ring_from_corners(&[
            Corner {
                at: Point::new(-1.0, 0.0),
                round: None,
                via: Some(Point::new(0.0, via)),
            },
            corner(1.0, 0.0),
        ])
        .expect("a half disc");
        let arc = ring.sides[0].arc.expect("an arc");
        assert!((arc.sweep - via * std::f64::consts::PI).abs() < 1e-12);
    }
}

#[test]
fn faults_come_all_at_once() {
    let faults = ring_from_corners(&[
        corner(0.0, 0.0),
        corner(0.0, 0.0),
        Corner {
            via: Some(Point::new(1.0, 0.0)),
            ..corner(2.0, 0.0)
        },
        corner(2.0, 3.0),
    ])
    .expect_err("two faults");
    assert_eq!(
        faults,
        vec![(1, CornerFault::ZeroLength), (2, CornerFault::NoArc)]
    );
}

/// Consecutive sides meet, arcs pass through their ends, and the sweep leads from one to the other.
fn closed(ring: &Ring) {
    let n = ring.sides.len();
    for i in 0..n {
        let (s, next) = (ring.sides[i], ring.sides[(i + 1) % n]);
        assert_eq!(s.to, next.from);
        if let Some(arc) = s.arc {
            let c = arc.circle.centre;
            assert_relative_eq!(s.from.distance(c), arc.circle.radius, epsilon = 1e-9);
            let end = c + Vector::at_angle((s.from - c).angle() + arc.sweep) * arc.circle.radius;
            assert!(end.distance(s.to) < 1e-9, "{s:?}");
        }
    }
}

/// Area from the true sides, positive anticlockwise.
fn signed_area(ring: &Ring) -> f64 {
    let share = |s: &Side| {
        let chord = 0.5 * (s.from - ring.sides[0].from).cross(s.to - ring.sides[0].from);
        let segment = |arc: Arc| 0.5 * arc.circle.radius.powi(2) * (arc.sweep - arc.sweep.sin());
        chord + s.arc.map_or(0.0, segment)
    };
    ring.sides.iter().map(share).sum()
}

#[test]
fn every_radius_that_does_not_fit_is_reported_with_the_largest_that_does() {
    let corners = [
        corner(0.0, 0.0),
        rounded(10.0, 0.0, 4.0),
        rounded(10.0, 6.0, 3.0),
        rounded(0.0, 6.0, -1.0),
    ];
    let faults = ring_from_corners(&corners).expect_err("three faults");
    let list: Vec<_> = faults
        .iter()
        .map(|(i, f)| match f {
            CornerFault::RoundTooLarge { given, largest } => (*i, *given, *largest),
            other => panic!("{other:?}"),
        })
        .collect();
    for (found, expected) in list
        .iter()
        .zip([(1, 4.0, 3.0), (2, 3.0, 2.0), (3, -1.0, 6.0)])
    {
        assert_eq!((found.0, found.1), (expected.0, expected.1));
        assert_relative_eq!(found.2, expected.2, epsilon = 1e-9);
    }
    assert_eq!(list.len(), 3);
}

#[test]
fn an_arc_runs_through_its_via_point_in_either_sense() {
    for (via, sweep) in [((1.0, -1.0), PI), ((1.0, 1.0), -PI)] {
        let mut far = corner(2.0, 0.0);
        far.via = Some(Point::new(via.0, via.1));
        let ring = ring_from_corners(&[corner(0.0, 0.0), far, corner(2.0, 5.0), corner(0.0, 5.0)])
            .expect("a ring");
        let arc = ring.sides.iter().find_map(|s| s.arc).expect("an arc");
        assert_relative_eq!(arc.sweep, sweep, epsilon = 1e-14);
        assert_relative_eq!(arc.circle.radius, 1.0, epsilon = 1e-14);
        closed(&ring);
        assert_relative_eq!(signed_area(&ring), 10.0 + 0.5 * sweep, epsilon = 1e-13);
    }
}

#[test]
fn more_than_half_a_circle_is_an_arc_like_any_other() {
    let mut far = corner(1.0, 0.0);
    far.via = Some(Point::new(0.5, -3.0));
    let ring = ring_from_corners(&[corner(0.0, 0.0), far]).expect("a ring");
    assert!(ring.sides.iter().find_map(|s| s.arc).expect("an arc").sweep > PI);
    closed(&ring);
}

#[test]
fn two_half_circles_make_a_disc() {
    let mut a = corner(2.0, 0.0);
    a.via = Some(Point::new(1.0, -1.0));
    let mut b = corner(0.0, 0.0);
    b.via = Some(Point::new(1.0, 1.0));
    let ring = ring_from_corners(&[b, a]).expect("a ring");
    assert_relative_eq!(signed_area(&ring), PI, epsilon = 1e-13);
}

#[test]
fn rounding_between_a_straight_side_and_an_arc_is_tangent_to_both() {
    // Half disc on its diameter, the two tips rounded.
    let mut left = rounded(-5.0, 0.0, 1.0);
    left.via = Some(Point::new(0.0, 5.0));
    let right = rounded(5.0, 0.0, 1.0);
    let ring = ring_from_corners(&[left, right]).expect("a ring");
    assert_eq!(ring.sides.len(), 4);
    closed(&ring);
    let n = ring.sides.len();
    for i in 0..n {
        let turn = direction(&ring.sides[i], 1.0).cross(direction(&ring.sides[(i + 1) % n], 0.0));
        assert!(turn.abs() < 1e-12, "side {i}");
    }
    // The centre of such a rounding is R − r from the arc's centre and r above the diameter.
    let first = |s: &&Side| s.corner == 1 && s.arc.is_some();
    let arc = ring.sides.iter().find(first).and_then(|s| s.arc);
    let centre = arc.expect("the rounding of corner 1").circle.centre;
    assert_relative_eq!(centre.y, 1.0, epsilon = 1e-12);
    assert_relative_eq!(centre.x, 15.0f64.sqrt(), epsilon = 1e-12);
}

#[test]
fn a_radius_too_large_for_an_arc_names_the_largest() {
    let mut left = corner(-5.0, 0.0);
    left.via = Some(Point::new(0.0, 5.0));
    let right = rounded(5.0, 0.0, 9.0);
    let faults = ring_from_corners(&[left, right]).expect_err("a fault");
    let [(1, CornerFault::RoundTooLarge { largest, .. })] = faults[..] else {
        panic!("{faults:?}");
    };
    assert!(largest > 2.4 && largest < 2.6, "{largest}");
    let fitting = rounded(5.0, 0.0, largest);
    closed(&ring_from_corners(&[left, fitting]).expect("a ring"));
}

#[test]
fn faults_name_their_corners() {
    assert_eq!(
        ring_from_corners(&[corner(0.0, 0.0), corner(1.0, 0.0)]).expect_err("a fault"),
        vec![(0, CornerFault::TooFew(2))]
    );
    assert_eq!(
        ring_from_corners(&[
            corner(0.0, f64::NAN),
            corner(1.0, 0.0),
            corner(f64::INFINITY, 1.0)
        ])
        .expect_err("a fault"),
        vec![(0, CornerFault::NotFinite), (2, CornerFault::NotFinite)]
    );
    let mut no_arc = corner(2.0, 2.0);
    no_arc.via = Some(Point::new(3.0, 3.0));
    assert_eq!(
        ring_from_corners(&[corner(0.0, 0.0), corner(0.0, 0.0), no_arc]).expect_err("a fault"),
        vec![(1, CornerFault::ZeroLength), (2, CornerFault::NoArc)]
    );
    assert_eq!(
        ring_from_corners(&[
            corner(0.0, 0.0),
            rounded(1.0, 0.0, 0.1),
            corner(2.0, 0.0),
            corner(1.0, 1.0)
        ])
        .expect_err("a fault"),
        vec![(1, CornerFault::NothingToRound)]
    );
}

#[test]
fn a_rounded_rectangle_loses_four_minus_pi_of_radius_squared() {
    for flip in [false, true] {
        let mut corners: Vec<_> = [(0.0, 0.0), (10.0, 0.0), (10.0, 6.0), (0.0, 6.0)]
            .iter()
            .map(|&(x, y)| rounded(x, y, 2.0))
            .collect();
        if flip {
            corners.reverse();
        }
        let ring = ring_from_corners(&corners).expect("a ring");
        assert_eq!(ring.sides.len(), 8);
        closed(&ring);
        assert_relative_eq!(
            signed_area(&ring).abs(),
            60.0 - (4.0 - PI) * 4.0,
            epsilon = 1e-12
        );
    }
}
