//! Corners as they are written, and the ring that they make.

use std::f64::consts::TAU;

use super::piece::Ring;
use super::side::{Arc, Circle, Side};
use crate::point::{Point, Vector};

/// A corner of a loop as its writer gives it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Corner {
    /// Where it is (where the two sides would meet, if it is rounded).
    pub at: Point,
    /// Radius of the rounding arc, tangent to both sides.
    pub round: Option<f64>,
    /// A point on the circular arc by which the side arrives at this corner; `None`: a straight side.
    pub via: Option<Point>,
}

/// What is wrong with a corner.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum CornerFault {
    /// Fewer than three corners (two, if a side is an arc).
    #[error("a loop needs at least three corners, this one has {0}")]
    TooFew(usize),
    /// A coordinate or radius is not a finite number.
    #[error("not a finite number")]
    NotFinite,
    /// The side that arrives here has no length.
    #[error("the side that arrives here has no length")]
    ZeroLength,
    /// `via` coincides with an end of the side, or lies in line with both ends outside of them.
    #[error("no circular arc runs through these three points")]
    NoArc,
    /// The radius is not positive or does not fit; the largest that does.
    #[error("a rounding radius of {given} does not fit; the largest that does is {largest}")]
    RoundTooLarge {
        /// As written.
        given: f64,
        /// The largest radius that fits here, the other corners' radii kept.
        largest: f64,
    },
    /// Rounding is asked for at a corner where the two sides are in line or fold back.
    #[error("there is no corner to round here")]
    NothingToRound,
}

/// Sides shorter than this part of the loop's size have no length.
const NO_LENGTH: f64 = 1e-9;

