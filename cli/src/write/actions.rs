//! Responses as CSV: `stresses.csv`, `cut-<cut>-<action>.csv`. UTF-8 without a
//! byte-order mark, lines ended by `\n`; stresses in the file's unit of stress, positions in its unit
//! of length. File names: see [`super::slug`].

use sectile_solver::stress::cut::CutResult;
use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::state::Stress;

use super::json::number;
use super::units::{moment_per_force, stress_per_force};
use super::{CAUTION, cause};
use crate::response::{Names, Response, Responses};
use crate::section::Units;

/// The columns of `stresses.csv`.
pub const STRESSES: [&str; 13] = [
    "action",
    "kind",
    "quantity",
    "value",
    "unit",
    "x",
    "y",
    "piece",
    "sigma",
    "tau_x",
    "tau_y",
    "mainly_from",
    "remark",
];
/// The columns of `cut-<cut>-<action>.csv`.
pub const CUT: [&str; 13] = [
    "run",
    "piece",
    "distance",
    "x",
    "y",
    "sigma",
    "tau_x",
    "tau_y",
    "tau_normal",
    "tau",
    "von_mises",
    "principal_1",
    "principal_3",
];

/// One row a measure of every action and combination, then those of the envelope, whose `action`
/// governs; torque, load factor and error of each action as rows without a place. The caution is the
/// last row.
#[must_use]
pub fn stresses_csv(units: &Units, names: &Names, responses: &Responses) -> String {
    let mut table = Table::new(&STRESSES);
    for response in &responses.list {
        let kind = if response.combination {
            "combination"
        } else {
            "action"
        };
        for (measure, extreme) in &response.extremes.0 {
            table.row(extreme_row(
                units,
                names,
                &response.name,
                kind,
                *measure,
                extreme,
            ));
        }
        for (quantity, value, unit) in summary(units, response) {
            let mut row: [String; 13] = Default::default();
            row[0] = response.name.clone();
            row[1] = kind.into();
            row[2] = quantity.into();
            row[3] = number(value);
            row[4] = unit;
            table.row(row);
        }
    }
    for (measure, index, extreme) in &responses.envelope {
        let name = responses.list.get(*index).map_or("", |r| r.name.as_str());
        let row = extreme_row(units, names, name, "envelope", *measure, extreme);
        table.row(row);
    }
    let mut last: [String; 13] = Default::default();
    last[0] = "caution".into();
    last[12] = CAUTION.into();
    table.row(last);
    table.text()
}

fn summary(units: &Units, response: &Response) -> Vec<(&'static str, f64, String)> {
    let moment = moment_per_force(units);
    let mut rows = vec![
        ("torque", response.torque * moment, units.moment.clone()),
        (
            "offset_torque",
            response.offset_torque * moment,
            units.moment.clone(),
        ),
    ];
    if let Some(factor) = response.load_factor {
        rows.push(("load_factor_to_yield", factor, String::new()));
    }
    if let Some(factor) = response.plastic_factor {
        rows.push(("plastic_load_factor", factor, String::new()));
    }
    rows.push(("energy_error", response.energy_error, String::new()));
    rows
}

fn extreme_row(
    units: &Units,
    names: &Names,
    action: &str,
    kind: &str,
    measure: Measure,
    extreme: &Extreme,
) -> [String; 13] {
    let [quantity, value, unit, x, y, piece, sigma, tau_x, tau_y] =
        extreme_cells(units, names, measure, extreme);
    let cause = cause::main(measure, extreme).map_or(String::new(), |c| c.part.into());
    [
        action.into(),
        kind.into(),
        quantity,
        value,
        unit,
        x,
        y,
        piece,
        sigma,
        tau_x,
        tau_y,
        cause,
        String::new(),
    ]
}

/// What every table tells of an extreme: its measure, value and unit, where it is, and the stress there.
pub(super) fn extreme_cells(
    units: &Units,
    names: &Names,
    measure: Measure,
    extreme: &Extreme,
) -> [String; 9] {
    let factor = stress_per_force(units);
    let (value, unit) = match measure {
        Measure::Utilisation => (extreme.value, ""),
        _ => (extreme.value * factor, units.stress),
    };
    [
        measure.key().into(),
        number(value),
        unit.into(),
        number(extreme.at.x),
        number(extreme.at.y),
        names.piece(extreme.piece).into(),
        number(extreme.stress.sigma * factor),
        number(extreme.stress.tau.x * factor),
        number(extreme.stress.tau.y * factor),
    ]
}

/// The stresses along a cut, stretch by stretch (`run`, from 0). `tau_normal` is the shear stress
/// across the cut, positive to the right of its direction.
#[must_use]
pub fn cut_csv(units: &Units, names: &Names, cut: &CutResult) -> String {
    let mut table = Table::new(&CUT);
    let factor = stress_per_force(units);
    for (run, samples) in cut.runs.iter().enumerate() {
        for sample in samples {
            let s = scaled(&sample.stress, factor);
            let [first, third] = s.principal();
            table.row([
                run.to_string(),
                names.piece(sample.piece).into(),
                number(sample.distance),
                number(sample.at.x),
                number(sample.at.y),
                number(s.sigma),
                number(s.tau.x),
                number(s.tau.y),
                number(sample.normal_shear * factor),
                number(s.shear()),
                number(s.von_mises()),
                number(first),
                number(third),
            ]);
        }
    }
    table.text()
}

/// The extreme that governs a response: the utilisation where there is one, else von Mises.
#[must_use]
pub fn governing(response: &Response) -> Option<(Measure, &Extreme)> {
    [Measure::Utilisation, Measure::VonMises]
        .into_iter()
        .find_map(|m| response.extremes.get(m).map(|e| (m, e)))
}

/// The responses with the greatest governing values, in the order of the file.
#[must_use]
pub fn worst(responses: &Responses, most: usize) -> Vec<usize> {
    let value = |i: usize| governing(&responses.list[i]).map_or(0.0, |(_, e)| e.value);
    let mut order: Vec<usize> = (0..responses.list.len()).collect();
    order.sort_by(|&a, &b| value(b).total_cmp(&value(a)).then(a.cmp(&b)));
    order.truncate(most);
    order.sort_unstable();
    order
}

/// A stress in other units.
#[must_use]
pub fn scaled(stress: &Stress, factor: f64) -> Stress {
    Stress {
        sigma: stress.sigma * factor,
        tau: stress.tau * factor,
    }
}

/// Rows of equal length in memory.
pub(super) struct Table(::csv::Writer<Vec<u8>>);

impl Table {
    pub(super) fn new(columns: &[&str]) -> Self {
        let mut writer = ::csv::Writer::from_writer(Vec::new());
        // Writing to memory fails only for rows of unequal length, and these are arrays.
        let _ = writer.write_record(columns);
        Self(writer)
    }

    pub(super) fn row<const N: usize>(&mut self, row: [String; N]) {
        let _ = self.0.write_record(row);
    }

    pub(super) fn text(self) -> String {
        String::from_utf8(self.0.into_inner().unwrap_or_default()).unwrap_or_default()
    }
}

#[cfg(test)]
pub(crate) mod tests;
