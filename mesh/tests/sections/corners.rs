//! Re-entrant corners, their angles and walls.

use std::f64::consts::PI;

use sectile_mesh::corners::{ReentrantCorner, reentrant_corners};
use sectile_mesh::domain::build;
use sectile_mesh::outline::piece::Piece;

use crate::shapes::{channel, good, grooved_shaft, i_section, piece, rectangle, sector};

fn of(pieces: &[Piece]) -> Vec<ReentrantCorner> {
    reentrant_corners(&build(pieces).unwrap())
}

#[test]
fn a_channel_has_two_with_its_web_as_wall() {
    let corners = of(&[piece("channel", channel())]);
    assert_eq!(corners.len(), 2);
    for c in corners {
        assert!((c.interior_angle - 1.5 * PI).abs() < 1e-12);
        assert_eq!((c.at.x, c.at.y.abs(), c.wall), (8.0, 88.0, 8.0));
    }
}

#[test]
fn rounded_corners_are_none() {
    assert!(of(&[piece("I", i_section(15.0))]).is_empty());
    assert_eq!(of(&[piece("I", i_section(0.0))]).len(), 4);
}

#[test]
fn angles_are_between_tangents() {
    let shaft = of(&[piece("shaft", grooved_shaft())]);
    // Where the groove's circle meets the shaft's the material has less than half a turn.
    assert!(shaft.is_empty(), "{shaft:?}");
    let open = of(&[piece("sector", sector(300.0))]);
    assert_eq!(open.len(), 1);
    assert!((open[0].interior_angle.to_degrees() - 300.0).abs() < 1e-9);
    assert_eq!(open[0].wall, 10.0);
}

#[test]
fn pieces_add_up_and_inner_points_are_none() {
    // A tee of two plates has two; its corners fused away are none.
    let tee = of(&[
        piece("flange", rectangle(-50.0, 0.0, 50.0, 10.0)),
        piece("web", rectangle(-4.0, -100.0, 4.0, 0.0)),
    ]);
    assert_eq!(tee.len(), 2);
    for c in tee {
        assert!((c.interior_angle - 1.5 * PI).abs() < 1e-12);
        assert_eq!(c.wall, 10.0_f64.min(8.0));
    }
    let name = "three plates, one point of three";
    let pieces = good().into_iter().find(|g| g.0 == name).unwrap().1;
    let corners = of(&pieces);
    assert_eq!(corners.len(), 1, "{corners:?}");
    assert_eq!((corners[0].at.x, corners[0].at.y), (20.0, 10.0));
}
