//! One entity of a DXF file as a path, in the coordinates of its own block.

use std::f64::consts::TAU;

use dxf::entities::{EntityType, LwPolyline, Polyline, Spline as DxfSpline};
use dxf::{Point as DxfPoint, Vector as DxfVector};
use kurbo::Affine;
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};

use crate::trace::curve::{Curve, Spline, circle, elliptic};
use crate::trace::drawing::{Path, Shape, straight};

/// Why an entity is no path.
#[derive(Clone, Debug, PartialEq)]
pub enum No {
    /// It is not in the plane of the drawing, or a surface; it is counted.
    Ignored(&'static str),
    /// It is faulty: what is wrong, and the remedy.
    Faulty(String, &'static str),
}

/// The shapes of an entity and whether it says that it is closed.
///
/// # Errors
/// It has none, or is faulty.
pub fn path(entity: &EntityType) -> Result<Path, No> {
    let (shapes, closed, normal) = match entity {
        EntityType::Line(line) => (vec![straight(xy(&line.p1), xy(&line.p2))], false, None),
        EntityType::Circle(c) => {
            positive(c.radius)?;
            (vec![circle(xy(&c.center), c.radius)], true, Some(&c.normal))
        }
        EntityType::Arc(arc) => {
            positive(arc.radius)?;
            let from = arc.start_angle.to_radians();
            let turned = (arc.end_angle - arc.start_angle).rem_euclid(360.0);
            let sweep = if turned <= 1e-9 {
                TAU
            } else {
                turned.to_radians()
            };
            let shape = elliptic(
                xy(&arc.center),
                Vector::new(arc.radius, 0.0),
                Vector::new(0.0, arc.radius),
                (from, from + sweep),
                None,
            );
            (vec![shape], false, Some(&arc.normal))
        }
        EntityType::Ellipse(e) => {
            let u = Vector::new(e.major_axis.x, e.major_axis.y);
            positive(u.length())?;
            positive(e.minor_axis_ratio)?;
            // Seen from below, the minor axis turns the other way.
            let up = upright(&e.normal)?;
            let v = u.perpendicular() * (e.minor_axis_ratio * if up { 1.0 } else { -1.0 });
            let turned = (e.end_parameter - e.start_parameter).rem_euclid(TAU);
            let sweep = if turned <= 1e-9 || turned >= TAU - 1e-9 {
                TAU
            } else {
                turned
            };
            let range = (e.start_parameter, e.start_parameter + sweep);
            (
                vec![elliptic(xy(&e.center), u, v, range, None)],
                sweep == TAU,
                None,
            )
        }
        EntityType::LwPolyline(line) => {
            let closed = line.is_closed();
            (lw_polyline(line)?, closed, Some(&line.extrusion_direction))
        }
        EntityType::Polyline(line) => {
            let closed = line.is_closed();
            (polyline(line)?, closed, Some(&line.normal))
        }
        EntityType::Spline(s) => (vec![Shape::Curve(spline(s)?)], false, None),
        _ => return Err(No::Ignored("entity of another kind")),
    };
    let path = Path {
        layer: 0,
        line: 0,
        closed,
        shapes,
    };
    if !path.shapes.iter().all(finite) {
        return Err(faulty("has a coordinate that is not a number"));
    }
    let mirrored = match normal {
        Some(normal) => !upright(normal)?,
        None => false,
    };
    Ok(if mirrored { path.mapped(below()) } else { path })
}

/// Coordinates of entities that are drawn looking from below.
#[must_use]
pub fn below() -> Affine {
    Affine::new([-1.0, 0.0, 0.0, 1.0, 0.0, 0.0])
}

/// Whether the entity is drawn in the plane looking from above; `false`: from below.
///
/// # Errors
/// It is in another plane.
pub fn upright(normal: &DxfVector) -> Result<bool, No> {
    let aside = normal.x.hypot(normal.y);
    if aside <= 1e-9 * normal.z.abs() {
        Ok(normal.z > 0.0)
    } else {
        Err(No::Ignored("entity in another plane"))
    }
}

fn faulty(what: &str) -> No {
    No::Faulty(
        what.to_owned(),
        "mend it in the drawing and export it again",
    )
}

fn positive(radius: f64) -> Result<(), No> {
    if radius > 0.0 && radius.is_finite() {
        Ok(())
    } else {
        Err(faulty("has no positive radius"))
    }
}

fn xy(p: &DxfPoint) -> Point {
    Point::new(p.x, p.y)
}

fn finite(shape: &Shape) -> bool {
    match shape {
        Shape::Side(side) => side.from.is_finite() && side.to.is_finite(),
        Shape::Curve(curve) => curve.control_points().iter().all(|p| p.is_finite()),
    }
}

fn lw_polyline(line: &LwPolyline) -> Result<Vec<Shape>, No> {
    let corners: Vec<(Point, f64)> = line
        .vertices
        .iter()
        .map(|v| (Point::new(v.x, v.y), v.bulge))
        .collect();
    bulged(&corners, line.is_closed())
}

fn polyline(line: &Polyline) -> Result<Vec<Shape>, No> {
    if line.is_3d_polygon_mesh() || line.is_polyface_mesh() {
        return Err(No::Ignored("surface"));
    }
    let corners: Vec<(Point, f64)> = line
        .vertices()
        .filter(|v| !v.is_spline_frame_control_point())
        .map(|v| (xy(&v.location), v.bulge))
        .collect();
    bulged(&corners, line.is_closed())
}

/// Lines and arcs from corner to corner: a bulge is the tangent of a quarter of the angle that the arc
/// to the next corner turns, positive anticlockwise.
fn bulged(corners: &[(Point, f64)], closed: bool) -> Result<Vec<Shape>, No> {
    let n = corners.len();
    let last = if closed { n } else { n.saturating_sub(1) };
    let mut shapes = Vec::with_capacity(last);
    for i in 0..last {
        let ((from, bulge), (to, _)) = (corners[i], corners[(i + 1) % n]);
        if !bulge.is_finite() {
            return Err(faulty("has a bulge that is not a number"));
        }
        if from == to {
            continue;
        }
        let chord = to - from;
        // So flat that the numbers cannot tell it from a line.
        if bulge.abs() < 1e-9 {
            shapes.push(straight(from, to));
            continue;
        }
        // From the chord's middle to the centre: left of the chord for an anticlockwise arc of less
        // than half a turn.
        let toward = chord.perpendicular() * ((1.0 - bulge * bulge) / (4.0 * bulge));
        shapes.push(Shape::Side(Side {
            from,
            to,
            arc: Some(Arc {
                circle: Circle {
                    centre: from.lerp(to, 0.5) + toward,
                    radius: chord.length() * (1.0 + bulge * bulge) / (4.0 * bulge.abs()),
                },
                sweep: 4.0 * bulge.atan(),
            }),
            corner: 0,
        }));
    }
    if shapes.is_empty() {
        return Err(No::Ignored("polyline without sides"));
    }
    Ok(shapes)
}

fn spline(s: &DxfSpline) -> Result<Curve, No> {
    let points: Vec<Point> = s.control_points.iter().map(xy).collect();
    let degree = usize::try_from(s.degree_of_curve).unwrap_or(0);
    if points.is_empty() && !s.fit_points.is_empty() {
        return Err(No::Faulty(
            "is a spline by points on it only, which does not say how it runs between them"
                .to_owned(),
            "convert it to a polyline, or to a spline by control points",
        ));
    }
    if !(1..=25).contains(&degree) || points.len() <= degree {
        return Err(faulty(
            "is a spline with too few control points for its degree",
        ));
    }
    let knots = s.knot_values.clone();
    let weights = if s.weight_values.is_empty() {
        vec![1.0; points.len()]
    } else {
        s.weight_values.clone()
    };
    let sound = knots.len() == points.len() + degree + 1
        && knots.iter().all(|knot| knot.is_finite())
        && knots.windows(2).all(|pair| pair[0] <= pair[1])
        && knots[degree] < knots[points.len()];
    if !sound {
        return Err(faulty(
            "is a spline whose knots do not fit its control points",
        ));
    }
    if weights.len() != points.len() || !weights.iter().all(|w| *w > 0.0 && w.is_finite()) {
        return Err(faulty(
            "is a spline whose weights do not fit its control points",
        ));
    }
    Ok(Curve::Spline(Box::new(Spline {
        degree,
        knots,
        points,
        weights,
    })))
}
