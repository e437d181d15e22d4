//! Sharp re-entrant corners of a domain.

use std::f64::consts::{PI, TAU};

use crate::domain::fan::{between, fans};
use crate::domain::{Domain, DomainSide, TOLERANCE, beyond};
use crate::point::Point;
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
    /// Distance to the nearest side of the edge that does not meet the corner, nor lies on it as the
    /// other hand of a slit does: the scale of the wall.
    pub wall: f64,
}

/// Angles up to this much beyond π count as straight.
const STRAIGHT: f64 = 1e-3;

/// The sharp re-entrant corners of a domain in the order of its points. Angles are between tangents:
/// the ends of a rounding are no corners. Where several pieces meet their angles add up; around the end of
/// a slit they make a full turn.
#[must_use]
pub fn reentrant_corners(domain: &Domain) -> Vec<ReentrantCorner> {
    let free: Vec<&DomainSide> = domain
        .sides
        .iter()
        .filter(|s| s.left.is_none() || s.right.is_none())
        .collect();
    let boxes: Vec<Extent> = free.iter().map(|s| s.extent(&domain.points)).collect();
    let tree = Tree::new(&boxes);
    let other_hand = TOLERANCE * domain.size();
    let mut corners = Vec::new();
    for (i, fan) in fans(domain).into_iter().enumerate() {
        let angle: f64 = (0..fan.len())
            .filter(|&k| fan[k].left.is_some())
            .map(|k| between(&fan[k], &fan[(k + 1) % fan.len()]))
            .sum();
        if angle > PI + STRAIGHT && fan.iter().any(|d| d.left.is_none()) {
            let at = domain.points[i];
            let wall = tree.nearest(at, |k| {
                let s = free[k];
                if s.from == i as u32 || s.to == i as u32 {
                    f64::INFINITY
                } else {
                    beyond(s.distance(&domain.points, at), other_hand)
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

fn size(domain: &Domain) -> f64 {
    let first = domain.points.first().copied().unwrap_or_default();
    domain
        .points
        .iter()
        .fold(0.0_f64, |m, p| m.max(p.distance(first)))
}
