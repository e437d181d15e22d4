//! Shapes of a few dimensions. All dimensions are positive; the caller has checked them.

use std::f64::consts::TAU;

use super::piece::{Outline, Ring};
use super::side::{Arc, Circle, Side};
use crate::point::Point;

/// A full circle of diameter `d` about `at`.
#[must_use]
pub fn circle(at: Point, d: f64) -> Ring {
    let radius = 0.5 * d;
    let start = Point::new(at.x + radius, at.y);
    Ring {
        sides: vec![Side {
            from: start,
            to: start,
            arc: Some(Arc {
                circle: Circle { centre: at, radius },
                sweep: TAU,
            }),
            corner: 0,
        }],
    }
}

/// The ring of straight sides through `points`.
#[must_use]
pub fn polygon(points: &[Point]) -> Ring {
    let n = points.len();
    Ring {
        sides: (0..n)
            .map(|i| Side {
                from: points[(i + n - 1) % n],
                to: points[i],
                arc: None,
                corner: i,
            })
            .collect(),
    }
}

/// A flat of thickness `t` about the line `from`–`to`.
#[must_use]
pub fn plate(from: Point, to: Point, t: f64) -> Outline {
    let d = to - from;
    let half = d.perpendicular() * (0.5 * t / d.length());
    Outline {
        outer: polygon(&[from - half, to - half, to + half, from + half]),
        holes: Vec::new(),
    }
}

/// A round tube of outer diameter `d` and wall `t < d/2` about `at`.
#[must_use]
pub fn tube(at: Point, d: f64, t: f64) -> Outline {
    Outline {
        outer: circle(at, d),
        holes: vec![circle(at, d - 2.0 * t)],
    }
}

/// A rectangle, `b` along x and `h` along y, centred at `at`.
#[must_use]
pub fn bar(at: Point, b: f64, h: f64) -> Outline {
    let (x, y) = (0.5 * b, 0.5 * h);
    Outline {
        outer: polygon(&[
            Point::new(at.x - x, at.y - y),
            Point::new(at.x + x, at.y - y),
            Point::new(at.x + x, at.y + y),
            Point::new(at.x - x, at.y + y),
        ]),
        holes: Vec::new(),
    }
}
