//! The report: what is stated, what is answered and what must be known of it, on one page that carries
//! everything with it.
//!
//! The content is a list of [`document::Block`]s, written as HTML for reading, printing and trying other
//! section forces (`report.html`), and as Markdown for pasting (`report.md`).

mod content;
pub mod document;
mod html;
mod markdown;
mod sheet;

use sectile_mesh::domain::Domain;
use sectile_solver::material::Material;
use sectile_solver::solution::Solution;

use crate::digest::sha256;
use crate::response::{Names, Responses};
use crate::section::Section;

/// All that a report is made of.
#[derive(Clone, Copy, Debug)]
pub struct Input<'a> {
    /// The section file as it was given.
    pub source: &'a str,
    /// Its text.
    pub text: &'a str,
    /// What it states.
    pub section: &'a Section,
    /// Its regions.
    pub domain: &'a Domain,
    /// What was found.
    pub solution: &'a Solution,
    /// The answers to its actions.
    pub responses: Option<&'a Responses>,
    /// The names that answers refer to.
    pub names: Names<'a>,
    /// The material that the moduli refer to, where there are several.
    pub reference: Option<&'a Material>,
    /// File name and SVG text of every figure, in order.
    pub figures: &'a [(String, String)],
    /// Extremes keep off sharp corners by this share of the wall.
    pub exclusion: f64,
    /// Whether the file is watched, so that an open page looks for news.
    pub watched: bool,
}

/// Print width of a report's figures, mm: two of them fit a page one above the other, at the size for
/// which their text is set.
pub const FIGURE_WIDTH: f64 = 110.0;

/// The page.
pub const HTML: &str = "report.html";

/// The same to paste from.
pub const MARKDOWN: &str = "report.md";

/// The file beside a watched report that tells an open page what is new.
pub const STATE: &str = "report-state.js";

/// The text of [`STATE`]: which text of the section file was tried last, and what was wrong with it.
#[must_use]
pub fn state(text: &[u8], error: Option<&str>) -> String {
    let state = serde_json::json!({ "stamp": sha256(text), "error": error });
    format!("sectileState({state});\n")
}

/// The text of `report.html`: one file that needs no other.
#[must_use]
pub fn html(input: &Input) -> String {
    html::page(input, &content::blocks(input))
}

/// The text of `report.md`; figures are referred to by the names of their files.
#[must_use]
pub fn markdown(input: &Input) -> String {
    markdown::text(&content::blocks(input))
}
