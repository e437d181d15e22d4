//! Sections of several materials through the program.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

struct Run {
    table: String,
    json: Value,
    materials: String,
    properties: String,
    figure: String,
}

fn run() -> Run {
    let folder = tempfile::tempdir().unwrap();
    let file = Path::new(env!("CARGO_MANIFEST_DIR")).join("good/two-materials.section.toml");
    let printed = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .env("NO_COLOR", "1")
        .arg("solve")
        .arg(file)
        .arg("--out")
        .arg(folder.path())
        .output()
        .unwrap();
    assert_eq!(printed.status.code(), Some(0));
    let read = |name: &str| fs::read_to_string(folder.path().join(name)).unwrap();
    Run {
        table: String::from_utf8(printed.stdout).unwrap(),
        json: serde_json::from_str(&read("results.json")).unwrap(),
        materials: read("materials.csv"),
        properties: read("properties.csv"),
        figure: read("section.svg"),
    }
}

fn near(found: &Value, expected: f64) {
    let found = found.as_f64().unwrap();
    assert!(
        (found - expected).abs() <= 1e-6 * expected.abs(),
        "{found}, not {expected}"
    );
}

#[test]
fn each_material_has_its_stresses() {
    let solved = run();
    // The transformed section (textbook, from memory): timber of 100 × 200 counts with n = 11/210, the
    // strap of 100 × 10 below it fully. Lengths in mm, forces in kN.
    let n = 11.0 / 210.0;
    let (timber, strap) = (20_000.0, 1000.0);
    let area = n * timber + strap;
    let centroid = strap * -105.0 / area;
    let own = n * 100.0 * 200.0_f64.powi(3) / 12.0 + 100.0 * 1000.0 / 12.0;
    let second = own + n * timber * centroid.powi(2) + strap * (-105.0 - centroid).powi(2);
    let properties = &solved.json["properties"];
    near(&properties["area"]["value"], 21_000.0);
    near(&properties["centroid_y"]["value"], centroid);
    near(&properties["second_moment_x"]["value"], second);
    // 210 GPa are 210 kN/mm².
    near(&properties["axial_stiffness"]["value"], 210.0 * area);
    near(&properties["bending_stiffness_x"]["value"], 210.0 * second);
    assert_eq!(properties["bending_stiffness_x"]["unit"], "kN mm2");
    near(
        &properties["mass_per_length"]["value"],
        0.02 * 420.0 + 0.001 * 7850.0,
    );

    // −14 kN m; 1 kN/mm² is 1000 MPa.
    let stress = |y: f64, share: f64| 1000.0 * share * -14_000.0 * (y - centroid) / second;
    let within = solved.json["actions"][0]["materials"].as_array().unwrap();
    let [beam, steel] = &within[..] else {
        panic!("{within:?}");
    };
    assert_eq!(
        (&beam["material"], &steel["material"]),
        (&"timber".into(), &"steel".into())
    );
    // One-sided where the two meet, at y = −100.
    near(&beam["extremes"]["sigma_max"]["value"], stress(-100.0, n));
    near(&beam["extremes"]["sigma_min"]["value"], stress(100.0, n));
    near(
        &steel["extremes"]["sigma_max"]["value"],
        stress(-110.0, 1.0),
    );
    near(
        &steel["extremes"]["sigma_min"]["value"],
        stress(-100.0, 1.0),
    );
    let used = &steel["extremes"]["utilisation"]["value"];
    assert!((used.as_f64().unwrap() - stress(-110.0, 1.0) / 235.0).abs() < 1e-3);
    // The whole section's extremes are the worse of the two.
    let whole = &solved.json["actions"][0]["extremes"];
    for (measure, of) in [
        ("sigma_max", steel),
        ("sigma_min", beam),
        ("utilisation", beam),
    ] {
        assert_eq!(
            whole[measure]["value"], of["extremes"][measure]["value"],
            "{measure}"
        );
    }
    // The probe on the joint has a stress on either side.
    let probes = solved.json["actions"][0]["probes"].as_array().unwrap();
    assert_eq!(probes.len(), 2);
    for probe in probes {
        let share = if probe["piece"] == "beam" { n } else { 1.0 };
        near(&probe["sigma"], stress(-100.0, share));
    }

    assert_eq!(solved.json["reference"], "steel");
    assert_eq!(solved.json["materials"][0]["young"], 11_000.0);
    let reference = "Moduli over those of steel, E = 210000 MPa, G = 80769.2 MPa.";
    for text in [&solved.table, &solved.properties] {
        assert!(text.contains(reference), "{text}");
    }
    for word in ["Materials", "timber", "Stiffness", "slip, creep"] {
        assert!(solved.table.contains(word), "{word}");
    }
    assert!(
        solved
            .materials
            .lines()
            .any(|l| l.starts_with("floor,envelope,steel,sigma_max,"))
    );
    assert!(solved.figure.contains("timber") && solved.figure.contains("steel"));
}

#[test]
fn one_material_says_nothing_of_others() {
    let folder = tempfile::tempdir().unwrap();
    let file = Path::new(env!("CARGO_MANIFEST_DIR")).join("../cli/demo/ramp-channel.section.toml");
    Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .arg("solve")
        .arg(file)
        .args(["--quiet", "--tolerance", "1e-2", "--out"])
        .arg(folder.path())
        .assert()
        .success();
    assert!(!folder.path().join("materials.csv").exists());
    assert!(!folder.path().join("seams.csv").exists());
    let json: Value =
        serde_json::from_str(&fs::read_to_string(folder.path().join("results.json")).unwrap())
            .unwrap();
    for key in ["reference", "materials", "seams"] {
        assert_eq!(json.get(key), None, "{key}");
    }
    assert_eq!(json["actions"][0].get("materials"), None);
}
