//! Figures in print: the digits that the bounds support, and no more.
//!
//! The printed interval `value ± half-width` contains the figure's enclosure: the half-width is
//! rounded up and takes up what rounding the value has moved.

use sectile_solver::figure::{Figure, Trust};

/// Significant digits of a figure that is exact.
const EXACT_DIGITS: i32 = 7;
/// No figure is printed to more significant digits than these.
const MOST_DIGITS: i32 = 10;
/// From here on, and below `SMALL`, a power of ten is split off.
const LARGE: f64 = 1e6;
const SMALL: f64 = 1e-3;
/// The half-width of a nought has plain decimals down to this.
const SMALLEST: f64 = 1e-6;

/// A figure in print: `(value ± half_width) × 10^power`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Printed {
    /// The value, never `-0`.
    pub value: String,
    /// The half-width, rounded up; `None` where the figure is exact.
    pub half_width: Option<String>,
    /// A multiple of three.
    pub power: i32,
}

impl Printed {
    /// On one line, such as `115811.0 ± 0.3`, `(12.345 ± 0.012)×10⁶`, `12.5×10⁶`.
    #[must_use]
    pub fn line(&self) -> String {
        let power = times_power(self.power);
        match &self.half_width {
            Some(half) if power.is_empty() => format!("{} ± {half}", self.value),
            Some(half) => format!("({} ± {half}){power}", self.value),
            None => format!("{}{power}", self.value),
        }
    }

    /// The value alone with its power, such as `12.345×10⁶`.
    #[must_use]
    pub fn value_line(&self) -> String {
        format!("{}{}", self.value, times_power(self.power))
    }
}

/// Prints a figure.
///
/// - Exact: seven significant digits, fewer where rounding supports fewer; no half-width.
/// - Otherwise the half-width has two significant digits up to 29, one above, rounded up; the value
///   ends at the same decimal.
/// - What rounds to nothing at that decimal prints as `0`.
/// - From 10⁶ on and below 10⁻³ (for the half-width of a nought, 10⁻⁶) a power of ten that is a multiple of three is split off.
/// - A value that is not a number prints as `–`, an enclosure without end as `± ∞`.
#[must_use]
pub fn print(figure: &Figure) -> Printed {
    if !figure.value.is_finite() {
        return plain("–", None);
    }
    // An enclosure need not be symmetric about its value: ± must reach both ends.
    let half = (figure.high - figure.value)
        .max(figure.value - figure.low)
        .max(0.0);
    if half.is_infinite() || half.is_nan() {
        let mut printed = significant(figure.value, 3);
        printed.half_width = Some("∞".into());
        return printed;
    }
    let exact = figure.trust == Trust::Exact;
    if half == 0.0 {
        return significant(figure.value, if exact { EXACT_DIGITS } else { MOST_DIGITS });
    }
    let magnitude = figure.value.abs();
    // Without a half-width beside it, an exact figure ends before the decade that rounding reaches.
    let mut last = if exact {
        decade(half) + 1
    } else {
        last_decade(half)
    };
    if magnitude > 0.0 {
        let most = if exact { EXACT_DIGITS } else { MOST_DIGITS };
        last = last.max(first_decade(magnitude, most) + 1 - most);
    }
    if exact {
        return if magnitude <= half {
            plain("0", None)
        } else {
            at_decade(figure.value, last)
        };
    }
    let rounded = round_at(figure.value, last);
    let reach = half + (rounded - figure.value).abs();
    let steps = steps_up(reach, magnitude, last);
    let power = if rounded == 0.0 && (SMALLEST..LARGE).contains(&half) {
        // Beside a nought, plain decimals read more easily than a power of ten.
        0
    } else {
        split(rounded.abs().max(steps * ten(last)))
    };
    // A power that is larger than the last decade needs decimals; a smaller one needs none.
    let decimals = (power - last).max(0) as usize;
    let half_width = format!("{:.*}", decimals, steps * ten(last - power));
    let value = tidy_zero(format!("{:.*}", decimals, rounded / ten(power)));
    Printed {
        value,
        half_width: Some(half_width),
        power,
    }
}

/// A plain number to so many significant digits, trailing zeros of the fraction dropped; for
/// coordinates and labels.
#[must_use]
pub fn short(value: f64, digits: i32) -> String {
    if !value.is_finite() {
        return "–".into();
    }
    let printed = significant(value, digits.max(1));
    let trimmed = if printed.value.contains('.') {
        printed.value.trim_end_matches('0').trim_end_matches('.')
    } else {
        &printed.value
    };
    minus_sign(&format!("{trimmed}{}", times_power(printed.power)))
}

/// A positive number that must not come out too small, to so many significant digits, rounded up.
#[must_use]
pub fn up(value: f64, digits: i32) -> String {
    if !value.is_finite() || value <= 0.0 {
        return short(value, digits);
    }
    let digit = 10f64.powf(value.log10().floor() - f64::from(digits - 1));
    // What is so many digits long but for rounding stays as it is.
    short((value / digit - 1e-9).ceil() * digit, digits)
}

