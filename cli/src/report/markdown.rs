//! A report as Markdown.

use super::document::{Block, Row, Table};

/// The text of a list of blocks.
#[must_use]
pub fn text(blocks: &[Block]) -> String {
    let mut out = String::new();
    for (i, block) in blocks.iter().enumerate() {
        match block {
            Block::Heading(text) => {
                let mark = if i == 0 { "#" } else { "##" };
                out.push_str(&format!("{mark} {}\n\n", plain(text)));
            }
            Block::Text(text) => out.push_str(&format!("{}\n\n", plain(text))),
            Block::Caution(text) => out.push_str(&format!("> **{}**\n\n", plain(text))),
            Block::List(items) => {
                for item in items {
                    out.push_str(&format!("- {}\n", plain(item)));
                }
                out.push('\n');
            }
            Block::Table(t) => table(&mut out, t),
            Block::Figure(figure) => {
                let caption = plain(&figure.caption);
                out.push_str(&format!("![{caption}]({})\n\n", figure.file));
            }
            Block::Verbatim(text) => {
                // A fence longer than any run of ticks in the text.
                let longest = text.split(|c| c != '`').map(str::len).max().unwrap_or(0);
                let fence = "`".repeat(longest.max(2) + 1);
                out.push_str(&format!("{fence}toml\n{}\n{fence}\n\n", text.trim_end()));
            }
            Block::Sheet => {}
            Block::Signatures => {
                out.push_str("Prepared: ____________________  Date: ____________\n\n");
                out.push_str("Checked: ____________________  Date: ____________\n\n");
            }
        }
    }
    out.truncate(out.trim_end().len());
    out.push('\n');
    out
}

fn table(out: &mut String, table: &Table) {
    if !table.caption.is_empty() {
        out.push_str(&format!("{}\n\n", plain(&table.caption)));
    }
    let line = |cells: Vec<String>| format!("| {} |\n", cells.join(" | "));
    let name = |c: &&str| plain(c.trim_start_matches('#'));
    out.push_str(&line(table.columns.iter().map(name).collect()));
    let rule = |c: &&str| if c.starts_with('#') { "---:" } else { "---" };
    out.push_str(&line(
        table.columns.iter().map(|c| rule(c).to_owned()).collect(),
    ));
    for row in &table.rows {
        match row {
            Row::Group(text) => {
                let mut cells = vec![String::new(); table.columns.len()];
                cells[0] = format!("**{}**", plain(text));
                out.push_str(&line(cells));
            }
            Row::Cells(cells) => out.push_str(&line(cells.iter().map(|c| plain(c)).collect())),
        }
    }
    out.push('\n');
}

/// Text of which nothing is taken for a mark.
fn plain(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        if matches!(c, '|' | '*' | '_' | '`' | '<' | '[' | ']' | '\\' | '#') {
            out.push('\\');
        }
        out.push(if c == '\n' { ' ' } else { c });
    }
    out
}