/// The ring through `corners`, closed by itself; each fault with its corner's index.
///
/// A rounded corner is cut by the circle of its radius that touches both sides, straight or circular,
/// on the inner side of the turn and nearest to the corner.
///
/// # Errors
/// Every fault found, not the first only.
pub fn ring_from_corners(corners: &[Corner]) -> Result<Ring, Vec<(usize, CornerFault)>> {
    let n = corners.len();
    let least = if corners.iter().any(|c| c.via.is_some()) {
        2
    } else {
        3
    };
    if n < least {
        return Err(vec![(0, CornerFault::TooFew(n))]);
    }
    let mut faults: Vec<(usize, CornerFault)> = Vec::new();
    for (i, c) in corners.iter().enumerate() {
        let finite = c.at.is_finite()
            && c.via.is_none_or(Point::is_finite)
            && c.round.is_none_or(f64::is_finite);
        if !finite {
            faults.push((i, CornerFault::NotFinite));
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    let size = corners
        .iter()
        .map(|c| c.at.distance(corners[0].at))
        .fold(0.0, f64::max);
    let mut sides = Vec::with_capacity(n);
    for i in 0..n {
        match side_to(corners, i, NO_LENGTH * size) {
            Ok(side) => sides.push(side),
            Err(fault) => faults.push((i, fault)),
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    round(corners, &sides)
}

/// The side that arrives at corner `i`, before rounding.
fn side_to(corners: &[Corner], i: usize, least: f64) -> Result<Side, CornerFault> {
    let from = corners[(i + corners.len() - 1) % corners.len()].at;
    let Corner { at: to, via, .. } = corners[i];
    if from.distance(to) <= least {
        return Err(CornerFault::ZeroLength);
    }
    let arc = match via {
        None => None,
        Some(via) => Some(arc_through(from, via, to).ok_or(CornerFault::NoArc)?),
    };
    Ok(Side {
        from,
        to,
        arc,
        corner: i,
    })
}

/// The arc from `a` over `m` to `b`; `None` if the three lie in line or coincide.
#[must_use]
pub fn arc_through(a: Point, m: Point, b: Point) -> Option<Arc> {
    let (u, v) = (m - a, b - a);
    let double = 2.0 * u.cross(v);
    if double.abs() <= 1e-10 * u.length() * v.length() || m.distance(b) == 0.0 {
        return None;
    }
    let (uu, vv) = (u.dot(u), v.dot(v));
    let offset = Vector::new(
        (v.y * uu - u.y * vv) / double,
        (u.x * vv - v.x * uu) / double,
    );
    let centre = a + offset;
    let (p, q) = (a - centre, b - centre);
    // The arc runs anticlockwise if its middle lies to the right of the chord.
    let anticlockwise = u.cross(v) > 0.0;
    let angle = p.cross(q).atan2(p.dot(q));
    let sweep = match (anticlockwise, angle > 0.0) {
        (true, false) => angle + TAU,
        (false, true) => angle - TAU,
        _ => angle,
    };
    Some(Arc {
        circle: Circle {
            centre,
            radius: offset.length(),
        },
        sweep,
    })
}

/// A rounding: where its arc leaves the arriving side, as that side's parameter, and where it joins
/// the leaving side.
#[derive(Clone, Copy, Debug)]
struct Rounding {
    leaves: f64,
    joins: f64,
    start: Point,
    end: Point,
    arc: Arc,
}

/// Cuts the rounded corners.
fn round(corners: &[Corner], sides: &[Side]) -> Result<Ring, Vec<(usize, CornerFault)>> {
    let n = corners.len();
    let next = |i: usize| (i + 1) % n;
    let mut faults = Vec::new();
    let mut roundings: Vec<Option<Rounding>> = vec![None; n];
    for i in 0..n {
        let Some(radius) = corners[i].round else {
            continue;
        };
        let (arriving, leaving) = (&sides[i], &sides[next(i)]);
        let (d, e) = (direction(arriving, 1.0), direction(leaving, 0.0));
        if d.cross(e).abs() <= 1e-9 {
            faults.push((i, CornerFault::NothingToRound));
        } else if radius <= 0.0 {
            faults.push((
                i,
                CornerFault::RoundTooLarge {
                    given: radius,
                    largest: largest(arriving, leaving, 0.0, 1.0),
                },
            ));
        } else {
            roundings[i] = rounding(arriving, leaving, radius);
            if roundings[i].is_none() {
                let given = radius;
                let largest = largest(arriving, leaving, 0.0, 1.0);
                faults.push((i, CornerFault::RoundTooLarge { given, largest }));
            }
        }
    }
    // What the roundings at its two ends leave of each side.
    let slack = 1e-12;
    for i in 0..n {
        let Some(own) = roundings[i] else { continue };
        let before = roundings[(i + n - 1) % n].map_or(0.0, |r| r.joins);
        let after = roundings[next(i)].map_or(1.0, |r| r.leaves);
        if own.leaves + slack < before || own.joins > after + slack {
            let given = corners[i].round.unwrap_or(0.0);
            let largest = largest(&sides[i], &sides[next(i)], before, after);
            faults.push((i, CornerFault::RoundTooLarge { given, largest }));
        }
    }
    if !faults.is_empty() {
        faults.sort_by_key(|f| f.0);
        return Err(faults);
    }

    let mut out: Vec<Side> = Vec::new();
    for i in 0..n {
        let side = &sides[i];
        let (from, a) = roundings[(i + n - 1) % n].map_or((side.from, 0.0), |r| (r.end, r.joins));
        let (to, b) = roundings[i].map_or((side.to, 1.0), |r| (r.start, r.leaves));
        let whole = length(side);
        // Two roundings that use a side up meet tangentially.
        if (b - a) * whole > NO_LENGTH * whole {
            out.push(Side {
                from,
                to,
                arc: side.arc.map(|arc| Arc {
                    sweep: arc.sweep * (b - a),
                    ..arc
                }),
                corner: i,
            });
        }
        if let Some(r) = roundings[i] {
            out.push(Side {
                from: r.start,
                to: r.end,
                arc: Some(r.arc),
                corner: i,
            });
        }
    }
    // Where a side was used up, the arcs on either hand share one point.
    let count = out.len();
    for k in 0..count {
        let end = out[k].to;
        out[(k + 1) % count].from = end;
    }
    Ok(Ring { sides: out })
}

/// The largest radius that rounds the corner between two sides of which the first is free from
/// parameter `before` on and the second up to `after`, by bisection.
fn largest(arriving: &Side, leaving: &Side, before: f64, after: f64) -> f64 {
    let fits = |r: f64| {
        rounding(arriving, leaving, r).is_some_and(|f| f.leaves >= before && f.joins <= after)
    };
    let (mut low, mut high) = (0.0, 4.0 * (length(arriving) + length(leaving)));
    for _ in 0..80 {
        let r = 0.5 * (low + high);
        if fits(r) {
            low = r;
        } else {
            high = r;
        }
    }
    low
}

/// The rounding of radius `r` between two sides, where it fits on both.
fn rounding(arriving: &Side, leaving: &Side, r: f64) -> Option<Rounding> {
    let corner = arriving.to;
    let turn = direction(arriving, 1.0)
        .cross(direction(leaving, 0.0))
        .signum();
    let centre = match (arriving.arc, leaving.arc) {
        (None, None) => {
            let (d, e) = (direction(arriving, 1.0), direction(leaving, 0.0));
            // Half the angle of turn: tan = (1 − cos) / sin.
            let back = r * (1.0 - d.dot(e)) / d.cross(e).abs();
            corner - d * back + d.perpendicular() * (turn * r)
        }
        _ => centres(arriving, leaving, turn * r)
            .into_iter()
            .min_by(|p, q| p.distance(corner).total_cmp(&q.distance(corner)))?,
    };
    let (leaves, start) = touch(arriving, centre)?;
    let (joins, end) = touch(leaving, centre)?;
    let (u, v) = (start - centre, end - centre);
    let angle = u.cross(v).atan2(u.dot(v));
    let sweep = if angle * turn > 0.0 {
        angle
    } else {
        angle + turn * TAU
    };
    Some(Rounding {
        leaves,
        joins,
        start,
        end,
        arc: Arc {
            circle: Circle { centre, radius: r },
            sweep,
        },
    })
}

/// Points at the signed distance `offset` to the left of both sides' lines or circles.
fn centres(a: &Side, b: &Side, offset: f64) -> Vec<Point> {
    let circle = |side: &Side| {
        side.arc.map(|arc| {
            (
                arc.circle.centre,
                arc.circle.radius - offset * arc.sweep.signum(),
            )
        })
    };
    match (circle(a), circle(b)) {
        (Some(p), Some(q)) => {
            let between = q.0 - p.0;
            let d = between.length();
            if d == 0.0 || p.1 <= 0.0 || q.1 <= 0.0 {
                return Vec::new();
            }
            let x = 0.5 * (d + (p.1 - q.1) * (p.1 + q.1) / d);
            let u = between * (1.0 / d);
            on_both(p.0 + u * x, u.perpendicular(), p.1 * p.1 - x * x)
        }
        (Some(p), None) => line_centres(b, p, offset),
        (None, Some(q)) => line_centres(a, q, offset),
        (None, None) => Vec::new(),
    }
}

fn line_centres(line: &Side, (centre, radius): (Point, f64), offset: f64) -> Vec<Point> {
    if radius <= 0.0 {
        return Vec::new();
    }
    let u = direction(line, 0.0);
    let start = line.from + u.perpendicular() * offset;
    let foot = start + u * (centre - start).dot(u);
    let d = centre.distance(foot);
    on_both(foot, u, radius * radius - d * d)
}

fn on_both(foot: Point, along: Vector, square: f64) -> Vec<Point> {
    if square < 0.0 {
        return Vec::new();
    }
    let h = square.sqrt();
    vec![foot + along * h, foot - along * h]
}

/// Where a circle about `centre` touches a side: the side's parameter and the point.
fn touch(side: &Side, centre: Point) -> Option<(f64, Point)> {
    let (t, point) = match side.arc {
        None => {
            let d = side.to - side.from;
            let t = (centre - side.from).dot(d) / d.dot(d);
            (t, side.from + d * t)
        }
        Some(arc) => {
            let c = arc.circle.centre;
            let out = centre - c;
            let point = c + out * (arc.circle.radius / out.length());
            let ahead = ((point - c).angle() - (side.from - c).angle()) * arc.sweep.signum();
            (ahead.rem_euclid(TAU) / arc.sweep.abs(), point)
        }
    };
    // The whole of a side may be used up, to rounding.
    ((-1e-12..=1.0 + 1e-12).contains(&t)).then_some((t.clamp(0.0, 1.0), point))
}

/// Unit direction of travel at a side's start (`at` = 0) or end (1).
fn direction(side: &Side, at: f64) -> Vector {
    let d = match side.arc {
        None => side.to - side.from,
        Some(arc) => {
            let p = if at == 0.0 { side.from } else { side.to };
            (p - arc.circle.centre).perpendicular() * arc.sweep.signum()
        }
    };
    d * (1.0 / d.length())
}

fn length(side: &Side) -> f64 {
    side.arc.map_or(side.from.distance(side.to), |arc| {
        arc.circle.radius * arc.sweep.abs()
    })
}

#[cfg(test)]
mod tests;
