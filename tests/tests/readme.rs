//! The README shows what the program really prints and draws.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;

const START: &str = "<!-- demo output: start -->\n";
const END: &str = "<!-- demo output: end -->";

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..")
}

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"));
    command.env("NO_COLOR", "1").current_dir(root());
    command
}

/// With `UPDATE_README` set, writes `text` to `path`; else asserts that it is there already.
fn assert_or_update(path: &Path, text: &str) {
    if std::env::var_os("UPDATE_README").is_some() {
        fs::write(path, text).unwrap();
    }
    assert!(
        fs::read_to_string(path).unwrap() == text,
        "{} is out of date: run with UPDATE_README=1",
        path.display()
    );
}

#[test]
fn shows_the_output_of_its_first_command() {
    let folder = tempfile::tempdir().unwrap();
    let output = program()
        .args(["solve", "cli/demo/facade-rail.section.toml", "--out"])
        .arg(folder.path())
        .assert()
        .success();
    let printed = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    let (table, last) = printed.trim_end().rsplit_once('\n').unwrap();
    assert!(last.starts_with("Results and figures are in "));

    let path = root().join("README.md");
    let readme = fs::read_to_string(&path).unwrap();
    let (before, rest) = readme.split_once(START).unwrap();
    let (_, after) = rest.split_once(END).unwrap();
    assert_or_update(&path, &format!("{before}{START}{table}\n{END}{after}"));

    let figure = fs::read_to_string(folder.path().join("shear-torque.svg")).unwrap();
    assert_or_update(
        &root().join("cli/demo/facade-rail.shear-torque.svg"),
        &figure,
    );
}
