//! The figure of the warping function.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;

use super::field::{self, Field};
use super::marks::Mark;
use super::page::Finished;
use super::surface::Surface;
use crate::section::Units;
use crate::write::digits::superscript;

/// Draws ω, in length², with the shear centre.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
    surface: &Surface,
    values: &[f64],
    shear_centre: Option<Point>,
    width: f64,
) -> Finished {
    let unit = format!("{}{}", units.length, superscript(2));
    let subtitle = format!(
        "Axial displacement under unit twist, u_z = ω θ′, about the shear centre, zero mean; ω in {unit}."
    );
    let field = Field {
        kind: "Warping ω",
        title,
        subtitle: &subtitle,
        symbol: "ω",
        unit: &unit,
        units,
        domain,
        surface,
        values,
        signed: true,
        direction: None,
        excluded: &[],
        mark: shear_centre.map(|p| (Mark::ShearCentre, p)),
    };
    field::draw(&field, width)
}
