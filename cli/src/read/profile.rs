//! `profile`: a rolled or built-up form by its dimensions.

use sectile_mesh::outline::piece::Outline;
use sectile_mesh::outline::profile::{Dimensions, Form, ProfileFault, profile};
use toml_span::Value;

use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::quantity::Dimension;
use super::ring::{RingText, at_most};
use super::shape::written_whole;

/// What a key of a profile states.
fn meaning(key: &str) -> &'static str {
    match key {
        "h" => "the height `h` over all",
        "b" => "the width `b` over all",
        "t" => "the thickness `t`",
        "tw" => "the web thickness `tw`",
        "tf" => "the flange thickness `tf`",
        "tf_at" => "the distance `tf_at` from the flange's edge",
        "b2" => "the width `b2` of the upper flange",
        "tf2" => "the thickness `tf2` of the upper flange",
        "r" => "the root radius `r`",
        "r2" => "the toe radius `r2`",
        "slope" => "the flange slope `slope`",
        _ => "this dimension",
    }
}

/// The outline that `value` states.
pub(super) fn read(reader: &mut Reader, value: &Value<'_>) -> Option<(Outline, Vec<RingText>)> {
    let names: Vec<&'static str> = Form::ALL.iter().map(|form| form.name()).collect();
    let Some(table) = value.as_table() else {
        let example = "a table such as { form = \"I\", h = 300, b = 150, tw = 7, tf = 11, r = 15 }";
        reader.wrong_type(value, "a profile", example);
        return None;
    };
    let Some(form) = table.get("form") else {
        reader.faults.push(Fault::at(
            span(value),
            "no `form` here",
            "a profile needs `form`",
            format!("give one of \"{}\"", names.join("\", \"")),
        ));
        return None;
    };
    let name = reader.choice(form, "the form of a profile", &names)?;
    let form = Form::ALL.iter().copied().find(|form| form.name() == name)?;
    // A box may have one thickness for all its walls.
    let shorthand: &[&str] = if form == Form::Box { &["t"] } else { &[] };
    let known = [&["form"], form.required(), form.optional(), shorthand].concat();
    let what = format!("the form \"{name}\"");
    let fields = Fields::open(reader, value, &what, &known)?;
    let dimensions = dimensions(reader, &fields, form)?;
    match profile(form, &dimensions) {
        Ok(outline) => Some(written_whole(value, "profile", outline)),
        Err(faults) => {
            let told = faults
                .iter()
                .map(|fault| profile_fault(fault, value, &fields));
            reader.faults.extend(told);
            None
        }
    }
}

/// The dimensions that a form needs or may have; `None` if any of them is faulty.
fn dimensions(reader: &mut Reader, fields: &Fields<'_>, form: Form) -> Option<Dimensions> {
    let one_wall = form == Form::Box && fields.get("t").is_some();
    let mut out = Dimensions::default();
    let mut sound = true;
    for key in form.required().iter().chain(form.optional()).chain(&["t"]) {
        let by_t = one_wall && ["tw", "tf"].contains(key);
        if by_t && let Some(other) = fields.key_span(key) {
            reader.faults.push(Fault::at(
                other,
                "",
                format!("this box has its walls stated twice, by `t` and by `{key}`"),
                "give `t` for all four walls, or `tw` (left and right) and `tf` (top and bottom)",
            ));
            sound = false;
            continue;
        }
        let value = if form.required().contains(key) && !by_t {
            let remedy = if form == Form::Box && *key != "h" && *key != "b" {
                "give `t` for all four walls, or `tw` (left and right) and `tf` (top and bottom)"
                    .to_owned()
            } else {
                format!("give {}, as in {key} = 12", meaning(key))
            };
            let value = fields.need(reader, key, &remedy);
            sound &= value.is_some();
            value
        } else {
            fields.get(key)
        };
        let Some(value) = value else { continue };
        let read = match *key {
            "r" | "r2" | "tf_at" => not_negative(reader, value, meaning(key), Dimension::Length),
            "slope" => not_negative(reader, value, meaning(key), Dimension::Slope),
            _ => reader.positive(value, meaning(key), Dimension::Length),
        };
        let Some(number) = read else {
            sound = false;
            continue;
        };
        match *key {
            "h" => out.h = number,
            "b" => out.b = number,
            "b2" => out.b2 = Some(number),
            "tw" => out.tw = number,
            "tf" => out.tf = number,
            "t" => (out.tw, out.tf) = (number, number),
            "tf2" => out.tf2 = Some(number),
            "r" => out.r = number,
            "r2" => out.r2 = number,
            "slope" => out.slope = number,
            _ => out.tf_at = Some(number),
        }
    }
    sound.then_some(out)
}

fn not_negative(
    reader: &mut Reader,
    value: &Value<'_>,
    what: &str,
    dimension: Dimension,
) -> Option<f64> {
    let number = if dimension == Dimension::Length {
        reader.length(value, what)?
    } else {
        reader.quantity(value, what, dimension)?
    };
    if number >= 0.0 {
        return Some(number);
    }
    reader.faults.push(Fault::at(
        span(value),
        "negative",
        format!("{what} must not be negative"),
        "leave the key out for none",
    ));
    None
}

/// The fault that the maker of profiles found, at the key that it names.
fn profile_fault(fault: &ProfileFault, value: &Value<'_>, fields: &Fields<'_>) -> Fault {
    // The walls of an angle or a box may be stated by `t`.
    let key = fields.get(fault.key).or_else(|| {
        let walls = ["tw", "tf", "t"].contains(&fault.key);
        fields.get("t").filter(|_| walls)
    });
    let range = key.map_or(span(value), span);
    let radius = fault.key == "r" || fault.key == "r2";
    match fault.limit {
        Some(limit) if limit <= 0.0 => Fault::at(
            range,
            "nothing fits",
            fault.message.clone(),
            "the other dimensions leave no room here: change those",
        ),
        Some(limit) if radius => Fault::at(
            range,
            format!("at most {} fits", at_most(limit)),
            fault.message.clone(),
            format!(
                "the largest that fits, the other dimensions as they are, is {}",
                at_most(limit)
            ),
        ),
        Some(limit) => Fault::at(
            range,
            format!("must be less than {}", at_most(limit)),
            fault.message.clone(),
            format!(
                "with the other dimensions as they are it must be less than {}",
                at_most(limit)
            ),
        ),
        None => Fault::at(
            range,
            "",
            fault.message.clone(),
            "check the dimensions against each other",
        ),
    }
}
