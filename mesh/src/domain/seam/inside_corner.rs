//! Inside corners between two pieces: where a fillet may lie, and which one is meant.

use super::face::Face;
use super::faying::{Run, faying_lines};
use super::fit_up::{apart, corners_apart};
use super::request::SeamRequest;
use crate::domain::Domain;
use crate::domain::fan::{Leaving, between};
use crate::domain::fault::SeamFault;
use crate::point::Point;

/// Free angles between two faces that a fillet is laid in, radians. Common practice speaks of 60° to
/// 120°; what is beyond these limits is a groove or no joint at all.
pub const ANGLES: [f64; 2] = [
    29.999 / 180.0 * std::f64::consts::PI,
    150.001 / 180.0 * std::f64::consts::PI,
];

/// A corner of free space between two pieces.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InsideCorner {
    /// The domain's point at its root; `None` where the pieces are apart.
    pub point: Option<u32>,
    /// The root: where the pieces meet, or the corner of the one that is off the other.
    pub root: Point,
    /// The two faces; the free space is passed anticlockwise from the first to the second.
    pub faces: [Face; 2],
    /// The free angle between the faces, radians.
    pub angle: f64,
    /// How far the pieces are apart.
    pub gap: f64,
}

impl InsideCorner {
    /// Cosine of the angle at the root between the middle of the free space and `p`; 0 where neither is
    /// to be told.
    fn faces(&self, p: Point) -> f64 {
        let middle = self.faces[0].direction + self.faces[1].direction;
        let towards = p - self.root;
        let size = middle.length() * towards.length();
        if size > 0.0 {
            middle.dot(towards) / size
        } else {
            0.0
        }
    }

    fn takes_a_fillet(&self) -> bool {
        ANGLES[0] <= self.angle && self.angle <= ANGLES[1]
    }
}

/// The corners in which two pieces touch, in the order of the domain's points.
fn corners_in_touch(
    domain: &Domain,
    fans: &[Vec<Leaving>],
    pieces: [u32; 2],
    tolerance: f64,
) -> Vec<InsideCorner> {
    let mut corners = Vec::new();
    for (v, fan) in fans.iter().enumerate() {
        for (k, a) in fan.iter().enumerate() {
            let b = &fan[(k + 1) % fan.len()];
            let side = &domain.sides[a.side];
            let first = if a.starts { side.right } else { side.left };
            let (None, Some(first), Some(second)) = (a.left, first, b.left) else {
                continue;
            };
            if [first, second] != pieces && [second, first] != pieces {
                continue;
            }
            let root = domain.points[v];
            let face = |l: &Leaving| Face::new(domain, fans, (l.side, l.starts), root, tolerance);
            corners.push(InsideCorner {
                point: Some(v as u32),
                root,
                faces: [face(a), face(b)],
                angle: between(a, b),
                gap: 0.0,
            });
        }
    }
    corners
}

/// The corners that a request for a fillet means: one, or two for both ends.
///
/// # Errors
/// The fault that says why there is none or which is to be chosen.
pub fn corners_meant(
    domain: &Domain,
    fans: &[Vec<Leaving>],
    request: &SeamRequest,
    tolerance: f64,
) -> Result<Vec<InsideCorner>, SeamFault> {
    let pieces = request.between.map(|p| p as u32);
    let touching = corners_in_touch(domain, fans, pieces, tolerance);
    let mut corners = touching.clone();
    if request.gap > tolerance {
        corners.extend(corners_apart(domain, fans, pieces, request.gap, tolerance));
    }
    if corners.is_empty() {
        let (distance, at) = apart(domain, pieces);
        return Err(if distance > tolerance {
            SeamFault::Apart { distance, at }
        } else {
            SeamFault::NoCorner { at: None }
        });
    }
    let meant = if request.both {
        both_ends(domain, request, pieces, &corners)?
    } else {
        vec![one(request, &corners, tolerance)?]
    };
    match meant.iter().find(|c| !c.takes_a_fillet()) {
        None => Ok(meant),
        Some(c) => Err(SeamFault::Angle {
            at: c.root,
            angle: c.angle,
        }),
    }
}

