//! Loops become pieces: outlines and the holes in them.

use std::collections::BTreeSet;
use std::f64::consts::{FRAC_PI_2, PI};

use sectile_mesh::outline::side::Side;
use sectile_mesh::tree::Tree;
use sectile_mesh::{Point, Vector};

use super::drawing::side_extent;
use super::loops::{Loop, along};

/// One outline with its holes, and its name.
#[derive(Clone, Debug, PartialEq)]
pub struct Piece {
    /// The layer's name, numbered from the second piece on; `body` where only one layer is used.
    pub name: String,
    /// The outer edge.
    pub outline: Loop,
    /// The holes.
    pub holes: Vec<Loop>,
}

/// The pieces that the loops of each layer make: a loop inside an even number of others is an outline,
/// inside an odd number a hole of the smallest one around it.
#[must_use]
pub fn pieces(names: &[String], layers: Vec<(usize, Vec<Loop>)>, size: f64) -> Vec<Piece> {
    let single = layers.len() == 1;
    let mut taken: BTreeSet<String> = BTreeSet::new();
    let mut out = Vec::new();
    for (layer, loops) in layers {
        let plain = if single {
            "body".to_owned()
        } else {
            printable(&names[layer])
        };
        let mut number = 1;
        for (outline, holes) in nested(loops, size) {
            let name = loop {
                let name = if number == 1 {
                    plain.clone()
                } else {
                    format!("{plain} {number}")
                };
                number += 1;
                if taken.insert(name.clone()) {
                    break name;
                }
            };
            out.push(Piece {
                name,
                outline,
                holes,
            });
        }
    }
    out
}

fn printable(name: &str) -> String {
    let shown: String = name
        .chars()
        .map(|c| {
            if crate::read::excerpt::hidden(c) {
                '·'
            } else {
                c
            }
        })
        .collect();
    if shown.trim().is_empty() {
        "unnamed".to_owned()
    } else {
        shown
    }
}

/// Outlines with their holes, in the order of the outlines.
fn nested(loops: Vec<Loop>, size: f64) -> Vec<(Loop, Vec<Loop>)> {
    let areas: Vec<f64> = loops.iter().map(signed_area).collect();
    let sides: Vec<(usize, &Side)> = loops
        .iter()
        .enumerate()
        .flat_map(|(i, ring)| ring.sides.iter().map(move |side| (i, side)))
        .collect();
    let boxes: Vec<_> = sides.iter().map(|(_, side)| side_extent(side)).collect();
    let tree = Tree::new(&boxes);
    let parents: Vec<Option<usize>> = (0..loops.len())
        .map(|i| {
            let p = just_inside(&loops[i], areas[i], size);
            let mut crossed: Vec<usize> = Vec::new();
            let ray = [p.x, f64::INFINITY, p.y, p.y];
            tree.overlapping(&ray, &mut |k| {
                let (owner, side) = sides[k];
                let larger = (areas[owner].abs(), i) > (areas[i].abs(), owner);
                if owner != i && larger && crossings(side, p) % 2 == 1 {
                    crossed.push(owner);
                }
            });
            crossed.sort_unstable();
            let around: Vec<usize> = crossed
                .chunk_by(|a, b| a == b)
                .filter(|run| run.len() % 2 == 1)
                .map(|run| run[0])
                .collect();
            if around.len().is_multiple_of(2) {
                return None;
            }
            around
                .into_iter()
                .min_by(|&a, &b| areas[a].abs().total_cmp(&areas[b].abs()))
        })
        .collect();
    let mut place = vec![usize::MAX; loops.len()];
    let mut out: Vec<(Loop, Vec<Loop>)> = Vec::new();
    let mut holes = Vec::new();
    for (i, ring) in loops.into_iter().enumerate() {
        if let Some(parent) = parents[i] {
            holes.push((parent, ring));
        } else {
            place[i] = out.len();
            out.push((ring, Vec::new()));
        }
    }
    for (parent, ring) in holes {
        // A parent of odd depth cannot be: it is the smallest loop around one of odd depth.
        if let Some((_, holes)) = out.get_mut(place[parent]) {
            holes.push(ring);
        } else {
            out.push((ring, Vec::new()));
        }
    }
    out
}

/// Area, positive where the loop runs anticlockwise: the polygon of its ends and the segments of its arcs.
fn signed_area(ring: &Loop) -> f64 {
    let Some(origin) = ring.sides.first().map(|side| side.from) else {
        return 0.0;
    };
    ring.sides
        .iter()
        .map(|side| {
            let chord = 0.5 * (side.from - origin).cross(side.to - origin);
            let segment = side.arc.map_or(0.0, |arc| {
                0.5 * arc.circle.radius.powi(2) * (arc.sweep - arc.sweep.sin())
            });
            chord + segment
        })
        .sum()
}

