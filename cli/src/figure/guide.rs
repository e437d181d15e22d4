//! Lines over a field that run on beyond the section: the neutral axis, and the line of action of the
//! shear force.

use sectile_mesh::{Point, Vector};

use super::marks::{SHEAR, arrowhead};
use super::outline::Shape;
use super::page::{INK, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::surface::Surface;
use super::view::View;

/// How far guides run beyond what is drawn, mm.
const BEYOND: f64 = 4.5;
const HEAD: f64 = 3.6;
/// Step at which a guide looks for material, mm.
const STEP: f64 = 0.25;
const CHAIN: &str = "3.2 0.7 0.6 0.7";

/// What a line says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Meaning {
    /// Normal stress is zero on it.
    NeutralAxis,
    /// The resultant shear force acts along it, in its direction.
    LineOfAction,
}

/// A straight line without end, section axes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Guide {
    /// What it says.
    pub meaning: Meaning,
    /// A point on it.
    pub through: Point,
    /// Its direction, of length one.
    pub along: Vector,
}

impl Guide {
    /// The neutral axis of a field that is linear over the surface, as without a bimoment; `None` where
    /// it is not linear (then the line of zero stress is curved) or has no slope.
    #[must_use]
    pub fn neutral_axis(surface: &Surface, values: &[f64]) -> Option<Self> {
        let n = surface.points.len() as f64;
        let sum = |of: &dyn Fn(usize) -> f64| (0..values.len()).map(of).sum::<f64>();
        let middle = Point::new(
            sum(&|i| surface.points[i].x) / n,
            sum(&|i| surface.points[i].y) / n,
        );
        let mean = sum(&|i| values[i]) / n;
        let d = |i: usize| surface.points[i] - middle;
        let (xx, xy, yy) = (
            sum(&|i| d(i).x * d(i).x),
            sum(&|i| d(i).x * d(i).y),
            sum(&|i| d(i).y * d(i).y),
        );
        let (xv, yv) = (sum(&|i| d(i).x * values[i]), sum(&|i| d(i).y * values[i]));
        let det = xx * yy - xy * xy;
        let slope = Vector::new((xv * yy - yv * xy) / det, (yv * xx - xv * xy) / det);
        let size = values.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        let off = (0..values.len())
            .map(|i| (mean + slope.dot(d(i)) - values[i]).abs())
            .fold(0.0_f64, f64::max);
        let steep = slope.length() * (xx / n + yy / n).sqrt();
        // Not (a ≤ b): a field of no numbers has no axis either.
        if !(off <= 1e-6 * size && steep > 1e-6 * size) {
            return None;
        }
        Some(Self {
            meaning: Meaning::NeutralAxis,
            through: middle - slope * (mean / slope.dot(slope)),
            along: slope.perpendicular() * (1.0 / slope.length()),
        })
    }

    /// The line of action of a shear force whose torque about the shear centre is `torque`; `None`
    /// without a force.
    #[must_use]
    pub fn line_of_action(force: Vector, torque: f64, shear_centre: Point) -> Option<Self> {
        let size = force.length();
        if size <= 0.0 || !size.is_finite() {
            return None;
        }
        // (x − x_s) V_y − (y − y_s) V_x = torque, nearest to the shear centre.
        let arm = Vector::new(force.y, -force.x) * (torque / (size * size));
        Some(Self {
            meaning: Meaning::LineOfAction,
            through: shear_centre + arm,
            along: force * (1.0 / size),
        })
    }

    /// The point on it that is nearest to `p`.
    #[must_use]
    pub fn nearest(&self, p: Point) -> Point {
        self.through + self.along * self.along.dot(p - self.through)
    }

    /// What the note below the figure says of it.
    #[must_use]
    pub fn note(&self) -> &'static str {
        match self.meaning {
            Meaning::NeutralAxis => "Chain line: neutral axis.",
            Meaning::LineOfAction => {
                "Chain line with arrow: line of action of the shear force, not drawn over material."
            }
        }
    }

    /// Draws it across `drawn` (page) and a little beyond, not over material, which it would hide where
    /// it runs along a wall; labels keep off it. Whether it is to be seen.
    pub fn draw(&self, page: &mut Page, ground: &mut Ground, view: &View, drawn: Rect) -> bool {
        let u = Vector::new(self.along.x, -self.along.y);
        let Some((a, b)) = clipped(view.point(self.through), u, drawn.grown(BEYOND)) else {
            return false;
        };
        let (end, pen) = match self.meaning {
            Meaning::NeutralAxis => (b, Pen::line(INK, 0.2).dashed(CHAIN)),
            Meaning::LineOfAction => {
                arrowhead(page, b, u, HEAD, SHEAR);
                (b - u * HEAD, Pen::line(SHEAR, 0.3).dashed(CHAIN))
            }
        };
        for (p, q) in bare(a, end, ground.shape) {
            page.line(p, q, pen);
        }
        ground.leaders.push((a, b));
        true
    }
}

