//! `profile`: a rolled or built-up form by its dimensions.

use sectile_mesh::outline::piece::Outline;
use sectile_mesh::outline::profile::{Form, ProfileFault};
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::quantity::Dimension;
use super::ring::{RingText, at_most};
use super::shape::written_whole;

const FORMS: &[&str] = &["I", "channel", "angle", "tee", "box"];

/// Keys of each form beside `form`: those it needs, then those it can have.
fn keys(form: &str) -> (&'static [&'static str], &'static [&'static str]) {
    match form {
        "I" => (&["h", "b", "tw", "tf"], &["b2", "tf2", "r", "r2", "slope"]),
        "angle" => (&["h", "b", "t"], &["r", "r2"]),
        "box" => (&["h", "b"], &["t", "tw", "tf", "r", "r2"]),
        _ => (&["h", "b", "tw", "tf"], &["r", "r2", "slope"]),
    }
}

/// What a key of a profile states.
fn meaning(key: &str) -> &'static str {
    match key {
        "h" => "the height `h` over all",
        "b" => "the width `b` over all",
        "t" => "the thickness `t`",
        "tw" => "the web thickness `tw`",
        "tf" => "the flange thickness `tf`",
        "b2" => "the width `b2` of the upper flange",
        "tf2" => "the thickness `tf2` of the upper flange",
        "r" => "the root radius `r`",
        "r2" => "the toe radius `r2`",
        _ => "the flange slope `slope`",
    }
}

/// The outline that `value` states.
pub(super) fn read(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let Some(table) = value.as_table() else {
        reader.wrong_type(
            value,
            "a profile",
            "a table such as { form = \"I\", h = 300, b = 150, tw = 7, tf = 11, r = 15 }",
        );
        return None;
    };
    let Some(form) = table.get("form") else {
        reader.faults.push(Fault::at(
            span(value),
            "no `form` here",
            "a profile needs `form`",
            "give one of \"I\", \"channel\", \"angle\", \"tee\" or \"box\"",
        ));
        return None;
    };
    let form = reader.choice(form, "the form of a profile", FORMS)?;
    let (needed, optional) = keys(form);
    let known = [&["form"], needed, optional].concat();
    let what = format!("the form \"{form}\"");
    let fields = Fields::open(reader, value, &what, &known)?;

    let mut sound = true;
    let mut size = |reader: &mut Reader, key: &str| {
        let value = if needed.contains(&key) {
            fields.need(
                reader,
                key,
                &format!("give {}, as in {key} = 12", meaning(key)),
            )
        } else {
            fields.get(key)
        };
        let read = value.map(|value| match key {
            "slope" => reader.quantity(value, meaning(key), Dimension::Slope),
            "r" | "r2" => reader.length(value, meaning(key)),
            _ => reader.positive(value, meaning(key), Dimension::Length),
        });
        sound &=
            read.is_some_and(|read| read.is_some()) || value.is_none() && !needed.contains(&key);
        read.flatten()
    };
    let mut zero = |key: &str, reader: &mut Reader| size(reader, key).unwrap_or(0.0);
    let (h, b) = (zero("h", reader), zero("b", reader));
    let (r, r2) = (zero("r", reader), zero("r2", reader));
    let form = match form {
        "angle" => Form::Angle {
            h,
            b,
            t: zero("t", reader),
            r,
            r2,
        },
        "box" => {
            let (t, tw, tf) = (size(reader, "t"), size(reader, "tw"), size(reader, "tf"));
            sound &= walls(reader, value, &fields);
            Form::Box {
                h,
                b,
                tw: tw.or(t).unwrap_or(0.0),
                tf: tf.or(t).unwrap_or(0.0),
                r,
                r2,
            }
        }
        other => {
            let (tw, tf) = (zero("tw", reader), zero("tf", reader));
            let slope = zero("slope", reader);
            match other {
                "channel" => Form::Channel {
                    h,
                    b,
                    tw,
                    tf,
                    r,
                    r2,
                    slope,
                },
                "tee" => Form::Tee {
                    h,
                    b,
                    tw,
                    tf,
                    r,
                    r2,
                    slope,
                },
                _ => Form::I {
                    h,
                    b,
                    tw,
                    tf,
                    b2: size(reader, "b2").unwrap_or(b),
                    tf2: size(reader, "tf2").unwrap_or(tf),
                    r,
                    r2,
                    slope,
                },
            }
        }
    };
    if !sound {
        return None;
    }
    match form.outline() {
        Ok(outline) => Some(written_whole(value, "profile", outline)),
        Err(faults) => {
            let mut told: Vec<Fault> = faults
                .iter()
                .map(|fault| profile_fault(fault, value, &fields))
                .collect();
            // Where both flanges are stated by one key, its fault is told once.
            told.dedup_by(|a, b| a.marks == b.marks);
            reader.faults.append(&mut told);
            None
        }
    }
}

/// Whether a box has its walls stated once: `t` for all four, or `tw` and `tf`.
fn walls(reader: &mut Reader, value: &Value<'_>, fields: &Fields<'_>) -> bool {
    let has = |key| fields.get(key).is_some();
    let remedy = "give `t` for all four walls, or `tw` (left and right) and `tf` (top and bottom)";
    let fault = match (has("t"), has("tw"), has("tf")) {
        (true, false, false) | (false, true, true) => return true,
        (true, _, _) => {
            let other = if has("tw") { "tw" } else { "tf" };
            Fault::at(
                fields.key_span(other).unwrap_or(span(value)),
                "",
                format!("the form \"box\" has its walls stated twice, by `t` and by `{other}`"),
                remedy,
            )
        }
        _ => Fault::at(
            span(value),
            "",
            "the form \"box\" needs the thickness of its walls",
            remedy,
        ),
    };
    reader.faults.push(fault);
    false
}

/// The fault that the maker of forms found, at the key that it names.
fn profile_fault(fault: &ProfileFault, value: &Value<'_>, fields: &Fields<'_>) -> Fault {
    let at = |name: &str| {
        let value_of = |key: &str| fields.get(key).map(span);
        // A wall of a box may be stated by `t`, the upper flange by the lower one's keys.
        let stand_in = match name {
            "tw" | "tf" => value_of("t"),
            "b2" => value_of("b"),
            "tf2" => value_of("tf"),
            _ => None,
        };
        value_of(name).or(stand_in).unwrap_or(span(value))
    };
    match *fault {
        ProfileFault::NotFinite { name } => Fault::at(
            at(name),
            "not finite",
            format!("{} must be a finite number", meaning(name)),
            "give a number such as 12.5",
        ),
        ProfileFault::NotPositive { name, .. } => Fault::at(
            at(name),
            "not positive",
            format!("{} must be greater than zero", meaning(name)),
            "give a number such as 12.5",
        ),
        ProfileFault::Negative { name, .. } => Fault::at(
            at(name),
            "negative",
            format!("{} must not be negative", meaning(name)),
            format!("leave `{name}` out for none"),
        ),
        ProfileFault::NotBelow { name, given, limit } => Fault::at(
            at(name),
            format!("must be less than {}", at_most(limit)),
            format!(
                "{} of {given} leaves no room for the rest of the profile",
                meaning(name)
            ),
            format!(
                "it must be less than {} with the other dimensions as they are",
                at_most(limit)
            ),
        ),
        ProfileFault::TooLarge {
            name,
            given,
            largest,
        } => Fault::at(
            at(name),
            format!("at most {} fits", at_most(largest)),
            format!("{} of {given} does not fit", meaning(name)),
            format!(
                "the largest that fits, the other dimensions as they are, is {}",
                at_most(largest)
            ),
        ),
    }
}
