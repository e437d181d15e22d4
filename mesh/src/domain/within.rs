//! Where the material is: whether a point lies in it, how far its edge is, whether a line crosses it.

use super::contact::contacts;
use super::edge::{Edge, distance, foot, winding};
use super::fault::Place;
use super::{Domain, DomainSide, TOLERANCE};
use crate::outline::side::Side;
use crate::point::Point;

impl Domain {
    /// Whether `p` lies in the material or no farther than `tolerance` (a length) from it.
    #[must_use]
    pub fn contains(&self, p: Point, tolerance: f64) -> bool {
        self.sides()
            .any(|side| distance(&side, p) <= tolerance.max(0.0))
            || winding(self.boundary().iter(), p) != 0
    }

    /// The point of the boundary that is nearest to `p`; `None` without any side.
    #[must_use]
    pub fn nearest_on_boundary(&self, p: Point) -> Option<Point> {
        self.boundary()
            .iter()
            .map(|edge| foot(&edge.side, p))
            .min_by(|a, b| a.distance(p).total_cmp(&b.distance(p)))
    }

    /// Whether the line from `from` to `to` runs through the material over some length; along its
    /// boundary it does not.
    #[must_use]
    pub fn is_crossed(&self, from: Point, to: Point) -> bool {
        let tolerance = TOLERANCE * self.size();
        let length = from.distance(to);
        if length <= tolerance {
            return false;
        }
        let line = Side {
            from,
            to,
            arc: None,
            corner: 0,
        };
        let along = (to - from) * (1.0 / length);
        let boundary = self.boundary();
        let mut stops: Vec<f64> = boundary
            .iter()
            .flat_map(|edge| contacts(&line, &edge.side, tolerance))
            .map(|p| (p - from).dot(along).clamp(0.0, length))
            .chain([0.0, length])
            .collect();
        stops.sort_by(f64::total_cmp);
        stops.windows(2).any(|ends| {
            let middle = from + along * (0.5 * (ends[0] + ends[1]));
            ends[1] - ends[0] > 4.0 * tolerance
                && boundary
                    .iter()
                    .all(|edge| distance(&edge.side, middle) > tolerance)
                && winding(boundary.iter(), middle) != 0
        })
    }

    /// The larger side of the box about the points.
    #[must_use]
    pub fn size(&self) -> f64 {
        let range = |of: fn(&Point) -> f64| {
            let (low, high) = self
                .points
                .iter()
                .map(of)
                .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), x| {
                    (low.min(x), high.max(x))
                });
            (high - low).max(0.0)
        };
        range(|p| p.x).max(range(|p| p.y))
    }

    fn sides(&self) -> impl Iterator<Item = Side> {
        self.sides.iter().map(|side| self.geometry(side))
    }

    fn geometry(&self, side: &DomainSide) -> Side {
        Side {
            from: self.points[side.from as usize],
            to: self.points[side.to as usize],
            arc: side.arc,
            corner: 0,
        }
    }

    /// The sides with material on one hand only, that hand being the left.
    fn boundary(&self) -> Vec<Edge> {
        self.sides
            .iter()
            .filter(|side| side.left.is_some() != side.right.is_some())
            .map(|side| {
                let mut geometry = self.geometry(side);
                if side.left.is_none() {
                    std::mem::swap(&mut geometry.from, &mut geometry.to);
                    if let Some(arc) = &mut geometry.arc {
                        arc.sweep = -arc.sweep;
                    }
                }
                Edge {
                    place: Place {
                        piece: 0,
                        ring: 0,
                        side: 0,
                    },
                    side: geometry,
                }
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;
    use crate::domain::build;
    use crate::outline::piece::Piece;
    use crate::outline::shape::{bar, tube};

    fn p(x: f64, y: f64) -> Point {
        Point::new(x, y)
    }

    /// A tube of diameter 100 and wall 10 about the origin, and a bar fused from two beside it.
    fn tube_and_bars() -> Domain {
        let piece = |name: &str, outline| Piece {
            name: name.into(),
            outline,
            material: 0,
        };
        build(&[
            piece("tube", tube(p(0.0, 0.0), 100.0, 10.0)),
            piece("left", bar(p(90.0, 0.0), 20.0, 40.0)),
            piece("right", bar(p(110.0, 0.0), 20.0, 60.0)),
        ])
        .unwrap()
    }

    #[test]
    fn points_lie_in_the_wall_but_not_in_the_bore() {
        let domain = tube_and_bars();
        for (at, inside) in [
            (p(0.0, 0.0), false),
            (p(39.9, 0.0), false),
            (p(45.0, 0.0), true),
            (p(0.0, -45.0), true),
            (p(-49.99, 0.0), true),
            (p(-50.01, 0.0), false),
            (p(36.0, 36.0), false),
            (p(32.0, 32.0), true),
            (p(100.0, 0.0), true),
            (p(100.0, 25.0), true),
            (p(90.0, 25.0), false),
            (p(119.0, 29.0), true),
            (p(121.0, 0.0), false),
        ] {
            assert_eq!(domain.contains(at, 0.0), inside, "{at:?}");
        }
        assert!(domain.contains(p(-50.01, 0.0), 0.02));
        assert!(domain.contains(p(39.9, 0.0), 0.11));
    }

    #[test]
    fn the_nearest_point_of_the_boundary() {
        let domain = tube_and_bars();
        let near = |at| domain.nearest_on_boundary(at).unwrap();
        assert!(near(p(30.3, 40.4)).distance(p(30.0, 40.0)) < 1e-12);
        assert!(near(p(-24.0, 18.0)).distance(p(-32.0, 24.0)) < 1e-12);
        assert!(near(p(110.0, 33.0)).distance(p(110.0, 30.0)) < 1e-12);
        assert!(near(p(130.0, 40.0)).distance(p(120.0, 30.0)) < 1e-12);
        // The interface of the bars is no boundary.
        assert!(near(p(100.0, 0.0)).distance(p(100.0, 0.0)) > 15.0);
    }

    #[test]
    fn lines_cross_the_material_over_some_length() {
        let domain = tube_and_bars();
        for (from, to, crossed) in [
            (p(-60.0, 0.0), p(60.0, 0.0), true),
            // Within the bore, within the wall, between tube and bar.
            (p(-39.0, 0.0), p(39.0, 0.0), false),
            (p(41.0, 0.0), p(49.0, 0.0), true),
            (p(55.0, -80.0), p(55.0, 80.0), false),
            // A tangent, and one a little farther in.
            (p(-50.0, -60.0), p(-50.0, 60.0), false),
            (p(-49.99, -60.0), p(-49.99, 60.0), true),
            // Along the outer edge of a bar, along the interface, through a corner.
            (p(120.0, -20.0), p(120.0, 20.0), false),
            (p(100.0, -10.0), p(100.0, 10.0), true),
            (p(110.0, 40.0), p(130.0, 20.0), false),
            (p(109.0, 40.0), p(129.0, 20.0), true),
            (p(45.0, 0.0), p(45.0, 0.0), false),
        ] {
            assert_eq!(domain.is_crossed(from, to), crossed, "{from:?} {to:?}");
            assert_eq!(domain.is_crossed(to, from), crossed, "{to:?} {from:?}");
        }
    }
}
