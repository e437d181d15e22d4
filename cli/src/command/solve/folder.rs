//! The files of a section's results folder.

use std::path::Path;
use std::time::Instant;

use sectile_solver::stress::field::{UnitFields, weighted_points};

use super::SolveArgs;
use super::answer::Answer;
use super::terminal::peak_memory;
use crate::figure;
use crate::figure::style::{Drawing, Style};
use crate::interaction::Interaction;
use crate::report;
use crate::response::Responses;
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
