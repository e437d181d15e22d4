//! `many` and `fit` as their users start them: rows in order, interrupted and gone on with, sweeps,
//! charts, and dimensions that meet a target.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Child, Command as Process, Stdio};
use std::thread::sleep;
use std::time::{Duration, Instant};

use assert_cmd::Command;
use assert_cmd::assert::Assert;
use serde_json::Value;

const PROGRAM: &str = env!("CARGO_BIN_EXE_sectile-as-tested");

fn program() -> Command {
    let mut command = Command::new(PROGRAM);
    command.env("NO_COLOR", "1");
    command
}

fn many(arguments: &[&str], folder: &Path) -> Assert {
    let mut command = program();
    command.current_dir(folder).arg("many").args(arguments);
    command.assert()
}

fn told(assert: &Assert) -> String {
    String::from_utf8(assert.get_output().stderr.clone()).unwrap()
}

fn read(folder: &Path, name: &str) -> String {
    fs::read_to_string(folder.join(name)).unwrap()
}

/// Channels of different sizes, `c0000.section.toml` and on.
fn channels(folder: &Path, count: usize) {
    for i in 0..count {
        let (h, b) = (100 + (37 * i) % 211, 40 + (13 * i) % 47);
        let (tw, tf) = (4 + i % 5, 6 + i % 7);
        let text = format!(
            "title = \"Channel {i} (invented)\"\n\
             [material.steel]\nE = 210000\nnu = 0.3\ndensity = 7850\n\
             [[piece]]\nname = \"c\"\n\
             profile = {{ form = \"channel\", h = {h}, b = {b}, tw = {tw}, tf = {tf} }}\n"
        );
        fs::write(folder.join(format!("c{i:04}.section.toml")), text).unwrap();
    }
}

fn table(text: &str) -> (Vec<String>, Vec<Vec<String>>) {
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let own = |record: &csv::StringRecord| record.iter().map(String::from).collect();
    let heads = own(reader.headers().unwrap());
    let rows = reader.records().map(|r| own(&r.unwrap())).collect();
    (heads, rows)
}

fn cell<'t>(heads: &[String], row: &'t [String], head: &str) -> &'t str {
    &row[heads.iter().position(|h| h == head).unwrap()]
}

/// Every property, moments of plasticity and stiffnesses of two materials among them, is the one that
/// `solve` prints, in its unit and to the last bit.
#[test]
fn rows_hold_what_solve_prints() {
    let folder = tempfile::tempdir().unwrap();
    let folder = folder.path();
    let text = "title = \"Flitch (invented)\"\nunits = { length = \"cm\", force = \"kN\", moment = \"kN m\", \
                stress = \"MPa\" }\n\
                [material.steel]\nE = 210000\nnu = 0.3\nyield = 250\ndensity = 7850\n\
                [material.timber]\nE = 11000\nnu = 0.3\nyield = 20\ndensity = 420\n\
                [[piece]]\nname = \"plate\"\nmaterial = \"steel\"\nbar = { at = [0, 0], b = 1, h = 20 }\n\
                [[piece]]\nname = \"left\"\nmaterial = \"timber\"\nbar = { at = [-3, 0], b = 5, h = 20 }\n\
                [[piece]]\nname = \"right\"\nmaterial = \"timber\"\nbar = { at = [3, 0], b = 5, h = 20 }\n";
    fs::write(folder.join("flitch.section.toml"), text).unwrap();
    let mut solve = program();
    solve
        .current_dir(folder)
        .args(["solve", "flitch.section.toml", "--json"]);
    let output = solve.args(["--tolerance", "1e-3"]).output().unwrap();
    let json: Value = serde_json::from_slice(&output.stdout).unwrap();
    many(
        &[
            "flitch.section.toml",
            "--columns",
            "all",
            "--bounds",
            "--tolerance",
            "1e-3",
            "--out",
            "many.csv",
        ],
        folder,
    )
    .success();
    let (heads, rows) = table(&read(folder, "many.csv"));
    let properties = json["properties"].as_object().unwrap();
    assert_eq!(properties["plastic_moment_x"]["unit"], "kN m");
    assert_eq!(cell(&heads, &rows[0], "moment_unit"), "kN m");
    for (key, property) in properties {
        for (end, suffix) in [("value", ""), ("low", "_low"), ("high", "_high")] {
            let printed = cell(&heads, &rows[0], &format!("{key}{suffix}"));
            assert_eq!(printed.parse().ok(), property[end].as_f64(), "{key} {end}");
        }
    }
}

