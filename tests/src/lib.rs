//! Helpers of the whole-program tests.

use std::path::{Path, PathBuf};

use sectile_mesh::outline::piece::{Outline, Ring};

/// The section files of a folder beside this crate's manifest, in the order of their names.
///
/// # Panics
/// If the folder cannot be read: then there is nothing to test.
#[must_use]
pub fn section_files(folder: &str) -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join(folder);
    let mut files: Vec<PathBuf> = std::fs::read_dir(&folder)
        .and_then(Iterator::collect::<Result<Vec<_>, _>>)
        .unwrap_or_else(|error| panic!("{}: {error}", folder.display()))
        .into_iter()
        .map(|entry| entry.path())
        .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
        .collect();
    files.sort();
    files
}

/// The file's name without its folders, so that messages do not depend on the machine.
#[must_use]
pub fn file_name(path: &Path) -> &str {
    path.file_name()
        .and_then(|name| name.to_str())
        .unwrap_or_default()
}

/// The area inside a ring, whatever its sense: the polygon of its ends (shoelace) and the circular
/// segment `R² (s − sin s)/2` of each arc of signed sweep s.
#[must_use]
pub fn ring_area(ring: &Ring) -> f64 {
    let signed: f64 = ring
        .sides
        .iter()
        .map(|side| {
            let chord = 0.5 * (side.from.x * side.to.y - side.to.x * side.from.y);
            let segment = side.arc.map_or(0.0, |arc| {
                0.5 * arc.circle.radius.powi(2) * (arc.sweep - arc.sweep.sin())
            });
            chord + segment
        })
        .sum();
    signed.abs()
}

/// The area of an outline without its holes.
#[must_use]
pub fn outline_area(outline: &Outline) -> f64 {
    ring_area(&outline.outer) - outline.holes.iter().map(ring_area).sum::<f64>()
}
