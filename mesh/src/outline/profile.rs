//! Rolled and welded profiles from their dimensions, with root and toe radii and sloped flanges.

use super::corner::{Corner, CornerFault, ring_from_corners};
use super::piece::Outline;
use crate::point::Point;

/// The forms of profiles.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Form {
    /// I and H: depth `h` along y, flanges `b`; the origin is the middle of `h` and of the web.
    I,
    /// Channel: depth `h` along y, flanges to the right; the origin is the middle of the web's back.
    Channel,
    /// Angle: leg `h` up, leg `b` to the right; the origin is the outer corner.
    Angle,
    /// Tee: flange `b` on top, stem down to depth `h`; the origin is the middle of the flange's top.
    Tee,
    /// Rectangular tube, `b` by `h`; the origin is its centre.
    Box,
}

impl Form {
    /// Every form.
    pub const ALL: &'static [Self] = &[Self::I, Self::Channel, Self::Angle, Self::Tee, Self::Box];

    /// Its name in section files.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::I => "I",
            Self::Channel => "channel",
            Self::Angle => "angle",
            Self::Tee => "tee",
            Self::Box => "box",
        }
    }

    /// The dimensions that it cannot do without.
    #[must_use]
    pub fn required(self) -> &'static [&'static str] {
        match self {
            Self::Angle => &["h", "b", "t"],
            _ => &["h", "b", "tw", "tf"],
        }
    }

    /// The dimensions that it may have.
    #[must_use]
    pub fn optional(self) -> &'static [&'static str] {
        match self {
            Self::I => &["b2", "tf2", "r", "r2", "slope", "tf_at"],
            Self::Channel | Self::Tee => &["r", "r2", "slope", "tf_at"],
            Self::Angle | Self::Box => &["r", "r2"],
        }
    }
}

/// The dimensions of a profile. Those that a form does not use are ignored.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Dimensions {
    /// Depth (angle: the upright leg).
    pub h: f64,
    /// Width of the flanges; of an I its lower one (angle: the other leg).
    pub b: f64,
    /// Width of an I's upper flange, if it differs.
    pub b2: Option<f64>,
    /// Thickness of the web, of an angle's legs (there also called `t`), of a box's upright walls.
    pub tw: f64,
    /// Thickness of the flanges; of an I its lower one; of a box's level walls.
    pub tf: f64,
    /// Thickness of an I's upper flange, if it differs.
    pub tf2: Option<f64>,
    /// Root radius between web and flange; of a box the inside corner radius.
    pub r: f64,
    /// Toe radius at the flange's inner edge; of a box the outside corner radius.
    pub r2: f64,
    /// Slope of the flange's inner face, per cent; the flange is thicker at the web.
    pub slope: f64,
    /// Distance from the flange's edge at which `tf` is measured; default a quarter of the flange for
    /// I and tee, half of it for channels, as rolled sections are usually given (common practice).
    pub tf_at: Option<f64>,
}

/// A dimension that does not fit.
#[derive(Clone, Debug, PartialEq)]
pub struct ProfileFault {
    /// The dimension's key.
    pub key: &'static str,
    /// What is wrong with it.
    pub message: String,
    /// The value that it must stay below (or at most have), if there is one.
    pub limit: Option<f64>,
}

