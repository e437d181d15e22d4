//! What all tables of the terminal have in common.

use comfy_table::{ContentArrangement, Table, presets};

use super::Look;

/// A table without rules that keeps to the width.
pub fn plain(look: Look) -> Table {
    let mut table = Table::new();
    table
        .load_style(presets::NOTHING)
        .set_content_arrangement(ContentArrangement::Dynamic)
        .set_width(look.width);
    if look.styled {
        table.enforce_styling();
    } else {
        table.force_no_tty();
    }
    table
}

/// A text that must not break: non-breaking spaces hold its words together while columns are laid out.
pub fn unbroken(text: &str) -> String {
    text.replace(' ', "\u{a0}")
}

/// The lines, with plain spaces again, as readers want them.
pub fn lines(table: &Table) -> Vec<String> {
    table
        .lines()
        .map(|line| line.replace('\u{a0}', " ").trim_end().to_string())
        .collect()
}
