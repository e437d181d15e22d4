//! `solve`: section files in; a table on the terminal, results and figures in a folder.

mod answer;
mod folder;
mod terminal;

use std::io::{IsTerminal, Write, stderr};
use std::path::{Path, PathBuf};
use std::time::Instant;

use clap::Args;
use sectile_solver::solution::Note;
use sectile_solver::stress::extreme::DEFAULT_EXCLUSION;

use self::answer::Answer;
use self::folder::write_folder;
use self::terminal::{peak_memory, print};
use super::Outcome;
use super::progress::LevelProgress;
use super::respond::respond;
use crate::answer::{Wanted, solution};
use crate::figure;
use crate::read::fault::Faults;
use crate::read::{ReadSection, section_from_path, show};
use crate::response::Responses;
use crate::write::json::Run;
use crate::write::{digits, files};

/// Options of `solve`.
#[derive(Args, Clone, Debug)]
#[command(after_help = "Examples:\n  \
    sectile solve rail.section.toml\n  \
    sectile solve rail.section.toml --tolerance 1e-6 --out rail-results\n  \
    sectile solve *.section.toml --json --quiet > results.jsonl\n  \
    sectile solve rail.section.toml --report --watch\n\n\
    Exit codes: 0 answered; 1 answered with a finding that you must see; 2 could not answer.")]
pub struct SolveArgs {
    /// The section files.
    #[arg(required = true, value_name = "FILE")]
    pub files: Vec<PathBuf>,
    /// Half-width of the bounds over the value, for every figure that is not exact (for centres: over
    /// the polar radius).
    #[arg(long, default_value = "1e-4", value_name = "T")]
    pub tolerance: f64,
    /// Order of the finite elements, 1 to 6; by default the fastest for the tolerance.
    #[arg(long, value_name = "P")]
    pub order: Option<usize>,
    /// Stop refining before a system has more unknowns than this; the bounds stay true.
    #[arg(long, default_value_t = 2_000_000, value_name = "N")]
    pub max_unknowns: usize,
    /// Print one JSON object a section on standard output and nothing else there; files are written
    /// only with --out.
    #[arg(long)]
    pub json: bool,
    /// Print no table and no progress.
    #[arg(long)]
    pub quiet: bool,
    /// Write results and figures here; with several files, in one folder each below it. Default: a
    /// folder NAME.results beside each file.
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// Print width of the figures, in mm.
    #[arg(long, default_value = "160mm", value_parser = print_width, value_name = "MM")]
    pub width: f64,
    /// Draw fields as lines of equal value with the values on them, in place of bands of colour.
    #[arg(long)]
    pub contours: bool,
    /// Keep extremes of stress away from sharp re-entrant corners by this share of the wall there.
    #[arg(long, default_value_t = DEFAULT_EXCLUSION, value_parser = share, value_name = "SHARE")]
    pub corner_distance: f64,
    /// Ask for load factors to first yield: a material without a yield stress is then an error.
    #[arg(long)]
    pub to_yield: bool,
    /// Write the whole answer as one page too, report.html, with a sheet to try other section forces,
    /// and as report.md.
    #[arg(long)]
    pub report: bool,
    /// Answer again whenever a file is saved, until stopped (Ctrl-C); an open report.html follows.
    #[arg(long)]
    pub watch: bool,
    /// Leave out field-ACTION.csv and field-ACTION.vtu, the stress at every integration point, which are
    /// large.
    #[arg(long)]
    pub without_fields: bool,
    /// Write every figure as PNG too, at this resolution.
    #[arg(long, value_parser = resolution, value_name = "DPI")]
    pub png: Option<f64>,
    /// Print seconds by stage and the peak memory.
    #[arg(long)]
    pub timings: bool,
}

fn print_width(text: &str) -> Result<f64, String> {
    let number = text.trim().strip_suffix("mm").unwrap_or(text).trim();
    match number.parse::<f64>() {
        Ok(mm) if (60.0..=1000.0).contains(&mm) => Ok(mm),
        _ => Err("a print width is 60mm to 1000mm, such as 160mm".into()),
    }
}

fn share(text: &str) -> Result<f64, String> {
    match text.trim().parse::<f64>() {
        Ok(share) if (0.0..=1.0).contains(&share) => Ok(share),
        _ => Err("a share of the wall is 0 to 1, such as 0.1".into()),
    }
}

fn resolution(text: &str) -> Result<f64, String> {
    match text.trim().parse::<f64>() {
        Ok(dpi) if (30.0..=1200.0).contains(&dpi) => Ok(dpi),
        _ => Err("a resolution is 30 to 1200 dots an inch, such as 300".into()),
    }
}

/// Runs the command.
#[must_use]
pub fn run(args: &SolveArgs) -> Outcome {
    if args.watch {
        return super::watch::run(args);
    }
    args.files
        .iter()
        .map(|file| {
            one(args, file).unwrap_or_else(|refusal| {
                refusal.print();
                Outcome::NoAnswer
            })
        })
        .max()
        .unwrap_or(Outcome::Answered)
}

/// Why a section was not answered.
pub(super) enum Refusal {
    /// Its file has faults.
    Faults(Box<Faults>),
    /// Something else, with the file's name.
    Message(String),
}

impl Refusal {
    /// On standard error.
    pub(super) fn print(&self) {
        match self {
            Self::Faults(faults) => show::print(faults),
            Self::Message(text) => {
                let _ = writeln!(stderr(), "{text}");
            }
        }
    }

