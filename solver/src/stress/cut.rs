//! Stresses along a straight cut through the material, and what crosses it.

use std::f64::consts::TAU;

use sectile_mesh::{Point, Vector};

use super::field::UnitFields;
use super::forces::SectionForces;
use super::locate::{Located, locate};
use super::probe::stress_in;
use super::state::Stress;
use crate::element::quadrature::gauss_legendre;
use crate::evaluate::{Evaluator, PointTable};
use crate::solution::Solution;

/// A point of a cut.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CutSample {
    /// Distance from the cut's start.
    pub distance: f64,
    /// Where, in the axes of the section file.
    pub at: Point,
    /// In which piece.
    pub piece: u32,
    /// The stress there.
    pub stress: Stress,
    /// `τ·n`, n to the right of the cut's direction.
    pub normal_shear: f64,
}

/// What a cut shows.
#[derive(Clone, Debug, PartialEq)]
pub struct CutResult {
    /// Samples, one list for each stretch of one piece's material, along the cut.
    pub runs: Vec<Vec<CutSample>>,
    /// `∫ τ·n ds` of the equilibrated field, force per length: positive to the right of the cut's
    /// direction.
    pub shear_flow: f64,
    /// `∫ σ ds`, force per length.
    pub normal_force: f64,
    /// Length inside the material.
    pub material: f64,
}

/// Points of each triangle's stretch of a cut.
const SAMPLES: usize = 6;
/// Gauss points of each triangle's stretch: fields of degree twice this less one are integrated
/// exactly, and smooth ones on curved triangles to rounding.
const GAUSS: usize = 10;

/// Cuts the section from `from` to `to`; `None` if the line misses the material.
#[must_use]
pub fn cut(
    solution: &Solution,
    fields: &UnitFields,
    forces: &SectionForces,
    from: Point,
    to: Point,
) -> Option<CutResult> {
    let evaluator = Evaluator::new(solution)?;
    let line = to - from;
    let length = line.length();
    if length <= 0.0 {
        return None;
    }
    let direction = line * (1.0 / length);
    let normal = -direction.perpendicular();
    let gauss = gauss_legendre(GAUSS);
    let mut result = CutResult {
        runs: Vec::new(),
        shear_flow: 0.0,
        normal_force: 0.0,
        material: 0.0,
    };
    let stops = stops(solution, from, line);
    let mut last_end = f64::NEG_INFINITY;
    for w in stops.windows(2) {
        let (a, b) = (w[0], w[1]);
        if b - a <= 1e-9 {
            continue;
        }
        let point = |t: f64| from + line * t;
        let Some(middle) = locate(&evaluator, point(0.5 * (a + b))).into_iter().next() else {
            continue;
        };
        let piece = solution.mesh.piece[middle.triangle];
        let in_triangle = |t: f64| Located {
            triangle: middle.triangle,
            reference: super::locate::invert(
                &evaluator.map(middle.triangle),
                evaluator.solved.frame.inward(point(t)),
            )
            .unwrap_or(middle.reference),
        };
        let stretch = (b - a) * length;
        result.material += stretch;
        let ready = evaluator.ready(middle.triangle);
        for &(u, weight) in &gauss {
            let at = in_triangle(a + u * (b - a));
            let table = PointTable::single(evaluator.solved.tables, at.reference, &ready);
            let here = evaluator.at(&ready, &table, 0);
            let tau = fields.superposition.equilibrated(&here, forces);
            let sigma = fields
                .superposition
                .unit_stress(evaluator.solved, &here)
                .under(forces)
                .sigma;
            result.shear_flow += weight * stretch * tau.dot(normal);
            result.normal_force += weight * stretch * sigma;
        }
        let continues = result
            .runs
            .last()
            .and_then(|r| r.last())
            .is_some_and(|s| s.piece == piece && (a - last_end).abs() <= 1e-9);
        if !continues {
            result.runs.push(Vec::new());
        }
        let first = usize::from(continues);
        if let Some(run) = result.runs.last_mut() {
            for k in first..=SAMPLES {
                let t = a + (b - a) * k as f64 / SAMPLES as f64;
                let stress = stress_in(&evaluator, fields, forces, &in_triangle(t));
                run.push(CutSample {
                    distance: t * length,
                    at: point(t),
                    piece,
                    stress,
                    normal_shear: stress.tau.dot(normal),
                });
            }
        }
        last_end = b;
    }
    (!result.runs.is_empty()).then_some(result)
}

/// Parameters of the line at which it meets sides of the mesh, with both ends, rising.
fn stops(solution: &Solution, from: Point, line: Vector) -> Vec<f64> {
    let mesh = &solution.mesh;
    let mut out = vec![0.0, 1.0];
    for side in &mesh.sides {
        let [a, b] = side.vertices.map(|v| mesh.vertices[v as usize]);
        match mesh.circles.get(side.circle as usize) {
            None => {
                let d = b - a;
                let cross = line.cross(d);
                if cross.abs() > 1e-12 * line.length() * d.length() {
                    let t = (a - from).cross(d) / cross;
                    let s = (a - from).cross(line) / cross;
                    if (-1e-9..=1.0 + 1e-9).contains(&s) {
                        out.push(t);
                    }
                }
            }
            Some(circle) => {
                let f = from - circle.centre;
                let (p, q) = (line.dot(line), f.dot(line));
                let root = q * q - p * (f.dot(f) - circle.radius * circle.radius);
                if root < 0.0 {
                    continue;
                }
                let start = (a - circle.centre).angle();
                let (u, v) = (a - circle.centre, b - circle.centre);
                let sweep = u.cross(v).atan2(u.dot(v));
                for t in [(-q - root.sqrt()) / p, (-q + root.sqrt()) / p] {
                    let angle = (f + line * t).angle();
                    let ahead = ((angle - start) * sweep.signum() + 1e-9).rem_euclid(TAU);
                    if ahead <= sweep.abs() + 2e-9 {
                        out.push(t);
                    }
                }
            }
        }
    }
    out.retain(|t| (0.0..=1.0).contains(t));
    out.sort_by(f64::total_cmp);
    out
}
