//! Seams that cannot be made, each with the fault that says so.

use std::f64::consts::PI;

use sectile_mesh::domain::build_seamed;
use sectile_mesh::domain::fault::{Fault, Misfit, Obstacle, SeamFault};
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::shape::{circle, tube};

use crate::seams::{both, fillet, flats, groove, near};
use crate::shapes::{moved, of_points, of_rings, piece, point, rectangle};

fn faults(pieces: &[Piece], requests: &[SeamRequest]) -> Vec<Fault> {
    build_seamed(pieces, requests).expect_err("no section")
}

/// The only fault, of the first seam.
fn fault(pieces: &[Piece], requests: &[SeamRequest]) -> SeamFault {
    match &faults(pieces, requests)[..] {
        [Fault::Seam { seam: 0, fault }] => fault.clone(),
        other => panic!("{other:?}"),
    }
}

fn tee() -> Vec<Piece> {
    vec![
        piece("flange", rectangle(-50.0, 0.0, 50.0, 12.0)),
        piece("web", rectangle(-4.0, 12.0, 4.0, 120.0)),
    ]
}

fn legs(first: f64, second: f64, request: SeamRequest) -> SeamRequest {
    SeamRequest {
        kind: SeamKind::Fillet {
            legs: [first, second],
        },
        ..request
    }
}

#[test]
fn requests_that_are_none() {
    let pieces = flats(20.0);
    for between in [[0, 0], [0, 2], [7, 1]] {
        assert_eq!(fault(&pieces, &[fillet(between, 5.0)]), SeamFault::Pieces);
    }
    for bad in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        let requests = [
            both(fillet([0, 1], bad)),
            both(groove([0, 1], Some(bad))),
            both(legs(5.0, bad, fillet([0, 1], 0.0))),
        ];
        for request in requests {
            assert_eq!(fault(&pieces, &[request]), SeamFault::Measure);
        }
    }
    let gap = |gap| SeamRequest {
        gap,
        ..both(fillet([0, 1], 5.0))
    };
    for request in [gap(-0.1), gap(f64::NAN), near(f64::NAN, 0.0, gap(0.0))] {
        assert_eq!(fault(&pieces, &[request]), SeamFault::Measure);
    }
}

#[test]
fn pieces_that_are_apart() {
    let pieces = vec![
        piece("beam", rectangle(-75.0, -10.0, 75.0, 0.0)),
        piece("plate", rectangle(-60.0, 0.8, 60.0, 12.8)),
    ];
    let gap = |gap| SeamRequest {
        gap,
        ..both(fillet([0, 1], 5.0))
    };
    for request in [
        gap(0.0),
        gap(0.7),
        groove([0, 1], None),
        groove([0, 1], Some(3.0)),
    ] {
        let SeamFault::Apart { distance, at } = fault(&pieces, &[request]) else {
            panic!()
        };
        assert!((distance - 0.8).abs() < 1e-12 && (at.y - 0.4).abs() < 1e-12);
    }
    assert!(build_seamed(&pieces, &[gap(0.8)]).is_ok());
    // Round bars side by side are nearest between their centres.
    let bar = |x, y| of_rings(circle(point(x, y), 20.0), Vec::new());
    let pieces = vec![piece("a", bar(0.0, 0.0)), piece("b", bar(18.0, 24.0))];
    let SeamFault::Apart { distance, at } = fault(&pieces, &[fillet([0, 1], 3.0)]) else {
        panic!()
    };
    assert!((distance - 10.0).abs() < 1e-9, "{distance}");
    assert!(at.distance(point(9.0, 12.0)) < 1e-9, "{at:?}");
    // The gap would be longer than the legs.
    let pieces = vec![
        piece("beam", rectangle(-75.0, -10.0, 75.0, 0.0)),
        piece("plate", rectangle(-60.0, 6.0, 60.0, 12.8)),
    ];
    let request = SeamRequest {
        gap: 6.0,
        ..near(-60.0, 0.0, fillet([0, 1], 5.0))
    };
    let found = fault(&pieces, &[request]);
    assert!(
        matches!(
            found,
            SeamFault::Misfit {
                cause: Misfit::GapTakesLeg,
                ..
            }
        ),
        "{found:?}"
    );
}

