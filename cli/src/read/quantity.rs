//! Quantities in texts: a number, a fraction or a mixed number, and a unit.
//!
//! Factors are quotients of exact numbers, so that `"1 in"` in a file in mm is the nearest number to
//! 25.4 and a text in the file's own unit is the number it shows. Inch, foot and pound by the
//! international definitions of 1959 (25.4 mm, 304.8 mm, 0.45359237 kg), pound-force with the standard
//! acceleration of 9.80665 m/s².

use super::near::nearest;

/// What a quantity measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// Length.
    Length,
    /// Force.
    Force,
    /// Force times length.
    Moment,
    /// Force times length squared.
    Bimoment,
    /// Force over area: stress, and the moduli of a material.
    Stress,
    /// Force over length: a line load.
    LineLoad,
    /// Mass over volume.
    Density,
    /// Angle.
    Angle,
    /// Rise over run, in per cent.
    Slope,
}

/// A unit: `numerator / denominator` of the base unit of its dimension (0.1 mm, N, N·0.1 mm,
/// N·(0.1 mm)², Pa, N/(0.1 mm), kg/m³, degree, per cent).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    /// What it measures.
    pub dimension: Dimension,
    numerator: f64,
    denominator: f64,
}

/// Units of length, as section files may declare them.
pub const LENGTHS: &[&str] = &["mm", "cm", "m", "in", "ft"];
/// Units of force.
pub const FORCES: &[&str] = &["N", "kN", "MN", "lbf", "kip"];
/// Units of stress.
pub const STRESSES: &[&str] = &["Pa", "kPa", "MPa", "GPa", "psi", "ksi"];
const MOMENTS: &[&str] = &[
    "N m", "kN m", "MN m", "N mm", "kN mm", "lbf in", "lbf ft", "kip in", "kip ft",
];
const BIMOMENTS: &[&str] = &[
    "N m2", "kN m2", "MN m2", "N mm2", "kN mm2", "kN cm2", "lbf in2", "lbf ft2", "kip in2",
    "kip ft2",
];
const LINE_LOADS: &[&str] = &[
    "N/mm", "N/m", "kN/mm", "kN/m", "MN/m", "lbf/in", "lbf/ft", "kip/in", "kip/ft",
];
const DENSITIES: &[&str] = &["kg/m3", "g/cm3", "t/m3", "lb/ft3", "lb/in3"];
const ANGLES: &[&str] = &["deg", "rad"];
const SLOPES: &[&str] = &["%", "deg"];

impl Dimension {
    /// With its article, for messages.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Length => "a length",
            Self::Force => "a force",
            Self::Moment => "a moment",
            Self::Bimoment => "a bimoment",
            Self::Stress => "a stress",
            Self::LineLoad => "a force per length",
            Self::Density => "a density",
            Self::Angle => "an angle",
            Self::Slope => "a slope",
        }
    }

    /// The units to choose from, as messages list them.
    #[must_use]
    pub fn units(self) -> &'static [&'static str] {
        match self {
            Self::Length => LENGTHS,
            Self::Force => FORCES,
            Self::Moment => MOMENTS,
            Self::Bimoment => BIMOMENTS,
            Self::Stress => STRESSES,
            Self::LineLoad => LINE_LOADS,
            Self::Density => DENSITIES,
            Self::Angle => ANGLES,
            Self::Slope => SLOPES,
        }
    }

    /// An example of such a quantity.
    #[must_use]
    pub fn example(self) -> &'static str {
        match self {
            Self::Length => "3/8 in",
            Self::Force => "40 kN",
            Self::Moment => "12.5 kN m",
            Self::Bimoment => "1.2 kN m2",
            Self::Stress => "210 GPa",
            Self::LineLoad => "20 N/mm",
            Self::Density => "7850 kg/m3",
            Self::Angle => "30 deg",
            Self::Slope => "14 %",
        }
    }
}

impl Unit {
    /// One degree.
    pub const DEGREE: Self = Self {
        dimension: Dimension::Angle,
        numerator: 1.0,
        denominator: 1.0,
    };
    /// Kilogram per cubic metre.
    pub const KG_PER_M3: Self = Self {
        dimension: Dimension::Density,
        numerator: 1.0,
        denominator: 1.0,
    };
    /// One per cent.
    pub const PER_CENT: Self = Self {
        dimension: Dimension::Slope,
        numerator: 1.0,
        denominator: 1.0,
    };

