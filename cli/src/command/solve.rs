//! `solve`: section files in; a table on the terminal, results and figures in a folder.

use std::io::{IsTerminal, Write, stderr, stdout};
use std::path::{Path, PathBuf};
use std::time::Instant;

use clap::Args;
use sectile_solver::material::Material;
use sectile_solver::solution::{Level, Note, Settings, Solution, solve};

use sectile_solver::stress::extreme::DEFAULT_EXCLUSION;
use sectile_solver::stress::field::{UnitFields, weighted_points};

use super::Outcome;
use super::progress::LevelProgress;
use super::respond::respond;
use crate::figure;
use crate::figure::style::{Drawing, Style};
use crate::interaction::Interaction;
use crate::read::fault::Faults;
use crate::read::{ReadSection, section_from_path, show};
use crate::report;
use crate::response::{Names, Responses};
use crate::section::materials_used;
use crate::write::json::{Results, Run};
use crate::write::slug::{cut_files, slugs};
use crate::write::{actions, csv, digits, files, interaction, materials, seams, table, units, vtu};

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

    let settings = Settings {
        tolerance: args.tolerance,
        order: args.order,
        max_unknowns: args.max_unknowns,
        reference: read.section.reference,
    };
    let mut progress = LevelProgress::new(!args.quiet && stderr().is_terminal());
    let solved = solve(
        &read.domain,
        &units::consistent_materials(&read.section),
        read.section.units.metres(),
        &settings,
        &mut |level: &Level| progress.show(level),
    );
    progress.finish();
    let mut solution = match solved {
        Ok(solution) => solution,
        Err(error) => return Err(refused(&error)),
    };
    if read.section.assumed_material {
        solution.notes.push(Note {
            kind: "assumed-material",
            text:
                "The file names no material: Poisson's ratio 0.3 is assumed. It enters the flexure \
                   centre and the shear areas."
                    .into(),
            at: None,
        });
    }

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

/// All that is known of one section.
struct Answer {
    /// The section file as `results.json` names it.
    source: String,
    read: ReadSection,
    solution: Solution,
    responses: Option<Responses>,
}

impl Answer {
    fn names(&self) -> Names<'_> {
        Names {
            pieces: &self.read.domain.piece_names,
            probes: &self.read.section.probes,
            cuts: &self.read.section.cuts,
            seams: &self.read.domain.seams,
            stated: &self.read.section.seams,
            materials: &self.read.section.materials,
        }
    }

    /// The material that the properties of a section of several refer to.
    fn reference(&self) -> Option<&Material> {
        self.read.section.reference_of(&self.read.domain)
    }

    fn report<'a>(&'a self, figures: &'a [(String, String)], exclusion: f64) -> report::Input<'a> {
        report::Input {
            source: &self.source,
            text: &self.read.places.text,
            section: &self.read.section,
            domain: &self.read.domain,
            solution: &self.solution,
            responses: self.responses.as_ref(),
            names: self.names(),
            reference: self.reference(),
            figures,
            exclusion,
            watched: false,
        }
    }

    fn results(&self, run: &Run) -> Results {
        let section = &self.read.section;
        let units = &section.units;
        let results = Results::new(&section.title, &self.source, units, &self.solution, run)
            .with_seams(&self.names(), self.responses.as_ref());
        let results = match self.reference() {
            Some(reference) => results.with_materials(
                units,
                &self.names(),
                &materials_used(&self.read.domain),
                &reference.name,
                self.responses.as_ref(),
            ),
            None => results,
        };
        match &self.responses {
            None => results,
            Some(responses) => {
                results.with_responses(units, &self.names(), &self.solution, responses)
            }
        }
    }
}

fn write_folder(
    args: &SolveArgs,
    folder: &Path,
    answer: &Answer,
    run: &Run,
    start: Instant,
) -> Result<(), String> {
    let write_start = Instant::now();
    let section = &answer.read.section;
    let mut written: Vec<(String, Vec<u8>)> = Vec::new();
    let style = Style {
        width_mm: args.width,
        drawing: if args.contours {
            Drawing::Lines
        } else {
            Drawing::Bands
        },
    };
    let mut figures = figure::all(
        &section.title,
        &section.units,
        &answer.read.domain,
        &section.materials,
        &answer.solution,
        style,
    );
    if let Some(responses) = &answer.responses {
        figures.extend(figure::responses(
            &section.title,
            &section.units,
            &answer.read.domain,
            &answer.solution,
            &answer.names(),
            responses,
            style,
        ));
        written.extend(response_files(answer, responses));
    }
    if let Some(interaction) = Interaction::new(&answer.solution) {
        let drawn =
            figure::interaction::draw(&section.title, &section.units, &interaction, args.width);
        figures.push(("interaction.svg".into(), drawn.svg));
        let table = interaction::csv(&section.units, &interaction);
        written.push(("interaction.csv".into(), table.into_bytes()));
    }
    if let Some(dpi) = args.png {
        for (name, svg) in &figures {
            let png = figure::png::render(svg, dpi).map_err(|e| e.to_string())?;
            written.push((name.replace(".svg", ".png"), png));
        }
    }
    let text_figures = figures;
    written.extend(
        text_figures
            .iter()
            .map(|(name, svg)| (name.clone(), svg.clone().into_bytes())),
    );
    written.push((
        "properties.csv".into(),
        csv::properties(&section.units, &answer.solution, answer.reference()).into_bytes(),
    ));
    let run = Run {
        write: write_start.elapsed().as_secs_f64(),
        total: start.elapsed().as_secs_f64(),
        peak_memory: peak_memory(),
        ..run.clone()
    };
    written.push((
        files::RESULTS.into(),
        answer.results(&run).pretty().into_bytes(),
    ));
    if args.report {
        let input = report::Input {
            watched: args.watch,
            ..answer.report(&text_figures, args.corner_distance)
        };
        written.push(("report.html".into(), report::html(&input).into_bytes()));
        written.push(("report.md".into(), report::markdown(&input).into_bytes()));
    }
    let named: Vec<(&str, &[u8])> = written
        .iter()
        .map(|(name, bytes)| (name.as_str(), bytes.as_slice()))
        .collect();
    files::write_all(folder, &answer.source, &named).map_err(|e| e.to_string())
}

