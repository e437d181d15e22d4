//! `solve --report`: one page that needs no other, and a text.
#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

fn demo(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("../cli/demo/{name}.section.toml"))
}

/// Both reports of a demo.
fn reports(name: &str) -> (String, String) {
    let out = tempfile::tempdir().unwrap();
    let status = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .arg("solve")
        .arg(demo(name))
        .args(["--report", "--quiet", "--tolerance", "1e-3", "--out"])
        .arg(out.path().join("results"))
        .status()
        .unwrap();
    assert!(matches!(status.code(), Some(0 | 1)), "{status}");
    let read = |file: &str| fs::read_to_string(out.path().join("results").join(file)).unwrap();
    (read("report.html"), read("report.md"))
}

#[test]
fn the_page_needs_nothing_else() {
    let (html, _) = reports("ramp-channel");
    assert!(html.len() < 2_000_000, "{} bytes", html.len());
    // All that is fetched stands in the page itself.
    for part in ["src=\"", "href=\"", "url("] {
        for (at, _) in html.match_indices(part) {
            let rest = &html[at + part.len()..];
            assert!(rest.starts_with("data:"), "{}", &rest[..40.min(rest.len())]);
        }
    }
    assert!(!html.contains("fetch(") && !html.contains("import("));
    // One sheet with its data, one script.
    assert_eq!(html.matches("id=\"sheet-data\"").count(), 1);
    assert_eq!(html.matches("<h1>").count(), 1);
}

#[test]
fn page_and_text_say_the_same() {
    let (html, text) = reports("ramp-channel");
    let stated = fs::read_to_string(demo("ramp-channel")).unwrap();
    for part in [
        "Torsion constant",
        "Warping constant",
        "Shear centre, x",
        "wheel",
        "SHA-256",
        "check by local codes and licensed practice",
        "Prager",
        "bounded",
        "first yield at",
    ] {
        assert!(html.contains(part), "page: {part}");
        assert!(text.contains(part), "text: {part}");
    }
    // The section file stands in both as it is.
    assert!(text.contains(stated.trim_end()));
    let line = stated.lines().find(|l| l.contains('[')).unwrap();
    assert!(html.contains(&line.replace('"', "&quot;")));
}

/// Half a unit of the last of the 16 bits that a page carries of a number.
const CARRIED: f64 = 1.0 / 65536.0;

/// The data of the sheet: unit stresses superposed at the nodes give the stress that the program reports,
/// to the 16 bits that are carried.
#[test]
fn the_sheets_unit_fields_are_the_solvers() {
    use base64::Engine;
    let (html, _) = reports("ramp-channel");
    let start = html.find("id=\"sheet-data\">").unwrap() + "id=\"sheet-data\">".len();
    let end = start + html[start..].find("</script>").unwrap();
    let data: serde_json::Value =
        serde_json::from_str(&html[start..end].replace("<\\/", "</")).unwrap();
    // The upper bytes of each number, as many as are carried.
    let floats = |key: &str, width: usize| -> Vec<f64> {
        let bytes = base64::engine::general_purpose::STANDARD
            .decode(data[key].as_str().unwrap())
            .unwrap();
        bytes
            .chunks_exact(width)
            .map(|b| {
                let mut four = [0; 4];
                four[4 - width..].copy_from_slice(b);
                f64::from(f32::from_le_bytes(four))
            })
            .collect()
    };
    let (places, fields) = (floats("positions", 4), floats("fields", 3));
    let divisions = data["divisions"].as_u64().unwrap() as usize;
    let per = (divisions + 1) * (divisions + 2) / 2;
    let triangles = data["piece"].as_array().unwrap().len();
    assert_eq!(places.len(), 2 * per * triangles);
    assert_eq!(fields.len(), 12 * per * triangles);
    // M_x of 1 kN m: σ = M y/I_x, I_x of the channel 20 622 677 mm⁴ by its three rectangles.
    let second = (80.0 * 200.0_f64.powi(3) - 72.0 * 176.0_f64.powi(3)) / 12.0;
    let origin = data["origin"][1].as_f64().unwrap();
    for (place, field) in places.chunks_exact(2).zip(fields.chunks_exact(12)) {
        let expected = 1e6 * (origin + place[1] - 100.0) / second;
        assert!(
            (field[1] - expected).abs() < CARRIED * expected.abs() + 1e-5,
            "{} {expected}",
            field[1]
        );
        assert!((field[0] - 1e3 / 3328.0).abs() < CARRIED * 0.3006);
    }
}

/// The process is stopped however the test ends.
struct Running(std::process::Child);

impl Drop for Running {
    fn drop(&mut self) {
        let _ = self.0.kill();
        let _ = self.0.wait();
    }
}

/// Waits until the file satisfies `holds`.
fn wait_for(path: &Path, holds: impl Fn(&str) -> bool) -> String {
    for _ in 0..600 {
        if let Ok(text) = fs::read_to_string(path)
            && holds(&text)
        {
            return text;
        }
        std::thread::sleep(std::time::Duration::from_millis(100));
    }
    panic!("{} never was as it should", path.display());
}

#[test]
fn a_watched_file_is_answered_at_every_save() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("rail.section.toml");
    let section =
        |b: u32| format!("[[piece]]\nname = \"bar\"\nbar = {{ at = [0, 0], b = {b}, h = 20 }}\n");
    fs::write(&file, section(10)).unwrap();
    let child = Command::new(env!("CARGO_BIN_EXE_sectile-as-tested"))
        .arg("solve")
        .arg(&file)
        .args(["--report", "--watch", "--quiet"])
        .stderr(std::process::Stdio::null())
        .spawn()
        .unwrap();
    let mut running = Running(child);
    let results = folder.path().join("rail.results");
    let state = results.join("report-state.js");
    let first = wait_for(&state, |t| t.contains("\"error\":null"));
    let page = fs::read_to_string(results.join("report.html")).unwrap();
    assert!(page.contains("report-state.js"));

    // A fault is told in place, and the last answer stays.
    fs::write(
        &file,
        "[[piece]]\nname = \"bar\"\nbar = { at = [0, 0], b = -1, h = 20 }\n",
    )
    .unwrap();
    let fault = wait_for(&state, |t| !t.contains("\"error\":null"));
    assert!(fault.contains("nothing was computed"), "{fault}");
    assert_eq!(
        fs::read_to_string(results.join("report.html")).unwrap(),
        page
    );

    fs::write(&file, section(12)).unwrap();
    let second = wait_for(&state, |t| t.contains("\"error\":null") && t != first);
    assert_ne!(first, second);
    assert_ne!(
        fs::read_to_string(results.join("report.html")).unwrap(),
        page
    );
    assert!(running.0.try_wait().unwrap().is_none(), "it goes on");
}
