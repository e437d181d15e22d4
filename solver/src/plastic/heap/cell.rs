//! The volume of the heap over one triangle, from below and from above.
//!
//! The heap is the least of the distances from the sides, each over the height of its loop. Over a
//! triangle small enough each of them is a plane, a convex or a concave cone; a convex one lies above
//! its tangent planes and below the plane through its values at the corners, a concave one the other
//! way round. So the least of planes encloses the heap, and both volumes are integrated exactly. Where
//! one side is nearer than all others the volume is known in closed form.

use sectile_mesh::{Point, Vector};

use super::face::{Cone, Face, Form, Plane};
use super::height::Edge;
use super::integral::{Triangle, area, centroid, of_cone, of_least};

/// The volume over a triangle.
#[derive(Clone, Debug)]
pub struct Volume {
    /// Lower bound.
    pub low: f64,
    /// Upper bound.
    pub high: f64,
    /// The sides that may be nearest somewhere in the triangle.
    pub faces: Vec<u32>,
    /// The line by which the triangle should be divided: the end of a side's zone.
    pub split: Option<Plane>,
}

/// A function that the heap nowhere exceeds, or the least of which it is.
struct Candidate {
    /// Below it.
    lower: Plane,
    /// Below it too, and closest to it where it is least; tells better whether it matters.
    least: Plane,
    /// Above it; none where it is no bound from above.
    upper: Option<Plane>,
    /// Its integral and rounding, where it is known.
    integral: Option<(f64, f64)>,
    /// The end of a zone that crosses the triangle.
    split: Option<Plane>,
}

/// How a triangle lies to a side's zone.
enum Lie {
    Within,
    /// Beyond an end: the first, the second; either may be the nearer where `Beyond` both.
    Beyond([bool; 2]),
    Across(Plane),
}

/// Bounds on the volume over `t`; `faces` are the sides that may be nearest there. `hung`: sides whose
/// circle the triangle reaches into, as chords of holes do; there the distance goes on below zero.
/// `least`: a length that counts as none.
#[must_use]
pub fn volume(edge: &Edge, t: &Triangle, faces: &[u32], hung: &[u32], least: f64) -> Volume {
    let c = centroid(t);
    let reach = t.iter().map(|p| p.distance(c)).fold(0.0, f64::max);
    let kept = nearest(edge, c, reach, faces);
    let limit = kept.limit;

    let mut candidates: Vec<Candidate> = Vec::with_capacity(kept.faces.len());
    let mut forms: Vec<(Form, f64)> = Vec::new();
    let mut ends: Vec<(u32, Point, f64)> = Vec::new();
    for &j in &kept.faces {
        let face = &edge.faces[j as usize];
        let height = edge.height(face);
        let end = |k: usize| (face.ends[k], [face.side.from, face.side.to][k], height);
        // Behind a side other sides are nearer, see `height`.
        let before = face.form.on(c) >= 0.0 || hung.contains(&j);
        match lie(t, face, least) {
            Lie::Within if before => {
                forms.push((face.form, height));
                candidates.push(of_form(t, c, &face.form, height));
            }
            Lie::Within => {}
            Lie::Beyond(which) => ends.extend((0..2).filter(|&k| which[k]).map(end)),
            Lie::Across(split) => {
                if face.side.arc.is_none() {
                    candidates.push(Candidate {
                        split: Some(split),
                        ..of_straight(t, c, face, height)
                    });
                    continue;
                }
                // An arc is no nearer than its circle, seen from either hand, and no farther than its
                // ends.
                ends.extend([end(0), end(1)]);
                candidates.push(Candidate {
                    upper: None,
                    integral: None,
                    split: Some(split),
                    ..of_form(t, c, &face.form, height)
                });
            }
        }
    }
    ends.sort_by_key(|e| e.0);
    ends.dedup_by_key(|e| e.0);
    for (_, at, height) in ends {
        // No distance rises faster than that from a point.
        let hidden = forms
            .iter()
            .any(|(form, h)| h + form.on(at) <= height + least);
        if !hidden && height + at.distance(c) <= limit {
            let point = Form::Cone(Cone {
                centre: at,
                radius: 0.0,
                sense: 1.0,
                base: 0.0,
            });
            candidates.push(of_form(t, c, &point, height));
        }
    }
    drop_hidden(t, &mut candidates, least);

    let planes: Vec<Plane> = candidates.iter().map(|c| c.lower).collect();
    let mut low = of_least(t, &planes);
    let planes: Vec<Plane> = candidates.iter().filter_map(|c| c.upper).collect();
    let mut high = if planes.is_empty() {
        // Not met: some side or end bounds the heap everywhere. The triangle would be divided.
        area(t) * limit
    } else {
        of_least(t, &planes)
    };
    for candidate in &candidates {
        if let Some((integral, rounding)) = candidate.integral {
            high = high.min(integral + rounding);
            if candidates.len() == 1 {
                low = low.max(integral - rounding);
            }
        }
    }
    // In closed form they are equal but for rounding.
    Volume {
        low: low.min(high),
        high: high.max(low),
        faces: kept.faces,
        split: candidates.iter().find_map(|c| c.split),
    }
}

