//! Pointing at the picture reads the stress at that place.

use fantoccini::actions::{InputSource, MouseActions, PointerAction};

use crate::chromium::Chromium;
use crate::{chromium, program, sheet};

const FORCES: [(&str, f64); 7] = [
    ("N", 40.0),
    ("Vx", 6.0),
    ("Vy", -50.0),
    ("Mx", -30.0),
    ("My", 4.0),
    ("T", 0.3),
    ("B", 100.0),
];
const KEYS: [&str; 8] = [
    "sigma",
    "tau_x",
    "tau_y",
    "tau",
    "von_mises",
    "tresca",
    "principal_1",
    "principal_3",
];

/// The page reads just where its fields x and y say, also when they were filled by pointing. Of the stress it
/// shows four digits; its fields are in single precision. Both are less than this share of von Mises' stress.
const CLOSE: f64 = 1e-3;

fn place(browser: &Chromium) -> [f64; 2] {
    ["probe-x", "probe-y"].map(|id| sheet::value(browser, id))
}

/// Moves the pointer to a place of the window.
fn point(browser: &Chromium, [x, y]: [f64; 2]) {
    let duration = None;
    let mouse = MouseActions::new("mouse".to_string());
    browser.point(mouse.then(PointerAction::MoveTo { duration, x, y }));
    browser.drawn();
}

fn compare(browser: &Chromium, text: &str, at: [f64; 2], piece: &str) {
    let probe = format!("[[probe]]\nname = \"read\"\nat = [{}, {}]\n", at[0], at[1]);
    let answer = program::answer(text, &FORCES, None, &probe);
    let probes = answer["probes"].as_array().unwrap();
    let expected = probes.iter().find(|p| p["name"] == "read").unwrap();
    assert_eq!(expected["piece"], piece);
    assert_eq!(
        browser.text("return document.getElementById('place').dataset.piece;"),
        piece
    );
    let mises = expected["von_mises"].as_f64().unwrap();
    for key in KEYS {
        let shown = sheet::number(&browser.text(&format!(
            "return document.querySelector('#reading [data-key={key}]').cells[1].textContent;"
        )));
        let expected = expected[key].as_f64().unwrap();
        assert!(
            (shown - expected).abs() <= CLOSE * mises,
            "{key} at {at:?}: page {shown}, program {expected}"
        );
    }
}

#[test]
fn pointing_reads_the_stress_of_that_place() {
    chromium::with(|browser| {
        let text = program::demo("composite-deck-beam");
        let folder = tempfile::tempdir().unwrap();
        sheet::open(browser, &program::report(folder.path(), &text));
        browser.click("#clear");
        for (name, value) in FORCES {
            browser.fill(&format!("#number-{name}"), &value.to_string());
        }
        browser.run("document.getElementById('stage').scrollIntoView({ block: 'center' });");
        browser.drawn();
        // Two readings give the map from the window to the section.
        let frame = ["left", "top", "width", "height"].map(|side| {
            browser.number(&format!(
                "return document.getElementById('picture').getBoundingClientRect().{side};"
            ))
        });
        let pixels =
            [0.25, 0.75].map(|share| [0, 1].map(|k| (frame[k] + share * frame[k + 2]).round()));
        let places = pixels.map(|pixel| {
            point(browser, pixel);
            place(browser)
        });
        // In the slab, in a flange, in the web.
        for (near, piece) in [
            ([-333.0, 251.0], "slab"),
            ([48.0, -174.0], "beam"),
            ([0.4, 33.0], "beam"),
        ] {
            point(
                browser,
                [0, 1].map(|k| {
                    let scale = (pixels[1][k] - pixels[0][k]) / (places[1][k] - places[0][k]);
                    (pixels[0][k] + scale * (near[k] - places[0][k])).round()
                }),
            );
            let at = place(browser);
            // A pixel is less than 3 mm of this section.
            assert!(
                (at[0] - near[0]).hypot(at[1] - near[1]) < 3.0,
                "{at:?} {near:?}"
            );
            compare(browser, &text, at, piece);
        }
        for (at, piece) in [([212.5, 200.25], "slab"), ([-3.5, 100.0], "beam")] {
            browser.fill("#probe-x", &at[0].to_string());
            browser.fill("#probe-y", &at[1].to_string());
            compare(browser, &text, at, piece);
        }
        // Beside the material there is nothing to read.
        browser.fill("#probe-x", "-200");
        browser.fill("#probe-y", "0");
        assert!(
            browser
                .text("return document.getElementById('place').textContent;")
                .contains("no material")
        );
    });
}