/// The corner nearest to what is pointed at, or the only one that takes a fillet.
fn one(
    request: &SeamRequest,
    corners: &[InsideCorner],
    tolerance: f64,
) -> Result<InsideCorner, SeamFault> {
    let choice = |list: &[InsideCorner]| SeamFault::Choice {
        places: list.iter().map(|c| c.root).collect(),
    };
    let Some(near) = request.near else {
        let fit: Vec<InsideCorner> = corners
            .iter()
            .filter(|c| c.takes_a_fillet())
            .copied()
            .collect();
        return match fit[..] {
            [] => Ok(corners[0]),
            [corner] => Ok(corner),
            _ => Err(choice(&fit)),
        };
    };
    let corners = by_distance(corners, near);
    match corners[..] {
        [a, b, ..] if b.root.distance(near) - a.root.distance(near) <= tolerance => {
            // Of two corners around one point the one that faces what is pointed at, or takes a fillet.
            let told = a.root == b.root && (a.faces(near) - b.faces(near)).abs() > 1e-6;
            match (a.takes_a_fillet(), b.takes_a_fillet()) {
                _ if told => Ok(a),
                (true, false) => Ok(a),
                (false, true) => Ok(b),
                _ => Err(choice(&[a, b])),
            }
        }
        _ => Ok(corners[0]),
    }
}

/// The corners at both ends of the faying line; of pieces that are apart, the two corners that there
/// are, or the two nearest to what is pointed at.
fn both_ends(
    domain: &Domain,
    request: &SeamRequest,
    pieces: [u32; 2],
    corners: &[InsideCorner],
) -> Result<Vec<InsideCorner>, SeamFault> {
    let lines = faying_lines(domain, pieces);
    if lines.is_empty() {
        return match (request.near, corners.len()) {
            (_, 0 | 1) => Err(SeamFault::NoCorner {
                at: corners.first().map(|c| c.root),
            }),
            (_, 2) => Ok(corners.to_vec()),
            (Some(near), _) => Ok(by_distance(corners, near)[..2].to_vec()),
            (None, _) => Err(SeamFault::Choice {
                places: corners.iter().map(|c| c.root).collect(),
            }),
        };
    }
    let line = line_meant(domain, request.near, &lines)?;
    if line.closed {
        return Err(SeamFault::NoCorner { at: None });
    }
    line.ends(domain)
        .iter()
        .map(|&v| {
            let corner = corners.iter().find(|c| c.point == Some(v));
            corner.copied().ok_or(SeamFault::NoCorner {
                at: Some(domain.points[v as usize]),
            })
        })
        .collect()
}

/// The faying line nearest to `near`, or the only one.
///
/// # Errors
/// [`SeamFault::Choice`].
pub fn line_meant<'a>(
    domain: &Domain,
    near: Option<Point>,
    lines: &'a [Run],
) -> Result<&'a Run, SeamFault> {
    match (near, lines) {
        (_, [line]) => Ok(line),
        (Some(near), [first, ..]) => Ok(lines.iter().skip(1).fold(first, |best, line| {
            if line.distance(domain, near) < best.distance(domain, near) {
                line
            } else {
                best
            }
        })),
        _ => Err(SeamFault::Choice {
            places: lines.iter().map(|line| line.middle(domain)).collect(),
        }),
    }
}

fn by_distance(corners: &[InsideCorner], near: Point) -> Vec<InsideCorner> {
    let mut corners = corners.to_vec();
    corners.sort_by(|a, b| {
        let nearer = a.root.distance(near).total_cmp(&b.root.distance(near));
        nearer.then(b.faces(near).total_cmp(&a.faces(near)))
    });
    corners
}
