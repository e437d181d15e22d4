//! Where two sides touch or cross.

use super::edge::{distance, parameter};
use crate::outline::side::{Circle, Side};
use crate::point::{Point, Vector};

/// The points at which two sides meet, to within `tolerance`: ends that lie on the other side, and
/// crossings. Sides that run along each other meet at the ends of what they share.
#[must_use]
pub fn contacts(a: &Side, b: &Side, tolerance: f64) -> Vec<Point> {
    let mut found: Vec<Point> = Vec::new();
    let mut add = |p: Point| {
        if found.iter().all(|q| q.distance(p) > 2.0 * tolerance) {
            found.push(p);
        }
    };
    for p in [a.from, a.to] {
        if distance(b, p) <= tolerance {
            add(p);
        }
    }
    for p in [b.from, b.to] {
        if distance(a, p) <= tolerance {
            add(p);
        }
    }
    for p in carriers_meet(a, b, tolerance) {
        if parameter(a, p).is_some() && parameter(b, p).is_some() {
            add(p);
        }
    }
    found
}

/// Points that the lines or circles of two sides have in common; none if they are the same.
#[must_use]
pub fn carriers_meet(a: &Side, b: &Side, tolerance: f64) -> Vec<Point> {
    match (a.arc, b.arc) {
        (None, None) => {
            let (d, e) = (a.to - a.from, b.to - b.from);
            let cross = d.cross(e);
            // Sides this close to parallel meet at their ends or not at all.
            if cross.abs() <= 1e-12 * d.length() * e.length() {
                return Vec::new();
            }
            vec![a.from + d * ((b.from - a.from).cross(e) / cross)]
        }
        (Some(arc), None) => line_and_circle(b, &arc.circle, tolerance),
        (None, Some(arc)) => line_and_circle(a, &arc.circle, tolerance),
        (Some(p), Some(q)) => two_circles(&p.circle, &q.circle, tolerance),
    }
}

fn line_and_circle(line: &Side, circle: &Circle, tolerance: f64) -> Vec<Point> {
    let d = line.to - line.from;
    let u = d * (1.0 / d.length());
    let foot = line.from + u * (circle.centre - line.from).dot(u);
    along(
        foot,
        u,
        circle.centre.distance(foot),
        circle.radius,
        tolerance,
    )
}

fn two_circles(p: &Circle, q: &Circle, tolerance: f64) -> Vec<Point> {
    let between = q.centre - p.centre;
    let d = between.length();
    if d <= tolerance {
        return Vec::new();
    }
    let u = between * (1.0 / d);
    // Distance from p's centre to the common chord.
    let x = 0.5 * (d + (p.radius - q.radius) * (p.radius + q.radius) / d);
    let foot = p.centre + u * x;
    // Circles that touch within the tolerance touch in one point.
    let gap = (d - (p.radius + q.radius)).max((p.radius - q.radius).abs() - d);
    if gap > tolerance {
        return Vec::new();
    }
    if gap > -tolerance {
        return vec![p.centre + u * (p.radius * x.signum())];
    }
    along(foot, u.perpendicular(), x.abs(), p.radius, tolerance)
}

/// The points `foot ± √(radius² − distance²)·direction`; `foot` alone where the line touches the
/// circle within the tolerance, lest rounding makes two points of one.
fn along(foot: Point, direction: Vector, distance: f64, radius: f64, tolerance: f64) -> Vec<Point> {
    if distance > radius + tolerance {
        return Vec::new();
    }
    if distance > radius - tolerance {
        return vec![foot];
    }
    let half = ((radius - distance) * (radius + distance)).sqrt();
    vec![foot + direction * half, foot - direction * half]
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::outline::side::Arc;

    fn line(a: [f64; 2], b: [f64; 2]) -> Side {
        Side {
            from: Point::new(a[0], a[1]),
            to: Point::new(b[0], b[1]),
            arc: None,
            corner: 0,
        }
    }

    /// Upper half of the unit circle from (1, 0) to (−1, 0).
    fn dome() -> Side {
        Side {
            arc: Some(Arc {
                circle: Circle {
                    centre: Point::default(),
                    radius: 1.0,
                },
                sweep: std::f64::consts::PI * 0.999_999,
            }),
            ..line([1.0, 0.0], [-1.0, 0.0])
        }
    }

    #[test]
    fn crossings_touches_and_shared_stretches() {
        let t = 1e-9;
        let a = line([0.0, 0.0], [2.0, 0.0]);
        assert_eq!(contacts(&a, &line([1.0, -1.0], [1.0, 1.0]), t).len(), 1);
        assert_eq!(contacts(&a, &line([1.0, 0.5], [1.0, 1.0]), t).len(), 0);
        assert_eq!(contacts(&a, &line([1.0, 0.0], [3.0, 0.0]), t).len(), 2);
        assert_eq!(contacts(&a, &line([2.0, 0.0], [3.0, 0.0]), t).len(), 1);
        assert_eq!(
            contacts(&dome(), &line([-2.0, 0.5], [2.0, 0.5]), t).len(),
            2
        );
        assert_eq!(
            contacts(&dome(), &line([-2.0, 1.0], [2.0, 1.0]), t).len(),
            1
        );
        assert_eq!(
            contacts(&dome(), &line([-2.0, 1.1], [2.0, 1.1]), t).len(),
            0
        );
        assert_eq!(
            contacts(&dome(), &line([-2.0, -0.5], [2.0, -0.5]), t).len(),
            0
        );
    }
}
