//! Parts of arcs whose chords come too close to what they do not touch.

use crate::domain::Domain;
use crate::point::Point;
use crate::tree::{Extent, Tree};

/// An arc's part must stay this many times its own rise away from what it does not touch.
const CLEARANCE: f64 = 4.0;

struct Part {
    side: usize,
    index: usize,
    a: Point,
    b: Point,
    /// Height of the arc over its chord.
    rise: f64,
    ends: [u32; 2],
}

/// The parts `(side, part)` of arcs, sorted, that are to be halved: too close to parts that they do not
/// touch, or from end to end along another side's part. `parameters`: the divisions of each side.
#[must_use]
pub fn crowded_parts(domain: &Domain, parameters: &[Vec<f64>]) -> Vec<(usize, usize)> {
    if domain.sides.iter().all(|s| s.arc.is_none()) {
        return Vec::new();
    }
    let parts = parts(domain, parameters);
    // Of two overlapping boxes, grown by their own reach, one holds all that crowds it.
    let boxes: Vec<Extent> = parts
        .iter()
        .map(|p| {
            let reach = CLEARANCE * p.rise;
            [
                p.a.x.min(p.b.x) - reach,
                p.a.x.max(p.b.x) + reach,
                p.a.y.min(p.b.y) - reach,
                p.a.y.max(p.b.y) + reach,
            ]
        })
        .collect();
    let tree = Tree::new(&boxes);
    let mut crowded = Vec::new();
    for (i, p) in parts.iter().enumerate().filter(|(_, p)| p.rise > 0.0) {
        tree.overlapping(&boxes[i], &mut |j| {
            let q = &parts[j];
            if i == j || !crowds(p, q) {
                return;
            }
            // The flatter of the two is not what makes them crowd.
            if p.rise > 0.25 * p.rise.max(q.rise) {
                crowded.push((p.side, p.index));
            }
        });
    }
    crowded.sort_unstable();
    crowded.dedup();
    crowded
}

fn crowds(p: &Part, q: &Part) -> bool {
    let shared = p.ends.iter().filter(|e| q.ends.contains(e)).count();
    match shared {
        0 => segment_distance(p, q) <= CLEARANCE * p.rise.max(q.rise),
        1 => false,
        _ => true,
    }
}

fn parts(domain: &Domain, parameters: &[Vec<f64>]) -> Vec<Part> {
    let mut parts: Vec<Part> = Vec::new();
    let mut name = domain.points.len() as u32;
    for (s, side) in domain.sides.iter().enumerate() {
        let mut last = (domain.points[side.from as usize], side.from, 0.0);
        let stops = parameters[s].iter().copied().chain([1.0]);
        for (index, t) in stops.enumerate() {
            let next = if t == 1.0 {
                (domain.points[side.to as usize], side.to, t)
            } else {
                let this = name;
                name += 1;
                (side.at(&domain.points, t), this, t)
            };
            let rise = side.arc.map_or(0.0, |arc| {
                // 1 − cos without cancellation.
                let quarter = 0.25 * arc.sweep * (t - last.2);
                2.0 * arc.circle.radius * quarter.sin().powi(2)
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
    parts
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
