//! `field-<action>.csv`: the stress at the solver's integration points. UTF-8 without a byte-order mark,
//! lines ended by `\n`; stresses in the file's unit of stress, positions in its unit of length.

use std::fmt::Write;

use rayon::prelude::*;
use sectile_solver::solution::Solution;
use sectile_solver::stress::field::WeightedPoint;
use sectile_solver::stress::forces::SectionForces;

use super::actions::{Table, scaled};
use super::units::stress_per_force;
use crate::response::Names;
use crate::section::Units;

/// The columns of `field-<action>.csv`.
pub const FIELD: [&str; 22] = [
    "triangle",
    "piece",
    "x",
    "y",
    "weight",
    "sigma",
    "tau_x",
    "tau_y",
    "tau",
    "von_mises",
    "tresca",
    "principal_1",
    "principal_3",
    "sigma_axial",
    "sigma_bending",
    "sigma_warping",
    "tau_x_shear",
    "tau_y_shear",
    "tau_x_torsion",
    "tau_y_torsion",
    "tau_x_warping",
    "tau_y_warping",
];

/// Points written as one: enough that threads pay.
const STRETCH: usize = 2048;

/// The stress at the solver's integration points, to nine digits. `weight` is the point's share of
/// the area: `Σ weight·sigma` is the axial force, `Σ weight·sigma·(y − y_c)` the moment M_x, and so on.
/// Behind the combined stress and its measures come its parts: σ of N, of M_x with M_y and of B, τ of
/// V_x with V_y, of T and of T_w.
#[must_use]
pub fn field_csv(
    units: &Units,
    names: &Names,
    solution: &Solution,
    points: &[WeightedPoint],
    forces: &SectionForces,
) -> String {
    let factor = stress_per_force(units);
    let [n, vx, vy, mx, my, t, b, tw] = forces.parts();
    let (shear, bending) = (vx + vy, mx + my);
    let pieces: Vec<String> = (0..names.pieces.len() as u32)
        .map(|piece| quoted(names.piece(piece)))
        .collect();
    let line = |out: &mut String, point: &WeightedPoint| {
        let under = |f: &SectionForces| scaled(&point.unit.under(f), factor);
        let s = under(forces);
        let [first, third] = s.principal();
        let [by_shear, by_torsion, by_warping] = [shear, t, tw].map(|f| under(&f).tau);
        let numbers = [
            point.at.x,
            point.at.y,
            point.weight,
            s.sigma,
            s.tau.x,
            s.tau.y,
            s.shear(),
            s.von_mises(),
            s.tresca(),
            first,
            third,
            under(&n).sigma,
            under(&bending).sigma,
            under(&b).sigma,
            by_shear.x,
            by_shear.y,
            by_torsion.x,
            by_torsion.y,
            by_warping.x,
            by_warping.y,
        ];
        let piece = solution
            .mesh
            .piece
            .get(point.triangle as usize)
            .and_then(|&piece| pieces.get(piece as usize))
            .map_or("", String::as_str);
        // Writing to a string does not fail.
        let _ = write!(out, "{},{piece}", point.triangle);
        for number in numbers {
            out.push(',');
            nine_digits(out, number);
        }
        out.push('\n');
    };
    let stretches: Vec<String> = points
        .par_chunks(STRETCH)
        .map(|points| {
            let mut out = String::with_capacity(220 * points.len());
            points.iter().for_each(|point| line(&mut out, point));
            out
        })
        .collect();
    let mut text = Table::new(&FIELD).text();
    text.reserve(stretches.iter().map(String::len).sum());
    stretches.iter().for_each(|stretch| text.push_str(stretch));
    text
}

/// A name as a cell of its own.
fn quoted(name: &str) -> String {
    let mut table = Table::new(&[name]).text();
    table.truncate(table.trim_end_matches('\n').len());
    table
}

