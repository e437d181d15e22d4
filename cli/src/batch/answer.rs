//! A section solved for one row.

use std::panic::{AssertUnwindSafe, catch_unwind};

use sectile_solver::solution::Solution;

use super::columns::Columns;
use super::job::{Input, Job, first_message};
use super::row::Cell;
use crate::answer::{Wanted, solution};
use crate::digest::sha256;
use crate::read::vary::{self, Setting};
use crate::read::{section_from_text, text_from_path};
use crate::section::Units;

/// A row, and how it went.
#[derive(Clone, Debug, PartialEq)]
pub struct Answer {
    /// Its cells under the heads of the columns.
    pub row: Vec<Cell>,
    /// Why there are no figures.
    pub error: Option<String>,
    /// Whether there are figures, all to the tolerance.
    pub reached: bool,
}

/// The row of a job.
#[must_use]
pub fn answer(input: &Input, job: Job, columns: &Columns, wanted: Wanted) -> Answer {
    let settings = vary::at(&input.sweep, job.point);
    let mut row = key(input, &settings, columns);
    // A defect met by one section must not lose the others.
    let solved = catch_unwind(AssertUnwindSafe(|| solved(input, job, wanted)));
    let (hash, solved) = solved.unwrap_or_else(|_| {
        let defect = "the program failed on this section, which is a defect of the program";
        (input.hash.clone(), Err(defect.into()))
    });
    row[1] = Cell::text(&hash);
    let blank = |count: usize| vec![Cell::Empty; count];
    let per_property = if columns.bounds { 3 } else { 1 };
    let figures = columns.properties.len() * per_property;
    match solved {
        Err(error) => {
            row.extend(blank(3));
            row.push(Cell::number(wanted.tolerance));
            row.extend(blank(figures + 2));
            row.push(Cell::text(&error));
            Answer {
                row,
                error: Some(error),
                reached: false,
            }
        }
        Ok(solved) => {
            row[2] = Cell::text(&solved.title);
            row.push(Cell::text(solved.units.length));
            row.push(Cell::text(solved.units.force));
            row.push(Cell::text(&solved.units.moment));
            row.push(Cell::number(wanted.tolerance));
            for &property in &columns.properties {
                match solved.solution.get(property) {
                    None => row.extend(blank(per_property)),
                    Some(figure) => {
                        row.push(Cell::number(figure.value));
                        if columns.bounds {
                            row.push(Cell::number(figure.low));
                            row.push(Cell::number(figure.high));
                        }
                    }
                }
            }
            row.push(Cell::Flag(solved.solution.reached));
            row.push(Cell::text(&notes(&solved.solution)));
            row.push(Cell::Empty);
            Answer {
                row,
                error: None,
                reached: solved.solution.reached,
            }
        }
    }
}

/// The cells that tell which section a row is of: file, hash of its content, an empty title, the values
/// that it varies.
#[must_use]
pub fn key(input: &Input, settings: &[&Setting], columns: &Columns) -> Vec<Cell> {
    let mut row = vec![
        Cell::text(&input.name),
        Cell::text(&input.hash),
        Cell::Empty,
    ];
    for key in &columns.varied {
        let own = input.sweep.iter().position(|vary| vary.key == *key);
        row.push(match own.and_then(|i| settings.get(i)) {
            None => Cell::Empty,
            Some(Setting {
                quoted: false,
                number: Some(number),
                ..
            }) => Cell::number(*number),
            Some(setting) => Cell::text(&setting.label),
        });
    }
    row
}

struct Solved {
    title: String,
    units: Units,
    solution: Solution,
}

fn solved(input: &Input, job: Job, wanted: Wanted) -> (String, Result<Solved, String>) {
    if let Some(refused) = &input.refused {
        return (input.hash.clone(), Err(refused.clone()));
    }
    let (hash, text) = match &input.text {
        Some(text) => (
            input.hash.clone(),
            vary::text_at(text, &input.sweep, job.point),
        ),
        None => match text_from_path(&input.path) {
            Err(faults) => return (input.hash.clone(), Err(first_message(&faults))),
            // The file may have been saved anew since it was looked at: the row is of what is solved.
            Ok((_, text)) => (sha256(text.as_bytes()), text),
        },
    };
    let solved = section_from_text(&input.name, &text)
        .map_err(|faults| first_message(&faults))
        .and_then(|read| {
            let solution = solution(&read, wanted, &mut |_| {}).map_err(|e| e.to_string())?;
            Ok(Solved {
                title: read.section.title,
                units: read.section.units,
                solution,
            })
        });
    (hash, solved)
}

/// The kinds of the findings, each once.
fn notes(solution: &Solution) -> String {
    let mut kinds: Vec<&str> = Vec::new();
    for note in &solution.notes {
        if !kinds.contains(&note.kind) {
            kinds.push(note.kind);
        }
    }
    kinds.join(" ")
}
