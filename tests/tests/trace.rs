//! Drawings by independent programs, traced and solved. How each file of `drawings/` came about is in
//! `drawings/make_drawings.py`.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;
use sectile::read::section_from_text;
use sectile::trace::format::Format;
use sectile::trace::{Options, Refusal, Traced, trace};
use serde_json::Value;

fn drawings() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("drawings")
}

fn demo() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../cli/demo/facade-rail.section.toml")
}

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"));
    command.env("NO_COLOR", "1");
    command
}

fn traced_with(name: &str, options: &Options) -> Result<Traced, Refusal> {
    let path = drawings().join(name);
    let bytes = fs::read(&path).unwrap();
    let format = Format::of(&path, &bytes).unwrap();
    trace(name, &bytes, format, options)
}

fn traced(name: &str) -> Traced {
    traced_with(name, &Options::default())
        .unwrap_or_else(|refusal| panic!("{name}: {:?}", refusal.faults))
}

fn solved(section_file: &Path) -> Value {
    let output = program()
        .args(["solve", "--json", "--quiet", "--tolerance", "1e-6"])
        .arg(section_file)
        .assert()
        .success();
    serde_json::from_slice(&output.get_output().stdout).unwrap()
}

/// Traces a drawing through the program and solves what comes out; the remarks that were printed and
/// the results.
fn traced_and_solved(name: &str) -> (String, Value) {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("traced.section.toml");
    let output = program()
        .arg("trace")
        .arg(drawings().join(name))
        .arg("--out")
        .arg(&out)
        .assert()
        .success();
    let printed = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    (printed, solved(&out))
}

/// The demo section as its hand-written file has it, of the material that a drawing gets.
fn by_hand() -> Value {
    let folder = tempfile::tempdir().unwrap();
    let text = fs::read_to_string(demo()).unwrap();
    let (before, rest) = text.split_once("[material.aluminium]").unwrap();
    let (_, after) = rest.split_once("density = \"2700 kg/m3\"\n").unwrap();
    let out = folder.path().join("rail.section.toml");
    fs::write(&out, format!("{before}{after}")).unwrap();
    solved(&out)
}

/// Asserts that every property is by hand what it is traced, within both enclosures and `allowed` times
/// its scale for what the drawing itself is off. `length`: the hand-written file's unit in the drawing's.
fn assert_same(name: &str, traced: &Value, by_hand: &Value, length: f64, allowed: f64) {
    let by_hand = by_hand["properties"].as_object().unwrap();
    let traced = traced["properties"].as_object().unwrap();
    assert!(
        by_hand.len() > 30 && by_hand.keys().eq(traced.keys()),
        "{name}"
    );
    let width = by_hand["polar_radius"]["value"].as_f64().unwrap();
    for (key, a) in by_hand {
        let b = &traced[key];
        let unit = a["unit"].as_str().unwrap_or("");
        let power: i32 = match unit.strip_prefix("mm") {
            Some("") => 1,
            Some(power) => power.parse().unwrap(),
            None => 0,
        };
        let factor = length.powi(power);
        let of = |v: &Value, k: &str| v[k].as_f64().unwrap();
        let half = |v: &Value| 0.5 * (of(v, "high") - of(v, "low"));
        let scale = of(a, "value")
            .abs()
            .max(if power == 1 { width } else { 0.0 });
        let apart = (of(a, "value") * factor - of(b, "value")).abs();
        let within = half(a) * factor + half(b) + (allowed + 1e-9) * scale * factor;
        assert!(
            apart <= within,
            "{name}: {key} {a} {b}, {apart:e} apart, {within:e} allowed"
        );
    }
}

#[test]
fn a_drawing_of_the_demo_section_gives_its_properties() {
    let by_hand = by_hand();
    for name in [
        "rail-lines.dxf",
        "rail-lwpolyline.dxf",
        "rail-polyline-r12.dxf",
        "rail-arcs.svg",
    ] {
        let (_, found) = traced_and_solved(name);
        assert_same(name, &found, &by_hand, 1.0, 0.0);
    }
}

