//! Lists of named tables: every entry has a name of its own, given or numbered.

use std::collections::BTreeMap;
use std::ops::Range;

use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::syntax::printable;

/// The tables of the list `value`, headed `[[key]]`; a fault if it is none.
pub(super) fn tables<'t>(
    reader: &mut Reader,
    value: &'t Value<'t>,
    key: &str,
) -> Option<&'t [Value<'t>]> {
    let list = value
        .as_array()
        .filter(|list| list.iter().all(|entry| entry.as_table().is_some()));
    if list.is_none() {
        reader.faults.push(Fault::at(
            span(value),
            "",
            format!("`{key}` must be a list of tables"),
            format!("head every {key} with [[{key}]], two brackets on either side"),
        ));
    }
    list.map(Vec::as_slice)
}

/// The names that may not be given twice.
pub(super) struct Names {
    /// What has these names, for messages: `pieces`.
    several: &'static str,
    first: BTreeMap<String, Range<usize>>,
}

impl Names {
    pub(super) fn new(several: &'static str) -> Self {
        Self {
            several,
            first: BTreeMap::new(),
        }
    }

    /// The name of the table `fields` and where its reader finds it; the first `[[piece]]` without one
    /// is "piece 1", the third "piece 3".
    pub(super) fn of(
        &mut self,
        reader: &mut Reader,
        fields: &Fields<'_>,
        index: usize,
    ) -> (String, Range<usize>) {
        let what = fields.what;
        let written = fields.get("name").and_then(|value| {
            let text = reader.line(value, &format!("the name of {what}"))?;
            if text.trim().is_empty() {
                reader.faults.push(Fault::at(
                    span(value),
                    "empty",
                    format!("the name of {what} must not be empty"),
                    "give a name, or leave the key out",
                ));
                return None;
            }
            Some((text.to_owned(), span(value)))
        });
        let noun = what.split_once(' ').map_or(what, |(_, noun)| noun);
        let (name, head) =
            written.unwrap_or_else(|| (format!("{noun} {}", index + 1), fields.span()));
        if let Some(first) = self.first.get(&name) {
            reader.faults.push(
                Fault::at(
                    head.clone(),
                    "again here",
                    format!("two {} are named \"{}\"", self.several, printable(&name)),
                    "give each a name of its own: messages and results tell them apart by it",
                )
                .and(first.clone(), "first here"),
            );
        } else {
            self.first.insert(name.clone(), head.clone());
        }
        (name, head)
    }
}
