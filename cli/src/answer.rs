//! From a section file to its solution, by one way for every command.

use sectile_solver::solution::{Level, Note, Settings, Solution, SolveError, solve};

use crate::read::ReadSection;
use crate::write::units::{consistent_materials, in_print};

/// What is asked of every section.
#[derive(Clone, Copy, Debug)]
pub struct Wanted {
    /// As in [`Settings`].
    pub tolerance: f64,
    /// As in [`Settings`].
    pub order: Option<usize>,
    /// As in [`Settings`].
    pub max_unknowns: usize,
}

/// A section's solution, its properties in the units that the file declares; `progress` is called after
/// each level.
///
/// # Errors
/// Those of the solver.
pub fn solution(
    read: &ReadSection,
    wanted: Wanted,
    progress: &mut dyn FnMut(&Level),
) -> Result<Solution, SolveError> {
    let section = &read.section;
    let settings = Settings {
        tolerance: wanted.tolerance,
        order: wanted.order,
        max_unknowns: wanted.max_unknowns,
        reference: section.reference,
    };
    let mut solution = solve(
        &read.domain,
        &consistent_materials(section),
        section.units.metres(),
        &settings,
        progress,
    )?;
    for (quantity, figure) in &mut solution.properties {
        *figure = in_print(quantity.dimension(), figure, &section.units);
    }
    if section.assumed_material {
        solution.notes.push(Note {
            kind: "assumed-material",
            text:
                "The file names no material: Poisson's ratio 0.3 is assumed. It enters the flexure \
                 centre and the shear areas."
                    .into(),
            at: None,
        });
    }
    Ok(solution)
}
