//! Parts of arcs whose chords come too close to what they do not touch.

use crate::domain::Domain;
use crate::point::Point;
use crate::tree::{Extent, Tree};

/// An arc's part must stay this many times its own rise away from what it does not touch.
const CLEARANCE: f64 = 4.0;
/// An arc's part may be this many times as long as the wall beside it is thick. Triangles of 25° across
/// a wall are at most about twice as long as it is thick: refinement would come to that by halving part
/// after part, each time from the start.
const WALL: f64 = 2.5;

struct Part {
    side: usize,
    index: usize,
    a: Point,
    b: Point,
    /// Height of the arc over its chord.
    rise: f64,
    ends: [u32; 2],
    /// The pieces to its left and right.
    pieces: [Option<u32>; 2],
    /// Whether it lies in a sharp corner, whose sides are divided alike.
    cut_off: bool,
}

impl Part {
    /// How far away another part may be and still crowd this one.
    fn reach(&self) -> f64 {
        (CLEARANCE * self.rise).max(self.a.distance(self.b) / WALL)
    }

    /// Whether a point lies on a side of the chord where there is material.
    fn faces(&self, p: Point) -> bool {
        self.pieces[usize::from((self.b - self.a).cross(p - self.a) < 0.0)].is_some()
    }

    /// Whether some piece has both parts on its edge.
    fn has_piece_of(&self, other: &Part) -> bool {
        let mut pieces = self.pieces.iter().flatten();
        pieces.any(|&p| other.pieces.contains(&Some(p)))
    }
}

/// The parts `(side, part)` of arcs, sorted, that are to be halved: too close to parts that they do not
/// touch, or from end to end along another side's part. `parameters`: the divisions of each side;
/// `sharp_ends`: whether a sharp corner is cut off at its start and end.
#[must_use]
pub fn crowded_parts(
    domain: &Domain,
    parameters: &[Vec<f64>],
    sharp_ends: &[[Option<u32>; 2]],
) -> Vec<(usize, usize)> {
    if domain.sides.iter().all(|s| s.arc.is_none()) {
        return Vec::new();
    }
    let parts = parts(domain, parameters, sharp_ends);
    // Of two overlapping boxes, grown by their own reach, one holds all that crowds it.
    let boxes: Vec<Extent> = parts
        .iter()
        .map(|p| {
            let reach = if p.rise > 0.0 { p.reach() } else { 0.0 };
            [
                p.a.x.min(p.b.x) - reach,
                p.a.x.max(p.b.x) + reach,
                p.a.y.min(p.b.y) - reach,
                p.a.y.max(p.b.y) + reach,
            ]
        })
        .collect();
    let tree = Tree::new(&boxes);
    // Across a slit the hands lie on each other, and nothing comes of it.
    let slit = !domain.seams.is_empty();
    let mut crowded = Vec::new();
    for (i, p) in parts.iter().enumerate().filter(|(_, p)| p.rise > 0.0) {
        tree.overlapping(&boxes[i], &mut |j| {
            if i != j && (!slit || p.has_piece_of(&parts[j])) && crowds(p, &parts[j]) {
                crowded.push((p.side, p.index));
            }
        });
    }
    crowded.sort_unstable();
    crowded.dedup();
    crowded
}

/// Whether `p` is to be halved because of `q`.
fn crowds(p: &Part, q: &Part) -> bool {
    let shared = p.ends.iter().filter(|e| q.ends.contains(e)).count();
    match shared {
        0 => {
            let distance = segment_distance(p, q);
            let rise = p.rise.max(q.rise);
            // The flatter of the two is not what makes them crowd.
            (p.rise > 0.25 * rise && distance <= CLEARANCE * rise)
                || (!p.cut_off
                    && !q.cut_off
                    && p.a.distance(p.b) > WALL * distance
                    && p.faces(q.a.lerp(q.b, 0.5))
                    && q.faces(p.a.lerp(p.b, 0.5)))
        }
        1 => false,
        _ => true,
    }
}

fn parts(domain: &Domain, parameters: &[Vec<f64>], sharp_ends: &[[Option<u32>; 2]]) -> Vec<Part> {
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
                pieces: [side.left, side.right],
                cut_off: (index == 0 && sharp_ends[s][0].is_some())
                    || (t == 1.0 && sharp_ends[s][1].is_some()),
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
