//! A page that is open while its section file is watched.

use std::fs;
use std::process::{Child, Stdio};
use std::time::{Duration, Instant};

use crate::{chromium, program, sheet};

/// The process is stopped however the test ends.
struct Running(Child);

impl Drop for Running {
    fn drop(&mut self) {
        let _ = self.0.kill();
        let _ = self.0.wait();
    }
}

fn bar(width: i32) -> String {
    format!("[[piece]]\nname = \"bar\"\nbar = {{ at = [0, 0], b = {width}, h = 20 }}\n")
}

#[test]
fn an_open_page_follows_the_saved_file() {
    chromium::with(|browser| {
        let folder = tempfile::tempdir().unwrap();
        let results = folder.path().join("results");
        let _running = Running(
            program::solve(folder.path(), &bar(10))
                .args(["--report", "--watch", "--quiet", "--out"])
                .arg(&results)
                .stderr(Stdio::null())
                .spawn()
                .unwrap(),
        );
        let start = Instant::now();
        while !results.join("report-state.js").exists() {
            assert!(start.elapsed() < Duration::from_secs(20), "no report");
            std::thread::sleep(Duration::from_millis(20));
        }
        let save =
            |text: &str| fs::write(folder.path().join("section.section.toml"), text).unwrap();
        sheet::open(browser, &results.join("report.html"));
        browser.click("#clear");
        browser.fill("#number-N", "12");
        browser.drawn();
        // 12 kN on 10 × 20 mm².
        assert_eq!(sheet::extreme(browser, "sigma_max"), 60.0);

        // A fault is told in place; what was answered stays.
        save(&bar(-1));
        browser.wait("return !document.getElementById('news').hidden;");
        let news = browser.text("return document.getElementById('news').innerText;");
        assert!(
            news.contains("nothing was computed") && news.contains("b = -1"),
            "{news}"
        );
        assert_eq!(browser.told("#news")[1], "alert");
        assert_eq!(sheet::extreme(browser, "sigma_max"), 60.0);

        // Once it is mended the page shows the new answer, to the forces that were set: 12 kN on 15 × 20 mm².
        save(&bar(15));
        browser.wait(
            "return document.querySelector('#extremes [data-key=sigma_max]')?.cells[1].textContent === '40 MPa';",
        );
        browser.wait("return document.getElementById('news').hidden;");
        assert_eq!(sheet::value(browser, "number-N"), 12.0);
        assert!(
            browser
                .text("return document.body.innerText;")
                .contains("b = 15")
        );
    });
}
