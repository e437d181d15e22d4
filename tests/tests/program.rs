//! The program as its users start it: outputs, exit codes, manners.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;
use serde_json::Value;

fn demo(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("../cli/demo")
        .join(format!("{name}.section.toml"))
}

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"));
    command.env("NO_COLOR", "1");
    command
}

fn json(args: &[&str], file: &Path) -> Value {
    let output = program()
        .args(["solve", "--json"])
        .args(args)
        .arg(file)
        .assert()
        .success();
    let text = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    assert_eq!(
        text.lines().count(),
        1,
        "one object a section, nothing else"
    );
    serde_json::from_str(&text).unwrap()
}

/// The channel of 200 × 80, web 8, flanges 12: J = 115811.016 from two independent meshes outside the
/// project, and bounds that hold it at every tolerance.
#[test]
fn channel_meets_its_bounds_at_every_tolerance() {
    for tolerance in ["1e-2", "1e-3", "1e-4", "1e-6"] {
        let results = json(&["--tolerance", tolerance], &demo("ramp-channel"));
        let j = &results["properties"]["torsion_constant"];
        let (low, high) = (j["low"].as_f64().unwrap(), j["high"].as_f64().unwrap());
        assert!(low <= 115_811.016_5 && 115_811.016 <= high, "{low} {high}");
        let half = 0.5 * (high - low) / j["value"].as_f64().unwrap();
        assert!(half <= tolerance.parse::<f64>().unwrap());
    }
    let results = json(&["--tolerance", "1e-6"], &demo("ramp-channel"));
    let value = results["properties"]["torsion_constant"]["value"]
        .as_f64()
        .unwrap();
    assert!((115_810.9..=115_811.1).contains(&value));
}

#[test]
fn results_have_every_key_of_the_contract() {
    let results = json(&[], &demo("facade-rail"));
    for key in [
        "title",
        "units",
        "properties",
        "actions",
        "mesh",
        "timings",
        "notes",
    ] {
        assert!(results.get(key).is_some(), "{key}");
    }
    for key in ["length", "force", "moment", "stress"] {
        assert!(results["units"][key].is_string(), "{key}");
    }
    for key in ["triangles", "unknowns", "order", "levels"] {
        assert!(results["mesh"][key].is_u64(), "{key}");
    }
    for key in [
        "read", "mesh", "order", "assemble", "factor", "solve", "bounds", "write",
    ] {
        assert!(results["timings"][key].is_f64(), "{key}");
    }
    let keys = "area perimeter mass_per_length centroid_x centroid_y second_moment_x second_moment_y \
        product_moment principal_moment_1 principal_moment_2 principal_angle radius_of_gyration_x \
        radius_of_gyration_y radius_of_gyration_1 radius_of_gyration_2 section_modulus_top \
        section_modulus_bottom section_modulus_left section_modulus_right plastic_modulus_x \
        plastic_modulus_y plastic_centroid_x plastic_centroid_y torsion_constant shear_centre_x \
        shear_centre_y flexure_centre_x flexure_centre_y warping_constant shear_area_x shear_area_y \
        shear_coefficient_x shear_coefficient_y polar_radius monosymmetry_x monosymmetry_y";
    for key in keys.split_whitespace() {
        let p = &results["properties"][key];
        let number = |k: &str| p[k].as_f64().unwrap_or_else(|| panic!("{key}.{k}"));
        assert!(
            number("low") <= number("value") && number("value") <= number("high"),
            "{key}"
        );
        let trust = p["trust"].as_str().unwrap();
        assert!(["exact", "bounded", "estimated"].contains(&trust), "{key}");
        assert!(p["unit"].is_string() && p["symbol"].is_string(), "{key}");
    }
}

#[test]
fn a_folder_takes_all_files_and_is_kept_from_other_sections() {
    let folder = tempfile::tempdir().unwrap();
    let solve = |name: &str| {
        let mut command = program();
        command
            .args(["solve", "--quiet", "--out"])
            .arg(folder.path())
            .arg(demo(name));
        command.assert()
    };
    solve("facade-rail").success().stdout("");
    let mut names: Vec<String> = fs::read_dir(folder.path())
        .unwrap()
        .map(|e| e.unwrap().file_name().into_string().unwrap())
        .collect();
    names.sort();
    assert_eq!(
        names,
        [
            "interaction.csv",
            "interaction.svg",
            "mesh.svg",
            "properties.csv",
            "results.json",
            "section.svg",
            "shear-torque.svg",
            "shear-vx.svg",
            "shear-vy.svg",
            "warping.svg"
        ]
    );
    for name in &names {
        assert!(fs::metadata(folder.path().join(name)).unwrap().len() < 400_000);
    }
    solve("facade-rail").success();
    let refused = solve("hall-girder").code(2);
    let message = String::from_utf8(refused.get_output().stderr.clone()).unwrap();
    assert!(message.contains("facade-rail.section.toml"), "{message}");
}

