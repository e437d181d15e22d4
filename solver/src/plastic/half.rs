//! The part of a section beyond any line: its weighted area and first moments, exact on straight and
//! circular sides.
//!
//! In axes ξ along the line and η across it, `∮ ξ dη`, `∮ ½ξ² dη` and `∮ ξη dη` along the edge beyond
//! `η = c` are the area and the first moments beyond it: the line itself adds nothing, since `dη = 0`
//! along it. Pieces of different weight share their interface, which then counts by the jump.

use std::f64::consts::{PI, TAU};

use sectile_mesh::Vector;

use crate::property::boundary::EdgeSide;

/// `∫w dA`, `∫w ξ dA`, `∫w η dA`.
pub type Sums = [f64; 3];

/// A section that is about to be cut by lines of one direction.
#[derive(Clone, Debug)]
pub struct Slices {
    parts: Vec<Part>,
    /// The sums over the whole section.
    pub total: Sums,
    /// Least η of the section.
    pub low: f64,
    /// Greatest η of the section.
    pub high: f64,
}

/// Part of a side along which η only rises or only falls.
#[derive(Clone, Debug)]
struct Part {
    side: EdgeSide,
    jump: f64,
    low: f64,
    high: f64,
    sums: Sums,
}

impl Slices {
    /// `sides` with the jumps of the weight across them (see
    /// [`crate::property::boundary::weighted_sides`]), cut by lines along the unit vector `along`.
    #[must_use]
    pub fn new(sides: &[(EdgeSide, f64)], along: Vector) -> Self {
        let mut slices = Self {
            parts: Vec::with_capacity(sides.len() + 8),
            total: [0.0; 3],
            low: f64::INFINITY,
            high: f64::NEG_INFINITY,
        };
        for (side, jump) in sides {
            for side in monotone(&side.seen_along(along)) {
                let (a, b) = (side.from.y, side.to.y);
                let sums = sums(&side, *jump);
                let part = Part {
                    side,
                    jump: *jump,
                    low: a.min(b),
                    high: a.max(b),
                    sums,
                };
                add(&mut slices.total, &part.sums);
                slices.low = slices.low.min(part.low);
                slices.high = slices.high.max(part.high);
                slices.parts.push(part);
            }
        }
        slices
    }

    /// The sums over the part with `η > c`.
    #[must_use]
    pub fn beyond(&self, c: f64) -> Sums {
        let mut sum = [0.0; 3];
        for part in &self.parts {
            if part.low >= c {
                add(&mut sum, &part.sums);
            } else if part.high > c {
                add(&mut sum, &sums(&clipped(&part.side, c), part.jump));
            }
        }
        sum
    }
}

fn add(sum: &mut Sums, part: &Sums) {
    for (s, p) in sum.iter_mut().zip(part) {
        *s += p;
    }
}

fn sums(side: &EdgeSide, jump: f64) -> Sums {
    side.integrate_dy(|p| [p.x, 0.5 * p.x * p.x, p.x * p.y])
        .map(|s| jump * s)
}

/// The side cut where η turns round.
fn monotone(side: &EdgeSide) -> Vec<EdgeSide> {
    let Some(arc) = side.arc else {
        return vec![*side];
    };
    let start = side.start_angle(&arc);
    let mut stops = vec![0.0, 1.0];
    for angle in [-0.5 * PI, 0.5 * PI] {
        let ahead = ((angle - start) * arc.sweep.signum()).rem_euclid(TAU);
        let t = ahead / arc.sweep.abs();
        if t < 1.0 {
            stops.push(t);
        }
    }
    stops.sort_by(f64::total_cmp);
    stops
        .windows(2)
        .filter(|w| w[1] > w[0])
        .map(|w| run(side, w[0], w[1]))
        .collect()
}

/// The run of a side between two parameters from 0 to 1.
fn run(side: &EdgeSide, t0: f64, t1: f64) -> EdgeSide {
    let at = |t: f64| match side.arc {
        _ if t == 0.0 => side.from,
        _ if t == 1.0 => side.to,
        None => side.from.lerp(side.to, t),
        Some(arc) => {
            let angle = side.start_angle(&arc) + t * arc.sweep;
            arc.circle.centre + Vector::at_angle(angle) * arc.circle.radius
        }
    };
    EdgeSide {
        from: at(t0),
        to: at(t1),
        arc: side.arc.map(|mut arc| {
            arc.sweep *= t1 - t0;
            arc
        }),
    }
}

/// The run beyond `η = c` of a side along which η only rises or only falls, and that crosses it.
fn clipped(side: &EdgeSide, c: f64) -> EdgeSide {
    let t = match side.arc {
        None => (c - side.from.y) / (side.to.y - side.from.y),
        Some(arc) => {
            let sine = ((c - arc.circle.centre.y) / arc.circle.radius).clamp(-1.0, 1.0);
            let up = sine.asin();
            let start = side.start_angle(&arc);
            // Of the circle's two meetings with the line the one that lies on this side; rounding may
            // put it a little outside.
            let parameter = |angle: f64| {
                let middle = start + 0.5 * arc.sweep;
                let from_middle = (angle - middle + PI).rem_euclid(TAU) - PI;
                0.5 + from_middle / arc.sweep
            };
            let (a, b) = (parameter(up), parameter(PI - up));
            let nearer = if (a - 0.5).abs() <= (b - 0.5).abs() {
                a
            } else {
                b
            };
            nearer.clamp(0.0, 1.0)
        }
    };
    if side.from.y > c {
        run(side, 0.0, t)
    } else {
        run(side, t, 1.0)
    }
}