#[test]
fn corners_and_lines_that_there_are_not() {
    // A core in a tube has no corner and its line no end.
    let pieces = vec![
        piece("tube", tube(point(0.0, 0.0), 120.0, 10.0)),
        piece("core", of_rings(circle(point(0.0, 0.0), 100.0), Vec::new())),
    ];
    for request in [fillet([0, 1], 5.0), both(fillet([0, 1], 5.0))] {
        assert_eq!(fault(&pieces, &[request]), SeamFault::NoCorner { at: None });
    }
    let SeamFault::NoEnd { length } = fault(&pieces, &[groove([0, 1], Some(5.0))]) else {
        panic!()
    };
    assert!((length - 100.0 * PI).abs() < 1e-9);
    // Corner to corner there is no line.
    let pieces = vec![
        piece("a", rectangle(0.0, 0.0, 20.0, 20.0)),
        piece("b", rectangle(20.0, 20.0, 40.0, 40.0)),
    ];
    let found = fault(&pieces, &[groove([0, 1], None)]);
    assert_eq!(
        found,
        SeamFault::NoLine {
            at: point(20.0, 20.0)
        }
    );
    // A third piece fills one of the two corners of a tee.
    let mut pieces = tee();
    pieces.push(piece("bar", rectangle(4.0, 12.0, 30.0, 20.0)));
    let requests = [both(fillet([0, 1], 5.0)), both(groove([0, 2], Some(3.0)))];
    let SeamFault::NoCorner { at: Some(at) } = fault(&pieces, &requests) else {
        panic!()
    };
    assert_eq!((at.x, at.y), (4.0, 12.0));
}

#[test]
fn a_choice_that_is_to_be_made() {
    let SeamFault::Choice { places } = fault(&tee(), &[fillet([0, 1], 5.0)]) else {
        panic!()
    };
    assert_eq!(places, [point(-4.0, 12.0), point(4.0, 12.0)]);
    // Pointed at from the middle, either is as near.
    let request = near(0.0, 60.0, fillet([0, 1], 5.0));
    assert!(matches!(
        fault(&tee(), &[request]),
        SeamFault::Choice { .. }
    ));
    let request = groove([0, 1], Some(3.0));
    assert!(matches!(fault(&tee(), &[request]), SeamFault::Choice { places } if places.len() == 2));
    // A frame touches a plate along two lines.
    let frame = of_points(&[
        [0.0, 10.0],
        [20.0, 10.0],
        [20.0, 50.0],
        [80.0, 50.0],
        [80.0, 10.0],
        [100.0, 10.0],
        [100.0, 80.0],
        [0.0, 80.0],
    ]);
    let pieces = vec![
        piece("plate", rectangle(-20.0, 0.0, 120.0, 10.0)),
        piece("frame", frame),
    ];
    for request in [groove([0, 1], None), both(fillet([0, 1], 5.0))] {
        let SeamFault::Choice { places } = fault(&pieces, &[request]) else {
            panic!()
        };
        assert_eq!(places, [point(10.0, 10.0), point(90.0, 10.0)]);
    }
    let request = near(95.0, 0.0, both(fillet([0, 1], 5.0)));
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let roots: Vec<f64> = domain.seams.iter().map(|s| s.at.x).collect();
    assert_eq!(roots, [80.0, 100.0]);
}

#[test]
fn angles_out_of_range() {
    // Flush edges: nothing to lay a fillet into.
    let SeamFault::Angle { angle, at } = fault(&flats(0.0), &[both(fillet([0, 1], 5.0))]) else {
        panic!()
    };
    assert!((angle - PI).abs() < 1e-12 && at.y == 10.0);
    // One edge flush, pointed at; and not pointed at, where the other corner is meant.
    let pieces = vec![
        piece("lower", rectangle(0.0, 0.0, 100.0, 10.0)),
        piece("upper", rectangle(0.0, 10.0, 70.0, 20.0)),
    ];
    let found = fault(&pieces, &[near(0.0, 10.0, fillet([0, 1], 5.0))]);
    assert!(matches!(found, SeamFault::Angle { .. }));
    let domain = build_seamed(&pieces, &[fillet([0, 1], 5.0)]).unwrap();
    assert_eq!(domain.seams[0].at, point(70.0, 10.0));
    // Webs at 28° to 152°: those between 30° and 150° are joined.
    for (lean, sound) in [(28.0, false), (31.0, true), (149.0, true), (152.0, false)] {
        let (sin, cos) = f64::to_radians(lean).sin_cos();
        let (x, y) = (80.0 * cos, 80.0 * sin);
        let pieces = vec![
            piece("flange", rectangle(-200.0, -12.0, 200.0, 0.0)),
            piece(
                "web",
                of_points(&[[0.0, 0.0], [x, y], [x - 8.0, y], [-8.0, 0.0]]),
            ),
        ];
        let found = build_seamed(&pieces, &[near(10.0, 1.0, fillet([0, 1], 5.0))]);
        assert_eq!(found.is_ok(), sound, "{lean}: {found:?}");
    }
    // A round bar on a plate.
    let pieces = vec![
        piece("plate", rectangle(-90.0, -12.0, 90.0, 0.0)),
        piece("bar", of_rings(circle(point(0.0, 10.0), 20.0), Vec::new())),
    ];
    let found = fault(&pieces, &[near(5.0, 1.0, fillet([0, 1], 5.0))]);
    assert!(matches!(found, SeamFault::Angle { .. }), "{found:?}");
}

