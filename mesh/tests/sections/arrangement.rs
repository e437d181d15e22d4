//! Pieces become one domain: what they share, where they touch, what they overlap.

use std::f64::consts::PI;

use approx::assert_relative_eq;
use proptest::prelude::*;

use sectile_mesh::Point;
use sectile_mesh::domain::fault::Fault;
use sectile_mesh::domain::{Domain, DomainSide, build};
use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::profile::{Dimensions, Form, profile};
use sectile_mesh::outline::shape::{bar, circle, polygon, tube};

use crate::check::ring_area;
use crate::shapes::{moved, of_points as polygonal, piece, points};

fn pieces(outlines: impl IntoIterator<Item = Outline>) -> Vec<Piece> {
    outlines.into_iter().map(|o| piece("piece", o)).collect()
}

fn domain(outlines: impl IntoIterator<Item = Outline>) -> Domain {
    build(&pieces(outlines)).unwrap_or_else(|f| panic!("{f:?}"))
}

fn faults(outlines: impl IntoIterator<Item = Outline>) -> Vec<Fault> {
    build(&pieces(outlines)).unwrap_err()
}

fn solid(outer: Ring) -> Outline {
    Outline {
        outer,
        holes: Vec::new(),
    }
}

fn turned(outline: &Outline, turn: f64, at: Point) -> Outline {
    moved(outline, at.x, at.y, turn)
}

/// A plate with another that stands on part of its upper side.
fn plates() -> Vec<Outline> {
    vec![
        bar(Point::default(), 100.0, 10.0),
        bar(Point::new(10.0, 20.0), 8.0, 30.0),
    ]
}

/// A tube and the bar that fills its bore.
fn filled_tube() -> Vec<Outline> {
    let at = Point::new(3.0, -1.0);
    vec![tube(at, 100.0, 25.0), solid(circle(at, 50.0))]
}

fn rolled_i() -> Outline {
    let d = Dimensions {
        h: 300.0,
        b: 150.0,
        tw: 7.1,
        tf: 10.7,
        r: 15.0,
        ..Dimensions::default()
    };
    profile(Form::I, &d).unwrap()
}

/// Area by Green's theorem over the sides, counted for each piece.
fn areas(domain: &Domain) -> Vec<f64> {
    let mut areas = vec![0.0; domain.piece_names.len()];
    for side in &domain.sides {
        let (a, b) = (
            domain.points[side.from as usize],
            domain.points[side.to as usize],
        );
        let segment = side.arc.map_or(0.0, |arc| {
            0.5 * arc.circle.radius.powi(2) * (arc.sweep - arc.sweep.sin())
        });
        let share = 0.5 * (a - domain.points[0]).cross(b - domain.points[0]) + segment;
        for (piece, sign) in [(side.left, 1.0), (side.right, -1.0)] {
            if let Some(piece) = piece {
                areas[piece as usize] += sign * share;
            }
        }
    }
    areas
}

fn interfaces(domain: &Domain) -> usize {
    let both = |s: &&DomainSide| s.left.is_some() && s.right.is_some();
    domain.sides.iter().filter(both).count()
}

#[test]
fn a_clockwise_outline_and_an_anticlockwise_hole_are_put_right() {
    let mut outline = polygonal(&[[0.0, 0.0], [0.0, 4.0], [4.0, 4.0], [4.0, 0.0]]);
    let hole = points(&[[1.0, 1.0], [2.0, 1.0], [2.0, 2.0], [1.0, 2.0]]);
    outline.holes.push(polygon(&hole));
    let domain = domain([outline]);
    assert_relative_eq!(areas(&domain)[0], 15.0);
    assert!(
        domain
            .sides
            .iter()
            .all(|s| s.left == Some(0) && s.right.is_none())
    );
}

#[test]
fn a_plate_on_part_of_a_side_shares_just_that_part() {
    let domain = domain(plates());
    assert_eq!(interfaces(&domain), 1);
    assert_eq!((domain.points.len(), domain.sides.len()), (8, 9));
    assert_eq!(domain.parts, 1);
    assert_relative_eq!(areas(&domain)[0], 1000.0, max_relative = 1e-14);
    assert_relative_eq!(areas(&domain)[1], 240.0, max_relative = 1e-14);
}

#[test]
fn contact_survives_turning_by_any_angle() {
    for k in 0..40 {
        let turn = f64::from(k) * 9.7;
        let at = Point::new(123.0, -456.0);
        let placed: Vec<_> = plates().iter().map(|o| turned(o, turn, at)).collect();
        let domain = domain(placed);
        assert_eq!(
            (interfaces(&domain), domain.parts),
            (1, 1),
            "turned by {turn}"
        );
    }
}