#[test]
fn an_inserted_block_is_mirrored_turned_and_scaled_into_place() {
    let (printed, found) = traced_and_solved("rail-insert-inches.dxf");
    assert!(printed.contains("Lengths are in in"), "{printed}");
    assert_same(
        "rail-insert-inches.dxf",
        &found,
        &by_hand(),
        1.0 / 25.4,
        0.0,
    );
}

#[test]
fn what_was_found_and_done_is_told() {
    let Traced { text, remarks } = traced("rail-lines.dxf");
    let told = remarks.join("\n");
    for part in [
        "Lengths are in mm, as the drawing's header says",
        "into 1 outline and 1 hole",
        "lay on others: 2 sides",
        "1 TEXT",
        "1 HATCH",
        "1 DIMENSION",
        "1 POINT",
    ] {
        assert!(told.contains(part), "{part}: {told}");
    }
    assert!(text.contains("# Traced from rail-lines.dxf (DXF)"));
    assert!(text.contains("title = \"rail-lines\""));
    assert!(
        text.contains("holes = [\n    { circle = { at = [24, 48], d = 9 } },\n]"),
        "{text}"
    );
    assert!(
        text.contains("[60, 3]") || text.contains("[57, 0]"),
        "{text}"
    );
    let read = section_from_text("traced", &text).unwrap();
    assert!(read.section.assumed_material);
}

#[test]
fn small_gaps_are_joined_and_told_and_wide_ones_shown() {
    let by_hand = by_hand();
    let (printed, found) = traced_and_solved("rail-small-gap.dxf");
    assert!(
        printed.contains("Joined: 1 gap, 0.004 wide, at (56.998, 0)"),
        "{printed}"
    );
    // The hole is missing in this drawing: areas differ by it, bounds of the outline do not.
    let area = |v: &Value| v["properties"]["area"]["value"].as_f64().unwrap();
    let hole = std::f64::consts::PI * 4.5 * 4.5;
    assert!((area(&found) - area(&by_hand) - hole).abs() < 0.004 * 4.0);

    let folder = tempfile::tempdir().unwrap();
    let drawing = folder.path().join("rail.dxf");
    fs::copy(drawings().join("rail-open.dxf"), &drawing).unwrap();
    let output = program().arg("trace").arg(&drawing).assert().code(2);
    let said = String::from_utf8(output.get_output().stderr.clone()).unwrap();
    let flat = said.split_whitespace().collect::<Vec<_>>().join(" ");
    for part in [
        "open between",
        "(56.2, 0)",
        "(57, 0)",
        "0.8 wide",
        "--gap",
        "rail.open.svg",
    ] {
        assert!(flat.contains(part), "{part}: {said}");
    }
    assert!(!folder.path().join("rail.section.toml").exists());
    let picture = fs::read_to_string(folder.path().join("rail.open.svg")).unwrap();
    assert!(picture.contains("#c62828"));
    resvg::usvg::Tree::from_str(&picture, &resvg::usvg::Options::default()).unwrap();
    // The remedy works.
    program()
        .arg("trace")
        .arg(&drawing)
        .args(["--gap", "0.84"])
        .assert()
        .success();
}

