//! The tables `[[combination]]`: sums of actions, each times a factor.

use toml_span::Value;

use super::action;
use super::fault::Fault;
use super::fields::{Fields, Reader};
use super::names::{Names, tables};
use super::near::nearest;
use super::syntax::printable;
use crate::section::Combination;

/// Factors beyond this are refused; they would let section forces overflow.
const LARGEST_FACTOR: f64 = 1e9;
const EXAMPLE: &str = "{ \"wheel at midspan\" = 1.35, \"own weight\" = 1.0 }";

/// All combinations in the order of the file; `None` for each that is faulty. `actions`: those of the
/// file, `None` if it is not known which it has.
pub(super) fn read_all(
    reader: &mut Reader,
    value: &Value<'_>,
    actions: Option<&[action::Read]>,
    names: &mut Names,
) -> Vec<Option<Combination>> {
    tables(reader, value, "combination")
        .unwrap_or_default()
        .iter()
        .enumerate()
        .map(|(i, value)| read(reader, value, i, actions, names))
        .collect()
}

fn read(
    reader: &mut Reader,
    value: &Value<'_>,
    index: usize,
    actions: Option<&[action::Read]>,
    names: &mut Names,
) -> Option<Combination> {
    let fields = Fields::open(reader, value, "a combination", &["name", "factors"])?;
    let (name, head) = names.of(reader, &fields, index);
    let value = fields.need(
        reader,
        "factors",
        &format!("give the factor of each action by its name: factors = {EXAMPLE}"),
    )?;
    let Some(table) = value.as_table() else {
        reader.wrong_type(
            value,
            "`factors`",
            &format!("a table of factors by the actions' names, such as {EXAMPLE}"),
        );
        return None;
    };
    let mut entries: Vec<_> = table.iter().collect();
    entries.sort_by_key(|(key, _)| key.span.start);
    let before = reader.faults.len();
    let mut factors = Vec::new();
    for (key, value) in entries {
        let factor = factor(reader, &key.name, value);
        let Some(actions) = actions else { continue };
        match actions.iter().position(|read| read.name == key.name) {
            Some(action) => factors.extend(factor.map(|factor| (action, factor))),
            None => reader.faults.push(Fault::at(
                key.span.into(),
                "no such action",
                format!("there is no action \"{}\"", printable(&key.name)),
                remedy(&key.name, actions),
            )),
        }
    }
    if reader.faults.len() > before || actions.is_none() {
        return None;
    }
    if factors.iter().all(|(_, factor)| *factor == 0.0) {
        reader.faults.push(Fault::at(
            head,
            "nothing in it",
            format!("combination \"{}\" takes no action", printable(&name)),
            format!("give a factor other than zero, as in factors = {EXAMPLE}, or remove it"),
        ));
        return None;
    }
    Some(Combination { name, factors })
}

fn factor(reader: &mut Reader, action: &str, value: &Value<'_>) -> Option<f64> {
    let what = format!("the factor of \"{}\"", printable(action));
    let factor = reader.number(value, &what)?;
    if factor.abs() <= LARGEST_FACTOR {
        return Some(factor);
    }
    reader.faults.push(Fault::at(
        super::fields::span(value),
        "too large",
        format!("{what} is beyond ±{LARGEST_FACTOR:e}"),
        "give a pure number such as 1.35",
    ));
    None
}

fn remedy(name: &str, actions: &[action::Read]) -> String {
    let known: Vec<&str> = actions.iter().map(|read| read.name.as_str()).collect();
    match nearest(name, &known) {
        Some(near) => format!(
            "the nearest known one is \"{}\"; a combination takes actions of this file by their names, \
             no other combinations",
            printable(near)
        ),
        None => "add an [[action]] of that name; this file has none yet".to_owned(),
    }
}
