//! From a solved section to the answers to its actions and combinations.

use rayon::prelude::*;
use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_solver::quantity::Quantity;
use sectile_solver::seam::demand::{Laying, demand};
use sectile_solver::seam::flow::SeamFlows;
use sectile_solver::solution::Solution;
use sectile_solver::stress::cut::cut;
use sectile_solver::stress::extreme::{
    Extreme, Extremes, Quotable, extremes, load_factor_to_yield,
};
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::probe::at_point;

use crate::response::{Response, Responses};
use crate::section::{SeamInput, Section};
use crate::write::units::stress_per_force;

/// Points along a triangle's side at which extremes are first sought.
const DIVISIONS: usize = 8;

/// The answers; `None` without actions, or for a section in separate parts, which has no shear stress.
///
/// `exclusion`: distance from sharp re-entrant corners over the wall's thickness within which stresses
/// are not quoted.
#[must_use]
pub fn respond(
    section: &Section,
    domain: &Domain,
    solution: &Solution,
    exclusion: f64,
) -> Option<Responses> {
    if section.actions.is_empty() {
        return None;
    }
    let fields = UnitFields::new(solution, DIVISIONS)?;
    let quotable = Quotable::new(solution, &fields, exclusion);
    let place = |q| solution.get(q).map_or(0.0, |f| f.value);
    let centre = Point::new(place(Quantity::ShearCentreX), place(Quantity::ShearCentreY));
    let stress = stress_per_force(&section.units);
    let flows = SeamFlows::new(solution, domain, &fields.superposition)?;
    let layings: Vec<Laying> = section.seams.iter().map(|s| laying(s, stress)).collect();
    let yields: Vec<Option<f64>> = section
        .pieces
        .iter()
        .map(|p| {
            let yield_stress = section.materials.get(p.material)?.yield_stress?;
            // The file's unit of stress into force per length².
            Some(yield_stress / stress)
        })
        .collect();

    // The torque of each action's line of action comes first: combinations add it up.
    let offsets: Vec<f64> = section
        .actions
        .iter()
        .map(|a| a.at.map_or(0.0, |at| a.forces.torque_of_offset(at, centre)))
        .collect();
    let with_offset = |i: usize| {
        let forces = section.actions[i].forces;
        SectionForces {
            t: forces.t + offsets[i],
            ..forces
        }
    };
    struct Case {
        name: String,
        combination: bool,
        forces: SectionForces,
        at: Option<Point>,
        offset: f64,
    }
    let mut cases: Vec<Case> = (0..section.actions.len())
        .map(|i| Case {
            name: section.actions[i].name.clone(),
            combination: false,
            forces: with_offset(i),
            at: section.actions[i].at,
            offset: offsets[i],
        })
        .collect();
    for c in &section.combinations {
        let mut forces = SectionForces::default();
        let mut offset = 0.0;
        for &(i, factor) in &c.factors {
            forces = forces + with_offset(i) * factor;
            offset += offsets[i] * factor;
        }
        cases.push(Case {
            name: c.name.clone(),
            combination: true,
            forces,
            at: None,
            offset,
        });
    }

    let list: Vec<Response> = cases
        .into_par_iter()
        .map(|case| {
            let forces = case.forces;
            let extremes = extremes(solution, &fields, &quotable, &forces, &yields);
            Response {
                load_factor: load_factor_to_yield(&extremes),
                energy_error: fields.energy_error(&forces),
                torque: forces.t + forces.tw,
                offset_torque: case.offset,
                probes: section
                    .probes
                    .iter()
                    .enumerate()
                    .map(|(k, p)| (k, at_point(solution, &fields, &forces, p.at)))
                    .collect(),
                cuts: section
                    .cuts
                    .iter()
                    .enumerate()
                    .filter_map(|(k, c)| Some((k, cut(solution, &fields, &forces, c.from, c.to)?)))
                    .collect(),
                seams: domain
                    .seams
                    .iter()
                    .enumerate()
                    .filter_map(|(k, seam)| {
                        let laying = layings.get(seam.request)?;
                        Some(demand(seam, laying, flows.under(k, &forces)))
                    })
                    .collect(),
                name: case.name,
                combination: case.combination,
                at: case.at,
                forces,
                extremes,
            }
        })
        .collect();
    let envelope = envelope(&list);
    let seams = (0..domain.seams.len()).map(|k| hardest(&list, k)).collect();
    Some(Responses {
        list,
        fields,
        envelope,
        seams,
        exclusion,
    })
}

/// What the file states of a seam, in consistent units; `stress` is a force over a length² in the file's
/// unit of stress.
fn laying(seam: &SeamInput, stress: f64) -> Laying {
    Laying {
        direct: seam.direct,
        allowable: seam.allowable.map(|allowable| allowable / stress),
        intermittent: seam.intermittent.map(|i| [i.length, i.pitch]),
    }
}

/// The response that asks most of a seam; the first of equals.
fn hardest(list: &[Response], seam: usize) -> usize {
    let asked = |i: usize| list[i].seams.get(seam).map_or(0.0, |d| d.resultant);
    (1..list.len()).fold(
        0,
        |worst, i| if asked(i) > asked(worst) { i } else { worst },
    )
}

/// The worst of each measure and the response that it belongs to; the first of equals.
fn envelope(list: &[Response]) -> Vec<(Measure, usize, Extreme)> {
    let mut out = Vec::new();
    for &measure in Measure::ALL {
        let mut worst: Option<(usize, &Extreme)> = None;
        for (i, response) in list.iter().enumerate() {
            let Extremes(own) = &response.extremes;
            let Some((_, extreme)) = own.iter().find(|(m, _)| *m == measure) else {
                continue;
            };
            let worse = worst.is_none_or(|(_, w)| {
                if measure.is_least() {
                    extreme.value < w.value
                } else {
                    extreme.value > w.value
                }
            });
            if worse {
                worst = Some((i, extreme));
            }
        }
        if let Some((i, extreme)) = worst {
            out.push((measure, i, *extreme));
        }
    }
    out
}
