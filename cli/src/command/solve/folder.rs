//! The files of a section's results folder.

use std::path::Path;
use std::time::Instant;

use rayon::prelude::*;
use sectile_solver::stress::field::{UnitFields, weighted_points};

use super::SolveArgs;
use super::answer::Answer;
use super::terminal::peak_memory;
use crate::figure;
use crate::figure::style::{Drawing, Style};
use crate::interaction::Interaction;
use crate::report;
use crate::response::Responses;
use crate::write::field::field_csv;
use crate::write::json::Run;
use crate::write::slug::{cut_files, slugs};
use crate::write::{actions, csv, files, interaction, materials, seams, vtu};

/// Writes all files of a section: whole or not at all.
pub(super) fn write_folder(
    args: &SolveArgs,
    folder: &Path,
    answer: &Answer,
    run: &Run,
    start: Instant,
) -> Result<(), String> {
    let write_start = Instant::now();
    let section = &answer.read.section;
    let mut written: Vec<(String, Vec<u8>)> = Vec::new();
    let figures = figures(args, answer, args.width);
    if let Some(responses) = &answer.responses {
        written.extend(response_files(args, answer, responses));
    }
    if let Some(interaction) = Interaction::new(&answer.solution) {
        let table = interaction::csv(&section.units, &interaction);
        written.push(("interaction.csv".into(), table.into_bytes()));
    }
    if let Some(dpi) = args.png {
        let images = figures.par_iter().map(|(name, svg)| {
            let png = figure::png::render(svg, dpi).map_err(|e| e.to_string())?;
            Ok((name.replace(".svg", ".png"), png))
        });
        written.extend(images.collect::<Result<Vec<_>, String>>()?);
    }
    let table = csv::properties(&section.units, &answer.solution, answer.reference());
    written.push(("properties.csv".into(), table.into_bytes()));
    if args.report {
        let printed = self::figures(args, answer, report::FIGURE_WIDTH);
        let input = report::Input {
            watched: args.watch,
            ..answer.report(&printed, args.corner_distance)
        };
        written.push((report::HTML.into(), report::html(&input).into_bytes()));
        written.push((
            report::MARKDOWN.into(),
            report::markdown(&input).into_bytes(),
        ));
    }
    let svgs = figures
        .into_iter()
        .map(|(name, svg)| (name, svg.into_bytes()));
    written.extend(svgs);

    let run = Run {
        write: write_start.elapsed().as_secs_f64(),
        total: start.elapsed().as_secs_f64(),
        peak_memory: peak_memory(),
        ..run.clone()
    };
    let mut results = answer.results(&run);
    results.files = written.iter().map(|(name, _)| name.clone()).collect();
    results.files.push(files::RESULTS.into());
    if args.report && args.watch {
        results.files.push(report::STATE.into());
    }
    results.files.sort_unstable();
    written.push((files::RESULTS.into(), results.pretty().into_bytes()));
    let named: Vec<(&str, &[u8])> = written
        .iter()
        .map(|(name, bytes)| (name.as_str(), bytes.as_slice()))
        .collect();
    files::write_all(folder, &answer.source, &named).map_err(|e| e.to_string())
}

/// Every figure at a print width in mm: the name of its file and its SVG.
fn figures(args: &SolveArgs, answer: &Answer, width: f64) -> Vec<(String, String)> {
    let section = &answer.read.section;
    let (title, units, domain) = (&section.title, &section.units, &answer.read.domain);
    let style = Style {
        width_mm: width,
        drawing: if args.contours {
            Drawing::Lines
        } else {
            Drawing::Bands
        },
    };
    let solution = &answer.solution;
    let mut figures = figure::all(title, units, domain, &section.materials, solution, style);
    if let Some(responses) = &answer.responses {
        let names = answer.names();
        figures.extend(figure::responses(
            title, units, domain, solution, &names, responses, style,
        ));
    }
    if let Some(interaction) = Interaction::new(solution) {
        let drawn = figure::interaction::draw(title, units, &interaction, width);
        figures.push(("interaction.svg".into(), drawn.svg));
    }
    figures
}

/// Tables and fields of the responses.
fn response_files(
    args: &SolveArgs,
    answer: &Answer,
    responses: &Responses,
) -> Vec<(String, Vec<u8>)> {
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
    if !args.without_fields
        && let Some(nodes) = UnitFields::new(&answer.solution, answer.solution.order)
    {
        let points = weighted_points(&answer.solution, &responses.fields);
        // The same responses that get figures.
        for i in figure::response::chosen(responses) {
            let (forces, slug) = (&responses.list[i].forces, &response_slugs[i]);
            let csv = field_csv(units, &names, &answer.solution, &points, forces);
            out.push((format!("field-{slug}.csv"), csv.into_bytes()));
            let materials = &answer.read.domain.piece_materials;
            let vtu = vtu::field(units, &answer.solution, materials, &nodes, forces);
            out.push((format!("field-{slug}.vtu"), vtu.into_bytes()));
        }
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
