//! Loose lines and arcs drawn over a side of a closed loop: they say nothing new.

use sectile_mesh::Point;
use sectile_mesh::outline::side::Side;
use sectile_mesh::tree::Tree;

use super::drawing::side_extent;
use super::loops::{Loop, middle};

/// Leaves out the `loose` sides of which all lies on one side of one of the `loops`, within the distance
/// `same`; returns how many that were. What reaches beyond stays, to be told as an open end.
pub fn drop_redrawn(loose: &mut Vec<Side>, loops: &[Loop], same: f64) -> usize {
    if loose.is_empty() {
        return 0;
    }
    let sides: Vec<&Side> = loops.iter().flat_map(|ring| &ring.sides).collect();
    let boxes: Vec<_> = sides.iter().map(|side| side_extent(side)).collect();
    let tree = Tree::new(&boxes);
    let before = loose.len();
    loose.retain(|side| {
        let [x0, x1, y0, y1] = side_extent(side);
        let mut redrawn = false;
        tree.overlapping(&[x0 - same, x1 + same, y0 - same, y1 + same], &mut |k| {
            redrawn |= lies_on(side, sides[k], same);
        });
        !redrawn
    });
    before - loose.len()
}

/// Whether all of `part` lies on `whole`.
fn lies_on(part: &Side, whole: &Side, same: f64) -> bool {
    match (part.arc, whole.arc) {
        (None, None) => on(whole, part.from, same) && on(whole, part.to, same),
        (Some(a), Some(b)) => {
            let one_circle = a.circle.centre.distance(b.circle.centre) <= 4.0 * same
                && (a.circle.radius - b.circle.radius).abs() <= 4.0 * same;
            let turn = same / b.circle.radius;
            one_circle
                && a.sweep.abs() <= b.sweep.abs() + 2.0 * turn
                && [part.from, middle(part), part.to]
                    .into_iter()
                    .all(|p| on(whole, p, 4.0 * same))
        }
        _ => false,
    }
}

/// Whether a point lies on a side, its ends included.
fn on(side: &Side, p: Point, same: f64) -> bool {
    if p.distance(side.from) <= same || p.distance(side.to) <= same {
        return true;
    }
    let Some(arc) = side.arc else {
        let along = side.to - side.from;
        let t = (p - side.from).dot(along) / along.dot(along);
        return (0.0..=1.0).contains(&t) && side.from.lerp(side.to, t).distance(p) <= same;
    };
    let (c, r) = (arc.circle.centre, arc.circle.radius);
    let turned = ((p - c).angle() - (side.from - c).angle()) * arc.sweep.signum();
    (p.distance(c) - r).abs() <= same && turned.rem_euclid(std::f64::consts::TAU) <= arc.sweep.abs()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::trace::curve::circle;
    use crate::trace::drawing::{Path, Shape};
    use sectile_mesh::outline::corner::arc_through;

    fn side(from: [f64; 2], to: [f64; 2]) -> Side {
        Side {
            from: Point::new(from[0], from[1]),
            to: Point::new(to[0], to[1]),
            arc: None,
            corner: 0,
        }
    }

    fn ring(shapes: &[Shape]) -> Loop {
        let sides = shapes.iter().filter_map(|shape| match shape {
            Shape::Side(side) => Some(*side),
            Shape::Curve(_) => None,
        });
        Loop {
            sides: sides.collect(),
        }
    }

    #[test]
    fn what_repeats_part_of_a_loop_goes_and_the_rest_stays() {
        let corner = |x: f64, y: f64| Point::new(x, y);
        let square = [
            corner(0.0, 0.0),
            corner(10.0, 0.0),
            corner(10.0, 10.0),
            corner(0.0, 10.0),
        ];
        let loops = [
            ring(&Path::polygon(0, 1, &square).shapes),
            ring(&[circle(corner(30.0, 0.0), 5.0)]),
        ];
        let arc = |from: Point, via: Point, to: Point| Side {
            from,
            to,
            arc: arc_through(from, via, to),
            corner: 0,
        };
        let on_circle = |degrees: f64| {
            let angle = degrees.to_radians();
            corner(30.0 + 5.0 * angle.cos(), 5.0 * angle.sin())
        };
        let stay = [
            // Beyond the end, beside, across, and an arc of another circle.
            side([5.0, 0.0], [12.0, 0.0]),
            side([2.0, 0.1], [8.0, 0.1]),
            side([5.0, 0.0], [5.0, 10.0]),
            arc(on_circle(10.0), corner(30.0, 3.0), on_circle(170.0)),
        ];
        let go = [
            side([10.0, 0.0], [0.0, 0.0]),
            side([10.0, 2.0], [10.0, 7.0]),
            arc(on_circle(-40.0), on_circle(20.0), on_circle(80.0)),
            arc(on_circle(10.0), on_circle(300.0), on_circle(200.0)),
        ];
        let mut loose = [&stay[..], &go[..]].concat();
        assert_eq!(drop_redrawn(&mut loose, &loops, 1e-6), go.len());
        assert_eq!(loose, stay);
    }
}