#[test]
fn a_bar_in_a_bore_shares_the_whole_circle() {
    let domain = domain(filled_tube());
    assert_eq!(domain.parts, 1);
    assert!(interfaces(&domain) >= 2);
    assert_relative_eq!(
        areas(&domain)[0],
        PI * (2500.0 - 625.0),
        max_relative = 1e-13
    );
    assert_relative_eq!(areas(&domain)[1], PI * 625.0, max_relative = 1e-13);
}

#[test]
fn arcs_that_share_part_of_a_circle_are_split_at_each_others_ends() {
    // A half disc, and a saddle that clasps 120° of its edge.
    let p = |degrees: f64, r: f64| {
        let (s, c) = degrees.to_radians().sin_cos();
        Point::new(r * c, r * s)
    };
    let arc = |at: Point, via: Point| Corner {
        at,
        round: None,
        via: Some(via),
    };
    let sharp = |at: Point| Corner {
        at,
        round: None,
        via: None,
    };
    let disc = [sharp(p(0.0, 1.0)), arc(p(180.0, 1.0), p(90.0, 1.0))];
    let saddle = [
        sharp(p(30.0, 1.0)),
        sharp(p(30.0, 1.5)),
        arc(p(150.0, 1.5), p(90.0, 1.5)),
        sharp(p(150.0, 1.0)),
    ];
    let mut saddle = saddle.to_vec();
    saddle[0] = arc(p(30.0, 1.0), p(90.0, 1.0));
    let domain = domain([
        solid(ring_from_corners(&disc).unwrap()),
        solid(ring_from_corners(&saddle).unwrap()),
    ]);
    assert_eq!(domain.parts, 1);
    let shared: f64 = domain
        .sides
        .iter()
        .filter(|s| s.left.is_some() && s.right.is_some())
        .map(|s| s.arc.unwrap().sweep.abs())
        .sum();
    assert_relative_eq!(shared, PI * 2.0 / 3.0, max_relative = 1e-12);
    assert_relative_eq!(areas(&domain)[0], 0.5 * PI, max_relative = 1e-12);
}

#[test]
fn separate_pieces_are_counted() {
    let at = |x: f64| Point::new(x, 0.0);
    let domain = domain([
        bar(at(0.0), 1.0, 1.0),
        bar(at(1.0), 1.0, 1.0),
        bar(at(5.0), 1.0, 1.0),
        solid(circle(at(9.0), 1.0)),
    ]);
    assert_eq!(domain.parts, 3);
}

#[test]
fn a_piece_may_lie_free_in_anothers_hole() {
    let centre = Point::default();
    let domain = domain([tube(centre, 10.0, 1.0), solid(circle(centre, 4.0))]);
    assert_eq!((domain.parts, interfaces(&domain)), (2, 0));
}

#[test]
fn points_within_the_tolerance_become_the_first_given() {
    let domain = domain([
        bar(Point::new(0.5, 0.5), 1.0, 1.0),
        polygonal(&[[1.0 + 1e-11, 1e-11], [2.0, 0.0], [2.0, 1.0], [1.0, 1.0]]),
    ]);
    assert_eq!((domain.points.len(), domain.parts), (6, 1));
    assert!(domain.points.contains(&Point::new(1.0, 0.0)));
}

#[test]
fn an_arc_that_bulges_through_another_side_is_found_on_the_true_arc() {
    let bulging = |rise: f64| {
        let mut corners: Vec<Corner> = points(&[[0.0, 0.0], [10.0, 0.0], [10.0, 2.0], [0.0, 2.0]])
            .into_iter()
            .map(|at| Corner {
                at,
                round: None,
                via: None,
            })
            .collect();
        corners[1].via = Some(Point::new(5.0, rise));
        solid(ring_from_corners(&corners).unwrap())
    };
    assert!(build(&pieces([bulging(1.99)])).is_ok());
    assert!(build(&pieces([bulging(-3.0)])).is_ok());
    for rise in [2.0, 2.01] {
        assert!(
            matches!(
                faults([bulging(rise)])[..],
                [Fault::SelfCrossing { .. }, ..]
            ),
            "{rise}"
        );
    }
}

#[test]
fn roundings_at_any_angle_are_no_crossings() {
    for k in 0..60 {
        let turn = 6.1 * f64::from(k);
        domain([turned(&rolled_i(), turn, Point::new(1e3, 1e3))]);
    }
}

