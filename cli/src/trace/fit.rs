//! A curve becomes arcs of circles that stay within a distance of it.

use sectile_mesh::outline::corner::arc_through;
use sectile_mesh::outline::side::Side;
use sectile_mesh::{Point, Vector};

use super::curve::Curve;

/// Places at which an arc is compared with its stretch of curve.
const SAMPLES: usize = 16;
/// Halvings of one stretch; what is not within the distance then is beyond the numbers' digits.
const DEEPEST: usize = 16;
/// An arc turns no more than this, radians, so that places along it and along its chord agree.
const WIDEST: f64 = 1.75;
/// The part of the distance that is used: between the samples the curve may be a little farther off.
const MARGIN: f64 = 0.9;

/// Appends sides that follow `curve` within `chord`, and returns the largest departure found.
pub fn arcs(curve: &Curve, chord: f64, sides: &mut Vec<Side>) -> f64 {
    let mut largest = 0.0_f64;
    // Last in, first out: the second half waits while the first is divided.
    let mut waiting: Vec<(f64, f64, usize)> = curve
        .stretches()
        .into_iter()
        .rev()
        .map(|(a, b)| (a, b, 0))
        .collect();
    while let Some((a, b, depth)) = waiting.pop() {
        let (side, departure) = try_one(curve, a, b, chord);
        if departure <= MARGIN * chord || depth == DEEPEST {
            largest = largest.max(departure.min(f64::MAX));
            if side.from != side.to {
                sides.push(side);
            }
        } else {
            let middle = 0.5 * (a + b);
            waiting.push((middle, b, depth + 1));
            waiting.push((a, middle, depth + 1));
        }
    }
    largest
}

