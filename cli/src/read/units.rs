//! The table `[units]`.

use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::quantity::{Dimension, FORCES, LENGTHS, STRESSES, moment_parts};
use super::syntax::printable;
use crate::section::Units;

const KEYS: &[&str] = &["length", "force", "moment", "stress"];

/// The units of a file without `[units]`.
pub(super) fn defaults() -> Units {
    Units {
        length: "mm",
        force: "kN",
        moment: "kN m".to_owned(),
        stress: "MPa",
    }
}

/// Sets the reader's units; what is faulty keeps its default, so that reading can go on.
pub(super) fn read(reader: &mut Reader, value: &Value<'_>) {
    let Some(fields) = Fields::open(reader, value, "the table [units]", KEYS) else {
        return;
    };
    if let Some(value) = fields.get("length")
        && let Some(unit) = reader.choice(value, "the unit of length", LENGTHS)
    {
        reader.units.length = unit;
    }
    if let Some(value) = fields.get("force")
        && let Some(unit) = reader.choice(value, "the unit of force", FORCES)
    {
        reader.units.force = unit;
    }
    if let Some(value) = fields.get("stress")
        && let Some(unit) = reader.choice(value, "the unit of stress", STRESSES)
    {
        reader.units.stress = unit;
    }
    if let Some(value) = fields.get("moment")
        && let Some(text) = reader.text(value, "the unit of moment")
    {
        match moment_parts(text) {
            Some((force, arm)) => reader.units.moment = format!("{force} {arm}"),
            None => reader.faults.push(Fault::at(
                span(value),
                "not known",
                format!("the unit of moment cannot be \"{}\"", printable(text)),
                format!(
                    "write a unit of force and one of length with a blank between, such as {}",
                    Dimension::Moment.units().join(", ")
                ),
            )),
        }
    }
}
