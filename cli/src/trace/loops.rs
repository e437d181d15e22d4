//! Paths become closed loops, layer by layer.

use sectile_mesh::Point;
use sectile_mesh::outline::corner::arc_through;
use sectile_mesh::outline::side::Side;

use super::chain::{self, Chained, Opening};
use super::drawing::{Drawing, MOST_SIDES, Path, Shape};
use super::report::Report;
use super::{Refusal, fit, open, overlap, redrawn};
use crate::read::fault::Fault;

/// The lengths that decide what belongs together.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tolerances {
    /// The drawing's size.
    pub size: f64,
    /// Loose ends up to this far apart are joined.
    pub gap: f64,
    /// Curves become arcs within this distance.
    pub chord: f64,
}

impl Tolerances {
    /// Up to this far apart two places are the same: rounding in the drawing's own digits.
    #[must_use]
    pub fn same(&self) -> f64 {
        self.gap.clamp(1e-9 * self.size, 1e-7 * self.size)
    }
}

/// A closed loop: each side starts where the one before ends. A circle is one side.
#[derive(Clone, Debug, PartialEq)]
pub struct Loop {
    /// The sides in order.
    pub sides: Vec<Side>,
}

/// The loops of each layer that has paths, in the order of the file.
///
/// # Errors
/// Outlines that stay open, places where more than two ends meet, and too many sides.
pub fn of_drawing(
    drawing: &Drawing,
    tolerances: &Tolerances,
    report: &mut Report,
) -> Result<Vec<(usize, Vec<Loop>)>, Refusal> {
    let mut layers: Vec<(Vec<Loop>, Vec<Side>)> =
        vec![(Vec::new(), Vec::new()); drawing.layers.len()];
    let mut total = 0;
    for path in &drawing.paths {
        let sides = sides_of(path, tolerances, report);
        total += sides.len();
        if total > MOST_SIDES {
            return Err(Fault::whole(
                format!(
                    "the drawing has more than {MOST_SIDES} sides within --chord {}",
                    tolerances.chord
                ),
                "choose the section's layers with --layer, or allow curves a larger --chord",
            )
            .into());
        }
        let (loops, loose) = &mut layers[path.layer];
        match closed(sides, tolerances.same()) {
            Ok(Some(ring)) => loops.push(ring),
            Ok(None) => {}
            Err(sides) => loose.extend(sides),
        }
    }
    let mut found = Vec::new();
    let mut openings: Vec<Opening> = Vec::new();
    let mut faults = Vec::new();
    for (layer, (mut loops, mut loose)) in layers.into_iter().enumerate() {
        report.overlapping += redrawn::drop_redrawn(&mut loose, &loops, tolerances.same());
        let (loose, removed) = overlap::united(loose, tolerances);
        report.overlapping += removed;
        let Chained {
            loops: chained,
            open,
            joints,
            crowded,
        } = chain::chained(loose, tolerances);
        loops.extend(chained);
        report.overlapping += drop_repeated(&mut loops, tolerances.same());
        report.joints.extend(joints);
        faults.extend(
            crowded
                .iter()
                .map(|place| place.fault(&drawing.layers[layer], tolerances.size)),
        );
        openings.extend(open);
        if !loops.is_empty() {
            found.push((layer, loops));
        }
    }
    faults.extend(openings.iter().map(|o| o.fault(tolerances)));
    if faults.is_empty() {
        return Ok(found);
    }
    let picture = (!openings.is_empty()).then(|| {
        let sides: Vec<Side> = drawing
            .paths
            .iter()
            .flat_map(|path| sides_of(path, tolerances, &mut Report::default()))
            .collect();
        open::picture(&sides, &openings, tolerances.size)
    });
    Err(Refusal { faults, picture })
}

/// The sides of a path: curves as arcs, without sides that have no length.
fn sides_of(path: &Path, tolerances: &Tolerances, report: &mut Report) -> Vec<Side> {
    let mut sides = Vec::with_capacity(path.shapes.len());
    for shape in &path.shapes {
        match shape {
            Shape::Side(side) => {
                report.side(side);
                sides.push(*side);
            }
            Shape::Curve(curve) => {
                let departure = fit::arcs(curve, tolerances.chord, &mut sides);
                report.curve(departure);
            }
        }
    }
    let before = sides.len();
    drop_short(&mut sides, tolerances.same());
    report.short += before - sides.len();
    sides
}

