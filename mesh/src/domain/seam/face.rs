//! The side of a piece that a leg of a fillet runs along.

use crate::domain::Domain;
use crate::domain::fan::Leaving;
use crate::outline::side::{Arc, Circle, Side};
use crate::point::{Point, Vector};

/// A free side of a piece, and what continues it, as it leaves a corner.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Face {
    /// The piece.
    pub piece: u32,
    /// Where lengths along it are measured from.
    pub start: Point,
    /// Unit vector along it at the start.
    pub direction: Vector,
    /// The circle that it lies on, and +1 if it leaves anticlockwise, −1 if clockwise.
    pub circle: Option<(Circle, f64)>,
    /// Where the piece itself begins: 0, or beyond a fit-up.
    pub begin: f64,
    /// Length from the start to where it ends.
    pub room: f64,
    /// Where it ends.
    pub end: Point,
}

impl Face {
    /// The face along domain side `side`, walked from its first point to its last or back, from `start`
    /// on it.
    #[must_use]
    pub fn new(
        domain: &Domain,
        fans: &[Vec<Leaving>],
        (side, forward): (usize, bool),
        start: Point,
        tolerance: f64,
    ) -> Self {
        let s = &domain.sides[side];
        let circle = s.arc.map(|arc| {
            let sense = if forward { 1.0 } else { -1.0 };
            (arc.circle, sense * arc.sweep.signum())
        });
        let points = &domain.points;
        let to = points[if forward { s.to } else { s.from } as usize];
        let direction = match circle {
            None => to - start,
            Some((circle, sense)) => (start - circle.centre).perpendicular() * sense,
        };
        let mut face = Self {
            piece: s.left.or(s.right).unwrap_or(0),
            start,
            direction: direction * (1.0 / direction.length()),
            circle,
            begin: 0.0,
            room: match circle {
                None => start.distance(to),
                Some((circle, sense)) => {
                    let (u, v) = (start - circle.centre, to - circle.centre);
                    circle.radius * (sense * u.cross(v).atan2(u.dot(v)))
                }
            },
            end: to,
        };
        let hands = |side: usize, forward: bool| {
            let s = &domain.sides[side];
            if forward {
                (s.left, s.right)
            } else {
                (s.right, s.left)
            }
        };
        let mut at = (side, forward);
        for _ in 0..domain.sides.len() {
            let s = &domain.sides[at.0];
            let end = if at.1 { s.to } else { s.from } as usize;
            let next = fans[end].iter().find(|l| {
                l.side != at.0
                    && l.side != side
                    && hands(l.side, l.starts) == hands(side, forward)
                    && face.continues_as(domain, l, tolerance)
            });
            let Some(next) = next else { break };
            let s = &domain.sides[next.side];
            face.room += s.length(points);
            face.end = points[if next.starts { s.to } else { s.from } as usize];
            at = (next.side, next.starts);
        }
        face
    }

    /// Whether a side goes on along the same line or circle, the same way.
    fn continues_as(&self, domain: &Domain, l: &Leaving, tolerance: f64) -> bool {
        let s = &domain.sides[l.side];
        let near = 4.0 * tolerance;
        let way = if l.starts { 1.0 } else { -1.0 };
        match (self.circle, s.arc) {
            (None, None) => {
                let off = |v: u32| (domain.points[v as usize] - self.start).cross(self.direction);
                let along = domain.points[s.to as usize] - domain.points[s.from as usize];
                off(s.from).abs() <= near
                    && off(s.to).abs() <= near
                    && along.dot(self.direction) * way > 0.0
            }
            (Some((circle, sense)), Some(arc)) => {
                circle.centre.distance(arc.circle.centre) <= near
                    && (circle.radius - arc.circle.radius).abs() <= near
                    && arc.sweep.signum() * way == sense
            }
            _ => false,
        }
    }

    /// The point at `length` from its start, the very end if that is within the tolerance.
    #[must_use]
    pub fn at(&self, length: f64, tolerance: f64) -> Point {
        if (length - self.room).abs() <= tolerance {
            return self.end;
        }
        match self.circle {
            None => self.start + self.direction * length,
            Some((circle, sense)) => {
                let angle = (self.start - circle.centre).angle() + sense * length / circle.radius;
                circle.centre + Vector::at_angle(angle) * circle.radius
            }
        }
    }

    /// The side from `from`, at `begin`, to `to`, at `length` from its start.
    #[must_use]
    pub fn part(&self, from: Point, to: Point, length: f64) -> Side {
        Side {
            from,
            to,
            arc: self.circle.map(|(circle, sense)| Arc {
                circle,
                sweep: sense * (length - self.begin) / circle.radius,
            }),
            corner: 0,
        }
    }
}
