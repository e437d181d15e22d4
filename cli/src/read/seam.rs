//! The tables `[[seam]]`, and `contact`, which says whether touching pieces need them.

use std::ops::Range;

use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_solver::material::Material;
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::material::named;
use super::names::{Names, tables};
use super::near::nearest;
use super::piece;
use super::quantity::Dimension;
use super::syntax::printable;
use crate::section::{Contact, Intermittent, SeamInput};

const KEYS: &[&str] = &[
    "name",
    "between",
    "near",
    "fillet",
    "groove",
    "at",
    "gap",
    "material",
    "allowable",
    "direct",
    "length",
    "pitch",
];

/// Where a seam is written, for faults that the geometry shows.
#[derive(Clone, Debug)]
pub(super) struct SeamText {
    /// Its name, or its heading where it has none.
    pub(super) head: Range<usize>,
    /// The value of `between`.
    pub(super) between: Range<usize>,
    /// The value of `fillet` or `groove`.
    pub(super) kind: Range<usize>,
}

/// A seam and where it is written.
pub(super) type Read = (SeamInput, SeamText);

/// What touching pieces are to each other: what `contact` says; by default fused, without any seam.
pub(super) fn contact(reader: &mut Reader, top: &Fields<'_>) -> Contact {
    let seams = top.key_span("seam");
    let stated = top.get("contact").and_then(|value| {
        let word = reader.text(value, "`contact`")?;
        if !matches!(word, "fused" | "seams") {
            reader.faults.push(Fault::at(
                span(value),
                "not known",
                format!("`contact` cannot be \"{}\"", printable(word)),
                "write \"fused\", and pieces that touch are one solid, or \"seams\", and only a \
                 [[seam]] joins them",
            ));
        }
        Some((word, span(value)))
    });
    match (stated, seams) {
        (Some(("fused", range)), Some(seam)) => {
            reader.faults.push(
                Fault::at(
                    range,
                    "fused here",
                    "touching pieces cannot be fused and joined by seams at once",
                    "remove the line, so that seams alone join the pieces, or remove every [[seam]]",
                )
                .and(seam, "a seam here"),
            );
            Contact::Seams
        }
        (Some(("seams", _)), _) | (_, Some(_)) => Contact::Seams,
        _ => Contact::Fused,
    }
}

/// All seams in the order of the file, `None` for each that is faulty; one `None` if `value` is no list
/// of tables.
pub(super) fn read_all(
    reader: &mut Reader,
    value: &Value<'_>,
    pieces: &[piece::Read],
    materials: &[Material],
) -> Vec<Option<Read>> {
    let mut names = Names::new("seams");
    let Some(list) = tables(reader, value, "seam") else {
        return vec![None];
    };
    list.iter()
        .enumerate()
        .map(|(i, value)| read(reader, value, i, &mut names, pieces, materials))
        .collect()
}

fn read(
    reader: &mut Reader,
    value: &Value<'_>,
    index: usize,
    names: &mut Names,
    pieces: &[piece::Read],
    materials: &[Material],
) -> Option<Read> {
    let fields = Fields::open(reader, value, "a seam", KEYS)?;
    let (name, head) = names.of(reader, &fields, index);
    unlike_pieces(reader, &name, &head, pieces);
    let between = between(reader, &fields, pieces);
    let near = match fields.get("near") {
        None => Some(None),
        Some(value) => reader.point(value, "the point `near` of a seam").map(Some),
    };
    let kind = kind(reader, &fields, &name);
    let both = both(reader, &fields, kind.as_ref());
    let gap = gap(reader, &fields);
    let material = material(reader, &fields, materials);
    let allowable = match fields.get("allowable") {
        None => Some(None),
        Some(value) => reader
            .positive(
                value,
                "the allowable stress of a seam's throat",
                Dimension::Stress,
            )
            .map(Some),
    };
    let direct = direct(reader, &fields);
    let intermittent = intermittent(reader, &fields, &name);

    let (between, kind) = (between?, kind?);
    let of_first = pieces[between[0]].piece.as_ref().map(|(p, _)| p.material);
    Some((
        SeamInput {
            request: SeamRequest {
                name,
                between,
                near: near?,
                kind,
                both: both?,
                gap: gap?,
                material: material?.or(of_first)?,
            },
            allowable: allowable?,
            direct: direct?,
            intermittent: intermittent?,
        },
        SeamText {
            between: place(&fields, "between").unwrap_or_else(|| head.clone()),
            kind: place(&fields, "fillet")
                .or_else(|| place(&fields, "groove"))
                .unwrap_or_else(|| head.clone()),
            head,
        },
    ))
}

/// Where the value of `key` is written.
fn place(fields: &Fields<'_>, key: &str) -> Option<Range<usize>> {
    fields.get(key).map(span)
}

/// Weld metal is listed among the pieces by the name of its seam.
fn unlike_pieces(reader: &mut Reader, name: &str, head: &Range<usize>, pieces: &[piece::Read]) {
    if pieces.iter().any(|piece| piece.name == name) {
        reader.faults.push(Fault::at(
            head.clone(),
            "a piece has this name",
            format!("a seam and a piece are both named \"{}\"", printable(name)),
            "give the seam a name of its own: results list its weld metal beside the pieces",
        ));
    }
}

