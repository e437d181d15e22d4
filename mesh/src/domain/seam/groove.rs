//! Grooves: faying lines fused over some length.

use super::faying::{Run, faying_lines};
use super::fit_up::apart;
use super::inside_corner::line_meant;
use super::request::SeamRequest;
use crate::domain::Domain;
use crate::domain::fault::{Misfit, SeamFault};
use crate::outline::side::Side;
use crate::point::Point;

/// A stretch of a faying line that is to be fused.
#[derive(Clone, Debug, PartialEq)]
pub struct Groove {
    /// Its parts, from the outer end inwards.
    pub stretch: Vec<Side>,
    /// Where it ends within the line.
    pub stop: Option<Point>,
    /// The outer end.
    pub outer: Point,
    /// Its middle.
    pub at: Point,
}

/// The grooves that a request means: one, or two for both ends.
///
/// # Errors
/// The fault that says why there is none or which is to be chosen.
pub fn grooves_meant(
    domain: &Domain,
    request: &SeamRequest,
    depth: Option<f64>,
    tolerance: f64,
) -> Result<Vec<Groove>, SeamFault> {
    let pieces = request.between.map(|p| p as u32);
    let lines = faying_lines(domain, pieces);
    if lines.is_empty() {
        let (distance, at) = apart(domain, pieces);
        return Err(if distance > tolerance {
            SeamFault::Apart { distance, at }
        } else {
            SeamFault::NoLine { at }
        });
    }
    let line = line_meant(domain, request.near, &lines)?;
    let length = line.length(domain);
    let Some(depth) = depth else {
        let from_end = match request.near {
            Some(near) if !line.closed => from_nearer_end(domain, line, near),
            _ => line.clone(),
        };
        return Ok(vec![groove(domain, &from_end, length)]);
    };
    if line.closed {
        return Err(SeamFault::NoEnd { length });
    }
    if depth > length + tolerance {
        return Err(SeamFault::Depth { depth, length });
    }
    if depth <= 16.0 * tolerance {
        return Err(SeamFault::Misfit {
            at: line.middle(domain),
            cause: Misfit::TooSmall,
        });
    }
    if request.both {
        if 2.0 * depth >= length - tolerance {
            return Err(SeamFault::DepthsMeet { depth, length });
        }
        return Ok([line.clone(), line.turned()]
            .map(|line| groove(domain, &line, depth))
            .into());
    }
    let ends = line.ends(domain).map(|v| domain.points[v as usize]);
    let from_end = match request.near {
        Some(near) if (ends[0].distance(near) - ends[1].distance(near)).abs() > tolerance => {
            from_nearer_end(domain, line, near)
        }
        // From either end all of it.
        _ if depth >= length - tolerance => line.clone(),
        _ => {
            return Err(SeamFault::Choice {
                places: ends.to_vec(),
            });
        }
    };
    if depth >= length - tolerance {
        return Ok(vec![groove(domain, &from_end, length)]);
    }
    Ok(vec![groove(domain, &from_end, depth)])
}

fn from_nearer_end(domain: &Domain, line: &Run, near: Point) -> Run {
    let [a, b] = line
        .ends(domain)
        .map(|v| domain.points[v as usize].distance(near));
    if b < a { line.turned() } else { line.clone() }
}

/// The first `depth` of a line.
fn groove(domain: &Domain, line: &Run, depth: f64) -> Groove {
    let whole = depth >= line.length(domain);
    let (stretch, stop) = line.first(domain, depth);
    let outer = domain.points[line.ends(domain)[0] as usize];
    Groove {
        stretch,
        stop: (!whole).then_some(stop),
        outer,
        at: line.first(domain, 0.5 * depth).1,
    }
}
