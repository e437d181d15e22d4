//! The tables `[[vary]]`: a value of the file, or several that stay alike, and what a sweep sets it to, one
//! after another.

use std::ops::Range;

use toml_span::Value;

use super::fault::{Fault, Faults};
use super::fields::{Fields, Reader, span};
use super::names::tables;
use super::quantity::number_and_unit;
use super::syntax::printable;
use super::{path, units};

const KEYS: &[&str] = &["key", "values", "from", "to", "steps"];
/// The most sections that the sweep of one file makes.
pub const MOST_POINTS: usize = 100_000;

/// A value of a section file that a sweep varies.
#[derive(Clone, Debug, PartialEq)]
pub struct Vary {
    /// The path to it, as the file writes it; several that stay alike with ` = ` between.
    pub key: String,
    /// The unit that its values are written with; `None`: bare numbers in the file's units, or texts.
    pub unit: Option<String>,
    /// What it becomes, never empty.
    pub values: Vec<Setting>,
    /// The bytes of the file that state it, by path.
    ranges: Vec<Range<usize>>,
}

/// One value that a sweep sets.
#[derive(Clone, Debug, PartialEq)]
pub struct Setting {
    /// As the file would write it, without quotation marks.
    pub label: String,
    /// Its number, in the unit of the [`Vary`]; none for a text such as the name of a material.
    pub number: Option<f64>,
    /// Whether the file needs quotation marks around it.
    pub quoted: bool,
}

impl Setting {
    /// A bare number.
    #[must_use]
    pub fn bare(number: f64) -> Self {
        Self {
            label: plain(number),
            number: Some(number),
            quoted: false,
        }
    }

    /// As TOML.
    fn source(&self) -> String {
        if self.quoted {
            let escaped = self.label.replace('\\', "\\\\").replace('"', "\\\"");
            format!("\"{escaped}\"")
        } else {
            self.label.clone()
        }
    }
}

/// The sweep of the section file `text`, empty where it has none; faults of other entries are left to
/// the reading of the section.
///
/// # Errors
/// Every fault of its tables `[[vary]]`.
pub fn sweep(name: &str, text: &str) -> Result<Vec<Vary>, Box<Faults>> {
    let Ok(root) = toml_span::parse(text) else {
        return Ok(Vec::new());
    };
    let mut reader = Reader {
        units: units::defaults(),
        faults: Vec::new(),
    };
    let found = root
        .as_table()
        .and_then(|table| table.get("vary"))
        .map(|value| read_all(&mut reader, text, &root, value))
        .unwrap_or_default();
    if reader.faults.is_empty() {
        Ok(found)
    } else {
        Err(Faults::new(name, text, reader.faults))
    }
}

/// The numbers that `keys` lead to in the section file `text`, ready to be varied together.
///
/// # Errors
/// The text is no TOML, a key leads to no number, or their units differ: message and remedy.
pub fn dimension(text: &str, keys: &[String]) -> Result<Dimension, (String, String)> {
    let root = toml_span::parse(text).map_err(|_| {
        let remedy = "`sectile solve` shows where";
        ("the file is not TOML".to_owned(), remedy.to_owned())
    })?;
    let mut ranges = Vec::new();
    let mut units: Vec<Option<String>> = Vec::new();
    for key in keys {
        let value = path::find(&root, key).map_err(|lost| (lost.message, lost.remedy))?;
        let unit = value
            .as_str()
            .map(|text| number_and_unit(text).map(|(_, unit)| unit.to_owned()));
        let (Some(range), None | Some(Some(_))) = (path::written(text, value), &unit) else {
            return Err((
                format!("`{}` is a text, not a dimension", printable(key)),
                "name a number, such as piece.web.plate.t".to_owned(),
            ));
        };
        ranges.push(range);
        units.push(unit.flatten());
    }
    match units.first().cloned() {
        Some(unit) if units.iter().all(|other| *other == unit) => Ok(Dimension { ranges, unit }),
        _ => Err((
            "the dimensions to vary together are written in different units".to_owned(),
            "write all of them as bare numbers, or all in one unit".to_owned(),
        )),
    }
}

/// A number of a section file, bare or with a unit, or several that become alike.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Dimension {
    ranges: Vec<Range<usize>>,
    /// The unit that the file states it in; `None`: the file's own.
    pub unit: Option<String>,
}

