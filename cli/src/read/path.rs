//! A path to one value of a section file: `piece.web.plate.t`, `piece.web.plate.from[0]`.
//!
//! Dots lead from table to key. Of tables headed `[[piece]]` one is chosen by its name, or as "piece 1"
//! where it has none; of a list an entry by its place, counted from 0. A part with blanks or dots in it
//! stands in quotation marks: `action."wheel at midspan".Vy`.

use std::ops::Range;

use toml_span::Value;
use toml_span::value::ValueInner;

use super::fields::{span, type_name};
use super::near::{listed, nearest};
use super::syntax::printable;

/// Why a path leads to no value.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Lost {
    pub(super) message: String,
    pub(super) remedy: String,
}

/// A part of a path.
#[derive(Clone, Debug, PartialEq, Eq)]
enum Step {
    /// A key, or the name of one of several tables.
    Name(String),
    /// The place of an entry in a list.
    Entry(usize),
}

/// The number or text that `path` leads to.
pub(super) fn find<'t>(root: &'t Value<'t>, path: &str) -> Result<&'t Value<'t>, Lost> {
    let steps = steps(path).ok_or_else(|| Lost {
        message: format!("\"{}\" is no path to a value", printable(path)),
        remedy: "write keys with dots between, such as piece.web.plate.t; names with blanks in \
                 quotation marks, entries of a list as [0]"
            .into(),
    })?;
    match steps.first() {
        Some(Step::Name(first)) if first == "vary" || first == "title" => {
            return Err(Lost {
                message: format!("`{first}` cannot be varied: it does not change the section"),
                remedy: "name a dimension of a piece, such as piece.web.plate.t".into(),
            });
        }
        _ => {}
    }
    let mut value = root;
    let mut way = String::new();
    let mut head = String::new();
    for step in &steps {
        value = next(value, step, &way, &head)?;
        match step {
            Step::Name(name) => {
                if !way.is_empty() {
                    way.push('.');
                }
                way.push_str(&quoted(name));
                head = name.clone();
            }
            Step::Entry(i) => way.push_str(&format!("[{i}]")),
        }
    }
    let inside = match value.as_ref() {
        ValueInner::Table(table) => keys(table),
        ValueInner::Array(list) => match list.first().and_then(Value::as_table) {
            Some(_) => names(list, &head),
            None => {
                return Err(further(
                    &way,
                    value,
                    format!("`{way}[0]` is its first entry"),
                ));
            }
        },
        ValueInner::Boolean(_) => {
            return Err(Lost {
                message: format!("`{way}` is true or false, which cannot be varied"),
                remedy: "name a number or a text".into(),
            });
        }
        _ => return Ok(value),
    };
    let inside: Vec<String> = inside
        .iter()
        .map(|key| format!("{way}.{}", quoted(key)))
        .collect();
    let inside: Vec<&str> = inside.iter().map(String::as_str).collect();
    Err(further(
        &way,
        value,
        format!("it holds {}", listed(&inside, "and")),
    ))
}

/// The bytes of the file that state a number or a text, quotation marks included; `None` for a text of
/// several lines.
pub(super) fn written(text: &str, value: &Value<'_>) -> Option<Range<usize>> {
    let inner = span(value);
    if value.as_str().is_none() {
        return Some(inner);
    }
    let bytes = text.as_bytes();
    let mark = |at: usize| matches!(bytes.get(at), Some(b'"' | b'\''));
    if value.as_str() == Some("") && mark(inner.start) {
        // The parser marks the first quotation mark of an empty text.
        return Some(inner.start..inner.start + 2);
    }
    let start = inner.start.checked_sub(1)?;
    let threefold = start >= 2 && mark(start - 1) && mark(start - 2);
    (mark(start) && mark(inner.end) && !threefold).then_some(start..inner.end + 1)
}

fn next<'t>(
    value: &'t Value<'t>,
    step: &Step,
    way: &str,
    head: &str,
) -> Result<&'t Value<'t>, Lost> {
    let here = if way.is_empty() {
        "the file".to_owned()
    } else {
        format!("`{way}`")
    };
    match (value.as_ref(), step) {
        (ValueInner::Table(table), Step::Name(name)) => table
            .get(name.as_str())
            .ok_or_else(|| astray(&here, way, name, &keys(table))),
        (ValueInner::Array(list), Step::Name(name))
            if list.iter().all(|v| v.as_table().is_some()) =>
        {
            let names = names(list, head);
            let found = names.iter().position(|known| known == name);
            found
                .and_then(|i| list.get(i))
                .ok_or_else(|| astray(&here, way, name, &names))
        }
        (ValueInner::Array(list), Step::Entry(i)) => list.get(*i).ok_or_else(|| Lost {
            message: format!("{here} has no entry [{i}]"),
            remedy: match list.len() {
                0 => "it is an empty list".into(),
                n => format!("its entries are [0] to [{}]", n - 1),
            },
        }),
        (ValueInner::Array(_), Step::Name(name)) => Err(Lost {
            message: format!("{here} is a list and has no `{}`", printable(name)),
            remedy: format!("name an entry of it by its place, such as {way}[0]"),
        }),
        (_, step) => Err(Lost {
            message: match step {
                Step::Name(name) => format!(
                    "{here} is {} and has no `{}`",
                    type_name(value),
                    printable(name)
                ),
                Step::Entry(i) => format!("{here} is {} and has no entry [{i}]", type_name(value)),
            },
            remedy: format!("end the path at {here}"),
        }),
    }
}

