//! Stresses at a point.

use sectile_mesh::Point;

use super::field::UnitFields;
use super::forces::SectionForces;
use super::locate::{Located, locate};
use super::state::Stress;
use crate::evaluate::{Evaluator, PointTable};
use crate::solution::Solution;

/// The stress at a point, seen from one piece.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ProbeStress {
    /// The piece.
    pub piece: u32,
    /// The stress on its side.
    pub stress: Stress,
}

/// The stress at `at`, one entry for each piece that touches the point, in order; empty outside of the
/// material. Where several triangles of a piece meet, their mean.
#[must_use]
pub fn at_point(
    solution: &Solution,
    fields: &UnitFields,
    forces: &SectionForces,
    at: Point,
) -> Vec<ProbeStress> {
    let Some(evaluator) = Evaluator::new(solution) else {
        return Vec::new();
    };
    let found = locate(&evaluator, at);
    let mut pieces: Vec<u32> = found
        .iter()
        .map(|l| solution.mesh.piece[l.triangle])
        .collect();
    pieces.sort_unstable();
    pieces.dedup();
    pieces
        .into_iter()
        .map(|piece| {
            let own: Vec<&Located> = found
                .iter()
                .filter(|l| solution.mesh.piece[l.triangle] == piece)
                .collect();
            let mut stress = Stress::default();
            for l in &own {
                let one = stress_in(&evaluator, fields, forces, l);
                stress.sigma += one.sigma / own.len() as f64;
                stress.tau += one.tau * (1.0 / own.len() as f64);
            }
            ProbeStress { piece, stress }
        })
        .collect()
}

/// The stress at a located point.
pub(super) fn stress_in(
    evaluator: &Evaluator,
    fields: &UnitFields,
    forces: &SectionForces,
    at: &Located,
) -> Stress {
    let ready = evaluator.ready(at.triangle);
    let table = PointTable::single(evaluator.solved.tables, at.reference, &ready);
    let point = evaluator.at(&ready, &table, 0);
    fields
        .superposition
        .unit_stress(evaluator.solved, &point)
        .under(forces)
}