/// The sides that may be nearest within `reach` of a point.
pub struct Nearest {
    /// The sides.
    pub faces: Vec<u32>,
    /// No distance above this at the point is the least anywhere within reach.
    pub limit: f64,
}

/// Of `faces` those that may be nearest somewhere within `reach` of `c`: distances rise no faster than
/// the way.
#[must_use]
pub fn nearest(edge: &Edge, c: Point, reach: f64, faces: &[u32]) -> Nearest {
    let distance = |j: u32| {
        let face = &edge.faces[j as usize];
        edge.height(face) + face.distance(c)
    };
    let values: Vec<f64> = faces.iter().map(|&j| distance(j)).collect();
    let least = values.iter().copied().fold(f64::INFINITY, f64::min);
    let limit = least + 2.0 * reach * (1.0 + 1e-12);
    Nearest {
        faces: faces
            .iter()
            .zip(&values)
            .filter(|(_, v)| **v <= limit)
            .map(|(j, _)| *j)
            .collect(),
        limit,
    }
}

fn lie(t: &Triangle, face: &Face, least: f64) -> Lie {
    let values = face.zone.map(|zone| t.map(|p| zone.on(p)));
    let outside = values.map(|v| v.iter().all(|&v| v <= least));
    let crossed = [0, 1].map(|k| !outside[k] && values[k].iter().any(|&v| v < -least));
    match (outside, crossed) {
        ([false, false], [false, false]) => Lie::Within,
        ([false, false], [first, _]) => Lie::Across(face.zone[usize::from(!first)]),
        // Beyond one end of an arc and on both sides of the other's radius.
        ([true, false], [_, true]) | ([false, true], [true, _]) => Lie::Beyond([true, true]),
        (outside, _) => Lie::Beyond(outside),
    }
}

fn of_form(t: &Triangle, c: Point, form: &Form, height: f64) -> Candidate {
    match *form {
        Form::Plane(plane) => {
            let plane = Plane {
                value: plane.value + height,
                ..plane
            };
            Candidate {
                lower: plane,
                least: plane,
                upper: Some(plane),
                integral: None,
                split: None,
            }
        }
        Form::Cone(cone) => {
            let cone = Cone {
                base: cone.base + height,
                ..cone
            };
            let (touching, through) = (cone.tangent(c), through(t, |p| cone.on(p)));
            let (lower, upper, least) = if cone.sense > 0.0 {
                let mut nearest = t[0];
                for p in &t[1..] {
                    if p.distance(cone.centre) < nearest.distance(cone.centre) {
                        nearest = *p;
                    }
                }
                (touching, through, cone.tangent(nearest))
            } else {
                (through, touching, through)
            };
            Candidate {
                lower,
                least,
                upper: Some(upper),
                integral: Some(of_cone(t, &cone)),
                split: None,
            }
        }
    }
}

/// The distance from a straight side as a whole, which is convex.
fn of_straight(t: &Triangle, c: Point, face: &Face, height: f64) -> Candidate {
    let (a, b) = (face.side.from, face.side.to);
    let along = face.zone[0].slope;
    let foot = a + along * (c - a).dot(along).clamp(0.0, a.distance(b));
    let from = Cone {
        centre: foot,
        radius: 0.0,
        sense: 1.0,
        base: height,
    };
    let lower = from.tangent(c);
    Candidate {
        lower,
        least: lower,
        upper: Some(through(t, |p| height + face.distance(p))),
        integral: None,
        split: None,
    }
}

/// The plane through a function's values at the corners.
fn through(t: &Triangle, f: impl Fn(Point) -> f64) -> Plane {
    let [v0, v1, v2] = t.map(f);
    let (e1, e2) = (t[1] - t[0], t[2] - t[0]);
    let (d1, d2) = (v1 - v0, v2 - v0);
    let slope = Vector::new(d1 * e2.y - d2 * e1.y, d2 * e1.x - d1 * e2.x);
    Plane {
        at: t[0],
        value: v0,
        slope: slope * (1.0 / e1.cross(e2)),
    }
}

/// Leaves out what another is below of at every corner; of equals the first stays.
fn drop_hidden(t: &Triangle, candidates: &mut Vec<Candidate>, slack: f64) {
    let mut i = 0;
    while i < candidates.len() {
        let Some(upper) = candidates[i].upper else {
            i += 1;
            continue;
        };
        let hides = |lower: &Plane| t.iter().all(|&p| upper.on(p) <= lower.on(p) + slack);
        let count = candidates.len();
        let mut j = 0;
        candidates.retain(|other| {
            j += 1;
            j - 1 == i || !(hides(&other.lower) || hides(&other.least))
        });
        // Whatever stood before `i` and is gone has moved it: begin again.
        i = if candidates.len() == count { i + 1 } else { 0 };
    }
}