impl Dimension {
    /// The file's text with this dimension at `number`, in the unit that it has there.
    #[must_use]
    pub fn set(&self, text: &str, number: f64) -> String {
        let setting = match &self.unit {
            None => Setting::bare(number),
            Some(unit) => Setting {
                label: format!("{} {unit}", plain(number)),
                number: Some(number),
                quoted: true,
            },
        };
        let change = |range: &Range<usize>| (range.clone(), setting.source());
        spliced(text, self.ranges.iter().map(change).collect())
    }
}

/// Sections that the sweep makes; 1 without any.
#[must_use]
pub fn points(sweep: &[Vary]) -> usize {
    sweep
        .iter()
        .map(|vary| vary.values.len())
        .fold(1, usize::saturating_mul)
}

/// What each value is at point `point` of the sweep; the last one changes fastest.
#[must_use]
pub fn at(sweep: &[Vary], point: usize) -> Vec<&Setting> {
    let mut rest = point;
    let mut settings: Vec<&Setting> = Vec::new();
    for vary in sweep.iter().rev() {
        let count = vary.values.len().max(1);
        settings.extend(vary.values.get(rest % count));
        rest /= count;
    }
    settings.reverse();
    settings
}

/// The file's text at a point of its sweep. Every line stays where it is.
#[must_use]
pub fn text_at(text: &str, sweep: &[Vary], point: usize) -> String {
    let changes = sweep
        .iter()
        .zip(at(sweep, point))
        .flat_map(|(vary, setting)| {
            let change = |range: &Range<usize>| (range.clone(), setting.source());
            vary.ranges.iter().map(change).collect::<Vec<_>>()
        })
        .collect();
    spliced(text, changes)
}

fn spliced(text: &str, mut changes: Vec<(Range<usize>, String)>) -> String {
    changes.sort_by_key(|(range, _)| range.start);
    let mut out = String::with_capacity(text.len() + 16);
    let mut done = 0;
    for (range, source) in changes {
        out.push_str(&text[done..range.start]);
        out.push_str(&source);
        done = range.end;
    }
    out.push_str(&text[done..]);
    out
}

/// A number as TOML; a whole one beyond 64 bits would not be read back without an exponent.
fn plain(number: f64) -> String {
    let size = number.abs();
    if size == 0.0 || (1e-5..1e15).contains(&size) {
        format!("{number}")
    } else {
        format!("{number:e}")
    }
}

/// All sweeps of the file whose top level is `root`.
pub(super) fn read_all(
    reader: &mut Reader,
    text: &str,
    root: &Value<'_>,
    value: &Value<'_>,
) -> Vec<Vary> {
    let mut found: Vec<Vary> = Vec::new();
    for value in tables(reader, value, "vary").unwrap_or_default() {
        let taken: Vec<Range<usize>> = found.iter().flat_map(|v| v.ranges.clone()).collect();
        found.extend(read(reader, text, root, value, taken));
    }
    if points(&found) > MOST_POINTS {
        reader.faults.push(Fault::at(
            span(value),
            "",
            format!(
                "the sweep makes {} sections; {MOST_POINTS} are the most",
                points(&found)
            ),
            "vary fewer values at a time, or in fewer steps",
        ));
    }
    found
}

fn read(
    reader: &mut Reader,
    text: &str,
    root: &Value<'_>,
    value: &Value<'_>,
    taken: Vec<Range<usize>>,
) -> Option<Vary> {
    let fields = Fields::open(reader, value, "a [[vary]]", KEYS)?;
    let remedy = "say what varies: key = \"piece.web.plate.t\"";
    let targets = fields
        .need(reader, "key", remedy)
        .and_then(|value| targets(reader, text, root, value, taken));
    let settings = settings(reader, &fields);
    let (key, ranges) = targets?;
    let (unit, values) = settings?;
    Some(Vary {
        key,
        unit,
        values,
        ranges,
    })
}