    /// The unit that `name` names.
    #[must_use]
    pub fn named(name: &str) -> Option<Self> {
        const POUND_FORCE: f64 = 4.448_221_615_260_5;
        const POUND: f64 = 0.453_592_37;
        let name = name.trim();
        let (dimension, numerator, denominator) = match name {
            "N" => (Dimension::Force, 1.0, 1.0),
            "kN" => (Dimension::Force, 1e3, 1.0),
            "MN" => (Dimension::Force, 1e6, 1.0),
            "lbf" => (Dimension::Force, POUND_FORCE, 1.0),
            "kip" => (Dimension::Force, 1e3 * POUND_FORCE, 1.0),
            "Pa" => (Dimension::Stress, 1.0, 1.0),
            "kPa" | "kN/m2" | "kN/m²" => (Dimension::Stress, 1e3, 1.0),
            "MPa" | "N/mm2" | "N/mm²" => (Dimension::Stress, 1e6, 1.0),
            "kN/cm2" | "kN/cm²" => (Dimension::Stress, 1e7, 1.0),
            "GPa" | "kN/mm2" | "kN/mm²" => (Dimension::Stress, 1e9, 1.0),
            "psi" => (Dimension::Stress, POUND_FORCE, 0.000_645_16),
            "ksi" => (Dimension::Stress, 1e3 * POUND_FORCE, 0.000_645_16),
            "kg/m3" | "kg/m³" => (Dimension::Density, 1.0, 1.0),
            "g/cm3" | "g/cm³" | "t/m3" | "t/m³" => (Dimension::Density, 1e3, 1.0),
            "lb/ft3" | "lb/ft³" => (Dimension::Density, POUND, 0.028_316_846_592),
            "lb/in3" | "lb/in³" => (Dimension::Density, POUND, 0.000_016_387_064),
            "deg" | "°" => (Dimension::Angle, 1.0, 1.0),
            "rad" => (Dimension::Angle, 180.0, std::f64::consts::PI),
            "%" => (Dimension::Slope, 1.0, 1.0),
            _ => {
                return length(name)
                    .map_or_else(
                        || {
                            moment(name)
                                .or_else(|| bimoment(name))
                                .or_else(|| line_load(name))
                        },
                        |tenths| Some((Dimension::Length, tenths, 1.0)),
                    )
                    .map(|(dimension, numerator, denominator)| Self {
                        dimension,
                        numerator,
                        denominator,
                    });
            }
        };
        Some(Self {
            dimension,
            numerator,
            denominator,
        })
    }

    /// This unit of force times the unit of length `arm`, a unit of moment; or this unit of moment
    /// times it, one of bimoment.
    #[must_use]
    pub fn times_length(self, arm: Self) -> Self {
        let dimension = match self.dimension {
            Dimension::Force => Dimension::Moment,
            _ => Dimension::Bimoment,
        };
        Self {
            dimension,
            numerator: self.numerator * arm.numerator,
            denominator: self.denominator * arm.denominator,
        }
    }

    /// This unit of force over the unit of length `side`.
    #[must_use]
    pub fn over_length(self, side: Self) -> Self {
        Self {
            dimension: Dimension::LineLoad,
            numerator: self.numerator * side.denominator,
            denominator: self.denominator * side.numerator,
        }
    }

    /// `value` of this unit, expressed in `other` of the same dimension.
    #[must_use]
    pub fn convert(self, value: f64, other: Self) -> f64 {
        if self == other {
            value
        } else {
            value * (self.numerator * other.denominator) / (self.denominator * other.numerator)
        }
    }
}

/// Tenths of a millimetre in a unit of length: whole numbers for all of them.
fn length(name: &str) -> Option<f64> {
    Some(match name {
        "mm" => 10.0,
        "cm" => 100.0,
        "m" => 10_000.0,
        "in" => 254.0,
        "ft" => 3048.0,
        _ => return None,
    })
}

/// A unit of moment: a unit of force, a blank, `·`, `*` or nothing, a unit of length.
fn moment(name: &str) -> Option<(Dimension, f64, f64)> {
    let (force, arm) = moment_parts(name)?;
    let force = Unit::named(force)?;
    Some((Dimension::Moment, force.numerator * length(arm)?, 1.0))
}

/// The units of force and of length that a unit of moment is made of, as `FORCES` and `LENGTHS` write them.
#[must_use]
pub fn moment_parts(name: &str) -> Option<(&'static str, &'static str)> {
    let name = name.trim();
    FORCES.iter().find_map(|force| {
        let rest = name.strip_prefix(force)?.trim_start();
        let rest = rest.strip_prefix(['·', '*']).unwrap_or(rest).trim_start();
        LENGTHS
            .iter()
            .find(|arm| **arm == rest)
            .map(|arm| (*force, *arm))
    })
}