/// Everything but the timings is the same on every run and any number of threads.
#[test]
fn results_do_not_depend_on_threads() {
    let run = |threads: &str| {
        let output = program()
            .env("RAYON_NUM_THREADS", threads)
            .args(["solve", "--json"])
            .arg(demo("facade-rail"))
            .assert()
            .success();
        let text = String::from_utf8(output.get_output().stdout.clone()).unwrap();
        let mut value: Value = serde_json::from_str(&text).unwrap();
        value["timings"].take();
        value.to_string()
    };
    let one = run("1");
    assert_eq!(one, run("2"));
    assert_eq!(one, run("5"));
}

#[test]
fn too_few_unknowns_are_a_finding_with_true_bounds() {
    let output = program()
        .args([
            "solve",
            "--json",
            "--tolerance",
            "1e-9",
            "--max-unknowns",
            "3000",
        ])
        .arg(demo("ramp-channel"))
        .assert()
        .code(1);
    let text = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    let results: Value = serde_json::from_str(&text).unwrap();
    assert_eq!(results["tolerance_reached"], Value::Bool(false));
    let j = &results["properties"]["torsion_constant"];
    assert!(j["low"].as_f64().unwrap() <= 115_811.016);
    assert!(j["high"].as_f64().unwrap() >= 115_811.016_5);
    let notes = results["notes"].as_array().unwrap();
    assert!(notes.iter().any(|n| n["kind"] == "tolerance-not-reached"));
}

#[test]
fn separate_parts_bend_but_are_refused_for_torsion() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("pair.section.toml");
    fs::write(
        &file,
        "title = \"Two flats side by side (invented)\"\n\
         [[piece]]\nname = \"left\"\nbar = { at = [0, 0], b = 10, h = 60 }\n\
         [[piece]]\nname = \"right\"\nbar = { at = [30, 0], b = 10, h = 60 }\n",
    )
    .unwrap();
    let output = program()
        .args(["solve", "--json"])
        .arg(&file)
        .assert()
        .code(1);
    let text = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    let results: Value = serde_json::from_str(&text).unwrap();
    let properties = results["properties"].as_object().unwrap();
    assert!(properties.contains_key("second_moment_x"));
    assert!(!properties.contains_key("torsion_constant"));
    let notes = results["notes"].as_array().unwrap();
    assert!(notes.iter().any(|n| n["kind"] == "separate-parts"));
}

#[test]
fn an_assumed_material_is_said() {
    let file = Path::new(env!("CARGO_MANIFEST_DIR")).join("good/disc.section.toml");
    let results = json(&[], &file);
    let notes = results["notes"].as_array().unwrap();
    assert!(notes.iter().any(|n| n["kind"] == "assumed-material"));
}

/// The demo's wheel: −8 kN at x = 44 against a shear centre at x = −25.3696 (energy definition), so
/// 8 × 69.37 kN mm of torque; extremes, probes and cuts have the contract's keys.
#[test]
fn actions_are_answered_with_the_keys_of_the_contract() {
    let results = json(&["--to-yield"], &demo("ramp-channel"));
    let actions = results["actions"].as_array().unwrap();
    let wheel = actions.iter().find(|a| a["name"] == "wheel").unwrap();
    let torque = wheel["torque"].as_f64().unwrap();
    let offset = 44.0 + 25.369_63;
    assert!((torque + 8.0 * offset * 1e-3).abs() < 1e-6, "{torque}");
    assert!(wheel["load_factor_to_yield"].as_f64().unwrap() > 1.0);
    for key in [
        "sigma_max",
        "sigma_min",
        "tau",
        "von_mises",
        "tresca",
        "principal_1",
        "principal_3",
        "utilisation",
    ] {
        let extreme = &wheel["extremes"][key];
        assert!(extreme["value"].is_number(), "{key}");
        assert_eq!(extreme["at"].as_array().unwrap().len(), 2);
        assert!(extreme["piece"].is_string());
    }
    let probe = &wheel["probes"][0];
    for key in ["sigma", "tau_x", "tau_y", "von_mises"] {
        assert!(probe[key].is_number(), "{key}");
    }
    let cut = &wheel["cuts"][0];
    // At mid-height the flow is V Q / I, Q = 80·12·94 + 8·88·44 (common practice, no source).
    let flow = cut["shear_flow"].as_f64().unwrap();
    let q = 80.0 * 12.0 * 94.0 + 8.0 * 88.0 * 44.0;
    let i = results["properties"]["second_moment_x"]["value"]
        .as_f64()
        .unwrap();
    assert!(
        (flow.abs() - 8.0 * q / i).abs() < 1e-8 * flow.abs(),
        "{flow}"
    );
    assert!(cut["normal_force"].is_number());
}

