//! Numbers as the section file has them.

/// Decimals that keep a coordinate to `1e-10` of `size`.
#[must_use]
pub fn decimals(size: f64) -> usize {
    let digits = (-(1e-10 * size).log10()).ceil();
    digits.clamp(0.0, 30.0) as usize
}

/// `value` with at most `decimals` decimals, without trailing zeros or a negative zero.
#[must_use]
pub fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    let text = if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.')
    } else {
        &text
    };
    if text == "-0" { "0" } else { text }.to_owned()
}

/// `value` with four digits, for sentences.
#[must_use]
pub fn short(value: f64) -> String {
    if value == 0.0 || !value.is_finite() {
        return format!("{value}");
    }
    let magnitude = value.abs().log10().floor();
    if !(-4.0..=7.0).contains(&magnitude) {
        return format!("{value:.1e}");
    }
    fixed(value, (3.0 - magnitude).clamp(0.0, 30.0) as usize)
}

/// A place, with digits that suit a drawing of `size`.
#[must_use]
pub fn place(p: sectile_mesh::Point, size: f64) -> String {
    let digits = (-(1e-6 * size).log10()).ceil().clamp(0.0, 30.0) as usize;
    format!("({}, {})", fixed(p.x, digits), fixed(p.y, digits))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digits_follow_the_size() {
        assert_eq!(decimals(100.0), 8);
        assert_eq!(decimals(1.0), 10);
        assert_eq!(decimals(0.004), 13);
        assert_eq!(fixed(60.000_000_000_001, 8), "60");
        assert_eq!(fixed(-0.000_000_000_001, 8), "0");
        assert_eq!(fixed(100.0, 0), "100");
        assert_eq!(fixed(12.5, 3), "12.5");
        assert_eq!(short(0.000_123_456), "0.0001235");
        assert_eq!(short(1234.56), "1235");
        assert_eq!(short(1e-9), "1.0e-9");
    }
}
