//! The tables `[[piece]]`.

use std::ops::Range;

use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::place::placed;
use sectile_solver::material::Material;
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader};
use super::geometry::PieceText;
use super::names::{Names, tables};
use super::near::listed;
use super::ring::{self, RingText};
use super::syntax::printable;
use super::{place, profile, shape};

const KEYS: &[&str] = &[
    "name", "material", "outline", "holes", "plate", "tube", "bar", "profile", "place",
];
/// Of these a piece has exactly one.
const SHAPES: &[&str] = &["outline", "plate", "tube", "bar", "profile"];

/// A piece as far as it could be read.
pub(super) struct Read {
    /// Its name, which seams may use whatever else is wrong.
    pub(super) name: String,
    /// The piece and where it is written, if it is without fault.
    pub(super) piece: Option<(Piece, PieceText)>,
}

/// All pieces in the order of the file.
pub(super) fn read_all(
    reader: &mut Reader,
    value: &Value<'_>,
    materials: &[Material],
) -> Vec<Read> {
    let mut names = Names::new("pieces");
    tables(reader, value, "piece")
        .unwrap_or_default()
        .iter()
        .enumerate()
        .filter_map(|(i, value)| read(reader, value, i, materials, &mut names))
        .collect()
}

fn read(
    reader: &mut Reader,
    value: &Value<'_>,
    index: usize,
    materials: &[Material],
    names: &mut Names,
) -> Option<Read> {
    let fields = Fields::open(reader, value, "a piece", KEYS)?;
    let (name, head) = names.of(reader, &fields, index);
    let piece = piece(reader, &fields, &name, head, materials);
    Some(Read { name, piece })
}

fn piece(
    reader: &mut Reader,
    fields: &Fields<'_>,
    name: &str,
    head: Range<usize>,
    materials: &[Material],
) -> Option<(Piece, PieceText)> {
    let material = material(reader, fields, name, materials);
    let body = body(reader, fields, name);
    let holes = fields.get("holes").map(|value| holes(reader, value));
    let placing = fields.get("place").map(|value| place::read(reader, value));

    let (mut outline, mut rings) = body?;
    if let Some(holes) = holes {
        for (hole, text) in holes? {
            outline.holes.push(hole);
            rings.push(text);
        }
    }
    if let Some(placing) = placing {
        outline = placed(&outline, &placing?);
    }
    Some((
        Piece {
            name: name.to_owned(),
            outline,
            material: material?,
        },
        PieceText { head, rings },
    ))
}

fn material(
    reader: &mut Reader,
    fields: &Fields<'_>,
    name: &str,
    materials: &[Material],
) -> Option<usize> {
    let known: Vec<&str> = materials
        .iter()
        .map(|material| material.name.as_str())
        .collect();
    let Some(value) = fields.get("material") else {
        if known.len() <= 1 {
            return Some(0);
        }
        reader.faults.push(Fault::at(
            fields.span(),
            "of which material?",
            format!(
                "piece \"{}\" names no material and the file has several",
                printable(name)
            ),
            format!("add `material`, one of {}", listed(&known, "or")),
        ));
        return None;
    };
    super::material::named(reader, value, "the material of a piece", materials)
}

/// The piece's shape before its own holes and its placing.
fn body(reader: &mut Reader, fields: &Fields<'_>, name: &str) -> Option<(Outline, Vec<RingText>)> {
    let mut given: Vec<(Range<usize>, &str)> = SHAPES
        .iter()
        .filter_map(|key| Some((fields.key_span(key)?, *key)))
        .collect();
    given.sort_by_key(|(range, _)| range.start);
    let value_of = |key| fields.get(key);
    match given.as_slice() {
        // A misspelt shape has been told already.
        [] if SHAPES.iter().any(|key| fields.is_misspelt(key)) => None,
        [] => {
            reader.faults.push(Fault::at(
                fields.span(),
                "no shape",
                format!("piece \"{}\" has no shape", printable(name)),
                format!("give it one of {}", listed(SHAPES, "or")),
            ));
            None
        }
        [(_, key)] => {
            let value = value_of(key)?;
            match *key {
                "outline" => {
                    let (outer, text) = ring::read(reader, value, "the outline")?;
                    Some((
                        Outline {
                            outer,
                            holes: Vec::new(),
                        },
                        vec![text],
                    ))
                }
                "plate" => shape::plate(reader, value),
                "tube" => shape::tube(reader, value),
                "bar" => shape::bar(reader, value),
                _ => profile::read(reader, value),
            }
        }
        [(first, one), (second, other), ..] => {
            reader.faults.push(
                Fault::at(
                    second.clone(),
                    "second shape",
                    format!(
                        "piece \"{}\" has two shapes, `{one}` and `{other}`",
                        printable(name)
                    ),
                    "keep one, and make the other a [[piece]] of its own",
                )
                .and(first.clone(), "first shape"),
            );
            None
        }
    }
}

fn holes(
    reader: &mut Reader,
    value: &Value<'_>,
) -> Option<Vec<(sectile_mesh::outline::piece::Ring, RingText)>> {
    let Some(list) = value.as_array() else {
        reader.wrong_type(
            value,
            "`holes`",
            "a list of loops, such as [{ circle = { at = [x, y], d = 5 } }]",
        );
        return None;
    };
    let rings: Vec<_> = list
        .iter()
        .enumerate()
        .map(|(i, value)| ring::read(reader, value, &format!("hole {}", i + 1)))
        .collect();
    rings.into_iter().collect()
}
