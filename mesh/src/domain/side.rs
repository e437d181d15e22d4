//! Measures of a domain's sides; `points` are the domain's.

use super::DomainSide;
use super::edge::{distance, extent};
use crate::outline::side::Side;
use crate::point::{Point, Vector};
use crate::tree::Extent;

impl DomainSide {
    /// Its geometry.
    pub(crate) fn side(&self, points: &[Point]) -> Side {
        Side {
            from: points[self.from as usize],
            to: points[self.to as usize],
            arc: self.arc,
            corner: 0,
        }
    }

    /// Length along the side.
    pub(crate) fn length(&self, points: &[Point]) -> f64 {
        match self.arc {
            None => points[self.from as usize].distance(points[self.to as usize]),
            Some(arc) => arc.circle.radius * arc.sweep.abs(),
        }
    }

    /// Direction of travel at the first or last point, of no particular length.
    pub(crate) fn travel(&self, points: &[Point], at_start: bool) -> Vector {
        let (a, b) = (points[self.from as usize], points[self.to as usize]);
        match self.arc {
            None => b - a,
            Some(arc) => {
                let p = if at_start { a } else { b };
                (p - arc.circle.centre).perpendicular() * arc.sweep.signum()
            }
        }
    }

    /// The point at parameter `t` from 0 to 1, on the true curve.
    pub(crate) fn at(&self, points: &[Point], t: f64) -> Point {
        let (a, b) = (points[self.from as usize], points[self.to as usize]);
        match self.arc {
            None => a.lerp(b, t),
            Some(arc) => {
                let start = (a - arc.circle.centre).angle();
                arc.circle.centre + Vector::at_angle(start + t * arc.sweep) * arc.circle.radius
            }
        }
    }

    /// The box about the side.
    pub(crate) fn extent(&self, points: &[Point]) -> Extent {
        extent(&self.side(points), 0.0)
    }

    /// Distance from `p` to the side.
    pub(crate) fn distance(&self, points: &[Point], p: Point) -> f64 {
        distance(&self.side(points), p)
    }
}
