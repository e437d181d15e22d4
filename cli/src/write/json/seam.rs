//! The `seams` of the results object and of its actions.

use serde::Serialize;

use sectile_mesh::domain::seam::Seam as Made;
use sectile_solver::seam::demand::Demand as Found;

use super::no_minus_zero as z;
use crate::response::{Names, Responses};
use crate::section::{SeamInput, Units};
use crate::write::seams::{joint, sizes};
use crate::write::units::stress_per_force;

/// A seam as the section has it.
#[derive(Clone, Debug, Serialize)]
pub struct Seam {
    /// Its name; the two ends of one entry have names of their own.
    pub name: String,
    /// The pieces that it joins.
    pub between: [String; 2],
    /// `fillet` or `groove`.
    pub joint: &'static str,
    /// The root of a fillet, the middle of a groove.
    pub at: [f64; 2],
    /// Length of its throat: of a groove, what is fused.
    pub throat: f64,
    /// Legs of a fillet on the first and on the second piece.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub legs: Option<[f64; 2]>,
    /// The gap found at a fillet's root.
    pub gap: f64,
    /// The stress that the throat may be given.
    pub allowable: Option<f64>,
    /// The line load that is added to every flow, force per length along x and y.
    pub direct: [f64; 2],
    /// Length of the parts of an intermittent seam.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub length: Option<f64>,
    /// From the start of one part to the start of the next.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub pitch: Option<f64>,
    /// The action or combination that asks most of it; `null` without any.
    pub governing: Option<String>,
}

/// What a seam has to transfer under an action: forces per length in the units of force and of length.
#[derive(Clone, Debug, Serialize)]
pub struct Demand {
    /// The seam's name.
    pub name: String,
    /// The shear flow from its first piece to its second, per length of the bar.
    pub flow: f64,
    /// Flow and line load together, per length of weld.
    pub resultant: f64,
    /// Length of the throat.
    pub throat: f64,
    /// In the unit of stress.
    pub throat_stress: f64,
    /// The throat stress over the allowable.
    pub utilisation: Option<f64>,
    /// The leg of a fillet, on its first piece, at which that is 1.
    pub leg_needed: Option<f64>,
    /// The leg on its second piece.
    pub second_leg_needed: Option<f64>,
    /// The depth of a groove at which it is 1.
    pub depth_needed: Option<f64>,
}

/// The seams of a section.
#[must_use]
pub fn seams(names: &Names, responses: Option<&Responses>) -> Vec<Seam> {
    let one = |(k, (seam, stated)): (usize, (&Made, &SeamInput))| Seam {
        name: seam.name.clone(),
        between: seam.between.map(|piece| names.piece(piece).to_string()),
        joint: joint(seam),
        at: [z(seam.at.x), z(seam.at.y)],
        throat: seam.throat_length,
        legs: seam.legs,
        gap: z(seam.gap),
        allowable: stated.allowable,
        direct: stated.direct.map(z),
        length: stated.intermittent.map(|i| i.length),
        pitch: stated.intermittent.map(|i| i.pitch),
        governing: responses.and_then(|r| Some(r.list.get(*r.seams.get(k)?)?.name.clone())),
    };
    names.joints().enumerate().map(one).collect()
}

/// The demands of one response.
#[must_use]
pub fn demands(units: &Units, names: &Names, demands: &[Found]) -> Vec<Demand> {
    let one = |(seam, demand): (&Made, &Found)| {
        let (legs, depth) = sizes(demand);
        Demand {
            name: seam.name.clone(),
            flow: z(demand.flow),
            resultant: demand.resultant,
            throat: seam.throat_length,
            throat_stress: demand.stress * stress_per_force(units),
            utilisation: demand.utilisation,
            leg_needed: legs.map(|legs| legs[0]),
            second_leg_needed: legs.map(|legs| legs[1]),
            depth_needed: depth,
        }
    };
    names.seams.iter().zip(demands).map(one).collect()
}