/// The pieces that the seam joins.
fn between(reader: &mut Reader, fields: &Fields<'_>, pieces: &[piece::Read]) -> Option<[usize; 2]> {
    let example = "as in between = [\"body\", \"cap\"]";
    let value = fields.need(
        reader,
        "between",
        &format!("name the two pieces that it joins, {example}"),
    )?;
    let Some([first, second]) = value.as_array().map(Vec::as_slice) else {
        match value.as_array() {
            Some(list) => reader.faults.push(Fault::at(
                span(value),
                "",
                format!("`between` cannot be a list of {}", list.len()),
                format!("name the two pieces that the seam joins, {example}"),
            )),
            None => reader.wrong_type(
                value,
                "`between`",
                &format!("the names of two pieces in brackets, {example}"),
            ),
        }
        return None;
    };
    let (first, second) = (
        piece_named(reader, first, pieces),
        piece_named(reader, second, pieces),
    );
    let (first, second) = (first?, second?);
    if first == second {
        reader.faults.push(Fault::at(
            span(value),
            "twice the same",
            format!(
                "a seam cannot join piece \"{}\" to itself",
                printable(&pieces[first].name)
            ),
            "name two different pieces; what is one solid is one piece, and a slit in it is drawn",
        ));
        return None;
    }
    Some([first, second])
}

fn piece_named(reader: &mut Reader, value: &Value<'_>, pieces: &[piece::Read]) -> Option<usize> {
    let text = reader.text(value, "the name of a piece")?;
    let found = pieces.iter().position(|piece| piece.name == text);
    if found.is_none() {
        let known: Vec<&str> = pieces.iter().map(|piece| piece.name.as_str()).collect();
        let near = nearest(text, &known).map_or_else(String::new, printable);
        reader.faults.push(Fault::at(
            span(value),
            "no such piece",
            format!("there is no piece \"{}\"", printable(text)),
            format!("the nearest known one is \"{near}\"; a seam joins pieces of this file by their names"),
        ));
    }
    found
}

/// Fillet or groove.
fn kind(reader: &mut Reader, fields: &Fields<'_>, name: &str) -> Option<SeamKind> {
    let remedy =
        "give it `fillet`, the leg, as in fillet = 6, or `groove`, as in groove = \"full\"";
    match (fields.get("fillet"), fields.get("groove")) {
        (Some(value), None) => {
            let legs = legs(reader, value)?;
            Some(SeamKind::Fillet { legs })
        }
        (None, Some(value)) => {
            let depth = depth(reader, value)?;
            Some(SeamKind::Groove { depth })
        }
        (None, None) => {
            if !fields.is_misspelt("fillet") && !fields.is_misspelt("groove") {
                reader.faults.push(Fault::at(
                    fields.span(),
                    "of which kind?",
                    format!(
                        "seam \"{}\" is neither a fillet nor a groove",
                        printable(name)
                    ),
                    remedy,
                ));
            }
            None
        }
        (Some(fillet), Some(groove)) => {
            reader.faults.push(
                Fault::at(
                    span(groove),
                    "groove",
                    format!("seam \"{}\" is both a fillet and a groove", printable(name)),
                    "keep one; where there are two seams, make the other a [[seam]] of its own",
                )
                .and(span(fillet), "fillet"),
            );
            None
        }
    }
}

/// The legs of a fillet on the first and the second piece.
fn legs(reader: &mut Reader, value: &Value<'_>) -> Option<[f64; 2]> {
    let Some(list) = value.as_array() else {
        let leg = reader.positive(value, "the leg of a fillet", Dimension::Length)?;
        return Some([leg, leg]);
    };
    let [first, second] = list.as_slice() else {
        reader.faults.push(Fault::at(
            span(value),
            "",
            format!("`fillet` cannot be a list of {}", list.len()),
            "write the leg, as in fillet = 6, or the legs on the first and on the second piece, as \
             in fillet = [6, 8]",
        ));
        return None;
    };
    let legs = (
        reader.positive(first, "the leg on the first piece", Dimension::Length),
        reader.positive(second, "the leg on the second piece", Dimension::Length),
    );
    Some([legs.0?, legs.1?])
}

/// The depth of a groove; `None` inside: all of the faying line.
fn depth(reader: &mut Reader, value: &Value<'_>) -> Option<Option<f64>> {
    match value.as_str() {
        Some("full") => Some(None),
        Some(word) if !word.contains(|c: char| c.is_ascii_digit()) => {
            reader.faults.push(Fault::at(
                span(value),
                "not known",
                format!("`groove` cannot be \"{}\"", printable(word)),
                "write \"full\", or the depth that is fused, as in groove = 5",
            ));
            None
        }
        _ => reader
            .positive(value, "the depth of a groove", Dimension::Length)
            .map(Some),
    }
}

