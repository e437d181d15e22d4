//! A section file on disk: its bytes, checked before anything is read into them.

use std::fs::File;
use std::io::Read;
use std::path::Path;

use super::excerpt::hidden;
use super::fault::{Fault, Faults};
use super::{ReadSection, section_from_text};

/// Files beyond this size are refused unread; an outline of 100 000 corners takes about 3 MB.
pub const LARGEST_FILE: u64 = 16 << 20;

/// Reads the section file at `path`. Messages name it as `path` is given.
///
/// # Errors
/// Every fault found: of the file itself (missing, a folder, empty, too large, not UTF-8), of its
/// TOML, its entries or its geometry.
pub fn section_from_path(path: &Path) -> Result<ReadSection, Box<Faults>> {
    let (name, text) = text_from_path(path)?;
    section_from_text(&name, &text)
}

/// The name that messages give the section file at `path`, and its text.
///
/// # Errors
/// The file itself is at fault: missing, a folder, too large, not UTF-8.
pub fn text_from_path(path: &Path) -> Result<(String, String), Box<Faults>> {
    let name = name_of(path);
    let text = text_of(path, &name)?;
    Ok((name, text))
}

/// The path as it is given, without what would move a terminal's cursor.
#[must_use]
pub fn name_of(path: &Path) -> String {
    path.display()
        .to_string()
        .chars()
        .map(|c| if hidden(c) { '·' } else { c })
        .collect()
}

fn text_of(path: &Path, name: &str) -> Result<String, Box<Faults>> {
    let whole =
        |message: String, remedy: &str| Faults::new(name, "", vec![Fault::whole(message, remedy)]);
    let unreadable = |error: std::io::Error| match error.kind() {
        std::io::ErrorKind::NotFound => whole(
            format!("there is no file {name}"),
            "check the path; `sectile new` writes a starter file",
        ),
        std::io::ErrorKind::PermissionDenied => whole(
            format!("{name} may not be read"),
            "give yourself the right to read it",
        ),
        std::io::ErrorKind::IsADirectory => folder(name),
        _ => whole(
            format!("{name} cannot be read: {error}"),
            "check the path and the disk",
        ),
    };
    // A folder cannot be opened on every system, so it is asked for first.
    if std::fs::metadata(path).map_err(unreadable)?.is_dir() {
        return Err(folder(name));
    }
    let file = File::open(path).map_err(unreadable)?;
    let size = file.metadata().map_err(unreadable)?.len();
    let too_large = |size: String| {
        whole(
            format!(
                "{name} is {size}; section files up to {} MB are read",
                LARGEST_FILE >> 20
            ),
            "check that it is a section file; a section needs its corners only",
        )
    };
    if size > LARGEST_FILE {
        return Err(too_large(format!("{} MB large", size >> 20)));
    }
    // Pipes have no size beforehand.
    let mut bytes = Vec::with_capacity(size as usize);
    file.take(LARGEST_FILE + 1)
        .read_to_end(&mut bytes)
        .map_err(unreadable)?;
    if bytes.len() as u64 > LARGEST_FILE {
        return Err(too_large("larger than that".to_owned()));
    }
    String::from_utf8(bytes)
        .map_err(|error| not_utf8(name, error.as_bytes(), error.utf8_error().valid_up_to()))
}

fn folder(name: &str) -> Box<Faults> {
    Faults::new(
        name,
        "",
        vec![Fault::whole(
            format!("{name} is a folder"),
            "name a section file in it",
        )],
    )
}

fn not_utf8(name: &str, bytes: &[u8], valid: usize) -> Box<Faults> {
    if bytes.starts_with(&[0xff, 0xfe]) || bytes.starts_with(&[0xfe, 0xff]) {
        return Faults::new(
            name,
            "",
            vec![Fault::whole(
                format!("{name} is UTF-16 text; section files are UTF-8"),
                "save it again with the encoding UTF-8",
            )],
        );
    }
    if bytes.iter().take(1024).any(|byte| *byte == 0) {
        return Faults::new(
            name,
            "",
            vec![Fault::whole(
                format!("{name} is not a text file"),
                "name a section file; those are TOML text in UTF-8",
            )],
        );
    }
    // Up to `valid` the lossy text is the file's own, so the mark falls on the replacement sign.
    let text = String::from_utf8_lossy(bytes);
    Faults::new(
        name,
        &text,
        vec![Fault::at(
            valid..valid + '\u{fffd}'.len_utf8(),
            format!(
                "byte 0x{:02X}",
                bytes.get(valid).copied().unwrap_or_default()
            ),
            "the file is not UTF-8 text",
            "save it again with the encoding UTF-8; an older Windows encoding is the usual cause",
        )],
    )
}
