//! Responses as CSV: `stresses.csv`, `field-<action>.csv`, `cut-<cut>-<action>.csv`. UTF-8 without a
//! byte-order mark, lines ended by `\n`; stresses in the file's unit of stress, positions in its unit
//! of length. File names: see [`super::slug`].

use sectile_solver::solution::Solution;
use sectile_solver::stress::cut::CutResult;
use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::field::WeightedPoint;
use sectile_solver::stress::forces::SectionForces;
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
/// The columns of `field-<action>.csv`.
pub const FIELD: [&str; 22] = [
    "triangle",
    "piece",
    "x",
    "y",
    "weight",
    "sigma",
    "tau_x",
    "tau_y",
    "tau",
    "von_mises",
    "tresca",
    "principal_1",
    "principal_3",
    "sigma_axial",
    "sigma_bending",
    "sigma_warping",
    "tau_x_shear",
    "tau_y_shear",
    "tau_x_torsion",
    "tau_y_torsion",
    "tau_x_warping",
    "tau_y_warping",
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
    let factor = stress_per_force(units);
    let (value, unit) = match measure {
        Measure::Utilisation => (extreme.value, ""),
        _ => (extreme.value * factor, units.stress),
    };
    let cause = cause::main(measure, extreme).map_or(String::new(), |c| c.part.into());
    [
        action.into(),
        kind.into(),
        measure.key().into(),
        number(value),
        unit.into(),
        number(extreme.at.x),
        number(extreme.at.y),
        names.piece(extreme.piece).into(),
        number(extreme.stress.sigma * factor),
        number(extreme.stress.tau.x * factor),
        number(extreme.stress.tau.y * factor),
        cause,
        String::new(),
    ]
}

/// The stress at the solver's integration points, to nine digits. `weight` is the point's share of
/// the area: `Σ weight·sigma` is the axial force, `Σ weight·sigma·(y − y_c)` the moment M_x, and so on.
/// Behind the combined stress and its measures come its parts: σ of N, of M_x with M_y and of B, τ of
/// V_x with V_y, of T and of T_w.
#[must_use]
pub fn field_csv(
    units: &Units,
    names: &Names,
    solution: &Solution,
    points: &[WeightedPoint],
    forces: &SectionForces,
) -> String {
    let mut table = Table::new(&FIELD);
    let factor = stress_per_force(units);
    let [n, vx, vy, mx, my, t, b, tw] = forces.parts();
    let (shear, bending) = (vx + vy, mx + my);
    for point in points {
        let under = |f: &SectionForces| scaled(&point.unit.under(f), factor);
        let s = under(forces);
        let [first, third] = s.principal();
        let [by_shear, by_torsion, by_warping] = [shear, t, tw].map(|f| under(&f).tau);
        let numbers = [
            point.at.x,
            point.at.y,
            point.weight,
            s.sigma,
            s.tau.x,
            s.tau.y,
            s.shear(),
            s.von_mises(),
            s.tresca(),
            first,
            third,
            under(&n).sigma,
            under(&bending).sigma,
            under(&b).sigma,
            by_shear.x,
            by_shear.y,
            by_torsion.x,
            by_torsion.y,
            by_warping.x,
            by_warping.y,
        ];
        let piece = solution
            .mesh
            .piece
            .get(point.triangle as usize)
            .map_or("", |&p| names.piece(p));
        let mut row: [String; FIELD.len()] = Default::default();
        row[0] = point.triangle.to_string();
        row[1] = piece.into();
        for (cell, number) in row[2..].iter_mut().zip(numbers) {
            *cell = nine_digits(number);
        }
        table.row(row);
    }
    table.text()
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

fn nine_digits(x: f64) -> String {
    // Through text, so that the rounded number prints as short as it is.
    number(format!("{x:.8e}").parse().unwrap_or(x))
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
