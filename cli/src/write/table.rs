//! The table that `solve` prints: properties grouped as an engineer reads them, each to the digits
//! that its bounds support.

pub mod actions;
mod columns;
mod layout;
pub mod materials;
pub mod seams;

use std::collections::BTreeSet;

use comfy_table::{Attribute, Cell, CellAlignment, Color, ColumnConstraint, Width};

use sectile_solver::figure::Trust;
use sectile_solver::material::Material;
use sectile_solver::quantity::{Group, Quantity};
use sectile_solver::solution::{Note, Solution};

use super::digits::{self, Printed, times_power};
use super::materials::referred;
use super::{CAUTION, units, wording};
use crate::section::Units;

/// How the table is to look.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Look {
    /// Columns of the terminal; below 72 the table is laid out for 72.
    pub width: u16,
    /// Bold headings and dimmed words; off for files, pipes and `NO_COLOR`.
    pub styled: bool,
}

/// The whole text: title, mesh, the material that a section of several refers to, properties by group,
/// what the words promise, findings, caution. It ends in a line break.
#[must_use]
pub fn render(
    title: &str,
    units: &Units,
    solution: &Solution,
    reference: Option<&Material>,
    look: Look,
) -> String {
    let look = Look {
        width: look.width.max(72),
        ..look
    };
    let width = usize::from(look.width);
    let mut lines = wrap(title, width, "")
        .into_iter()
        .map(|line| bold(&line, look.styled))
        .collect::<Vec<_>>();
    lines.extend(wrap(&mesh_line(units, solution), width, ""));
    if let Some(reference) = reference {
        lines.extend(wrap(&referred(units, reference), width, ""));
    }
    lines.push(String::new());
    lines.extend(properties(units, solution, look));
    lines.push(String::new());

    let kinds: BTreeSet<Trust> = solution.properties.iter().map(|(_, f)| f.trust).collect();
    for kind in kinds {
        let text = format!("{}: {}.", wording::trust(kind), wording::promise(kind));
        lines.extend(wrap(&text, width, "  "));
    }
    if solution.get(Quantity::ShearCentreX).is_some() {
        lines.extend(wrap(CENTRES, width, "  "));
    }
    for text in notes(&solution.notes) {
        lines.extend(wrap(&text, width, "  "));
    }
    lines.extend(wrap(CAUTION, width, ""));
    let mut text = lines.join("\n");
    text.push('\n');
    text
}

/// One text for each kind of finding: the first of a kind in full, the places of the others.
fn notes(notes: &[Note]) -> Vec<String> {
    let mut kinds: Vec<&str> = Vec::new();
    for note in notes {
        if !kinds.contains(&note.kind) {
            kinds.push(note.kind);
        }
    }
    let place = |note: &Note| {
        note.at.map(|p| {
            let tidy = |x: f64| digits::short(x, 6).replace('−', "-");
            format!("({}, {})", tidy(p.x), tidy(p.y))
        })
    };
    kinds
        .into_iter()
        .map(|kind| {
            let alike: Vec<&Note> = notes.iter().filter(|n| n.kind == kind).collect();
            let mut text = match place(alike[0]) {
                Some(at) => format!("Note at {at}: {}", alike[0].text),
                None => format!("Note: {}", alike[0].text),
            };
            let others: Vec<String> = alike[1..].iter().filter_map(|n| place(n)).collect();
            if !others.is_empty() {
                let named = others.len().min(MOST_PLACES);
                text.push_str(&format!(" Likewise at {}", others[..named].join(", ")));
                if named < others.len() {
                    text.push_str(&format!(" and {} more places", others.len() - named));
                }
                text.push('.');
            }
            text
        })
        .collect()
}

/// So many places are named for findings that are alike.
const MOST_PLACES: usize = 6;

const CENTRES: &str = "Shear centre: independent of Poisson's ratio; loads refer to it. \
    Flexure centre: no mean rotation under flexure; depends on Poisson's ratio.";

fn mesh_line(units: &Units, solution: &Solution) -> String {
    let unknowns = solution.levels.last().map_or(0, |level| level.unknowns);
    let levels = solution.levels.len();
    format!(
        "Lengths in {}. Mesh: {} triangles of order {}, {} unknowns, {} level{}.",
        units.length,
        solution.mesh.triangles.len(),
        solution.order,
        unknowns,
        levels,
        if levels == 1 { "" } else { "s" },
    )
}

fn properties(units: &Units, solution: &Solution, look: Look) -> Vec<String> {
    let printed: Vec<(Quantity, Trust, Printed)> = solution
        .properties
        .iter()
        .map(|(q, f)| (*q, f.trust, digits::print(f)))
        .collect();
    let values = Column::of(printed.iter().map(|(_, _, p)| p.value.as_str()));
    let halves = Column::of(
        printed
            .iter()
            .filter_map(|(_, _, p)| p.half_width.as_deref()),
    );

    let mut table = layout::plain(look);
    let sign = if look.width < 80 { "±" } else { "± " };
    let mut group: Option<Group> = None;
    for (quantity, trust, p) in &printed {
        if group != Some(quantity.group()) {
            if group.is_some() {
                table.add_row(vec![Cell::new("\u{a0}")]);
            }
            group = Some(quantity.group());
            let heading = Cell::new(wording::heading(quantity.group()));
            table.add_row(vec![style(heading, Attribute::Bold, look)]);
        }
        let half = p
            .half_width
            .as_deref()
            .map(|h| format!("{sign}{}", halves.align(h)))
            .unwrap_or_default();
        let unit = units::pretty(quantity.dimension(), units);
        let unit = match times_power(p.power) {
            power if power.is_empty() => unit,
            power => format!("{power} {unit}"),
        };
        let word = Cell::new(wording::trust(*trust));
        let word = match trust {
            Trust::Estimated if look.styled => word.fg(Color::Yellow),
            _ => style(word, Attribute::Dim, look),
        };
        table.add_row(vec![
            Cell::new(format!("\u{a0}\u{a0}{}", wording::name(*quantity))),
            Cell::new(quantity.symbol()),
            Cell::new(values.align(&p.value)),
            Cell::new(layout::unbroken(&half)),
            Cell::new(layout::unbroken(&unit)),
            word,
        ]);
    }
    for (index, column) in table.column_iter_mut().enumerate() {
        column.set_cell_alignment(CellAlignment::Left);
        let gap = if look.width < 90 { 1 } else { 2 };
        column.set_padding((0, if index == 5 { 0 } else { gap }));
        column.set_constraint(if index == 0 {
            ColumnConstraint::LowerBoundary(Width::Fixed(16))
        } else {
            ColumnConstraint::ContentWidth
        });
    }
    layout::lines(&table)
}

