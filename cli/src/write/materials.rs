//! What several materials bear: `materials.csv`, and what a table's heading says of the reference.

use sectile_solver::material::Material;
use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::measure::Measure;

use super::CAUTION;
use super::actions::{Table, extreme_cells};
use super::digits;
use crate::response::{Names, Responses};
use crate::section::Units;

/// The columns of `materials.csv`.
pub const MATERIALS: [&str; 13] = [
    "action", "kind", "material", "quantity", "value", "unit", "x", "y", "piece", "sigma", "tau_x",
    "tau_y", "remark",
];

/// What the moduli of the properties refer to, as a sentence.
#[must_use]
pub fn referred(units: &Units, reference: &Material) -> String {
    let tidy = |x: f64| digits::short(x, 6);
    format!(
        "Moduli over those of {}, E = {} {}, G = {} {}.",
        reference.name,
        tidy(reference.young),
        units.stress,
        tidy(reference.shear),
        units.stress
    )
}

/// One row a measure for each material under every action and combination, then those of the envelope,
/// whose `action` governs. The caution is the last row.
#[must_use]
pub fn csv(units: &Units, names: &Names, responses: &Responses) -> String {
    let mut table = Table::new(&MATERIALS);
    for response in &responses.list {
        let kind = if response.combination {
            "combination"
        } else {
            "action"
        };
        for (material, extremes) in &response.materials {
            for (measure, extreme) in &extremes.0 {
                let heads = [response.name.as_str(), kind, names.material(*material)];
                table.row(row(units, names, heads, *measure, extreme));
            }
        }
    }
    for (material, envelope) in &responses.materials {
        for (measure, index, extreme) in envelope {
            let action = responses.list.get(*index).map_or("", |r| r.name.as_str());
            let heads = [action, "envelope", names.material(*material)];
            table.row(row(units, names, heads, *measure, extreme));
        }
    }
    let mut last: [String; MATERIALS.len()] = Default::default();
    last[0] = "caution".into();
    last[MATERIALS.len() - 1] = CAUTION.into();
    table.row(last);
    table.text()
}

/// `heads`: action, kind, material.
fn row(
    units: &Units,
    names: &Names,
    heads: [&str; 3],
    measure: Measure,
    extreme: &Extreme,
) -> [String; MATERIALS.len()] {
    let [action, kind, material] = heads.map(String::from);
    let [quantity, value, unit, x, y, piece, sigma, tau_x, tau_y] =
        extreme_cells(units, names, measure, extreme);
    [
        action,
        kind,
        material,
        quantity,
        value,
        unit,
        x,
        y,
        piece,
        sigma,
        tau_x,
        tau_y,
        String::new(),
    ]
}