/// A unit of bimoment: as one of moment, its length squared (`m2`, `m²` or `m^2`).
fn bimoment(name: &str) -> Option<(Dimension, f64, f64)> {
    let plain = name.strip_suffix(['2', '²'])?;
    let plain = plain.strip_suffix('^').unwrap_or(plain);
    let (force, arm) = moment_parts(plain)?;
    let (force, arm) = (Unit::named(force)?, length(arm)?);
    Some((Dimension::Bimoment, force.numerator * arm * arm, 1.0))
}

/// A unit of force over length: a unit of force, `/`, a unit of length.
fn line_load(name: &str) -> Option<(Dimension, f64, f64)> {
    let (force, side) = name.split_once('/')?;
    let force = FORCES.iter().find(|known| **known == force.trim_end())?;
    let force = Unit::named(force)?;
    Some((
        Dimension::LineLoad,
        force.numerator,
        length(side.trim_start())?,
    ))
}

/// What is wrong with a text that should be a quantity: message and remedy.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Misread {
    /// What is wrong.
    pub message: String,
    /// What to do.
    pub remedy: String,
}

/// The quantity that `text` states, in `unit`, which says the expected dimension too.
///
/// # Errors
/// Where the text does not start with a number, has no unit, an unknown one, or one of another dimension.
pub fn quantity(text: &str, dimension: Dimension, unit: Unit) -> Result<f64, Misread> {
    let wrong = |message: String| Misread {
        message,
        remedy: format!(
            "write a bare number or a text such as \"{}\"; units of {}: {}",
            dimension.example(),
            dimension
                .name()
                .split_once(' ')
                .map_or("", |(_, name)| name),
            dimension.units().join(", "),
        ),
    };
    let said = super::syntax::printable(text);
    let Some((value, rest)) = leading_number(text) else {
        return Err(wrong(format!("\"{said}\" does not start with a number")));
    };
    let name = rest.trim();
    if name.is_empty() {
        return Err(Misread {
            message: format!("\"{said}\" has no unit"),
            remedy: format!(
                "add the unit, as in \"{}\", or write the number without quotation marks to mean the file's units",
                dimension.example()
            ),
        });
    }
    let Some(found) = Unit::named(name) else {
        let mut fault = wrong(if name.starts_with(',') {
            format!("\"{said}\" has a comma where a decimal point belongs")
        } else {
            format!("\"{}\" is not a known unit", super::syntax::printable(name))
        });
        if let Some(near) = nearest(name, dimension.units()).filter(|_| !name.starts_with(',')) {
            fault.remedy = format!("the nearest known one is \"{near}\"; {}", fault.remedy);
        }
        return Err(fault);
    };
    let value = match (found.dimension, dimension) {
        (a, b) if a == b => found.convert(value, unit),
        (Dimension::Angle, Dimension::Slope) => {
            100.0 * found.convert(value, Unit::DEGREE).to_radians().tan()
        }
        (other, _) => {
            return Err(wrong(format!(
                "\"{said}\" is {}, but {} belongs here",
                other.name(),
                dimension.name()
            )));
        }
    };
    if value.is_finite() {
        Ok(value)
    } else {
        Err(wrong(format!("\"{said}\" is not a finite number")))
    }
}

/// The number of a text such as `3/8 in`, and its unit, which must be a known one.
#[must_use]
pub fn number_and_unit(text: &str) -> Option<(f64, &str)> {
    let (number, rest) = leading_number(text)?;
    let unit = rest.trim();
    (number.is_finite() && Unit::named(unit).is_some()).then_some((number, unit))
}

/// The number that a text starts with (`12`, `-1.5e3`, `3/8`, `1 1/2`, `1-1/2`) and what follows it.
fn leading_number(text: &str) -> Option<(f64, &str)> {
    let text = text.trim();
    let (sign, rest) = if let Some(rest) = text.strip_prefix(['-', '−']) {
        (-1.0, rest)
    } else {
        (1.0, text.strip_prefix('+').unwrap_or(text))
    };
    let whole = digits(rest);
    if whole > 0 {
        let (number, after) = rest.split_at(whole);
        if let Some((fraction, after)) = over(number, after) {
            return Some((sign * fraction, after));
        }
        let next = after.trim_start().trim_start_matches(['-', '–']);
        let count = digits(next);
        if next.len() < after.len() && count > 0 {
            let (numerator, tail) = next.split_at(count);
            if let Some((fraction, tail)) = over(numerator, tail) {
                return Some((sign * (number.parse::<f64>().ok()? + fraction), tail));
            }
        }
    }
    let mut end = whole;
    if rest[end..].starts_with('.') {
        end += 1 + digits(&rest[end + 1..]);
    }
    if end == 0 || &rest[..end] == "." {
        return None;
    }
    if let Some(exponent) = rest[end..].strip_prefix(['e', 'E']) {
        let unsigned = exponent.strip_prefix(['+', '-']).unwrap_or(exponent);
        let count = digits(unsigned);
        if count > 0 {
            end += 1 + (exponent.len() - unsigned.len()) + count;
        }
    }
    Some((sign * rest[..end].parse::<f64>().ok()?, &rest[end..]))
}

