//! Seams through the program: tables, CSV, JSON, figure, exit codes.
#![allow(clippy::unwrap_used)]

use std::fs;

use assert_cmd::Command;
use serde_json::Value;

/// Two flats of 100 × 20 on each other, in N and mm, held at both edges.
fn flats(seam: &str) -> String {
    format!(
        "title = \"Two flats (invented)\"\n\
         [units]\nforce = \"N\"\nmoment = \"N mm\"\n\
         [material.steel]\nE = 210000\nnu = 0.3\nyield = 235\n\
         [[piece]]\nname = \"lower\"\nbar = {{ at = [0, -10], b = 100, h = 20 }}\n\
         [[piece]]\nname = \"upper\"\nbar = {{ at = [0, 10], b = 100, h = 20 }}\n\
         [[seam]]\nname = \"edge\"\nbetween = [\"lower\", \"upper\"]\ngroove = 8\nat = \"both\"\n{seam}\n\
         [[action]]\nname = \"shear\"\nVy = 8000\n\
         [[action]]\nname = \"twist\"\nT = 500000\n\
         [[combination]]\nname = \"twice the shear\"\nfactors = {{ shear = 2.0 }}\n"
    )
}

struct Run {
    code: i32,
    table: String,
    json: Value,
    rows: Vec<Vec<(String, String)>>,
    figure: String,
}

fn run(text: &str) -> Run {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("bar.section.toml");
    fs::write(&file, text).unwrap();
    let printed = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .env("NO_COLOR", "1")
        .current_dir(folder.path())
        .args([
            "solve",
            "bar.section.toml",
            "--tolerance",
            "1e-3",
            "--out",
            "out",
        ])
        .output()
        .unwrap();
    let read = |name: &str| fs::read_to_string(folder.path().join("out").join(name)).unwrap();
    let csv = read("seams.csv");
    let mut reader = csv::Reader::from_reader(csv.as_bytes());
    let heads = reader.headers().unwrap().clone();
    let rows = reader
        .records()
        .map(|row| {
            let row = row.unwrap();
            heads
                .iter()
                .map(String::from)
                .zip(row.iter().map(String::from))
                .collect()
        })
        .collect();
    Run {
        code: printed.status.code().unwrap(),
        table: String::from_utf8(printed.stdout).unwrap(),
        json: serde_json::from_str(&read("results.json")).unwrap(),
        rows,
        figure: read("section.svg"),
    }
}

impl Run {
    fn demand(&self, action: &str, seam: &str) -> &Value {
        let named = |list: &'static str, name: &str, of: &Value| -> usize {
            let list = of[list].as_array().unwrap();
            list.iter().position(|x| x["name"] == name).unwrap()
        };
        let a = named("actions", action, &self.json);
        let action = &self.json["actions"][a];
        let s = named("seams", seam, action);
        &action["seams"][s]
    }

    fn cell(&self, action: &str, kind: &str, seam: &str, column: &str) -> f64 {
        let has = |row: &[(String, String)], head: &str, text: &str| {
            row.iter().any(|(h, t)| h == head && t == text)
        };
        let row = self
            .rows
            .iter()
            .find(|r| has(r, "action", action) && has(r, "kind", kind) && has(r, "seam", seam))
            .unwrap();
        let (_, text) = row.iter().find(|(h, _)| h == column).unwrap();
        text.parse().unwrap()
    }

    fn notes(&self, kind: &str) -> Vec<&str> {
        self.json["notes"]
            .as_array()
            .unwrap()
            .iter()
            .filter(|note| note["kind"] == kind)
            .map(|note| note["text"].as_str().unwrap())
            .collect()
    }
}

fn near(found: f64, expected: f64, tolerance: f64) {
    assert!(
        (found - expected).abs() <= tolerance * expected.abs(),
        "{found}, not {expected}"
    );
}