/// Room before and behind the decimal point, so that points stand below one another.
struct Column {
    before: usize,
    behind: usize,
}

impl Column {
    fn of<'a>(texts: impl Iterator<Item = &'a str>) -> Self {
        let (mut before, mut behind) = (0, 0);
        for text in texts {
            let (a, b) = parts(text);
            before = before.max(a);
            behind = behind.max(b);
        }
        Self { before, behind }
    }

    /// The text padded with non-breaking spaces.
    fn align(&self, text: &str) -> String {
        let (a, b) = parts(text);
        let pad = |n: usize| "\u{a0}".repeat(n);
        format!("{}{text}{}", pad(self.before - a), pad(self.behind - b))
    }
}

/// Characters before the decimal point, and from it on.
fn parts(text: &str) -> (usize, usize) {
    let all = text.chars().count();
    let before = text.chars().position(|c| c == '.').unwrap_or(all);
    (before, all - before)
}

fn style(cell: Cell, attribute: Attribute, look: Look) -> Cell {
    if look.styled {
        cell.add_attribute(attribute)
    } else {
        cell
    }
}

fn bold(text: &str, styled: bool) -> String {
    if styled {
        format!("\u{1b}[1m{text}\u{1b}[0m")
    } else {
        text.into()
    }
}

/// Words filled into lines of `width`, later lines after `indent`.
fn wrap(text: &str, width: usize, indent: &str) -> Vec<String> {
    let mut lines = vec![String::new()];
    for word in text.split_whitespace() {
        let line = &lines[lines.len() - 1];
        if !line.trim().is_empty() && line.chars().count() + 1 + word.chars().count() > width {
            lines.push(indent.into());
        }
        let last = lines.len() - 1;
        if !lines[last].trim().is_empty() {
            lines[last].push(' ');
        }
        lines[last].push_str(word);
    }
    lines
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;
    use crate::write::json::tests::{sample_solution, sample_units};

    fn text(width: u16, styled: bool) -> String {
        render(
            "Boatyard hoist runway",
            &sample_units(),
            &sample_solution(),
            None,
            Look { width, styled },
        )
    }

    #[test]
    fn lines_keep_to_the_width() {
        for width in [40, 72, 80, 100, 200] {
            for line in text(width, false).lines() {
                let n = line.chars().count();
                assert!(n <= usize::from(width.max(72)), "{width}: {n} {line}");
            }
        }
    }

    #[test]
    fn plain_text_has_no_escapes_and_styled_text_has() {
        assert!(!text(80, false).contains('\u{1b}'));
        assert!(text(80, true).contains('\u{1b}'));
        assert!(!text(80, false).contains('\u{a0}'));
    }

    #[test]
    fn groups_come_in_reading_order_with_every_property() {
        let text = text(120, false);
        let mut at = 0;
        for heading in ["Geometry", "Bending", "Torsion and warping", "Shear"] {
            let found = text[at..].find(&format!("\n{heading}\n")).unwrap();
            at += found;
        }
        for quantity in Quantity::ALL {
            assert!(text.contains(wording::name(*quantity)), "{quantity:?}");
        }
        assert!(text.ends_with(&format!("{CAUTION}\n")));
        assert!(text.contains("Note at (8, 0): The corner"));
    }

    #[test]
    fn findings_that_are_alike_are_told_once() {
        let note = |kind, text: &str, x| Note {
            kind,
            text: text.into(),
            at: Some(sectile_mesh::Point::new(x, 1.0)),
        };
        let mut list: Vec<Note> = (0..9)
            .map(|i| note("sharp-corner", "Sharp.", f64::from(i)))
            .collect();
        list.push(Note {
            kind: "separate-parts",
            text: "Two parts.".into(),
            at: None,
        });
        assert_eq!(
            notes(&list),
            [
                "Note at (0, 1): Sharp. Likewise at (1, 1), (2, 1), (3, 1), (4, 1), (5, 1), (6, 1) and \
                 2 more places.",
                "Note: Two parts."
            ]
        );
    }

    #[test]
    fn decimal_points_stand_below_one_another() {
        let text = text(120, false);
        let columns: BTreeSet<usize> = text
            .lines()
            .filter(|line| line.contains('±') && line.contains("bounded"))
            .filter_map(|line| {
                let value = &line[..line.find('±').unwrap()];
                value.rfind('.').map(|at| line[..at].chars().count())
            })
            .collect();
        assert_eq!(columns.len(), 1, "{text}");
    }
}
