//! Full plasticity through the program: interaction curves and plastic load factors.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::process::Command;

/// A rectangle 40 × 100 of yield stress 250 MPa under N and M_x: with n = N/N_p the moment is
/// M_p (1 − n²) (elementary).
#[test]
fn a_rectangle_follows_its_parabola() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("bar.section.toml");
    let (n_p, m_p) = (250.0 * 40.0 * 100.0 / 1e3, 250.0 * 40.0 * 1e4 / 4.0 / 1e6);
    fs::write(
        &file,
        "[material.steel]\nE = 210000\nnu = 0.3\nyield = 250\n\n[[piece]]\nname = \"bar\"\n\
         bar = { at = [3, 7], b = 40, h = 100 }\n\n\
         [[action]]\nname = \"eccentric\"\nN = -400\nMx = 8\n\n\
         [[action]]\nname = \"shear alone\"\nVy = 10\n",
    )
    .unwrap();
    let status = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .arg("solve")
        .arg(&file)
        .args(["--quiet", "--tolerance", "1e-3"])
        .status()
        .unwrap();
    assert_eq!(status.code(), Some(0));
    let results = folder.path().join("bar.results");
    let json: serde_json::Value =
        serde_json::from_str(&fs::read_to_string(results.join("results.json")).unwrap()).unwrap();
    // λ M / M_p = 1 − (λ N / N_p)².
    let (n, m): (f64, f64) = (400.0 / n_p, 8.0 / m_p);
    let expected = ((m * m + 4.0 * n * n).sqrt() - m) / (2.0 * n * n);
    let found = json["actions"][0]["plastic_load_factor"].as_f64().unwrap();
    assert!((found / expected - 1.0).abs() < 1e-9, "{found} {expected}");
    assert!(json["actions"][1]["plastic_load_factor"].is_null());

    let text = fs::read_to_string(results.join("interaction.csv")).unwrap();
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let mut points = 0;
    for row in reader.records().map(Result::unwrap) {
        if &row[0] != "N-Mx" {
            continue;
        }
        let ratio = |k: usize| row[k].parse::<f64>().unwrap();
        let (n, m) = (ratio(6), ratio(7));
        assert!((m.abs() - (1.0 - n * n)).abs() < 1e-9, "{n} {m}");
        assert!((ratio(3) - n * n_p).abs() < 1e-9 * n_p);
        assert!((ratio(4) - m * m_p).abs() < 1e-9 * m_p);
        // The axis moves towards the tension until as much is left of it as N takes.
        assert!((ratio(2) + n * 50.0).abs() < 1e-7, "{n} {}", ratio(2));
        points += 1;
    }
    assert!(points > 20, "{points}");
    assert!(text.contains("no buckling") && text.contains("Plastic section analysis"));
    assert!(!text.contains("Linear-elastic"));
    let svg = fs::read_to_string(results.join("interaction.svg")).unwrap();
    assert!(svg.contains("Plastic interaction") && !svg.contains("Linear-elastic"));
}