#[test]
fn rows_are_those_of_solve_bit_for_bit_on_any_number_of_threads() {
    let folder = tempfile::tempdir().unwrap();
    channels(folder.path(), 9);
    let run = |threads: &str, out: &str| {
        let mut command = program();
        command
            .current_dir(folder.path())
            .env("RAYON_NUM_THREADS", threads)
            .args(["many", ".", "--columns", "all", "--bounds", "--out", out]);
        command.assert().success();
        read(folder.path(), out)
    };
    let one = run("1", "one.csv");
    assert_eq!(one, run("2", "two.csv"));
    assert_eq!(one, run("16", "sixteen.csv"));
    let lines = run("2", "lines.jsonl");

    let (heads, rows) = table(&one);
    assert_eq!(rows.len(), 9);
    for (i, row) in rows.iter().enumerate() {
        let file = format!("./c{i:04}.section.toml");
        assert_eq!(cell(&heads, row, "file"), file);
        let solved = program()
            .current_dir(folder.path())
            .args(["solve", "--json", "--tolerance", "1e-3", &file])
            .assert()
            .success();
        let solved: Value = serde_json::from_slice(&solved.get_output().stdout).unwrap();
        let line: Value = serde_json::from_str(lines.lines().nth(i).unwrap()).unwrap();
        assert_eq!(line["title"], solved["title"]);
        assert_eq!(line["length_unit"], "mm");
        assert_eq!(line["error"], Value::Null);
        let properties = solved["properties"].as_object().unwrap();
        assert!(properties.len() > 30);
        for (key, property) in properties {
            for (part, head) in [
                ("value", key.clone()),
                ("low", format!("{key}_low")),
                ("high", format!("{key}_high")),
            ] {
                let own: f64 = cell(&heads, row, &head).parse().unwrap();
                assert_eq!(Some(own), property[part].as_f64(), "{file} {head}");
                assert_eq!(line[&head].as_f64(), Some(own), "{file} {head}");
            }
        }
    }
}

/// SHA-256 of "abc" as FIPS 180-2 gives it (from memory), so that any other program finds the same.
#[test]
fn the_hash_is_that_of_the_file() {
    let folder = tempfile::tempdir().unwrap();
    fs::write(folder.path().join("a.section.toml"), "abc").unwrap();
    let refused = many(&["a.section.toml"], folder.path()).code(2);
    let (heads, rows) = table(&String::from_utf8(refused.get_output().stdout.clone()).unwrap());
    assert_eq!(
        cell(&heads, &rows[0], "input_sha256"),
        "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
    );
}

