//! The divisions of the domain's sides that all pieces share: arcs and interfaces.

use std::f64::consts::PI;

use crate::domain::{Domain, DomainSide};
use crate::point::{Point, Vector};

/// Most that one part of an arc may sweep.
const MOST_SWEEP: f64 = PI / 6.0;
/// An arc's part must stay this many times its own rise away from what it does not touch.
const CLEARANCE: f64 = 4.0;
/// Halvings of an arc for clearance.
const MOST_HALVINGS: usize = 20;

/// For each side of the domain the parameters (0 to 1) at which it is divided, with the points.
#[derive(Clone, Debug)]
pub struct Chains {
    /// Points inside sides; their vertex numbers follow those of the domain's points.
    pub points: Vec<Point>,
    /// By side: the divisions inside it as (parameter, index into `points`), rising.
    inside: Vec<Vec<(f64, u32)>>,
}

impl Chains {
    /// Arcs in equal parts of at most 30°, finer where a part's chord would come close to other sides.
    #[must_use]
    pub fn new(domain: &Domain) -> Self {
        let mut parameters: Vec<Vec<f64>> = domain
            .sides
            .iter()
            .map(|side| match side.arc {
                None => Vec::new(),
                Some(arc) => {
                    let n = (arc.sweep.abs() / MOST_SWEEP - 1e-9).ceil().max(1.0) as usize;
                    (1..n).map(|k| k as f64 / n as f64).collect()
                }
            })
            .collect();
        for _ in 0..MOST_HALVINGS {
            let crowded = crowded_parts(domain, &parameters);
            if crowded.is_empty() {
                break;
            }
            for &(s, k) in crowded.iter().rev() {
                let t = middle(&parameters[s], k);
                parameters[s].insert(k, t);
            }
        }
        let mut chains = Self {
            points: Vec::new(),
            inside: vec![Vec::new(); domain.sides.len()],
        };
        for (s, list) in parameters.into_iter().enumerate() {
            for t in list {
                let index = chains.points.len() as u32;
                chains.points.push(point_at(domain, &domain.sides[s], t));
                chains.inside[s].push((t, index));
            }
        }
        chains
    }

    /// The vertices along a side from `from` to `to`.
    #[must_use]
    pub fn vertices_of(&self, domain: &Domain, side: usize) -> Vec<u32> {
        let base = domain.points.len() as u32;
        let s = &domain.sides[side];
        let mut out = vec![s.from];
        out.extend(self.inside[side].iter().map(|&(_, i)| base + i));
        out.push(s.to);
        out
    }

    /// Halves the parts `(side, part)`, sorted; says which pieces are touched.
    #[must_use]
    pub fn split(&mut self, domain: &Domain, parts: &[(usize, usize)]) -> Vec<bool> {
        let mut touched = vec![false; domain.piece_names.len()];
        for &(s, k) in parts.iter().rev() {
            let parameters: Vec<f64> = self.inside[s].iter().map(|p| p.0).collect();
            let t = middle(&parameters, k);
            let index = self.points.len() as u32;
            self.points.push(point_at(domain, &domain.sides[s], t));
            self.inside[s].insert(k, (t, index));
            let side = &domain.sides[s];
            for piece in [side.left, side.right].into_iter().flatten() {
                touched[piece as usize] = true;
            }
        }
        touched
    }
}

/// The middle of part `k` of a side divided at `inside`.
fn middle(inside: &[f64], k: usize) -> f64 {
    let a = if k == 0 { 0.0 } else { inside[k - 1] };
    let b = inside.get(k).copied().unwrap_or(1.0);
    0.5 * (a + b)
}

/// The point at parameter `t` of a side, on its true curve.
fn point_at(domain: &Domain, side: &DomainSide, t: f64) -> Point {
    let (a, b) = (
        domain.points[side.from as usize],
        domain.points[side.to as usize],
    );
    match side.arc {
        None => a.lerp(b, t),
        Some(arc) => {
            let start = (a - arc.circle.centre).angle();
            arc.circle.centre + Vector::at_angle(start + t * arc.sweep) * arc.circle.radius
        }
    }
}

struct Part {
    side: usize,
    index: usize,
    a: Point,
    b: Point,
    /// Height of the arc over its chord.
    rise: f64,
    ends: [u32; 2],
}

/// The parts of arcs that are too close to parts that they do not touch.
fn crowded_parts(domain: &Domain, parameters: &[Vec<f64>]) -> Vec<(usize, usize)> {
    let mut parts: Vec<Part> = Vec::new();
    let mut name = domain.points.len() as u32;
    for (s, side) in domain.sides.iter().enumerate() {
        let mut last = (domain.points[side.from as usize], side.from, 0.0);
        let stops = parameters[s].iter().copied().chain([1.0]);
        for (index, t) in stops.enumerate() {
            let next = if t == 1.0 {
                (domain.points[side.to as usize], side.to, t)
            } else {
                name += 1;
                (point_at(domain, side, t), name, t)
            };
            let rise = side.arc.map_or(0.0, |arc| {
                arc.circle.radius * (1.0 - (0.5 * arc.sweep * (t - last.2)).cos())
            });
            parts.push(Part {
                side: s,
                index,
                a: last.0,
                b: next.0,
                rise,
                ends: [last.1, next.1],
            });
            last = next;
        }
    }
    // Sorted by their left end, so that only parts that overlap in x are compared.
    let left = |p: &Part| p.a.x.min(p.b.x) - p.rise;
    let right = |p: &Part| p.a.x.max(p.b.x) + p.rise;
    let reach = parts.iter().fold(0.0_f64, |m, p| m.max(p.rise)) * CLEARANCE;
    let mut order: Vec<usize> = (0..parts.len()).collect();
    order.sort_by(|&i, &j| left(&parts[i]).total_cmp(&left(&parts[j])));
    let mut crowded = Vec::new();
    for (k, &i) in order.iter().enumerate() {
        for &j in &order[k + 1..] {
            if left(&parts[j]) > right(&parts[i]) + reach {
                break;
            }
            let (p, q) = (&parts[i], &parts[j]);
            let rise = p.rise.max(q.rise);
            if rise == 0.0
                || p.ends.iter().any(|e| q.ends.contains(e))
                || segment_distance(p, q) > CLEARANCE * rise
            {
                continue;
            }
            for part in [p, q] {
                // The flatter of the two is not what makes them crowd.
                if part.rise > 0.25 * rise {
                    crowded.push((part.side, part.index));
                }
            }
        }
    }
    crowded.sort_unstable();
    crowded.dedup();
    crowded
}

fn segment_distance(p: &Part, q: &Part) -> f64 {
    let side = |a: Point, b: Point, c: Point| (b - a).cross(c - a);
    let crosses = side(p.a, p.b, q.a) * side(p.a, p.b, q.b) < 0.0
        && side(q.a, q.b, p.a) * side(q.a, q.b, p.b) < 0.0;
    if crosses {
        return 0.0;
    }
    let to = |a: Point, b: Point, c: Point| {
        let d = b - a;
        let t = ((c - a).dot(d) / d.dot(d)).clamp(0.0, 1.0);
        c.distance(a.lerp(b, t))
    };
    to(p.a, p.b, q.a)
        .min(to(p.a, p.b, q.b))
        .min(to(q.a, q.b, p.a))
        .min(to(q.a, q.b, p.b))
}
