//! The text of the section file.

use std::fmt::Write;

use sectile_mesh::Point;

use super::Traced;
use super::drawing::Drawing;
use super::format::Format;
use super::loops::{Loop, along, middle};
use super::nest::Piece;
use super::number::{decimals, fixed};
use super::report::Report;

/// An arc that sweeps more than this, radians, is written as two.
const HALF_TURN: f64 = std::f64::consts::PI * (1.0 - 1e-9);

/// The section file of `pieces`, traced from the drawing called `name`.
#[must_use]
pub fn section_file(
    name: &str,
    format: Format,
    drawing: &Drawing,
    pieces: &[Piece],
    report: &Report,
    size: f64,
) -> Traced {
    let remarks = report.sentences(drawing);
    let digits = decimals(size);
    let mut text = String::new();
    let title = name.rsplit_once('.').map_or(name, |(stem, _)| stem);
    // Writing into a string cannot fail.
    let _ = writeln!(text, "# Traced from {} ({format}).", plain(name));
    for remark in &remarks {
        for line in wrapped(&plain(remark)) {
            let _ = writeln!(text, "# {line}");
        }
    }
    let _ = writeln!(
        text,
        "# Compare the figure of the section with the drawing before using it."
    );
    let _ = writeln!(text, "title = {}", quoted(title));
    let _ = writeln!(text, "\n[units]\nlength = \"{}\"", drawing.unit);
    text.push_str(
        "\n# A drawing states no material: without one, Poisson's ratio is taken as 0.3, and there is no\n\
         # mass, stiffness or utilisation. State yours here, with its name after the dot:\n\
         # [material.steel]\n# E = \"210 GPa\"\n# nu = 0.3\n# yield = \"355 MPa\"\n# density = \"7850 kg/m3\"\n",
    );
    for piece in pieces {
        let _ = write!(
            text,
            "\n[[piece]]\nname = {}\noutline = ",
            quoted(&piece.name)
        );
        write_loop(&mut text, &piece.outline, digits, "");
        text.push('\n');
        if !piece.holes.is_empty() {
            text.push_str("holes = [\n");
            for hole in &piece.holes {
                text.push_str("    ");
                write_loop(&mut text, hole, digits, "    ");
                text.push_str(",\n");
            }
            text.push_str("]\n");
        }
    }
    Traced { text, remarks }
}

fn write_loop(text: &mut String, ring: &Loop, digits: usize, indent: &str) {
    let pair = |p: Point| format!("[{}, {}]", fixed(p.x, digits), fixed(p.y, digits));
    if let [side] = ring.sides.as_slice()
        && let Some(arc) = side.arc
    {
        let _ = write!(
            text,
            "{{ circle = {{ at = {}, d = {} }} }}",
            pair(arc.circle.centre),
            fixed(2.0 * arc.circle.radius, digits)
        );
        return;
    }
    text.push_str("[\n");
    for side in &ring.sides {
        match side.arc {
            None => {
                let _ = writeln!(text, "{indent}    {},", pair(side.to));
            }
            Some(arc) => {
                let halves: &[(f64, f64)] = if arc.sweep.abs() > HALF_TURN {
                    &[(0.25, 0.5), (0.75, 1.0)]
                } else {
                    &[(0.5, 1.0)]
                };
                for &(via, to) in halves {
                    let via = if via == 0.5 {
                        middle(side)
                    } else {
                        along(side, via)
                    };
                    let to = if to == 1.0 { side.to } else { along(side, to) };
                    let _ = writeln!(
                        text,
                        "{indent}    {{ at = {}, via = {} }},",
                        pair(to),
                        pair(via)
                    );
                }
            }
        }
    }
    let _ = write!(text, "{indent}]");
}

/// A text in quotation marks.
fn quoted(text: &str) -> String {
    let mut out = String::from("\"");
    for c in plain(text).chars() {
        if matches!(c, '"' | '\\') {
            out.push('\\');
        }
        out.push(c);
    }
    out.push('"');
    out
}

/// One line without characters that cannot be seen.
fn plain(text: &str) -> String {
    text.chars()
        .map(|c| {
            if crate::read::excerpt::hidden(c) {
                '·'
            } else {
                c
            }
        })
        .collect()
}

/// Lines of a comment.
fn wrapped(text: &str) -> Vec<String> {
    let mut lines: Vec<String> = vec![String::new()];
    for word in text.split(' ') {
        let line = lines.last().map_or(0, |l| l.chars().count());
        if line > 0 && line + 1 + word.chars().count() > 100 {
            lines.push(format!("  {word}"));
        } else if let Some(last) = lines.last_mut() {
            if line > 0 {
                last.push(' ');
            }
            last.push_str(word);
        }
    }
    lines
}
