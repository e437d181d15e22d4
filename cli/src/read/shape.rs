//! `plate`, `tube` and `bar`: shapes of a few dimensions.

use sectile_mesh::Point;
use sectile_mesh::outline::piece::Outline;
use sectile_mesh::outline::shape;
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
    let (from, to, t) = (from?, to?, t?);
    if from == to {
        let at = |key| fields.get(key).map_or(span(value), span);
        reader.faults.push(
            Fault::at(
                at("from"),
                "",
                "the plate has no length: `from` and `to` are the same place",
                "give the two ends of the plate's centre line",
            )
            .and(at("to"), ""),
        );
        return None;
    }
    Some(written_whole(value, "plate", shape::plate(from, to, t)))
}

/// `tube = { at = [x, y], d = 100, t = 5 }`: outer diameter d, wall t.
pub(super) fn tube(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let fields = Fields::open(reader, value, "a tube", &["at", "d", "t"])?;
    let at = centre(reader, &fields, "a tube");
    let d = size(reader, &fields, "d", "the outer diameter `d`");
    let t = size(reader, &fields, "t", "the wall thickness `t`");
    let (at, d, t) = (at?, d?, t?);
    if 2.0 * t >= d {
        reader.faults.push(Fault::at(
            fields.get("t").map_or(span(value), span),
            format!("must be less than {}", 0.5 * d),
            format!("a wall of {t} leaves nothing of the inside of this tube"),
            "make the wall thinner than half the outer diameter; a solid round is outline = { circle \
             = { at = [x, y], d = 100 } }",
        ));
        return None;
    }
    Some(written_whole(value, "tube", shape::tube(at, d, t)))
}

/// `bar = { at = [x, y], b = 40, h = 60 }`: a rectangle, b along x and h along y, centred at `at`.
pub(super) fn bar(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let fields = Fields::open(reader, value, "a bar", &["at", "b", "h"])?;
    let at = centre(reader, &fields, "a bar");
    let b = size(reader, &fields, "b", "the width `b`");
    let h = size(reader, &fields, "h", "the height `h`");
    Some(written_whole(value, "bar", shape::bar(at?, b?, h?)))
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
