//! `place`: a piece mirrored, then turned, then moved.

use sectile_mesh::outline::place::{Mirror, Placement};
use toml_span::Value;

use super::fields::{Fields, Reader};
use super::quantity::Dimension;

/// `place = { at = [x, y], turn = 90, mirror = "x" }`, each optional: mirrored in the named axis,
/// then turned anticlockwise about the origin, then the origin moved to `at`.
pub(super) fn read(reader: &mut Reader, value: &Value<'_>) -> Option<Placement> {
    let fields = Fields::open(reader, value, "a `place`", &["at", "turn", "mirror"])?;
    let at = match fields.get("at") {
        None => Some(None),
        Some(value) => reader.point(value, "the place `at`").map(Some),
    };
    let turn = match fields.get("turn") {
        None => Some(0.0),
        Some(value) => reader.quantity(value, "the angle `turn`", Dimension::Angle),
    };
    let mirror = match fields.get("mirror") {
        None => Some(None),
        Some(value) => reader
            .choice(value, "the axis `mirror`", &["x", "y"])
            .map(|axis| Some(if axis == "x" { Mirror::X } else { Mirror::Y })),
    };
    Some(Placement {
        mirror: mirror?,
        turn: turn?,
        at: at?.unwrap_or_default(),
    })
}