/// Leaves out sides without length; what follows starts where they did.
fn drop_short(sides: &mut Vec<Side>, same: f64) {
    let mut start: Option<Point> = None;
    let mut kept: Vec<Side> = Vec::with_capacity(sides.len());
    for side in sides.iter() {
        let along = side.arc.map_or(0.0, |a| a.circle.radius * a.sweep.abs());
        if side.from.distance(side.to) <= same && along <= 4.0 * same {
            start = start.or(Some(side.from));
            continue;
        }
        kept.push(match start.take() {
            Some(from) => with_ends(side, from, side.to),
            None => *side,
        });
    }
    if let (Some(from), Some(last)) = (start, kept.last_mut()) {
        // The path ends in a side without length: it ends where that one does.
        let to = sides.last().map_or(from, |side| side.to);
        *last = with_ends(last, last.from, to);
    }
    *sides = kept;
}

/// The loop that the sides make by themselves, nothing if there are none, or the sides again.
fn closed(mut sides: Vec<Side>, same: f64) -> Result<Option<Loop>, Vec<Side>> {
    let n = sides.len();
    let (Some(first), Some(last)) = (sides.first().copied(), sides.last().copied()) else {
        return Ok(None);
    };
    let alone = n == 1 && first.arc.is_none();
    if alone || first.from.distance(last.to) > same {
        return Err(sides);
    }
    for i in 0..n {
        let to = sides[(i + 1) % n].from;
        if sides[i].to.distance(to) > same {
            return Err(sides);
        }
        sides[i] = with_ends(&sides[i], sides[i].from, to);
    }
    Ok(Some(Loop { sides }))
}

/// The side between other ends close to its own; an arc keeps its middle.
#[must_use]
pub fn with_ends(side: &Side, from: Point, to: Point) -> Side {
    if side.from == from && side.to == to {
        return *side;
    }
    let arc = side.arc.and_then(|arc| {
        if from == to {
            return Some(arc);
        }
        arc_through(from, middle(side), to)
    });
    Side {
        from,
        to,
        arc,
        ..*side
    }
}

/// The point half-way along a side.
#[must_use]
pub fn middle(side: &Side) -> Point {
    along(side, 0.5)
}

/// The point at the part t of a side.
#[must_use]
pub fn along(side: &Side, t: f64) -> Point {
    let Some(arc) = side.arc else {
        return side.from.lerp(side.to, t);
    };
    let (u, angle) = (side.from - arc.circle.centre, t * arc.sweep);
    arc.circle.centre + u * angle.cos() + u.perpendicular() * angle.sin()
}

/// Leaves out loops that repeat another one, whatever their sense and first corner; returns how many
/// sides that were.
fn drop_repeated(loops: &mut Vec<Loop>, same: f64) -> usize {
    let mut order: Vec<(Point, f64, usize)> = loops
        .iter()
        .enumerate()
        .map(|(i, ring)| {
            let n = ring.sides.len() as f64;
            let sum = ring
                .sides
                .iter()
                .map(middle)
                .fold((0.0, 0.0), |s, p| (s.0 + p.x, s.1 + p.y));
            (Point::new(sum.0 / n, sum.1 / n), n, i)
        })
        .collect();
    // Equal loops are neighbours by the mean of their sides' middles; whatever lies between two equal
    // ones differs in x by no more than they do.
    order.sort_by(|a, b| a.0.x.total_cmp(&b.0.x).then(a.2.cmp(&b.2)));
    let mut drop = vec![false; loops.len()];
    for (k, &(mean, n, i)) in order.iter().enumerate() {
        if drop[i] {
            continue;
        }
        for &(other, m, j) in order[k + 1..].iter().take(64) {
            if other.x - mean.x > same {
                break;
            }
            let near = n == m && (other.y - mean.y).abs() <= same;
            if near && !drop[j] && equal(&loops[i], &loops[j], same) {
                drop[i.max(j)] = true;
            }
        }
    }
    let mut removed = 0;
    let mut i = 0;
    loops.retain(|ring| {
        i += 1;
        if drop[i - 1] {
            removed += ring.sides.len();
        }
        !drop[i - 1]
    });
    removed
}

fn equal(a: &Loop, b: &Loop, same: f64) -> bool {
    let n = a.sides.len();
    let matches = |i: usize, j: usize, forward: bool| {
        let (s, t) = (&a.sides[i], &b.sides[j]);
        let ends = if forward { t.from } else { t.to };
        (n == 1 || s.from.distance(ends) <= same) && middle_near(s, t, same)
    };
    (0..n)
        .filter(|&j| matches(0, j, true) || matches(0, j, false))
        .any(|j| {
            (0..n).all(|i| matches(i, (j + i) % n, true))
                || (0..n).all(|i| matches(i, (j + n - i) % n, false))
        })
}

/// Whether two sides have one middle; whole circles, one centre and radius.
fn middle_near(s: &Side, t: &Side, same: f64) -> bool {
    match (s.arc, t.arc) {
        (Some(a), Some(b)) if s.from == s.to && t.from == t.to => {
            a.circle.centre.distance(b.circle.centre) <= same
                && (a.circle.radius - b.circle.radius).abs() <= same
        }
        _ => middle(s).distance(middle(t)) <= same,
    }
}
