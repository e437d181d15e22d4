//! The printed report: pages of the right size, as many as there is to say, nothing cut off at the side.

use serde_json::json;

use crate::{chromium, program, sheet};

/// Name, width and height in mm; what the margins of the page's own style leave of the width.
const PAPERS: [(&str, f64, f64); 2] = [("A4", 210.0, 297.0), ("Letter", 215.9, 279.4)];
const MARGINS: f64 = 28.0;

/// The boxes of a PDF's pages in points. The browser writes page objects as plain text.
fn pages(pdf: &[u8]) -> Vec<[f64; 2]> {
    let text = String::from_utf8_lossy(pdf);
    text.split("/MediaBox [")
        .skip(1)
        .map(|rest| {
            let numbers: Vec<f64> = rest[..rest.find(']').unwrap()]
                .split_whitespace()
                .map(|n| n.parse().unwrap())
                .collect();
            [numbers[2] - numbers[0], numbers[3] - numbers[1]]
        })
        .collect()
}

#[test]
fn the_report_prints_whole_on_a4_and_letter() {
    chromium::with(|browser| {
        for demo in ["hoist-runway", "composite-deck-beam", "old-beam-plate"] {
            let folder = tempfile::tempdir().unwrap();
            let page = program::report(folder.path(), &program::demo(demo));
            sheet::open(browser, &page);
            for (paper, width, height) in PAPERS {
                let pdf = browser.print(width / 10.0, height / 10.0);
                assert!(pdf.starts_with(b"%PDF"));
                let boxes = pages(&pdf);
                for size in &boxes {
                    for (side, mm) in size.iter().zip([width, height]) {
                        let points = mm * 72.0 / 25.4;
                        assert!((side - points).abs() < 1.0, "{demo}, {paper}: {size:?}");
                    }
                }
                // Two figures a page, some thirty-five rows of tables, and what else there is to say.
                let count = |what: &str| {
                    browser.number(&format!(
                        "return document.querySelectorAll('{what}').length;"
                    ))
                };
                let (figures, rows) = (count("figure"), count(".wide tr"));
                let most = 4 + (0.5 * figures).ceil() as usize + (rows / 35.0).ceil() as usize;
                assert!(
                    (4..=most).contains(&boxes.len()),
                    "{demo}: {} pages of {paper} for {figures} figures and {rows} rows",
                    boxes.len()
                );

                // The width between the margins, in pixels of 1/96 inch.
                let content = ((width - MARGINS) * 96.0 / 25.4).floor();
                browser.command("Emulation.setEmulatedMedia", &json!({ "media": "print" }));
                browser.command(
                    "Emulation.setDeviceMetricsOverride",
                    &json!({ "width": content, "height": 1000, "deviceScaleFactor": 1, "mobile": false }),
                );
                let wide = browser.run(
                    "const edge = document.documentElement.clientWidth;
                     return [...document.querySelectorAll('body *')]
                       .filter((e) => e.checkVisibility())
                       .filter((e) => e.getBoundingClientRect().right > edge + 0.5
                         || (e.clientWidth > 0 && e.scrollWidth > e.clientWidth + 1))
                       .map((e) => `${e.tagName} ${e.textContent.slice(0, 60)}`);",
                );
                assert_eq!(wide, json!([]), "{demo}: too wide for {paper}");
                // What only a screen can use is not on paper.
                assert_eq!(
                    browser.run("return document.getElementById('sheet').checkVisibility();"),
                    json!(false)
                );
                browser.command("Emulation.clearDeviceMetricsOverride", &json!({}));
                browser.command("Emulation.setEmulatedMedia", &json!({ "media": "" }));
            }
        }
    });
}