#[test]
fn failures_are_rows_too_and_are_listed() {
    let folder = tempfile::tempdir().unwrap();
    channels(folder.path(), 4);
    let bad = "[[piece]]\nname = \"flat\"\nbar = { at = [0, 0], b = 0, h = 5 }\n";
    fs::write(folder.path().join("c0001.section.toml"), bad).unwrap();
    let arguments = [
        "c0000.section.toml",
        "c0001.section.toml",
        "nowhere.section.toml",
        "c0002.section.toml",
    ];
    let run = many(
        &[&arguments[..], &["--out", "rows.csv"]].concat(),
        folder.path(),
    )
    .code(1);
    let message = "line 3: the width `b` must be greater than zero";
    let text = told(&run);
    assert!(
        text.contains(&format!("c0001.section.toml: {message}\n")),
        "{text}"
    );
    assert!(
        text.contains("there is no file nowhere.section.toml"),
        "{text}"
    );
    assert!(text.contains("; 2 failed"), "{text}");
    let (heads, rows) = table(&read(folder.path(), "rows.csv"));
    let files: Vec<&str> = rows.iter().map(|row| cell(&heads, row, "file")).collect();
    assert_eq!(files, arguments);
    assert_eq!(cell(&heads, &rows[1], "error"), message);
    assert_eq!(cell(&heads, &rows[1], "area"), "");
    assert_eq!(cell(&heads, &rows[3], "error"), "");
    // Going on with what is complete lists the failures again and adds nothing.
    let again = [&arguments[..], &["--out", "rows.csv", "--resume"]].concat();
    let before = read(folder.path(), "rows.csv");
    let run = many(&again, folder.path()).code(1);
    assert!(told(&run).contains(message));
    assert_eq!(before, read(folder.path(), "rows.csv"));

    let stop = [
        &arguments[..],
        &["--out", "stopped.csv", "--stop-at-failure"],
    ]
    .concat();
    many(&stop, folder.path()).code(1);
    assert_eq!(table(&read(folder.path(), "stopped.csv")).1.len(), 2);
    many(
        &["nowhere.section.toml", "--out", "none.jsonl"],
        folder.path(),
    )
    .code(2);
    let line: Value = serde_json::from_str(&read(folder.path(), "none.jsonl")).unwrap();
    assert_eq!(line["area"], Value::Null);
    assert!(line["error"].as_str().unwrap().contains("there is no file"));
}

#[test]
fn an_output_is_never_overwritten_unasked_and_goes_on_only_with_its_own() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    channels(path, 5);
    let out = ["--out", "rows.csv", "--columns", "area,torsion_constant"];
    many(&[&["."], &out[..]].concat(), path).success();
    let whole = read(path, "rows.csv");
    let refused = many(&[&["."], &out[..]].concat(), path).code(2);
    assert!(told(&refused).contains("--resume"));
    assert_eq!(whole, read(path, "rows.csv"));

    // Cut at any byte it becomes the same again.
    let resume = [&["."], &out[..], &["--resume"]].concat();
    for cut in [
        0,
        3,
        whole.find('\n').unwrap(),
        whole.len() / 2,
        whole.len() - 1,
    ] {
        fs::write(path.join("rows.csv"), &whole[..cut]).unwrap();
        many(&resume, path).success();
        assert_eq!(whole, read(path, "rows.csv"), "cut at {cut}");
    }

    let refusals: [(&[&str], &str); 4] = [
        (&[".", "--out", "rows.csv", "--resume"], "other columns"),
        (
            &["c0001.section.toml", "--resume"],
            "more than the 1 sections",
        ),
        (
            &[".", "--resume", "--tolerance", "1e-2"],
            "tolerance of 0.001",
        ),
        (
            &["c0000.section.toml", "c0002.section.toml", ".", "--resume"],
            "row 1 of rows.csv is of ./c0000.section.toml",
        ),
    ];
    for (arguments, part) in refusals {
        let mut arguments = arguments.to_vec();
        if !arguments.contains(&"--out") {
            arguments.extend(out);
        }
        let refused = many(&arguments, path).code(2);
        let text = told(&refused);
        assert!(text.contains(part) && text.contains("--force"), "{text}");
        assert_eq!(whole, read(path, "rows.csv"));
    }
    let file = path.join("c0003.section.toml");
    let other = fs::read_to_string(&file).unwrap() + "# saved anew\n";
    fs::write(&file, other).unwrap();
    let refused = many(&resume, path).code(2);
    assert!(told(&refused).contains("the file has changed"));
    many(&[&["."], &out[..], &["--force"]].concat(), path).success();
    assert_ne!(whole, read(path, "rows.csv"));

    // What is no file of rows stays, whatever is asked.
    fs::write(path.join("mine.csv"), "a,b\n1,2\n").unwrap();
    many(&[".", "--out", "mine.csv", "--resume"], path).code(2);
    assert_eq!(read(path, "mine.csv"), "a,b\n1,2\n");
    many(&[".", "--out", "rows.txt"], path).code(2);
    assert!(!path.join("rows.txt").exists());
}