#[test]
fn a_pair_of_grooves_shares_the_flow_of_statics() {
    let solved = run(&flats("allowable = 40"));
    assert_eq!(solved.code, 0, "{}", solved.table);
    // Jourawski's formula for two rectangles (textbook, from memory): V Q/I = 3V/(2h) with h = 40, half
    // of it in each groove by symmetry.
    let flow = 0.5 * 1.5 * 8000.0 / 40.0;
    for seam in ["edge, end 1", "edge, end 2"] {
        let demand = solved.demand("shear", seam);
        let get = |key: &str| demand[key].as_f64().unwrap();
        near(get("flow"), flow, 1e-4);
        near(get("resultant"), flow, 1e-4);
        near(get("throat"), 8.0, 1e-12);
        near(get("throat_stress"), flow / 8.0, 1e-4);
        near(get("utilisation"), flow / 8.0 / 40.0, 1e-4);
        near(get("depth_needed"), flow / 40.0, 1e-4);
        assert_eq!(demand["leg_needed"], Value::Null);
        near(
            solved.demand("twice the shear", seam)["flow"]
                .as_f64()
                .unwrap(),
            2.0 * flow,
            1e-4,
        );
        for (kind, action) in [("action", "shear"), ("combination", "twice the shear")] {
            let json = solved.demand(action, seam);
            for key in ["flow", "resultant", "throat_stress", "utilisation"] {
                // The JSON reader of the test is off by the last bit now and then.
                let cell = solved.cell(action, kind, seam, key);
                near(cell, json[key].as_f64().unwrap(), 1e-14);
            }
        }
        near(
            solved.cell("twice the shear", "envelope", seam, "flow"),
            2.0 * flow,
            1e-4,
        );
    }
    // A torque gives both the same flow in opposite senses.
    let [one, two] = ["edge, end 1", "edge, end 2"]
        .map(|seam| solved.demand("twist", seam)["flow"].as_f64().unwrap());
    near(one, -two, 1e-8);
    assert!(one.abs() > 1.0);

    for word in [
        "Seams",
        "edge, end 1",
        "depth",
        "not judged",
        "licensed practice",
    ] {
        assert!(solved.table.contains(word), "{word}\n{}", solved.table);
    }
    assert!(solved.table.lines().all(|line| line.chars().count() <= 100));
    assert!(solved.figure.contains("joined by a groove"));
    assert_eq!(solved.notes("seams").len(), 1);
    assert_eq!(solved.json["seams"][0]["governing"], "twice the shear");
}

#[test]
fn too_small_a_seam_is_a_finding() {
    let solved = run(&flats("allowable = 30\nlength = 40\npitch = 100"));
    assert_eq!(solved.code, 1);
    // 300 N/mm on 40 % of the length and a throat of 8 mm: 93.75 MPa, 3.125 times 30 MPa.
    let demand = solved.demand("twice the shear", "edge, end 1");
    near(demand["resultant"].as_f64().unwrap(), 750.0, 1e-4);
    near(demand["utilisation"].as_f64().unwrap(), 3.125, 1e-4);
    let notes = solved.notes("seam-overstressed");
    assert_eq!(notes.len(), 2);
    assert!(notes[0].contains("3.13 times"), "{}", notes[0]);
    assert!(solved.table.contains("3.13 times"), "{}", solved.table);
    assert_eq!(solved.notes("seams").len(), 2);
}

#[test]
fn a_line_load_joins_as_a_vector() {
    let solved = run(&flats("direct = [0, \"0.08 kN/mm\"]"));
    let demand = solved.demand("shear", "edge, end 2");
    let flow = demand["flow"].as_f64().unwrap();
    near(flow, 150.0, 1e-4);
    near(demand["resultant"].as_f64().unwrap(), 170.0, 1e-4);
    assert_eq!(demand["utilisation"], Value::Null);
    assert_eq!(solved.code, 0);
}

