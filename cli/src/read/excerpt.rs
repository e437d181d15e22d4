//! The few lines of a file that a fault's marks lie on, cut to a readable length.
//!
//! A file may be one line of a million characters, hold control characters or mark a table of a
//! thousand lines. An excerpt shows one line a mark, a window around the marks, and what would move a
//! terminal's cursor as `·`; line numbers and columns stay those of the file.

use std::ops::Range;

use miette::{MietteError, MietteSpanContents, SourceCode, SourceSpan, SpanContents};

/// Lines up to this many characters are shown whole.
const WHOLE_LINE: usize = 90;
/// How many characters of a longer line are shown on either side of its marks.
const MARGIN: usize = 40;
/// How many characters of a mark are shown.
const LONGEST_MARK: usize = 60;

/// One line of the file, or its part around the marks.
#[derive(Debug)]
struct Row {
    /// Line number in the file, from 0.
    line: usize,
    /// Where its text starts in `Excerpt::text`.
    start: usize,
    /// Column of the file, from 0 in characters, at which the shown part begins.
    column: usize,
    /// Characters that stand for what is cut off in front.
    lead: usize,
}

/// The lines around the marks of one fault.
#[derive(Debug)]
pub(super) struct Excerpt {
    name: String,
    text: String,
    rows: Vec<Row>,
}

impl Excerpt {
    /// The excerpt of `text`, and the marks as ranges of the excerpt, in the order given.
    pub(super) fn new(name: &str, text: &str, marks: &[Range<usize>]) -> (Self, Vec<Range<usize>>) {
        let marks: Vec<_> = marks.iter().map(|mark| clip(text, mark)).collect();
        let mut starts: Vec<usize> = marks
            .iter()
            .map(|mark| line_start(text, mark.start))
            .collect();
        starts.sort_unstable();
        starts.dedup();

        let mut excerpt = Self {
            name: name.to_owned(),
            text: String::new(),
            rows: Vec::new(),
        };
        let mut moved = vec![0..0; marks.len()];
        for start in starts {
            let end = line_end(text, start);
            let here = |mark: &Range<usize>| start <= mark.start && mark.start <= end;
            let first = marks.iter().filter(|m| here(m)).map(|m| m.start).min();
            let last = marks.iter().filter(|m| here(m)).map(|m| m.end).max();
            let (first, last) = (first.unwrap_or(start), last.unwrap_or(end));
            let (from, to) = if forth(text, start, WHOLE_LINE) >= end {
                (start, end)
            } else {
                (
                    back(text, first, MARGIN).max(start),
                    forth(text, last, MARGIN).min(end),
                )
            };

            let row_start = excerpt.text.len();
            let lead = if from > start { "… " } else { "" };
            excerpt.text.push_str(lead);
            // Where each byte of the line went: printable characters keep their order and count.
            let mut places = Vec::with_capacity(to - from + 1);
            for (at, c) in text[from..to].char_indices() {
                places.push((from + at, excerpt.text.len()));
                match c {
                    '\t' => excerpt.text.push(' '),
                    c if hidden(c) => excerpt.text.push('·'),
                    c => excerpt.text.push(c),
                }
            }
            places.push((to, excerpt.text.len()));
            let place = |byte: usize| {
                let found = places.partition_point(|(from, _)| *from < byte);
                places[found.min(places.len() - 1)].1
            };
            for (mark, out) in marks.iter().zip(&mut moved) {
                if here(mark) {
                    *out = place(mark.start)..place(mark.end);
                }
            }
            if to < end {
                excerpt.text.push_str(" …");
            }
            excerpt.text.push('\n');
            excerpt.rows.push(Row {
                line: text.as_bytes()[..start]
                    .iter()
                    .filter(|b| **b == b'\n')
                    .count(),
                start: row_start,
                column: text[start..from].chars().count(),
                lead: lead.chars().count(),
            });
        }
        (excerpt, moved)
    }

