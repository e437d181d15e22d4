//! Extremes that one may quote.
//!
//! Sought at the lattice points of every triangle, then around the best of them by a search in its
//! triangle. Points close to sharp re-entrant corners are left out: the calculated stress there grows
//! with every refinement. Since it grows towards them, extremes like to lie on the rim of what is left
//! out: the lattice's lines end in points of it too, and the search slides along it.

use sectile_mesh::Point;
use sectile_mesh::map::TriangleMap;

use super::field::{UnitFields, UnitStress};
use super::forces::SectionForces;
use super::locate::{Located, invert};
use super::measure::Measure;
use super::state::Stress;
use crate::evaluate::{Evaluator, PointTable, Ready};
use crate::solution::Solution;

/// The extreme of a measure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extreme {
    /// Its value.
    pub value: f64,
    /// Where, in the axes of the section file.
    pub at: Point,
    /// In which piece.
    pub piece: u32,
    /// The stress there.
    pub stress: Stress,
    /// The stress there of each part of the action alone, in the order of
    /// [`super::forces::PART_NAMES`].
    pub parts: [Stress; 8],
}

/// The extremes of an action in the order of [`Measure::ALL`]; utilisation only where a piece has a
/// yield stress.
#[derive(Clone, Debug, PartialEq)]
pub struct Extremes(pub Vec<(Measure, Extreme)>);

impl Extremes {
    /// The extreme of one measure.
    #[must_use]
    pub fn get(&self, measure: Measure) -> Option<&Extreme> {
        self.0.iter().find(|(m, _)| *m == measure).map(|(_, e)| e)
    }
}

/// The factor on an action at which von Mises' stress first reaches the yield stress; `None` without a
/// yield stress or without stress.
#[must_use]
pub fn load_factor_to_yield(extremes: &Extremes) -> Option<f64> {
    let utilisation = extremes.get(Measure::Utilisation)?.value;
    (utilisation > 0.0).then(|| 1.0 / utilisation)
}

/// Distance from sharp corners within which stresses are not quoted, over the wall's thickness.
pub const DEFAULT_EXCLUSION: f64 = 0.1;

/// The points that extremes may be quoted at, made once for all actions.
#[derive(Clone, Debug)]
pub struct Quotable {
    /// By lattice point of the unit fields.
    allowed: Vec<bool>,
    circles: Vec<(Point, f64)>,
    /// Where lines of the lattice cross the circles.
    rim: Vec<RimPoint>,
}

#[derive(Clone, Copy, Debug)]
struct RimPoint {
    at: Located,
    unit: UnitStress,
}

impl Quotable {
    /// All lattice points but those within `exclusion` times the wall of a sharp corner.
    #[must_use]
    pub fn new(solution: &Solution, fields: &UnitFields, exclusion: f64) -> Self {
        let circles: Vec<(Point, f64)> = solution
            .corners
            .iter()
            .map(|c| (c.at, exclusion * c.wall))
            .collect();
        let allowed: Vec<bool> = fields
            .positions
            .iter()
            .map(|p| is_allowed(&circles, *p))
            .collect();
        let rim = rim(solution, fields, &allowed, &circles);
        Self {
            allowed,
            circles,
            rim,
        }
    }

    /// Those of these points that lie in pieces for which `keep` holds.
    #[must_use]
    pub fn within(
        &self,
        solution: &Solution,
        fields: &UnitFields,
        keep: impl Fn(u32) -> bool,
    ) -> Self {
        let per = fields.lattice.points.len();
        let allowed = self
            .allowed
            .iter()
            .enumerate()
            .map(|(i, allowed)| *allowed && keep(solution.mesh.piece[i / per]))
            .collect();
        let kept = |point: &&RimPoint| keep(solution.mesh.piece[point.at.triangle]);
        Self {
            allowed,
            circles: self.circles.clone(),
            rim: self.rim.iter().filter(kept).copied().collect(),
        }
    }
}

/// A point of the rim that has been rounded is still one.
fn is_allowed(circles: &[(Point, f64)], p: Point) -> bool {
    circles
        .iter()
        .all(|(c, r)| p.distance(*c) >= *r * (1.0 - 1e-9))
}

