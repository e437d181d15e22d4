//! Rings that are none: open ones, sides that are not numbers, arcs that miss their ends; and rings that
//! enclose nothing.

use std::f64::consts::TAU;

use super::edge::signed_area;
use super::fault::Fault;
use crate::outline::piece::{Piece, Ring};
use crate::outline::side::Side;

/// Coordinates beyond this overflow when they are multiplied.
const LARGEST: f64 = 1e50;

/// What makes pieces no regions at all, before any side is compared with another. `tolerance`: length.
#[must_use]
pub fn unsound(pieces: &[Piece], tolerance: f64) -> Vec<Fault> {
    let mut faults = Vec::new();
    for (piece, p) in pieces.iter().enumerate() {
        let rings = std::iter::once(&p.outline.outer).chain(&p.outline.holes);
        for (r, ring) in rings.enumerate() {
            if let Some(reason) = unsound_ring(ring, tolerance) {
                let which = if r == 0 {
                    "the outer edge".to_string()
                } else {
                    format!("hole {r}")
                };
                let reason = format!("{which} {reason}");
                faults.push(Fault::NotSimple { piece, reason });
            }
        }
    }
    faults
}

/// Rings that enclose no area, but for those of which `crossings` says that they cross themselves: the
/// parts of such a ring may cancel, and the crossing is what its writer has to repair.
#[must_use]
pub fn empty_rings(pieces: &[Piece], crossings: &[Fault], tolerance: f64) -> Vec<Fault> {
    let crosses = |piece: usize, ring: usize| {
        crossings.iter().any(|fault| {
            matches!(fault, Fault::SelfCrossing { a, .. } if (a.piece, a.ring) == (piece, ring))
        })
    };
    let mut faults = Vec::new();
    for (piece, p) in pieces.iter().enumerate() {
        let rings = std::iter::once(&p.outline.outer).chain(&p.outline.holes);
        for (r, ring) in rings.enumerate() {
            if !enclosed_by_nothing(ring, tolerance) || crosses(piece, r) {
                continue;
            }
            faults.push(if r == 0 {
                Fault::NoArea { piece }
            } else {
                let reason = format!("hole {r} encloses no area");
                Fault::NotSimple { piece, reason }
            });
        }
    }
    faults
}

/// Whether a ring's area is no more than a strip of the tolerance's width along half of it.
fn enclosed_by_nothing(ring: &Ring, tolerance: f64) -> bool {
    let length: f64 = ring
        .sides
        .iter()
        .map(|s| {
            s.arc
                .map_or(s.from.distance(s.to), |a| a.circle.radius * a.sweep.abs())
        })
        .sum();
    signed_area(ring).abs() <= 0.5 * tolerance * length
}

fn unsound_ring(ring: &Ring, tolerance: f64) -> Option<&'static str> {
    let n = ring.sides.len();
    if n == 0 {
        return Some("has no sides");
    }
    if !ring.sides.iter().all(is_number) {
        return Some(
            "has a coordinate, radius or angle that is not a number or beyond all measure",
        );
    }
    for (k, side) in ring.sides.iter().enumerate() {
        if side.to != ring.sides[(k + 1) % n].from {
            return Some("is not closed: a side does not start where the one before ends");
        }
        let Some(arc) = side.arc else {
            if side.from.distance(side.to) <= tolerance {
                return Some("has a side of no length");
            }
            continue;
        };
        let (c, r) = (arc.circle.centre, arc.circle.radius);
        if r <= tolerance || arc.sweep == 0.0 || arc.sweep.abs() > TAU * (1.0 + 1e-12) {
            return Some("has an arc whose radius or angle is out of range");
        }
        let (u, v) = (side.from - c, side.to - c);
        let turned = u.cross(v).atan2(u.dot(v));
        let off = (arc.sweep - turned).rem_euclid(TAU);
        // The rounding of the centre grows with the radius.
        let near = tolerance + 1e-12 * r;
        if (u.length() - r).abs() > near
            || (v.length() - r).abs() > near
            || off.min(TAU - off) * r > 8.0 * near
        {
            return Some("has an arc that does not run through its ends");
        }
    }
    None
}

fn is_number(side: &Side) -> bool {
    let mut numbers = vec![side.from.x, side.from.y, side.to.x, side.to.y];
    if let Some(arc) = side.arc {
        numbers.extend([
            arc.circle.centre.x,
            arc.circle.centre.y,
            arc.circle.radius,
            arc.sweep,
        ]);
    }
    numbers.iter().all(|x| x.abs() <= LARGEST)
}
