//! Runs cases through mesh and solver.

use rayon::prelude::*;
use sectile_mesh::domain::build;
use sectile_mesh::outline::piece::Piece;
use sectile_solver::material::Material;
use sectile_solver::solution::{Settings, Solution, solve};

use crate::cases::{Case, CaseError};
use crate::outline::piece;
use crate::verdict::{Row, judge};

/// Unknowns at which a case stops; a case that needs more has not reached its tolerance.
pub const MAX_UNKNOWNS: usize = 400_000;

/// A steel-like material: only ν matters for the properties of one material.
#[must_use]
pub fn material(nu: f64) -> Material {
    Material {
        name: "body".into(),
        young: 1.0,
        poisson: nu,
        shear: 0.5 / (1.0 + nu),
        yield_stress: None,
        density: None,
    }
}

/// The settings for a tolerance, all else as by default.
#[must_use]
pub fn settings(tolerance: f64) -> Settings {
    Settings {
        tolerance,
        order: None,
        max_unknowns: MAX_UNKNOWNS,
        reference: None,
    }
}

/// Solves pieces of one material.
///
/// # Errors
/// The faults of the geometry or the solver's message.
pub fn solve_pieces(pieces: &[Piece], nu: f64, settings: &Settings) -> Result<Solution, String> {
    let domain = build(pieces).map_err(|faults| format!("{faults:?}"))?;
    solve(&domain, &[material(nu)], 1.0, settings, &mut |_| ()).map_err(|e| e.to_string())
}

/// Solves a case, once for each ν that its values need, and judges its values.
///
/// # Errors
/// A case that cannot be read, built or solved.
pub fn rows(case: &Case, settings: &Settings) -> Result<Vec<Row>, CaseError> {
    let fault = |what: String| CaseError::of(&case.id, &what);
    let claims = case.claims()?;
    let (piece, departure) = piece(&case.outline, &case.holes).map_err(fault)?;
    let mut solved: Vec<(f64, Solution)> = Vec::new();
    let mut rows = Vec::new();
    for claim in claims {
        let found = solved.iter().position(|(nu, _)| *nu == claim.nu);
        let index = match found {
            Some(i) => i,
            None => {
                let solution = solve_pieces(std::slice::from_ref(&piece), claim.nu, settings)
                    .map_err(fault)?;
                solved.push((claim.nu, solution));
                solved.len() - 1
            }
        };
        rows.push(judge(case, &claim, &solved[index].1, departure).map_err(fault)?);
    }
    Ok(rows)
}

/// The rows of many cases, in their order.
///
/// # Errors
/// See [`rows`]; the first case at fault.
pub fn all_rows(cases: &[Case], settings: &Settings) -> Result<Vec<Row>, CaseError> {
    let lists: Result<Vec<Vec<Row>>, CaseError> =
        cases.par_iter().map(|c| rows(c, settings)).collect();
    Ok(lists?.into_iter().flatten().collect())
}
