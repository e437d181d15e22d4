//! Writing an output folder: whole files or none, and never over another section's results.
//!
//! `results.json` says in `source` which section file a folder belongs to, relative to the folder, so
//! that it holds wherever the program is started and after both are moved together.

use std::fs;
use std::io::{self, Write};
use std::path::{Component, Path, PathBuf};
use std::sync::{Mutex, MutexGuard, PoisonError};

/// The file that tells whose folder it is.
pub const RESULTS: &str = "results.json";

/// Temporary files that wait for their place.
static UNFINISHED: Mutex<Vec<PathBuf>> = Mutex::new(Vec::new());

fn unfinished() -> MutexGuard<'static, Vec<PathBuf>> {
    UNFINISHED.lock().unwrap_or_else(PoisonError::into_inner)
}

/// For a process that is about to end early: removes every temporary file. Until the returned guard
/// is dropped none is made and none put in its place, so that of a folder's files all are there or none.
pub fn abandon() -> impl Sized {
    let mut paths = unfinished();
    for path in paths.drain(..) {
        // It may not have been made yet; nothing can be done about others.
        let _ = fs::remove_file(path);
    }
    paths
}

/// Why an output folder was not written.
#[derive(Debug, thiserror::Error)]
pub enum WriteError {
    /// The folder holds results of another section file.
    #[error("the folder {} holds the results of another section file, {owner}; nothing was written. Choose another folder with --out, or remove this one", .folder.display())]
    OtherSection {
        /// The folder.
        folder: PathBuf,
        /// The section file that its results name.
        owner: String,
    },
    /// The folder holds a file of the same name that is not known to be ours.
    #[error("the file {} is in the way and was not written for this section; nothing was written. Choose another folder with --out, or remove the file", .path.display())]
    InTheWay {
        /// The file.
        path: PathBuf,
    },
    /// The system refused.
    #[error("{} could not be {what}: {source}", .path.display())]
    System {
        /// The file or folder.
        path: PathBuf,
        /// `made`, `read`, `written`, `put in its place` or `removed`.
        what: &'static str,
        /// The system's reason.
        source: io::Error,
    },
}

/// What to write as `source` in a folder's `results.json`: the section file relative to the folder,
/// with `/` between names; its absolute path where the two have no common root. The folder need not
/// exist yet.
///
/// # Errors
/// The section file does not exist, or the current folder is unknown.
pub fn source_from(folder: &Path, section_file: &Path) -> Result<String, WriteError> {
    let refused = |path: &Path| {
        let path = path.to_path_buf();
        move |source| WriteError::System {
            path,
            what: "read",
            source,
        }
    };
    let target = section_file.canonicalize().map_err(refused(section_file))?;
    let base = resolve(folder).map_err(refused(folder))?;
    let (target, base): (Vec<_>, Vec<_>) =
        (target.components().collect(), base.components().collect());
    let common = target.iter().zip(&base).take_while(|(a, b)| a == b).count();
    let name = |c: &Component| c.as_os_str().to_string_lossy().into_owned();
    if common == 0 {
        let path: PathBuf = target.iter().collect();
        return Ok(path.to_string_lossy().into_owned());
    }
    let mut parts = vec!["..".to_string(); base.len() - common];
    parts.extend(target[common..].iter().map(name));
    Ok(parts.join("/"))
}

/// The absolute path of a folder of which only the first part may exist.
fn resolve(folder: &Path) -> io::Result<PathBuf> {
    let absolute = std::path::absolute(folder)?;
    let mut tail = Vec::new();
    let mut head = absolute.as_path();
    loop {
        if let Ok(found) = head.canonicalize() {
            let mut path = found;
            path.extend(tail.iter().rev());
            return Ok(path);
        }
        match (head.parent(), head.file_name()) {
            (Some(parent), Some(name)) => {
                tail.push(name.to_os_string());
                head = parent;
            }
            _ => return Ok(absolute),
        }
    }
}

