//! The section of the table on seams: what each has to transfer, its stress and what it needs.

use sectile_solver::seam::demand::Demand;

use super::columns::{columns, short};
use super::{Look, bold, wrap};
use crate::response::{Names, Responses};
use crate::section::Units;
use crate::write::seams::{needs, remarks, unit_of_flow};
use crate::write::units::stress_per_force;

/// More rows than these are told by the action that asks most of each seam.
const MOST: usize = 24;

/// The lines on seams, each ended by a line break; empty where there are none.
#[must_use]
pub fn render(units: &Units, names: &Names, responses: &Responses, look: Look) -> String {
    let look = Look {
        width: look.width.max(72),
        ..look
    };
    let seams = responses.seams.len();
    if seams == 0 {
        return String::new();
    }
    let all = seams * responses.list.len();
    let mut shown: Vec<(usize, usize)> = Vec::new();
    for (seam, &hardest) in responses.seams.iter().enumerate() {
        if all <= MOST {
            shown.extend((0..responses.list.len()).map(|response| (seam, response)));
        } else {
            shown.push((seam, hardest));
        }
    }
    let mut lines = vec![bold("Seams", look.styled)];
    lines.extend(demands(units, names, responses, &shown, look));
    let width = usize::from(look.width);
    if shown.len() < all {
        let text = "Each seam under the action that asks most of it; seams.csv has all.";
        lines.extend(wrap(text, width, "  "));
    }
    lines.push(String::new());
    lines.extend(wrap(LEGEND, width, "  "));
    for text in remarks(names) {
        lines.extend(wrap(text, width, "  "));
    }
    let mut text = lines.join("\n");
    text.push('\n');
    text
}

const LEGEND: &str = "flow: from the first piece that the seam names to the second, per length of the bar. \
    resultant: of flow and line load, per length of weld. stress: on the throat. used: stress over \
    allowable. needs: the size at which that is 1.";

/// A row for each pair of a seam and a response.
fn demands(
    units: &Units,
    names: &Names,
    responses: &Responses,
    shown: &[(usize, usize)],
    look: Look,
) -> Vec<String> {
    let judged = names.joints().any(|(_, stated)| stated.allowable.is_some());
    let flow = unit_of_flow(units);
    let mut heads = vec![
        ("seam", String::new()),
        ("action", String::new()),
        ("flow", flow.clone()),
        ("resultant", flow),
    ];
    heads.push(("throat", units.length.into()));
    heads.push(("stress", units.stress.into()));
    if judged {
        heads.push(("used", String::new()));
        heads.push(("needs", units.length.into()));
    }
    let row = |&(seam, response): &(usize, usize)| {
        let made = names.seams.get(seam)?;
        let response = responses.list.get(response)?;
        let demand: &Demand = response.seams.get(seam)?;
        let mut row = vec![
            made.name.clone(),
            response.name.clone(),
            short(demand.flow),
            short(demand.resultant),
        ];
        row.push(short(made.throat_length));
        row.push(short(demand.stress * stress_per_force(units)));
        if judged {
            row.push(demand.utilisation.map_or("–".into(), short));
            row.push(needs(demand));
        }
        Some(row)
    };
    let rows: Vec<Vec<String>> = shown.iter().filter_map(row).collect();
    let numbers: Vec<bool> = heads
        .iter()
        .map(|(head, _)| !matches!(*head, "seam" | "action" | "needs"))
        .collect();
    columns(&heads, &rows, &numbers, look)
}
