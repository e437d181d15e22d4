//! The tables `[[cut]]`: lines along which stresses are wanted.

use std::ops::Range;

use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader};
use super::names::{Names, tables};
use super::syntax::printable;
use crate::section::Cut;

/// All cuts without fault in the order of the file, each with where its name (or, without one, the
/// table) is written.
pub(super) fn read_all(reader: &mut Reader, value: &Value<'_>) -> Vec<(Cut, Range<usize>)> {
    let mut names = Names::new("cuts");
    tables(reader, value, "cut")
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
) -> Option<(Cut, Range<usize>)> {
    let fields = Fields::open(reader, value, "a cut", &["name", "from", "to"])?;
    let (name, head) = names.of(reader, &fields, index);
    let mut end = |key, remedy| {
        let value = fields.need(reader, key, remedy)?;
        reader.point(value, &format!("the cut's end `{key}`"))
    };
    let from = end("from", "give where it starts, as in from = [-1, 100]");
    let to = end("to", "give where it ends, as in to = [9, 100]");
    let (from, to) = (from?, to?);
    let farthest = [from.x, from.y, to.x, to.y]
        .iter()
        .fold(0.0_f64, |most, x| most.max(x.abs()));
    if from.distance(to) <= 16.0 * f64::EPSILON * farthest {
        reader.faults.push(Fault::at(
            fields.key_span("to").unwrap_or_else(|| head.clone()),
            "where it starts",
            format!("cut \"{}\" has no length", printable(&name)),
            "let `to` be another point than `from`; the stresses at one point are a [[probe]]",
        ));
        return None;
    }
    Some((Cut { name, from, to }, head))
}