/// `numerator` over the whole number that `text` gives after a `/`.
fn over<'t>(numerator: &str, text: &'t str) -> Option<(f64, &'t str)> {
    let text = text.trim_start().strip_prefix(['/', '⁄'])?.trim_start();
    let (denominator, rest) = text.split_at(digits(text));
    let denominator: f64 = denominator.parse().ok()?;
    Some((numerator.parse::<f64>().ok()? / denominator, rest))
}

fn digits(text: &str) -> usize {
    text.bytes().take_while(u8::is_ascii_digit).count()
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;

    fn mm(text: &str) -> Result<f64, Misread> {
        quantity(text, Dimension::Length, Unit::named("mm").unwrap())
    }

    #[test]
    fn numbers_fractions_and_mixed_numbers() {
        for (text, value) in [
            ("12.5 mm", 12.5),
            ("3/8 in", 9.525),
            ("1 1/2 in", 38.1),
            ("1-1/2in", 38.1),
            ("-1 1/2 in", -38.1),
            ("−2 cm", -20.0),
            ("1 in", 25.4),
            ("1 ft", 304.8),
            ("1.5e-3 m", 1.5),
            (".5 mm", 0.5),
            ("5. mm", 5.0),
            ("0.1 mm", 0.1),
        ] {
            assert_eq!(mm(text).unwrap(), value, "{text}");
        }
    }

    #[test]
    fn units_convert_by_their_definitions() {
        let to = |text, name: &str| {
            let unit = Unit::named(name).unwrap();
            quantity(text, unit.dimension, unit).unwrap()
        };
        assert_eq!(to("210 GPa", "MPa"), 210_000.0);
        assert_eq!(to("210000 N/mm2", "GPa"), 210.0);
        // 1 psi = 1 lbf / (25.4 mm)² by definition; digits from memory, as printed in many tables.
        assert!((to("1 ksi", "MPa") - 6.894_757_293_168_361).abs() < 1e-15);
        assert_eq!(to("12.5 kN m", "N mm"), 12.5e6);
        assert_eq!(to("1 kip ft", "kip in"), 12.0);
        assert_eq!(to("2 kN·m", "kN m"), 2.0);
        assert_eq!(to("2kNm", "kN m"), 2.0);
        assert_eq!(to("1.2 kN m2", "kN mm2"), 1.2e6);
        assert_eq!(to("1.2 kN m^2", "kN·m²"), 1.2);
        assert_eq!(to("3kNm²", "N m2"), 3000.0);
        assert_eq!(to("1 kip ft2", "kip in^2"), 144.0);
        assert_eq!(to("1 kip", "lbf"), 1000.0);
        assert_eq!(to("20 N/mm", "kN/mm"), 0.02);
        assert_eq!(to("20 N / mm", "kN/m"), 20.0);
        assert!((to("12 lbf/ft", "lbf/in") - 1.0).abs() < 1e-15);
        assert_eq!(to("7.85 g/cm3", "kg/m3"), 7850.0);
        assert!((to("1 rad", "deg") - 57.295_779_513_082_32).abs() < 1e-13);
        let slope = quantity("14 %", Dimension::Slope, Unit::PER_CENT).unwrap();
        assert_eq!(slope, 14.0);
        let slope = quantity("45 deg", Dimension::Slope, Unit::PER_CENT).unwrap();
        assert!((slope - 100.0).abs() < 1e-12);
    }

    #[test]
    fn what_is_no_length_says_so() {
        for (text, part) in [
            ("12.5 kN m", "is a moment, but a length belongs here"),
            (
                "20 N/mm",
                "is a force per length, but a length belongs here",
            ),
            ("12,5 mm", "comma"),
            ("12", "has no unit"),
            ("mm", "does not start with a number"),
            ("", "does not start with a number"),
            ("12 mmm", "not a known unit"),
            ("1/0 mm", "not a finite number"),
            ("1e999 mm", "not a finite number"),
            ("1 2 mm", "not a known unit"),
            ("ten mm", "does not start with a number"),
        ] {
            let message = mm(text).unwrap_err().message;
            assert!(message.contains(part), "{text}: {message}");
        }
    }
}
