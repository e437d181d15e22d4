//! Figures for a report: SVG at a stated print width, millimetres, black on white, legible in grey.
//!
//! The drawing code takes plain values (outlines, points, triangles, numbers); only [`all`] knows the
//! solver. Same input, same text.

pub mod arrows;
pub mod bands;
pub mod centres;
pub mod chart;
pub mod colour;
pub mod contour;
pub mod cut;
pub mod dimension;
pub mod extreme;
pub mod field;
pub mod guide;
pub mod interaction;
pub mod joints;
pub mod label;
pub mod legend;
pub mod levels;
pub mod marks;
pub mod mesh;
pub mod outline;
pub mod page;
pub mod path;
pub mod place;
pub mod png;
pub mod rect;
pub mod response;
pub mod section;
pub mod stress;
pub mod style;
pub mod surface;
pub mod text;
pub mod view;
pub mod warping;

#[cfg(test)]
pub(crate) mod samples;
#[cfg(test)]
mod tests;

use page::Finished;
use rayon::prelude::*;
use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_solver::material::Material;
use sectile_solver::quantity::Quantity;
use sectile_solver::sample::{self, Lattice, UnitForce};
use sectile_solver::solution::Solution;
use sectile_solver::solution::exclusion_radius;

use crate::response::{Names, Responses};
use crate::section::Units;
use style::Style;
use surface::Sharing;

/// Print width where none is asked for, mm.
pub const PRINT_WIDTH: f64 = 160.0;
/// The narrowest page, mm.
pub const NARROWEST: f64 = 60.0;
/// No file is larger than this, bytes, unless even the coarsest drawing is.
pub const SIZE_LIMIT: usize = 390_000;

/// Small triangles that a field is drawn with, about.
const CELLS: f64 = 20_000.0;

/// The names of all figures.
pub const FILES: &[&str] = &[
    "section.svg",
    "mesh.svg",
    "warping.svg",
    "shear-torque.svg",
    "shear-vx.svg",
    "shear-vy.svg",
];

/// All figures of a solved section: file name and SVG text. Fields that the solution does not have
/// (those of a section in separate parts) are left out. A width below [`NARROWEST`] is raised to it.
#[must_use]
pub fn all(
    title: &str,
    units: &Units,
    domain: &Domain,
    materials: &[Material],
    solution: &Solution,
    style: Style,
) -> Vec<(String, String)> {
    finished(title, units, domain, materials, solution, style)
        .into_iter()
        .map(|(name, figure)| (name.to_string(), figure.svg))
        .collect()
}

/// The figures of responses to actions: file name and SVG text.
///
/// Of each chosen response (see [`response::chosen`]) von Mises' stress, the normal stress and the
/// resultant shear stress, `stress-<action>-von-mises.svg`, `-sigma.svg` and `-tau.svg`, left out
/// where there is none; and every cut, `cut-<cut>-<action>.svg`. With more than one response also the
/// envelope, `stress-envelope-von-mises.svg`, over all of them.
#[must_use]
pub fn responses(
    title: &str,
    units: &Units,
    domain: &Domain,
    solution: &Solution,
    names: &Names,
    responses: &Responses,
    style: Style,
) -> Vec<(String, String)> {
    response::all(
        title,
        units,
        domain,
        solution,
        names,
        responses,
        style.printable(),
    )
    .into_iter()
    .map(|(name, figure)| (name, figure.svg))
    .collect()
}

fn finished(
    title: &str,
    units: &Units,
    domain: &Domain,
    materials: &[Material],
    solution: &Solution,
    style: Style,
) -> Vec<(&'static str, Finished)> {
    let materials: Vec<&str> = materials.iter().map(|m| m.name.as_str()).collect();
    let style = style.printable();
    let width = style.width_mm;
    let lattice = Lattice::new(divisions(solution));
    let positions = sample::positions(solution, &lattice);
    let sharing = Sharing::new(&solution.mesh, &lattice);
    let surface = sharing.surface(&positions);
    let centre = solution
        .get(Quantity::ShearCentreX)
        .zip(solution.get(Quantity::ShearCentreY))
        .map(|(x, y)| Point::new(x.value, y.value));
    let excluded: Vec<Circle> = solution
        .corners
        .iter()
        .map(|corner| Circle {
            centre: corner.at,
            radius: exclusion_radius(corner),
        })
        .collect();
    let known = |count: usize| count > 0 && count == positions.len();
    let stress = |force: UnitForce| {
        let stress = sample::shear_stress(solution, force, &lattice);
        known(stress.len()).then(|| {
            let mean = sharing.mean_vectors(&stress);
            stress::draw(
                force, title, units, domain, &surface, &mean, &excluded, centre, style,
            )
        })
    };
    let draw = |name: &str| match name {
        "section.svg" => Some(section::draw(
            title,
            units,
            domain,
            &materials,
            &solution.properties,
            width,
        )),
        "mesh.svg" => {
            let size = mesh_size(solution);
            Some(mesh::draw(
                title,
                units,
                domain,
                &solution.mesh,
                &size,
                width,
            ))
        }
        "warping.svg" => {
            let warping = sample::warping(solution, &lattice);
            known(warping.len()).then(|| {
                let values = sharing.mean(&warping);
                warping::draw(title, units, domain, &surface, &values, centre, style)
            })
        }
        "shear-torque.svg" => stress(UnitForce::Torque),
        "shear-vx.svg" => stress(UnitForce::ShearX),
        _ => stress(UnitForce::ShearY),
    };
    // Each figure by itself, collected in the order of the names.
    FILES
        .par_iter()
        .map(|name| draw(name).map(|figure| (*name, figure)))
        .collect::<Vec<_>>()
        .into_iter()
        .flatten()
        .collect()
}

/// Divisions of a triangle's side: the more, the fewer triangles there are.
fn divisions(solution: &Solution) -> usize {
    let triangles = solution.mesh.triangles.len().max(1) as f64;
    ((CELLS / triangles).sqrt().round() as usize).clamp(2, 40)
}

fn mesh_size(solution: &Solution) -> String {
    let unknowns = solution.levels.last().map_or(0, |l| l.unknowns);
    let levels = solution.levels.len();
    format!(
        "{} triangles of order {}, {unknowns} unknowns, {levels} {} of refinement.",
        solution.mesh.triangles.len(),
        solution.order,
        if levels == 1 { "level" } else { "levels" },
    )
}
