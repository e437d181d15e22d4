//! A loop of corners, or a circle, and where each corner is written.

use std::ops::Range;

use sectile_mesh::outline::corner::{Corner, CornerFault, ring_from_corners};
use sectile_mesh::outline::piece::Ring;
use sectile_mesh::outline::shape;
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::quantity::Dimension;

const CORNER: &[&str] = &["at", "round", "via"];

/// Where a ring is written.
#[derive(Clone, Debug)]
pub(super) struct RingText {
    /// What the ring is in its piece, with its article: "the outline", "hole 2".
    pub(super) what: String,
    /// The whole of it.
    pub(super) whole: Range<usize>,
    /// Each of its corners; none where the ring comes from a shape.
    pub(super) corners: Vec<CornerText>,
}

/// Where a corner is written, and whether it is rounded.
#[derive(Clone, Debug)]
pub(super) struct CornerText {
    pub(super) span: Range<usize>,
    pub(super) rounded: bool,
    pub(super) by_arc: bool,
}

/// The loop that `value` states, called `what` in messages.
pub(super) fn read(reader: &mut Reader, value: &Value<'_>, what: &str) -> Option<(Ring, RingText)> {
    if value.as_table().is_some() {
        return circle(reader, value, what);
    }
    let Some(list) = value.as_array() else {
        reader.wrong_type(
            value,
            what,
            "a list of corners [[x, y], …] or { circle = { at = [x, y], d = 5 } }",
        );
        return None;
    };
    if !list.is_empty()
        && list
            .iter()
            .all(|entry| entry.as_array().is_none() && entry.as_table().is_none())
    {
        reader.faults.push(Fault::at(
            span(value),
            "",
            format!("{what} is a list without corners"),
            "put each corner in brackets of its own: [[0, 0], [80, 0], [80, 12]]",
        ));
        return None;
    }
    let corners: Vec<Option<Corner>> = list
        .iter()
        .enumerate()
        .map(|(i, value)| corner(reader, value, &format!("corner {}", i + 1)))
        .collect();
    let corners: Vec<Corner> = corners.into_iter().collect::<Option<_>>()?;
    let text = RingText {
        what: what.to_owned(),
        whole: span(value),
        corners: corners
            .iter()
            .zip(list)
            .map(|(corner, value)| CornerText {
                span: span(value),
                rounded: corner.round.is_some(),
                by_arc: corner.via.is_some(),
            })
            .collect(),
    };
    match ring_from_corners(&corners) {
        Ok(ring) => Some((ring, text)),
        Err(faults) => {
            for (index, fault) in faults {
                let fault = corner_fault(&fault, index, &corners, &text, reader.units.length);
                reader.faults.push(fault);
            }
            None
        }
    }
}

fn corner(reader: &mut Reader, value: &Value<'_>, what: &str) -> Option<Corner> {
    if value.as_table().is_none() {
        if value.as_array().is_none() {
            reader.wrong_type(
                value,
                what,
                "a point [x, y] or a table such as { at = [x, y], round = 4 }",
            );
            return None;
        }
        let at = reader.point(value, what)?;
        return Some(Corner {
            at,
            round: None,
            via: None,
        });
    }
    let fields = Fields::open(reader, value, "a corner", CORNER)?;
    let at = fields
        .need(reader, "at", "say where the corner is: at = [x, y]")
        .and_then(|value| reader.point(value, "a corner"));
    let round = match fields.get("round") {
        None => Some(None),
        Some(value) => reader
            .positive(value, "the radius `round`", Dimension::Length)
            .map(Some),
    };
    let via = match fields.get("via") {
        None => Some(None),
        Some(value) => reader.point(value, "`via`").map(Some),
    };
    Some(Corner {
        at: at?,
        round: round?,
        via: via?,
    })
}

fn circle(reader: &mut Reader, value: &Value<'_>, what: &str) -> Option<(Ring, RingText)> {
    let outer = Fields::open(reader, value, what, &["circle"])?;
    let value = outer.need(
        reader,
        "circle",
        "a loop is a list of corners [[x, y], …] or { circle = { at = [x, y], d = 5 } }",
    )?;
    let fields = Fields::open(reader, value, "a circle", &["at", "d"])?;
    let at = fields
        .need(reader, "at", "say where its centre is: at = [x, y]")
        .and_then(|value| reader.point(value, "the centre of a circle"));
    let d = fields
        .need(reader, "d", "give the diameter, as in d = 5")
        .and_then(|value| reader.positive(value, "the diameter `d`", Dimension::Length));
    let text = RingText {
        what: what.to_owned(),
        whole: span(value),
        corners: Vec::new(),
    };
    Some((shape::circle(at?, d?), text))
}

