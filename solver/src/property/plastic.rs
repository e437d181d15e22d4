//! Plastic moduli, exact on straight and circular sides.
//!
//! `∮ x dy` and `∮ x y dy` along the edge below a horizontal line are the area and the first moment
//! below it: the cut itself adds nothing, since `dy = 0` along it.

use sectile_mesh::domain::Domain;
use sectile_mesh::{Point, Vector};

use super::boundary::{EdgeSide, edge_sides};

/// The line that halves the area, relative to the origin given, and `∫ |distance| dA` from it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PlasticAxis {
    /// Position of the line.
    pub position: f64,
    /// Plastic modulus.
    pub modulus: f64,
}

/// Plastic axes for bending about x (a horizontal line) and about y (a vertical one).
#[must_use]
pub fn plastic_axes(domain: &Domain, origin: Point) -> [PlasticAxis; 2] {
    let upright: Vec<EdgeSide> = edge_sides(domain)
        .iter()
        .map(|s| s.relative_to(origin))
        .collect();
    let turned: Vec<EdgeSide> = upright.iter().map(EdgeSide::quarter_turned).collect();
    [halving_line(&upright), halving_line(&turned)]
}

fn halving_line(sides: &[EdgeSide]) -> PlasticAxis {
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    for e in sides.iter().map(EdgeSide::extent) {
        low = low.min(e[2]);
        high = high.max(e[3]);
    }
    let [area, first] = below(sides, f64::INFINITY);
    // The area below may stay at one half over a gap: take its middle.
    let find = |enough: &dyn Fn(f64) -> bool| {
        let (mut a, mut b) = (low, high);
        for _ in 0..200 {
            let c = 0.5 * (a + b);
            if c <= a || c >= b {
                break;
            }
            if enough(below(sides, c)[0]) {
                b = c;
            } else {
                a = c;
            }
        }
        0.5 * (a + b)
    };
    let slack = 1e-13 * area;
    let from = find(&|a| a >= 0.5 * area - slack);
    let to = find(&|a| a > 0.5 * area + slack);
    let position = 0.5 * (from + to);
    let [area_below, first_below] = below(sides, position);
    PlasticAxis {
        position,
        modulus: first - 2.0 * first_below - position * (area - 2.0 * area_below),
    }
}

/// Area and first moment `∫ y dA` below `y = cut`.
fn below(sides: &[EdgeSide], cut: f64) -> [f64; 2] {
    let mut sum = [0.0; 2];
    let mut add = |side: &EdgeSide| {
        let part = side.integrate_dy(|p| [p.x, p.x * p.y]);
        sum[0] += part[0];
        sum[1] += part[1];
    };
    for side in sides {
        let e = side.extent();
        if e[3] <= cut {
            add(side);
        } else if e[2] < cut {
            for part in clipped(side, cut) {
                add(&part);
            }
        }
    }
    sum
}

/// The parts of a side below `y = cut`.
fn clipped(side: &EdgeSide, cut: f64) -> Vec<EdgeSide> {
    match side.arc {
        None => {
            let t = (cut - side.from.y) / (side.to.y - side.from.y);
            let mut meet = side.from.lerp(side.to, t);
            meet.y = cut;
            let (from, to) = if side.from.y < cut {
                (side.from, meet)
            } else {
                (meet, side.to)
            };
            vec![EdgeSide {
                from,
                to,
                arc: None,
            }]
        }
        Some(arc) => {
            let (c, r) = (arc.circle.centre, arc.circle.radius);
            let start = side.start_angle(&arc);
            let up = ((cut - c.y) / r).clamp(-1.0, 1.0).asin();
            // Parameters along the sweep where the circle crosses the cut.
            let mut stops = vec![0.0, 1.0];
            for angle in [up, std::f64::consts::PI - up] {
                for turn in -2..=2 {
                    let t = (angle + f64::from(turn) * std::f64::consts::TAU - start) / arc.sweep;
                    if t > 0.0 && t < 1.0 {
                        stops.push(t);
                    }
                }
            }
            stops.sort_by(f64::total_cmp);
            let on = |t: f64| c + Vector::at_angle(start + t * arc.sweep) * r;
            stops
                .windows(2)
                .filter(|w| w[1] > w[0] && on(0.5 * (w[0] + w[1])).y < cut)
                .map(|w| {
                    let mut part = arc;
                    part.sweep = arc.sweep * (w[1] - w[0]);
                    EdgeSide {
                        from: on(w[0]),
                        to: on(w[1]),
                        arc: Some(part),
                    }
                })
                .collect()
        }
    }
}