/// The outline of a profile.
///
/// # Errors
/// Every dimension that does not fit, with the largest that does where that can be said.
pub fn profile(form: Form, d: &Dimensions) -> Result<Outline, Vec<ProfileFault>> {
    let faults = misfits(form, d);
    if !faults.is_empty() {
        return Err(faults);
    }
    let (outer, inner) = corners(form, d);
    let mut faults: Vec<ProfileFault> = Vec::new();
    let mut ring = |corners: &[(Corner, &'static str)]| {
        let plain: Vec<Corner> = corners.iter().map(|c| c.0).collect();
        ring_from_corners(&plain)
            .map_err(|list| {
                for (i, fault) in list {
                    let key = corners[i].1;
                    let (message, limit) = match fault {
                        CornerFault::RoundTooLarge { largest, .. } => {
                            (format!("the radius `{key}` does not fit"), Some(largest))
                        }
                        other => (other.to_string(), None),
                    };
                    // Symmetric corners say the same thing.
                    if !faults.iter().any(|f| f.key == key) {
                        faults.push(ProfileFault {
                            key,
                            message,
                            limit,
                        });
                    }
                }
            })
            .ok()
    };
    let outer = ring(&outer);
    let holes = if inner.is_empty() {
        Some(Vec::new())
    } else {
        ring(&inner).map(|r| vec![r])
    };
    match (outer, holes) {
        (Some(outer), Some(holes)) => Ok(Outline { outer, holes }),
        _ => Err(faults),
    }
}

/// Thickness of a sloped flange at its edge and at the web's face.
fn flange(form: Form, d: &Dimensions, b: f64, tf: f64) -> (f64, f64) {
    let reach = match form {
        Form::Channel => b - d.tw,
        _ => 0.5 * (b - d.tw),
    };
    let slope = 0.01 * d.slope;
    let at = d.tf_at.unwrap_or(match form {
        Form::Channel => 0.5 * b,
        _ => 0.25 * b,
    });
    (tf - slope * at, tf + slope * (reach - at))
}

/// Dimensions that contradict each other before any radius is looked at.
fn misfits(form: Form, d: &Dimensions) -> Vec<ProfileFault> {
    let mut faults = Vec::new();
    let mut below = |key: &'static str, value: f64, limit: f64, why: &str| {
        if value.is_nan() || value >= limit {
            faults.push(ProfileFault {
                key,
                message: format!("`{key}` must be less than {why}"),
                limit: Some(limit),
            });
        }
    };
    let (b2, tf2) = (d.b2.unwrap_or(d.b), d.tf2.unwrap_or(d.tf));
    match form {
        Form::I => {
            below("tw", d.tw, d.b.min(b2), "the width of the flanges");
            below("tf", d.tf, d.h - tf2, "the depth less the other flange");
        }
        Form::Channel => {
            below("tw", d.tw, d.b, "the width of the flanges");
            below("tf", d.tf, 0.5 * d.h, "half the depth");
        }
        Form::Angle => below("t", d.tw, d.h.min(d.b), "the shorter leg"),
        Form::Tee => {
            below("tw", d.tw, d.b, "the width of the flange");
            below("tf", d.tf, d.h, "the depth");
        }
        Form::Box => {
            below("tw", d.tw, 0.5 * d.b, "half the width");
            below("tf", d.tf, 0.5 * d.h, "half the depth");
        }
    }
    if matches!(form, Form::I | Form::Channel | Form::Tee) && d.slope != 0.0 && faults.is_empty() {
        let (tip, root) = flange(form, d, d.b, d.tf);
        let (tip2, root2) = flange(form, d, b2, tf2);
        let room = match form {
            Form::I => d.h - root - root2,
            Form::Channel => d.h - 2.0 * root,
            _ => d.h - root,
        };
        if tip <= 0.0 || (form == Form::I && tip2 <= 0.0) || room <= 0.0 {
            faults.push(ProfileFault {
                key: "slope",
                message: "the slope leaves no flange at its edge or no web between the flanges"
                    .into(),
                limit: None,
            });
        }
    }
    faults
}

