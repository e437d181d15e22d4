//! Areas that two pieces share, by geo's boolean operations on finely polygonised rings.
//!
//! Those operations pass through a grid of integers, so nothing but a place and an area for a message
//! is ever taken from them.

use std::f64::consts::PI;

use geo::{Area, BooleanOps, Coord, InteriorPoint, LineString, Polygon, Validation};

use crate::outline::piece::{Piece, Ring};
use crate::point::{Point, Vector};

/// Steps of arcs in a polygonised ring.
const STEP: f64 = PI / 90.0;

fn line_string(ring: &Ring) -> LineString<f64> {
    let mut out = Vec::new();
    for side in &ring.sides {
        out.push(Coord {
            x: side.from.x,
            y: side.from.y,
        });
        if let Some(arc) = side.arc {
            let n = (arc.sweep.abs() / STEP).ceil().max(1.0);
            let start = (side.from - arc.circle.centre).angle();
            for k in 1..n as usize {
                let angle = start + arc.sweep * k as f64 / n;
                let p = arc.circle.centre + Vector::at_angle(angle) * arc.circle.radius;
                out.push(Coord { x: p.x, y: p.y });
            }
        }
    }
    LineString::new(out)
}

fn polygon(piece: &Piece) -> Polygon<f64> {
    Polygon::new(
        line_string(&piece.outline.outer),
        piece.outline.holes.iter().map(line_string).collect(),
    )
}

/// The area that two pieces share and a point inside both, as far as polygons tell.
#[must_use]
pub fn shared_area(a: &Piece, b: &Piece) -> Option<(f64, Point)> {
    let shared = polygon(a).intersection(&polygon(b));
    let at = shared.interior_point()?;
    Some((shared.unsigned_area(), Point::new(at.x(), at.y())))
}

/// What geo's own check has against a piece with straight sides only; `None` if nothing, or if the
/// piece has arcs, which polygons cannot judge.
#[must_use]
pub fn second_opinion(piece: &Piece) -> Option<String> {
    let mut rings = std::iter::once(&piece.outline.outer).chain(&piece.outline.holes);
    if rings.any(|r| r.sides.iter().any(|s| s.arc.is_some())) {
        return None;
    }
    polygon(piece)
        .check_validation()
        .err()
        .map(|e| e.to_string())
}