/// Starts `many` over a folder and waits until its output has `rows` lines.
fn started(folder: &Path, out: &str, rows: usize) -> Child {
    let child = Process::new(PROGRAM)
        .current_dir(folder)
        .args(["many", ".", "--tolerance", "1e-5", "--out", out])
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .spawn()
        .unwrap();
    let start = Instant::now();
    let lines = || fs::read_to_string(folder.join(out)).map_or(0, |text| text.lines().count());
    while lines() < rows && start.elapsed() < Duration::from_secs(60) {
        sleep(Duration::from_millis(5));
    }
    child
}

#[test]
fn killed_and_gone_on_with_each_row_is_there_once() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    channels(path, 60);
    let whole = ["many", ".", "--tolerance", "1e-5", "--out"];
    program()
        .current_dir(path)
        .args(whole)
        .arg("whole.csv")
        .assert()
        .success();
    let whole = read(path, "whole.csv");
    for out in ["killed.csv", "again.csv"] {
        let mut child = started(path, out, 12);
        child.kill().unwrap();
        child.wait().unwrap();
        let partial = read(path, out);
        assert!(whole.starts_with(&partial) && partial.len() < whole.len());
        let resume = [".", "--tolerance", "1e-5", "--out", out, "--resume"];
        many(&resume, path).success();
        assert_eq!(whole, read(path, out));
    }
}

#[cfg(unix)]
#[test]
fn interrupted_it_ends_by_itself_with_whole_rows() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    channels(path, 60);
    let mut child = started(path, "rows.jsonl", 6);
    let id = child.id().to_string();
    Process::new("kill").args(["-INT", &id]).status().unwrap();
    let status = child.wait().unwrap();
    assert_eq!(status.code(), Some(130));
    let text = read(path, "rows.jsonl");
    assert!(text.ends_with('\n') && (6..60).contains(&text.lines().count()));
    let resume = [
        ".",
        "--tolerance",
        "1e-5",
        "--out",
        "rows.jsonl",
        "--resume",
    ];
    many(&resume, path).success();
    let text = read(path, "rows.jsonl");
    let files: Vec<String> = text
        .lines()
        .map(|line| serde_json::from_str::<Value>(line).unwrap()["file"].to_string())
        .collect();
    let wanted: Vec<String> = (0..60)
        .map(|i| format!("\"./c{i:04}.section.toml\""))
        .collect();
    assert_eq!(files, wanted);
}

#[cfg(unix)]
#[test]
fn an_interrupted_solve_leaves_no_file_behind() {
    let folder = tempfile::tempdir().unwrap();
    channels(folder.path(), 1);
    for milliseconds in [100, 300, 500] {
        let mut child = Process::new(PROGRAM)
            .current_dir(folder.path())
            .args(["solve", "--quiet", "--tolerance", "1e-9", "--out", "out"])
            .args(["--png", "600", "c0000.section.toml"])
            .stderr(Stdio::null())
            .spawn()
            .unwrap();
        sleep(Duration::from_millis(milliseconds));
        let id = child.id().to_string();
        Process::new("kill").args(["-INT", &id]).status().unwrap();
        let code = child.wait().unwrap().code();
        let out = folder.path().join("out");
        let names: Vec<String> = fs::read_dir(&out)
            .map(|entries| {
                entries
                    .map(|e| e.unwrap().file_name().to_string_lossy().into_owned())
                    .collect()
            })
            .unwrap_or_default();
        if code == Some(130) {
            assert!(names.is_empty(), "{names:?}");
        } else {
            // It was done before: then all is there.
            assert!(names.contains(&"results.json".to_owned()));
            fs::remove_dir_all(&out).unwrap();
        }
    }
}

