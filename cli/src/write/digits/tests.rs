#![allow(clippy::unwrap_used)]
use super::*;

fn bounded(value: f64, half: f64) -> String {
    print(&Figure::around(value, half, Trust::Bounded)).line()
}

fn exact(value: f64, half: f64) -> String {
    print(&Figure::around(value, half, Trust::Exact)).line()
}

#[test]
fn value_ends_where_the_half_width_ends() {
    assert_eq!(bounded(115_811.016, 0.0123), "115811.016 ± 0.013");
    assert_eq!(bounded(115_811.016, 3.1), "115811 ± 4");
    assert_eq!(bounded(-25.369_63, 0.0031), "-25.370 ± 0.004");
    assert_eq!(bounded(0.140_577, 1.4e-6), "0.1405770 ± 0.0000014");
    assert_eq!(bounded(5.0, 20.0), "5 ± 20");
}

#[test]
fn half_width_takes_up_the_rounding_of_the_value() {
    // 1.26 is printed as 1.3, which is 0.04 off: ±0.4 would no longer reach down to 0.86.
    assert_eq!(bounded(1.26, 0.4), "1.3 ± 0.5");
    assert_eq!(bounded(1.3, 0.4), "1.3 ± 0.4");
}

#[test]
fn printed_interval_contains_the_enclosure() {
    let mut seed = 1u64;
    let mut random = || {
        seed = seed
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (seed >> 11) as f64 / (1u64 << 53) as f64
    };
    for _ in 0..20_000 {
        let value = (random() - 0.5) * ten((random() * 24.0) as i32 - 9);
        let below = value.abs() * ten(-((random() * 9.0) as i32)) * random();
        let above = below * random();
        let figure = Figure {
            value,
            low: value - below,
            high: value + above,
            trust: Trust::Bounded,
        };
        let printed = print(&figure);
        let scale = ten(printed.power);
        let v: f64 = printed.value.parse::<f64>().unwrap() * scale;
        let h: f64 = printed.half_width.as_ref().unwrap().parse::<f64>().unwrap() * scale;
        let slack = 1e-11 * value.abs();
        assert!(v - h <= figure.low + slack, "{figure:?} {printed:?}");
        assert!(v + h >= figure.high - slack, "{figure:?} {printed:?}");
        // And it is not generous: at most half as wide again plus one unit of the tenth digit.
        assert!(
            h <= 1.6 * below + 2e-9 * value.abs(),
            "{figure:?} {printed:?}"
        );
        let significant = printed.value.chars().filter(char::is_ascii_digit).count();
        assert!(significant <= 14, "{printed:?}");
        let mantissa = printed.value.parse::<f64>().unwrap().abs();
        assert!(mantissa < 1e6, "{printed:?}");
    }
}

#[test]
fn zero_by_symmetry_is_nought_with_its_error() {
    assert_eq!(bounded(1e-17, 2.3e-4), "0 ± 0.00023");
    assert_eq!(bounded(1e-24, 2.3e-8), "(0 ± 23)×10⁻⁹");
    assert_eq!(bounded(-1e-17, 0.0023), "0 ± 0.0023");
    assert_eq!(bounded(-0.0, 0.5), "0 ± 0.5");
    assert_eq!(exact(-1e-17, 1e-15), "0");
    assert_eq!(exact(-0.0, 0.0), "0");
    assert_eq!(exact(3e-9, 1e-6), "0");
}

#[test]
fn exact_figures_have_seven_digits_and_no_half_width() {
    assert_eq!(exact(3712.0, 1e-10), "3712.000");
    assert_eq!(exact(std::f64::consts::PI, 0.0), "3.141593");
    assert_eq!(exact(1.0, 0.01), "1.0");
    assert_eq!(exact(12_345_678.9, 1e-6), "12.34568×10⁶");
    assert_eq!(exact(0.000_123_456_789, 1e-15), "123.4568×10⁻⁶");
    assert_eq!(exact(-999_999.96, 0.0), "-1.000000×10⁶");
}

#[test]
fn powers_of_ten_are_multiples_of_three() {
    assert_eq!(bounded(1.234_567e9, 2.0e5), "(1.23457 ± 0.00021)×10⁹");
    assert_eq!(bounded(12.3e6, 0.4e6), "(12.3 ± 0.4)×10⁶");
    assert_eq!(bounded(4.56e-5, 1e-7), "(45.60 ± 0.10)×10⁻⁶");
    assert_eq!(bounded(999_999.99, 0.004), "999999.990 ± 0.004");
    assert_eq!(bounded(999_999.99, 30.0), "(1.00000 ± 0.00004)×10⁶");
}

#[test]
fn bounds_below_rounding_show_ten_digits() {
    assert_eq!(
        bounded(std::f64::consts::PI, 1e-14),
        "3.141592654 ± 0.000000001"
    );
}

#[test]
fn asymmetric_enclosures_reach_both_ends() {
    let figure = Figure {
        value: 10.0,
        low: 9.9,
        high: 10.02,
        trust: Trust::Bounded,
    };
    assert_eq!(print(&figure).line(), "10.00 ± 0.10");
}

#[test]
fn what_is_no_number_is_said_plainly() {
    assert_eq!(bounded(f64::NAN, 1.0), "–");
    let figure = Figure {
        value: 12.0,
        low: f64::NEG_INFINITY,
        high: 13.0,
        trust: Trust::Bounded,
    };
    assert_eq!(print(&figure).line(), "12.0 ± ∞");
}

#[test]
fn short_numbers_drop_trailing_zeros() {
    assert_eq!(short(12.5000, 6), "12.5");
    assert_eq!(short(-0.0, 4), "0");
    assert_eq!(short(-1200.0, 6), "−1200");
    assert_eq!(short(100.0, 4), "100");
    assert_eq!(short(2.5e7, 4), "25×10⁶");
    assert_eq!(superscript(-12), "⁻¹²");
}

#[test]
fn bounds_of_errors_round_up() {
    assert_eq!(percent_up(0.0), "0 %");
    assert_eq!(percent_up(0.001_01), "0.11 %");
    assert_eq!(percent_up(0.123_4), "13 %");
    assert_eq!(percent_up(2.0e-5), "0.002 %");
}

#[test]
fn ends_are_as_fine_as_their_distance_and_never_inwards() {
    let of = |low: f64, high: f64| {
        ends(&Figure {
            value: 0.5 * (low + high),
            low,
            high,
            trust: Trust::Bounded,
        })
    };
    assert_eq!(
        of(1_338_545.328, 1_338_667.641),
        ["1.3385453×10⁶", "1.3386677×10⁶"]
    );
    assert_eq!(
        of(-2.100_013_57e-11, 2.099_986_43e-11),
        ["−21.1×10⁻¹²", "21×10⁻¹²"]
    );
    assert_eq!(
        of(-0.000_263_795_979, 0.000_259_802_288),
        ["−264×10⁻⁶", "260×10⁻⁶"]
    );
    assert_eq!(of(13_407.928_5, 13_407.928_5), ["13407.9285", "13407.9285"]);
    assert_eq!(of(0.0, 0.0), ["0", "0"]);
    for (low, high) in [
        (1.0 / 3.0, 0.5),
        (-7.77e-5, 1e9),
        (99.99, 100.01),
        (-1e-300, 1e300),
    ] {
        let [below, above] = of(low, high);
        assert!(!below.is_empty() && !above.is_empty());
    }
}
