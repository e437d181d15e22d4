//! Sharp re-entrant corners of a domain.

use std::f64::consts::{PI, TAU};

use crate::domain::{Domain, DomainSide};
use crate::point::{Point, Vector};
use crate::tree::{Extent, Tree};

/// A corner where the material takes up more than half of the full angle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ReentrantCorner {
    /// Index of the domain's point, which is also the mesh's vertex.
    pub point: u32,
    /// Where it is.
    pub at: Point,
    /// Angle of the material, radians, more than π.
    pub interior_angle: f64,
    /// Distance to the nearest side of the edge that does not meet the corner: the scale of the wall.
    pub wall: f64,
}

/// Angles up to this much beyond π count as straight.
const STRAIGHT: f64 = 1e-3;

/// The sharp re-entrant corners of a domain in the order of its points. Angles are between tangents:
/// the ends of a rounding are no corners. Where several pieces meet their angles add up.
#[must_use]
pub fn reentrant_corners(domain: &Domain) -> Vec<ReentrantCorner> {
    let mut at_point: Vec<Vec<(f64, bool)>> = vec![Vec::new(); domain.points.len()];
    for side in &domain.sides {
        let (start, end) = tangents(domain, side);
        at_point[side.from as usize].push((start.angle(), side.left.is_some()));
        // Seen from its end the side runs backwards: its right is on the left.
        at_point[side.to as usize].push(((-end).angle(), side.right.is_some()));
    }
    let free: Vec<&DomainSide> = domain
        .sides
        .iter()
        .filter(|s| s.left.is_none() || s.right.is_none())
        .collect();
    let boxes: Vec<Extent> = free.iter().map(|s| around(domain, s)).collect();
    let tree = Tree::new(&boxes);
    let mut corners = Vec::new();
    for (i, mut directions) in at_point.into_iter().enumerate() {
        directions.sort_by(|a, b| a.0.total_cmp(&b.0));
        let mut angle = 0.0;
        for k in 0..directions.len() {
            let (a, material) = directions[k];
            let b = directions[(k + 1) % directions.len()].0;
            if material {
                let between = (b - a).rem_euclid(TAU);
                angle += if between == 0.0 { TAU } else { between };
            }
        }
        if angle > PI + STRAIGHT && directions.iter().any(|d| !d.1) {
            let at = domain.points[i];
            let wall = tree.nearest(at, |k| {
                let s = free[k];
                if s.from == i as u32 || s.to == i as u32 {
                    f64::INFINITY
                } else {
                    distance(domain, s, at)
                }
            });
            let wall = if wall.is_finite() { wall } else { size(domain) };
            corners.push(ReentrantCorner {
                point: i as u32,
                at,
                interior_angle: angle.min(TAU),
                wall,
            });
        }
    }
    corners
}

/// Directions of travel at a side's two ends.
fn tangents(domain: &Domain, side: &DomainSide) -> (Vector, Vector) {
    let (a, b) = (
        domain.points[side.from as usize],
        domain.points[side.to as usize],
    );
    match side.arc {
        None => (b - a, b - a),
        Some(arc) => {
            let sense = arc.sweep.signum();
            let tangent = |p: Point| (p - arc.circle.centre).perpendicular() * sense;
            (tangent(a), tangent(b))
        }
    }
}

/// A box about a side: for an arc, about its chord and as far beyond as it can rise.
fn around(domain: &Domain, side: &DomainSide) -> Extent {
    let (a, b) = (
        domain.points[side.from as usize],
        domain.points[side.to as usize],
    );
    let rise = side.arc.map_or(0.0, |arc| {
        arc.circle.radius * (1.0 - (0.5 * arc.sweep).cos())
    });
    [
        a.x.min(b.x) - rise,
        a.x.max(b.x) + rise,
        a.y.min(b.y) - rise,
        a.y.max(b.y) + rise,
    ]
}

/// Distance from a point to a side.
fn distance(domain: &Domain, side: &DomainSide, p: Point) -> f64 {
    let (a, b) = (
        domain.points[side.from as usize],
        domain.points[side.to as usize],
    );
    let ends = p.distance(a).min(p.distance(b));
    match side.arc {
        None => {
            let d = b - a;
            let t = (p - a).dot(d) / d.dot(d);
            if (0.0..=1.0).contains(&t) {
                p.distance(a.lerp(b, t))
            } else {
                ends
            }
        }
        Some(arc) => {
            let c = arc.circle.centre;
            let start = (a - c).angle();
            let ahead = ((p - c).angle() - start) * arc.sweep.signum();
            if ahead.rem_euclid(TAU) < arc.sweep.abs() {
                ends.min((p.distance(c) - arc.circle.radius).abs())
            } else {
                ends
            }
        }
    }
}

fn size(domain: &Domain) -> f64 {
    let first = domain.points.first().copied().unwrap_or_default();
    domain
        .points
        .iter()
        .fold(0.0_f64, |m, p| m.max(p.distance(first)))
}
