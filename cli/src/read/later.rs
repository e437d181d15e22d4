//! Entries of the section file that this version knows and does not answer yet.

use toml_span::Value;
use toml_span::value::Table;

use super::fault::Fault;
use super::fields::{Reader, span};

/// Keys of the top level, what they are for, and how their entries are headed.
const LATER: &[(&str, &str, &str)] = &[
    ("seam", "seams", "[[seam]]"),
    ("span", "a member and its loads", "[span]"),
];

/// The keys of such entries.
pub(super) const KEYS: &[&str] = &["seam", "span", "contact"];

/// A fault for each kind of entry that the file has of these.
pub(super) fn refuse(reader: &mut Reader, top: &Table<'_>) {
    for (name, purpose, heading) in LATER {
        if let Some((key, value)) = top.get_key_value(*name) {
            // One fault a kind, at its first entry.
            let first = value.as_array().and_then(|list| list.first());
            let range = first.map_or(key.span.into(), span);
            reader.faults.push(Fault::at(
                range,
                "not answered yet",
                format!("this version does not answer {heading} ({purpose}) yet"),
                format!("remove every {heading} to get the section's properties"),
            ));
        }
    }
    if let Some(value) = top.get("contact") {
        contact(reader, value);
    }
}

fn contact(reader: &mut Reader, value: &Value<'_>) {
    if reader.choice(value, "`contact`", &["seams"]).is_some() {
        reader.faults.push(Fault::at(
            span(value),
            "not answered yet",
            "this version does not answer contact = \"seams\" yet",
            "remove the line to get the properties of the section with touching pieces fused",
        ));
    }
}
