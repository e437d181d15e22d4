//! The `actions` and the `envelope` of the results object.

use serde::Serialize;
use serde::ser::{SerializeMap, Serializer};

use sectile_solver::stress::extreme::{Extreme as Found, Extremes as FoundExtremes};
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::state::Stress;

use super::material::{Within, within};
use super::no_minus_zero as z;
use super::seam::{Demand, demands};
use crate::response::{Envelope, Names, Response, Responses};
use crate::section::Units;
use crate::write::actions::scaled;
use crate::write::cause;
use crate::write::units::{moment_per_force, stress_per_force};

/// An action or a combination with what it causes.
#[derive(Clone, Debug, Serialize)]
pub struct Action {
    /// Its name.
    pub name: String,
    /// Whether it combines actions.
    pub combination: bool,
    /// Its section forces.
    pub forces: Forces,
    /// The line of action of its shear forces, where one is given.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub at: Option<[f64; 2]>,
    /// Torque about the shear centre, in the unit of moment.
    pub torque: f64,
    /// What the line of action added to it.
    pub offset_torque: f64,
    /// First yield is reached at this multiple of the action; `null` without a yield stress.
    pub load_factor_to_yield: Option<f64>,
    /// N, M_x and M_y make the section fully plastic at this multiple, shear, torsion and bimoment left
    /// out; `null` without a yield stress of every piece or without N, M_x and M_y.
    pub plastic_load_factor: Option<f64>,
    /// Relative error in energy of the shear stress, guaranteed.
    pub energy_error: f64,
    /// The measure that governs: utilisation where there is a yield stress, else von Mises.
    pub governing: Option<&'static str>,
    /// By measure.
    pub extremes: Extremes,
    /// Stresses at the probes, one entry for each piece that touches the point.
    pub probes: Vec<Probe>,
    /// What crosses the cuts.
    pub cuts: Vec<Cut>,
    /// What the seams have to transfer.
    pub seams: Vec<Demand>,
    /// The extremes in each material by itself, where there are several.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub materials: Vec<Within>,
}

/// Section forces in the units in which a section file states them: N, V in that of force; M, T, Tw in
/// that of moment; B in that of moment times that of length.
#[derive(Clone, Debug, Serialize)]
#[serde(rename_all = "PascalCase")]
#[allow(missing_docs)]
pub struct Forces {
    pub n: f64,
    pub vx: f64,
    pub vy: f64,
    pub mx: f64,
    pub my: f64,
    /// With the torque that the line of action adds.
    pub t: f64,
    pub b: f64,
    pub tw: f64,
}

/// Extremes by measure; a map in the file, a list here so that reading order is kept.
#[derive(Clone, Debug)]
pub struct Extremes(pub Vec<(&'static str, Extreme)>);

impl Serialize for Extremes {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for (key, extreme) in &self.0 {
            map.serialize_entry(key, extreme)?;
        }
        map.end()
    }
}

/// An extreme that may be quoted.
#[derive(Clone, Debug, Serialize)]
pub struct Extreme {
    /// In the unit of stress; a utilisation is a pure number.
    pub value: f64,
    /// Where.
    pub at: [f64; 2],
    /// In which piece.
    pub piece: String,
    /// The part of the action that causes most of it; `null` where there is no stress.
    pub mainly_from: Option<&'static str>,
    /// Its share; above 1 where other parts relieve.
    pub share: Option<f64>,
    /// In the envelope, the action or combination that governs.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub action: Option<String>,
}

/// The stress at a probe.
#[derive(Clone, Debug, Serialize)]
#[allow(missing_docs)]
pub struct Probe {
    pub name: String,
    pub at: [f64; 2],
    pub piece: String,
    pub sigma: f64,
    pub tau_x: f64,
    pub tau_y: f64,
    pub tau: f64,
    pub von_mises: f64,
    pub tresca: f64,
    pub principal_1: f64,
    pub principal_3: f64,
}

/// What crosses a cut.
#[derive(Clone, Debug, Serialize)]
pub struct Cut {
    /// Its name.
    pub name: String,
    /// ∫τ·n ds, force per length, positive to the right of the cut's direction.
    pub shear_flow: f64,
    /// ∫σ ds, force per length, tension positive.
    pub normal_force: f64,
    /// Length inside the material.
    pub material_length: f64,
}

/// Where extremes are not quoted.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Exclusion {
    /// Radius of the circles about sharp re-entrant corners over the wall there.
    pub share_of_wall: f64,
    /// How many corners there are.
    pub corners: usize,
}

