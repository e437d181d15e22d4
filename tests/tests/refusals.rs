//! The program refuses every bad file, and answers its own starter files.

use std::path::Path;
use std::process::{Command, Output};

use sectile_tests::{file_name, section_files};

fn sectile(folder: &Path, arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .args(arguments)
        .current_dir(folder)
        .output()
        .expect("the program runs")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("output is UTF-8")
}

#[test]
fn bad_files_end_with_exit_code_2_and_their_report_on_standard_error_alone() {
    let files = section_files("bad");
    let folder = files[0].parent().expect("files lie in a folder");
    for path in &files {
        let name = file_name(path);
        let output = sectile(folder, &["solve", "--json", name]);
        assert_eq!(output.status.code(), Some(2), "{name}");
        assert!(output.stdout.is_empty(), "{name}: {}", text(&output.stdout));
        let report = text(&output.stderr);
        let stem = name.strip_suffix(".section.toml").unwrap_or(name);
        let snapshot = std::fs::read_to_string(folder.join(format!("messages/{stem}.snap")))
            .unwrap_or_else(|error| panic!("{stem}: {error}"));
        let expected = snapshot.splitn(3, "---\n").nth(2).unwrap_or_default();
        assert_eq!(report.trim_end(), expected.trim_end(), "{name}");
    }
}

#[test]
fn every_bad_file_of_several_is_reported() {
    let files = section_files("bad");
    let folder = files[0].parent().expect("files lie in a folder");
    let (one, other) = (file_name(&files[0]), file_name(&files[1]));
    let output = sectile(
        folder,
        &["solve", one, other, "missing.section.toml", "messages"],
    );
    assert_eq!(output.status.code(), Some(2));
    let report = text(&output.stderr);
    for part in [
        one,
        other,
        "there is no file missing.section.toml",
        "messages is a folder",
    ] {
        assert!(report.contains(part), "no {part} in {report}");
    }
}

#[test]
fn starter_files_can_be_solved_as_they_are() {
    let folder = tempfile::tempdir().expect("a folder for the test");
    for form in sectile::command::new::FORMS {
        let name = format!("{form}.section.toml");
        let output = sectile(folder.path(), &["new", form, "--out", &name]);
        assert_eq!(
            output.status.code(),
            Some(0),
            "{form}: {}",
            text(&output.stderr)
        );
        let output = sectile(
            folder.path(),
            &["solve", "--json", "--tolerance", "1e-2", &name],
        );
        assert_eq!(
            output.status.code(),
            Some(0),
            "{form}: {}",
            text(&output.stderr)
        );
        let results: serde_json::Value =
            serde_json::from_slice(&output.stdout).expect("one JSON object");
        let area = &results["properties"]["area"]["value"];
        assert!(
            area.as_f64().is_some_and(|area| area > 0.0),
            "{form}: {area}"
        );
    }
}
