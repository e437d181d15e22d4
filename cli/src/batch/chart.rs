//! The chart of a sweep's rows.

use sectile_solver::quantity::Quantity;

use super::columns::{Columns, FIRST};
use super::job::Input;
use crate::figure::PRINT_WIDTH;
use crate::figure::chart::{self, Axis, Curve, Plot, Sample};
use crate::read::vary::Vary;
use crate::section::Units;
use crate::write::units::pretty;
use crate::write::wording;

/// The SVG of properties against the first value that the sweep of `input` varies, with a curve for
/// each value of the second; `rows` are those of the sweep, in order, as plain texts.
///
/// # Errors
/// There is nothing to draw.
pub fn draw(
    input: &Input,
    columns: &Columns,
    rows: &[Vec<String>],
    properties: &[Quantity],
) -> Result<String, String> {
    let nothing = || "no chart was drawn: no section of the sweep was answered".to_owned();
    let first = input.sweep.first().ok_or_else(nothing)?;
    let second = input.sweep.get(1);
    let across = second.map_or(1, |vary| vary.values.len());
    let cell = |row: usize, head: &str| -> Option<&str> {
        let text = rows.get(row)?.get(columns.place(head)?)?;
        (!text.is_empty()).then_some(text.as_str())
    };
    let answered = (0..rows.len())
        .find(|&row| cell(row, "length_unit").is_some())
        .ok_or_else(nothing)?;
    let units = units(
        cell(answered, "length_unit").unwrap_or_default(),
        cell(answered, "force_unit").unwrap_or_default(),
        cell(answered, "moment_unit").unwrap_or_default(),
    );
    let (axis, order) = axis(first);
    let plots: Vec<Plot> = properties
        .iter()
        .map(|&property| {
            let sample = |row: usize| {
                let number = |suffix: &str| {
                    cell(row, &format!("{}{suffix}", property.key()))?
                        .parse::<f64>()
                        .ok()
                };
                let value = number("")?;
                Some(Sample {
                    value,
                    low: number("_low").unwrap_or(value),
                    high: number("_high").unwrap_or(value),
                })
            };
            let unit = pretty(property.dimension(), &units);
            Plot {
                caption: format!(
                    "{}, {}{}{unit}",
                    wording::name(property),
                    property.symbol(),
                    if unit.is_empty() { "" } else { " in " }
                ),
                curves: (0..across)
                    .map(|k| Curve {
                        name: second.map_or_else(String::new, |vary| told(vary, k)),
                        samples: order.iter().map(|&i| sample(i * across + k)).collect(),
                    })
                    .collect(),
            }
        })
        .collect();
    let subtitle = match second {
        None => format!("Against {}.", first.key),
        Some(second) => format!(
            "Against {}; a curve for each value of {}.",
            first.key, second.key
        ),
    };
    let title = cell(answered, FIRST[2]).unwrap_or_default();
    let caption = match (&axis, &first.unit) {
        (Axis::Numbers(_), Some(unit)) => format!("{} ({unit})", first.key),
        _ => first.key.clone(),
    };
    let figure = chart::draw(
        "Sweep",
        title,
        &subtitle,
        (&caption, &axis),
        &plots,
        PRINT_WIDTH,
    );
    Ok(figure.svg)
}

/// The axis, and the values of the sweep in its order.
fn axis(vary: &Vary) -> (Axis, Vec<usize>) {
    let mut order: Vec<usize> = (0..vary.values.len()).collect();
    let numbers: Option<Vec<f64>> = vary.values.iter().map(|value| value.number).collect();
    match numbers {
        Some(numbers) => {
            order.sort_by(|&i, &j| numbers[i].total_cmp(&numbers[j]));
            let sorted = order.iter().map(|&i| numbers[i]).collect();
            (Axis::Numbers(sorted), order)
        }
        None => {
            let words = vary.values.iter().map(|value| value.label.clone());
            (Axis::Words(words.collect()), order)
        }
    }
}

/// What a curve is told by.
fn told(vary: &Vary, value: usize) -> String {
    vary.values
        .get(value)
        .map_or_else(String::new, |setting| setting.label.clone())
}

/// Units for captions from the columns of a row.
fn units(length: &str, force: &str, moment: &str) -> Units {
    let known = |units: &'static [&'static str], name: &str, other: &'static str| {
        units
            .iter()
            .copied()
            .find(|unit| *unit == name)
            .unwrap_or(other)
    };
    Units {
        length: known(crate::read::quantity::LENGTHS, length, "mm"),
        force: known(crate::read::quantity::FORCES, force, "kN"),
        moment: moment.into(),
        stress: "MPa",
    }
}
