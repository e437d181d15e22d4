//! Numbers and sliders: what is shown follows, and is what the program answers to just these forces.

use fantoccini::key::Key;

use crate::chromium::Chromium;
use crate::{chromium, program, sheet};

/// The extremes that the page lists, by their keys in `results.json`.
const KEYS: [&str; 5] = ["sigma_max", "sigma_min", "tau", "von_mises", "tresca"];
/// Of what is shown: four digits, and two searches for the largest value that need not end on one point.
const CLOSE: f64 = 1e-3;

/// Section forces as they are set, and the line of action of V if not through the shear centre.
struct Set {
    typed: &'static [(&'static str, f64)],
    /// Sliders and the steps by which they are pushed on.
    pushed: &'static [(&'static str, i32)],
    at: Option<[f64; 2]>,
}

/// Of one sign and of both, a single force and all seven.
const SETS: [Set; 4] = [
    Set {
        typed: &[("N", 120.0), ("Mx", -35.5)],
        pushed: &[("Vy", -12)],
        at: None,
    },
    Set {
        typed: &[("Vx", 8.25), ("Vy", -41.0), ("My", 3.5), ("T", -0.75)],
        pushed: &[("Mx", 9)],
        at: Some([35.0, -20.0]),
    },
    Set {
        typed: &[
            ("N", -60.0),
            ("Vx", -5.0),
            ("Vy", 20.0),
            ("Mx", 12.0),
            ("My", -2.0),
            ("T", 0.4),
        ],
        pushed: &[("B", 20)],
        at: None,
    },
    Set {
        typed: &[],
        pushed: &[("T", 31)],
        at: None,
    },
];

fn follows(name: &str) {
    chromium::with(|browser| {
        let text = program::demo(name);
        let folder = tempfile::tempdir().unwrap();
        sheet::open(browser, &program::report(folder.path(), &text));
        for set in &SETS {
            compare(browser, &text, set);
        }
    });
}

fn table(browser: &Chromium) -> String {
    browser.text("return document.getElementById('extremes').textContent;")
}

fn compare(browser: &Chromium, text: &str, set: &Set) {
    browser.click("#clear");
    browser.drawn();
    assert_eq!(sheet::extreme(browser, "von_mises"), 0.0);
    for (name, value) in set.typed {
        let before = table(browser);
        browser.fill(&format!("#number-{name}"), &value.to_string());
        browser.drawn();
        assert_ne!(table(browser), before, "{name} typed");
    }
    for (name, steps) in set.pushed {
        let before = table(browser);
        browser.run(&format!("document.getElementById('slide-{name}').focus();"));
        let key = if *steps < 0 { Key::Left } else { Key::Right };
        browser.press(&String::from(char::from(key)).repeat(steps.unsigned_abs() as usize));
        browser.drawn();
        assert_ne!(table(browser), before, "{name} pushed");
    }
    if let Some([x, y]) = set.at {
        browser.fill("#at-x", &x.to_string());
        browser.fill("#at-y", &y.to_string());
        browser.drawn();
    }
    let forces: Vec<(&str, f64)> = ["N", "Vx", "Vy", "Mx", "My", "T", "B"]
        .into_iter()
        .map(|name| (name, sheet::value(browser, &format!("number-{name}"))))
        .collect();
    for (name, value) in set.typed {
        assert!(forces.contains(&(name, *value)), "{forces:?}");
    }
    for (name, steps) in set.pushed {
        let (_, value) = forces.iter().find(|(n, _)| n == name).unwrap();
        assert!(value * f64::from(*steps) > 0.0, "{name} {value}");
    }

    let answer = program::answer(text, &forces, set.at, "");
    let mises = answer["extremes"]["von_mises"]["value"].as_f64().unwrap();
    for key in KEYS {
        let shown = sheet::extreme(browser, key);
        let expected = answer["extremes"][key]["value"].as_f64().unwrap();
        // A stress that is next to nothing is as good as the largest of them.
        let size = expected.abs().max(0.01 * mises);
        assert!(
            (shown - expected).abs() <= CLOSE * size,
            "{forces:?}, {key}: page {shown}, program {expected}"
        );
    }
    let expected = answer["load_factor_to_yield"].as_f64().unwrap();
    let shown = sheet::shown(browser, "factor");
    assert!(
        (shown - expected).abs() <= CLOSE * expected,
        "{forces:?}, load factor: page {shown}, program {expected}"
    );
}

#[test]
fn forces_on_a_welded_pair_are_answered_as_by_the_program() {
    follows("hoist-runway");
}

#[test]
fn forces_on_two_materials_are_answered_as_by_the_program() {
    follows("composite-deck-beam");
}

#[test]
fn forces_on_a_thin_open_section_are_answered_as_by_the_program() {
    follows("ramp-channel");
}
