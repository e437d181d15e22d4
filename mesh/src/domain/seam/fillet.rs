//! The weld metal of a fillet.
//!
//! A triangle between the root and the toes, the ends of the legs. The throat, from the root
//! perpendicular to the line between the toes, divides it into two halves, so that it is an interface of
//! the mesh and the flow through it is exact. Where a fit-up keeps the pieces apart the legs are measured
//! from where the lines of the faces meet, the metal has a root opening there, and the throat starts at
//! the corner that is off the other face: the leg grows by the gap, as is common practice.

use super::face::Face;
use super::inside_corner::InsideCorner;
use crate::domain::fault::{Misfit, SeamFault};
use crate::outline::piece::{Outline, Ring};
use crate::outline::side::Side;
use crate::point::Point;

/// Least part of the line between the toes that may lie to either side of the throat: legs of about 1 to
/// 7 at a right angle.
const LEAST_SHARE: f64 = 0.02;

/// The two halves of a fillet's weld metal.
#[derive(Clone, Debug, PartialEq)]
pub struct Metal {
    /// The piece that each half lies on.
    pub on: [u32; 2],
    /// Their outlines.
    pub halves: [Outline; 2],
    /// Its legs on the first and second piece that it joins.
    pub legs: [f64; 2],
    /// How far the pieces are apart.
    pub gap: f64,
    /// Where the throat starts.
    pub root: Point,
    /// What the throat would be if it started where the lines of the faces meet.
    pub full_throat: f64,
}

/// Lays a fillet with the given legs, on the first and second piece `between`, into a corner.
///
/// # Errors
/// [`SeamFault::Leg`] for each leg without room, [`SeamFault::Misfit`].
pub fn lay(
    between: [u32; 2],
    legs: [f64; 2],
    corner: &InsideCorner,
    tolerance: f64,
) -> Result<Metal, Vec<SeamFault>> {
    let leg = |face: &Face| legs[usize::from(face.piece != between[0])];
    let mut faults: Vec<SeamFault> = corner
        .faces
        .iter()
        .filter(|face| leg(face) > face.room + tolerance)
        .map(|face| SeamFault::Leg {
            piece: face.piece as usize,
            leg: leg(face),
            room: face.room,
            at: face.end,
        })
        .collect();
    let misfit = |cause| SeamFault::Misfit {
        at: corner.root,
        cause,
    };
    for face in &corner.faces {
        if leg(face) <= 16.0 * tolerance {
            faults.push(misfit(Misfit::TooSmall));
        } else if leg(face) <= face.begin + 16.0 * tolerance {
            faults.push(misfit(Misfit::GapTakesLeg));
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }

    let root = corner.root;
    let [first, second] = &corner.faces;
    let toes = [first, second].map(|face| face.at(leg(face), tolerance));
    let line = toes[1] - toes[0];
    let share = (root - toes[0]).dot(line) / line.dot(line);
    let inside = (toes[0] - root).cross(toes[1] - root) > 0.0;
    if !inside || !(LEAST_SHARE..=1.0 - LEAST_SHARE).contains(&share) {
        return Err(vec![misfit(Misfit::FootOutside)]);
    }
    let foot = toes[0].lerp(toes[1], share);
    // Where a face begins: at the root, or at the far side of the opening.
    let opening = first.start;
    let begin = |face: &Face| if face.begin > 0.0 { root } else { opening };
    let straight = |from, to| Side {
        from,
        to,
        arc: None,
        corner: 0,
    };
    // From the throat's foot to its root, and across the opening to where this half's face begins.
    let to_face = |face: &Face| {
        let mut sides = vec![straight(foot, root)];
        if begin(face) != root {
            sides.push(straight(root, opening));
        }
        sides
    };
    let half = |face: &Face, toe: Point| {
        let mut sides = to_face(face);
        sides.push(face.part(begin(face), toe, leg(face)));
        sides.push(straight(toe, foot));
        Outline {
            outer: Ring { sides },
            holes: Vec::new(),
        }
    };
    Ok(Metal {
        on: [first.piece, second.piece],
        halves: [half(first, toes[0]), half(second, toes[1])],
        legs,
        gap: corner.gap,
        root,
        full_throat: (toes[0] - first.start).cross(line).abs() / line.length(),
    })
}
