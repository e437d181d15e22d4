//! `many`: one row a section, on all cores, in a file that may be gone on with.

use std::io::{ErrorKind, IsTerminal, Write, stderr};
use std::num::NonZero;
use std::path::{Path, PathBuf};
use std::sync::atomic::Ordering;
use std::time::Instant;

use clap::Args;
use indicatif::{ProgressBar, ProgressDrawTarget, ProgressState, ProgressStyle};
use rayon::prelude::*;
use sectile_solver::quantity::Quantity;

use super::{Outcome, interrupt};
use crate::answer::Wanted;
use crate::batch::answer::{Answer, answer, key};
use crate::batch::chart;
use crate::batch::columns::{self, Columns};
use crate::batch::job::{self, Input, Job};
use crate::batch::output::{self, Existing, Output};
use crate::batch::row::Cell;
use crate::batch::work;
use crate::read::file::name_of;
use crate::read::vary;
use crate::write::{CAUTION, files};

/// Options of `many`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile many variants/ --out variants.csv\n  \
    sectile many *.section.toml --columns area,torsion_constant --bounds > rows.csv\n  \
    sectile many variants/ --out variants.csv --resume     go on after an interruption\n  \
    sectile many sweep.section.toml --out sweep.csv --chart torsion_constant,shear_centre_x\n\n\
    A file with tables [[vary]] gives a row for each point of its sweep:\n  \
    [[vary]]\n  \
    key = \"piece.web.plate.t\"      # the path to the value that varies\n  \
    values = [6, 8, 10]            # or from = 6, to = 10, steps = 2: three values\n\n\
    Rows hold properties, not actions. They are in the order of the sections. A failed section has\n\
    its row too, with the reason under `error`, and is listed at the end.\n\n\
    Exit codes: 0 all answered; 1 some failed or missed the tolerance; 2 none could be answered;\n\
    130 interrupted, with whole rows.")]
pub struct ManyArgs {
    /// The section files; a folder stands for the *.section.toml in it, sorted by name.
    #[arg(required = true, value_name = "FILE")]
    pub files: Vec<PathBuf>,
    /// Append the rows to this file, .csv or .jsonl (a JSON object a line). Default: CSV on standard
    /// output.
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
    /// The properties of a row, separated by commas, by the keys of results.json; `all` for every one.
    #[arg(long, value_name = "KEYS", value_parser = keys)]
    pub columns: Option<Keys>,
    /// Put the bounds of each property beside it, as KEY_low and KEY_high.
    #[arg(long)]
    pub bounds: bool,
    /// Half-width of the bounds over the value, for every figure that is not exact (for centres: over
    /// the polar radius). `solve` has 1e-4.
    #[arg(long, default_value = "1e-3", value_name = "T", value_parser = super::tolerance)]
    pub tolerance: f64,
    /// Order of the finite elements, 1 to 6; by default the fastest for the tolerance.
    #[arg(long, value_name = "P", value_parser = super::order)]
    pub order: Option<usize>,
    /// Stop refining before a system has more unknowns than this; the bounds stay true.
    #[arg(long, default_value_t = 2_000_000, value_name = "N")]
    pub max_unknowns: usize,
    /// Go on with the output after its last whole row; the rows in it must be of the first sections.
    #[arg(long, requires = "out")]
    pub resume: bool,
    /// Begin an output that exists anew.
    #[arg(long, requires = "out", conflicts_with = "resume")]
    pub force: bool,
    /// Stop at the first section that fails, after its row.
    #[arg(long)]
    pub stop_at_failure: bool,
    /// Draw these properties against the varied values: an SVG beside the output, for one file with one
    /// or two tables [[vary]].
    #[arg(long, value_name = "KEYS", value_parser = keys, requires = "out")]
    pub chart: Option<Keys>,
    /// Show no progress and no summary; failures are listed all the same.
    #[arg(long)]
    pub quiet: bool,
}

/// Properties named on the command line.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Keys(pub Vec<Quantity>);

fn keys(text: &str) -> Result<Keys, String> {
    columns::properties(text).map(Keys)
}

/// How the rows went.
#[derive(Debug, Default)]
struct Tally {
    answered: usize,
    missed: usize,
    failures: Vec<String>,
    /// Every row as plain texts, where a chart is to be drawn of them.
    rows: Vec<Vec<String>>,
    broken: Option<std::io::Error>,
}

/// Runs the command.
#[must_use]
pub fn run(args: &ManyArgs) -> Outcome {
    match prepared(args) {
        Ok(prepared) => answered(args, prepared),
        Err(message) => {
            let _ = writeln!(stderr(), "{message}");
            Outcome::NoAnswer
        }
    }
}