/// A point just inside of the loop, beside its longest side, so that loops that touch it do not matter.
fn just_inside(ring: &Loop, area: f64, size: f64) -> Point {
    let length = |side: &Side| {
        side.arc.map_or_else(
            || side.from.distance(side.to),
            |arc| arc.circle.radius * arc.sweep.abs(),
        )
    };
    let longest = ring
        .sides
        .iter()
        .max_by(|a, b| length(a).total_cmp(&length(b)));
    let Some(side) = longest else {
        return Point::new(0.0, 0.0);
    };
    // Not the middle: symmetric drawings have other loops' ends on its level.
    let t = 0.437;
    let forward = match side.arc {
        None => side.to - side.from,
        Some(arc) => (along(side, t) - arc.circle.centre).perpendicular() * arc.sweep.signum(),
    };
    let inward = forward.perpendicular() * (area.signum() / forward.length());
    let step = (1e-6 * size).min(1e-3 * length(side));
    along(side, t) + inward * step
}

/// How often the ray from p along x crosses the side; a side owns its lower ends, not its upper ones.
fn crossings(side: &Side, p: Point) -> usize {
    let Some(arc) = side.arc else {
        let (a, b) = (side.from, side.to);
        if (a.y > p.y) == (b.y > p.y) {
            return 0;
        }
        let x = a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x);
        return usize::from(x > p.x);
    };
    // Cut where the arc turns from rising to falling.
    let (c, r) = (arc.circle.centre, arc.circle.radius);
    let start = (side.from - c).angle();
    let end = start + arc.sweep;
    let (low, high) = (start.min(end), start.max(end));
    let (y_low, y_high) = if arc.sweep > 0.0 {
        (side.from.y, side.to.y)
    } else {
        (side.to.y, side.from.y)
    };
    let first = ((low - FRAC_PI_2) / PI).floor() as i64 + 1;
    let mut cuts: Vec<(f64, f64)> = vec![(low, y_low)];
    let mut k = first;
    while FRAC_PI_2 + k as f64 * PI < high && k < first + 4 {
        let angle = FRAC_PI_2 + k as f64 * PI;
        cuts.push((angle, if k % 2 == 0 { c.y + r } else { c.y - r }));
        k += 1;
    }
    cuts.push((high, y_high));
    cuts.windows(2)
        .filter(|pair| {
            let ((a, ya), (b, yb)) = (pair[0], pair[1]);
            if (ya > p.y) == (yb > p.y) {
                return false;
            }
            let half = (r * r - (p.y - c.y).powi(2)).max(0.0).sqrt();
            let right = Vector::at_angle(0.5 * (a + b)).x > 0.0;
            let x = if right { c.x + half } else { c.x - half };
            x > p.x
        })
        .count()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::trace::curve::circle;
    use crate::trace::drawing::{Path, Shape};

    fn ring(shapes: &[Shape]) -> Loop {
        Loop {
            sides: shapes
                .iter()
                .filter_map(|shape| match shape {
                    Shape::Side(side) => Some(*side),
                    Shape::Curve(_) => None,
                })
                .collect(),
        }
    }

    fn square(x: f64, y: f64, b: f64) -> Loop {
        let p = Point::new;
        let corners = [p(x, y), p(x + b, y), p(x + b, y + b), p(x, y + b)];
        ring(&Path::polygon(0, 1, &corners).shapes)
    }

    #[test]
    fn even_depth_is_material_and_odd_depth_a_hole() {
        let disc = |x: f64, y: f64, r: f64| ring(&[circle(Point::new(x, y), r)]);
        let loops = vec![
            disc(50.0, 50.0, 10.0),
            square(0.0, 0.0, 100.0),
            square(45.0, 45.0, 10.0),
            disc(50.0, 50.0, 4.0),
            disc(20.0, 20.0, 5.0),
            // Touches the large square from outside.
            square(100.0, 0.0, 20.0),
        ];
        let found = nested(loops, 120.0);
        let counts: Vec<usize> = found.iter().map(|(_, holes)| holes.len()).collect();
        assert_eq!(counts, [2, 1, 0]);
        assert_eq!(found[0].0, square(0.0, 0.0, 100.0));
        assert_eq!(found[1].0, square(45.0, 45.0, 10.0));
    }

    #[test]
    fn names_are_told_apart() {
        let two = || vec![square(0.0, 0.0, 1.0), square(2.0, 0.0, 1.0)];
        let names = |layers: &[&str], loops| {
            let layers: Vec<String> = layers.iter().map(|l| (*l).to_owned()).collect();
            pieces(&layers, loops, 10.0)
                .into_iter()
                .map(|piece| piece.name)
                .collect::<Vec<_>>()
        };
        assert_eq!(names(&["x"], vec![(0, two())]), ["body", "body 2"]);
        assert_eq!(
            names(&["a 2", "a"], vec![(0, two()), (1, two())]),
            ["a 2", "a 2 2", "a", "a 3"]
        );
    }
}
