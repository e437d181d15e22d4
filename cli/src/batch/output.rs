//! Where the rows go: standard output, or a file that grows by whole rows.
//!
//! Each row is one write of one line at the end of the file, so that a process that is ended at any
//! moment leaves whole rows and at most one that is cut off, which is removed on going on. Rows are
//! in the order of the sections: those that are there are the first ones.

use std::fs::{File, OpenOptions};
use std::io::{self, ErrorKind, Write, stdout};
use std::path::Path;

use super::columns::{Columns, FIRST};
use super::row::{Cell, Format};
use crate::read::file::name_of;

/// What to do with a file that exists.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Existing {
    /// Refuse.
    Keep,
    /// Go on after its last whole row.
    Resume,
    /// Begin anew.
    Replace,
}

/// An open output.
#[derive(Debug)]
pub struct Output {
    file: Option<File>,
    format: Format,
    heads: Vec<String>,
}

/// The format that a file's ending asks for.
///
/// # Errors
/// It is neither `.csv` nor `.jsonl`.
pub fn format(path: &Path) -> Result<Format, String> {
    match path.extension().and_then(|ending| ending.to_str()) {
        Some("csv") => Ok(Format::Csv),
        Some("jsonl") => Ok(Format::JsonLines),
        _ => Err(format!(
            "the name of the output {} must end in .csv or .jsonl (a JSON object a line)",
            name_of(path)
        )),
    }
}

impl Output {
    /// Standard output, as CSV.
    #[must_use]
    pub fn standard(columns: &Columns) -> Self {
        let output = Self {
            file: None,
            format: Format::Csv,
            heads: columns.heads(),
        };
        // A reader that closed the pipe is met with the first row.
        let _ = stdout().write_all(output.format.head(&output.heads).as_bytes());
        output
    }

    /// The file at `path` and the rows that it has already, as plain texts.
    ///
    /// # Errors
    /// It exists and is to be kept, has other columns or is no file of rows, or the system refuses.
    pub fn open(
        path: &Path,
        columns: &Columns,
        existing: Existing,
    ) -> Result<(Self, Vec<Vec<String>>), String> {
        let format = format(path)?;
        let heads = columns.heads();
        let name = name_of(path);
        let refused = |error: io::Error| format!("{name} could not be written: {error}");
        let mut options = OpenOptions::new();
        options.append(true);
        let (mut file, rows) = match existing {
            Existing::Keep => match options.create_new(true).open(path) {
                Ok(file) => (file, Vec::new()),
                Err(error) if error.kind() == ErrorKind::AlreadyExists => {
                    return Err(format!(
                        "{name} exists already and was left as it is; --resume goes on with it, \
                         --force begins it anew"
                    ));
                }
                Err(error) => return Err(refused(error)),
            },
            Existing::Replace => {
                let file = options.create(true).open(path).map_err(refused)?;
                file.set_len(0).map_err(refused)?;
                (file, Vec::new())
            }
            Existing::Resume => {
                let (whole, rows) = found(path, format, &heads)?;
                let file = options.create(true).open(path).map_err(refused)?;
                file.set_len(whole as u64).map_err(refused)?;
                (file, rows)
            }
        };
        if file.metadata().map_err(refused)?.len() == 0 {
            file.write_all(format.head(&heads).as_bytes())
                .map_err(refused)?;
        }
        let output = Self {
            file: Some(file),
            format,
            heads,
        };
        Ok((output, rows))
    }

    /// Appends a row, whole.
    ///
    /// # Errors
    /// The system refuses.
    pub fn write(&mut self, row: &[Cell]) -> io::Result<()> {
        let line = self.format.line(&self.heads, row);
        match &mut self.file {
            Some(file) => file.write_all(line.as_bytes()),
            None => {
                let mut out = stdout();
                out.write_all(line.as_bytes())?;
                out.flush()
            }
        }
    }
}

/// The whole rows of the file at `path`, none where there is no file.
///
/// # Errors
/// As [`Output::open`] to go on with it.
pub fn rows(path: &Path, columns: &Columns) -> Result<Vec<Vec<String>>, String> {
    found(path, format(path)?, &columns.heads()).map(|(_, rows)| rows)
}

/// The bytes that whole lines take up in the file at `path`, and their rows.
fn found(
    path: &Path,
    format: Format,
    heads: &[String],
) -> Result<(usize, Vec<Vec<String>>), String> {
    let name = name_of(path);
    let bytes = match std::fs::read(path) {
        Ok(bytes) => bytes,
        Err(error) if error.kind() == ErrorKind::NotFound => Vec::new(),
        Err(error) => return Err(format!("{name} could not be read: {error}")),
    };
    let whole = bytes
        .iter()
        .rposition(|&byte| byte == b'\n')
        .map_or(0, |i| i + 1);
    let rows = if whole == 0 {
        // Not even a whole line: the beginning of our first one, or nothing of ours.
        let ours = match format {
            Format::Csv => format.head(heads).into_bytes().starts_with(&bytes),
            Format::JsonLines => bytes.is_empty() || bytes.starts_with(b"{\"file\":"),
        };
        ours.then(Vec::new)
    } else {
        std::str::from_utf8(&bytes[..whole])
            .ok()
            .and_then(|text| format.read(heads, text))
    };
    let rows = rows.ok_or_else(|| {
        format!(
            "{name} cannot be gone on with: it has other columns than are asked for now, or is no \
             file of rows. The columns asked for now are {}. Ask with the same files, --columns and \
             --bounds as before, name another file with --out, or begin it anew with --force",
            heads.join(", ")
        )
    })?;
    Ok((whole, rows))
}

/// Whether rows that are there already are those of the first sections; `keys` are the cells that tell
/// which section each row is of, without the title, and `tolerance` that of every one.
///
/// # Errors
/// The first row that is not: cause and remedy.
pub fn check(
    path: &Path,
    columns: &Columns,
    rows: &[Vec<String>],
    keys: &[Vec<Cell>],
    tolerance: f64,
) -> Result<(), String> {
    let name = name_of(path);
    let remedy = "Give the same files in the same order as before, name another file with --out, \
                  or begin it anew with --force";
    if rows.len() > keys.len() {
        return Err(format!(
            "{name} has {} rows, more than the {} sections asked for now. {remedy}",
            rows.len(),
            keys.len()
        ));
    }
    let tolerance = Cell::number(tolerance);
    let at_tolerance = columns.place("tolerance").unwrap_or_default();
    for (i, (row, key)) in rows.iter().zip(keys).enumerate() {
        let cell = |k: usize| row.get(k).map_or("", String::as_str);
        let row_name = i + 1;
        if cell(0) != key[0].plain() {
            return Err(format!(
                "row {row_name} of {name} is of {}, but section {row_name} is {} now. {remedy}",
                cell(0),
                key[0].plain()
            ));
        }
        if cell(1) != key[1].plain() {
            return Err(format!(
                "row {row_name} of {name} is of {} with another content: the file has changed \
                 since. Name another file with --out, or begin it anew with --force",
                cell(0)
            ));
        }
        if (FIRST.len()..key.len()).any(|k| cell(k) != key[k].plain()) {
            return Err(format!(
                "row {row_name} of {name} is of another point of the sweep of {}. {remedy}",
                cell(0)
            ));
        }
        if cell(at_tolerance) != tolerance.plain() {
            return Err(format!(
                "row {row_name} of {name} was asked for with a tolerance of {}, not {}. Ask with \
                 the same --tolerance, name another file with --out, or begin it anew with --force",
                cell(at_tolerance),
                tolerance.plain()
            ));
        }
    }
    Ok(())
}
