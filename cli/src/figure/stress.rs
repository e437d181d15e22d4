//! The figures of shear stress under a unit torque or a unit shear force, in the file's own units.

use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_mesh::{Point, Vector};
use sectile_solver::sample::UnitForce;

use super::field::{self, Field};
use super::marks::Mark;
use super::page::Finished;
use super::style::Style;
use super::surface::Surface;
use crate::section::Units;
use crate::write::units::{stress_per_force, stress_per_moment};

/// Draws |τ|, in bands with arrows along τ. `stress` is per length³ for a torque, per length² for a force.
#[must_use]
pub fn draw(
    force: UnitForce,
    title: &str,
    units: &Units,
    domain: &Domain,
    surface: &Surface,
    stress: &[Vector],
    excluded: &[Circle],
    shear_centre: Option<Point>,
    style: Style,
) -> Finished {
    let (symbol, action, factor) = match force {
        UnitForce::Torque => (
            "T",
            format!("T = 1 {}", units.moment),
            stress_per_moment(units),
        ),
        UnitForce::ShearX => (
            "V_x",
            format!("V_x = 1 {} along x through the shear centre", units.force),
            stress_per_force(units),
        ),
        UnitForce::ShearY => (
            "V_y",
            format!("V_y = 1 {} along y through the shear centre", units.force),
            stress_per_force(units),
        ),
    };
    let values: Vec<f64> = stress.iter().map(|t| factor * t.length()).collect();
    let vectors: Vec<Vector> = stress.iter().map(|&t| t * factor).collect();
    let subtitle = format!(
        "Resultant |τ| in {} under {action}; proportional to {symbol}.",
        units.stress
    );
    let kind = match force {
        UnitForce::Torque => "Shear stress of a unit torque",
        UnitForce::ShearX => "Shear stress of a unit force along x",
        UnitForce::ShearY => "Shear stress of a unit force along y",
    };
    let field = Field {
        kind,
        title,
        subtitle: &subtitle,
        symbol: "|τ|",
        unit: units.stress,
        units,
        domain,
        surface,
        values: &values,
        nought: None,
        signed: false,
        direction: Some(&vectors),
        excluded,
        mark: shear_centre.map(|p| (Mark::ShearCentre, p)),
        quoted: None,
        guides: &[],
        remark: "",
    };
    field::draw(&field, style)
}
