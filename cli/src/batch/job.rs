//! Which sections: files in the order given, each as often as its sweep has points.

use std::path::{Path, PathBuf};

use crate::digest::sha256;
use crate::read::fault::Faults;
use crate::read::file::name_of;
use crate::read::text_from_path;
use crate::read::vary::{self, Vary};

/// One file, as far as it was read before the work begins.
#[derive(Clone, Debug)]
pub struct Input {
    /// Where it is.
    pub path: PathBuf,
    /// Its name as it was given, in rows and messages.
    pub name: String,
    /// SHA-256 of its bytes in hexadecimal digits; empty where it cannot be read.
    pub hash: String,
    /// Its sweep.
    pub sweep: Vec<Vary>,
    /// Its text, kept for a sweep only; other files are read again when their turn comes.
    pub text: Option<String>,
    /// Why nothing of it can be answered.
    pub refused: Option<String>,
}

/// One section: the file as it stands, or a point of its sweep.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Job {
    /// Which file.
    pub input: usize,
    /// Which point.
    pub point: usize,
}

/// The files that the arguments name: a folder stands for its `*.section.toml` in the order of their
/// names.
///
/// # Errors
/// A folder cannot be listed, or has none.
pub fn files(arguments: &[PathBuf]) -> Result<Vec<PathBuf>, String> {
    let mut files = Vec::new();
    for path in arguments {
        if !path.is_dir() {
            files.push(path.clone());
            continue;
        }
        let listed = std::fs::read_dir(path)
            .and_then(|entries| {
                entries
                    .map(|entry| Ok(entry?.path()))
                    .collect::<std::io::Result<Vec<PathBuf>>>()
            })
            .map_err(|error| format!("the folder {} cannot be listed: {error}", name_of(path)))?;
        let mut own: Vec<PathBuf> = listed
            .into_iter()
            .filter(|file| file.to_string_lossy().ends_with(".section.toml") && !file.is_dir())
            .collect();
        if own.is_empty() {
            return Err(format!(
                "the folder {} has no *.section.toml; folders in it are not searched",
                name_of(path)
            ));
        }
        own.sort();
        files.extend(own);
    }
    Ok(files)
}

/// A file looked at before the work begins.
#[must_use]
pub fn input(path: &Path) -> Input {
    let mut input = Input {
        path: path.to_path_buf(),
        name: name_of(path),
        hash: String::new(),
        sweep: Vec::new(),
        text: None,
        refused: None,
    };
    match text_from_path(path) {
        Err(faults) => input.refused = Some(first_message(&faults)),
        Ok((name, text)) => {
            input.hash = sha256(text.as_bytes());
            match vary::sweep(&name, &text) {
                Err(faults) => input.refused = Some(first_message(&faults)),
                Ok(sweep) if !sweep.is_empty() => {
                    input.sweep = sweep;
                    input.text = Some(text);
                }
                Ok(_) => {}
            }
        }
    }
    input
}

/// All sections in their order.
#[must_use]
pub fn jobs(inputs: &[Input]) -> Vec<Job> {
    let points = |(input, of): (usize, &Input)| {
        (0..vary::points(&of.sweep)).map(move |point| Job { input, point })
    };
    inputs.iter().enumerate().flat_map(points).collect()
}

/// The first fault of a file with its line, on one line; and how many more there are.
#[must_use]
pub fn first_message(faults: &Faults) -> String {
    let Some(fault) = faults.faults().first() else {
        return "the file cannot be read".into();
    };
    let mut text = match faults.line(fault) {
        Some(line) => format!("line {line}: {}", fault.message),
        None => fault.message.clone(),
    };
    match faults.faults().len() {
        0 | 1 => {}
        2 => text.push_str(" (and 1 more fault)"),
        n => text.push_str(&format!(" (and {} more faults)", n - 1)),
    }
    text
}