/// Section forces come back in the units in which they were stated, the bimoment's too: moment times length.
#[test]
fn section_forces_come_back_as_they_were_stated() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("bar.section.toml");
    let stated = [
        ("N", 3.5),
        ("Vx", -1.25),
        ("Mx", 12.0),
        ("My", 0.75),
        ("T", 0.5),
        ("B", -40.0),
        ("Tw", 0.125),
    ];
    let lines: String = stated.iter().map(|(k, v)| format!("{k} = {v}\n")).collect();
    let text = format!(
        "[units]\nlength = \"mm\"\nforce = \"kN\"\nmoment = \"kN m\"\n\
         [[piece]]\nname = \"bar\"\nbar = {{ at = [0, 0], b = 10, h = 30 }}\n\
         [[action]]\nname = \"all\"\n{lines}"
    );
    std::fs::write(&file, text).unwrap();
    let results = json(&["--tolerance", "1e-3"], &file);
    for (key, value) in stated {
        let found = results["actions"][0]["forces"][key].as_f64().unwrap();
        assert!(
            (found - value).abs() <= 1e-12 * value.abs(),
            "{key}: {found}"
        );
    }
}

#[test]
fn a_yield_stress_that_is_asked_for_and_missing_is_an_error() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("bar.section.toml");
    fs::write(
        &file,
        "title = \"Bar (invented)\"\n[material.alloy]\nE = 70000\nnu = 0.33\n\
         [[piece]]\nname = \"bar\"\nbar = { at = [0, 0], b = 10, h = 60 }\n\
         [[action]]\nname = \"pull\"\nN = 5\n",
    )
    .unwrap();
    program()
        .args(["solve", "--json"])
        .arg(&file)
        .assert()
        .success();
    let output = program()
        .args(["solve", "--json", "--to-yield"])
        .arg(&file)
        .assert()
        .code(2)
        .stdout("");
    let message = String::from_utf8(output.get_output().stderr.clone()).unwrap();
    assert!(
        message.contains("bar.section.toml") && message.contains("yield"),
        "{message}"
    );
}

#[test]
fn actions_write_tables_fields_and_pictures() {
    let folder = tempfile::tempdir().unwrap();
    program()
        .args(["solve", "--quiet", "--png", "60", "--out"])
        .arg(folder.path())
        .arg(demo("ramp-channel"))
        .assert()
        .success();
    for name in [
        "stresses.csv",
        "field-wheel.csv",
        "field-wheel.vtu",
        "stress-wheel-von-mises.svg",
        "stress-wheel-sigma.svg",
        "stress-wheel-tau.svg",
        "stress-envelope-von-mises.svg",
        "cut-web-at-mid-height-wheel.svg",
        "cut-web-at-mid-height-wheel.csv",
        "section.png",
    ] {
        assert!(folder.path().join(name).exists(), "{name}");
    }
    for entry in fs::read_dir(folder.path()).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_some_and(|e| e == "svg") {
            assert!(
                fs::metadata(&path).unwrap().len() < 400_000,
                "{}",
                path.display()
            );
        }
    }
}

#[test]
fn contours_draw_lines_instead_of_bands() {
    let draw = |options: &[&str]| {
        let folder = tempfile::tempdir().unwrap();
        program()
            .args(["solve", "--quiet", "--out"])
            .arg(folder.path())
            .args(options)
            .arg(demo("facade-rail"))
            .assert()
            .success();
        fs::read_to_string(folder.path().join("shear-torque.svg")).unwrap()
    };
    let (bands, lines) = (draw(&[]), draw(&["--contours"]));
    assert!(lines.contains("Lines of equal") && !bands.contains("Lines of equal"));
    assert!(lines.len() < bands.len());
}

#[test]
fn settings_out_of_range_are_refused() {
    for args in [
        ["--tolerance", "0"],
        ["--tolerance", "nan"],
        ["--tolerance", "2"],
        ["--order", "0"],
        ["--order", "9"],
        ["--width", "1mm"],
    ] {
        program()
            .args(["solve", "--json"])
            .args(args)
            .arg(demo("ramp-channel"))
            .assert()
            .code(2)
            .stdout("");
    }
}

#[test]
fn bad_files_are_named_and_do_not_stop_the_others() {
    let missing = Path::new("no-such.section.toml");
    let output = program()
        .args(["solve", "--json"])
        .arg(missing)
        .arg(demo("ramp-channel"))
        .assert()
        .code(2);
    let output = output.get_output();
    assert!(String::from_utf8_lossy(&output.stderr).contains("no-such.section.toml"));
    assert_eq!(String::from_utf8_lossy(&output.stdout).lines().count(), 1);
}

#[test]
fn new_writes_a_starter_that_solves_and_never_overwrites() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("beam.section.toml");
    let new = || {
        let mut command = program();
        command.args(["new", "I", "--out"]).arg(&file);
        command.assert()
    };
    new().success();
    let text = fs::read_to_string(&file).unwrap();
    new().code(2);
    assert_eq!(fs::read_to_string(&file).unwrap(), text);
    program()
        .args(["solve", "--quiet"])
        .arg(&file)
        .assert()
        .success();
    assert!(folder.path().join("beam.results/section.svg").exists());
}

#[test]
fn timings_name_every_stage() {
    let output = program()
        .args(["solve", "--json", "--timings"])
        .arg(demo("ramp-channel"))
        .assert()
        .success();
    let text = String::from_utf8(output.get_output().stderr.clone()).unwrap();
    for stage in [
        "read", "mesh", "order", "assemble", "factor", "solve", "bounds", "write",
    ] {
        assert!(text.contains(stage), "{stage}");
    }
}
