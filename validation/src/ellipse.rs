//! An ellipse as a smooth chain of circular arcs, and how far the chain departs from it.
//!
//! The outlines know straight and circular sides only. Between two points of the ellipse with their
//! tangents stands a pair of arcs with a common tangent where they join (a biarc); the chain has no
//! corner, and its distance from the ellipse falls with the third power of the arcs' length and
//! changes sign within each, so that areas suffer less than the distance says.

use std::f64::consts::{PI, TAU};

use sectile_mesh::outline::piece::Ring;
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};

/// An ellipse with its axes along x and y.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ellipse {
    /// Centre.
    pub centre: Point,
    /// Semi-axis along x.
    pub a: f64,
    /// Semi-axis along y.
    pub b: f64,
}

/// Pairs of arcs in the chain: enough for a departure of about 1e-6 at an axis ratio of 2.
const PAIRS: usize = 128;

impl Ellipse {
    fn at(&self, t: f64) -> Point {
        self.centre + Vector::new(self.a * t.cos(), self.b * t.sin())
    }

    fn tangent(&self, t: f64) -> Vector {
        let d = Vector::new(-self.a * t.sin(), self.b * t.cos());
        d * (1.0 / d.length())
    }

    /// `√((x/a)² + (y/b)²) − 1`: the ellipse scaled by one plus this runs through the point.
    fn level(&self, p: Point) -> f64 {
        let v = p - self.centre;
        (v.x / self.a).hypot(v.y / self.b) - 1.0
    }
}

/// The chain, anticlockwise.
#[must_use]
pub fn ring(ellipse: &Ellipse) -> Ring {
    let mut sides = Vec::new();
    let stations = stations(ellipse);
    for i in 0..PAIRS {
        let (from, to) = (stations[i], stations[(i + 1) % PAIRS]);
        let (p, q) = (ellipse.at(from), ellipse.at(to));
        let (u, w) = (ellipse.tangent(from), ellipse.tangent(to));
        let joint = joint(p, u, q, w);
        sides.push(arc_along(p, u, joint, sides.len()));
        // The second arc, seen from its end backwards, leaves along −w.
        let back = arc_along(q, -w, joint, 0);
        sides.push(Side {
            from: joint,
            to: q,
            arc: back.arc.map(|a| Arc {
                sweep: -a.sweep,
                ..a
            }),
            corner: sides.len(),
        });
    }
    Ring { sides }
}

/// Parameters of the pairs' ends, so spaced that every pair departs about equally: a pair of length h
/// departs by a multiple of `|dκ/ds| h³`, so the density of ends along t is
/// `|dκ/dt|^⅓ |ds/dt|^⅔`, κ the curvature; a tenth of its mean is added where κ is stationary.
fn stations(ellipse: &Ellipse) -> Vec<f64> {
    const STEPS: usize = 64 * PAIRS;
    let (a, b) = (ellipse.a, ellipse.b);
    let density = |t: f64| {
        let speed = (a * t.sin()).hypot(b * t.cos());
        let slope = 3.0 * a * b * (a * a - b * b) * (t.sin() * t.cos()).abs() / speed.powi(5);
        slope.cbrt() * speed.cbrt().powi(2)
    };
    let step = TAU / STEPS as f64;
    let mut share: Vec<f64> = (0..STEPS)
        .map(|k| density((k as f64 + 0.5) * step) * step)
        .collect();
    let mean = share.iter().sum::<f64>() / STEPS as f64;
    for s in &mut share {
        *s += 0.1 * mean;
    }
    let pair = share.iter().sum::<f64>() / PAIRS as f64;
    let mut stations = vec![0.0];
    let mut sum = 0.0;
    for (k, s) in share.iter().enumerate() {
        let wanted = pair * stations.len() as f64;
        if sum + s >= wanted && stations.len() < PAIRS {
            stations.push((k as f64 + (wanted - sum) / s) * step);
        }
        sum += s;
    }
    stations
}

/// The point where the two arcs of equal tangent lengths `d` meet: with `v = q − p`, `s = u + w`,
/// `|v − d s|² = 4 d²`, so `(|s|² − 4) d² − 2 (v·s) d + |v|² = 0`, and the joint is the middle of
/// `p + d u` and `q − d w`.
fn joint(p: Point, u: Vector, q: Point, w: Vector) -> Point {
    let (v, s) = (q - p, u + w);
    // |s|² − 4 = −|u − w|² without loss of digits.
    let a = -(u - w).dot(u - w);
    let b = v.dot(s);
    let c = v.dot(v);
    let d = c / (b + (b * b - a * c).sqrt());
    (p + u * d).lerp(q - w * d, 0.5)
}

/// The arc from `p` in direction `u` to `q`.
fn arc_along(p: Point, u: Vector, q: Point, corner: usize) -> Side {
    let v = q - p;
    // The centre lies at p + r n, n = u turned by 90°: |v|² = 2 r n·v.
    let n = u.perpendicular();
    let r = v.dot(v) / (2.0 * n.dot(v));
    let centre = p + n * r;
    // Half the sweep is the angle from u to v.
    let sweep = 2.0 * u.cross(v).atan2(u.dot(v));
    Side {
        from: p,
        to: q,
        arc: Some(Arc {
            circle: Circle {
                centre,
                radius: r.abs(),
            },
            sweep,
        }),
        corner,
    }
}

/// The least ε such that the chain lies between the ellipses scaled by 1 − ε and 1 + ε.
#[must_use]
pub fn departure(ellipse: &Ellipse, ring: &Ring) -> f64 {
    const SAMPLES: usize = 64;
    let mut worst = 0.0_f64;
    for side in &ring.sides {
        let Some(arc) = side.arc else { continue };
        let start = (side.from - arc.circle.centre).angle();
        for k in 0..=SAMPLES {
            let angle = start + arc.sweep * k as f64 / SAMPLES as f64;
            let p = arc.circle.centre + Vector::at_angle(angle) * arc.circle.radius;
            worst = worst.max(ellipse.level(p).abs());
        }
    }
    // The level is smooth along each arc: between samples it exceeds them by at most this share.
    worst * (1.0 + PI * PI / (SAMPLES * SAMPLES) as f64)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn chain_is_closed_smooth_and_near_the_ellipse() {
        for (a, b) in [(2.0, 1.0), (3.0, 2.0), (1.8, 0.489_897_948_556_635_6)] {
            let ellipse = Ellipse {
                centre: Point::new(0.5, -0.25),
                a,
                b,
            };
            let ring = ring(&ellipse);
            let n = ring.sides.len();
            for (i, side) in ring.sides.iter().enumerate() {
                let next = &ring.sides[(i + 1) % n];
                assert!(side.to.distance(next.from) == 0.0);
                let (arc, after) = (side.arc.expect("arc"), next.arc.expect("arc"));
                let radial = |c: Point| {
                    let v = side.to - c;
                    v * (1.0 / v.length())
                };
                let turn = radial(arc.circle.centre).cross(radial(after.circle.centre));
                assert!(turn.abs() < 1e-12, "kink of {turn:e} at side {i}");
                assert!(arc.sweep > 0.0 && arc.sweep < 0.5);
            }
            let departure = departure(&ellipse, &ring);
            assert!(departure < 3e-6, "{departure:e}");
            assert!(departure > 1e-12, "an ellipse is no chain of arcs");
        }
    }
}
