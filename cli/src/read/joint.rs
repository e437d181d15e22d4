//! Faults of seams.

use sectile_mesh::Point;
use sectile_mesh::domain::fault::{Misfit, Obstacle, SeamFault};

use super::fault::Fault;
use super::geometry::{Sources, point, short};

/// Pieces that nothing joins to the first one.
pub(super) fn hanging(sources: Sources<'_>, pieces: &[usize]) -> Fault {
    let names: Vec<String> = pieces
        .iter()
        .map(|&p| format!("\"{}\"", sources.name(p)))
        .collect();
    let message = format!(
        "no path of seams joins {} to \"{}\"",
        names.join(", "),
        sources.name(0)
    );
    Fault::at(
        sources.head(pieces.first().copied().unwrap_or(0)),
        "this piece",
        message,
        "add a `[[seam]]`, or leave out `contact = \"seams\"` to fuse pieces where they touch",
    )
}

/// What is wrong with seam number `seam`, from 0.
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
            format!(
                "move them together, or declare the fit-up of a fillet with `gap = {}` or more",
                short(*distance)
            ),
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
            "say which is meant with `near = [x, y]`".to_owned(),
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
                Obstacle::Seam(seam) => {
                    format!("runs into weld {} at {}", seam + 1, point(*at))
                }
            },
            "make it smaller, or move what is in its way".to_owned(),
        ),
    };
    Fault::whole(format!("seam {} {message}", seam + 1), remedy)
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
