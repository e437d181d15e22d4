//! The `materials` of the results object and of its actions, where there are several.

use serde::Serialize;

use super::action::{Extremes, envelope_of, extremes_of};
use crate::response::{Names, Response, Responses};
use crate::section::Units;

/// A material of a section of several.
#[derive(Clone, Debug, Serialize)]
pub struct Material {
    /// Its name.
    pub name: String,
    /// Young's modulus, in the unit of stress.
    pub young: f64,
    /// Poisson's ratio.
    pub poisson: f64,
    /// Shear modulus.
    pub shear: f64,
    /// Yield stress, where it has one.
    pub yield_stress: Option<f64>,
    /// The extremes in it over all actions, with the one that governs.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub envelope: Option<Extremes>,
}

/// The extremes in a material under an action.
#[derive(Clone, Debug, Serialize)]
pub struct Within {
    /// The material.
    pub material: String,
    /// By measure.
    pub extremes: Extremes,
}

/// The materials `used`, by index.
#[must_use]
pub fn materials(
    units: &Units,
    names: &Names,
    used: &[usize],
    responses: Option<&Responses>,
) -> Vec<Material> {
    let one = |&index: &usize| {
        let material = names.materials.get(index)?;
        let envelope = responses.and_then(|responses| {
            let (_, own) = responses.materials.iter().find(|(m, _)| *m == index)?;
            Some(envelope_of(units, names, responses, own))
        });
        Some(Material {
            name: material.name.clone(),
            young: material.young,
            poisson: material.poisson,
            shear: material.shear,
            yield_stress: material.yield_stress,
            envelope,
        })
    };
    used.iter().filter_map(one).collect()
}

/// The extremes in each material under one response.
#[must_use]
pub fn within(units: &Units, names: &Names, response: &Response) -> Vec<Within> {
    let own = response.materials.iter();
    own.map(|(material, extremes)| Within {
        material: names.material(*material).into(),
        extremes: extremes_of(units, names, extremes),
    })
    .collect()
}