/// The fault that the makers of rings found at `corners[index]`, told by the text.
fn corner_fault(
    fault: &CornerFault,
    index: usize,
    corners: &[Corner],
    text: &RingText,
    unit: &str,
) -> Fault {
    let here = text
        .corners
        .get(index)
        .map_or(text.whole.clone(), |c| c.span.clone());
    let count = corners.len();
    let before = (index + count.max(1) - 1) % count.max(1);
    let previous = text
        .corners
        .get(before)
        .map_or(text.whole.clone(), |c| c.span.clone());
    match *fault {
        CornerFault::TooFew(found) => Fault::at(
            text.whole.clone(),
            match found {
                0 => "no corner".to_owned(),
                1 => "1 corner".to_owned(),
                n => format!("{n} corners"),
            },
            format!("{} needs at least three corners", text.what),
            "list the corners one after the other; the loop closes by itself. Two corners suffice \
             where a side is an arc (`via`); a full circle is { circle = { at = [x, y], d = 5 } }",
        ),
        CornerFault::NotFinite => Fault::at(
            here,
            "not finite",
            format!(
                "corner {} of {} is not at a finite place",
                index + 1,
                text.what
            ),
            "give numbers such as 12.5",
        ),
        CornerFault::ZeroLength if index == 0 && count > 1 => Fault::at(
            previous,
            format!("corner {count}, the same place"),
            format!(
                "the last corner of {} repeats the first, so the side between has no length",
                text.what
            ),
            "leave the last corner out: the loop closes by itself",
        )
        .and(here, "corner 1"),
        CornerFault::ZeroLength => Fault::at(
            here,
            format!("corner {}, the same place", index + 1),
            format!(
                "the side from corner {} to corner {} of {} has no length",
                before + 1,
                index + 1,
                text.what
            ),
            "leave one of the two corners out, or correct it",
        )
        .and(previous, format!("corner {}", before + 1)),
        CornerFault::NoArc => Fault::at(
            here,
            "no arc arrives here",
            format!(
                "no circular arc runs from corner {} through `via` to corner {}",
                before + 1,
                index + 1
            ),
            "`via` must lie beside the straight line between the two corners and away from both; for a \
             straight side leave `via` out",
        ),
        CornerFault::RoundTooLarge { given, largest } => Fault::at(
            here,
            if largest > 0.0 {
                format!("at most {} fits", at_most(largest))
            } else {
                "no radius fits".to_owned()
            },
            format!(
                "a radius of {given} {unit} does not fit into corner {} of {}",
                index + 1,
                text.what
            ),
            if largest > 0.0 {
                format!(
                    "the largest radius that fits here, the other corners as they are, is {} {unit}",
                    at_most(largest)
                )
            } else {
                "the neighbouring corners' radii leave no room: reduce those, or leave `round` out here"
                    .to_owned()
            },
        ),
        CornerFault::NothingToRound => Fault::at(
            here,
            "no corner to round",
            format!(
                "corner {} of {} cannot be rounded: its two sides are in line or fold back",
                index + 1,
                text.what
            ),
            "leave `round` out, or move the corner",
        ),
    }
}

/// A number to six digits, never rounded up.
pub(super) fn at_most(value: f64) -> String {
    if !value.is_normal() {
        return format!("{value}");
    }
    let digits = 5 - value.abs().log10().floor() as i32;
    let scale = 10_f64.powi(digits.clamp(-300, 300));
    // A value that is its own short decimal, such as 2.3, must not lose a unit to binary rounding.
    let near = (value * scale).round() / scale;
    let short = if near <= value {
        near
    } else {
        (value * scale).floor() / scale
    };
    format!("{short}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn limits_are_cut_to_six_digits_and_never_exceeded() {
        for (value, shown) in [
            (2.3, "2.3"),
            (71.45, "71.45"),
            (1.0 / 3.0, "0.333333"),
            (2.0 / 3.0, "0.666666"),
            (199_999.96, "199999"),
            (1e-7 / 3.0, "0.0000000333333"),
            (0.0, "0"),
            (-2.0 / 3.0, "-0.666667"),
        ] {
            assert_eq!(at_most(value), shown);
            assert!(shown.parse::<f64>().is_ok_and(|shown| shown <= value));
        }
    }
}