/// Tables and fields of the responses.
fn response_files(answer: &Answer, responses: &Responses) -> Vec<(String, Vec<u8>)> {
    let units = &answer.read.section.units;
    let names = answer.names();
    let mut out = vec![(
        "stresses.csv".to_string(),
        actions::stresses_csv(units, &names, responses).into_bytes(),
    )];
    if !responses.materials.is_empty() {
        let csv = materials::csv(units, &names, responses);
        out.push(("materials.csv".to_string(), csv.into_bytes()));
    }
    if !names.seams.is_empty() {
        let csv = seams::csv(units, &names, responses);
        out.push(("seams.csv".to_string(), csv.into_bytes()));
    }
    let response_slugs = slugs(responses.list.iter().map(|r| r.name.as_str()));
    let nodes = UnitFields::new(&answer.solution, answer.solution.order);
    let points = weighted_points(&answer.solution, &responses.fields);
    // The same ones that get figures.
    for i in figure::response::chosen(responses) {
        let (response, slug) = (&responses.list[i], &response_slugs[i]);
        let Some(nodes) = &nodes else { continue };
        out.push((
            format!("field-{slug}.csv"),
            actions::field_csv(units, &names, &answer.solution, &points, &response.forces)
                .into_bytes(),
        ));
        out.push((
            format!("field-{slug}.vtu"),
            vtu::field(
                units,
                &answer.solution,
                &answer.read.domain.piece_materials,
                nodes,
                &response.forces,
            )
            .into_bytes(),
        ));
    }
    let cut_slugs: Vec<String> = slugs(names.cuts.iter().map(|c| c.name.as_str()));
    let files = cut_files(&cut_slugs, &response_slugs);
    for (r, response) in responses.list.iter().enumerate() {
        for (c, cut) in &response.cuts {
            out.push((
                format!("{}.csv", files[*c][r]),
                actions::cut_csv(units, &names, cut).into_bytes(),
            ));
        }
    }
    out
}

fn print(args: &SolveArgs, folder: Option<&Path>, answer: &Answer, run: &Run) {
    let section = &answer.read.section;
    let mut text = String::new();
    if args.json {
        text = answer.results(run).line();
        text.push('\n');
    } else if !args.quiet {
        let look = table::Look {
            width: super::terminal_width(),
            styled: super::styled(&stdout()),
        };
        text = table::render(
            &section.title,
            &section.units,
            &answer.solution,
            answer.reference(),
            look,
        );
        if let Some(responses) = &answer.responses {
            text.push('\n');
            text.push_str(&table::actions::render(
                &section.units,
                &answer.names(),
                &answer.solution,
                responses,
                look,
            ));
            let (units, names) = (&section.units, answer.names());
            for part in [
                table::materials::render(units, &names, responses, look),
                table::seams::render(units, &names, responses, look),
            ] {
                if !part.is_empty() {
                    text.push('\n');
                    text.push_str(&part);
                }
            }
        }
        if let Some(folder) = folder {
            text.push_str(&format!(
                "Results and figures are in {}\n",
                folder.display()
            ));
        }
    }
    // A reader that closed the pipe has all that it wants.
    let _ = stdout().write_all(text.as_bytes());
    if args.timings {
        let _ = stderr().write_all(timings(&answer.solution, run).as_bytes());
    }
}

fn timings(solution: &Solution, run: &Run) -> String {
    let t = &solution.timings;
    let rows = [
        ("read", run.read),
        ("mesh", t.mesh),
        ("order", t.order),
        ("assemble", t.assemble),
        ("factor", t.factor),
        ("solve", t.solve),
        ("bounds", t.bounds),
        ("actions", run.actions),
        ("write", run.write),
        ("total", run.total),
    ];
    let mut text = String::from("Seconds by stage\n");
    for (name, seconds) in rows {
        text.push_str(&format!("  {name:<10}{seconds:>10.4}\n"));
    }
    if let Some(bytes) = run.peak_memory {
        text.push_str(&format!(
            "  peak memory {:.1} MB\n",
            bytes as f64 / 1_048_576.0
        ));
    }
    text
}

/// The most memory that the process has held, where the system tells.
fn peak_memory() -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|l| l.starts_with("VmHWM:"))?;
    let kilobytes: u64 = line.split_whitespace().nth(1)?.parse().ok()?;
    Some(kilobytes * 1024)
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
