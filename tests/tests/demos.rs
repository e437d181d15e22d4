//! The demos are answered without a finding.
#![allow(clippy::unwrap_used)]

use assert_cmd::Command;
use sectile_tests::{file_name, section_files};
use serde_json::Value;

fn solved(demo: &std::path::Path) -> Value {
    let output = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .args(["solve", "--json"])
        .arg(demo)
        .output()
        .unwrap();
    let name = file_name(demo);
    assert_eq!(output.status.code(), Some(0), "{name}");
    serde_json::from_slice(&output.stdout).unwrap()
}

#[test]
fn all_are_answered_within_the_tolerance() {
    let demos = section_files("../cli/demo");
    assert!(demos.len() >= 8, "only {}", demos.len());
    for demo in &demos {
        let name = file_name(demo);
        let text = std::fs::read_to_string(demo).unwrap();
        assert!(text.starts_with("# An invented scenario"), "{name}");
        let results = solved(demo);
        assert_eq!(results["tolerance_reached"], true, "{name}");
        for action in results["actions"].as_array().unwrap() {
            let used = action["extremes"]["utilisation"]["value"].as_f64();
            assert!(used.is_some_and(|used| used > 0.01), "{name}: {used:?}");
            let seams = action["seams"].as_array().unwrap();
            assert_eq!(seams.len(), results["seams"].as_array().map_or(0, Vec::len));
        }
    }
}

#[test]
fn the_box_agrees_with_bredt() {
    let demos = section_files("../cli/demo");
    let demo = demos.iter().find(|d| file_name(d).starts_with("plate-box"));
    let results = solved(demo.unwrap());
    let seams = results["actions"][0]["seams"].as_array().unwrap();
    // The shear force makes one web's flow larger and the other's smaller by the same amount: the mean of
    // their sizes is that of the torque.
    let sizes = seams.iter().map(|s| s["flow"].as_f64().unwrap().abs());
    let mean = sizes.sum::<f64>() / 4.0;
    // Bredt: q = T / (2 A), 45 kN m, the middle lines 230 × 264 apart (textbook of strength of materials,
    // from memory). The plates' own torsion, which it leaves out, takes less than 1 %.
    let bredt = 45_000.0 / (2.0 * 230.0 * 264.0);
    assert!(mean < bredt && mean > 0.99 * bredt, "{mean}, not {bredt}");
}

/// What the remarks of the sweep's demo tell to run.
#[test]
fn the_bracket_rail_is_swept_and_fitted() {
    let demos = section_files("../cli/demo");
    let demo = demos
        .iter()
        .find(|d| file_name(d).starts_with("bracket-rail"));
    let folder = tempfile::tempdir().unwrap();
    std::fs::copy(demo.unwrap(), folder.path().join("rail.section.toml")).unwrap();
    let run = |arguments: &[&str]| {
        let mut command = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"));
        command
            .current_dir(folder.path())
            .args(arguments)
            .assert()
            .success();
    };
    let chart = "shear_centre_x,second_moment_x";
    run(&[
        "many",
        "rail.section.toml",
        "--out",
        "rail.csv",
        "--chart",
        chart,
    ]);
    let rows = std::fs::read_to_string(folder.path().join("rail.csv")).unwrap();
    assert_eq!(rows.lines().count(), 1 + 7 * 3);
    assert!(folder.path().join("rail.svg").exists());
    let mut fit = vec!["fit", "rail.section.toml", "--goal", "shear_centre_x = -20"];
    fit.extend([
        "--vary",
        "piece.rail.profile.tw",
        "--from",
        "2",
        "--to",
        "10",
    ]);
    run(&fit);
    let results = solved(&folder.path().join("rail-fitted.section.toml"));
    let centre = &results["properties"]["shear_centre_x"];
    assert!(centre["low"].as_f64() <= Some(-20.0) && centre["high"].as_f64() >= Some(-20.0));
}
