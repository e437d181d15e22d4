//! Path data: every command, arcs of circles kept.

use kurbo::{SvgArc, Vec2};
use sectile_mesh::{Point, Vector};
use svgtypes::{PathParser, PathSegment};

use crate::trace::curve::{Curve, elliptic, quadratic};
use crate::trace::drawing::{Shape, straight};

/// One run of a path, from a move to the next.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Run {
    /// Its shapes.
    pub shapes: Vec<Shape>,
    /// Whether the path closes it.
    pub closed: bool,
}

/// The runs of path data.
///
/// # Errors
/// The data is faulty: what is wrong with it.
pub fn runs(data: &str) -> Result<Vec<Run>, String> {
    let mut pen = Pen::default();
    for segment in PathParser::from(data) {
        pen.draw(segment.map_err(|error| error.to_string())?);
    }
    pen.lift();
    Ok(pen.runs)
}

#[derive(Default)]
struct Pen {
    runs: Vec<Run>,
    run: Run,
    start: Point,
    at: Point,
    /// The second control point of the cubic, or the control point of the quadratic, just drawn.
    cubic: Option<Point>,
    quadratic: Option<Point>,
}

impl Pen {
    fn lift(&mut self) {
        let run = std::mem::take(&mut self.run);
        if !run.shapes.is_empty() {
            self.runs.push(run);
        }
    }

    fn to(&self, abs: bool, x: f64, y: f64) -> Point {
        if abs {
            Point::new(x, y)
        } else {
            Point::new(self.at.x + x, self.at.y + y)
        }
    }

    fn line(&mut self, to: Point) {
        if to != self.at {
            self.run.shapes.push(straight(self.at, to));
        }
        self.at = to;
    }

    fn curve(&mut self, curve: Curve, to: Point) {
        self.run.shapes.push(Shape::Curve(curve));
        self.at = to;
    }

    fn draw(&mut self, segment: PathSegment) {
        let (cubic, square) = (self.cubic.take(), self.quadratic.take());
        // The control point before, mirrored in the pen's place.
        let mirrored = |before: Option<Point>, at: Point| {
            before.map_or(at, |p| Point::new(2.0 * at.x - p.x, 2.0 * at.y - p.y))
        };
        match segment {
            PathSegment::MoveTo { abs, x, y } => {
                let to = self.to(abs, x, y);
                self.lift();
                (self.at, self.start) = (to, to);
            }
            PathSegment::LineTo { abs, x, y } => self.line(self.to(abs, x, y)),
            PathSegment::HorizontalLineTo { abs, x } => {
                let x = if abs { x } else { self.at.x + x };
                self.line(Point::new(x, self.at.y));
            }
            PathSegment::VerticalLineTo { abs, y } => {
                let y = if abs { y } else { self.at.y + y };
                self.line(Point::new(self.at.x, y));
            }
            PathSegment::CurveTo {
                abs,
                x1,
                y1,
                x2,
                y2,
                x,
                y,
            } => {
                let (b, c, d) = (
                    self.to(abs, x1, y1),
                    self.to(abs, x2, y2),
                    self.to(abs, x, y),
                );
                self.curve(Curve::Cubic([self.at, b, c, d]), d);
                self.cubic = Some(c);
            }
            PathSegment::SmoothCurveTo { abs, x2, y2, x, y } => {
                let b = mirrored(cubic, self.at);
                let (c, d) = (self.to(abs, x2, y2), self.to(abs, x, y));
                self.curve(Curve::Cubic([self.at, b, c, d]), d);
                self.cubic = Some(c);
            }
            PathSegment::Quadratic { abs, x1, y1, x, y } => {
                let (b, c) = (self.to(abs, x1, y1), self.to(abs, x, y));
                self.curve(quadratic(self.at, b, c), c);
                self.quadratic = Some(b);
            }
            PathSegment::SmoothQuadratic { abs, x, y } => {
                let b = mirrored(square, self.at);
                let c = self.to(abs, x, y);
                self.curve(quadratic(self.at, b, c), c);
                self.quadratic = Some(b);
            }
            PathSegment::EllipticalArc {
                abs,
                rx,
                ry,
                x_axis_rotation,
                large_arc,
                sweep,
                x,
                y,
            } => {
                let to = self.to(abs, x, y);
                self.arc(to, (rx, ry), x_axis_rotation, large_arc, sweep);
            }
            PathSegment::ClosePath { .. } => {
                self.line(self.start);
                self.run.closed = true;
                self.lift();
            }
        }
    }

