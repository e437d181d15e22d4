//! The report's page in a real browser: a headless Chromium opens it from disk and is driven as a reader
//! would drive it. What the page shows is held against what the program answers to the same forces.
//!
//! Without chromedriver and its browser these tests are left out and say so; with SECTILE_BROWSER=required,
//! as the gate sets it, they then fail.
#![allow(clippy::unwrap_used)]

mod chromium;
mod forces;
mod keyboard;
mod line;
mod loading;
mod paper;
mod program;
mod reading;
mod sheet;
mod watched;