/// Whether a folder may take the results of the section file `source` (as from [`source_from`]):
/// it does not exist, holds none of `names`, or its `results.json` names the same source.
///
/// # Errors
/// It holds another section's results or a file in the way. Ask before solving, not after.
pub fn check(folder: &Path, source: &str, names: &[&str]) -> Result<(), WriteError> {
    let path = folder.join(RESULTS);
    match fs::read(&path) {
        Ok(bytes) => {
            let owner = serde_json::from_slice::<serde_json::Value>(&bytes)
                .ok()
                .and_then(|value| Some(value.get("source")?.as_str()?.to_string()));
            match owner {
                Some(owner) if owner == source => Ok(()),
                Some(owner) => Err(WriteError::OtherSection {
                    folder: folder.to_path_buf(),
                    owner,
                }),
                None => Err(WriteError::InTheWay { path }),
            }
        }
        Err(fault) if fault.kind() == io::ErrorKind::NotFound => {
            let taken = names
                .iter()
                .map(|name| folder.join(name))
                .find(|path| path.exists());
            taken.map_or(Ok(()), |path| Err(WriteError::InTheWay { path }))
        }
        Err(source) => Err(WriteError::System {
            path,
            what: "read",
            source,
        }),
    }
}

/// Files that an earlier answer of the section left in `folder`, as its `results.json` lists them in
/// `files`. Only plain names count, so that whatever stands there nothing outside the folder is meant.
fn earlier(folder: &Path) -> Vec<String> {
    let listed = || -> Option<Vec<String>> {
        let bytes = fs::read(folder.join(RESULTS)).ok()?;
        let value: serde_json::Value = serde_json::from_slice(&bytes).ok()?;
        let files = value.get("files")?.as_array()?;
        let names = files.iter().filter_map(|name| name.as_str());
        Some(names.map(String::from).collect())
    };
    let plain = |name: &String| {
        let mut parts = Path::new(name).components();
        matches!(parts.next(), Some(Component::Normal(part)) if part == name.as_str())
            && parts.next().is_none()
    };
    listed()
        .unwrap_or_default()
        .into_iter()
        .filter(plain)
        .collect()
}

/// Writes the files `(name, text or bytes)` of one section into `folder`, which is made if need be: each to a
/// temporary file beside its place first; only when all are on the disk are they renamed,
/// `results.json` before the others, so that a folder always says whose it is. Files of an earlier answer
/// that this one has not, such as the figures of an action since renamed, are removed.
///
/// # Errors
/// As [`check`]; or the system refused, and the temporary files are removed again.
pub fn write_all<B: AsRef<[u8]>>(
    folder: &Path,
    source: &str,
    files: &[(&str, B)],
) -> Result<(), WriteError> {
    let names: Vec<&str> = files.iter().map(|(name, _)| *name).collect();
    check(folder, source, &names)?;
    fs::create_dir_all(folder).map_err(|source| WriteError::System {
        path: folder.to_path_buf(),
        what: "made",
        source,
    })?;
    let mut order: Vec<&(&str, B)> = files.iter().collect();
    order.sort_by_key(|(name, _)| *name != RESULTS);

    let outdated: Vec<String> = earlier(folder)
        .into_iter()
        .filter(|name| !names.contains(&name.as_str()))
        .collect();

    let mut temporary = Vec::new();
    let outcome = order
        .iter()
        .try_for_each(|(name, content)| {
            let path = temporary_path(&folder.join(name));
            temporary.push(path.clone());
            write_through(&path, content.as_ref())
        })
        .and_then(|()| {
            let mut paths = unfinished();
            order
                .iter()
                .zip(&temporary)
                .try_for_each(|((name, _), path)| put_in_place(path, &folder.join(name)))?;
            paths.retain(|path| !temporary.contains(path));
            outdated
                .iter()
                .try_for_each(|name| discard(&folder.join(name)))
        });
    if outcome.is_err() {
        remove(&temporary);
    }
    outcome
}

