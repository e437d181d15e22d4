//! `plate`, `tube` and `bar`: shapes of a few dimensions.

use sectile_mesh::Point;
use sectile_mesh::outline::piece::Outline;
use sectile_mesh::outline::shape::{self, ShapeFault};
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::quantity::Dimension;
use super::ring::RingText;

/// `plate = { from = [x, y], to = [x, y], t = 10 }`: a flat of thickness t about that line.
pub(super) fn plate(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let fields = Fields::open(reader, value, "a plate", &["from", "to", "t"])?;
    let mut end = |key, remedy| {
        let value = fields.need(reader, key, remedy)?;
        reader.point(value, &format!("the end `{key}` of a plate"))
    };
    let from = end("from", "say where its centre line starts: from = [x, y]");
    let to = end("to", "say where its centre line ends: to = [x, y]");
    let t = size(reader, &fields, "t", "the thickness `t`");
    let made = shape::plate(from?, to?, t?);
    shaped(reader, value, &fields, "plate", made)
}

/// `tube = { at = [x, y], d = 100, t = 5 }`: outer diameter d, wall t.
pub(super) fn tube(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let fields = Fields::open(reader, value, "a tube", &["at", "d", "t"])?;
    let at = centre(reader, &fields, "a tube");
    let d = size(reader, &fields, "d", "the outer diameter `d`");
    let t = size(reader, &fields, "t", "the wall thickness `t`");
    let made = shape::tube(at?, d?, t?);
    shaped(reader, value, &fields, "tube", made)
}

/// `bar = { at = [x, y], b = 40, h = 60 }`: a rectangle, b along x and h along y, centred at `at`.
pub(super) fn bar(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let fields = Fields::open(reader, value, "a bar", &["at", "b", "h"])?;
    let at = centre(reader, &fields, "a bar");
    let b = size(reader, &fields, "b", "the width `b`");
    let h = size(reader, &fields, "h", "the height `h`");
    let made = shape::bar(at?, b?, h?);
    shaped(reader, value, &fields, "bar", made)
}

fn centre(reader: &mut Reader, fields: &Fields<'_>, what: &str) -> Option<Point> {
    let value = fields.need(reader, "at", "say where its centre is: at = [x, y]")?;
    reader.point(value, &format!("the centre `at` of {what}"))
}

/// A size that the shape cannot do without.
fn size(reader: &mut Reader, fields: &Fields<'_>, key: &str, what: &str) -> Option<f64> {
    let value = fields.need(reader, key, &format!("give {what}, as in {key} = 10"))?;
    reader.positive(value, what, Dimension::Length)
}

fn shaped(
    reader: &mut Reader,
    value: &Value<'_>,
    fields: &Fields<'_>,
    name: &str,
    made: Result<Outline, Vec<ShapeFault>>,
) -> Option<(Outline, Vec<RingText>)> {
    match made {
        Ok(outline) => Some(written_whole(value, name, outline)),
        Err(faults) => {
            for fault in faults {
                reader.faults.push(shape_fault(&fault, value, fields));
            }
            None
        }
    }
}

/// The outline and, for each of its rings, that it is written in the whole of `value`.
pub(super) fn written_whole(
    value: &Value<'_>,
    name: &str,
    outline: Outline,
) -> (Outline, Vec<RingText>) {
    let text = |part: &str| RingText {
        what: format!("the {part} of the {name}"),
        whole: span(value),
        corners: Vec::new(),
    };
    let mut texts = vec![text("edge")];
    texts.extend(outline.holes.iter().map(|_| text("inside")));
    (outline, texts)
}

/// The fault that the makers of shapes found, at the key that it names.
pub(super) fn shape_fault(fault: &ShapeFault, value: &Value<'_>, fields: &Fields<'_>) -> Fault {
    let at = |key: &str| fields.get(key).map_or(span(value), span);
    match *fault {
        ShapeFault::NotFinite { name } => Fault::at(
            at(name),
            "not finite",
            format!("`{name}` must be a finite number"),
            "give a number such as 12.5",
        ),
        ShapeFault::NotPositive { name, .. } => Fault::at(
            at(name),
            "not positive",
            format!("`{name}` must be greater than zero"),
            "give a length such as 12.5",
        ),
        ShapeFault::NoLength => Fault::at(
            at("from"),
            "",
            "the plate has no length: `from` and `to` are the same place",
            "give the two ends of the plate's centre line",
        )
        .and(at("to"), ""),
        ShapeFault::NoBore { given, limit } => Fault::at(
            at("t"),
            format!("must be less than {limit}"),
            format!("a wall of {given} leaves nothing of the inside of this tube"),
            "make the wall thinner than half the outer diameter; a solid round is outline = { circle \
             = { at = [x, y], d = 100 } }",
        ),
    }
}