/// What one path, or each of a list of them, leads to: the head of its column, and the bytes that state
/// it, none of which may be among `taken`.
fn targets(
    reader: &mut Reader,
    text: &str,
    root: &Value<'_>,
    value: &Value<'_>,
    mut taken: Vec<Range<usize>>,
) -> Option<(String, Vec<Range<usize>>)> {
    let list = match value.as_array() {
        Some(list) if list.is_empty() => {
            reader.wrong_type(value, "the key of a [[vary]]", "at least one path");
            return None;
        }
        Some(list) => list.as_slice(),
        None => std::slice::from_ref(value),
    };
    let mut keys = Vec::new();
    let mut ranges = Vec::new();
    for value in list {
        let Some(key) = reader.line(value, "the key of a [[vary]]") else {
            continue;
        };
        let fault = match path::find(root, key).map(|found| path::written(text, found)) {
            Ok(Some(range)) if taken.contains(&range) => Fault::at(
                span(value),
                "again here",
                format!("`{}` is varied twice", printable(key)),
                "name it once, with all of its values in one [[vary]]",
            ),
            Ok(Some(range)) => {
                keys.push(key.trim());
                taken.push(range.clone());
                ranges.push(range);
                continue;
            }
            Ok(None) => Fault::at(
                span(value),
                "",
                format!("`{}` is a text of several lines", printable(key)),
                "write it on one line, or vary another value",
            ),
            Err(lost) => Fault::at(span(value), "", lost.message, lost.remedy),
        };
        reader.faults.push(fault);
    }
    (keys.len() == list.len()).then(|| (keys.join(" = "), ranges))
}

type Settings = (Option<String>, Vec<Setting>);

fn settings(reader: &mut Reader, fields: &Fields<'_>) -> Option<Settings> {
    let remedy = "write values = [6, 8, 10], or from = 6, to = 10 and steps = 2";
    let ends = ["from", "to", "steps"];
    let given = ends.iter().find_map(|key| fields.key_span(key));
    match (fields.get("values"), given) {
        (Some(values), None) => listed_values(reader, values),
        (None, Some(_)) => {
            let from = fields.need(reader, "from", remedy);
            let to = fields.need(reader, "to", remedy);
            let steps = fields.need(reader, "steps", remedy);
            stepped(reader, from?, to?, steps?)
        }
        (Some(values), Some(ends)) => {
            reader.faults.push(
                Fault::at(
                    span(values),
                    "",
                    "a [[vary]] has `values`, or `from`, `to` and `steps`, not both",
                    "keep one of them",
                )
                .and(ends, ""),
            );
            None
        }
        (None, None) => {
            // A misspelt one has been told already.
            if !KEYS.iter().any(|key| fields.is_misspelt(key)) {
                reader.faults.push(Fault::at(
                    fields.span(),
                    "no values",
                    "a [[vary]] needs values",
                    remedy,
                ));
            }
            None
        }
    }
}

fn listed_values(reader: &mut Reader, value: &Value<'_>) -> Option<Settings> {
    let list = match value.as_array() {
        Some(list) if !list.is_empty() => list,
        Some(_) => {
            reader.faults.push(Fault::at(
                span(value),
                "empty",
                "a [[vary]] without values makes no section",
                "list at least one value",
            ));
            return None;
        }
        None => {
            reader.wrong_type(value, "`values`", "a list such as [6, 8, 10]");
            return None;
        }
    };
    let read: Vec<Option<(Setting, Option<String>)>> =
        list.iter().map(|value| setting(reader, value)).collect();
    let read: Vec<(Setting, Option<String>)> = read.into_iter().collect::<Option<_>>()?;
    let kind = |(setting, unit): &(Setting, Option<String>)| (setting.quoted, unit.clone());
    let first = kind(&read[0]);
    if let Some(i) = read.iter().position(|entry| kind(entry) != first) {
        reader.faults.push(
            Fault::at(
                span(&list[i]),
                "another kind",
                "the values of a [[vary]] are of several kinds or in several units",
                "write all as bare numbers, or all with the same unit: they make one column and one axis",
            )
            .and(span(&list[0]), "first"),
        );
        return None;
    }
    for i in 1..read.len() {
        if let Some(j) = (0..i).find(|&j| read[j].0 == read[i].0) {
            reader.faults.push(
                Fault::at(
                    span(&list[i]),
                    "again",
                    "a value of a [[vary]] is given twice",
                    "keep one: the two would make the same section",
                )
                .and(span(&list[j]), "first"),
            );
            return None;
        }
    }
    Some((
        first.1,
        read.into_iter().map(|(setting, _)| setting).collect(),
    ))
}

/// A value with its unit: a bare number, a quantity, or any other text.
fn setting(reader: &mut Reader, value: &Value<'_>) -> Option<(Setting, Option<String>)> {
    if value.as_str().is_none() {
        let number = reader.number(value, "a value of a [[vary]]")?;
        return Some((Setting::bare(number), None));
    }
    let label = reader.line(value, "a value of a [[vary]]")?.to_owned();
    let (number, unit) = match number_and_unit(&label) {
        Some((number, unit)) => (Some(number), Some(unit.to_owned())),
        None => (None, None),
    };
    let setting = Setting {
        label,
        number,
        quoted: true,
    };
    Some((setting, unit))
}

