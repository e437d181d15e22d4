//! Faults of seams that the geometry shows, told by the text of the seams.

use std::ops::Range;

use sectile_mesh::Point;
use sectile_mesh::domain::fault::{Misfit, Obstacle, SeamFault};
use sectile_mesh::domain::seam::SeamKind;

use super::fault::Fault;
use super::geometry::{Sources, point, short};
use super::syntax::printable;

/// Pieces that nothing joins to the first one.
pub(super) fn hanging(sources: Sources<'_>, pieces: &[usize]) -> Fault {
    let names: Vec<String> = pieces
        .iter()
        .map(|&p| format!("\"{}\"", sources.name(p)))
        .collect();
    let first = sources.name(0);
    let fault = Fault::at(
        sources.head(pieces.first().copied().unwrap_or(0)),
        "this piece",
        format!("no path of seams joins {} to \"{first}\"", names.join(", ")),
        "join it by a [[seam]]; with `contact = \"seams\"`, or any [[seam]] in the file, pieces that only \
         touch are apart",
    );
    pieces.iter().skip(1).fold(fault, |fault, &piece| {
        fault.and(sources.head(piece), "and this piece")
    })
}

/// What is wrong with the seam of index `seam`.
pub(super) fn fault(sources: Sources<'_>, seam: usize, found: &SeamFault) -> Fault {
    let unit = sources.unit;
    let length = |value: f64| format!("{} {unit}", short(value));
    let (message, remedy) = match found {
        SeamFault::Pieces => (
            "does not join two different pieces".to_owned(),
            "name two pieces in `between`".to_owned(),
        ),
        SeamFault::Measure => (
            "has a size that is not positive or not a number".to_owned(),
            "give legs, depths and gaps as positive lengths".to_owned(),
        ),
        SeamFault::Apart { distance, at } => (
            format!(
                "finds its pieces {} apart, around {}",
                length(*distance),
                point(*at)
            ),
            match sources.seams.get(seam).map(|seam| &seam.request.kind) {
                Some(SeamKind::Fillet { legs }) if *distance < legs[0].min(legs[1]) => format!(
                    "move them together, or declare the fit-up: gap = {} or more",
                    short(*distance)
                ),
                Some(SeamKind::Fillet { .. }) => {
                    "move them together: a fit-up that is declared by `gap` is smaller than the legs"
                        .to_owned()
                }
                _ => "move them together: a groove fuses pieces that touch along a line".to_owned(),
            },
        ),
        SeamFault::NoCorner { at: None } => (
            "finds no inside corner between its pieces".to_owned(),
            "a fillet lies where two pieces that touch form a corner: check `between`, or use a groove"
                .to_owned(),
        ),
        SeamFault::NoCorner { at: Some(at) } => (
            format!("finds no inside corner between its pieces at {}", point(*at)),
            "use `near` for the end that has one instead of `at = \"both\"`, or a groove".to_owned(),
        ),
        SeamFault::NoLine { at } => (
            format!(
                "finds that its pieces touch in a point only, at {}",
                point(*at)
            ),
            "a groove fuses a line: move the pieces against each other, or use a fillet".to_owned(),
        ),
        SeamFault::Choice { places } => (
            format!("could lie at {}", list(places)),
            match places.first() {
                Some(first) => format!(
                    "say which is meant, as in near = [{}, {}]; at = \"both\" takes both ends of a line",
                    short(first.x),
                    short(first.y)
                ),
                None => "say which is meant with `near`".to_owned(),
            },
        ),
        SeamFault::Angle { at, angle } => (
            format!(
                "finds the faces of its pieces at {}° to each other at {}: a fillet needs 30° to 150°",
                short(angle.to_degrees()),
                point(*at)
            ),
            if *angle > 2.0 {
                "use a groove where edges are flush, or let one piece stand out"
            } else {
                "use a groove, or open the corner"
            }
            .to_owned(),
        ),
        SeamFault::Leg {
            piece,
            leg,
            room,
            at,
        } => (
            format!(
                "has a leg of {} on piece \"{}\", whose side ends after {} at {}",
                length(*leg),
                sources.name(*piece),
                length(*room),
                point(*at)
            ),
            format!("make that leg at most {}, or the side longer", length(*room)),
        ),
        SeamFault::Misfit { at, cause } => {
            let (what, remedy) = misfit(*cause);
            (format!("{what}, at {}", point(*at)), remedy.to_owned())
        }
        SeamFault::Depth { depth, length: l } => (
            format!(
                "is {} deep, but its faying line is {} long",
                length(*depth),
                length(*l)
            ),
            "give less, or `groove = \"full\"` for all of it".to_owned(),
        ),
        SeamFault::DepthsMeet { depth, length: l } => (
            format!(
                "is {} deep from both ends of a faying line of {}: they meet",
                length(*depth),
                length(*l)
            ),
            "use `groove = \"full\"`, or give less than half of the line".to_owned(),
        ),
        SeamFault::NoEnd { length: l } => (
            format!(
                "has a depth, but its faying line of {} is closed and has no end",
                length(*l)
            ),
            "use `groove = \"full\"`".to_owned(),
        ),
        SeamFault::Overlap { with, at } => (
            match with {
                Obstacle::Piece(piece) => format!(
                    "runs into piece \"{}\" at {}",
                    sources.name(*piece),
                    point(*at)
                ),
                Obstacle::Seam(other) if *other == seam => {
                    format!("runs into its own other end at {}", point(*at))
                }
                Obstacle::Seam(other) => {
                    format!("runs into seam \"{}\" at {}", seam_name(sources, *other), point(*at))
                }
            },
            "make it smaller, or move what is in its way".to_owned(),
        ),
    };
    let told = Fault::at(
        main_mark(sources, seam, found),
        "",
        format!("seam \"{}\" {message}", seam_name(sources, seam)),
        remedy,
    );
    match also(sources, seam, found) {
        Some((range, remark)) => told.and(range, remark),
        None => told,
    }
}