/// No key or name of that kind: the nearest, and all there are.
fn astray(here: &str, way: &str, name: &str, known: &[String]) -> Lost {
    let known: Vec<&str> = known.iter().map(String::as_str).collect();
    Lost {
        message: format!("{here} has no `{}`", printable(name)),
        remedy: match nearest(name, &known) {
            Some(near) => {
                let dot = if way.is_empty() { "" } else { "." };
                format!(
                    "the nearest is `{way}{dot}{}`; {here} has {}",
                    quoted(near),
                    listed(&known, "and")
                )
            }
            None => format!("{here} has nothing in it"),
        },
    }
}

fn further(way: &str, value: &Value<'_>, inside: String) -> Lost {
    Lost {
        message: format!("`{way}` is {}, not a number or a text", type_name(value)),
        remedy: format!("go on to the value that is to vary: {inside}"),
    }
}

fn keys(table: &toml_span::value::Table<'_>) -> Vec<String> {
    table.keys().map(|key| key.name.to_string()).collect()
}

/// The names of tables headed `[[head]]`.
fn names(list: &[Value<'_>], head: &str) -> Vec<String> {
    let name = |(i, value): (usize, &Value<'_>)| {
        value
            .as_table()
            .and_then(|table| Some(table.get("name")?.as_str()?.to_owned()))
            .unwrap_or_else(|| format!("{head} {}", i + 1))
    };
    list.iter().enumerate().map(name).collect()
}

/// A part of a path as it must be written.
fn quoted(name: &str) -> String {
    let plain = |c: char| c.is_alphanumeric() || matches!(c, '_' | '-');
    if !name.is_empty() && name.chars().all(plain) {
        name.to_owned()
    } else {
        format!("\"{}\"", printable(name))
    }
}

fn steps(path: &str) -> Option<Vec<Step>> {
    let mut steps = Vec::new();
    let mut rest = path.trim();
    loop {
        let (name, after) = match rest.chars().next()? {
            mark @ ('"' | '\'') => rest[1..].split_once(mark)?,
            _ => {
                let end = rest.find(['.', '[']).unwrap_or(rest.len());
                let (name, after) = rest.split_at(end);
                (name.trim(), after)
            }
        };
        if name.is_empty() {
            return None;
        }
        steps.push(Step::Name(name.to_owned()));
        rest = after.trim_start();
        while let Some(inside) = rest.strip_prefix('[') {
            let (number, after) = inside.split_once(']')?;
            steps.push(Step::Entry(number.trim().parse().ok()?));
            rest = after.trim_start();
        }
        if rest.is_empty() {
            return Some(steps);
        }
        rest = rest.strip_prefix('.')?.trim_start();
    }
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    const FILE: &str = r#"
[[piece]]
name = "web"
plate = { from = [0, 5], to = ["2 in", 5], t = 8 }
[[piece]]
outline = [[0, 0], { at = [3, 4], round = 1.5 }]
[[action]]
name = "wheel at midspan"
Vy = '-40 kN'
"#;

    #[test]
    fn paths_lead_to_the_bytes_of_their_value() {
        let root = toml_span::parse(FILE).unwrap();
        for (path, bytes) in [
            ("piece.web.plate.t", "8"),
            ("piece.web.plate.from[1]", "5"),
            ("piece.web.plate.to[0]", "\"2 in\""),
            ("piece.\"piece 2\".outline[1].at[0]", "3"),
            ("piece. 'piece 2' .outline [1].round", "1.5"),
            ("action.\"wheel at midspan\".Vy", "'-40 kN'"),
        ] {
            let range = written(FILE, find(&root, path).unwrap()).unwrap();
            assert_eq!(&FILE[range], bytes, "{path}");
        }
    }

    #[test]
    fn paths_that_lead_nowhere_say_where_they_are_lost() {
        let root = toml_span::parse(FILE).unwrap();
        for (path, part) in [
            ("", "is no path"),
            ("piece..t", "is no path"),
            ("piece.web.plate.t[", "is no path"),
            ("peice.web.plate.t", "the nearest is `piece`"),
            ("piece.wed.plate.t", "the nearest is `piece.web`"),
            ("piece.web.plat.t", "the nearest is `piece.web.plate`"),
            ("piece.web.plate", "not a number or a text"),
            ("piece.web.plate.from", "`piece.web.plate.from[0]`"),
            ("piece.web.plate.from[2]", "its entries are [0] to [1]"),
            ("piece.web.plate.from.x", "by its place"),
            ("piece.web.plate.t.x", "end the path at"),
            ("vary.x", "cannot be varied"),
        ] {
            let lost = find(&root, path).unwrap_err();
            let told = format!("{}; {}", lost.message, lost.remedy);
            assert!(told.contains(part), "{path}: {told}");
        }
    }
}