/// The stretches from `a` to `b` that have no material.
fn bare(a: Point, b: Point, shape: Option<&Shape>) -> Vec<(Point, Point)> {
    let steps = (a.distance(b) / STEP).ceil().max(1.0) as usize;
    let mut out: Vec<(Point, Point)> = Vec::new();
    let mut open = false;
    for k in 0..steps {
        let at = |t: f64| a.lerp(b, t / steps as f64);
        let (from, to) = (at(k as f64), at(k as f64 + 1.0));
        let free = !shape.is_some_and(|s| s.covers(from) || s.covers(to));
        match out.last_mut() {
            Some(last) if free && open => last.1 = to,
            _ if free => out.push((from, to)),
            _ => {}
        }
        open = free;
    }
    out
}

/// The part of the line through `p` along `u` inside `r`.
fn clipped(p: Point, u: Vector, r: Rect) -> Option<(Point, Point)> {
    let (mut enter, mut leave) = (f64::NEG_INFINITY, f64::INFINITY);
    for (start, slope, low, high) in [(p.x, u.x, r.x0, r.x1), (p.y, u.y, r.y0, r.y1)] {
        if slope.abs() < 1e-12 {
            if start < low || start > high {
                return None;
            }
        } else {
            let (s, t) = ((low - start) / slope, (high - start) / slope);
            enter = enter.max(s.min(t));
            leave = leave.min(s.max(t));
        }
    }
    (leave - enter > 2.0 * HEAD).then(|| (p + u * enter, p + u * leave))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::samples;

    #[test]
    fn neutral_axis_of_a_plane_and_none_of_a_curved_field() {
        let mesh = samples::rectangle_mesh(6, 4, 60.0, 40.0);
        let surface = Surface::new(mesh.vertices, mesh.triangles);
        let of = |f: &dyn Fn(&Point) -> f64| surface.points.iter().map(f).collect::<Vec<f64>>();
        let plane = of(&|p| 3.0 * p.x - 4.0 * p.y + 50.0);
        let axis = Guide::neutral_axis(&surface, &plane).expect("an axis");
        let q = axis.through + axis.along * 17.0;
        assert!((3.0 * q.x - 4.0 * q.y + 50.0).abs() < 1e-9);
        for field in [
            of(&|p| p.x * p.y),
            of(&|_| 7.0),
            of(&|_| 0.0),
            of(&|_| f64::NAN),
        ] {
            assert_eq!(Guide::neutral_axis(&surface, &field), None);
        }
    }

    #[test]
    fn material_is_not_covered() {
        let domain = samples::annulus(50.0, 50.0, 40.0, 20.0);
        let square = Rect::new(0.0, 0.0, 100.0, 100.0);
        let shape = Shape::new(&domain, &View::fit(square, square));
        let p = Point::new;
        let runs = bare(p(0.0, 50.0), p(100.0, 50.0), Some(&shape));
        let ends: Vec<[f64; 2]> = runs.iter().map(|(p, q)| [p.x, q.x]).collect();
        assert_eq!(ends.len(), 3, "{ends:?}");
        for (found, expected) in ends.iter().zip([[0.0, 10.0], [30.0, 70.0], [90.0, 100.0]]) {
            for k in 0..2 {
                assert!((found[k] - expected[k]).abs() < 2.0 * STEP, "{ends:?}");
            }
        }
        assert_eq!(bare(p(0.0, 0.0), p(9.0, 0.0), None).len(), 1);
    }

    #[test]
    fn line_of_action_has_the_torque() {
        let centre = Point::new(-25.0, 100.0);
        let force = Vector::new(3.0, -40.0);
        let line = Guide::line_of_action(force, 900.0, centre).expect("a line");
        for s in [-50.0, 0.0, 80.0] {
            let at = line.through + line.along * s;
            let torque = (at.x - centre.x) * force.y - (at.y - centre.y) * force.x;
            assert!((torque - 900.0).abs() < 1e-9);
        }
        assert!(line.along.dot(force) > 0.0);
        assert_eq!(Guide::line_of_action(Vector::default(), 1.0, centre), None);
    }
}
