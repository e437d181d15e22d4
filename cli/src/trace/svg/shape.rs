//! Basic shapes: rectangles, circles, ellipses, lines, polygons.

use roxmltree::Node;
use sectile_mesh::{Point, Vector};
use svgtypes::{Length, LengthUnit, NumberListParser};

use std::f64::consts::{FRAC_PI_2, TAU};
use std::str::FromStr;

use super::path::{Run, runs};
use crate::trace::curve::{circle, elliptic};
use crate::trace::drawing::{Path, Shape, straight};

/// The runs of an element, in its own coordinates; `None`: it is no shape.
///
/// # Errors
/// What is wrong with it.
pub fn of(node: Node<'_, '_>) -> Result<Option<Vec<Run>>, String> {
    let one = |shapes: Vec<Shape>, closed: bool| {
        Ok(Some(if shapes.is_empty() {
            Vec::new()
        } else {
            vec![Run { shapes, closed }]
        }))
    };
    match node.tag_name().name() {
        "path" => match node.attribute("d") {
            Some(data) => runs(data).map(Some),
            None => Ok(Some(Vec::new())),
        },
        "rect" => one(rect(node)?, true),
        "circle" => {
            let r = length(node, "r")?.unwrap_or(0.0);
            let shapes = if r > 0.0 {
                vec![circle(centre(node)?, r)]
            } else {
                Vec::new()
            };
            one(shapes, true)
        }
        "ellipse" => {
            let (rx, ry) = (length(node, "rx")?, length(node, "ry")?);
            let rx = rx.or(ry).unwrap_or(0.0);
            let ry = ry.unwrap_or(rx);
            let shape = elliptic(
                centre(node)?,
                Vector::new(rx, 0.0),
                Vector::new(0.0, ry),
                (0.0, TAU),
                None,
            );
            one(
                if rx > 0.0 && ry > 0.0 {
                    vec![shape]
                } else {
                    Vec::new()
                },
                true,
            )
        }
        "line" => {
            let end = |x, y| {
                Ok::<_, String>(Point::new(
                    length(node, x)?.unwrap_or(0.0),
                    length(node, y)?.unwrap_or(0.0),
                ))
            };
            let (from, to) = (end("x1", "y1")?, end("x2", "y2")?);
            one(
                if from == to {
                    Vec::new()
                } else {
                    vec![straight(from, to)]
                },
                false,
            )
        }
        "polygon" => one(Path::polygon(0, 0, &points(node)?).shapes, true),
        "polyline" => one(Path::polyline(0, 0, &points(node)?).shapes, false),
        _ => Ok(None),
    }
}

/// A length in user units; `None`: not stated.
///
/// # Errors
/// It is no length, or depends on a font or on the page.
pub fn length(node: Node<'_, '_>, name: &str) -> Result<Option<f64>, String> {
    let Some(text) = node.attribute(name) else {
        return Ok(None);
    };
    if text.trim() == "auto" {
        return Ok(None);
    }
    let stated = Length::from_str(text.trim())
        .map_err(|error| format!("has {name}=\"{text}\", which is no length: {error}"))?;
    match pixels(stated) {
        Some(value) if value.is_finite() => Ok(Some(value)),
        _ => Err(format!(
            "has {name}=\"{text}\"; trace takes numbers and mm, cm, in, pt, pc, px"
        )),
    }
}

/// A length in pixels of 1/96 inch; `None` where it depends on a font or on the page.
#[must_use]
pub fn pixels(length: Length) -> Option<f64> {
    let factor = match length.unit {
        LengthUnit::None | LengthUnit::Px => 1.0,
        LengthUnit::In => 96.0,
        LengthUnit::Cm => 96.0 / 2.54,
        LengthUnit::Mm => 96.0 / 25.4,
        LengthUnit::Pt => 96.0 / 72.0,
        LengthUnit::Pc => 16.0,
        LengthUnit::Em | LengthUnit::Ex | LengthUnit::Percent => return None,
    };
    Some(length.number * factor)
}

fn centre(node: Node<'_, '_>) -> Result<Point, String> {
    Ok(Point::new(
        length(node, "cx")?.unwrap_or(0.0),
        length(node, "cy")?.unwrap_or(0.0),
    ))
}

fn points(node: Node<'_, '_>) -> Result<Vec<Point>, String> {
    let text = node.attribute("points").unwrap_or_default();
    let numbers: Vec<f64> = NumberListParser::from(text)
        .collect::<Result<_, _>>()
        .map_err(|error| format!("has faulty points: {error}"))?;
    if numbers.len() % 2 == 1 {
        return Err("has an x without a y at the end of its points".to_owned());
    }
    Ok(numbers
        .chunks_exact(2)
        .map(|pair| Point::new(pair[0], pair[1]))
        .collect())
}

fn rect(node: Node<'_, '_>) -> Result<Vec<Shape>, String> {
    let get = |name| length(node, name);
    let (x, y) = (get("x")?.unwrap_or(0.0), get("y")?.unwrap_or(0.0));
    let (w, h) = (get("width")?.unwrap_or(0.0), get("height")?.unwrap_or(0.0));
    if w <= 0.0 || h <= 0.0 {
        return Ok(Vec::new());
    }
    let (rx, ry) = (get("rx")?, get("ry")?);
    let rx_stated = rx.or(ry).unwrap_or(0.0).clamp(0.0, 0.5 * w);
    let ry_stated = ry.or(rx).unwrap_or(0.0).clamp(0.0, 0.5 * h);
    let p = Point::new;
    if rx_stated == 0.0 || ry_stated == 0.0 {
        let corners = [p(x, y), p(x + w, y), p(x + w, y + h), p(x, y + h)];
        return Ok(Path::polygon(0, 0, &corners).shapes);
    }
    let (rx, ry) = (rx_stated, ry_stated);
    // Each side with the corner that follows it: upper, right, lower, left (y is down).
    let ring = [
        (
            p(x + rx, y),
            p(x + w - rx, y),
            p(x + w - rx, y + ry),
            -FRAC_PI_2,
        ),
        (
            p(x + w, y + ry),
            p(x + w, y + h - ry),
            p(x + w - rx, y + h - ry),
            0.0,
        ),
        (
            p(x + w - rx, y + h),
            p(x + rx, y + h),
            p(x + rx, y + h - ry),
            FRAC_PI_2,
        ),
        (
            p(x, y + h - ry),
            p(x, y + ry),
            p(x + rx, y + ry),
            2.0 * FRAC_PI_2,
        ),
    ];
    let mut shapes = Vec::new();
    for (i, &(from, to, centre, angle)) in ring.iter().enumerate() {
        let next = ring[(i + 1) % 4].0;
        // Where the radii leave nothing of a side, its ends differ by rounding only.
        if from.distance(to) > 1e-12 * w.max(h) {
            shapes.push(straight(from, to));
        }
        shapes.push(elliptic(
            centre,
            Vector::new(rx, 0.0),
            Vector::new(0.0, ry),
            (angle, angle + FRAC_PI_2),
            Some((to, next)),
        ));
    }
    Ok(shapes)
}
