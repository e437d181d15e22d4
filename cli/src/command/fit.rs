//! `fit`: the dimension at which a property meets a target, and a section file with it.

use std::cell::Cell;
use std::io::{Write, stderr, stdout};
use std::path::{Path, PathBuf};

use clap::Args;
use sectile_solver::figure::Figure;
use sectile_solver::quantity::Quantity;

use super::{Outcome, solve};
use crate::answer::{Wanted, solution};
use crate::batch::columns;
use crate::batch::search::{Found, Trial, search};
use crate::read::file::name_of;
use crate::read::vary::{self, Dimension};
use crate::read::{section_from_text, show, text_from_path};
use crate::section::Units;
use crate::write::json::number;
use crate::write::units::{ascii, pretty};
use crate::write::{CAUTION, digits, files};

/// Options of `fit`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile fit girder.section.toml --goal \"second_moment_x = 2.1e9\" --vary piece.web.plate.t --from 6 --to 20\n  \
    sectile fit channel.section.toml --goal \"shear_centre_x = 0\" --vary piece.lip.plate.t \\\n      \
        --from 2 --to 20 --out balanced.section.toml\n\n\
    The property must miss the target on one side at one end and on the other at the other end.\n\n\
    Exit codes: 0 the target is met; 2 it is not, or the file is at fault; nothing is written then.")]
pub struct FitArgs {
    /// The section file; it stays as it is.
    #[arg(value_name = "FILE")]
    pub file: PathBuf,
    /// The property, by its key in results.json, and its target in the unit that it has there.
    #[arg(long, value_name = "KEY = VALUE")]
    pub goal: String,
    /// The path to the dimension that is sought, such as piece.web.plate.t or piece.web.plate.to[1];
    /// given several times, these dimensions are kept alike.
    #[arg(long, value_name = "PATH", required = true)]
    pub vary: Vec<String>,
    /// One end of the range in which it is sought, in the unit that the file states it in.
    #[arg(long, value_name = "NUMBER", allow_negative_numbers = true)]
    pub from: f64,
    /// The other end.
    #[arg(long, value_name = "NUMBER", allow_negative_numbers = true)]
    pub to: f64,
    /// Write the section file with the dimension found here. Default: NAME-fitted.section.toml beside
    /// the file.
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
    /// Replace the file to write if it exists; never the section file itself.
    #[arg(long)]
    pub force: bool,
    /// Half-width of the bounds over the value, for every figure that is not exact.
    #[arg(long, default_value = "1e-5", value_name = "T", value_parser = super::tolerance)]
    pub tolerance: f64,
    /// Order of the finite elements, 1 to 6; by default the fastest for the tolerance.
    #[arg(long, value_name = "P", value_parser = super::order)]
    pub order: Option<usize>,
    /// Stop refining before a system has more unknowns than this; the bounds stay true.
    #[arg(long, default_value_t = 2_000_000, value_name = "N")]
    pub max_unknowns: usize,
}

/// Runs the command.
#[must_use]
pub fn run(args: &FitArgs) -> Outcome {
    match fitted(args) {
        Ok(()) => Outcome::Answered,
        Err(message) => {
            let _ = writeln!(stderr(), "{message}");
            Outcome::NoAnswer
        }
    }
}

impl FitArgs {
    /// What is sought, as messages call it.
    fn sought(&self) -> String {
        self.vary.join(" = ")
    }
}

/// A property and its target.
#[derive(Clone, Debug, PartialEq)]
struct Goal {
    property: Quantity,
    target: f64,
    /// The unit that the target was given with.
    unit: Option<String>,
}

fn goal(text: &str) -> Result<Goal, String> {
    let misread = || {
        format!("the goal \"{text}\" does not read KEY = VALUE, as in \"torsion_constant = 1.2e6\"")
    };
    let (key, value) = text.split_once('=').ok_or_else(misread)?;
    let property = columns::property(key.trim())?;
    let value = value.trim();
    let (figure, unit) = match value.split_once(char::is_whitespace) {
        Some((figure, unit)) => (figure, Some(unit.trim().to_owned())),
        None => (value, None),
    };
    let target: f64 = figure.parse().map_err(|_| misread())?;
    if !target.is_finite() {
        return Err(misread());
    }
    Ok(Goal {
        property,
        target,
        unit,
    })
}