    fn arc(&mut self, to: Point, radii: (f64, f64), turn: f64, large_arc: bool, sweep: bool) {
        let from = self.at;
        let turn = turn.to_radians();
        let stated = SvgArc {
            from: kurbo::Point::new(from.x, from.y),
            to: kurbo::Point::new(to.x, to.y),
            radii: Vec2::new(radii.0, radii.1),
            x_rotation: turn,
            large_arc,
            sweep,
        };
        if from == to {
            return;
        }
        let Some(arc) = kurbo::Arc::from_svg_arc(&stated) else {
            self.line(to);
            return;
        };
        // The arc runs from its start over its sweep; a mirrored v makes that rise.
        let axis = Vector::at_angle(turn);
        let sense = arc.sweep_angle.signum();
        let (u, v) = (
            axis * arc.radii.x,
            axis.perpendicular() * (arc.radii.y * sense),
        );
        let first = arc.start_angle * sense;
        self.run.shapes.push(elliptic(
            Point::new(arc.center.x, arc.center.y),
            u,
            v,
            (first, first + arc.sweep_angle.abs()),
            Some((from, to)),
        ));
        self.at = to;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::trace::loops::middle;

    fn sides(data: &str) -> Vec<sectile_mesh::outline::side::Side> {
        let runs = runs(data).expect("sound");
        assert_eq!(runs.len(), 1);
        runs[0]
            .shapes
            .iter()
            .map(|shape| match shape {
                Shape::Side(side) => *side,
                Shape::Curve(_) => panic!("a curve"),
            })
            .collect()
    }

    #[test]
    fn arcs_of_circles_stay_arcs() {
        // From (10, 0) to (0, 10) about the origin, y down: the small arc with sweep turns over 90°.
        let found = sides("M10 0 a10 10 0 0 1 -10 10");
        let arc = found[0].arc.expect("an arc");
        assert!((arc.circle.radius - 10.0).abs() < 1e-12);
        assert!(arc.circle.centre.distance(Point::new(0.0, 0.0)) < 1e-12);
        assert!((arc.sweep.to_degrees() - 90.0).abs() < 1e-9);
        // The large one about (10, 10), and both against the sense.
        let large = sides("M10 0 A10 10 30 1 1 0 10")[0];
        assert!(
            (large.arc.expect("an arc").sweep.to_degrees() - 270.0).abs() < 1e-9 || {
                large
                    .arc
                    .expect("an arc")
                    .circle
                    .centre
                    .distance(Point::new(10.0, 10.0))
                    < 1e-9
            }
        );
        let back = sides("M10 0 A10 10 0 0 0 0 10")[0].arc.expect("an arc");
        assert!((back.sweep.to_degrees() + 90.0).abs() < 1e-9);
        assert!(back.circle.centre.distance(Point::new(10.0, 10.0)) < 1e-9);
        // Radii that are too small grow until they reach: half a circle.
        let grown = sides("M0 0 A1 1 0 0 1 10 0")[0];
        assert!((grown.arc.expect("an arc").circle.radius - 5.0).abs() < 1e-9);
        assert!(middle(&grown).distance(Point::new(5.0, -5.0)) < 1e-9);
    }

    #[test]
    fn every_command_is_drawn() {
        let found = runs("M0 0h4v3H1V9L2 2 3 3zm5 5l1 1 q1 0 1 1 t1 1 c0 1 1 1 1 2 s1 0 2 2")
            .expect("sound");
        assert_eq!(found.len(), 2);
        assert_eq!((found[0].shapes.len(), found[0].closed), (7, true));
        assert_eq!((found[1].shapes.len(), found[1].closed), (5, false));
        // The smooth cubic leaves in the direction in which the one before arrived.
        let Shape::Curve(Curve::Cubic(last)) = &found[1].shapes[4] else {
            panic!("a cubic");
        };
        assert_eq!(last[0], Point::new(9.0, 10.0));
        assert_eq!(last[1], Point::new(9.0, 11.0));
        assert!(runs("M0 0 L 1").is_err());
    }
}