#[test]
fn legs_without_room() {
    let request = both(legs(6.0, 11.0, fillet([0, 1], 0.0)));
    let found = faults(&flats(5.0), &[request]);
    let all: Vec<(usize, f64, f64)> = found
        .iter()
        .map(|f| match f {
            Fault::Seam {
                fault: SeamFault::Leg {
                    piece, leg, room, ..
                },
                ..
            } => (*piece, *leg, *room),
            other => panic!("{other:?}"),
        })
        .collect();
    // At the right end 5 of the upper flat stick out; at the left end its edge is 10 high and 5 of the
    // lower one stick out.
    assert_eq!(all, [(1, 11.0, 5.0), (1, 11.0, 10.0), (0, 6.0, 5.0)]);
}

#[test]
fn metal_of_no_sound_shape() {
    let misfit = |pieces: &[Piece], request: SeamRequest| match fault(pieces, &[request]) {
        SeamFault::Misfit { cause, .. } => cause,
        other => panic!("{other:?}"),
    };
    // Legs of 1 and 8 at a right angle; at 31° even alike ones of 5 and 6 differ too much.
    assert_eq!(
        misfit(
            &tee(),
            near(9.0, 13.0, legs(40.0, 5.0, fillet([0, 1], 0.0)))
        ),
        Misfit::FootOutside
    );
    let leaning = vec![
        piece("flange", rectangle(-90.0, -12.0, 300.0, 0.0)),
        piece(
            "web",
            moved(&rectangle(0.0, 0.0, 100.0, 6.0), 0.0, 0.0, 40.0),
        ),
    ];
    assert_eq!(
        misfit(
            &leaning,
            near(10.0, 1.0, legs(8.0, 5.0, fillet([0, 1], 0.0)))
        ),
        Misfit::FootOutside
    );
    assert_eq!(misfit(&tee(), both(fillet([0, 1], 1e-9))), Misfit::TooSmall);
    assert_eq!(
        misfit(&tee(), both(groove([0, 1], Some(1e-9)))),
        Misfit::TooSmall
    );
    // A fin on a round bar: the leg runs half around it.
    let pieces = vec![
        piece("bar", of_rings(circle(point(0.0, 0.0), 20.0), Vec::new())),
        piece("fin", {
            let x = (100.0_f64 - 4.0).sqrt();
            let mut fin = rectangle(x, -2.0, 60.0, 2.0);
            fin.outer.sides[0] = crate::shapes::arc(
                point(0.0, 0.0),
                point(x, 2.0),
                point(x, -2.0),
                -2.0 * 0.2_f64.asin(),
            );
            fin
        }),
    ];
    assert_eq!(
        misfit(&pieces, both(fillet([0, 1], 22.0))),
        Misfit::InTheWay
    );
    assert!(build_seamed(&pieces, &[both(fillet([0, 1], 4.0))]).is_ok());
}

#[test]
fn depths_that_do_not_fit() {
    let pieces = flats(20.0);
    let found = fault(&pieces, &[near(0.0, 0.0, groove([0, 1], Some(80.1)))]);
    assert_eq!(
        found,
        SeamFault::Depth {
            depth: 80.1,
            length: 80.0
        }
    );
    for depth in [40.0, 41.0, 80.0] {
        let found = fault(&pieces, &[both(groove([0, 1], Some(depth)))]);
        assert_eq!(
            found,
            SeamFault::DepthsMeet {
                depth,
                length: 80.0
            }
        );
    }
    // A depth of the whole line needs no end.
    let whole = build_seamed(&pieces, &[groove([0, 1], Some(80.0))]).unwrap();
    let full = build_seamed(&pieces, &[groove([0, 1], None)]).unwrap();
    assert_eq!(whole, full);
}

