//! The section of the table on actions: what governs each, where, from what, and how far from yield.

use sectile_solver::solution::Solution;
use sectile_solver::stress::extreme::Extreme;
use sectile_solver::stress::measure::Measure;

use super::columns::{columns, place, short};
use super::{Look, bold, wrap};
use crate::response::{Names, Response, Responses};
use crate::section::Units;
use crate::write::digits;
use crate::write::units::{moment_per_force, stress_per_force};
use crate::write::{actions, cause, wording};

/// More responses than these are told by the worst ones.
const MOST: usize = 24;

/// The lines on actions, each ended by a line break; empty where there are none.
#[must_use]
pub fn render(
    units: &Units,
    names: &Names,
    solution: &Solution,
    responses: &Responses,
    look: Look,
) -> String {
    if responses.list.is_empty() {
        return String::new();
    }
    let look = Look {
        width: look.width.max(72),
        ..look
    };
    let width = usize::from(look.width);
    let shown = actions::worst(responses, MOST);
    let mut lines = vec![bold("Actions", look.styled)];
    lines.extend(governing_table(units, names, responses, &shown, look));
    if shown.len() < responses.list.len() {
        let text = format!(
            "The {} that govern of {}; stresses.csv has all.",
            shown.len(),
            responses.list.len()
        );
        lines.extend(wrap(&text, width, "  "));
    }
    if responses.list.len() > 1 {
        lines.push(String::new());
        lines.push(bold("Envelope", look.styled));
        lines.extend(envelope_table(units, names, responses, look));
    }
    lines.extend(crossings(units, names, responses, &shown, look));
    lines.push(String::new());
    lines.extend(wrap(LEGEND, width, "  "));
    if responses.list.iter().any(|r| r.plastic_factor.is_some()) {
        lines.extend(wrap(PLASTIC, width, "  "));
    }
    if !solution.corners.is_empty() {
        let text = format!(
            "Extremes keep off sharp re-entrant corners, where linear-elastic stress has no limit, by {} \
             of the wall there.",
            digits::short(responses.exclusion, 3)
        );
        lines.extend(wrap(&text, width, "  "));
    }
    let mut text = lines.join("\n");
    text.push('\n');
    text
}

const LEGEND: &str = "mostly: the part of the action with the largest share of the stress. torque: about \
    the shear centre, that of the line of action included. yield ×: first yield at this multiple of the \
    action. error: of the shear field in energy, guaranteed.";
const PLASTIC: &str = "plastic ×: N, Mx and My of the action make the whole section yield at this multiple; \
    its shear, torsion and bimoment are no part of it, nor are buckling and strain hardening.";

fn governing_table(
    units: &Units,
    names: &Names,
    responses: &Responses,
    shown: &[usize],
    look: Look,
) -> Vec<String> {
    let pieces = names.pieces.len() > 1;
    let used = responses.list.iter().any(|r| r.load_factor.is_some());
    let mut heads = vec![("", String::new()), ("von Mises", units.stress.into())];
    heads.push(("at", units.length.into()));
    if pieces {
        heads.push(("piece", String::new()));
    }
    heads.push(("mostly", String::new()));
    heads.push(("torque", units.moment.clone()));
    if used {
        heads.push(("yield ×", String::new()));
    }
    let plastic = responses.list.iter().any(|r| r.plastic_factor.is_some());
    if plastic {
        heads.push(("plastic ×", String::new()));
    }
    heads.push(("error", String::new()));
    let rows: Vec<Vec<String>> = shown
        .iter()
        .map(|&i| governing_row(units, names, &responses.list[i], pieces, used, plastic))
        .collect();
    let numbers: Vec<bool> = heads
        .iter()
        .map(|(h, _)| {
            matches!(
                *h,
                "von Mises" | "torque" | "yield ×" | "plastic ×" | "error"
            )
        })
        .collect();
    columns(&heads, &rows, &numbers, look)
}

fn governing_row(
    units: &Units,
    names: &Names,
    response: &Response,
    pieces: bool,
    used: bool,
    plastic: bool,
) -> Vec<String> {
    let mut row = vec![response.name.clone()];
    match actions::governing(response) {
        Some((measure, extreme)) => {
            let stress = extreme.stress.von_mises() * stress_per_force(units);
            row.extend([short(stress), place(extreme)]);
            if pieces {
                row.push(names.piece(extreme.piece).into());
            }
            row.push(mostly(measure, extreme));
        }
        None => row.extend(vec!["–".to_string(); 3 + usize::from(pieces)]),
    }
    row.push(short(response.torque * moment_per_force(units)));
    if used {
        row.push(response.load_factor.map_or("–".into(), short));
    }
    if plastic {
        row.push(response.plastic_factor.map_or("–".into(), short));
    }
    row.push(digits::percent_up(response.energy_error));
    row
}