/// Removes temporary files after a fault. Those already renamed are gone from their place; nothing else
/// can be done about the rest.
fn remove(temporary: &[PathBuf]) {
    let mut paths = unfinished();
    for path in temporary {
        let _ = fs::remove_file(path);
    }
    paths.retain(|path| !temporary.contains(path));
}

/// Writes one file whole or not at all, replacing what is there.
///
/// # Errors
/// The system refused.
pub fn write(path: &Path, text: &str) -> Result<(), WriteError> {
    let temporary = temporary_path(path);
    let outcome = write_through(&temporary, text.as_bytes()).and_then(|()| {
        let mut paths = unfinished();
        put_in_place(&temporary, path)?;
        paths.retain(|path| *path != temporary);
        Ok(())
    });
    if outcome.is_err() {
        remove(&[temporary]);
    }
    outcome
}

/// A name in the same folder, since a rename is atomic only within one file system.
fn temporary_path(path: &Path) -> PathBuf {
    let name = path.file_name().unwrap_or_default().to_string_lossy();
    path.with_file_name(format!(".{name}.{}.part", std::process::id()))
}

fn write_through(path: &Path, content: &[u8]) -> Result<(), WriteError> {
    let attempt = || {
        let mut file = {
            let mut paths = unfinished();
            paths.push(path.to_path_buf());
            fs::File::create(path)?
        };
        file.write_all(content)
    };
    attempt().map_err(|source| WriteError::System {
        path: path.to_path_buf(),
        what: "written",
        source,
    })
}

fn discard(path: &Path) -> Result<(), WriteError> {
    match fs::remove_file(path) {
        Err(source) if source.kind() != io::ErrorKind::NotFound => Err(WriteError::System {
            path: path.to_path_buf(),
            what: "removed, as the new results have no such file",
            source,
        }),
        _ => Ok(()),
    }
}

