//! A report as one HTML file: style, scripts, figures and data inside, nothing fetched.

use std::fmt::Write;

use base64::Engine;
use base64::engine::general_purpose::STANDARD;

use super::document::{Block, Figure, Row, Table};
use super::sheet;
use super::{Input, STATE};
use crate::digest::sha256;

const STYLE: &str = include_str!("style.css");
/// In the order in which they build on each other.
const SCRIPTS: [&str; 4] = [
    include_str!("sheet/field.js"),
    include_str!("sheet/picture.js"),
    include_str!("sheet/line.js"),
    include_str!("sheet/sheet.js"),
];

/// The page of a list of blocks.
#[must_use]
pub fn page(input: &Input, blocks: &[Block]) -> String {
    let mut out = String::new();
    let _ = write!(
        out,
        "<!doctype html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <meta name=\"color-scheme\" content=\"light dark\">\n<title>{}</title>\n\
         <style>\n{STYLE}</style>\n</head>\n<body>\n<main>\n",
        escape(&input.section.title)
    );
    let data = sheet::data(input);
    for (i, block) in blocks.iter().enumerate() {
        match block {
            Block::Heading(text) => {
                let level = if i == 0 { "h1" } else { "h2" };
                let _ = writeln!(out, "<{level}>{}</{level}>", escape(text));
            }
            Block::Text(text) => {
                let _ = writeln!(out, "<p>{}</p>", escape(text));
            }
            Block::Caution(text) => {
                let _ = writeln!(out, "<p class=\"caution\">{}</p>", escape(text));
            }
            Block::List(items) => {
                out.push_str("<ul>\n");
                for item in items {
                    let _ = writeln!(out, "<li>{}</li>", escape(item));
                }
                out.push_str("</ul>\n");
            }
            Block::Table(t) => table(&mut out, t),
            Block::Figure(f) => figure(&mut out, f),
            Block::Verbatim(text) => {
                let _ = writeln!(out, "<pre>{}</pre>", escape(text.trim_end()));
            }
            Block::Sheet => {
                if data.is_some() {
                    out.push_str(include_str!("sheet/sheet.html"));
                }
            }
            Block::Signatures => out.push_str(
                "<dl class=\"signatures\"><div><dt>Prepared</dt><dd></dd></div><div><dt>Date</dt>\
                 <dd></dd></div><div><dt>Checked</dt><dd></dd></div><div><dt>Date</dt><dd></dd></div>\
                 </dl>\n",
            ),
        }
    }
    out.push_str("</main>\n");
    if let Some(data) = data {
        // "</" would end the script.
        let data = data.replace("</", "<\\/");
        let _ = writeln!(
            out,
            "<script type=\"application/json\" id=\"sheet-data\">{data}</script>"
        );
        let _ = writeln!(out, "<script>\n{}</script>", SCRIPTS.concat());
    }
    if input.watched {
        let stamp = sha256(input.text.as_bytes());
        let watch = include_str!("sheet/watch.js");
        let _ = writeln!(
            out,
            "<script>\nconst STAMP = \"{stamp}\";\nconst STATE = \"{STATE}\";\n{watch}</script>"
        );
    }
    out.push_str("</body>\n</html>\n");
    out
}

fn table(out: &mut String, table: &Table) {
    out.push_str("<div class=\"wide\"><table>\n");
    if !table.caption.is_empty() {
        let _ = writeln!(out, "<caption>{}</caption>", escape(&table.caption));
    }
    let class = |c: &str| {
        if c.starts_with('#') {
            " class=\"number\""
        } else {
            ""
        }
    };
    out.push_str("<thead><tr>");
    for c in &table.columns {
        let name = escape(c.trim_start_matches('#'));
        let _ = write!(out, "<th scope=\"col\"{}>{name}</th>", class(c));
    }
    out.push_str("</tr></thead>\n<tbody>\n");
    for row in &table.rows {
        match row {
            Row::Group(text) => {
                let span = table.columns.len();
                let text = escape(text);
                let _ = writeln!(
                    out,
                    "<tr class=\"group\"><th scope=\"rowgroup\" colspan=\"{span}\">{text}</th></tr>"
                );
            }
            Row::Cells(cells) => {
                out.push_str("<tr>");
                for (cell, c) in cells.iter().zip(&table.columns) {
                    let _ = write!(out, "<td{}>{}</td>", class(c), escape(cell));
                }
                out.push_str("</tr>\n");
            }
        }
    }
    out.push_str("</tbody>\n</table></div>\n");
}

/// As an image of its own: names inside of one SVG cannot meet those of another.
fn figure(out: &mut String, figure: &Figure) {
    let caption = escape(&figure.caption);
    let data = STANDARD.encode(&figure.svg);
    let class = if is_tall(&figure.svg) {
        " class=\"tall\""
    } else {
        ""
    };
    let _ = writeln!(
        out,
        "<figure{class}><img alt=\"{caption}\" src=\"data:image/svg+xml;base64,{data}\">\
         <figcaption>{caption}</figcaption></figure>"
    );
}

/// Whether a figure is so high that it needs a printed page for itself.
fn is_tall(svg: &str) -> bool {
    let view = svg.split_once("viewBox=\"").map_or("", |(_, rest)| rest);
    let mut numbers = view.split(['"', ' ']).skip(2).map(str::parse::<f64>);
    match (numbers.next(), numbers.next()) {
        (Some(Ok(width)), Some(Ok(height))) => height > 1.3 * width,
        _ => false,
    }
}

/// Text as the content of an element or an attribute.
fn escape(text: &str) -> String {
    text.replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
}