/// The arc through both ends and the middle, or the line where that is as good, and how far it is from
/// the curve; infinite where it does not follow it at all.
fn try_one(curve: &Curve, a: f64, b: f64, chord: f64) -> (Side, f64) {
    let at = |i: usize| match i {
        0 => curve.at(a),
        SAMPLES => curve.at(b),
        _ => curve.at(a + (b - a) * i as f64 / SAMPLES as f64),
    };
    let points: Vec<Point> = (0..=SAMPLES).map(at).collect();
    let (from, to, via) = (points[0], points[SAMPLES], points[SAMPLES / 2]);
    let line = Side {
        from,
        to,
        arc: None,
        corner: 0,
    };
    let along = to - from;
    let length = along.length();
    let around = points.iter().map(|p| p.distance(from)).fold(0.0, f64::max);
    if around <= 0.1 * chord {
        return (line, around);
    }
    let forward = points
        .windows(2)
        .all(|pair| (pair[1] - pair[0]).dot(along) >= 0.0);
    if !forward || length == 0.0 {
        return (line, f64::INFINITY);
    }
    let worst = |distance: &dyn Fn(Vector) -> f64, origin: Point| {
        points
            .iter()
            .map(|p| distance(*p - origin))
            .fold(0.0, f64::max)
    };
    let off_line = worst(&|d| (d.cross(along) / length).abs(), from);
    // A hundredth of the distance: nobody drew such an arc.
    if off_line <= 0.01 * chord {
        return (line, off_line);
    }
    match arc_through(from, via, to) {
        Some(arc) if arc.sweep.abs() <= WIDEST => {
            let circle = arc.circle;
            let off_arc = worst(&|d| (d.length() - circle.radius).abs(), circle.centre);
            let side = Side {
                arc: Some(arc),
                ..line
            };
            (side, off_arc)
        }
        Some(_) => (line, f64::INFINITY),
        None => (line, off_line),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::trace::curve::Spline;

    fn followed(curve: &Curve, chord: f64) -> Vec<Side> {
        let mut sides = Vec::new();
        let departure = arcs(curve, chord, &mut sides);
        assert!(departure <= chord, "{departure} > {chord}");
        // Far more places than the fit itself looked at.
        for (a, b) in curve.stretches() {
            for i in 0..=2000 {
                let p = curve.at(a + (b - a) * f64::from(i) / 2000.0);
                let off = sides
                    .iter()
                    .map(|side| distance(side, p))
                    .fold(f64::INFINITY, f64::min);
                assert!(off <= chord, "{p:?} is {off} off");
            }
        }
        for pair in sides.windows(2) {
            assert_eq!(pair[0].to, pair[1].from);
        }
        sides
    }

    fn distance(side: &Side, p: Point) -> f64 {
        let ends = p.distance(side.from).min(p.distance(side.to));
        let Some(arc) = side.arc else {
            let along = side.to - side.from;
            let t = (p - side.from).dot(along) / along.dot(along);
            return if (0.0..=1.0).contains(&t) {
                p.distance(side.from.lerp(side.to, t))
            } else {
                ends
            };
        };
        let (u, v) = (side.from - arc.circle.centre, p - arc.circle.centre);
        let turned = u.cross(v).atan2(u.dot(v)) / arc.sweep;
        if (0.0..=1.0).contains(&turned) {
            (v.length() - arc.circle.radius).abs()
        } else {
            ends
        }
    }

    #[test]
    fn arcs_stay_within_the_distance_everywhere() {
        let (o, x) = (Point::new(0.0, 0.0), Vector::new(5.0, 0.0));
        let ellipse = Curve::Ellipse {
            centre: o,
            u: x,
            v: Vector::new(0.0, 1.0),
            range: (0.3, 5.0),
            ends: (
                o + x * 0.3_f64.cos() + Vector::new(0.0, 0.3_f64.sin()),
                o + x * 5.0_f64.cos() + Vector::new(0.0, 5.0_f64.sin()),
            ),
        };
        let p = |x: f64, y: f64| Point::new(x, y);
        let wave = Curve::Cubic([p(0.0, 0.0), p(4.0, 9.0), p(5.0, -8.0), p(9.0, 1.0)]);
        let looped = Curve::Cubic([p(0.0, 0.0), p(9.0, 9.0), p(-5.0, 9.0), p(4.0, 0.0)]);
        let spline = Curve::Spline(Box::new(Spline {
            degree: 3,
            knots: vec![0.0, 0.0, 0.0, 0.0, 1.0, 2.0, 2.0, 2.0, 2.0],
            points: vec![
                p(0.0, 0.0),
                p(1.0, 3.0),
                p(4.0, -2.0),
                p(6.0, 5.0),
                p(8.0, 0.0),
            ],
            weights: vec![1.0, 2.0, 1.0, 0.5, 1.0],
        }));
        for curve in [&ellipse, &wave, &looped, &spline] {
            let coarse = followed(curve, 1e-2).len();
            let fine = followed(curve, 1e-5).len();
            // The error of an arc falls with the cube of its length: a thousandth takes ten times.
            assert!(fine > 3 * coarse && fine < 30 * coarse, "{coarse} {fine}");
        }
    }

    #[test]
    fn a_straight_curve_is_a_line_and_a_quarter_of_a_circle_one_arc() {
        let p = |x: f64, y: f64| Point::new(x, y);
        let line = Curve::Cubic([p(0.0, 0.0), p(1.0, 1.0), p(2.0, 2.0), p(3.0, 3.0)]);
        assert!(followed(&line, 1e-6).iter().all(|s| s.arc.is_none()));
        // The usual cubic for a quarter is 2.7e-4 of its radius off.
        let k = 0.552_284_749_830_793_4;
        let quarter = Curve::Cubic([p(1.0, 0.0), p(1.0, k), p(k, 1.0), p(0.0, 1.0)]);
        assert_eq!(followed(&quarter, 1e-3).len(), 2);
    }

    #[test]
    fn a_rational_spline_can_be_a_circle() {
        // The unit quarter circle as a rational quadratic: weights 1, cos 45°, 1.
        let half = std::f64::consts::FRAC_1_SQRT_2;
        let p = |x: f64, y: f64| Point::new(x, y);
        let spline = Curve::Spline(Box::new(Spline {
            degree: 2,
            knots: vec![0.0, 0.0, 0.0, 1.0, 1.0, 1.0],
            points: vec![p(1.0, 0.0), p(1.0, 1.0), p(0.0, 1.0)],
            weights: vec![1.0, half, 1.0],
        }));
        for i in 0..=10 {
            let q = spline.at(f64::from(i) / 10.0);
            assert!((q.x.hypot(q.y) - 1.0).abs() < 1e-15);
        }
        assert_eq!(spline.at(1.0), p(0.0, 1.0));
    }
}
