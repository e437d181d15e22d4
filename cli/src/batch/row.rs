//! A row of cells, as CSV and as a JSON object on a line.

use serde_json::Value;

use crate::write::json::number;

/// One cell.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Cell {
    /// Nothing: a figure that does not apply, or no error.
    Empty,
    /// A text on one line.
    Text(String),
    /// A number, written with the fewest digits that read back to the same double.
    Number(String),
    /// True or false.
    Flag(bool),
}

impl Cell {
    /// A text; line breaks and control characters become blanks, so that a row is a line.
    #[must_use]
    pub fn text(text: &str) -> Self {
        let clean: String = text
            .chars()
            .map(|c| if c.is_control() { ' ' } else { c })
            .collect();
        if clean.is_empty() {
            Self::Empty
        } else {
            Self::Text(clean)
        }
    }

    /// A number; nothing where it is not finite.
    #[must_use]
    pub fn number(value: f64) -> Self {
        if value.is_finite() {
            Self::Number(number(value))
        } else {
            Self::Empty
        }
    }

    /// As CSV has it, before quoting.
    #[must_use]
    pub fn plain(&self) -> &str {
        match self {
            Self::Empty => "",
            Self::Text(text) | Self::Number(text) => text,
            Self::Flag(true) => "true",
            Self::Flag(false) => "false",
        }
    }
}

/// How rows are written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    /// Comma-separated, heads in the first line.
    Csv,
    /// A JSON object a line, keyed by the heads.
    JsonLines,
}

impl Format {
    /// The line of the heads, if the format has one.
    #[must_use]
    pub fn head(self, heads: &[String]) -> String {
        match self {
            Self::Csv => csv_line(heads.iter().map(String::as_str)),
            Self::JsonLines => String::new(),
        }
    }

    /// The line of a row, with its line break.
    #[must_use]
    pub fn line(self, heads: &[String], row: &[Cell]) -> String {
        match self {
            Self::Csv => csv_line(row.iter().map(Cell::plain)),
            Self::JsonLines => {
                let quoted = |text: &str| Value::from(text).to_string();
                let entries: Vec<String> = heads
                    .iter()
                    .zip(row)
                    .map(|(head, cell)| {
                        let value = match cell {
                            Cell::Empty => "null".into(),
                            Cell::Text(text) => quoted(text),
                            other => other.plain().to_owned(),
                        };
                        format!("{}:{value}", quoted(head))
                    })
                    .collect();
                format!("{{{}}}\n", entries.join(","))
            }
        }
    }

    /// The cells of whole lines under the heads, as plain texts; `None` at the first line that is none
    /// of ours.
    #[must_use]
    pub fn read(self, heads: &[String], text: &str) -> Option<Vec<Vec<String>>> {
        match self {
            Self::Csv => {
                let mut reader = ::csv::Reader::from_reader(text.as_bytes());
                if !reader.headers().ok()?.iter().eq(heads) {
                    return None;
                }
                reader
                    .records()
                    .map(|record| Some(record.ok()?.iter().map(String::from).collect()))
                    .collect()
            }
            Self::JsonLines => text
                .lines()
                .map(|line| {
                    let Ok(Value::Object(object)) = serde_json::from_str(line) else {
                        return None;
                    };
                    if object.len() != heads.len() {
                        return None;
                    }
                    let cell = |head: &String| {
                        Some(match object.get(head)? {
                            Value::Null => String::new(),
                            Value::String(text) => text.clone(),
                            Value::Number(value) => number(value.as_f64()?),
                            other => other.to_string(),
                        })
                    };
                    heads.iter().map(cell).collect()
                })
                .collect(),
        }
    }
}

fn csv_line<'a>(cells: impl Iterator<Item = &'a str>) -> String {
    let mut writer = ::csv::Writer::from_writer(Vec::new());
    // Writing to memory does not fail.
    let _ = writer.write_record(cells);
    let bytes = writer.into_inner().unwrap_or_default();
    String::from_utf8(bytes).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_read_back_as_they_were_written() {
        let heads: Vec<String> = ["file", "area", "reached", "error"]
            .map(String::from)
            .into();
        let row = [
            Cell::text("a \"b\", c\nd"),
            Cell::number(0.1 + 0.2),
            Cell::Flag(true),
            Cell::Empty,
        ];
        for format in [Format::Csv, Format::JsonLines] {
            let mut text = format.head(&heads);
            text.push_str(&format.line(&heads, &row));
            text.push_str(&format.line(&heads, &row));
            let rows = format.read(&heads, &text).expect("our own");
            assert_eq!(rows.len(), 2);
            assert_eq!(rows[1], ["a \"b\", c d", "0.30000000000000004", "true", ""]);
            let mut other = heads.clone();
            other[1] = "perimeter".into();
            assert_eq!(format.read(&other, &text), None);
        }
    }
}
