//! Polygons as well-known text.

use std::str::FromStr;

use sectile_mesh::Point;
use wkt::Wkt;
use wkt::types::{LineString, Polygon};

use super::Options;
use super::drawing::{Drawing, Path};
use crate::read::fault::Fault;

/// Brackets within brackets: a collection of collections of multipolygons needs far fewer.
const DEEPEST: usize = 64;

/// Reads one or several geometries.
///
/// # Errors
/// Every geometry that cannot be read.
pub fn read(text: &str, options: &Options) -> Result<Drawing, Vec<Fault>> {
    let mut drawing = Drawing::stating_none(
        options.units,
        "which is assumed: well-known text states no unit (--units)",
    );
    let layer = drawing.layer("");
    let mut faults = Vec::new();
    for (line, geometry) in geometries(text).map_err(|fault| vec![fault])? {
        match Wkt::<f64>::from_str(geometry) {
            Ok(geometry) => add(&mut drawing, layer, line, options.scale, geometry),
            Err(message) => faults.push(Fault::whole(
                format!("the geometry in line {line} cannot be read: {message}"),
                "a polygon is POLYGON ((0 0, 80 0, 80 12, 0 12, 0 0), (hole…))",
            )),
        }
    }
    if faults.is_empty() {
        Ok(drawing)
    } else {
        faults.truncate(20);
        Err(faults)
    }
}

/// The texts between which brackets are balanced, with their lines; what stands before the last `;`
/// (a reference system) is left out.
fn geometries(text: &str) -> Result<Vec<(usize, &str)>, Fault> {
    let mut out = Vec::new();
    let (mut depth, mut line, mut start) = (0_usize, 1, None);
    for (i, byte) in text.bytes().enumerate() {
        match byte {
            b'\n' => line += 1,
            b'(' => {
                depth += 1;
                if depth > DEEPEST {
                    return Err(Fault::whole(
                        format!("line {line} has more than {DEEPEST} brackets within one another"),
                        "export the polygons again",
                    ));
                }
            }
            b')' => {
                if depth == 0 {
                    return Err(Fault::whole(
                        format!("line {line} closes a bracket that is not open"),
                        "export the polygons again",
                    ));
                }
                depth -= 1;
                if depth == 0 {
                    let (from, at) = start.take().unwrap_or((i, line));
                    out.push((at, &text[from..=i]));
                    continue;
                }
            }
            b';' if depth == 0 => start = None,
            _ => {}
        }
        if start.is_none() && !byte.is_ascii_whitespace() && !matches!(byte, b';' | b',') {
            start = Some((i, line));
        }
    }
    match start {
        None => Ok(out),
        Some((from, at)) if depth == 0 => {
            out.push((at, &text[from..]));
            Ok(out)
        }
        Some((_, at)) => Err(Fault::whole(
            format!("the geometry in line {at} ends with {depth} open brackets"),
            "the file was cut short: export it again",
        )),
    }
}

fn add(drawing: &mut Drawing, layer: usize, line: usize, scale: f64, geometry: Wkt<f64>) {
    let corners = |ring: &LineString<f64>| -> Vec<Point> {
        ring.coords()
            .iter()
            .map(|c| Point::new(c.x * scale, c.y * scale))
            .collect()
    };
    let polygon = |drawing: &mut Drawing, polygon: &Polygon<f64>| {
        for ring in polygon.rings() {
            drawing
                .paths
                .push(Path::polygon(layer, line, &corners(ring)));
        }
    };
    match geometry {
        Wkt::Polygon(one) => polygon(drawing, &one),
        Wkt::MultiPolygon(several) => several
            .polygons()
            .iter()
            .for_each(|one| polygon(drawing, one)),
        Wkt::LineString(one) => drawing
            .paths
            .push(Path::polyline(layer, line, &corners(&one))),
        Wkt::MultiLineString(several) => {
            for one in several.line_strings() {
                drawing
                    .paths
                    .push(Path::polyline(layer, line, &corners(one)));
            }
        }
        Wkt::GeometryCollection(several) => {
            // As deep as the brackets, which are counted before.
            for one in several.into_inner().0 {
                add(drawing, layer, line, scale, one);
            }
        }
        Wkt::Point(_) | Wkt::MultiPoint(_) => drawing.ignore("POINT"),
    }
}