struct Prepared {
    inputs: Vec<Input>,
    jobs: Vec<Job>,
    columns: Columns,
    output: Output,
    done: Vec<Vec<String>>,
    chart: Option<PathBuf>,
}

fn prepared(args: &ManyArgs) -> Result<Prepared, String> {
    if let Some(out) = &args.out {
        output::format(out)?;
    }
    let files = job::files(&args.files)?;
    let inputs: Vec<Input> = files.par_iter().map(|file| job::input(file)).collect();
    let mut properties = args
        .columns
        .as_ref()
        .map_or_else(|| columns::DEFAULT.to_vec(), |keys| keys.0.clone());
    let chart = chart_path(args, &inputs)?;
    for &drawn in args.chart.iter().flat_map(|keys| &keys.0) {
        if !properties.contains(&drawn) {
            properties.push(drawn);
        }
    }
    let columns = Columns::new(
        properties,
        args.bounds,
        inputs.iter().map(|input| &input.sweep),
    );
    let jobs = job::jobs(&inputs);
    let existing = match (args.resume, args.force) {
        (true, _) => Existing::Resume,
        (_, true) => Existing::Replace,
        _ => Existing::Keep,
    };
    let (output, done) = match &args.out {
        None => (Output::standard(&columns), Vec::new()),
        Some(path) => {
            // The rows are compared before anything of the file is changed.
            if existing == Existing::Resume {
                let rows = output::rows(path, &columns)?;
                let keys: Vec<Vec<Cell>> = jobs
                    .iter()
                    .map(|job| {
                        let input = &inputs[job.input];
                        key(input, &vary::at(&input.sweep, job.point), &columns)
                    })
                    .collect();
                output::check(path, &columns, &rows, &keys, args.tolerance)?;
            }
            Output::open(path, &columns, existing)?
        }
    };
    Ok(Prepared {
        inputs,
        jobs,
        columns,
        output,
        done,
        chart,
    })
}

/// Where the chart goes, if one is asked for and can be drawn.
fn chart_path(args: &ManyArgs, inputs: &[Input]) -> Result<Option<PathBuf>, String> {
    let (Some(_), Some(out)) = (&args.chart, &args.out) else {
        return Ok(None);
    };
    let [input] = inputs else {
        return Err("--chart draws the sweep of one file; name one".into());
    };
    if let Some(refused) = &input.refused {
        return Err(format!("{}: {refused}", input.name));
    }
    if !(1..=2).contains(&input.sweep.len()) {
        return Err(format!(
            "--chart draws a sweep of one or two tables [[vary]], and {} has {}",
            input.name,
            match input.sweep.len() {
                0 => "none".to_owned(),
                n => n.to_string(),
            }
        ));
    }
    let path = out.with_extension("svg");
    if path.exists() && !args.resume && !args.force {
        return Err(format!(
            "{} exists already and was left as it is; name another output, or replace both with --force",
            name_of(&path)
        ));
    }
    Ok(Some(path))
}

