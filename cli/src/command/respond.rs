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

use crate::interaction::Interaction;
use crate::response::{Envelope, Response, Responses};
use crate::section::{SeamInput, Section, materials_used};
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
    let interaction = Interaction::new(solution);
    let quotable = Quotable::new(solution, &fields, exclusion);
    let used = materials_used(domain);
    let by_material: Vec<(usize, Quotable)> = used
        .iter()
        .filter(|_| used.len() > 1)
        .map(|&material| {
            let keep = |piece: u32| domain.piece_materials.get(piece as usize) == Some(&material);
            (material, quotable.within(solution, &fields, keep))
        })
        .collect();
    let place = |q| solution.get(q).map_or(0.0, |f| f.value);
    let centre = Point::new(place(Quantity::ShearCentreX), place(Quantity::ShearCentreY));
    let stress = stress_per_force(&section.units);
    let flows = SeamFlows::new(solution, domain, &fields.superposition)?;
    let layings: Vec<Laying> = section.seams.iter().map(|s| laying(s, stress)).collect();
    // By piece of the domain, weld metal included; the file's unit of stress into force per length².
    let yields: Vec<Option<f64>> = domain
        .piece_materials
        .iter()
        .map(|&material| Some(section.materials.get(material)?.yield_stress? / stress))
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
            let within = |quotable| extremes(solution, &fields, quotable, &forces, &yields);
            let materials: Vec<(usize, Extremes)> = by_material
                .iter()
                .map(|(material, quotable)| (*material, within(quotable)))
                .collect();
            let extremes = if materials.is_empty() {
                within(&quotable)
            } else {
                let all = envelope(materials.iter().map(|(_, extremes)| extremes));
                Extremes(all.into_iter().map(|(m, _, e)| (m, e)).collect())
            };
            Response {
                load_factor: load_factor_to_yield(&extremes),
                plastic_factor: interaction.as_ref().and_then(|i| i.load_factor(&forces)),
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
                materials,
            }
        })
        .collect();
    let all = envelope(list.iter().map(|r| &r.extremes));
    let materials = by_material
        .iter()
        .enumerate()
        .map(|(k, (material, _))| {
            let own = list.iter().filter_map(|r| r.materials.get(k));
            (*material, envelope(own.map(|(_, extremes)| extremes)))
        })
        .collect();
    let seams = (0..domain.seams.len()).map(|k| hardest(&list, k)).collect();
    Some(Responses {
        list,
        fields,
        envelope: all,
        materials,
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

/// The worst of each measure, and which of the `list` it belongs to; the first of equals.
fn envelope<'a>(list: impl Iterator<Item = &'a Extremes> + Clone) -> Envelope {
    let mut out = Vec::new();
    for &measure in Measure::ALL {
        let mut worst: Option<(usize, &Extreme)> = None;
        for (i, extremes) in list.clone().enumerate() {
            let Some(extreme) = extremes.get(measure) else {
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
