//! The tables `[[action]]`.

use sectile_solver::stress::forces::SectionForces;
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader};
use super::names::{Names, tables};
use super::quantity::Dimension;
use super::syntax::printable;
use crate::section::Action;

const KEYS: &[&str] = &["name", "N", "Vx", "Vy", "at", "Mx", "My", "T", "B", "Tw"];
/// The keys of section forces.
const FORCES: &[&str] = &["N", "Vx", "Vy", "Mx", "My", "T", "B", "Tw"];

/// An action as far as it could be read.
pub(super) struct Read {
    /// Its name, which combinations may use whatever else is wrong.
    pub(super) name: String,
    /// The action, if it is without fault.
    pub(super) action: Option<Action>,
}

/// All actions in the order of the file; `None` if `value` is no list of tables.
pub(super) fn read_all(
    reader: &mut Reader,
    value: &Value<'_>,
    names: &mut Names,
) -> Option<Vec<Read>> {
    let list = tables(reader, value, "action")?;
    list.iter()
        .enumerate()
        .map(|(i, value)| read(reader, value, i, names))
        .collect()
}

fn read(reader: &mut Reader, value: &Value<'_>, index: usize, names: &mut Names) -> Option<Read> {
    let fields = Fields::open(reader, value, "an action", KEYS)?;
    let (name, head) = names.of(reader, &fields, index);
    let forces = forces(reader, &fields);
    let at = match fields.get("at") {
        None => Some(None),
        Some(value) => reader.point(value, "the line of action `at`").map(Some),
    };
    let told = |keys: &[&str]| {
        keys.iter()
            .any(|key| fields.get(key).is_some() || fields.is_misspelt(key))
    };
    if let Some(range) = fields.key_span("at").filter(|_| !told(&["Vx", "Vy"])) {
        reader.faults.push(Fault::at(
            range,
            "of which force?",
            format!(
                "action \"{}\" has a line of action `at` but no shear force",
                printable(&name)
            ),
            "give Vx or Vy, which act along lines through `at`, or remove it; N acts at the centroid \
             (elsewhere it adds Mx and My), T turns about the shear centre",
        ));
    }
    if !told(FORCES) || forces == Some(SectionForces::default()) && !misspelt(&fields) {
        reader.faults.push(Fault::at(
            head,
            "no force",
            format!("action \"{}\" has no force at all", printable(&name)),
            "give at least one of N, Vx, Vy, Mx, My, T, B and Tw that is not zero, or remove the action",
        ));
    }
    let action = forces.zip(at).map(|(forces, at)| Action {
        name: name.clone(),
        forces,
        at,
    });
    Some(Read { name, action })
}

fn misspelt(fields: &Fields<'_>) -> bool {
    FORCES.iter().any(|key| fields.is_misspelt(key))
}

fn forces(reader: &mut Reader, fields: &Fields<'_>) -> Option<SectionForces> {
    let mut amount = |key, what, dimension| match fields.get(key) {
        None => Some(0.0),
        Some(value) => reader.action(value, what, dimension),
    };
    let n = amount("N", "the axial force N", Dimension::Force);
    let vx = amount("Vx", "the shear force Vx", Dimension::Force);
    let vy = amount("Vy", "the shear force Vy", Dimension::Force);
    let mx = amount("Mx", "the bending moment Mx", Dimension::Moment);
    let my = amount("My", "the bending moment My", Dimension::Moment);
    let t = amount("T", "the torque T", Dimension::Moment);
    let b = amount("B", "the bimoment B", Dimension::Bimoment);
    let tw = amount("Tw", "the warping torque Tw", Dimension::Moment);
    Some(SectionForces {
        n: n?,
        vx: vx?,
        vy: vy?,
        mx: mx?,
        my: my?,
        t: t?,
        b: b?,
        tw: tw?,
    })
}
