//! Faults as text for a reader.

use std::fmt;
use std::io::{IsTerminal, Write};
use std::ops::Range;

use miette::{Diagnostic, GraphicalReportHandler, GraphicalTheme, LabeledSpan, SourceCode};

use super::excerpt::Excerpt;
use super::fault::{Fault, Faults};

/// Columns of a report when nobody asks for another width.
pub const WIDTH: usize = 100;
/// More faults than anyone repairs in one sitting; the rest is counted.
const MOST_SHOWN: usize = 30;

/// How a report is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Look {
    /// Lines and colours, for a terminal.
    Terminal,
    /// Plain characters without colour, for files, pipes and whoever sets `NO_COLOR`.
    Plain,
}

impl Look {
    /// The look that suits standard error: a terminal without `NO_COLOR` gets lines and colours.
    #[must_use]
    pub fn of_standard_error() -> Self {
        let plain = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
        if !plain && std::io::stderr().is_terminal() {
            Self::Terminal
        } else {
            Self::Plain
        }
    }
}

/// Prints the report on standard error, in the look that suits it.
pub fn print(faults: &Faults) {
    let terminal = comfy_table::Table::new().width();
    let width = terminal.map_or(WIDTH, |columns| WIDTH.min(usize::from(columns)));
    let report = faults.render(Look::of_standard_error(), width);
    // Nobody is left to tell if standard error is closed.
    let _ = std::io::stderr().write_all(report.as_bytes());
}

/// The report of `faults`, ending in a line that counts them.
pub(super) fn render(file: &str, text: &str, faults: &[Fault], look: Look, width: usize) -> String {
    let theme = match look {
        Look::Terminal => GraphicalTheme::unicode(),
        Look::Plain => GraphicalTheme::none(),
    };
    let handler = GraphicalReportHandler::new_themed(theme)
        .with_width(width.max(40))
        .with_links(false)
        .without_syntax_highlighting();
    let mut report = String::new();
    for fault in faults.iter().take(MOST_SHOWN) {
        let shown = Shown::new(file, text, fault);
        // Writing into a string cannot fail; a mark that cannot be drawn still leaves its message.
        if handler.render_report(&mut report, &shown).is_err() {
            report.push_str(&format!("{}\n", fault.message));
        }
        report.push('\n');
    }
    if faults.len() > MOST_SHOWN {
        report.push_str(&format!("… and {} more.\n", faults.len() - MOST_SHOWN));
    }
    let count = match faults.len() {
        1 => "1 fault".to_owned(),
        n => format!("{n} faults"),
    };
    report.push_str(&format!("{count} in {file}; nothing was computed.\n"));
    report
}

/// A fault as `miette` takes it.
#[derive(Debug)]
struct Shown {
    message: String,
    remedy: String,
    excerpt: Option<Excerpt>,
    marks: Vec<(Range<usize>, String)>,
}

impl Shown {
    fn new(file: &str, text: &str, fault: &Fault) -> Self {
        let ranges: Vec<_> = fault.marks.iter().map(|(range, _)| range.clone()).collect();
        let (excerpt, moved) = Excerpt::new(file, text, &ranges);
        Self {
            message: fault.message.clone(),
            remedy: fault.remedy.clone(),
            excerpt: (!ranges.is_empty()).then_some(excerpt),
            marks: moved
                .into_iter()
                .zip(fault.marks.iter().map(|(_, remark)| remark.clone()))
                .collect(),
        }
    }
}

impl fmt::Display for Shown {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.message)
    }
}

impl std::error::Error for Shown {}

impl Diagnostic for Shown {
    fn help<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        (!self.remedy.is_empty()).then(|| Box::new(&self.remedy) as Box<dyn fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        self.excerpt
            .as_ref()
            .map(|excerpt| excerpt as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        if self.marks.is_empty() {
            return None;
        }
        Some(Box::new(self.marks.iter().enumerate().map(
            |(i, (range, remark))| {
                let remark = (!remark.is_empty()).then(|| remark.clone());
                let span = (range.start, range.len());
                if i == 0 {
                    LabeledSpan::new_primary_with_span(remark, span)
                } else {
                    LabeledSpan::new_with_span(remark, span)
                }
            },
        )))
    }
}