const SWEEP: &str = r#"title = "Flat (invented)"
[[piece]]
name = "flat"
bar = { at = [0, 0], b = 40, h = "60 mm" }

[[vary]]
key = "piece.flat.bar.b"
from = 20
to = 40
steps = 4

[[vary]]
key = "piece.flat.bar.h"
values = ["6 cm", "0 cm", "9 cm"]
"#;

fn sweep(folder: &Path) -> PathBuf {
    let path = folder.join("flat.section.toml");
    fs::write(&path, SWEEP).unwrap();
    path
}

/// A bar b × h has A = b h and I_x = b h³ / 12.
#[test]
fn a_sweep_is_a_grid_of_rows_with_a_chart() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    sweep(path);
    let arguments = [
        "flat.section.toml",
        "--out",
        "rows.csv",
        "--columns",
        "area",
    ];
    let charted = [
        &arguments[..],
        &["--chart", "second_moment_x,torsion_constant"],
    ]
    .concat();
    let run = many(&charted, path).code(1);
    let text = told(&run);
    assert!(
        text.contains(
            "flat.section.toml (piece.flat.bar.b = 25, piece.flat.bar.h = 0 cm): line 4: "
        ),
        "{text}"
    );
    let (heads, rows) = table(&read(path, "rows.csv"));
    assert_eq!(rows.len(), 15);
    for (i, row) in rows.iter().enumerate() {
        let (b, h) = (20.0 + 5.0 * (i / 3) as f64, [60.0, 0.0, 90.0][i % 3]);
        assert_eq!(cell(&heads, row, "piece.flat.bar.b"), b.to_string());
        assert_eq!(
            cell(&heads, row, "piece.flat.bar.h"),
            ["6 cm", "0 cm", "9 cm"][i % 3]
        );
        if h > 0.0 {
            let number = |head: &str| cell(&heads, row, head).parse::<f64>().unwrap();
            assert!((number("area") / (b * h) - 1.0).abs() < 1e-12);
            let second = b * h * h * h / 12.0;
            assert!((number("second_moment_x") / second - 1.0).abs() < 1e-12);
        } else {
            assert_ne!(cell(&heads, row, "error"), "");
        }
    }
    let svg = read(path, "rows.svg");
    for part in [
        "Second moment about x",
        "piece.flat.bar.b",
        "9 cm",
        "Sweep",
        "Curves are broken",
    ] {
        assert!(svg.contains(part), "{part}");
    }
    // Cut in the middle of the grid it goes on there, and the chart is that of all rows.
    let whole = read(path, "rows.csv");
    fs::write(path.join("rows.csv"), &whole[..whole.len() / 2]).unwrap();
    fs::remove_file(path.join("rows.svg")).unwrap();
    many(&[&charted[..], &["--resume"]].concat(), path).code(1);
    assert_eq!(whole, read(path, "rows.csv"));
    assert_eq!(svg, read(path, "rows.svg"));

    let refused = many(&["flat.section.toml", "--chart", "area"], path).code(2);
    assert!(told(&refused).contains("--out"));
    let other = ["flat.section.toml", "--out", "other.csv"];
    many(&[&other[..], &["--chart", "aria"]].concat(), path).code(2);
    fs::write(path.join("other.svg"), "mine").unwrap();
    many(&[&other[..], &["--chart", "area"]].concat(), path).code(2);
    assert_eq!(read(path, "other.svg"), "mine");
}

