//! Entries of the section file that this version knows and does not answer yet.

use toml_span::value::Table;

use super::fault::Fault;
use super::fields::Reader;

/// The keys of such entries.
pub(super) const KEYS: &[&str] = &["span"];

/// A fault if the file has such an entry.
pub(super) fn refuse(reader: &mut Reader, top: &Table<'_>) {
    if let Some((key, _)) = top.get_key_value("span") {
        reader.faults.push(Fault::at(
            key.span.into(),
            "not answered yet",
            "this version does not answer [span] (a member and its loads) yet",
            "remove every [span] to get the section's properties",
        ));
    }
}
