//! The section of the table on materials: the extremes in each alone.

use sectile_solver::stress::measure::Measure;

use super::columns::{columns, place, short};
use super::{Look, bold, wrap};
use crate::response::{Names, Responses};
use crate::section::Units;
use crate::write::units::stress_per_force;
use crate::write::wording;

/// The measures that are told; materials.csv has all.
const TOLD: [Measure; 5] = [
    Measure::SigmaMax,
    Measure::SigmaMin,
    Measure::Tau,
    Measure::VonMises,
    Measure::Utilisation,
];

/// The lines on materials, each ended by a line break; empty where there is only one.
#[must_use]
pub fn render(units: &Units, names: &Names, responses: &Responses, look: Look) -> String {
    if responses.materials.is_empty() {
        return String::new();
    }
    let look = Look {
        width: look.width.max(72),
        ..look
    };
    let several = responses.list.len() > 1;
    let mut heads = vec![
        ("material", String::new()),
        ("", String::new()),
        ("value", units.stress.into()),
        ("at", units.length.into()),
        ("piece", String::new()),
    ];
    if several {
        heads.push(("from", String::new()));
    }
    let mut rows: Vec<Vec<String>> = Vec::new();
    for (material, envelope) in &responses.materials {
        let told = envelope.iter().filter(|(m, _, _)| TOLD.contains(m));
        for (k, (measure, index, extreme)) in told.enumerate() {
            let factor = match measure {
                Measure::Utilisation => 1.0,
                _ => stress_per_force(units),
            };
            let name = if k == 0 {
                names.material(*material)
            } else {
                ""
            };
            let mut row = vec![
                name.to_string(),
                wording::measure(*measure).to_string(),
                short(extreme.value * factor),
                place(extreme),
                names.piece(extreme.piece).to_string(),
            ];
            if several {
                let from = responses.list.get(*index);
                row.push(from.map_or(String::new(), |r| r.name.clone()));
            }
            rows.push(row);
        }
    }
    let numbers: Vec<bool> = heads.iter().map(|(head, _)| *head == "value").collect();
    let mut lines = vec![bold("Materials", look.styled)];
    lines.extend(columns(&heads, &rows, &numbers, look));
    lines.push(String::new());
    let text = "Each material by itself: where two meet, the stress on its own side. Utilisation is of \
                its own yield stress by von Mises, which says little of concrete, timber and all else that \
                fails in another way.";
    lines.extend(wrap(text, usize::from(look.width), "  "));
    let mut text = lines.join("\n");
    text.push('\n');
    text
}