/// Two flats of 40 × h, one on the other, are one bar of 40 × 2h.
#[test]
fn values_that_stay_alike_vary_together() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    let text = "[[piece]]\nname = \"low\"\nbar = { at = [0, -20], b = 40, h = 40 }\n\
                [[piece]]\nname = \"top\"\nbar = { at = [0, 20], b = 40, h = 40 }\n\
                [[vary]]\nkey = [\"piece.low.bar.b\", \"piece.top.bar.b\"]\nvalues = [30, 50]\n";
    fs::write(path.join("pair.section.toml"), text).unwrap();
    let run = many(&["pair.section.toml", "--columns", "area"], path).success();
    let (heads, rows) = table(&String::from_utf8(run.get_output().stdout.clone()).unwrap());
    for (row, b) in rows.iter().zip([30.0, 50.0]) {
        let area: f64 = cell(&heads, row, "area").parse().unwrap();
        assert!((area - 80.0 * b).abs() < 1e-9);
        let both = "piece.low.bar.b = piece.top.bar.b";
        assert_eq!(cell(&heads, row, both), b.to_string());
    }
    let goal = [
        "pair.section.toml",
        "--goal",
        "area = 2800",
        "--from",
        "10",
        "--to",
        "90",
    ];
    let both = ["--vary", "piece.low.bar.b", "--vary", "piece.top.bar.b"];
    fit(&[&goal[..], &both].concat(), path).success();
    let written = read(path, "pair-fitted.section.toml");
    assert_eq!(written, text.replace("b = 40", "b = 35"));
}

#[test]
fn solve_takes_a_file_with_a_sweep_as_written_and_says_so() {
    let folder = tempfile::tempdir().unwrap();
    let path = sweep(folder.path());
    let solved = program()
        .args(["solve", "--json"])
        .arg(&path)
        .assert()
        .success();
    let solved: Value = serde_json::from_slice(&solved.get_output().stdout).unwrap();
    let area = solved["properties"]["area"]["value"].as_f64().unwrap();
    assert!((area - 2400.0).abs() < 1e-9);
    let notes = solved["notes"].as_array().unwrap();
    assert!(notes.iter().any(|note| note["kind"] == "sweep"));
}

#[test]
fn folders_stand_for_their_section_files() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    fs::create_dir_all(path.join("b/deeper")).unwrap();
    channels(&path.join("b"), 2);
    channels(&path.join("b/deeper"), 1);
    channels(path, 1);
    let run = many(&["b", "c0000.section.toml"], path).success();
    let (heads, rows) = table(&String::from_utf8(run.get_output().stdout.clone()).unwrap());
    let files: Vec<&str> = rows.iter().map(|row| cell(&heads, row, "file")).collect();
    assert_eq!(
        files,
        [
            "b/c0000.section.toml",
            "b/c0001.section.toml",
            "c0000.section.toml"
        ]
    );
    fs::create_dir(path.join("empty")).unwrap();
    let refused = many(&["empty"], path).code(2);
    assert!(told(&refused).contains("has no *.section.toml"));
}

fn fit(arguments: &[&str], folder: &Path) -> Assert {
    let mut command = program();
    command.current_dir(folder).arg("fit").args(arguments);
    command.assert()
}

/// The height of a bar 40 wide for I_x = 720000: b h³ / 12, so 60.
#[test]
fn the_height_of_a_bar_for_a_wanted_second_moment() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    sweep(path);
    let arguments = [
        "flat.section.toml",
        "--goal",
        "second_moment_x = 720000 mm4",
        "--vary",
        "piece.flat.bar.h",
        "--from",
        "11",
        "--to",
        "200",
    ];
    let run = fit(&arguments, path).success();
    let text = String::from_utf8(run.get_output().stdout.clone()).unwrap();
    assert!(text.contains("piece.flat.bar.h = 60 mm: "), "{text}");
    let written = read(path, "flat-fitted.section.toml");
    assert_eq!(written, SWEEP);
    assert_eq!(read(path, "flat.section.toml"), SWEEP);
    // What is there stays.
    let refused = fit(&arguments, path).code(2);
    assert!(told(&refused).contains("exists already"));
    let own = [&arguments[..], &["--out", "./flat.section.toml", "--force"]].concat();
    let refused = fit(&own, path).code(2);
    assert!(told(&refused).contains("stays as it is"));

    let mut short = arguments;
    short[8] = "50";
    let refused = fit(&[&short[..], &["--out", "no.section.toml"]].concat(), path).code(2);
    let text = told(&refused);
    assert!(text.contains("below the target at both ends"), "{text}");
    assert!(
        text.contains("416666.667") && text.contains("4436.66667"),
        "{text}"
    );
    let mut wrong = arguments;
    wrong[2] = "second_moment_x = 720000 cm4";
    let refused = fit(&[&wrong[..], &["--out", "no.section.toml"]].concat(), path).code(2);
    assert!(told(&refused).contains("in mm4"));
    let mut lost = arguments;
    lost[4] = "piece.flat.bar.hh";
    let refused = fit(&[&lost[..], &["--out", "no.section.toml"]].concat(), path).code(2);
    assert!(told(&refused).contains("the nearest is `piece.flat.bar.h`"));
    assert!(!path.join("no.section.toml").exists());
}

