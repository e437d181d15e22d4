//! Points at which several pieces meet.

use std::f64::consts::TAU;

use crate::domain::fan::{between, fans};
use crate::domain::{Domain, TOLERANCE, beyond};
use crate::point::Point;
use crate::tree::{Extent, Tree};

/// What one piece fills around a point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sector {
    /// The piece.
    pub piece: u32,
    /// Its angle, radians.
    pub angle: f64,
}

/// A point at which sectors of several pieces hang together.
#[derive(Clone, Debug, PartialEq)]
pub struct Junction {
    /// Index of the domain's point, which is also the mesh's vertex.
    pub point: u32,
    /// Where it is.
    pub at: Point,
    /// The pieces around it, anticlockwise; from one edge of the gap to the other, where there is one.
    pub sectors: Vec<Sector>,
    /// Whether material is all around.
    pub closed: bool,
    /// Distance to the nearest side that does not meet the point.
    pub wall: f64,
}

/// The junctions of a domain in the order of its points.
#[must_use]
pub fn junctions(domain: &Domain) -> Vec<Junction> {
    let boxes: Vec<Extent> = domain
        .sides
        .iter()
        .map(|s| s.extent(&domain.points))
        .collect();
    let tree = Tree::new(&boxes);
    let other_hand = TOLERANCE * domain.size();
    let mut out = Vec::new();
    for (i, mut fan) in fans(domain).into_iter().enumerate() {
        let pieces = fan.iter().filter_map(|d| d.left);
        let (least, most) = pieces.fold((u32::MAX, 0), |(l, m), p| (l.min(p), m.max(p)));
        if least >= most {
            continue;
        }
        // Start behind the gap.
        let gap = fan.iter().position(|d| d.left.is_none());
        if let Some(k) = gap {
            fan.rotate_left(k + 1);
        }
        let sectors = (0..fan.len())
            .filter_map(|k| {
                Some(Sector {
                    piece: fan[k].left?,
                    angle: between(&fan[k], &fan[(k + 1) % fan.len()]).min(TAU),
                })
            })
            .collect();
        let at = domain.points[i];
        let wall = tree.nearest(at, |k| {
            let s = &domain.sides[k];
            if s.from == i as u32 || s.to == i as u32 {
                f64::INFINITY
            } else {
                beyond(s.distance(&domain.points, at), other_hand)
            }
        });
        out.push(Junction {
            point: i as u32,
            at,
            sectors,
            closed: gap.is_none(),
            wall: if wall.is_finite() {
                wall
            } else {
                domain.size()
            },
        });
    }
    out
}
