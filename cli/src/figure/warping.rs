//! The figure of the warping function.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;

use super::field::{self, Field};
use super::marks::Mark;
use super::outline;
use super::page::Finished;
use super::style::Style;
use super::surface::Surface;
use crate::section::Units;
use crate::write::digits::superscript;

/// What is less than this times the square of the section's size is rounding.
const NOUGHT: f64 = 1e-8;

/// Draws ω, in length², with the shear centre.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
    surface: &Surface,
    values: &[f64],
    shear_centre: Option<Point>,
    style: Style,
) -> Finished {
    let extent = outline::extent(domain);
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
        nought: Some((
            NOUGHT * extent.width().hypot(extent.height()).powi(2),
            "The section does not warp: ω is zero, to the accuracy of the analysis.",
        )),
        signed: true,
        direction: None,
        excluded: &[],
        mark: shear_centre.map(|p| (Mark::ShearCentre, p)),
        quoted: None,
        guides: &[],
        remark: "",
    };
    field::draw(&field, style)
}
