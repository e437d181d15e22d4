//! The sides around each point of a domain.

use std::f64::consts::TAU;

use super::Domain;

/// Directions closer than this, radians, are told apart by their curvature.
const TANGENT: f64 = 1e-9;

/// A side as it leaves a point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Leaving {
    /// Index of the side.
    pub side: usize,
    /// Whether the side starts at the point.
    pub starts: bool,
    /// Direction of its tangent, radians in (−π, π].
    pub angle: f64,
    /// Curvature, positive where it bends to the left.
    pub curvature: f64,
    /// The piece to its left.
    pub left: Option<u32>,
}

/// For each point of the domain the sides that leave it, anticlockwise.
#[must_use]
pub fn fans(domain: &Domain) -> Vec<Vec<Leaving>> {
    let mut fans: Vec<Vec<Leaving>> = vec![Vec::new(); domain.points.len()];
    for (s, side) in domain.sides.iter().enumerate() {
        for starts in [true, false] {
            let (point, left, sense) = if starts {
                (side.from, side.left, 1.0)
            } else {
                (side.to, side.right, -1.0)
            };
            fans[point as usize].push(Leaving {
                side: s,
                starts,
                angle: (side.travel(&domain.points, starts) * sense).angle(),
                curvature: side
                    .arc
                    .map_or(0.0, |arc| sense * arc.sweep.signum() / arc.circle.radius),
                left,
            });
        }
    }
    // Of a slit's hands that leave its end the one with the slit to its left comes first.
    let rank = |l: &Leaving| u8::from(domain.sides[l.side].faying && l.left.is_some());
    for fan in &mut fans {
        fan.sort_by(|a, b| a.angle.total_cmp(&b.angle).then(rank(a).cmp(&rank(b))));
    }
    fans
}

/// The angle from one side to the next anticlockwise, radians in [0, 2π]. Of two tangent sides the one
/// that bends more to the left comes later; two on one line are the hands of a slit.
#[must_use]
pub fn between(a: &Leaving, b: &Leaving) -> f64 {
    let angle = (b.angle - a.angle).rem_euclid(TAU);
    if angle > TANGENT && angle < TAU - TANGENT {
        angle
    } else if b.curvature > a.curvature || (b.curvature == a.curvature && a.left.is_none()) {
        0.0
    } else {
        TAU
    }
}
