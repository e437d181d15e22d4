//! Round levels between bands.

/// Levels at whole multiples of a round step.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Levels {
    /// 1, 2, 2.5 or 5 times a power of ten.
    pub step: f64,
    /// The lowest band begins at `first · step`.
    pub first: i64,
    /// The highest band ends at `last · step`.
    pub last: i64,
}

/// At most so many bands.
const MOST_BANDS: f64 = 12.0;

impl Levels {
    /// Six to twelve bands from `low` to `high`; one band about a constant field.
    #[must_use]
    pub fn between(low: f64, high: f64) -> Self {
        let span = high - low;
        let size = low.abs().max(high.abs());
        if span.is_nan() || span <= 1e-9 * size || !span.is_finite() {
            return Self::constant(size);
        }
        let mut decade = (span / MOST_BANDS).log10().floor() as i32;
        loop {
            for round in [1.0, 2.0, 2.5, 5.0] {
                let step = round * 10f64.powi(decade);
                // An end within a thousandth of a level is on it: no band of no width.
                let first = (low / step + 1e-3).floor();
                let last = (high / step - 1e-3).ceil();
                if last - first <= MOST_BANDS {
                    return Self {
                        step,
                        first: first as i64,
                        last: last as i64,
                    };
                }
            }
            decade += 1;
        }
    }

    fn constant(size: f64) -> Self {
        let step = if size > 0.0 && size.is_finite() {
            10f64.powi(size.log10().floor() as i32 + 1)
        } else {
            1.0
        };
        Self {
            step,
            first: 0,
            last: 1,
        }
    }

    /// Number of bands.
    #[must_use]
    pub fn bands(&self) -> usize {
        (self.last - self.first).max(1) as usize
    }

    /// The lower edge of band `i`, from 0; `bands()` gives the upper edge of the last.
    #[must_use]
    pub fn edge(&self, i: usize) -> f64 {
        (self.first + i as i64) as f64 * self.step
    }

    /// The power of ten that is split off the scale's numbers: zero, or a multiple of three.
    #[must_use]
    pub fn power(&self) -> i32 {
        let size = self.edge(0).abs().max(self.edge(self.bands()).abs());
        let decade = (size * (1.0 + 1e-12)).log10().floor() as i32;
        if (-2..5).contains(&decade) {
            0
        } else {
            decade.div_euclid(3) * 3
        }
    }

    /// The edges in print, in units of `10^power`, all to the same decimals.
    #[must_use]
    pub fn printed(&self) -> Vec<String> {
        (self.first..=self.first + self.bands() as i64)
            .map(|k| self.number(k))
            .collect()
    }

    /// `multiple` steps in print, in units of `10^power`.
    #[must_use]
    pub fn number(&self, multiple: i64) -> String {
        let unit = 10f64.powi(self.power());
        let step = self.step / unit;
        let decimals = (0..12)
            .find(|&d| {
                let shifted = step * 10f64.powi(d);
                (shifted - shifted.round()).abs() < 1e-9 * shifted.abs().max(1.0)
            })
            .unwrap_or(12) as usize;
        let value = multiple as f64 * self.step;
        let text = format!("{:.*}", decimals, value / unit);
        if text
            .trim_matches(|c| matches!(c, '-' | '0' | '.'))
            .is_empty()
        {
            "0".into()
        } else {
            text.replace('-', "−")
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn six_to_twelve_round_bands() {
        let mut span: f64 = 1.7e-9;
        while span < 1e12 {
            for low in [0.0, -0.3 * span, -span] {
                let levels = Levels::between(low, low + span);
                let n = levels.bands();
                assert!((5..=12).contains(&n), "{span} {low} {n}");
                assert!(levels.edge(0) <= low + 1e-3 * levels.step);
                assert!(levels.edge(n) >= low + span - 1e-3 * levels.step);
                let mantissa = levels.step / 10f64.powi(levels.step.log10().floor() as i32);
                assert!(
                    [1.0, 2.0, 2.5, 5.0, 10.0]
                        .iter()
                        .any(|r| (mantissa - r).abs() < 1e-9)
                );
                assert!(
                    levels.printed().iter().all(|t| t.chars().count() <= 7),
                    "{:?}",
                    levels.printed()
                );
            }
            span *= 1.37;
        }
    }

    #[test]
    fn printed_edges_are_round() {
        let levels = Levels::between(0.0, 11.3);
        assert_eq!(levels.printed().first().map(String::as_str), Some("0"));
        assert_eq!(levels.printed().last().map(String::as_str), Some("12"));
        assert_eq!(
            Levels::between(-0.031, 0.032).printed()[0],
            "−0.035".replace("0.035", "0.04")
        );
        let fine = Levels::between(0.0, 2.2e-6);
        assert_eq!(fine.power(), -6);
        assert_eq!(fine.printed().last().map(String::as_str), Some("2.2"));
    }

    #[test]
    fn constant_fields_have_one_band() {
        assert_eq!(Levels::between(0.0, 0.0).bands(), 1);
        assert_eq!(Levels::between(3.0, 3.0 + 1e-12).bands(), 1);
        assert_eq!(Levels::between(f64::NAN, 1.0).bands(), 1);
    }
}
