//! The formats of drawings, told apart by their names' endings or their first bytes.

use std::fmt;
use std::path::Path;

use super::drawing::Drawing;
use super::{Options, csv, dxf, geojson, svg, wkt};
use crate::read::fault::Fault;

/// A format.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    /// Drawing exchange format, as text.
    Dxf,
    /// Scalable vector graphics.
    Svg,
    /// GeoJSON (RFC 7946).
    GeoJson,
    /// Well-known text.
    Wkt,
    /// Corners as comma-separated values.
    Csv,
}

impl fmt::Display for Format {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Dxf => "DXF",
            Self::Svg => "SVG",
            Self::GeoJson => "GeoJSON",
            Self::Wkt => "WKT",
            Self::Csv => "CSV",
        })
    }
}

impl Format {
    /// The format of the file at `path` that holds `bytes`.
    ///
    /// # Errors
    /// Neither the ending nor the content is known.
    pub fn of(path: &Path, bytes: &[u8]) -> Result<Self, Fault> {
        let ending = path
            .extension()
            .map(|ending| ending.to_string_lossy().to_ascii_lowercase())
            .unwrap_or_default();
        let known = match ending.as_str() {
            "dxf" => Some(Self::Dxf),
            "svg" => Some(Self::Svg),
            "geojson" | "json" => Some(Self::GeoJson),
            "wkt" => Some(Self::Wkt),
            "csv" | "tsv" => Some(Self::Csv),
            _ => Self::of_content(bytes),
        };
        known.ok_or_else(|| {
            Fault::whole(
                "neither the name's ending nor the content tells what kind of drawing this is",
                "trace reads DXF (as text), SVG, GeoJSON, WKT and corners as CSV; give the file the \
                 ending .dxf, .svg, .geojson, .wkt or .csv",
            )
        })
    }

    fn of_content(bytes: &[u8]) -> Option<Self> {
        let head = String::from_utf8_lossy(&bytes[..bytes.len().min(2048)]);
        let head = head.trim_start_matches(['\u{feff}', ' ', '\t', '\r', '\n']);
        let upper = head.to_ascii_uppercase();
        if head.starts_with('<') && upper.contains("<SVG") {
            Some(Self::Svg)
        } else if head.starts_with('{') {
            Some(Self::GeoJson)
        } else if upper.lines().nth(1).map(str::trim) == Some("SECTION")
            || upper.starts_with("999")
            || upper.starts_with("AUTOCAD BINARY DXF")
        {
            Some(Self::Dxf)
        } else if ["POLYGON", "MULTIPOLYGON", "GEOMETRYCOLLECTION", "SRID="]
            .iter()
            .any(|word| upper.starts_with(word))
        {
            Some(Self::Wkt)
        } else {
            None
        }
    }

    /// Reads a drawing.
    pub(super) fn read(self, bytes: &[u8], options: &Options) -> Result<Drawing, Vec<Fault>> {
        match self {
            Self::Dxf => dxf::read(bytes, options),
            Self::Svg => svg::read(utf8(bytes)?, options),
            Self::GeoJson => geojson::read(utf8(bytes)?, options),
            Self::Wkt => wkt::read(utf8(bytes)?, options),
            Self::Csv => csv::read(utf8(bytes)?, options),
        }
    }
}

fn utf8(bytes: &[u8]) -> Result<&str, Vec<Fault>> {
    let text = std::str::from_utf8(bytes).map_err(|error| {
        let before = &bytes[..error.valid_up_to()];
        let line = 1 + before.iter().filter(|byte| **byte == b'\n').count();
        vec![Fault::whole(
            format!("line {line} is not UTF-8 text"),
            "save the drawing again with the encoding UTF-8",
        )]
    })?;
    let text = text.trim_start_matches('\u{feff}');
    if text.trim().is_empty() {
        return Err(vec![Fault::whole(
            "the drawing is empty",
            "export it again",
        )]);
    }
    Ok(text)
}