    fn row_of(&self, offset: usize) -> usize {
        self.rows
            .partition_point(|row| row.start <= offset)
            .saturating_sub(1)
    }
}

impl SourceCode for Excerpt {
    fn read_span<'a>(
        &'a self,
        span: &SourceSpan,
        _before: usize,
        _after: usize,
    ) -> Result<Box<dyn SpanContents<'a> + 'a>, MietteError> {
        let (first, last) = (
            self.row_of(span.offset()),
            self.row_of(span.offset() + span.len().saturating_sub(1)),
        );
        let row = self.rows.get(first).ok_or(MietteError::OutOfBounds)?;
        // Rows that do not follow each other in the file cannot be shown as one block.
        if self.rows[last].line - row.line != last - first {
            return Err(MietteError::OutOfBounds);
        }
        let end = self
            .rows
            .get(last + 1)
            .map_or(self.text.len(), |next| next.start);
        let shown = self.text[row.start..span.offset().max(row.start)]
            .chars()
            .count();
        Ok(Box::new(MietteSpanContents::new_named(
            self.name.clone(),
            &self.text.as_bytes()[row.start..end],
            (row.start, end - row.start).into(),
            row.line,
            row.column + shown.saturating_sub(row.lead),
            last - first + 1,
        )))
    }
}

/// The part of a mark on its first line, on character boundaries, not longer than is shown.
fn clip(text: &str, mark: &Range<usize>) -> Range<usize> {
    let start = floor(text, mark.start);
    let end = floor(text, mark.end.max(start))
        .min(line_end(text, start))
        .min(forth(text, start, LONGEST_MARK));
    start..end.max(start)
}

/// Control characters and those that reorder text; a terminal would obey them.
pub(crate) fn hidden(c: char) -> bool {
    c.is_control()
        || matches!(c, '\u{feff}' | '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

fn floor(text: &str, at: usize) -> usize {
    let mut at = at.min(text.len());
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}

fn line_start(text: &str, at: usize) -> usize {
    text[..at].rfind('\n').map_or(0, |newline| newline + 1)
}

/// Where the line that holds `at` ends, before its line break.
fn line_end(text: &str, at: usize) -> usize {
    let end = text[at..].find('\n').map_or(text.len(), |n| at + n);
    if end > at && text.as_bytes()[end - 1] == b'\r' {
        end - 1
    } else {
        end
    }
}

fn back(text: &str, at: usize, count: usize) -> usize {
    text[..at]
        .char_indices()
        .rev()
        .take(count)
        .last()
        .map_or(at, |(i, _)| i)
}

fn forth(text: &str, at: usize, count: usize) -> usize {
    text[at..]
        .char_indices()
        .nth(count)
        .map_or(text.len(), |(i, _)| at + i)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_long_line_is_windowed_and_keeps_its_column() {
        let text = format!("a = 1\nb = {}X{}\n", "é".repeat(5000), "z".repeat(5000));
        let at = text.find('X').expect("there is an X");
        let (excerpt, marks) = Excerpt::new("f", &text, std::slice::from_ref(&(at..at + 1)));
        assert_eq!(&excerpt.text[marks[0].clone()], "X");
        assert!(excerpt.text.chars().count() < 100);
        let contents = excerpt
            .read_span(&(marks[0].start, 1).into(), 0, 0)
            .expect("the mark lies in the excerpt");
        assert_eq!((contents.line(), contents.column()), (1, 5004));
    }

    #[test]
    fn marks_survive_odd_ranges() {
        let text = "é\u{1b}[31m\r\nä";
        for start in 0..12 {
            for end in 0..12 {
                let (excerpt, marks) = Excerpt::new("f", text, &[start..end, 0..3]);
                for mark in marks {
                    assert!(excerpt.text.get(mark).is_some());
                }
                assert!(!excerpt.text.contains('\u{1b}'));
            }
        }
    }
}