/// Whether the seam is at both ends of the faying line.
fn both(reader: &mut Reader, fields: &Fields<'_>, kind: Option<&SeamKind>) -> Option<bool> {
    let Some(value) = fields.get("at") else {
        return Some(false);
    };
    if value.as_str() != Some("both") {
        reader.faults.push(Fault::at(
            span(value),
            "not \"both\"",
            "the key `at` of a seam can be \"both\" only",
            "write at = \"both\" for one seam at either end of the faying line, or give the place of \
             a single one by `near`",
        ));
        return None;
    }
    if kind == Some(&SeamKind::Groove { depth: None }) {
        reader.faults.push(Fault::at(
            fields.key_span("at").unwrap_or_else(|| fields.span()),
            "which ends?",
            "a groove over the full faying line has no ends to be at",
            "remove the line `at`, or give the depth of the groove from each end",
        ));
        return None;
    }
    Some(true)
}

/// The declared fit-up.
fn gap(reader: &mut Reader, fields: &Fields<'_>) -> Option<f64> {
    let Some(value) = fields.get("gap") else {
        return Some(0.0);
    };
    if fields.get("groove").is_some() && fields.get("fillet").is_none() {
        reader.faults.push(Fault::at(
            fields.key_span("gap").unwrap_or_else(|| span(value)),
            "of a groove",
            "`gap` is for fillets only: a groove fuses pieces that touch",
            "remove the line, and let the two pieces touch along the line that the groove fuses",
        ));
        return None;
    }
    let gap = reader.length(value, "the gap between the pieces")?;
    if gap >= 0.0 {
        return Some(gap);
    }
    reader.faults.push(Fault::at(
        span(value),
        "negative",
        "the gap between the pieces cannot be negative",
        "give the greatest distance that is allowed at the root, or remove the line where the pieces touch",
    ));
    None
}

/// The weld metal of a fillet; `None` inside: that of the first piece.
fn material(
    reader: &mut Reader,
    fields: &Fields<'_>,
    materials: &[Material],
) -> Option<Option<usize>> {
    let Some(value) = fields.get("material") else {
        return Some(None);
    };
    if fields.get("groove").is_some() && fields.get("fillet").is_none() {
        reader.faults.push(Fault::at(
            fields.key_span("material").unwrap_or_else(|| span(value)),
            "of a groove",
            "`material` is for fillets only: a groove adds no metal to the section",
            "remove the line; a groove fuses the two pieces where they touch",
        ));
        return None;
    }
    named(reader, value, "the material of a seam", materials).map(Some)
}

/// The line load on the seam, along x and y.
fn direct(reader: &mut Reader, fields: &Fields<'_>) -> Option<[f64; 2]> {
    let Some(value) = fields.get("direct") else {
        return Some([0.0; 2]);
    };
    let Some([x, y]) = value.as_array().map(Vec::as_slice) else {
        let expected = "forces per length along x and along y, as in direct = [0, 0.02]";
        match value.as_array() {
            Some(list) => reader.faults.push(Fault::at(
                span(value),
                "",
                format!("`direct` cannot be a list of {}", list.len()),
                format!("write {expected}"),
            )),
            None => reader.wrong_type(value, "`direct`", expected),
        }
        return None;
    };
    let along = (
        reader.line_load(x, "the line load along x"),
        reader.line_load(y, "the line load along y"),
    );
    Some([along.0?, along.1?])
}

/// Length and pitch of an intermittent seam; `None` inside: it is continuous.
fn intermittent(
    reader: &mut Reader,
    fields: &Fields<'_>,
    name: &str,
) -> Option<Option<Intermittent>> {
    let mut amount = |key, what| {
        let value = fields.get(key)?;
        Some((reader.positive(value, what, Dimension::Length), span(value)))
    };
    let length = amount("length", "the length of a seam");
    let pitch = amount("pitch", "the pitch of a seam");
    let (length, pitch) = match (length, pitch) {
        (None, None) => return Some(None),
        (Some(length), Some(pitch)) => (length, pitch),
        (length, _) => {
            let (given, missing) = if length.is_some() {
                ("length", "pitch")
            } else {
                ("pitch", "length")
            };
            if !fields.is_misspelt(missing) {
                reader.faults.push(Fault::at(
                    fields.key_span(given).unwrap_or_else(|| fields.span()),
                    format!("no `{missing}` beside it"),
                    format!(
                        "seam \"{}\" has a `{given}` but no `{missing}`",
                        printable(name)
                    ),
                    "an intermittent seam needs both: the length of each part, and the pitch from the \
                     start of one part to the start of the next",
                ));
            }
            return None;
        }
    };
    let ((length, length_range), (pitch, pitch_range)) = (length, pitch);
    let (length, pitch) = (length?, pitch?);
    if pitch < length {
        reader.faults.push(
            Fault::at(
                pitch_range,
                "shorter",
                format!(
                    "the pitch of seam \"{}\" is shorter than its parts are long",
                    printable(name)
                ),
                "the pitch runs from the start of one part to the start of the next; for a continuous \
                 seam remove both lines",
            )
            .and(length_range, "the length of each part"),
        );
        return None;
    }
    Some(Some(Intermittent { length, pitch }))
}
