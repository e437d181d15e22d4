//! Corners between pieces that a declared fit-up keeps apart.

use super::face::Face;
use super::inside_corner::{ANGLES, InsideCorner};
use crate::domain::Domain;
use crate::domain::contact::carriers_meet;
use crate::domain::edge::{distance, foot};
use crate::domain::fan::Leaving;
use crate::outline::side::Side;
use crate::point::{Point, Vector};

/// The corners that a piece's corner, no farther than `gap` off a side of the other piece, forms with
/// that side. Their faces are measured from where the line of the corner's side meets the other face.
#[must_use]
pub fn corners_apart(
    domain: &Domain,
    fans: &[Vec<Leaving>],
    pieces: [u32; 2],
    gap: f64,
    tolerance: f64,
) -> Vec<InsideCorner> {
    let mut corners: Vec<InsideCorner> = Vec::new();
    for (own, other) in [(pieces[0], pieces[1]), (pieces[1], pieces[0])] {
        for (v, fan) in fans.iter().enumerate() {
            for (k, a) in fan.iter().enumerate() {
                let b = &fan[(k + 1) % fan.len()];
                let side = &domain.sides[a.side];
                let right = if a.starts { side.right } else { side.left };
                if a.left.is_some() || right != Some(own) || b.left != Some(own) {
                    continue;
                }
                // Free space lies to the left of one side that leaves the corner, to the right of the next.
                for (leaving, anticlockwise) in [(a, true), (b, false)] {
                    for s in 0..domain.sides.len() {
                        let corner = Approach {
                            domain,
                            fans,
                            v,
                            leaving,
                            anticlockwise,
                            tolerance,
                        };
                        if let Some(found) = corner.to_side(s, other, gap)
                            && !corners.iter().any(|c| same(c, &found, tolerance))
                        {
                            corners.push(found);
                        }
                    }
                }
            }
        }
    }
    corners
}

fn same(a: &InsideCorner, b: &InsideCorner, tolerance: f64) -> bool {
    a.root == b.root
        && a.faces[0].start.distance(b.faces[0].start) <= 4.0 * tolerance
        && a.faces[0].piece == b.faces[0].piece
}

/// A side that leaves a corner near another piece.
struct Approach<'a> {
    domain: &'a Domain,
    fans: &'a [Vec<Leaving>],
    v: usize,
    leaving: &'a Leaving,
    /// Whether free space lies to its left.
    anticlockwise: bool,
    tolerance: f64,
}

impl Approach<'_> {
    /// The corner that it forms with domain side `s` of the piece `other`.
    fn to_side(&self, s: usize, other: u32, gap: f64) -> Option<InsideCorner> {
        let (domain, tolerance) = (self.domain, self.tolerance);
        let side = &domain.sides[s];
        let free = match (side.left, side.right) {
            (Some(p), None) if p == other => -1.0,
            (None, Some(p)) if p == other => 1.0,
            _ => return None,
        };
        let root = domain.points[self.v];
        let off = side.distance(&domain.points, root);
        if off <= tolerance || off > gap + tolerance {
            return None;
        }
        let face_side = side.side(&domain.points);
        let own_side = domain.sides[self.leaving.side].side(&domain.points);
        let meets = carriers_meet(&own_side, &face_side, tolerance);
        let start = meets
            .into_iter()
            .filter(|&p| distance(&face_side, p) <= tolerance)
            .min_by(|p, q| p.distance(root).total_cmp(&q.distance(root)))?;
        // Beyond this the sides meet at an angle too small for a fillet.
        if start.distance(root) > 2.5 * off {
            return None;
        }
        let mut own = Face::new(
            domain,
            self.fans,
            (self.leaving.side, self.leaving.starts),
            root,
            tolerance,
        );
        if (start - root).dot(own.direction) >= 0.0 {
            return None;
        }
        own.begin = match own.circle {
            None => start.distance(root),
            Some((circle, _)) => {
                2.0 * circle.radius * (0.5 * start.distance(root) / circle.radius).min(1.0).asin()
            }
        };
        own.room += own.begin;
        own.start = start;
        if let Some((circle, sense)) = own.circle {
            let d = (start - circle.centre).perpendicular() * sense;
            own.direction = d * (1.0 / d.length());
        }
        let along = tangent(&face_side, start);
        if own.direction.dot(along.perpendicular()) * free <= 0.0 {
            return None;
        }
        let forward = (own.direction.cross(along) > 0.0) == self.anticlockwise;
        let way = if forward { along } else { -along };
        let angle = own.direction.cross(way).abs().atan2(own.direction.dot(way));
        if !(ANGLES[0]..=ANGLES[1]).contains(&angle) {
            return None;
        }
        let to = if forward {
            face_side.to
        } else {
            face_side.from
        };
        // A face that ends here has no room at all.
        if start.distance(to) <= tolerance {
            return None;
        }
        let face = Face::new(domain, self.fans, (s, forward), start, tolerance);
        Some(InsideCorner {
            point: None,
            root,
            faces: if self.anticlockwise {
                [own, face]
            } else {
                [face, own]
            },
            angle,
            gap: off,
        })
    }
}

/// Unit vector along a side at a point of it.
fn tangent(side: &Side, at: Point) -> Vector {
    let d = match side.arc {
        None => side.to - side.from,
        Some(arc) => (at - arc.circle.centre).perpendicular() * arc.sweep.signum(),
    };
    d * (1.0 / d.length())
}

/// How far two pieces are apart, and a place between them.
#[must_use]
pub fn apart(domain: &Domain, pieces: [u32; 2]) -> (f64, Point) {
    let sides_of = |p: u32| {
        domain
            .sides
            .iter()
            .filter(move |s| s.left == Some(p) || s.right == Some(p))
            .map(|s| s.side(&domain.points))
    };
    let mut least = (f64::INFINITY, Point::default());
    for a in sides_of(pieces[0]) {
        for b in sides_of(pieces[1]) {
            for (from, to) in [(&a, &b), (&b, &a)] {
                for p in nearest_candidates(from, to) {
                    let q = foot(to, p);
                    if p.distance(q) < least.0 {
                        least = (p.distance(q), p.lerp(q, 0.5));
                    }
                }
            }
        }
    }
    least
}

/// Points of `from` one of which is nearest to `to`, if they do not cross and the point of `to` is no
/// end of it: its ends, and where it is an arc its point nearest to where `to` is nearest to its centre.
fn nearest_candidates(from: &Side, to: &Side) -> Vec<Point> {
    let mut list = vec![from.from, from.to];
    if let Some(arc) = from.arc {
        list.push(foot(from, foot(to, arc.circle.centre)));
    }
    list
}
