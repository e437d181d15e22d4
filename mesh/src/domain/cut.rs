//! Edges cut where others meet them, and joined where they run along each other.

use std::collections::BTreeMap;

use super::DomainSide;
use super::edge::{Edge, middle, parameter};
use crate::outline::side::{Arc, Circle, Side};
use crate::point::Point;

/// A part of an edge between two points of the arrangement.
#[derive(Clone, Copy)]
pub struct Part {
    /// Index of its first point.
    pub from: u32,
    /// Index of its last point.
    pub to: u32,
    /// The arc that it follows.
    pub arc: Option<Arc>,
    /// The piece to its left.
    pub piece: u32,
    /// The ring of that piece.
    pub ring: usize,
    /// The middle, on the true curve.
    pub middle: Point,
}

/// Points within twice the tolerance of each other are one: the first that was seen.
struct Points {
    list: Vec<Point>,
    /// By grid cell of four times the tolerance.
    cells: BTreeMap<(i64, i64), Vec<u32>>,
    tolerance: f64,
}

impl Points {
    fn index(&mut self, p: Point) -> u32 {
        let cell = 4.0 * self.tolerance;
        let (i, j) = ((p.x / cell).floor() as i64, (p.y / cell).floor() as i64);
        let mut nearest: Option<(f64, u32)> = None;
        for di in -1..=1 {
            for dj in -1..=1 {
                let key = (i.saturating_add(di), j.saturating_add(dj));
                for &k in self.cells.get(&key).into_iter().flatten() {
                    let d = self.list[k as usize].distance(p);
                    if d <= 2.0 * self.tolerance && nearest.is_none_or(|n| (d, k) < n) {
                        nearest = Some((d, k));
                    }
                }
            }
        }
        if let Some((_, k)) = nearest {
            return k;
        }
        let k = self.list.len() as u32;
        self.list.push(p);
        self.cells.entry((i, j)).or_default().push(k);
        k
    }
}

/// Cuts each edge at `cuts`; the points, corners first with the coordinates that they were given, and
/// the parts in the order of edges.
#[must_use]
pub fn cut(edges: &[Edge], cuts: &[Vec<Point>], tolerance: f64) -> (Vec<Point>, Vec<Part>) {
    let mut points = Points {
        list: Vec::new(),
        cells: BTreeMap::new(),
        tolerance,
    };
    for edge in edges {
        points.index(edge.side.from);
    }
    let mut parts = Vec::new();
    for (edge, cuts) in edges.iter().zip(cuts) {
        let side = &edge.side;
        // A contact beyond an end lies within the tolerance of it, and is that end.
        let mut stops: Vec<(f64, u32)> = cuts
            .iter()
            .filter_map(|&p| Some((parameter(side, p)?, points.index(p))))
            .collect();
        stops.push((0.0, points.index(side.from)));
        stops.push((1.0, points.index(side.to)));
        stops.sort_by(|a, b| a.0.total_cmp(&b.0));
        stops.dedup_by_key(|s| s.1);
        for w in stops.windows(2) {
            let (from, to) = (w[0].1, w[1].1);
            let (a, b) = (points.list[from as usize], points.list[to as usize]);
            let arc = side.arc.map(|arc| Arc {
                circle: arc.circle,
                sweep: sweep_between(&arc.circle, a, b, arc.sweep.signum()),
            });
            let part = Side {
                from: a,
                to: b,
                arc,
                corner: side.corner,
            };
            parts.push(Part {
                from,
                to,
                arc,
                piece: edge.place.piece as u32,
                ring: edge.place.ring,
                middle: middle(&part),
            });
        }
    }
    (points.list, parts)
}

fn sweep_between(circle: &Circle, a: Point, b: Point, sense: f64) -> f64 {
    let (u, v) = (a - circle.centre, b - circle.centre);
    let angle = u.cross(v).atan2(u.dot(v));
    if angle * sense > 0.0 {
        angle
    } else {
        angle + std::f64::consts::TAU * sense
    }
}

/// Sides of which two parts lie on one and the same hand: two pieces, and a place.
pub type Stacked = (u32, u32, Point);

/// Joins parts that run along each other, their middles within four tolerances. Parts that lie on the
/// same hand of a side are stacked: their pieces overlap.
#[must_use]
pub fn join(parts: &[Part], tolerance: f64) -> (Vec<DomainSide>, Vec<Stacked>) {
    let mut sides: Vec<DomainSide> = Vec::new();
    let mut known: BTreeMap<(u32, u32), Vec<(usize, Point)>> = BTreeMap::new();
    let mut stacked = Vec::new();
    for part in parts {
        let key = (part.from.min(part.to), part.from.max(part.to));
        let twins = known.entry(key).or_default();
        let twin = twins
            .iter()
            .find(|(_, middle)| middle.distance(part.middle) <= 4.0 * tolerance);
        let Some(&(s, _)) = twin else {
            twins.push((sides.len(), part.middle));
            sides.push(DomainSide {
                from: part.from,
                to: part.to,
                arc: part.arc,
                left: Some(part.piece),
                right: None,
                faying: false,
            });
            continue;
        };
        let side = &mut sides[s];
        let hand = if side.from == part.from {
            &mut side.left
        } else {
            &mut side.right
        };
        match *hand {
            None => *hand = Some(part.piece),
            Some(other) => {
                stacked.push((other.min(part.piece), other.max(part.piece), part.middle));
            }
        }
    }
    (sides, stacked)
}