#[test]
fn overlaps_tell_their_area() {
    let at = Point::new;
    let found = faults([
        bar(at(0.0, 0.0), 4.0, 4.0),
        bar(at(3.0, 0.0), 4.0, 2.0),
        bar(at(50.0, 0.0), 2.0, 2.0),
        bar(at(50.0, 0.0), 2.0, 2.0),
        solid(circle(at(50.0, 0.5), 0.5)),
    ]);
    let list: Vec<_> = found
        .iter()
        .map(|f| match f {
            Fault::PiecesOverlap { a, b, area, .. } => (*a, *b, *area),
            other => panic!("{other:?}"),
        })
        .collect();
    let pairs: Vec<_> = list.iter().map(|l| (l.0, l.1)).collect();
    assert_eq!(pairs, [(0, 1), (2, 3), (2, 4), (3, 4)]);
    assert_relative_eq!(list[0].2, 2.0, max_relative = 1e-6);
    assert_relative_eq!(list[1].2, 4.0, max_relative = 1e-6);
    assert_relative_eq!(list[2].2, PI / 16.0, max_relative = 1e-2);
}

#[test]
fn an_overlap_through_shared_corners_only_is_found() {
    // The second square's corners lie on the first one's sides.
    let found = faults([
        bar(Point::default(), 2.0, 2.0),
        polygonal(&[[1.0, 0.0], [0.0, 1.0], [-1.0, 0.0], [0.0, -1.0]]),
    ]);
    let [Fault::PiecesOverlap { area, .. }] = found[..] else {
        panic!("{found:?}");
    };
    assert_relative_eq!(area, 2.0, max_relative = 1e-6);
}

#[test]
fn touching_in_a_point_is_refused_unless_others_hold_it() {
    let at = Point::new;
    let corner_to_corner = [bar(at(0.0, 0.0), 2.0, 2.0), bar(at(2.0, 2.0), 2.0, 2.0)];
    let [Fault::PiecesTouchInPoint { a: 0, b: 1, at: p }] = faults(corner_to_corner.clone())[..]
    else {
        panic!("no touch");
    };
    assert_eq!(p, at(1.0, 1.0));
    let tangent = [
        bar(at(0.0, 0.0), 8.0, 2.0),
        solid(circle(at(0.3, 2.0), 2.0)),
    ];
    let found = faults(tangent);
    assert!(
        matches!(found[..], [Fault::PiecesTouchInPoint { .. }]),
        "{found:?}"
    );
    // A third square in the angle joins the two.
    let [a, b] = corner_to_corner;
    assert_eq!(domain([a, b, bar(at(2.0, 0.0), 2.0, 2.0)]).parts, 1);
}

/// The judge from outside: geo's check of polygons.
fn geo_calls_valid(list: &[[f64; 2]]) -> bool {
    use geo::Validation;
    let ring = list.iter().map(|p| geo::Coord { x: p[0], y: p[1] });
    geo::Polygon::new(ring.collect(), Vec::new()).is_valid()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 200, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn polygons_are_refused_just_when_geo_refuses_them(
        list in prop::collection::vec([-8i32..8, -8i32..8], 3..9)
    ) {
        let list: Vec<[f64; 2]> = list.iter().map(|p| p.map(f64::from)).collect();
        // Repeated corners are the reader's to refuse.
        let n = list.len();
        prop_assume!((0..n).all(|i| list[i] != list[(i + 1) % n]));
        // What encloses nothing passes geo's check.
        prop_assume!(ring_area(&polygon(&points(&list))) != 0.0);
        prop_assert_eq!(build(&pieces([polygonal(&list)])).is_ok(), geo_calls_valid(&list));
    }

    #[test]
    fn pieces_of_one_bar_make_the_bar_again(
        cuts in prop::collection::vec(0.05f64..1.0, 1..6), turn in 0.0f64..360.0
    ) {
        let mut x = 0.0;
        let mut outlines = Vec::new();
        for (i, w) in cuts.iter().enumerate() {
            // Heights differ, so that sides are shared in part.
            let h = 1.0 + 0.3 * f64::from(i as u32 % 3);
            outlines.push(turned(&bar(Point::new(x + 0.5 * w, 0.5 * h), *w, h), turn, Point::new(7.0, 3.0)));
            x += w;
        }
        let whole: f64 = outlines.iter().map(|o| ring_area(&o.outer)).sum();
        let domain = domain(outlines);
        prop_assert_eq!(domain.parts, 1);
        prop_assert_eq!(interfaces(&domain), cuts.len() - 1);
        prop_assert!((areas(&domain).iter().sum::<f64>() - whole).abs() < 1e-12 * whole);
    }
}
