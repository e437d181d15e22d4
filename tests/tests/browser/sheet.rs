//! The sheet of an open report: what it is set to and what it shows.

use std::path::Path;

use crate::chromium::Chromium;

/// Opens a report and waits until its sheet stands.
pub fn open(browser: &Chromium, page: &Path) {
    browser.open(page);
    browser.wait("return document.getElementById('sheet')?.dataset.ready === 'yes';");
    browser.drawn();
}

/// The number that an element shows, as a reader sees it.
pub fn shown(browser: &Chromium, id: &str) -> f64 {
    let text = browser.text(&format!(
        "return document.getElementById('{id}').textContent;"
    ));
    number(&text)
}

/// The extreme that the table shows in the row of this key.
pub fn extreme(browser: &Chromium, key: &str) -> f64 {
    let text = browser.text(&format!(
        "return document.querySelector('#extremes [data-key={key}]').cells[1].textContent;"
    ));
    number(&text)
}

/// A printed number with or without its unit; the minus sign is the typographer's.
pub fn number(text: &str) -> f64 {
    let first = text.split_whitespace().next().unwrap_or_default();
    first
        .replace('−', "-")
        .parse()
        .unwrap_or_else(|_| panic!("{text:?} is no number"))
}

/// The value of a field.
pub fn value(browser: &Chromium, id: &str) -> f64 {
    browser.number(&format!(
        "return Number(document.getElementById('{id}').value);"
    ))
}