/// The points where a line between neighbours of the lattice leaves what is allowed, by halving.
fn rim(
    solution: &Solution,
    fields: &UnitFields,
    allowed: &[bool],
    circles: &[(Point, f64)],
) -> Vec<RimPoint> {
    let Some(evaluator) = Evaluator::new(solution) else {
        return Vec::new();
    };
    let frame = &evaluator.solved.frame;
    let lattice = &fields.lattice;
    // Each line belongs to one or two cells.
    let mut lines: Vec<[usize; 2]> = lattice
        .cells
        .iter()
        .flat_map(|&[a, b, c]| [[a, b], [b, c], [a, c]])
        .map(|[a, b]| [a.min(b), a.max(b)])
        .collect();
    lines.sort_unstable();
    lines.dedup();
    let mut out = Vec::new();
    for (triangle, allowed) in allowed.chunks_exact(lattice.points.len()).enumerate() {
        if allowed.iter().all(|a| *a) || !allowed.iter().any(|a| *a) {
            continue;
        }
        let ready = evaluator.ready(triangle);
        let map = evaluator.map(triangle);
        let place = |p: [f64; 2]| {
            let at = map.at(p[0], p[1]);
            frame.outward(Point::new(at.x, at.y))
        };
        for &[a, b] in &lines {
            let (inside, outside) = match (allowed[a], allowed[b]) {
                (true, false) => (a, b),
                (false, true) => (b, a),
                _ => continue,
            };
            let reference = |k: usize| [lattice.points[k][1], lattice.points[k][2]];
            let (mut good, mut bad) = (reference(inside), reference(outside));
            for _ in 0..40 {
                let middle = [0.5 * (good[0] + bad[0]), 0.5 * (good[1] + bad[1])];
                if is_allowed(circles, place(middle)) {
                    good = middle;
                } else {
                    bad = middle;
                }
            }
            let table = PointTable::single(evaluator.solved.tables, good, &ready);
            let at = evaluator.at(&ready, &table, 0);
            out.push(RimPoint {
                at: Located {
                    triangle,
                    reference: good,
                },
                unit: fields.superposition.unit_stress(evaluator.solved, &at),
            });
        }
    }
    out
}

/// The extremes under section forces. `yield_stress` by piece.
#[must_use]
pub fn extremes(
    solution: &Solution,
    fields: &UnitFields,
    quotable: &Quotable,
    forces: &SectionForces,
    yield_stress: &[Option<f64>],
) -> Extremes {
    let Some(evaluator) = Evaluator::new(solution) else {
        return Extremes(Vec::new());
    };
    let per = fields.lattice.points.len();
    let yield_of = |piece: u32| yield_stress.get(piece as usize).copied().flatten();
    let mut best: [(f64, Option<Located>); Measure::ALL.len()] =
        [(f64::NEG_INFINITY, None); Measure::ALL.len()];
    let mut offer = |unit: &UnitStress, limit: Option<f64>, at: Located| {
        for (slot, r) in best.iter_mut().zip(ranks(&unit.under(forces), limit)) {
            if r > slot.0 {
                *slot = (r, Some(at));
            }
        }
    };
    for (t, units) in fields.units.chunks_exact(per).enumerate() {
        let limit = yield_of(solution.mesh.piece[t]);
        for (p, unit) in units.iter().enumerate() {
            if quotable.allowed[t * per + p] {
                let [_, xi, eta] = fields.lattice.points[p];
                let at = Located {
                    triangle: t,
                    reference: [xi, eta],
                };
                offer(unit, limit, at);
            }
        }
    }
    for point in &quotable.rim {
        let limit = yield_of(solution.mesh.piece[point.at.triangle]);
        offer(&point.unit, limit, point.at);
    }
    let mut ready: Vec<(usize, Ready)> = Vec::new();
    let mut out = Vec::new();
    for ((_, start), &measure) in best.iter().zip(Measure::ALL) {
        let Some(start) = start else { continue };
        let triangle = start.triangle;
        if !ready.iter().any(|(t, _)| *t == triangle) {
            ready.push((triangle, evaluator.ready(triangle)));
        }
        let Some((_, own)) = ready.iter().find(|(t, _)| *t == triangle) else {
            continue;
        };
        let piece = solution.mesh.piece[triangle];
        let search = Search {
            evaluator: &evaluator,
            fields,
            quotable,
            forces,
            measure,
            limit: yield_of(piece),
            ready: own,
            map: evaluator.map(triangle),
        };
        let step = 1.0 / fields.lattice.divisions as f64;
        out.push((measure, search.climb(start.reference, step, piece)));
    }
    Extremes(out)
}

/// A measure as something whose largest value is sought.
fn rank(measure: Measure, stress: &Stress, limit: Option<f64>) -> Option<f64> {
    let value = measure.of(stress, limit)?;
    Some(if measure.is_least() { -value } else { value })
}