/// A property of one trial.
struct Tried {
    figure: Figure,
    units: Units,
}

fn fitted(args: &FitArgs) -> Result<(), String> {
    let goal = goal(&args.goal)?;
    if !(args.from.is_finite() && args.to.is_finite()) || args.from == args.to {
        return Err("--from and --to must be two different numbers".into());
    }
    let (name, text) = text_from_path(&args.file).map_err(|faults| {
        show::print(&faults);
        format!("{} was not read", name_of(&args.file))
    })?;
    let dimension = vary::dimension(&text, &args.vary)
        .map_err(|(message, remedy)| format!("{name}: {message}. To mend it: {remedy}"))?;
    let out = out(args)?;

    let mut count = 0;
    let last: Cell<Option<(f64, Figure)>> = Cell::new(None);
    let mut tried = |at: f64| -> Result<Trial, String> {
        let Tried { figure, units } = solved(args, &goal, &name, &text, &dimension, at)?;
        if count == 0 {
            say(&heading(args, &goal, &dimension, &units)?);
        }
        count += 1;
        say(&format!(
            "{count:>5}  {:<20}  {:<20}  {:<20}  {}\n",
            number(at),
            short(figure.value),
            short(figure.low),
            short(figure.high)
        ));
        last.set(Some((at, figure)));
        Ok(Trial {
            at,
            excess: figure.value - goal.target,
            met: figure.low <= goal.target && goal.target <= figure.high,
        })
    };
    let found = search(args.from, args.to, &mut tried)?;
    let key = goal.property.key();
    let at = match found {
        Found::Met(trial) => trial.at,
        Found::Bracket(near, far) => {
            let jump = (near.excess - far.excess).abs();
            // Over a millionth of itself a property that does not jump hardly changes.
            if jump > 1e-3 * (goal.target.abs() + near.excess.abs()) {
                return Err(format!(
                    "{key} jumps at {} = {}, from {} to {}: no value meets the target. To mend it: \
                     look at the section on either side, and choose a range without the jump",
                    args.sought(),
                    number(near.at),
                    short(far.excess + goal.target),
                    short(near.excess + goal.target),
                ));
            }
            near.at
        }
        Found::SameSide(a, b) => {
            let side = if a.excess > 0.0 { "above" } else { "below" };
            return Err(format!(
                "{key} is {side} the target at both ends: {} at {} = {}, {} at {}. To mend it: widen \
                 --from and --to until the target {} lies between, or vary another dimension",
                short(a.excess + goal.target),
                args.sought(),
                number(a.at),
                short(b.excess + goal.target),
                number(b.at),
                number(goal.target),
            ));
        }
    };
    let rounded = tidy(at);
    let (at, figure) = match last.get() {
        Some((at, figure)) if at == rounded => (at, figure),
        _ => {
            tried(rounded)?;
            last.get().ok_or("nothing was tried")?
        }
    };
    let written = dimension.set(&text, at);
    let units = section_from_text(&name, &written)
        .map_err(|faults| faults.to_string())?
        .section
        .units;
    files::write(&out, &written).map_err(|error| error.to_string())?;
    let unit = dimension
        .unit
        .as_ref()
        .map_or_else(String::new, |unit| format!(" {unit}"));
    let mut told = format!(
        "\n{} = {}{unit}: {} {} = {} {}\n",
        args.sought(),
        number(at),
        crate::write::wording::name(goal.property),
        goal.property.symbol(),
        digits::print(&figure).line(),
        pretty(goal.property.dimension(), &units),
    );
    if matches!(found, Found::Met(_)) && figure.high > figure.low {
        told.push_str(
            "The target lies within the bounds; a smaller --tolerance finds the dimension more exactly.\n",
        );
    }
    told.push_str(&format!(
        "The section file with it is {}\n{CAUTION}\n",
        name_of(&out)
    ));
    say(&told);
    Ok(())
}

