//! Faying lines: where two pieces lie against each other.

use std::collections::BTreeMap;

use crate::domain::edge::reversed;
use crate::domain::{Domain, DomainSide};
use crate::outline::side::Side;
use crate::point::Point;

/// Sides of a domain one after the other.
#[derive(Clone, Debug, PartialEq)]
pub struct Run {
    /// Index of each side and whether it runs from its first to its last point.
    pub sides: Vec<(usize, bool)>,
    /// Whether the last side ends where the first starts.
    pub closed: bool,
}

/// The faying lines of two pieces.
#[must_use]
pub fn faying_lines(domain: &Domain, between: [u32; 2]) -> Vec<Run> {
    let [a, b] = between.map(Some);
    runs(domain, |_, s| {
        (s.left, s.right) == (a, b) || (s.left, s.right) == (b, a)
    })
}

/// The chains of chosen sides: open ones in the order of the points that they start from, then closed
/// ones in the order of their first sides. No more than two chosen sides meet in a point.
#[must_use]
pub fn runs(domain: &Domain, chosen: impl Fn(usize, &DomainSide) -> bool) -> Vec<Run> {
    let mut at: BTreeMap<u32, Vec<usize>> = BTreeMap::new();
    for (s, side) in domain.sides.iter().enumerate() {
        if chosen(s, side) {
            at.entry(side.from).or_default().push(s);
            at.entry(side.to).or_default().push(s);
        }
    }
    let ends = at.iter().filter(|(_, sides)| sides.len() == 1);
    let starts: Vec<u32> = ends.map(|(v, _)| *v).chain(at.keys().copied()).collect();
    let mut used = vec![false; domain.sides.len()];
    let mut runs = Vec::new();
    for start in starts {
        let mut run = Run {
            sides: Vec::new(),
            closed: false,
        };
        let mut v = start;
        while let Some(&s) = at[&v].iter().find(|&&s| !used[s]) {
            used[s] = true;
            let forward = domain.sides[s].from == v;
            run.sides.push((s, forward));
            v = if forward {
                domain.sides[s].to
            } else {
                domain.sides[s].from
            };
        }
        if !run.sides.is_empty() {
            run.closed = v == start;
            runs.push(run);
        }
    }
    runs
}

impl Run {
    /// The points along it; of a closed one the last is the first.
    #[must_use]
    pub fn points(&self, domain: &Domain) -> Vec<u32> {
        let ends = |&(s, forward): &(usize, bool)| {
            let side = &domain.sides[s];
            if forward {
                [side.from, side.to]
            } else {
                [side.to, side.from]
            }
        };
        let first = self.sides.first().map(|s| ends(s)[0]);
        first
            .into_iter()
            .chain(self.sides.iter().map(|s| ends(s)[1]))
            .collect()
    }

    /// Its first and last point.
    #[must_use]
    pub fn ends(&self, domain: &Domain) -> [u32; 2] {
        let points = self.points(domain);
        [points[0], points[points.len() - 1]]
    }

    /// The same line from its other end.
    #[must_use]
    pub fn turned(&self) -> Self {
        Self {
            sides: self.sides.iter().rev().map(|&(s, f)| (s, !f)).collect(),
            closed: self.closed,
        }
    }

    /// Length along it.
    #[must_use]
    pub fn length(&self, domain: &Domain) -> f64 {
        self.sides
            .iter()
            .map(|&(s, _)| domain.sides[s].length(&domain.points))
            .sum()
    }

    /// Distance from `p` to it.
    #[must_use]
    pub fn distance(&self, domain: &Domain, p: Point) -> f64 {
        self.sides
            .iter()
            .map(|&(s, _)| domain.sides[s].distance(&domain.points, p))
            .fold(f64::INFINITY, f64::min)
    }

    /// What lies within `length` from its start, and where that ends.
    #[must_use]
    pub fn first(&self, domain: &Domain, length: f64) -> (Vec<Side>, Point) {
        let mut left = length;
        let mut stretch: Vec<Side> = Vec::new();
        for &(s, forward) in &self.sides {
            let whole = domain.sides[s].length(&domain.points);
            let mut side = domain.sides[s].side(&domain.points);
            if !forward {
                side = reversed(&side);
            }
            if left < whole {
                let t = left / whole;
                let at = if forward { t } else { 1.0 - t };
                side.to = domain.sides[s].at(&domain.points, at);
                if let Some(arc) = &mut side.arc {
                    arc.sweep *= t;
                }
            }
            left -= whole;
            stretch.push(side);
            if left <= 0.0 {
                break;
            }
        }
        let end = stretch.last().map_or(Point::default(), |s| s.to);
        (stretch, end)
    }

    /// The point halfway along it.
    #[must_use]
    pub fn middle(&self, domain: &Domain) -> Point {
        self.first(domain, 0.5 * self.length(domain)).1
    }
}