/// For each of [`Measure::ALL`] something that is largest where the measure is extreme, at the cost
/// of one root; what there is none of is never largest.
fn ranks(stress: &Stress, limit: Option<f64>) -> [f64; Measure::ALL.len()] {
    let (sigma, square) = (stress.sigma, stress.tau.dot(stress.tau));
    let mises = sigma * sigma + 3.0 * square;
    let tresca = mises + square;
    let twice_radius = tresca.sqrt();
    [
        sigma,
        -sigma,
        square,
        mises,
        tresca,
        sigma + twice_radius,
        twice_radius - sigma,
        limit.map_or(f64::NEG_INFINITY, |y| mises / (y * y)),
    ]
}

/// A search for the extreme inside one triangle.
struct Search<'a> {
    evaluator: &'a Evaluator<'a>,
    fields: &'a UnitFields,
    quotable: &'a Quotable,
    forces: &'a SectionForces,
    measure: Measure,
    limit: Option<f64>,
    ready: &'a Ready,
    map: TriangleMap,
}

/// Halvings of the step of a search.
const HALVINGS: usize = 9;

impl Search<'_> {
    fn unit(&self, p: [f64; 2]) -> (Point, UnitStress) {
        let solved = self.evaluator.solved;
        let table = PointTable::single(solved.tables, p, self.ready);
        let at = self.evaluator.at(self.ready, &table, 0);
        // Coordinates keep the digits that rounding leaves, so that 0 and 200 are just that.
        let digits = 11 - solved.frame.scale.log10().floor() as i32;
        let fine = 10.0_f64.powi(digits.abs());
        let snapped = |c: f64| {
            if digits >= 0 {
                (c * fine).round() / fine
            } else {
                (c / fine).round() * fine
            }
        };
        let place = solved.frame.outward(Point::new(at.x, at.y));
        (
            Point::new(snapped(place.x), snapped(place.y)),
            self.fields.superposition.unit_stress(solved, &at),
        )
    }

    fn rank_at(&self, p: [f64; 2]) -> Option<f64> {
        let (at, unit) = self.unit(p);
        if !is_allowed(&self.quotable.circles, at) {
            return None;
        }
        rank(self.measure, &unit.under(self.forces), self.limit)
    }

    /// The point, or if it is left out the next one of the rim; nothing if that is not in the triangle.
    fn allowed(&self, p: [f64; 2]) -> Option<[f64; 2]> {
        let frame = &self.evaluator.solved.frame;
        let at = self.map.at(p[0], p[1]);
        let place = frame.outward(Point::new(at.x, at.y));
        let left_out = |&&(c, r): &&(Point, f64)| place.distance(c) < r;
        let Some(&(centre, radius)) = self.quotable.circles.iter().find(left_out) else {
            return Some(p);
        };
        let out = place - centre;
        let rim = centre + out * (radius / out.length());
        invert(&self.map, frame.inward(rim))
    }

    /// Steps along the three sides' directions, halved whenever none of them gains. A step that would
    /// leave what is allowed goes to the rim, so that the search slides along it.
    fn climb(&self, start: [f64; 2], step: f64, piece: u32) -> Extreme {
        const DIRECTIONS: [[f64; 2]; 6] = [
            [1.0, 0.0],
            [-1.0, 0.0],
            [0.0, 1.0],
            [0.0, -1.0],
            [1.0, -1.0],
            [-1.0, 1.0],
        ];
        let mut p = start;
        let mut best = self.rank_at(p).unwrap_or(f64::NEG_INFINITY);
        let mut step = 0.5 * step;
        let mut halvings = 0;
        while halvings < HALVINGS {
            let mut gained = false;
            for d in DIRECTIONS {
                let q = [p[0] + step * d[0], p[1] + step * d[1]];
                if q[0] < 0.0 || q[1] < 0.0 || q[0] + q[1] > 1.0 {
                    continue;
                }
                let q = self.allowed(q);
                if let Some(q) = q
                    && let Some(r) = self.rank_at(q)
                    && r > best
                {
                    (best, p, gained) = (r, q, true);
                    break;
                }
            }
            if !gained {
                step *= 0.5;
                halvings += 1;
            }
        }
        let (at, unit) = self.unit(p);
        let stress = unit.under(self.forces);
        Extreme {
            value: self.measure.of(&stress, self.limit).unwrap_or(0.0),
            at,
            piece,
            stress,
            parts: self.forces.parts().map(|f| unit.under(&f)),
        }
    }
}