/// The actions in the order of the responses.
#[must_use]
pub fn actions(units: &Units, names: &Names, responses: &Responses) -> Vec<Action> {
    let list = responses.list.iter();
    list.map(|r| action(units, names, r)).collect()
}

/// The worst of each measure over all actions, with the action.
#[must_use]
pub fn envelope(units: &Units, names: &Names, responses: &Responses) -> Extremes {
    envelope_of(units, names, responses, &responses.envelope)
}

/// An envelope with the actions that govern.
pub(super) fn envelope_of(
    units: &Units,
    names: &Names,
    responses: &Responses,
    envelope: &Envelope,
) -> Extremes {
    let entries = envelope.iter().map(|(measure, index, found)| {
        let mut entry = extreme(units, names, *measure, found);
        entry.action = responses.list.get(*index).map(|r| r.name.clone());
        (measure.key(), entry)
    });
    Extremes(entries.collect())
}

fn action(units: &Units, names: &Names, response: &Response) -> Action {
    let moment = moment_per_force(units);
    let governing = super::super::actions::governing(response);
    Action {
        name: response.name.clone(),
        combination: response.combination,
        forces: forces(units, &response.forces),
        at: response.at.map(|p| [z(p.x), z(p.y)]),
        torque: z(response.torque * moment),
        offset_torque: z(response.offset_torque * moment),
        load_factor_to_yield: response.load_factor,
        plastic_load_factor: response.plastic_factor,
        energy_error: response.energy_error,
        governing: governing.map(|(measure, _)| measure.key()),
        extremes: extremes_of(units, names, &response.extremes),
        probes: probes(units, names, response),
        cuts: response
            .cuts
            .iter()
            .map(|(index, cut)| Cut {
                name: names
                    .cuts
                    .get(*index)
                    .map_or(String::new(), |c| c.name.clone()),
                shear_flow: z(cut.shear_flow),
                normal_force: z(cut.normal_force),
                material_length: cut.material,
            })
            .collect(),
        seams: demands(units, names, &response.seams),
        materials: within(units, names, response),
    }
}

fn forces(units: &Units, f: &SectionForces) -> Forces {
    let moment = moment_per_force(units);
    Forces {
        n: z(f.n),
        vx: z(f.vx),
        vy: z(f.vy),
        mx: z(f.mx * moment),
        my: z(f.my * moment),
        t: z(f.t * moment),
        b: z(f.b * moment),
        tw: z(f.tw * moment),
    }
}

/// Extremes by measure.
pub(super) fn extremes_of(units: &Units, names: &Names, extremes: &FoundExtremes) -> Extremes {
    let list = extremes.0.iter();
    Extremes(
        list.map(|(m, e)| (m.key(), extreme(units, names, *m, e)))
            .collect(),
    )
}

fn extreme(units: &Units, names: &Names, measure: Measure, found: &Found) -> Extreme {
    let factor = match measure {
        Measure::Utilisation => 1.0,
        _ => stress_per_force(units),
    };
    let cause = cause::main(measure, found);
    Extreme {
        value: z(found.value * factor),
        at: [z(found.at.x), z(found.at.y)],
        piece: names.piece(found.piece).into(),
        mainly_from: cause.map(|c| c.part),
        share: cause.map(|c| c.share),
        action: None,
    }
}

fn probes(units: &Units, names: &Names, response: &Response) -> Vec<Probe> {
    let factor = stress_per_force(units);
    let mut out = Vec::new();
    for (index, stresses) in &response.probes {
        let Some(probe) = names.probes.get(*index) else {
            continue;
        };
        for at in stresses {
            let s: Stress = scaled(&at.stress, factor);
            let [first, third] = s.principal();
            out.push(Probe {
                name: probe.name.clone(),
                at: [z(probe.at.x), z(probe.at.y)],
                piece: names.piece(at.piece).into(),
                sigma: z(s.sigma),
                tau_x: z(s.tau.x),
                tau_y: z(s.tau.y),
                tau: s.shear(),
                von_mises: s.von_mises(),
                tresca: s.tresca(),
                principal_1: z(first),
                principal_3: z(third),
            });
        }
    }
    out
}
