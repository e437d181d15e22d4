//! Corners as comma-separated values: x, y, and perhaps a third column that tells loops apart.

use csv::ReaderBuilder;
use sectile_mesh::Point;

use super::Options;
use super::drawing::{Drawing, Path};
use crate::read::fault::Fault;

/// Faults of a file that is none are told up to this number.
const MOST_FAULTS: usize = 20;

/// A loop that is being read: the line of its first corner, what the third column says, its corners.
struct Loop {
    line: usize,
    name: String,
    corners: Vec<Point>,
}

/// Reads corners. A blank line, or another text in the third column, starts a new loop. The first line
/// may be a heading; `;` and tabs separate too, with `;` a comma may be the decimal sign.
///
/// # Errors
/// Every line that is no corner, and every loop of fewer than three.
pub fn read(text: &str, options: &Options) -> Result<Drawing, Vec<Fault>> {
    let delimiter = delimiter(text);
    let mut drawing = Drawing::stating_none(
        options.units,
        "which is assumed: corners state no unit (--units)",
    );
    let layer = drawing.layer("");
    let mut faults = Vec::new();
    let mut loops: Vec<Loop> = Vec::new();
    let mut anew = true;
    for (index, line) in text.lines().enumerate() {
        if faults.len() == MOST_FAULTS {
            break;
        }
        let blank = line.trim_matches(|c: char| c.is_whitespace() || c == delimiter as char);
        if blank.is_empty() {
            anew = true;
            continue;
        }
        if line.trim_start().starts_with('#') {
            continue;
        }
        let fields = match fields(line, delimiter) {
            Ok(fields) => fields,
            Err(message) => {
                faults.push(fault(index, &message));
                continue;
            }
        };
        let name = fields
            .get(2)
            .map(|name| name.trim().to_owned())
            .unwrap_or_default();
        match corner(&fields, delimiter, options.scale) {
            Ok(p) => {
                match loops.last_mut() {
                    Some(last) if !anew && last.name == name => last.corners.push(p),
                    _ => loops.push(Loop {
                        line: index + 1,
                        name,
                        corners: vec![p],
                    }),
                }
                anew = false;
            }
            // A heading has no number at all.
            Err(_) if loops.is_empty() && faults.is_empty() && heading(&fields, delimiter) => {}
            Err(message) => faults.push(fault(index, &message)),
        }
    }
    for Loop { line, corners, .. } in &loops {
        let n = corners.len() - usize::from(corners.len() > 1 && corners.first() == corners.last());
        if n < 3 && faults.len() < MOST_FAULTS {
            faults.push(Fault::whole(
                format!("the loop from line {line} on has {n} corners"),
                "a loop needs at least three; a blank line starts a new one",
            ));
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    drawing.paths = loops
        .iter()
        .map(|l| Path::polygon(layer, l.line, &l.corners))
        .collect();
    Ok(drawing)
}

fn delimiter(text: &str) -> u8 {
    let has = |c: char| text.lines().take(50).any(|line| line.contains(c));
    if has(';') {
        b';'
    } else if has('\t') && !has(',') {
        b'\t'
    } else {
        b','
    }
}

fn fields(line: &str, delimiter: u8) -> Result<Vec<String>, String> {
    let mut reader = ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(delimiter)
        .from_reader(line.as_bytes());
    match reader.records().next() {
        Some(Ok(record)) => Ok(record.iter().map(ToOwned::to_owned).collect()),
        Some(Err(error)) => Err(error.to_string()),
        None => Ok(Vec::new()),
    }
}

fn number(field: &str, delimiter: u8) -> Option<f64> {
    let field = field.trim();
    let value = if delimiter == b';' && !field.contains('.') {
        field.replacen(',', ".", 1).parse::<f64>()
    } else {
        field.parse::<f64>()
    };
    value.ok().filter(|value| value.is_finite())
}

fn corner(fields: &[String], delimiter: u8, scale: f64) -> Result<Point, String> {
    let [x, y, ..] = fields else {
        return Err("has one column; a corner is x, y".to_owned());
    };
    if fields.len() > 3 && fields[3..].iter().any(|field| !field.trim().is_empty()) {
        return Err(format!(
            "has {} columns; a corner is x, y and perhaps the name of its loop",
            fields.len()
        ));
    }
    match (number(x, delimiter), number(y, delimiter)) {
        (Some(x), Some(y)) => Ok(Point::new(x * scale, y * scale)),
        (None, _) => Err(format!("has \"{}\" where x should be", shown(x))),
        (_, None) => Err(format!("has \"{}\" where y should be", shown(y))),
    }
}

fn heading(fields: &[String], delimiter: u8) -> bool {
    fields
        .iter()
        .all(|field| number(field, delimiter).is_none())
}

fn shown(field: &str) -> String {
    field.trim().chars().take(30).collect()
}

fn fault(index: usize, message: &str) -> Fault {
    Fault::whole(
        format!("line {} {message}", index + 1),
        "write one corner a line, as 12.5, 40",
    )
}
