//! Figures for a report: SVG at a stated print width, millimetres, black on white, legible in grey.
//!
//! The drawing code takes plain values (outlines, points, triangles, numbers); only [`all`] knows the
//! solver. Same input, same text.

pub mod arrows;
pub mod bands;
pub mod colour;
pub mod field;
pub mod legend;
pub mod levels;
pub mod marks;
pub mod mesh;
pub mod outline;
pub mod page;
pub mod path;
pub mod place;
pub mod rect;
pub mod section;
pub mod stress;
pub mod surface;
pub mod text;
pub mod view;
pub mod warping;

#[cfg(test)]
mod samples;
#[cfg(test)]
mod tests;

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_solver::quantity::Quantity;
use sectile_solver::sample::{self, Lattice, UnitForce};
use sectile_solver::solution::Solution;

use crate::section::Units;
use surface::Sharing;

/// Print width where none is asked for, mm.
pub const PRINT_WIDTH: f64 = 160.0;
/// The narrowest page, mm.
pub const NARROWEST: f64 = 80.0;
/// No file is larger than this, bytes, unless even the coarsest drawing is.
pub const SIZE_LIMIT: usize = 390_000;

/// Small triangles that a field is drawn with, about.
const CELLS: f64 = 60_000.0;

/// All figures of a solved section: file name and SVG text. Fields that the solution does not have
/// (torsion of separate parts) are left out. `width_mm` is raised to [`NARROWEST`].
#[must_use]
pub fn all(
    title: &str,
    units: &Units,
    domain: &Domain,
    solution: &Solution,
    width_mm: f64,
) -> Vec<(String, String)> {
    let width = if width_mm.is_finite() {
        width_mm.max(NARROWEST)
    } else {
        PRINT_WIDTH
    };
    let mut files = vec![
        (
            "section.svg".to_string(),
            section::draw(title, units, domain, &solution.properties, width).svg,
        ),
        (
            "mesh.svg".to_string(),
            mesh::draw(
                title,
                units,
                domain,
                &solution.mesh,
                &mesh_size(solution),
                width,
            )
            .svg,
        ),
    ];
    let lattice = Lattice::new(divisions(solution));
    let positions = sample::positions(solution, &lattice);
    if positions.is_empty() {
        return files;
    }
    let sharing = Sharing::new(&solution.mesh, &lattice);
    let surface = sharing.surface(&positions);
    let centre = solution
        .get(Quantity::ShearCentreX)
        .zip(solution.get(Quantity::ShearCentreY))
        .map(|(x, y)| Point::new(x.value, y.value));
    let warping = sample::warping(solution, &lattice);
    if warping.len() == positions.len() {
        let values = sharing.mean(&warping);
        let figure = warping::draw(title, units, domain, &surface, &values, centre, width);
        files.push(("warping.svg".to_string(), figure.svg));
    }
    let excluded = excluded(solution);
    for force in [UnitForce::Torque, UnitForce::ShearX, UnitForce::ShearY] {
        let stress = sample::shear_stress(solution, force, &lattice);
        if stress.len() != positions.len() {
            continue;
        }
        let mean = sharing.mean_vectors(&stress);
        let figure = stress::draw(
            force, title, units, domain, &surface, &mean, &excluded, centre, width,
        );
        files.push((stress::file_name(force).to_string(), figure.svg));
    }
    files
}

/// Divisions of a triangle's side: the more, the fewer triangles there are.
fn divisions(solution: &Solution) -> usize {
    let triangles = solution.mesh.triangles.len().max(1) as f64;
    let most = 4 * solution.order.max(2);
    ((CELLS / triangles).sqrt().round() as usize).clamp(2, most)
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

/// Circles about the sharp re-entrant corners that the solution names: a quarter of the mean wall
/// thickness 2A/u in radius, rounded down to 1, 2 or 5.
fn excluded(solution: &Solution) -> Vec<Circle> {
    let value = |q: Quantity| solution.get(q).map_or(0.0, |f| f.value);
    let edge = value(Quantity::Perimeter) + value(Quantity::HolePerimeter);
    let thickness = 2.0 * value(Quantity::Area) / edge;
    if !thickness.is_finite() || thickness <= 0.0 {
        return Vec::new();
    }
    let radius = marks::round_length(1.0, 0.25 * thickness);
    solution
        .notes
        .iter()
        .filter(|note| note.kind == "sharp-corner")
        .filter_map(|note| note.at)
        .map(|centre| Circle { centre, radius })
        .collect()
}