#[test]
fn seams_in_the_way_of_something() {
    // Two bars close to each other on a plate: their fillets overlap; a third bar is in one's way.
    let pieces = vec![
        piece("plate", rectangle(0.0, 0.0, 100.0, 10.0)),
        piece("left", rectangle(10.0, 10.0, 30.0, 40.0)),
        piece("right", rectangle(38.0, 10.0, 60.0, 40.0)),
        piece("lath", rectangle(64.0, 10.0, 66.0, 20.0)),
    ];
    let others = [
        near(10.0, 10.0, fillet([0, 1], 5.0)),
        near(66.0, 10.0, fillet([0, 3], 5.0)),
    ];
    let at = |x: f64, bar, leg| near(x, 10.0, fillet([0, bar], leg));
    let build = |requests: [SeamRequest; 2]| {
        let requests: Vec<SeamRequest> = requests.iter().chain(&others).cloned().collect();
        build_seamed(&pieces, &requests)
    };
    assert!(build([at(30.0, 1, 4.0), at(38.0, 2, 4.0)]).is_ok());
    let overlap = |found: Result<_, Vec<Fault>>| match &found.unwrap_err()[..] {
        [
            Fault::Seam {
                seam,
                fault: SeamFault::Overlap { with, .. },
            },
        ] => (*seam, *with),
        other => panic!("{other:?}"),
    };
    let found = build([at(30.0, 1, 5.0), at(38.0, 2, 5.0)]);
    assert_eq!(overlap(found), (0, Obstacle::Seam(1)));
    // A leg over the lath has no room; a lath off the plate is run into.
    let found = build([at(30.0, 1, 3.0), at(60.0, 2, 5.0)]).unwrap_err();
    assert!(
        matches!(
            found[..],
            [Fault::Seam {
                seam: 1,
                fault: SeamFault::Leg { room: 4.0, .. }
            }]
        ),
        "{found:?}"
    );
    let mut floating = pieces.clone();
    floating[3] = piece("lath", rectangle(61.0, 11.0, 62.0, 12.0));
    let requests = [at(30.0, 1, 3.0), at(60.0, 2, 5.0)];
    assert_eq!(
        overlap(build_seamed(&floating, &requests)),
        (1, Obstacle::Piece(3))
    );
    // The same seam twice, and grooves that overlap.
    let pieces = flats(20.0);
    let found = faults(
        &pieces,
        &[
            near(20.0, 10.0, fillet([0, 1], 5.0)),
            near(20.0, 10.0, fillet([1, 0], 5.0)),
        ],
    );
    assert!(
        matches!(
            found[..],
            [Fault::Seam {
                seam: 0,
                fault: SeamFault::Overlap {
                    with: Obstacle::Seam(1),
                    ..
                }
            }]
        ),
        "{found:?}"
    );
    let found = faults(
        &pieces,
        &[
            near(20.0, 10.0, groove([0, 1], Some(50.0))),
            near(100.0, 10.0, groove([0, 1], Some(31.0))),
        ],
    );
    assert!(
        matches!(
            found[..],
            [Fault::Seam {
                seam: 1,
                fault: SeamFault::Overlap {
                    with: Obstacle::Seam(0),
                    ..
                }
            }]
        ),
        "{found:?}"
    );
}

#[test]
fn pieces_that_nothing_holds_are_named() {
    let mut pieces = flats(20.0);
    pieces.push(piece("lid", rectangle(20.0, 20.0, 120.0, 30.0)));
    pieces.push(piece("far", rectangle(200.0, 0.0, 220.0, 10.0)));
    let hanging = |requests: &[SeamRequest]| match &faults(&pieces, requests)[..] {
        [Fault::PiecesHanging { pieces }] => pieces.clone(),
        other => panic!("{other:?}"),
    };
    assert_eq!(hanging(&[]), [1, 2, 3]);
    assert_eq!(hanging(&[groove([1, 2], None)]), [1, 2, 3]);
    assert_eq!(hanging(&[both(fillet([0, 1], 5.0))]), [2, 3]);
}

#[test]
fn all_faults_at_once() {
    let found = faults(
        &flats(20.0),
        &[
            fillet([0, 0], 5.0),
            both(fillet([0, 1], 5.0)),
            fillet([0, 1], -5.0),
            groove([0, 1], Some(3.0)),
            both(fillet([0, 1], 50.0)),
        ],
    );
    let seams: Vec<usize> = found
        .iter()
        .map(|f| match f {
            Fault::Seam { seam, .. } => *seam,
            other => panic!("{other:?}"),
        })
        .collect();
    // Both legs at either end of the last.
    assert_eq!(seams, [0, 2, 3, 4, 4, 4, 4]);
    // Faults of the pieces come first.
    let bow = piece(
        "bow",
        of_points(&[[0.0, 0.0], [4.0, 4.0], [4.0, 0.0], [0.0, 4.0]]),
    );
    let found = faults(&[bow.clone(), bow], &[fillet([0, 0], 5.0)]);
    assert!(
        found
            .iter()
            .all(|f| matches!(f, Fault::SelfCrossing { .. }))
    );
}
