//! The program's answers, to hold against what a page shows.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

use serde_json::Value;

/// Bounds as wide as a picture needs: a page and the answer it is held against have the same mesh.
const TOLERANCE: &str = "1e-2";

/// The text of a demo section.
pub fn demo(name: &str) -> String {
    let file =
        Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("../cli/demo/{name}.section.toml"));
    fs::read_to_string(file).unwrap()
}

/// The program, about to solve a file of this text in this folder.
pub fn solve(folder: &Path, text: &str) -> Command {
    let file = folder.join("section.section.toml");
    fs::write(&file, text).unwrap();
    let mut command = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"));
    command
        .arg("solve")
        .arg(file)
        .args(["--tolerance", TOLERANCE]);
    command
}

/// The page of a section's report in this folder.
pub fn report(folder: &Path, text: &str) -> PathBuf {
    let out = folder.join("results");
    let status = solve(folder, text)
        .args(["--report", "--quiet", "--out"])
        .arg(&out)
        .status()
        .unwrap();
    assert!(matches!(status.code(), Some(0 | 1)), "{status}");
    out.join("report.html")
}

/// The answer to an action that is added to a section, with the section's notes; `more` is TOML text that
/// follows it.
pub fn answer(text: &str, forces: &[(&str, f64)], at: Option<[f64; 2]>, more: &str) -> Value {
    let folder = tempfile::tempdir().unwrap();
    let mut text = format!("{text}\n[[action]]\nname = \"tried\"\n");
    for (name, value) in forces {
        text += &format!("{name} = {value:?}\n");
    }
    if let Some([x, y]) = at {
        text += &format!("at = [{x:?}, {y:?}]\n");
    }
    text += more;
    let out = solve(folder.path(), &text)
        .args(["--quiet", "--json"])
        .output()
        .unwrap();
    let said: Value = serde_json::from_slice(&out.stdout)
        .unwrap_or_else(|_| panic!("{}", String::from_utf8_lossy(&out.stderr)));
    let actions = said["actions"].as_array().unwrap();
    let mut tried = actions
        .iter()
        .find(|a| a["name"] == "tried")
        .unwrap()
        .clone();
    tried["notes"] = said["notes"].clone();
    tried
}

/// The shear centre in the results of [`report`].
pub fn shear_centre(folder: &Path) -> [f64; 2] {
    let text = fs::read_to_string(folder.join("results/results.json")).unwrap();
    let said: Value = serde_json::from_str(&text).unwrap();
    ["shear_centre_x", "shear_centre_y"]
        .map(|key| said["properties"][key]["value"].as_f64().unwrap())
}
