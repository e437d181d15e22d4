//! `new`: commented starter files, one a form, with invented figures.

use std::fs::OpenOptions;
use std::io::{ErrorKind, Write, stderr, stdout};
use std::path::PathBuf;

use clap::Args;

use super::Outcome;
use crate::read::near::{listed, nearest};

/// The forms, the one that is written when none is asked for first.
pub const FORMS: &[&str] = &[
    "outline", "I", "channel", "angle", "tee", "box", "plates", "tube", "welded",
];

/// A form that there is no starter file for.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("there is no starter file \"{given}\"; the nearest is \"{near}\", and there are {known}", known = listed(FORMS, "and"))]
pub struct UnknownForm {
    /// The form that was asked for.
    pub given: String,
    /// The form that comes nearest.
    pub near: &'static str,
}

/// The starter file of `form`, which may be written in any case.
///
/// # Errors
/// If there is none of that name.
pub fn starter(form: &str) -> Result<String, UnknownForm> {
    let known = FORMS
        .iter()
        .find(|known| known.eq_ignore_ascii_case(form.trim()));
    let text = match known.copied() {
        Some("outline") => include_str!("starter/outline.section.toml"),
        Some("I") => include_str!("starter/I.section.toml"),
        Some("channel") => include_str!("starter/channel.section.toml"),
        Some("angle") => include_str!("starter/angle.section.toml"),
        Some("tee") => include_str!("starter/tee.section.toml"),
        Some("box") => include_str!("starter/box.section.toml"),
        Some("plates") => include_str!("starter/plates.section.toml"),
        Some("tube") => include_str!("starter/tube.section.toml"),
        Some("welded") => include_str!("starter/welded.section.toml"),
        _ => {
            return Err(UnknownForm {
                given: form.to_owned(),
                near: nearest(form, FORMS).unwrap_or(FORMS[0]),
            });
        }
    };
    Ok(text.to_owned())
}

/// Options of `new`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile new                        an outline of corners, arcs and a hole, to standard output\n  \
    sectile new I --out beam.section.toml")]
pub struct NewArgs {
    /// The form to start from: outline, I, channel, angle, tee, box, plates, tube or welded.
    #[arg(default_value = "outline", value_name = "FORM")]
    pub form: String,
    /// Write to this file, which must not exist yet, instead of standard output.
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
}

/// Runs the command.
#[must_use]
pub fn run(args: &NewArgs) -> Outcome {
    let text = match starter(&args.form) {
        Ok(text) => text,
        Err(unknown) => return refuse(&unknown.to_string()),
    };
    let Some(path) = &args.out else {
        // A reader that closed the pipe has all that it wants.
        let _ = stdout().write_all(text.as_bytes());
        return Outcome::Answered;
    };
    let written = OpenOptions::new()
        .write(true)
        .create_new(true)
        .open(path)
        .and_then(|mut file| file.write_all(text.as_bytes()));
    match written {
        Ok(()) => Outcome::Answered,
        Err(error) if error.kind() == ErrorKind::AlreadyExists => refuse(&format!(
            "{} exists already; name another file or remove it first",
            path.display()
        )),
        Err(error) => refuse(&format!("{} could not be written: {error}", path.display())),
    }
}

fn refuse(message: &str) -> Outcome {
    let _ = writeln!(stderr(), "{message}");
    Outcome::NoAnswer
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::read::section_from_text;

    #[test]
    fn each_starter_file_reads_without_fault_and_says_that_it_is_invented() {
        for form in FORMS {
            let text = starter(form).expect("every form has its file");
            assert!(text.contains("invented"), "{form}");
            let read = section_from_text(form, &text).unwrap_or_else(|faults| panic!("{faults}"));
            assert!(!read.section.assumed_material, "{form}");
            assert_eq!(read.domain.parts, 1, "{form}");
        }
        assert_eq!(starter("i"), starter("I"));
    }

    #[test]
    fn an_unknown_form_names_the_nearest() {
        let fault = starter("chanel").expect_err("there is none");
        assert_eq!(fault.near, "channel");
        assert!(fault.to_string().contains("`welded`"));
    }
}