type Keyed = (Corner, &'static str);

fn sharp(x: f64, y: f64) -> Keyed {
    let corner = Corner {
        at: Point::new(x, y),
        round: None,
        via: None,
    };
    (corner, "")
}

fn rounded(x: f64, y: f64, r: f64, key: &'static str) -> Keyed {
    let mut out = sharp(x, y);
    out.0.round = (r != 0.0).then_some(r);
    out.1 = key;
    out
}

/// Corners of the outer edge and of the hole, anticlockwise.
fn corners(form: Form, d: &Dimensions) -> (Vec<Keyed>, Vec<Keyed>) {
    let root = |x: f64, y: f64| rounded(x, y, d.r, "r");
    let toe = |x: f64, y: f64| rounded(x, y, d.r2, "r2");
    let (h, b) = (d.h, d.b);
    match form {
        Form::I => {
            let (b2, tf2) = (d.b2.unwrap_or(b), d.tf2.unwrap_or(d.tf));
            let (tip, at_web) = flange(form, d, b, d.tf);
            let (tip2, at_web2) = flange(form, d, b2, tf2);
            let (w, x, x2, y) = (0.5 * d.tw, 0.5 * b, 0.5 * b2, 0.5 * h);
            let outer = vec![
                sharp(-x, -y),
                sharp(x, -y),
                toe(x, -y + tip),
                root(w, -y + at_web),
                root(w, y - at_web2),
                toe(x2, y - tip2),
                sharp(x2, y),
                sharp(-x2, y),
                toe(-x2, y - tip2),
                root(-w, y - at_web2),
                root(-w, -y + at_web),
                toe(-x, -y + tip),
            ];
            (outer, Vec::new())
        }
        Form::Channel => {
            let (tip, at_web) = flange(form, d, b, d.tf);
            let y = 0.5 * h;
            let outer = vec![
                sharp(0.0, -y),
                sharp(b, -y),
                toe(b, -y + tip),
                root(d.tw, -y + at_web),
                root(d.tw, y - at_web),
                toe(b, y - tip),
                sharp(b, y),
                sharp(0.0, y),
            ];
            (outer, Vec::new())
        }
        Form::Angle => {
            let t = d.tw;
            let outer = vec![
                sharp(0.0, 0.0),
                sharp(b, 0.0),
                toe(b, t),
                root(t, t),
                toe(t, h),
                sharp(0.0, h),
            ];
            (outer, Vec::new())
        }
        Form::Tee => {
            let (tip, at_web) = flange(form, d, b, d.tf);
            let (w, x) = (0.5 * d.tw, 0.5 * b);
            let outer = vec![
                sharp(-w, -h),
                sharp(w, -h),
                root(w, -at_web),
                toe(x, -tip),
                sharp(x, 0.0),
                sharp(-x, 0.0),
                toe(-x, -tip),
                root(-w, -at_web),
            ];
            (outer, Vec::new())
        }
        Form::Box => {
            let (x, y) = (0.5 * b, 0.5 * h);
            let (u, v) = (x - d.tw, y - d.tf);
            (
                vec![toe(-x, -y), toe(x, -y), toe(x, y), toe(-x, y)],
                vec![root(-u, -v), root(u, -v), root(u, v), root(-u, v)],
            )
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn forms_have_the_sides_that_their_radii_ask_for() {
        let d = Dimensions {
            h: 300.0,
            b: 150.0,
            tw: 7.1,
            tf: 10.7,
            r: 15.0,
            ..Dimensions::default()
        };
        assert_eq!(profile(Form::I, &d).expect("fits").outer.sides.len(), 16);
        assert_eq!(
            profile(Form::Channel, &d).expect("fits").outer.sides.len(),
            10
        );
        assert_eq!(profile(Form::Tee, &d).expect("fits").outer.sides.len(), 10);
        let sloped = Dimensions {
            slope: 8.0,
            r2: 5.0,
            ..d
        };
        assert_eq!(
            profile(Form::Channel, &sloped)
                .expect("fits")
                .outer
                .sides
                .len(),
            12
        );
    }

    #[test]
    fn misfits_name_their_key_and_limit() {
        let d = Dimensions {
            h: 100.0,
            b: 50.0,
            tw: 60.0,
            tf: 70.0,
            ..Dimensions::default()
        };
        let faults = profile(Form::I, &d).expect_err("web wider than flange");
        let keys: Vec<_> = faults.iter().map(|f| f.key).collect();
        assert_eq!(keys, ["tw", "tf"]);
        let d = Dimensions {
            tw: 5.0,
            tf: 8.0,
            r: 40.0,
            ..d
        };
        let faults = profile(Form::I, &d).expect_err("radius larger than the flange");
        assert_eq!(faults[0].key, "r");
        assert!((faults[0].limit.expect("a limit") - 22.5).abs() < 1e-9);
    }
}