#[test]
fn curves_become_arcs_within_the_stated_distance() {
    let area = |name: &str, layer: &str, chord: f64| {
        let options = Options {
            layers: vec![layer.to_owned()],
            chord: Some(chord),
            ..Options::default()
        };
        let traced = traced_with(name, &options).unwrap();
        let read = section_from_text("traced", &traced.text).unwrap();
        assert_eq!(read.section.units.length, "cm");
        (
            sectile_tests::outline_area(&read.section.pieces[0].outline),
            traced.remarks,
        )
    };
    // Areas: π a b of an ellipse, π of the unit disc, elementary.
    let pi = std::f64::consts::PI;
    for chord in [1e-2, 1e-3, 1e-5] {
        for (layer, exact, perimeter) in [
            ("ELLIPSE", 2.0 * pi, 10.0),
            ("SCALED", 2.0 * pi, 10.0),
            ("SPLINE", pi, 2.0 * pi),
        ] {
            let (found, remarks) = area("curves.dxf", layer, chord);
            assert!(
                (found - exact).abs() <= chord * perimeter,
                "{layer} {chord} {found}"
            );
            assert!(
                remarks.iter().any(|r| r.contains("became arcs within")),
                "{remarks:?}"
            );
        }
    }
    // Pages of matplotlib: cubics for the arcs.
    let (printed, found) = traced_and_solved("rail-matplotlib.svg");
    assert!(printed.contains("1 background of the page"), "{printed}");
    // 0.009 mm chord over walls of 18 mm and 3 mm radii.
    let (a, b) = (&found["properties"], &by_hand()["properties"]);
    for key in [
        "area",
        "second_moment_x",
        "second_moment_y",
        "torsion_constant",
    ] {
        let of = |v: &Value| v[key]["value"].as_f64().unwrap();
        assert!(
            (of(a) / of(b) - 1.0).abs() < 1e-3,
            "{key}: {} {}",
            of(a),
            of(b)
        );
    }
}

#[test]
fn polygons_keep_their_holes_and_islands() {
    // 80 x 50 less 30 x 40 less half of 30 x 30; the island is 20 x 30.
    let plate = 80.0 * 50.0 - 30.0 * 40.0 - 0.5 * 30.0 * 30.0;
    for (name, pieces, area) in [
        ("plate.wkt", 1, plate),
        ("plate.geojson", 1, plate),
        ("plate-collection.geojson", 1, plate),
        ("plate-and-island.wkt", 2, plate + 600.0),
    ] {
        let read = section_from_text("traced", &traced(name).text).unwrap();
        assert_eq!(read.section.pieces.len(), pieces, "{name}");
        assert_eq!(read.section.pieces[0].name, "body");
        assert_eq!(read.section.pieces[0].outline.holes.len(), 2, "{name}");
        let found: f64 = read
            .section
            .pieces
            .iter()
            .map(|piece| sectile_tests::outline_area(&piece.outline))
            .sum();
        assert!((found - area).abs() < 1e-9 * area, "{name} {found}");
    }
    for name in ["plate.wkt", "plate.geojson"] {
        let (_, solved) = traced_and_solved(name);
        let found = solved["properties"]["area"]["value"].as_f64().unwrap();
        assert!((found - plate).abs() < 1e-9 * plate, "{name} {found}");
        assert_eq!(solved["tolerance_reached"], true, "{name}");
    }
}

fn of_text(text: &str, format: Format) -> Result<Traced, Refusal> {
    trace("drawing", text.as_bytes(), format, &Options::default())
}

/// A line drawn over the side of a closed outline is left out and counted, one that leaves it is told.
#[test]
fn lines_drawn_over_an_outline_are_left_out() {
    let svg = |line: &str| {
        format!(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 100 100\">\
             <rect x=\"10\" y=\"10\" width=\"60\" height=\"20\"/>{line}</svg>"
        )
    };
    let plain = of_text(&svg(""), Format::Svg).unwrap();
    let over = "<line x1=\"65\" y1=\"30\" x2=\"20\" y2=\"30\"/>";
    let traced = of_text(&svg(over), Format::Svg).unwrap();
    let outline = |text: &str| text[text.find("[[piece]]").unwrap()..].to_string();
    assert_eq!(outline(&traced.text), outline(&plain.text));
    let told = traced.remarks.join(" ");
    assert!(told.contains("lay on others: 1 side"), "{told}");
    let beyond = "<line x1=\"65\" y1=\"30\" x2=\"80\" y2=\"30\"/>";
    assert!(of_text(&svg(beyond), Format::Svg).is_err());
}