/// A tube's J = π/32 (D⁴ − d⁴); with D = 100 and t = 6.25 it is sought for that of t.
#[test]
fn the_wall_of_a_tube_for_a_wanted_torsion_constant() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path();
    fs::write(
        path.join("tube.section.toml"),
        "[[piece]]\nname = \"tube\"\ntube = { at = [0, 0], d = 100, t = 3 }\n",
    )
    .unwrap();
    let wanted = std::f64::consts::PI / 32.0 * (100f64.powi(4) - 87.5f64.powi(4));
    let goal = format!("torsion_constant = {wanted}");
    let arguments = [
        "tube.section.toml",
        "--goal",
        &goal,
        "--vary",
        "piece.tube.tube.t",
    ];
    let range = [
        "--from",
        "2",
        "--to",
        "40",
        "--tolerance",
        "1e-6",
        "--out",
        "t.section.toml",
    ];
    fit(&[&arguments[..], &range].concat(), path).success();
    let written = read(path, "t.section.toml");
    let (_, rest) = written.split_once("t = ").unwrap();
    let (_, rest) = rest.rsplit_once("t = ").unwrap_or(("", rest));
    let t: f64 = rest
        .trim_end()
        .trim_end_matches('}')
        .trim()
        .parse()
        .unwrap();
    // Bounds of 1e-6 on J leave about 1e-6 J / (dJ/dt) = 6e-6 to t.
    assert!((t - 6.25).abs() < 1e-5, "{t}");
}

#[test]
fn every_command_has_examples_a_manual_page_and_completions() {
    let folder = tempfile::tempdir().unwrap();
    program()
        .args(["manual", "--out"])
        .arg(folder.path())
        .assert()
        .success();
    let pages = fs::read_dir(folder.path()).unwrap();
    let commands: Vec<String> = pages
        .filter_map(|page| {
            let name = page.unwrap().file_name().into_string().unwrap();
            Some(
                name.strip_prefix("sectile-")?
                    .strip_suffix(".1")?
                    .to_string(),
            )
        })
        .collect();
    assert!(
        commands.contains(&"trace".to_string()) && commands.len() >= 7,
        "{commands:?}"
    );
    for command in &commands {
        let run = program().args([command, "--help"]).assert().success();
        let text = String::from_utf8(run.get_output().stdout.clone()).unwrap();
        assert!(text.contains("Examples:"), "{command}: {text}");
    }
    let page = read(folder.path(), "sectile-many.1");
    assert!(
        page.contains(".TH sectile-many 1") && page.contains("resume"),
        "{page}"
    );
    assert!(read(folder.path(), "sectile.1").contains("sectile\\-solve(1)"));
    for shell in ["bash", "zsh", "fish", "powershell", "elvish"] {
        let run = program().args(["completions", shell]).assert().success();
        let text = String::from_utf8(run.get_output().stdout.clone()).unwrap();
        assert!(text.contains("stop-at-failure"), "{shell}");
    }
}
