//! Polygons as GeoJSON.

use geojson::{Feature, GeoJson, Geometry, GeometryValue, Position};
use sectile_mesh::Point;

use super::Options;
use super::drawing::{Drawing, Path};
use crate::read::fault::Fault;

/// Reads geometries, features and collections of them. A feature's property `layer` or `name` is its
/// layer.
///
/// # Errors
/// The text is no GeoJSON, or a place has fewer than two coordinates.
pub fn read(text: &str, options: &Options) -> Result<Drawing, Vec<Fault>> {
    let parsed: GeoJson = text.parse().map_err(|error: geojson::Error| {
        let reason: String = error.to_string().chars().take(300).collect();
        vec![Fault::whole(
            format!("this is no GeoJSON: {reason}"),
            "the drawing is a Polygon, MultiPolygon, GeometryCollection, Feature or FeatureCollection",
        )]
    })?;
    let mut reader = Reader {
        drawing: Drawing::stating_none(
            options.units,
            "which is assumed: coordinates are taken as lengths as they are (--units)",
        ),
        scale: options.scale,
        faults: Vec::new(),
    };
    match parsed {
        GeoJson::Geometry(geometry) => reader.geometry("", &geometry),
        GeoJson::Feature(feature) => reader.feature(&feature),
        GeoJson::FeatureCollection(collection) => {
            for feature in &collection.features {
                reader.feature(feature);
            }
        }
    }
    if reader.faults.is_empty() {
        Ok(reader.drawing)
    } else {
        Err(reader.faults)
    }
}

struct Reader {
    drawing: Drawing,
    scale: f64,
    faults: Vec<Fault>,
}

impl Reader {
    fn feature(&mut self, feature: &Feature) {
        let name = ["layer", "name"]
            .iter()
            .find_map(|key| feature.property(key)?.as_str())
            .unwrap_or("");
        match &feature.geometry {
            Some(geometry) => self.geometry(name, geometry),
            None => self.drawing.ignore("feature without geometry"),
        }
    }

    fn geometry(&mut self, layer: &str, geometry: &Geometry) {
        match &geometry.value {
            GeometryValue::Polygon { coordinates } => self.rings(layer, coordinates, true),
            GeometryValue::MultiPolygon { coordinates } => {
                for polygon in coordinates {
                    self.rings(layer, polygon, true);
                }
            }
            GeometryValue::LineString { coordinates } => {
                self.rings(layer, std::slice::from_ref(coordinates), false);
            }
            GeometryValue::MultiLineString { coordinates } => {
                self.rings(layer, coordinates, false);
            }
            // As deep as the JSON, whose depth its parser limits.
            GeometryValue::GeometryCollection { geometries } => {
                for geometry in geometries {
                    self.geometry(layer, geometry);
                }
            }
            GeometryValue::Point { .. } | GeometryValue::MultiPoint { .. } => {
                self.drawing.ignore("Point");
            }
        }
    }

    fn rings(&mut self, layer: &str, rings: &[Vec<Position>], closed: bool) {
        let layer = self.drawing.layer(layer);
        for ring in rings {
            let corners: Option<Vec<Point>> = ring
                .iter()
                .map(|place| match place.as_slice() {
                    [x, y, ..] => Some(Point::new(x * self.scale, y * self.scale)),
                    _ => None,
                })
                .collect();
            let Some(corners) = corners else {
                if self.faults.is_empty() {
                    self.faults.push(Fault::whole(
                        "a place has fewer than two coordinates",
                        "each place is [x, y]",
                    ));
                }
                continue;
            };
            let path = if closed {
                Path::polygon(layer, 0, &corners)
            } else {
                Path::polyline(layer, 0, &corners)
            };
            self.drawing.paths.push(path);
        }
    }
}