/// `steps` equal steps between two values, both included.
fn stepped(
    reader: &mut Reader,
    from: &Value<'_>,
    to: &Value<'_>,
    steps: &Value<'_>,
) -> Option<Settings> {
    let (first, last) = (setting(reader, from), setting(reader, to));
    let count = steps
        .as_integer()
        .filter(|n| (1..MOST_POINTS as i64).contains(n));
    if count.is_none() {
        reader.faults.push(Fault::at(
            span(steps),
            "",
            format!("`steps` must be a whole number, 1 to {}", MOST_POINTS - 1),
            "3 steps from 6 to 12 make 6, 8, 10 and 12",
        ));
    }
    let ((first, unit), (last, other)) = (first?, last?);
    let (Some(a), Some(b), true) = (first.number, last.number, unit == other) else {
        reader.faults.push(
            Fault::at(
                span(to),
                "",
                "`from` and `to` of a [[vary]] are not of one kind or unit",
                "write both as bare numbers, or both with the same unit",
            )
            .and(span(from), ""),
        );
        return None;
    };
    if a == b {
        reader.faults.push(
            Fault::at(
                span(to),
                "",
                "`from` and `to` of a [[vary]] are the same",
                "give two different ends, or one value in `values`",
            )
            .and(span(from), ""),
        );
        return None;
    }
    let count = count?;
    let values = (0..=count)
        .map(|i| match i {
            0 => first.clone(),
            i if i == count => last.clone(),
            i => {
                let number = tidy(a + (b - a) * (i as f64 / count as f64));
                Setting {
                    label: match &unit {
                        Some(unit) => format!("{} {unit}", plain(number)),
                        None => plain(number),
                    },
                    number: Some(number),
                    quoted: unit.is_some(),
                }
            }
        })
        .collect();
    Some((unit, values))
}

/// To twelve digits, so that a step of 0.1 does not end in rounding.
fn tidy(number: f64) -> f64 {
    format!("{number:.11e}").parse().unwrap_or(number)
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    const FILE: &str = r#"[[piece]]
name = "web"
plate = { from = [0, 0], to = [0, "4 in"], t = 8 }
[[vary]]
key = "piece.web.plate.t"
from = 6
to = 6.3
steps = 3
[[vary]]
key = "piece.web.plate.to[1]"
values = ["4 in", "3 1/2 in"]
"#;

    #[test]
    fn a_grid_sets_its_values_in_place() {
        let sweep = sweep("a", FILE).unwrap();
        assert_eq!(points(&sweep), 8);
        let labels =
            |point| -> Vec<&str> { at(&sweep, point).iter().map(|s| s.label.as_str()).collect() };
        assert_eq!(labels(0), ["6", "4 in"]);
        assert_eq!(labels(1), ["6", "3 1/2 in"]);
        assert_eq!(labels(2), ["6.1", "4 in"]);
        assert_eq!(labels(7), ["6.3", "3 1/2 in"]);
        assert_eq!(sweep[1].unit.as_deref(), Some("in"));
        assert_eq!(sweep[1].values[1].number, Some(3.5));
        let text = text_at(FILE, &sweep, 5);
        assert!(text.contains("to = [0, \"3 1/2 in\"], t = 6.2 }"), "{text}");
        assert_eq!(text.lines().count(), FILE.lines().count());
    }

    #[test]
    fn a_dimension_keeps_its_unit() {
        let of = |key: &str| dimension(FILE, &[key.to_owned()]);
        let found = of("piece.web.plate.to[1]").unwrap();
        assert!(found.set(FILE, 2.5).contains("to = [0, \"2.5 in\"]"));
        let found = of("piece.web.plate.t").unwrap();
        assert!(found.set(FILE, 1e20).contains("t = 1e20 }"));
        assert!(of("piece.web.name").is_err());
        let both = ["piece.web.plate.t", "piece.web.plate.from[0]"].map(String::from);
        let text = dimension(FILE, &both).unwrap().set(FILE, 3.0);
        assert!(
            text.contains("from = [3, 0], to = [0, \"4 in\"], t = 3 }"),
            "{text}"
        );
        let mixed = ["piece.web.plate.t", "piece.web.plate.to[1]"].map(String::from);
        assert!(dimension(FILE, &mixed).is_err());
    }
}