fn answered(args: &ManyArgs, prepared: Prepared) -> Outcome {
    let Prepared {
        inputs,
        jobs,
        columns,
        mut output,
        done,
        chart,
    } = prepared;
    let wanted = Wanted {
        tolerance: args.tolerance,
        order: args.order,
        max_unknowns: args.max_unknowns,
    };
    let mut tally = Tally::default();
    let before = done.len();
    for (row, job) in done.into_iter().zip(&jobs) {
        let cell = |head: &str| {
            let place = columns.place(head)?;
            row.get(place).filter(|cell| !cell.is_empty())
        };
        match cell("error") {
            Some(error) => tally
                .failures
                .push(format!("{}: {error}", name(&inputs, *job))),
            None => tally.count(cell("tolerance_reached").is_some_and(|cell| cell == "true")),
        }
        if chart.is_some() {
            tally.rows.push(row);
        }
    }
    let bar = bar(jobs.len(), before, !args.quiet && stderr().is_terminal());
    let stop = interrupt::gently();
    let start = Instant::now();
    work::in_order(
        before..jobs.len(),
        NonZero::new(rayon::current_num_threads()).unwrap_or(NonZero::<usize>::MIN),
        stop,
        &|i| answer(&inputs[jobs[i].input], jobs[i], &columns, wanted),
        &mut |i, answer: Answer| {
            if let Err(error) = output.write(&answer.row) {
                tally.broken = Some(error);
                return false;
            }
            bar.inc(1);
            if chart.is_some() {
                let plain = answer.row.iter().map(|cell| cell.plain().to_owned());
                tally.rows.push(plain.collect());
            }
            match answer.error {
                None => tally.count(answer.reached),
                Some(error) => {
                    tally
                        .failures
                        .push(format!("{}: {error}", name(&inputs, jobs[i])));
                    if args.stop_at_failure {
                        return false;
                    }
                }
            }
            true
        },
    );
    bar.finish_and_clear();
    let seconds = start.elapsed().as_secs_f64();
    let written = tally.answered + tally.failures.len();
    let interrupted = stop.load(Ordering::SeqCst) && written < jobs.len();

    let mut told = String::new();
    for failure in &tally.failures {
        told.push_str(&format!("{failure}\n"));
    }
    if !args.quiet {
        told.push_str(&summary(&tally, written - before, before, seconds));
    }
    if interrupted {
        told.push_str(&format!(
            "Interrupted after {written} of {} rows{}\n",
            jobs.len(),
            match args.out {
                Some(_) => "; the same command with --resume goes on.",
                None => ".",
            }
        ));
    }
    let mut outcome = outcome(&tally, jobs.len());
    // A reader that closed the pipe has all that it wants.
    if let Some(error) = tally
        .broken
        .as_ref()
        .filter(|e| e.kind() != ErrorKind::BrokenPipe)
    {
        told.push_str(&format!("The rows could not be written: {error}\n"));
        outcome = Outcome::NoAnswer;
    }
    if let (Some(path), Some(keys), false) = (&chart, &args.chart, interrupted)
        && let Err(message) = draw(path, &inputs[0], &columns, &tally.rows, keys)
    {
        told.push_str(&format!("{message}\n"));
        outcome = outcome.max(Outcome::Finding);
    }
    let _ = stderr().write_all(told.as_bytes());
    if interrupted {
        Outcome::Interrupted
    } else {
        outcome
    }
}

impl Tally {
    fn count(&mut self, reached: bool) {
        self.answered += 1;
        self.missed += usize::from(!reached);
    }
}

fn outcome(tally: &Tally, jobs: usize) -> Outcome {
    if tally.answered == 0 && jobs > 0 {
        Outcome::NoAnswer
    } else if tally.missed > 0 || !tally.failures.is_empty() {
        Outcome::Finding
    } else {
        Outcome::Answered
    }
}

fn summary(tally: &Tally, new: usize, before: usize, seconds: f64) -> String {
    let rows = |n: usize| {
        if n == 1 {
            "1 row".into()
        } else {
            format!("{n} rows")
        }
    };
    let mut text = format!("{} in {seconds:.1} s", rows(new));
    if new > 1 && seconds > 0.0 {
        text.push_str(&format!(", {:.0} a second", new as f64 / seconds));
    }
    if before > 0 {
        text.push_str(&format!("; {before} were there already"));
    }
    if tally.missed > 0 {
        text.push_str(&format!("; {} missed the tolerance", tally.missed));
    }
    if !tally.failures.is_empty() {
        text.push_str(&format!("; {} failed", tally.failures.len()));
    }
    format!("{text}\n{CAUTION}\n")
}

/// What a row is of, in messages: the file, and where it varies what is set.
fn name(inputs: &[Input], job: Job) -> String {
    let input = &inputs[job.input];
    let set: Vec<String> = input
        .sweep
        .iter()
        .zip(vary::at(&input.sweep, job.point))
        .map(|(vary, setting)| format!("{} = {}", vary.key, setting.label))
        .collect();
    if set.is_empty() {
        input.name.clone()
    } else {
        format!("{} ({})", input.name, set.join(", "))
    }
}

fn bar(rows: usize, before: usize, on: bool) -> ProgressBar {
    let target = if on {
        ProgressDrawTarget::stderr()
    } else {
        ProgressDrawTarget::hidden()
    };
    let bar = ProgressBar::with_draw_target(Some(rows as u64), target);
    let template = "{wide_bar} {pos}/{len}, {rate} a second, {eta} left";
    if let Ok(style) = ProgressStyle::with_template(template) {
        let rate = |state: &ProgressState, out: &mut dyn std::fmt::Write| {
            let _ = write!(out, "{:.0}", state.per_sec());
        };
        bar.set_style(style.with_key("rate", rate).progress_chars("█▌ "));
    }
    // Rows that were there before count for the length, not for the rate.
    bar.set_position(before as u64);
    bar.reset_eta();
    bar
}

fn draw(
    path: &Path,
    input: &Input,
    columns: &Columns,
    rows: &[Vec<String>],
    keys: &Keys,
) -> Result<(), String> {
    let svg = chart::draw(input, columns, rows, &keys.0)?;
    files::write(path, &svg).map_err(|error| error.to_string())
}
