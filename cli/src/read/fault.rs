//! What is wrong with a section file: every fault with the text that it concerns and a remedy.

use std::fmt;
use std::ops::Range;

use super::show::{self, Look};

/// One fault of a section file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Fault {
    /// What is wrong, in one sentence without a full stop.
    pub message: String,
    /// The offending text, as byte ranges of the file, each with a short remark (may be empty); the
    /// first is the main one. A fault of the file as a whole has none.
    pub marks: Vec<(Range<usize>, String)>,
    /// What to do about it.
    pub remedy: String,
}

impl Fault {
    /// A fault of the text in `range`.
    #[must_use]
    pub fn at(
        range: Range<usize>,
        remark: impl Into<String>,
        message: impl Into<String>,
        remedy: impl Into<String>,
    ) -> Self {
        Self {
            message: message.into(),
            marks: vec![(range, remark.into())],
            remedy: remedy.into(),
        }
    }

    /// A fault of the file as a whole.
    #[must_use]
    pub fn whole(message: impl Into<String>, remedy: impl Into<String>) -> Self {
        Self {
            message: message.into(),
            marks: Vec::new(),
            remedy: remedy.into(),
        }
    }

    /// Marks a second place that has to do with the fault.
    #[must_use]
    pub fn and(mut self, range: Range<usize>, remark: impl Into<String>) -> Self {
        self.marks.push((range, remark.into()));
        self
    }
}

/// All faults of one section file, in the order of the text.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Faults {
    file: String,
    text: String,
    faults: Vec<Fault>,
}

impl Faults {
    /// The faults of `file`, whose content is `text`; sorted by place, a fault told twice kept once.
    #[must_use]
    pub fn new(file: &str, text: &str, mut faults: Vec<Fault>) -> Box<Self> {
        faults.sort_by_key(|fault| fault.marks.first().map(|(range, _)| range.start));
        faults.dedup();
        Box::new(Self {
            file: file.to_owned(),
            text: text.to_owned(),
            faults,
        })
    }

    /// The file's name as it was given.
    #[must_use]
    pub fn file(&self) -> &str {
        &self.file
    }

    /// The faults, never none.
    #[must_use]
    pub fn faults(&self) -> &[Fault] {
        &self.faults
    }

    /// The line, counted from 1, of a fault's main mark; `None` for a fault of the whole file.
    #[must_use]
    pub fn line(&self, fault: &Fault) -> Option<usize> {
        let (range, _) = fault.marks.first()?;
        let before = &self.text.as_bytes()[..range.start.min(self.text.len())];
        Some(1 + before.iter().filter(|byte| **byte == b'\n').count())
    }

    /// The report: each fault with its text underlined and its remedy, `width` columns wide.
    #[must_use]
    pub fn render(&self, look: Look, width: usize) -> String {
        show::render(&self.file, &self.text, &self.faults, look, width)
    }
}

impl fmt::Display for Faults {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.render(Look::Plain, show::WIDTH))
    }
}

impl std::error::Error for Faults {}
