//! `interaction.csv`: the curves of the fully plastic N, M_x and M_y.

use sectile_solver::plastic::interaction::PlasticState;

use super::actions::Table;
use super::json::number;
use super::units::moment_per_force;
use crate::interaction::{Interaction, LEVELS};
use crate::section::Units;

/// The columns of `interaction.csv`.
pub const INTERACTION: [&str; 13] = [
    "curve",
    "neutral_axis_angle",
    "neutral_axis_offset",
    "N",
    "Mx",
    "My",
    "N_ratio",
    "Mx_ratio",
    "My_ratio",
    "unit_of_length",
    "unit_of_force",
    "unit_of_moment",
    "remark",
];

/// What the reader must know of these curves.
pub const LIMITS: &str = "Rigid and perfectly plastic, the same yield stress in tension and \
    compression; no buckling, no strain hardening, no shear force, torsion or bimoment. -N with -Mx and \
    -My is reached whenever N with Mx and My is.";

/// The caution of these curves, which are not of linear-elastic analysis.
pub const PLASTIC_CAUTION: &str =
    "Plastic section analysis: check by local codes and licensed practice.";

/// One row a point: curve `N-Mx` (neutral axes parallel to x), `N-My` (parallel to y) or `Mx-My at` a
/// multiple of N_p; angle of the neutral axis from x in degrees, tension to its left, and its distance from
/// the centroid, positive towards its left; forces, and each over its fully plastic value. What is to be known of them and the caution are the last rows.
#[must_use]
pub fn csv(units: &Units, interaction: &Interaction) -> String {
    let mut table = Table::new(&INTERACTION);
    let moment = moment_per_force(units);
    let [mx, my] = interaction.moments;
    let mut add = |curve: &str, p: &PlasticState| {
        table.row([
            curve.into(),
            number(p.direction.to_degrees() + 0.0),
            number(p.offset + 0.0),
            number(p.n),
            number(p.mx * moment),
            number(p.my * moment),
            number(p.n / interaction.n),
            number(p.mx / mx),
            number(p.my / my),
            units.length.into(),
            units.force.into(),
            units.moment.clone(),
            String::new(),
        ]);
    };
    for p in &interaction.about_x() {
        add("N-Mx", p);
    }
    for p in &interaction.about_y() {
        add("N-My", p);
    }
    for level in LEVELS {
        for p in &interaction.at_level(level) {
            add(&format!("Mx-My at {level} Np"), p);
        }
    }
    for (name, text) in [("limits", LIMITS), ("caution", PLASTIC_CAUTION)] {
        let mut row: [String; 13] = Default::default();
        row[0] = name.into();
        row[12] = text.into();
        table.row(row);
    }
    table.text()
}
