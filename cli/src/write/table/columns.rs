//! Small tables of names and numbers within the width of the terminal.

use comfy_table::{Attribute, Cell, CellAlignment, ColumnConstraint, Width};

use sectile_solver::stress::extreme::Extreme;

use super::layout::{lines, plain, unbroken};
use super::{Look, style};
use crate::write::digits;

/// Heads of columns whose texts may break.
const NAMES: &[&str] = &["", "cut", "action", "from", "piece", "seam", "material"];

/// The lines of a table: heads with their units below, then rows; `numbers` says which columns are set
/// to the right. A first column without a head holds names, as do those of [`NAMES`].
pub fn columns(
    heads: &[(&str, String)],
    rows: &[Vec<String>],
    numbers: &[bool],
    look: Look,
) -> Vec<String> {
    let mut table = plain(look);
    let head = |text: &str| style(Cell::new(unbroken(text)), Attribute::Dim, look);
    let indent = |h: &str| {
        if h == heads[0].0 {
            format!("  {h}")
        } else {
            h.into()
        }
    };
    table.add_row(
        heads
            .iter()
            .map(|(h, _)| head(&indent(h)))
            .collect::<Vec<_>>(),
    );
    if heads.iter().any(|(_, unit)| !unit.is_empty()) {
        table.add_row(heads.iter().map(|(_, unit)| head(unit)).collect::<Vec<_>>());
    }
    // Names may break; whatever is a number may not.
    let free = |i: usize| NAMES.contains(&heads[i].0);
    for row in rows {
        let cells = row.iter().enumerate().map(|(i, text)| {
            let text = if i == 0 {
                format!("\u{a0}\u{a0}{text}")
            } else {
                text.clone()
            };
            Cell::new(if free(i) { text } else { unbroken(&text) })
        });
        table.add_row(cells.collect::<Vec<_>>());
    }
    let last = heads.len() - 1;
    for (i, column) in table.column_iter_mut().enumerate() {
        column.set_cell_alignment(if numbers[i] {
            CellAlignment::Right
        } else {
            CellAlignment::Left
        });
        let gap = if look.width < 80 { 1 } else { 2 };
        column.set_padding((0, if i == last { 0 } else { gap }));
        column.set_constraint(if free(i) {
            ColumnConstraint::LowerBoundary(Width::Fixed(10))
        } else {
            ColumnConstraint::ContentWidth
        });
    }
    lines(&table)
}

/// A number to four digits.
pub fn short(x: f64) -> String {
    digits::short(x, 4).replace('−', "-")
}

/// Where an extreme is.
pub fn place(extreme: &Extreme) -> String {
    format!("({}, {})", short(extreme.at.x), short(extreme.at.y))
}