/// Writes a number to nine digits and no longer than they need; nothing for one that is not finite.
fn nine_digits(out: &mut String, x: f64) {
    if !x.is_finite() {
        return;
    }
    if x == 0.0 {
        out.push('0');
        return;
    }
    // Such as -1.23450000e-2.
    let mut buffer = Digits::default();
    let _ = write!(buffer, "{x:.8e}");
    let text = buffer.text();
    let (mantissa, exponent) = text.split_once('e').unwrap_or((text, "0"));
    let exponent: i32 = exponent.parse().unwrap_or(0);
    let (sign, mantissa) = match mantissa.strip_prefix('-') {
        Some(rest) => ("-", rest),
        None => ("", mantissa),
    };
    let mantissa = mantissa.trim_end_matches('0').trim_end_matches('.');
    let (lead, rest) = mantissa.split_at(1);
    let rest = rest.trim_start_matches('.');
    out.push_str(sign);
    match usize::try_from(exponent) {
        Err(_) if exponent >= -5 => {
            out.push_str("0.");
            (1..-exponent).for_each(|_| out.push('0'));
            out.push_str(lead);
            out.push_str(rest);
        }
        Ok(whole) if whole < 16 => {
            let whole_digits = whole.min(rest.len());
            out.push_str(lead);
            out.push_str(&rest[..whole_digits]);
            (whole_digits..whole).for_each(|_| out.push('0'));
            if whole_digits < rest.len() {
                out.push('.');
                out.push_str(&rest[whole_digits..]);
            }
        }
        _ => {
            out.push_str(mantissa);
            let _ = write!(out, "e{exponent}");
        }
    }
}

/// Room for one number, so that none is allocated.
#[derive(Default)]
struct Digits {
    bytes: [u8; 24],
    length: usize,
}

impl Digits {
    fn text(&self) -> &str {
        std::str::from_utf8(&self.bytes[..self.length]).unwrap_or_default()
    }
}

impl Write for Digits {
    fn write_str(&mut self, text: &str) -> std::fmt::Result {
        let end = self.length + text.len();
        let room = self
            .bytes
            .get_mut(self.length..end)
            .ok_or(std::fmt::Error)?;
        room.copy_from_slice(text.as_bytes());
        self.length = end;
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::write::json::number;
    use proptest::prelude::*;

    fn written(x: f64) -> String {
        let mut out = String::new();
        nine_digits(&mut out, x);
        out
    }

    /// As other tables write the number that the nine digits read as.
    fn expected(x: f64) -> String {
        number(format!("{x:.8e}").parse().unwrap_or(x))
    }

    #[test]
    fn numbers_are_as_short_as_their_nine_digits() {
        for x in [
            0.0,
            -0.0,
            1.0,
            -1.0,
            0.1,
            100.0,
            123_456_789.0,
            1_234_567_894.0,
            1e15,
            1e16,
            -1e16,
            1e-5,
            9.999_999_999e-6,
            0.000_099_999_999_96,
            1e-6,
            1.0 / 3.0,
            99.999_999_99,
            1e300,
            -2.5e-300,
            f64::NAN,
            f64::INFINITY,
            f64::MIN_POSITIVE,
            f64::MAX,
        ] {
            assert_eq!(written(x), expected(x), "{x:e}");
        }
    }

    proptest! {
        #[test]
        fn any_number_is_written_as_elsewhere(bits in any::<u64>(), plain in -1e6_f64..1e6) {
            // Subnormal numbers have fewer than nine digits of their own.
            let x = Some(f64::from_bits(bits)).filter(|x| !x.is_subnormal()).unwrap_or(plain);
            prop_assert_eq!(written(x), expected(x));
            prop_assert_eq!(written(plain), expected(plain));
            prop_assert_eq!(written(plain * 1e-9), expected(plain * 1e-9));
        }
    }

    #[test]
    fn a_name_is_quoted_where_it_must_be() {
        assert_eq!(quoted("web"), "web");
        assert_eq!(quoted("web, left"), "\"web, left\"");
        assert_eq!(quoted("the \"old\" one"), "\"the \"\"old\"\" one\"");
    }
}
