//! Results as text: the terminal's table, `properties.csv`, `results.json`, and how files are written.
//! Depends on results only, never on how they were computed.

pub mod actions;
pub mod cause;
pub mod csv;
pub mod digits;
pub mod field;
pub mod files;
pub mod interaction;
pub mod json;
pub mod materials;
pub mod seams;
pub mod slug;
pub mod table;
pub mod units;
pub mod vtu;
pub mod wording;

/// The line of caution that every output carries.
pub const CAUTION: &str =
    "Linear-elastic section analysis: check by local codes and licensed practice.";