/// The ends of an enclosure, for a table: to a hundredth of its half-width or finer, rounded outwards, but to nine
/// significant digits at most and then to the nearest.
#[must_use]
pub fn ends(figure: &Figure) -> [String; 2] {
    let (low, high) = (figure.low, figure.high);
    let half = 0.5 * (high - low);
    let size = low.abs().max(high.abs());
    let place = |x: f64| x.log10().floor() as i32;
    let digits = if half > 0.0 && size.is_finite() {
        place(size) - place(half) + 3
    } else {
        9
    };
    if digits >= 9 {
        return [low, high].map(|x| short(x + 0.0, 9));
    }
    let power = place(size) + 1 - digits;
    let unit = |x: f64, round: fn(f64) -> f64| {
        // Multiplied or divided by a whole power of ten, so that 0.3 does not become 0.30000000000000004.
        if power >= 0 {
            round(x / 10.0_f64.powi(power)) * 10.0_f64.powi(power)
        } else {
            round(x * 10.0_f64.powi(-power)) / 10.0_f64.powi(-power)
        }
    };
    [unit(low, f64::floor), unit(high, f64::ceil)].map(|x| short(x + 0.0, digits + 1))
}

/// A share that bounds an error, in percent to two digits, rounded up.
#[must_use]
pub fn percent_up(share: f64) -> String {
    format!("{} %", up(100.0 * share, 2))
}

/// The text with a true minus sign; for figures, where a hyphen is too short beside digits.
#[must_use]
pub fn minus_sign(text: &str) -> String {
    text.replace('-', "−")
}

/// `×10⁶`, or nothing for power 0.
#[must_use]
pub fn times_power(power: i32) -> String {
    if power == 0 {
        String::new()
    } else {
        format!("×10{}", superscript(power))
    }
}

/// An integer in superscript digits.
#[must_use]
pub fn superscript(n: i32) -> String {
    const DIGITS: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    n.to_string()
        .chars()
        .map(|c| match c.to_digit(10) {
            Some(d) => DIGITS[d as usize],
            None => '⁻',
        })
        .collect()
}

fn plain(value: &str, half_width: Option<&str>) -> Printed {
    Printed {
        value: value.into(),
        half_width: half_width.map(Into::into),
        power: 0,
    }
}

/// To `digits` significant digits.
fn significant(value: f64, digits: i32) -> Printed {
    if value == 0.0 || !value.is_finite() {
        return plain("0", None);
    }
    at_decade(value, first_decade(value.abs(), digits) + 1 - digits)
}

/// Rounded at the decade `last`.
fn at_decade(value: f64, last: i32) -> Printed {
    let rounded = round_at(value, last);
    let power = split(rounded.abs());
    let decimals = (power - last).max(0) as usize;
    Printed {
        value: tidy_zero(format!("{:.*}", decimals, rounded / ten(power))),
        half_width: None,
        power,
    }
}

/// The power of ten that is split off a number of this magnitude.
fn split(magnitude: f64) -> i32 {
    if magnitude == 0.0 || (SMALL..LARGE).contains(&magnitude) {
        0
    } else {
        decade(magnitude).div_euclid(3) * 3
    }
}

/// The decade of the first of `digits` significant digits, after rounding: 999.96 to four begins at 10³.
fn first_decade(magnitude: f64, digits: i32) -> i32 {
    let text = format!("{:.*e}", (digits - 1).max(0) as usize, magnitude);
    exponent(&text)
}

/// ⌊log₁₀ x⌋, right at the powers of ten themselves.
fn decade(x: f64) -> i32 {
    // The exponent of the shortest decimal that reads back as x.
    exponent(&format!("{x:e}"))
}

fn exponent(text: &str) -> i32 {
    text.rsplit('e')
        .next()
        .and_then(|e| e.parse().ok())
        .unwrap_or(0)
}

/// The decade of the last digit of a half-width in print.
fn last_decade(half: f64) -> i32 {
    let d = decade(half);
    // Up to 29 in units of a tenth of its decade: two digits; above: one.
    if half > 2.9 * ten(d) { d } else { d - 1 }
}

/// How many steps of `10^last` cover `reach`; what is over by no more than the rounding of the ends of
/// an enclosure about `magnitude` does not count.
fn steps_up(reach: f64, magnitude: f64, last: i32) -> f64 {
    let rounding = 4.0 * f64::EPSILON * (magnitude + reach);
    ((reach - rounding) / ten(last) * (1.0 - 1e-13))
        .ceil()
        .max(1.0)
}

/// `value` rounded to a multiple of `10^last`.
fn round_at(value: f64, last: i32) -> f64 {
    if last >= 0 {
        let step = ten(last);
        (value / step).round() * step
    } else {
        // Printing rounds correctly where multiplying by a power of ten does not.
        format!("{:.*}", (-last) as usize, value)
            .parse()
            .unwrap_or(value)
    }
}

fn ten(power: i32) -> f64 {
    10f64.powi(power)
}

/// `0` for `0.000` and `-0.0`.
fn tidy_zero(text: String) -> String {
    if text.chars().all(|c| matches!(c, '-' | '0' | '.')) {
        "0".into()
    } else {
        text
    }
}

#[cfg(test)]
mod tests;