    /// As plain text.
    pub(super) fn text(&self) -> String {
        match self {
            Self::Faults(faults) => faults.render(show::Look::Plain, show::WIDTH),
            Self::Message(text) => text.clone(),
        }
    }
}

/// Answers one file.
pub(super) fn one(args: &SolveArgs, file: &Path) -> Result<Outcome, Refusal> {
    let start = Instant::now();
    let read = section_from_path(file).map_err(Refusal::Faults)?;
    let refused =
        |error: &dyn std::fmt::Display| Refusal::Message(format!("{}: {error}", file.display()));
    let folder = folder(args, file);
    let source = match &folder {
        Some(folder) => match files::source_from(folder, file)
            .and_then(|source| files::check(folder, &source, figure::FILES).map(|()| source))
        {
            Ok(source) => source,
            Err(error) => return Err(refused(&error)),
        },
        None => file.to_string_lossy().into_owned(),
    };
    let mut run = Run {
        read: start.elapsed().as_secs_f64(),
        ..Run::default()
    };

    let wanted = Wanted {
        tolerance: args.tolerance,
        order: args.order,
        max_unknowns: args.max_unknowns,
    };
    let mut progress = LevelProgress::new(!args.quiet && stderr().is_terminal());
    let solved = solution(&read, wanted, &mut |level| progress.show(level));
    progress.finish();
    let mut solution = match solved {
        Ok(solution) => solution,
        Err(error) => return Err(refused(&error)),
    };
    if !read.sweep.is_empty() {
        solution.notes.push(Note {
            kind: "sweep",
            text: "The file has tables [[vary]]: it is solved as written. `sectile many` solves \
                   every point of the sweep."
                .into(),
            at: None,
        });
    }

    if args.to_yield && !read.section.actions.is_empty() {
        let missing: Vec<_> = (0..read.section.materials.len())
            .filter(|&m| read.section.materials[m].yield_stress.is_none())
            .map(|m| read.yield_missing(m))
            .collect();
        if !missing.is_empty() {
            return Err(Refusal::Faults(read.refused(missing)));
        }
    }
    let respond_start = Instant::now();
    let responses = respond(&read.section, &read.domain, &solution, args.corner_distance);
    if responses.is_none() && !read.section.actions.is_empty() {
        solution.notes.push(Note {
            kind: "actions-not-answered",
            text: "The actions are not answered: a section in separate parts has no shear stress \
                   that does not depend on what holds them together."
                .into(),
            at: None,
        });
    }
    run.actions = respond_start.elapsed().as_secs_f64();
    if let Some(responses) = &responses {
        solution.notes.extend(exceeded(&read, responses));
    }
    let answer = Answer {
        source,
        read,
        solution,
        responses,
    };

    let write_start = Instant::now();
    if let Some(folder) = &folder
        && let Err(error) = write_folder(args, folder, &answer, &run, start)
    {
        return Err(refused(&error));
    }
    run.write = write_start.elapsed().as_secs_f64();
    run.total = start.elapsed().as_secs_f64();
    run.peak_memory = peak_memory();
    print(args, folder.as_deref(), &answer, &run);
    let overstressed = answer
        .responses
        .as_ref()
        .is_some_and(|responses| !responses.overstressed().is_empty());
    if answer.solution.reached && answer.read.domain.parts == 1 && !overstressed {
        Ok(Outcome::Answered)
    } else {
        Ok(Outcome::Finding)
    }
}

/// A finding for each seam that is given more than it may be.
fn exceeded(read: &ReadSection, responses: &Responses) -> Vec<Note> {
    let note = |(seam, response): (usize, usize)| {
        let response = responses.list.get(response)?;
        let seam_made = read.domain.seams.get(seam)?;
        let used = response.seams.get(seam)?.utilisation?;
        Some(Note {
            kind: "seam-overstressed",
            text: format!(
                "The throat of seam \"{}\" is given {} times its allowable stress under \"{}\".",
                seam_made.name,
                digits::up(used, 3),
                response.name
            ),
            at: Some(seam_made.at),
        })
    };
    let overstressed = responses.overstressed();
    overstressed.into_iter().filter_map(note).collect()
}

/// Where the results go; nowhere with `--json` alone.
pub(super) fn folder(args: &SolveArgs, file: &Path) -> Option<PathBuf> {
    let stem = stem(file);
    match &args.out {
        Some(out) if args.files.len() > 1 => Some(out.join(stem)),
        Some(out) => Some(out.clone()),
        None if args.json => None,
        None => Some(file.with_file_name(format!("{stem}.results"))),
    }
}

/// The file's name without `.section.toml` or its extension.
pub(super) fn stem(file: &Path) -> String {
    let name = file.file_name().unwrap_or_default().to_string_lossy();
    match name.strip_suffix(".section.toml") {
        Some(stem) if !stem.is_empty() => stem.to_owned(),
        _ => file
            .file_stem()
            .unwrap_or_default()
            .to_string_lossy()
            .into_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stems_drop_the_double_ending() {
        assert_eq!(stem(Path::new("a/rail.section.toml")), "rail");
        assert_eq!(stem(Path::new("rail.toml")), "rail");
        assert_eq!(stem(Path::new(".section.toml")), ".section");
    }

    #[test]
    fn print_widths_carry_millimetres() {
        assert_eq!(print_width("160mm"), Ok(160.0));
        assert_eq!(print_width("90"), Ok(90.0));
        assert!(print_width("5mm").is_err());
        assert!(print_width("wide").is_err());
    }
}