#[test]
fn corners_come_in_columns() {
    for text in [
        "x,y\n0,0\n80,0\n80,12\n0,12\n\n10,3\n20,3\n20,9\n10,9\n",
        "0,0,a\n80,0,a\n80,12,a\n0,12,a\n0,0,a\n10,3,b\n20,3,b\n20,9,b\n10,9,b\n",
        "x;y\n0;0\n80,0;0\n80;12\n0;12\n;\n10;3\n20;3\n20;9\n10;9\n",
        "# corners\n0\t0\n80\t0\n80\t12\n0\t12\n\n10\t3\n20\t3\n20\t9\n10\t9",
    ] {
        let read = section_from_text("traced", &of_text(text, Format::Csv).unwrap().text).unwrap();
        let outline = &read.section.pieces[0].outline;
        assert!((sectile_tests::outline_area(outline) - (960.0 - 60.0)).abs() < 1e-9);
    }
    let faults = of_text("0,0\n80,zero\n80\n1,2,3,4\n", Format::Csv)
        .unwrap_err()
        .faults;
    let told: Vec<&str> = faults.iter().map(|f| f.message.as_str()).collect();
    assert!(
        told[0].contains("line 2") && told[0].contains("zero"),
        "{told:?}"
    );
    assert!(told.iter().any(|t| t.contains("line 3")) && told.iter().any(|t| t.contains("line 4")));
}

#[test]
fn a_file_that_is_there_stays() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("x.section.toml");
    fs::write(&out, "mine").unwrap();
    let drawing = drawings().join("plate.wkt");
    let run = |extra: &[&str]| {
        let mut command = program();
        command
            .arg("trace")
            .arg(&drawing)
            .arg("--out")
            .arg(&out)
            .args(extra);
        command.assert()
    };
    run(&[]).code(2);
    assert_eq!(fs::read_to_string(&out).unwrap(), "mine");
    run(&["--force"]).code(0);
    assert!(fs::read_to_string(&out).unwrap().contains("[[piece]]"));
    // Never over the drawing itself.
    let copy = folder.path().join("plate.wkt");
    fs::copy(&drawing, &copy).unwrap();
    let mut command = program();
    command
        .arg("trace")
        .arg(&copy)
        .arg("--out")
        .arg(&copy)
        .arg("--force");
    command.assert().code(2);
    assert_eq!(fs::read(&copy).unwrap(), fs::read(&drawing).unwrap());
}

#[test]
fn damaged_drawings_are_refused_without_a_panic() {
    let mut files: Vec<PathBuf> = fs::read_dir(drawings())
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.extension().is_some_and(|e| e != "py"))
        .collect();
    files.sort();
    assert!(files.len() >= 12);
    // A linear congruential generator (Knuth's MMIX constants): the same damage on every run.
    let mut state = 1_u64;
    let mut random = move |below: usize| {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (state >> 33) as usize % below
    };
    for path in files {
        let whole = fs::read(&path).unwrap();
        let format = Format::of(&path, &whole).unwrap();
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        let mut refused = 0;
        for round in 0..60 {
            let mut bytes = whole.clone();
            if round % 2 == 0 {
                bytes.truncate(random(whole.len()));
            }
            if round % 3 != 0 && !bytes.is_empty() {
                for _ in 0..=round / 10 {
                    let at = random(bytes.len());
                    bytes[at] = match round % 4 {
                        1 => bytes[at] ^ (1 << random(8)),
                        2 => b"0123456789.-eE,()[]{}<>/\" \n"[random(27)],
                        _ => random(256) as u8,
                    };
                }
            }
            match trace(&name, &bytes, format, &Options::default()) {
                Ok(traced) => {
                    section_from_text(&name, &traced.text).unwrap();
                }
                Err(refusal) => {
                    refused += 1;
                    assert!(!refusal.faults.is_empty());
                    for fault in &refusal.faults {
                        assert!(!fault.message.is_empty() && !fault.remedy.is_empty());
                    }
                }
            }
        }
        assert!(refused >= 25, "{name}: only {refused} refused");
    }
}
