//! Sides as the arrangement sees them: straight, or arcs of less than half a turn, directed so that
//! their piece lies to the left.

use std::f64::consts::{PI, TAU};

use super::fault::Place;
use crate::outline::piece::{Piece, Ring};
use crate::outline::side::Side;
use crate::point::{Point, Vector};
use crate::tree::Extent;

/// A directed edge of a piece, the piece to its left.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Edge {
    /// The side that it is (part of).
    pub place: Place,
    /// Geometry; arcs sweep less than half a turn.
    pub side: Side,
}

/// Signed area of a ring, positive anticlockwise.
#[must_use]
pub fn signed_area(ring: &Ring) -> f64 {
    let origin = ring.sides.first().map_or(Point::default(), |s| s.from);
    ring.sides
        .iter()
        .map(|side| {
            let chord = 0.5 * (side.from - origin).cross(side.to - origin);
            let segment = side.arc.map_or(0.0, |arc| {
                let r = arc.circle.radius;
                0.5 * r * r * (arc.sweep - arc.sweep.sin())
            });
            chord + segment
        })
        .sum()
}

/// The edges of a piece: outer ring anticlockwise, holes clockwise.
#[must_use]
pub fn edges_of(index: usize, piece: &Piece) -> Vec<Edge> {
    let rings = std::iter::once(&piece.outline.outer).chain(&piece.outline.holes);
    let mut edges = Vec::new();
    for (r, ring) in rings.enumerate() {
        let forward = (signed_area(ring) > 0.0) == (r == 0);
        let start = edges.len();
        for (s, side) in ring.sides.iter().enumerate() {
            let place = Place {
                piece: index,
                ring: r,
                side: s,
            };
            for part in parts(side) {
                let side = if forward { part } else { reversed(&part) };
                edges.push(Edge { place, side });
            }
        }
        if !forward {
            edges[start..].reverse();
        }
    }
    edges
}

/// A side as it is, or cut into equal arcs of less than half a turn.
fn parts(side: &Side) -> Vec<Side> {
    let Some(arc) = side.arc else {
        return vec![*side];
    };
    let n = (arc.sweep.abs() / (PI * 0.999)).ceil().max(1.0);
    let step = arc.sweep / n;
    let start = (side.from - arc.circle.centre).angle();
    let at = |k: f64| arc.circle.centre + Vector::at_angle(start + k * step) * arc.circle.radius;
    let count = n as usize;
    (0..count)
        .map(|k| {
            let mut part = *side;
            if k > 0 {
                part.from = at(k as f64);
            }
            if k + 1 < count {
                part.to = at((k + 1) as f64);
            }
            part.arc = Some(crate::outline::side::Arc { sweep: step, ..arc });
            part
        })
        .collect()
}

/// A side from its last to its first point.
#[must_use]
pub fn reversed(side: &Side) -> Side {
    Side {
        from: side.to,
        to: side.from,
        arc: side.arc.map(|mut arc| {
            arc.sweep = -arc.sweep;
            arc
        }),
        corner: side.corner,
    }
}

/// The box of a side, grown by `margin`.
#[must_use]
pub fn extent(side: &Side, margin: f64) -> Extent {
    let (a, b) = (side.from, side.to);
    let mut e = [a.x.min(b.x), a.x.max(b.x), a.y.min(b.y), a.y.max(b.y)];
    if let Some(arc) = side.arc {
        for quarter in 0..4 {
            let angle = f64::from(quarter) * 0.5 * PI;
            let p = arc.circle.centre + Vector::at_angle(angle) * arc.circle.radius;
            if parameter(side, p).is_some() {
                e = [e[0].min(p.x), e[1].max(p.x), e[2].min(p.y), e[3].max(p.y)];
            }
        }
    }
    [e[0] - margin, e[1] + margin, e[2] - margin, e[3] + margin]
}

/// Where along a side a point lies that is known to lie on its line or circle: 0 to 1, or `None` if
/// it is beyond the ends.
#[must_use]
pub fn parameter(side: &Side, p: Point) -> Option<f64> {
    let t = match side.arc {
        None => {
            let d = side.to - side.from;
            (p - side.from).dot(d) / d.dot(d)
        }
        Some(arc) => {
            let c = arc.circle.centre;
            let ahead = ((p - c).angle() - (side.from - c).angle()) * arc.sweep.signum();
            ahead.rem_euclid(TAU) / arc.sweep.abs()
        }
    };
    (0.0..=1.0).contains(&t).then_some(t)
}

/// Distance from a point to a side.
#[must_use]
pub fn distance(side: &Side, p: Point) -> f64 {
    let ends = p.distance(side.from).min(p.distance(side.to));
    if parameter(side, p).is_none() {
        return ends;
    }
    let along = match side.arc {
        None => {
            let d = side.to - side.from;
            (d.cross(p - side.from) / d.length()).abs()
        }
        Some(arc) => (p.distance(arc.circle.centre) - arc.circle.radius).abs(),
    };
    along.min(ends)
}

/// The point of a side that is nearest to `p`.
#[must_use]
pub fn foot(side: &Side, p: Point) -> Point {
    let on_carrier = match side.arc {
        None => {
            let d = side.to - side.from;
            side.from + d * ((p - side.from).dot(d) / d.dot(d))
        }
        Some(arc) => {
            let c = arc.circle.centre;
            c + Vector::at_angle((p - c).angle()) * arc.circle.radius
        }
    };
    let mut nearest = if p.distance(side.from) <= p.distance(side.to) {
        side.from
    } else {
        side.to
    };
    if parameter(side, on_carrier).is_some() && on_carrier.distance(p) < nearest.distance(p) {
        nearest = on_carrier;
    }
    nearest
}

/// The middle of a side.
#[must_use]
pub fn middle(side: &Side) -> Point {
    match side.arc {
        None => side.from.lerp(side.to, 0.5),
        Some(arc) => {
            let c = arc.circle.centre;
            let angle = (side.from - c).angle() + 0.5 * arc.sweep;
            c + Vector::at_angle(angle) * arc.circle.radius
        }
    }
}

/// How often closed edges wind about a point that lies on none of them.
#[must_use]
pub fn winding<'a>(edges: impl Iterator<Item = &'a Edge>, p: Point) -> i64 {
    let total: f64 = edges
        .map(|edge| {
            let side = &edge.side;
            let (u, v) = (side.from - p, side.to - p);
            let chord = u.cross(v).atan2(u.dot(v));
            // Between the chord and its arc the angle goes the other way round.
            let beyond = side.arc.map_or(0.0, |arc| {
                let over = (side.to - side.from).cross(p - side.from) * arc.sweep < 0.0;
                let within = p.distance(arc.circle.centre) < arc.circle.radius;
                if over && within {
                    TAU * arc.sweep.signum()
                } else {
                    0.0
                }
            });
            chord + beyond
        })
        .sum();
    (total / TAU).round() as i64
}