/// Where the section file with the dimension found is to go.
fn out(args: &FitArgs) -> Result<PathBuf, String> {
    let out = args.out.clone().unwrap_or_else(|| {
        let stem = solve::stem(&args.file);
        args.file
            .with_file_name(format!("{stem}-fitted.section.toml"))
    });
    if same_file(&out, &args.file) {
        return Err(format!(
            "{} is the section file itself, which stays as it is; name another file with --out",
            name_of(&out)
        ));
    }
    if out.exists() && !args.force {
        return Err(format!(
            "{} exists already and was left as it is; name another file with --out, or replace it with --force",
            name_of(&out)
        ));
    }
    Ok(out)
}

fn same_file(a: &Path, b: &Path) -> bool {
    match (a.canonicalize(), b.canonicalize()) {
        (Ok(a), Ok(b)) => a == b,
        _ => false,
    }
}

/// The property with the dimension at `at`.
fn solved(
    args: &FitArgs,
    goal: &Goal,
    name: &str,
    text: &str,
    dimension: &Dimension,
    at: f64,
) -> Result<Tried, String> {
    let set = || format!("{} = {}", args.sought(), number(at));
    let read = section_from_text(name, &dimension.set(text, at)).map_err(|faults| {
        show::print(&faults);
        format!(
            "the section cannot be read with {}; choose --from and --to so that every value between \
             makes a section",
            set()
        )
    })?;
    let wanted = Wanted {
        tolerance: args.tolerance,
        order: args.order,
        max_unknowns: args.max_unknowns,
    };
    let solution = solution(&read, wanted, &mut |_| {})
        .map_err(|error| format!("{name} with {}: {error}", set()))?;
    let figure = solution.get(goal.property).ok_or_else(|| {
        format!(
            "{name} has no {} with {}: a section in separate parts has no shear centre, torsion or \
             shear areas, and the mass needs a density",
            goal.property.key(),
            set()
        )
    })?;
    Ok(Tried {
        figure,
        units: read.section.units,
    })
}

/// What is sought, and the heads of the trials.
fn heading(
    args: &FitArgs,
    goal: &Goal,
    dimension: &Dimension,
    units: &Units,
) -> Result<String, String> {
    let property = ascii(goal.property.dimension(), units);
    if let Some(unit) = &goal.unit
        && *unit != property
        && *unit != pretty(goal.property.dimension(), units)
    {
        return Err(format!(
            "{} is in {} in this file, not in {unit}; give its target in {}",
            goal.property.key(),
            if property.is_empty() {
                "no unit"
            } else {
                &property
            },
            if property.is_empty() {
                "no unit"
            } else {
                &property
            },
        ));
    }
    let unit = |unit: &str| match unit {
        "" => String::new(),
        unit => format!(" {unit}"),
    };
    let own = unit(dimension.unit.as_deref().unwrap_or_default());
    Ok(format!(
        "{} = {}{} by {} between {}{own} and {}{own}\n\n{:>5}  {:<20}  {:<20}  {:<20}  {}\n",
        goal.property.key(),
        number(goal.target),
        unit(&property),
        args.sought(),
        number(args.from),
        number(args.to),
        "trial",
        "dimension",
        "property",
        "low",
        "high",
    ))
}

/// To nine digits: more than any of them matter.
fn short(value: f64) -> String {
    number(format!("{value:.8e}").parse().unwrap_or(value))
}

/// The dimension to seven digits, as a drawing may state it.
fn tidy(at: f64) -> f64 {
    format!("{at:.6e}").parse().unwrap_or(at)
}

fn say(text: &str) {
    // A reader that closed the pipe has all that it wants.
    let _ = stdout().write_all(text.as_bytes());
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn goals_are_a_key_and_a_value() {
        let read = goal(" shear_centre_x = -12.5 mm").expect("a goal");
        assert_eq!(read.property, Quantity::ShearCentreX);
        assert_eq!((read.target, read.unit.as_deref()), (-12.5, Some("mm")));
        assert!(goal("shear_centre_x").is_err());
        assert!(goal("area = wide").is_err());
        let message = goal("shear_center_x = 0").expect_err("unknown");
        assert!(message.contains("`shear_centre_x`"), "{message}");
    }
}