fn envelope_table(units: &Units, names: &Names, responses: &Responses, look: Look) -> Vec<String> {
    let pieces = names.pieces.len() > 1;
    let mut heads = vec![("", String::new()), ("value", units.stress.into())];
    heads.push(("at", units.length.into()));
    if pieces {
        heads.push(("piece", String::new()));
    }
    heads.push(("mostly", String::new()));
    heads.push(("from", String::new()));
    let rows: Vec<Vec<String>> = responses
        .envelope
        .iter()
        .map(|(measure, index, extreme)| {
            let factor = match measure {
                Measure::Utilisation => 1.0,
                _ => stress_per_force(units),
            };
            let mut row = vec![wording::measure(*measure).to_string()];
            row.extend([short(extreme.value * factor), place(extreme)]);
            if pieces {
                row.push(names.piece(extreme.piece).into());
            }
            row.push(mostly(*measure, extreme));
            row.push(
                responses
                    .list
                    .get(*index)
                    .map_or(String::new(), |r| r.name.clone()),
            );
            row
        })
        .collect();
    let numbers: Vec<bool> = heads.iter().map(|(h, _)| *h == "value").collect();
    columns(&heads, &rows, &numbers, look)
}

/// So much of a section's stress is lost in rounding where parts of it cancel.
const ROUNDING: f64 = 1e-7;

/// What crosses the cuts, by cut and action.
fn crossings(
    units: &Units,
    names: &Names,
    responses: &Responses,
    shown: &[usize],
    look: Look,
) -> Vec<String> {
    let flow = format!("{}/{}", units.force, units.length);
    let heads = vec![
        ("cut", String::new()),
        ("action", String::new()),
        ("shear flow", flow.clone()),
        ("normal", flow),
    ];
    let mut rows = Vec::new();
    for (c, cut) in names.cuts.iter().enumerate() {
        for &i in shown {
            let response = &responses.list[i];
            let stress = response.extremes.get(Measure::VonMises);
            for (_, result) in response.cuts.iter().filter(|(index, _)| *index == c) {
                // What is rounding beside the stresses of the section is nothing.
                let least = ROUNDING * result.material * stress.map_or(0.0, |e| e.value);
                let tidy = |x: f64| short(if x.abs() > least { x } else { 0.0 });
                rows.push(vec![
                    cut.name.clone(),
                    response.name.clone(),
                    tidy(result.shear_flow),
                    tidy(result.normal_force),
                ]);
            }
        }
    }
    if rows.is_empty() {
        return Vec::new();
    }
    let mut lines = vec![String::new(), bold("Cuts", look.styled)];
    lines.extend(columns(&heads, &rows, &[false, false, true, true], look));
    lines
}

fn mostly(measure: Measure, extreme: &Extreme) -> String {
    cause::main(measure, extreme).map_or("–".into(), |c| {
        format!("{} {:.0} %", c.part, 100.0 * c.share)
    })
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;
    use crate::write::actions::tests::Sample;

    #[test]
    fn every_action_with_its_figures_within_the_width() {
        let sample = Sample::new();
        for width in [72, 80, 120] {
            let look = Look {
                width,
                styled: false,
            };
            let text = render(
                &sample.units,
                &sample.names(),
                &sample.solution,
                &sample.responses,
                look,
            );
            for line in text.lines() {
                assert!(
                    line.chars().count() <= usize::from(width),
                    "{width}: {line}"
                );
            }
            for word in ["Actions", "Envelope", "Cuts", "pull", "von Mises", "kN/mm"] {
                assert!(text.contains(word), "{word}\n{text}");
            }
            assert!(!text.contains('\u{a0}') && !text.contains('\u{1b}'));
        }
    }

    #[test]
    fn many_actions_are_told_by_the_worst() {
        let mut sample = Sample::new();
        let one = sample.responses.list[0].clone();
        for i in 0..40 {
            let mut more = one.clone();
            more.name = format!("more {i}");
            sample.responses.list.push(more);
        }
        let text = render(
            &sample.units,
            &sample.names(),
            &sample.solution,
            &sample.responses,
            Look {
                width: 100,
                styled: false,
            },
        );
        assert!(text.contains("The 24 that govern of"), "{text}");
    }
}