#[test]
fn the_needed_leg_is_enough() {
    let text = |leg: f64| {
        format!(
            "[material.steel]\nE = 210000\nnu = 0.3\n\
             [[piece]]\nname = \"web\"\nbar = {{ at = [0, 150], b = 8, h = 300 }}\n\
             [[piece]]\nname = \"flange\"\nbar = {{ at = [0, -8], b = 150, h = 16 }}\n\
             [[seam]]\nname = \"neck\"\nbetween = [\"flange\", \"web\"]\nfillet = {leg}\nat = \"both\"\n\
             allowable = 80\n\
             [[action]]\nname = \"load\"\nVy = -200\n"
        )
    };
    let first = run(&text(3.0));
    assert_eq!(first.code, 1);
    let leg = first.demand("load", "neck, end 1")["leg_needed"]
        .as_f64()
        .unwrap();
    assert!(leg > 3.0, "{leg}");
    let again = run(&text(leg));
    // The flow falls a little as the seam's own metal grows.
    let used = again.demand("load", "neck, end 1")["utilisation"]
        .as_f64()
        .unwrap();
    assert!(used > 0.98 && used <= 1.0, "{used}");
    assert!(again.figure.contains("weld metal"));
}

#[test]
fn declared_units_change_no_demand() {
    // Every quantity carries its own unit; bare numbers have none.
    let text = |units: &str| {
        format!(
            "[units]\n{units}\n[material.steel]\nE = \"210 GPa\"\nnu = 0.3\n\
             [[piece]]\nname = \"flat\"\n\
             bar = {{ at = [0, \"-10 mm\"], b = \"120 mm\", h = \"20 mm\" }}\n\
             [[piece]]\nname = \"cover\"\n\
             bar = {{ at = [0, \"7 mm\"], b = \"70 mm\", h = \"12 mm\" }}\n\
             [[seam]]\nname = \"edge\"\nbetween = [\"flat\", \"cover\"]\nfillet = [\"6 mm\", \"8 mm\"]\n\
             at = \"both\"\ngap = \"1.5 mm\"\nallowable = \"90 MPa\"\ndirect = [0, \"30 N/mm\"]\n\
             length = \"50 mm\"\npitch = \"120 mm\"\n\
             [[action]]\nname = \"load\"\nVy = \"-21 kN\"\nT = \"0.4 kN m\"\n"
        )
    };
    let metric = run(&text("length = \"mm\"\nforce = \"N\"\nstress = \"MPa\""));
    let imperial = run(&text("length = \"in\"\nforce = \"kip\"\nstress = \"ksi\""));
    // 1 in = 25.4 mm; 1 kip = 4448.2216 N, so 1 kip/in = 175.12684 N/mm and 1 ksi = 6.8947573 MPa.
    for seam in ["edge, end 1", "edge, end 2"] {
        let (a, b) = (metric.demand("load", seam), imperial.demand("load", seam));
        for (key, unit) in [
            ("flow", 175.126_84),
            ("resultant", 175.126_84),
            ("throat", 25.4),
            ("throat_stress", 6.894_757_3),
            ("utilisation", 1.0),
            ("leg_needed", 25.4),
            ("second_leg_needed", 25.4),
        ] {
            let get = |demand: &Value| demand[key].as_f64().unwrap();
            near(unit * get(b), get(a), 1e-6);
        }
    }
}

#[test]
fn the_number_of_threads_changes_no_demand() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("bar.section.toml");
    fs::write(&file, flats("allowable = 40")).unwrap();
    let on = |threads: &str| {
        let out = folder.path().join("out");
        Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
            .env("RAYON_NUM_THREADS", threads)
            .args(["solve", "--quiet", "--tolerance", "1e-3"])
            .arg(&file)
            .arg("--out")
            .arg(&out)
            .assert()
            .success();
        ["seams.csv", "stresses.csv", "section.svg"].map(|name| fs::read(out.join(name)).unwrap())
    };
    assert!(on("1") == on("3"));
}
