//! Units in print, and how large the declared ones are.

use sectile_solver::figure::Figure;
use sectile_solver::material::Material;
use sectile_solver::quantity::Dimension;

use super::digits::superscript;
use crate::section::{Section, Units};

/// The unit in results files, plain ASCII: `mm4`, `kg/m`, `deg`; empty for a pure number.
#[must_use]
pub fn ascii(dimension: Dimension, units: &Units) -> String {
    match dimension {
        Dimension::Length(0) => String::new(),
        Dimension::Length(1) => units.length.into(),
        Dimension::Length(n) => format!("{}{n}", units.length),
        Dimension::MassPerLength => "kg/m".into(),
        Dimension::Angle => "deg".into(),
        Dimension::ForceLength(0) => units.force.into(),
        Dimension::ForceLength(1) => units.moment.clone(),
        Dimension::ForceLength(n) => format!("{} {}{n}", units.force, units.length),
    }
}

/// The unit in tables and figures: `mm⁴`, `kg/m`, `°`; empty for a pure number.
#[must_use]
pub fn pretty(dimension: Dimension, units: &Units) -> String {
    match dimension {
        Dimension::Length(0) => String::new(),
        Dimension::Length(1) => units.length.into(),
        Dimension::Length(n) => format!("{}{}", units.length, superscript(n)),
        Dimension::MassPerLength => "kg/m".into(),
        Dimension::Angle => "°".into(),
        Dimension::ForceLength(0) => units.force.into(),
        Dimension::ForceLength(1) => units.moment.clone(),
        Dimension::ForceLength(n) => format!("{} {}{}", units.force, units.length, superscript(n)),
    }
}

/// A property as the solver gives it in the unit that it is printed in: moments come in the unit of force
/// times that of length and go out in that of moments.
#[must_use]
pub fn in_print(dimension: Dimension, figure: &Figure, units: &Units) -> Figure {
    match dimension {
        Dimension::ForceLength(1) => figure.scaled(moment_per_force(units)),
        _ => *figure,
    }
}

/// The unit of bimoments, that of moments times that of length, as section files state them: `kN m·mm`.
#[must_use]
pub fn unit_of_bimoment(units: &Units) -> String {
    format!("{}·{}", units.moment, units.length)
}

/// Pounds of force in newtons: the pound is 0.45359237 kg and standard gravity 9.80665 m/s², both by
/// definition.
const POUND_FORCE: f64 = 0.453_592_37 * 9.806_65;
/// The inch by definition.
const INCH: f64 = 0.0254;

/// Newtons in one unit of force.
#[must_use]
pub fn newtons(force: &str) -> f64 {
    match force {
        "kN" => 1e3,
        "MN" => 1e6,
        "lbf" => POUND_FORCE,
        "kip" => 1e3 * POUND_FORCE,
        _ => 1.0,
    }
}

/// Pascals in one unit of stress.
#[must_use]
pub fn pascals(stress: &str) -> f64 {
    match stress {
        "kPa" => 1e3,
        "MPa" => 1e6,
        "GPa" => 1e9,
        "psi" => POUND_FORCE / (INCH * INCH),
        "ksi" => 1e3 * POUND_FORCE / (INCH * INCH),
        _ => 1.0,
    }
}

/// Newton metres in one unit of moment, `force length` with a space, a dot or a middle dot between.
#[must_use]
pub fn newton_metres(moment: &str) -> f64 {
    moment
        .split([' ', '·', '.', '*'])
        .filter(|part| !part.is_empty())
        .map(|part| match part {
            "mm" => 1e-3,
            "cm" => 1e-2,
            "in" => INCH,
            "ft" => 12.0 * INCH,
            force => newtons(force),
        })
        .product()
}

/// What a stress per unit of force, in length⁻², is in the declared units of stress per force.
#[must_use]
pub fn stress_per_force(units: &Units) -> f64 {
    newtons(units.force) / (units.metres().powi(2) * pascals(units.stress))
}

/// What a stress per unit of moment, in length⁻³, is in the declared units of stress per moment.
#[must_use]
pub fn stress_per_moment(units: &Units) -> f64 {
    newton_metres(&units.moment) / (units.metres().powi(3) * pascals(units.stress))
}

/// The section's materials with their stresses in the file's force per its length²: the units in which
/// forces and stiffnesses come out consistent.
#[must_use]
pub fn consistent_materials(section: &Section) -> Vec<Material> {
    let stress = stress_per_force(&section.units);
    section
        .materials
        .iter()
        .map(|m| Material {
            young: m.young / stress,
            shear: m.shear / stress,
            yield_stress: m.yield_stress.map(|y| y / stress),
            ..m.clone()
        })
        .collect()
}

/// A moment of one unit of force times one unit of length, in the declared units of moment.
#[must_use]
pub fn moment_per_force(units: &Units) -> f64 {
    newtons(units.force) * units.metres() / newton_metres(&units.moment)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn units(
        length: &'static str,
        force: &'static str,
        moment: &str,
        stress: &'static str,
    ) -> Units {
        Units {
            length,
            force,
            moment: moment.into(),
            stress,
        }
    }

    #[test]
    fn units_of_properties() {
        let u = units("mm", "kN", "kN m", "MPa");
        assert_eq!(ascii(Dimension::Length(4), &u), "mm4");
        assert_eq!(pretty(Dimension::Length(6), &u), "mm⁶");
        assert_eq!(pretty(Dimension::Length(1), &u), "mm");
        assert_eq!(ascii(Dimension::Length(0), &u), "");
        assert_eq!(pretty(Dimension::Angle, &u), "°");
        assert_eq!(pretty(Dimension::ForceLength(4), &u), "kN mm⁴");
        // 2000 kN mm are 2 kN m; stiffnesses stay in kN mm².
        let two = Figure::exact(2000.0, 2000.0);
        let moment = Dimension::ForceLength(1);
        assert_eq!(ascii(moment, &u), "kN m");
        assert!((in_print(moment, &two, &u).value - 2.0).abs() < 1e-15);
        assert_eq!(in_print(Dimension::ForceLength(2), &two, &u), two);
    }

    #[test]
    fn unit_loads_in_declared_units() {
        // 1 kN on 1 mm² is 1000 MPa; 1 kN m over 1 mm³ is 10⁶ MPa.
        let u = units("mm", "kN", "kN m", "MPa");
        assert!((stress_per_force(&u) / 1e3 - 1.0).abs() < 1e-14);
        assert!((stress_per_moment(&u) / 1e6 - 1.0).abs() < 1e-14);
        // 1 kN · mm is 10⁻³ kN m.
        assert!((moment_per_force(&u) / 1e-3 - 1.0).abs() < 1e-14);
        // 1 kip on 1 in² is 1 ksi; 1 kip ft over 1 in³ is 12 ksi.
        let u = units("in", "kip", "kip ft", "ksi");
        assert!((stress_per_force(&u) - 1.0).abs() < 1e-14);
        assert!((stress_per_moment(&u) - 12.0).abs() < 1e-13);
        // 1 psi is 6894.757 Pa (from memory, seven digits).
        assert!((pascals("psi") - 6894.757).abs() < 1e-3);
    }
}