fn seam_name(sources: Sources<'_>, seam: usize) -> String {
    let name = sources.seams.get(seam).map(|seam| &seam.request.name);
    name.map_or_else(String::new, |name| printable(name))
}

/// The text that a fault is about.
fn main_mark(sources: Sources<'_>, seam: usize, found: &SeamFault) -> Range<usize> {
    let Some(text) = sources.seam_texts.get(seam) else {
        return 0..0;
    };
    match found {
        SeamFault::Pieces
        | SeamFault::Apart { .. }
        | SeamFault::NoCorner { .. }
        | SeamFault::NoLine { .. } => &text.between,
        SeamFault::Choice { .. } => &text.head,
        SeamFault::Measure
        | SeamFault::Angle { .. }
        | SeamFault::Leg { .. }
        | SeamFault::Misfit { .. }
        | SeamFault::Depth { .. }
        | SeamFault::DepthsMeet { .. }
        | SeamFault::NoEnd { .. }
        | SeamFault::Overlap { .. } => &text.kind,
    }
    .clone()
}

/// What else has to do with it.
fn also(
    sources: Sources<'_>,
    seam: usize,
    found: &SeamFault,
) -> Option<(Range<usize>, &'static str)> {
    match *found {
        SeamFault::Leg { piece, .. } => Some((sources.head(piece), "on this piece")),
        SeamFault::Overlap {
            with: Obstacle::Piece(piece),
            ..
        } => Some((sources.head(piece), "this piece is there")),
        SeamFault::Overlap {
            with: Obstacle::Seam(other),
            ..
        } if other != seam => {
            let text = sources.seam_texts.get(other)?;
            Some((text.head.clone(), "this seam is there"))
        }
        _ => None,
    }
}

fn misfit(cause: Misfit) -> (&'static str, &'static str) {
    match cause {
        Misfit::FootOutside => (
            "has legs so unequal that its throat misses the face",
            "make the legs more alike",
        ),
        Misfit::GapTakesLeg => (
            "has a leg that the fit-up takes up",
            "make the leg longer than the gap, or move the pieces together",
        ),
        Misfit::InTheWay => (
            "runs into the sides of its own pieces",
            "make it smaller: the sides bend into its way or are interrupted",
        ),
        Misfit::TooSmall => (
            "is too small to be told from nothing",
            "check its size and the unit of length",
        ),
    }
}

fn list(places: &[Point]) -> String {
    let places: Vec<String> = places.iter().map(|p| point(*p)).collect();
    places.join(" or ")
}