fn put_in_place(from: &Path, to: &Path) -> Result<(), WriteError> {
    fs::rename(from, to).map_err(|source| WriteError::System {
        path: to.to_path_buf(),
        what: "put in its place",
        source,
    })
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    /// A fresh folder below the build's own temporary folder, removed at the end.
    struct Scratch(PathBuf);

    impl Scratch {
        fn new(name: &str) -> Self {
            let path =
                std::env::temp_dir().join(format!("sectile-files-{}-{name}", std::process::id()));
            let _ = fs::remove_dir_all(&path);
            fs::create_dir_all(&path).unwrap();
            Self(path.canonicalize().unwrap())
        }
    }

    impl Drop for Scratch {
        fn drop(&mut self) {
            let _ = fs::remove_dir_all(&self.0);
        }
    }

    fn listing(folder: &Path) -> Vec<String> {
        let mut names: Vec<String> = fs::read_dir(folder)
            .unwrap()
            .map(|e| e.unwrap().file_name().to_string_lossy().into_owned())
            .collect();
        names.sort();
        names
    }

    #[test]
    fn source_is_relative_to_a_folder_that_need_not_exist() {
        let scratch = Scratch::new("source");
        let file = scratch.0.join("beam.section.toml");
        fs::write(&file, "").unwrap();
        let source = |folder: &str| source_from(&scratch.0.join(folder), &file).unwrap();
        assert_eq!(source("out"), "../beam.section.toml");
        assert_eq!(source("deep/er"), "../../beam.section.toml");
        assert_eq!(source("."), "beam.section.toml");
        assert!(source_from(&scratch.0, &scratch.0.join("missing")).is_err());
    }

    #[test]
    fn own_results_are_replaced_and_nothing_else_is_left() {
        let scratch = Scratch::new("own");
        let folder = scratch.0.join("out");
        let first = [("section.svg", "old"), (RESULTS, r#"{"source": "a"}"#)];
        write_all(&folder, "a", &first).unwrap();
        let second = [("section.svg", "new"), (RESULTS, r#"{"source": "a"}"#)];
        write_all(&folder, "a", &second).unwrap();
        assert_eq!(listing(&folder), [RESULTS, "section.svg"]);
        assert_eq!(
            fs::read_to_string(folder.join("section.svg")).unwrap(),
            "new"
        );
    }

    #[test]
    fn results_of_another_section_stay_as_they_are() {
        let scratch = Scratch::new("other");
        write_all(&scratch.0, "a", &[(RESULTS, r#"{"source": "a"}"#)]).unwrap();
        let fault = write_all(&scratch.0, "b", &[(RESULTS, r#"{"source": "b"}"#)]).unwrap_err();
        assert!(
            matches!(&fault, WriteError::OtherSection { owner, .. } if owner == "a"),
            "{fault}"
        );
        assert!(fault.to_string().contains("--out"));
        assert_eq!(
            fs::read_to_string(scratch.0.join(RESULTS)).unwrap(),
            r#"{"source": "a"}"#
        );
    }

    #[test]
    fn foreign_files_are_in_the_way() {
        let scratch = Scratch::new("foreign");
        fs::write(scratch.0.join("mesh.svg"), "mine").unwrap();
        let fault = write_all(&scratch.0, "a", &[("mesh.svg", "x"), (RESULTS, "{}")]).unwrap_err();
        assert!(matches!(fault, WriteError::InTheWay { .. }));
        assert_eq!(
            fs::read_to_string(scratch.0.join("mesh.svg")).unwrap(),
            "mine"
        );
        assert_eq!(listing(&scratch.0), ["mesh.svg"]);

        let scratch = Scratch::new("foreign-results");
        fs::write(scratch.0.join(RESULTS), "not json").unwrap();
        let fault = write_all(&scratch.0, "a", &[(RESULTS, "{}")]).unwrap_err();
        assert!(matches!(fault, WriteError::InTheWay { .. }));
    }

    #[test]
    fn a_refused_file_leaves_no_other_behind() {
        let scratch = Scratch::new("refused");
        // A file name with a folder that does not exist cannot be created.
        let files = [(RESULTS, r#"{"source": "a"}"#), ("no/such.svg", "x")];
        let fault = write_all(&scratch.0, "a", &files).unwrap_err();
        assert!(matches!(fault, WriteError::System { .. }));
        assert!(listing(&scratch.0).is_empty());
    }

    #[test]
    fn bytes_are_written_as_they_are() {
        let scratch = Scratch::new("bytes");
        let bytes: Vec<u8> = (0..=255).collect();
        let owner = r#"{"source": "a"}"#.as_bytes().to_vec();
        write_all(
            &scratch.0,
            "a",
            &[("a.png", bytes.clone()), (RESULTS, owner)],
        )
        .unwrap();
        assert_eq!(fs::read(scratch.0.join("a.png")).unwrap(), bytes);
    }

    #[test]
    fn one_file_is_replaced_whole() {
        let scratch = Scratch::new("one");
        let path = scratch.0.join("a.txt");
        write(&path, "one").unwrap();
        write(&path, "two").unwrap();
        assert_eq!(fs::read_to_string(&path).unwrap(), "two");
        assert_eq!(listing(&scratch.0), ["a.txt"]);
    }

    #[test]
    fn files_of_an_earlier_answer_do_not_outlive_it() {
        let scratch = Scratch::new("earlier");
        let out = scratch.0.join("out");
        let outside = scratch.0.join("kept.txt");
        fs::write(&outside, "not ours").unwrap();
        let results = |files: &str| format!("{{\"source\":\"s\",\"files\":[{files}]}}");
        let first = results("\"a.svg\",\"b.svg\",\"results.json\",\"../kept.txt\",\"gone.svg\"");
        let with = |results: String| [(RESULTS, results), ("a.svg", "a".to_string())];
        write_all(&out, "s", &with(first)).unwrap();
        fs::write(out.join("b.svg"), "b").unwrap();
        fs::write(out.join("own.txt"), "the user's").unwrap();
        write_all(&out, "s", &with(results("\"a.svg\""))).unwrap();
        assert_eq!(listing(&out), ["a.svg", "own.txt", "results.json"]);
        assert!(outside.exists());
    }
}
