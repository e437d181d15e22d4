//! The tables `[[probe]]`: points at which stresses are wanted.

use std::ops::Range;

use toml_span::Value;

use super::fields::{Fields, Reader, span};
use super::names::{Names, tables};
use crate::section::Probe;

/// All probes without fault in the order of the file, each with where its point is written.
pub(super) fn read_all(reader: &mut Reader, value: &Value<'_>) -> Vec<(Probe, Range<usize>)> {
    let mut names = Names::new("probes");
    tables(reader, value, "probe")
        .unwrap_or_default()
        .iter()
        .enumerate()
        .filter_map(|(i, value)| read(reader, value, i, &mut names))
        .collect()
}

fn read(
    reader: &mut Reader,
    value: &Value<'_>,
    index: usize,
    names: &mut Names,
) -> Option<(Probe, Range<usize>)> {
    let fields = Fields::open(reader, value, "a probe", &["name", "at"])?;
    let (name, _) = names.of(reader, &fields, index);
    let value = fields.need(reader, "at", "give its point, as in at = [8, 12]")?;
    let at = reader.point(value, "the probe's point `at`")?;
    Some((Probe { name, at }, span(value)))
}
