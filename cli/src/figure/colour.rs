//! Colours of bands.
//!
//! Magnitudes: the VIRIDIS map run from light (nothing) to dark (much), so that paper stays paper
//! where little happens; its lightness falls at every step, so it reads in grey.
//!
//! Signed values: a map of our own, built in Oklab (B. Ottosson, "A perceptual color space for image
//! processing", 2020; matrices from memory, checked below by white and by round trip). Lightness falls
//! linearly and equally from zero to both ends, chroma grows from none; hue 255° (blue) below and
//! 45° (rust) above zero. In grey the size reads from the lightness; the sign does not, and is told by
//! the lines between bands: solid above zero, dashed below.

/// Red, green, blue.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Rgb(pub u8, pub u8, pub u8);

impl Rgb {
    /// As in SVG, `#rrggbb`.
    #[must_use]
    pub fn hex(self) -> String {
        format!("#{:02x}{:02x}{:02x}", self.0, self.1, self.2)
    }

    /// Oklab lightness, 0 (black) to 1 (white).
    #[must_use]
    pub fn lightness(self) -> f64 {
        oklab(self)[0]
    }
}

/// The colour of a magnitude, `t` from 0 (least) to 1 (most).
#[must_use]
pub fn sequential(t: f64) -> Rgb {
    // The palest yellow carries no line on white, the last purple no ink lines: both ends are cut.
    let c = colorous::VIRIDIS.eval_continuous(1.0 - (0.02 + 0.93 * t.clamp(0.0, 1.0)));
    Rgb(c.r, c.g, c.b)
}

const LIGHTNESS_AT_ZERO: f64 = 0.975;
const LIGHTNESS_AT_ENDS: f64 = 0.45;
const CHROMA_AT_ENDS: f64 = 0.118;
const HUE_BELOW: f64 = 255.0;
const HUE_ABOVE: f64 = 45.0;

/// The colour of a signed value, `t` from −1 to 1.
#[must_use]
pub fn diverging(t: f64) -> Rgb {
    let size = t.abs().min(1.0);
    let lightness = LIGHTNESS_AT_ZERO + size * (LIGHTNESS_AT_ENDS - LIGHTNESS_AT_ZERO);
    let hue = if t < 0.0 { HUE_BELOW } else { HUE_ABOVE };
    let (s, c) = hue.to_radians().sin_cos();
    // Chroma rises faster near zero, so that the first bands already tell their sign.
    let chroma = CHROMA_AT_ENDS * size.powf(0.7);
    from_oklab([lightness, chroma * c, chroma * s])
}

fn linear(c: u8) -> f64 {
    let c = f64::from(c) / 255.0;
    if c <= 0.04045 {
        c / 12.92
    } else {
        ((c + 0.055) / 1.055).powf(2.4)
    }
}

fn encoded(c: f64) -> u8 {
    let c = c.clamp(0.0, 1.0);
    let c = if c <= 0.003_130_8 {
        12.92 * c
    } else {
        1.055 * c.powf(1.0 / 2.4) - 0.055
    };
    (255.0 * c).round() as u8
}

fn oklab(colour: Rgb) -> [f64; 3] {
    let (r, g, b) = (linear(colour.0), linear(colour.1), linear(colour.2));
    let l = (0.412_221_470_8 * r + 0.536_332_536_3 * g + 0.051_445_992_9 * b).cbrt();
    let m = (0.211_903_498_2 * r + 0.680_699_545_1 * g + 0.107_396_956_6 * b).cbrt();
    let s = (0.088_302_461_9 * r + 0.281_718_837_6 * g + 0.629_978_700_5 * b).cbrt();
    [
        0.210_454_255_3 * l + 0.793_617_785_0 * m - 0.004_072_046_8 * s,
        1.977_998_495_1 * l - 2.428_592_205_0 * m + 0.450_593_709_9 * s,
        0.025_904_037_1 * l + 0.782_771_766_2 * m - 0.808_675_766_0 * s,
    ]
}

fn from_oklab([light, a, b]: [f64; 3]) -> Rgb {
    let l = (light + 0.396_337_777_4 * a + 0.215_803_757_3 * b).powi(3);
    let m = (light - 0.105_561_345_8 * a - 0.063_854_172_8 * b).powi(3);
    let s = (light - 0.089_484_177_5 * a - 1.291_485_548_0 * b).powi(3);
    Rgb(
        encoded(4.076_741_662_1 * l - 3.307_711_591_3 * m + 0.230_969_929_2 * s),
        encoded(-1.268_438_004_6 * l + 2.609_757_401_1 * m - 0.341_319_396_5 * s),
        encoded(-0.004_196_086_3 * l - 0.703_418_614_7 * m + 1.707_614_701_0 * s),
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn oklab_of_white_and_round_trips() {
        let white = oklab(Rgb(255, 255, 255));
        assert!((white[0] - 1.0).abs() < 1e-6 && white[1].abs() < 1e-6 && white[2].abs() < 1e-6);
        for r in (0..=255).step_by(51) {
            for g in (0..=255).step_by(51) {
                for b in (0..=255).step_by(51) {
                    let colour = Rgb(r, g, b);
                    assert_eq!(from_oklab(oklab(colour)), colour);
                }
            }
        }
    }

    #[test]
    fn sequential_darkens_at_every_step() {
        let light: Vec<f64> = (0..=20)
            .map(|i| sequential(f64::from(i) / 20.0).lightness())
            .collect();
        assert!(light.windows(2).all(|w| w[1] < w[0] - 0.01), "{light:?}");
    }

    #[test]
    fn diverging_is_even_and_linear_in_lightness() {
        for i in 0..=20 {
            let t = f64::from(i) / 20.0;
            let expected = LIGHTNESS_AT_ZERO + t * (LIGHTNESS_AT_ENDS - LIGHTNESS_AT_ZERO);
            for sign in [-1.0, 1.0] {
                let colour = diverging(sign * t);
                assert!(
                    (colour.lightness() - expected).abs() < 0.006,
                    "{sign} {t} {colour:?}"
                );
            }
        }
    }
}
