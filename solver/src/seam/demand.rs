//! What a seam has to carry, against what it may.
//!
//! The shear flow q runs along the bar, a line load beside it, `direct = (q_x, q_y)`, in the plane of the
//! section. They are added as vectors over the length that is welded:
//!
//! ```text
//! resultant = √(q² + q_x² + q_y²) · pitch / length,   stress = resultant / throat
//! ```
//!
//! That is the plain throat stress of elementary statics (common practice), nothing more: what counts as
//! the effective throat, and how the parts of the stress are weighed, is for the local code to say.

use sectile_mesh::domain::seam::Seam;

/// How a seam is laid and what it may carry, in consistent units: force F, length L.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Laying {
    /// Line load beside the shear flow along x and y, F/L of bar.
    pub direct: [f64; 2],
    /// Length and pitch of the parts of an intermittent seam.
    pub intermittent: Option<[f64; 2]>,
    /// The throat stress that it may be given, F/L².
    pub allowable: Option<f64>,
}

/// What a seam has to carry.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Demand {
    /// Shear flow through the throat, F/L of bar, positive from the first piece to the second.
    pub flow: f64,
    /// Flow and line load together, F/L of weld.
    pub resultant: f64,
    /// Resultant over throat, F/L².
    pub stress: f64,
    /// Stress over what is allowed.
    pub utilisation: Option<f64>,
    /// What would just be allowed.
    pub needed: Option<Size>,
}

/// Size of a seam.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Size {
    /// Legs of a fillet on the first and second piece, in the proportion that they have; the fit-up
    /// stays, and takes as much of the throat.
    Legs([f64; 2]),
    /// Length over which a groove fuses the faying line.
    Depth(f64),
}

/// The demand on a seam through whose throat `flow` passes.
#[must_use]
pub fn demand(seam: &Seam, laying: &Laying, flow: f64) -> Demand {
    let [x, y] = laying.direct;
    let share = laying
        .intermittent
        .map_or(1.0, |[length, pitch]| pitch / length);
    let resultant = flow.hypot(x).hypot(y) * share;
    let stress = resultant / seam.throat_length;
    let needed = laying.allowable.map(|allowable| {
        let throat = resultant / allowable;
        match seam.legs {
            // The throat without fit-up grows with the legs, what the fit-up takes does not.
            Some(legs) => {
                let lost = seam.full_throat - seam.throat_length;
                Size::Legs(legs.map(|leg| leg * (throat + lost) / seam.full_throat))
            }
            None => Size::Depth(throat),
        }
    });
    Demand {
        flow,
        resultant,
        stress,
        utilisation: laying.allowable.map(|allowable| stress / allowable),
        needed,
    }
}
