//! Every demo's page loads from disk, in light and in dark, without a word on the console.

use serde_json::json;

use crate::{chromium, program, sheet};

/// Relative luminance of a CSS colour `rgb(r, g, b)`. Source: WCAG 2.1, "relative luminance".
fn luminance(colour: &str) -> f64 {
    let parts: Vec<f64> = colour
        .trim_start_matches("rgb(")
        .trim_end_matches(')')
        .split(", ")
        .map(|c| {
            let c = c.parse::<f64>().unwrap() / 255.0;
            if c <= 0.04045 {
                c / 12.92
            } else {
                ((c + 0.055) / 1.055).powf(2.4)
            }
        })
        .collect();
    0.2126 * parts[0] + 0.7152 * parts[1] + 0.0722 * parts[2]
}

#[test]
fn every_demo_shows_its_sheet_in_light_and_dark() {
    chromium::with(|browser| {
        let files = sectile_tests::section_files("../cli/demo");
        assert!(files.len() >= 8);
        for file in files {
            let name = sectile_tests::file_name(&file).replace(".section.toml", "");
            let folder = tempfile::tempdir().unwrap();
            let page = program::report(folder.path(), &program::demo(&name));
            assert!(page.metadata().unwrap().len() < 2_000_000, "{name}");
            for scheme in ["light", "dark"] {
                let features = json!([{ "name": "prefers-color-scheme", "value": scheme }]);
                browser.command(
                    "Emulation.setEmulatedMedia",
                    &json!({ "features": features }),
                );
                sheet::open(browser, &page);
                browser.assert_quiet();
                let style = |what: &str| {
                    browser.text(&format!("return getComputedStyle(document.body).{what};"))
                };
                let (paper, ink) = (
                    luminance(&style("backgroundColor")),
                    luminance(&style("color")),
                );
                assert_eq!(paper < ink, scheme == "dark", "{name}, {scheme}");
                let contrast = (paper.max(ink) + 0.05) / (paper.min(ink) + 0.05);
                // WCAG 2.1, criterion 1.4.6: 7 to 1.
                assert!(contrast > 7.0, "{name}, {scheme}: {contrast}");
                // The picture has colours on it, more than its outline alone would need.
                let colours = browser.number(
                    "const c = document.getElementById('picture');
                     const p = c.getContext('2d').getImageData(0, 0, c.width, c.height).data;
                     const seen = new Map();
                     for (let i = 0; i < p.length; i += 4) {
                       if (p[i + 3] < 255) continue;
                       const key = (p[i] << 16) | (p[i + 1] << 8) | p[i + 2];
                       seen.set(key, (seen.get(key) || 0) + 1);
                     }
                     return [...seen.values()].filter((n) => n > 50).length;",
                );
                assert!(colours >= 3.0, "{name}, {scheme}: {colours} colours");
            }
        }
    });
}

#[test]
fn nothing_reaches_over_the_edge_of_a_narrow_or_a_wide_window() {
    chromium::with(|browser| {
        let folder = tempfile::tempdir().unwrap();
        for name in ["hoist-runway", "composite-deck-beam"] {
            let page = program::report(folder.path(), &program::demo(name));
            for width in [320, 400, 800, 1280] {
                browser.command(
                    "Emulation.setDeviceMetricsOverride",
                    &json!({ "width": width, "height": 900, "deviceScaleFactor": 1, "mobile": false }),
                );
                sheet::open(browser, &page);
                let over = browser.number(
                    "return document.documentElement.scrollWidth - document.documentElement.clientWidth;",
                );
                assert!(over <= 0.0, "{name} at {width}: {over} pixels too wide");
            }
        }
    });
}
