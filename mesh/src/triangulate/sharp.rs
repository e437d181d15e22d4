//! Sharp corners of pieces, which refinement cannot better and must not chase.
//!
//! Between two sides that meet at a small angle every division of one asks for one of the other, and
//! where a neighbour shares a side it is asked too, without end. So all sides of such a corner are cut
//! at one distance from it, and the triangle between the corner and the two cuts is set apart (see
//! [`super::ladder`]): what is left to refine has an obtuse angle at either cut.

use super::MeshError;
use crate::domain::fan::{between, fans};
use crate::domain::{Domain, TOLERANCE, beyond};
use crate::tree::{Extent, Tree};

/// Corners below this angle are sharp, radians. Delaunay refinement is sure to end well from 60° on
/// (J. Ruppert 1995, from memory); equilateral triangles pass.
const SHARP: f64 = 59.99 / 180.0 * std::f64::consts::PI;
/// Corners below this angle, radians, cannot be meshed.
const CUSP: f64 = 1e-5;

/// A point of the domain at which pieces have sharp corners.
#[derive(Clone, Debug, PartialEq)]
pub struct Sharp {
    /// The domain's point.
    pub point: u32,
    /// The pieces with a sharp corner here.
    pub pieces: Vec<u32>,
    /// The sides of those corners, and whether each starts here.
    pub ends: Vec<(usize, bool)>,
    /// Where those sides are cut: distance from the point.
    pub distance: f64,
    /// Parts of each of those sides between the point and the cut.
    pub steps: usize,
}

/// The sharp corners of a domain, in the order of its points. The triangles that are set apart are no
/// larger than `max_area`.
///
/// # Errors
/// [`MeshError::TooClose`] at a cusp.
pub fn sharp_corners(domain: &Domain, max_area: Option<f64>) -> Result<Vec<Sharp>, MeshError> {
    let mut list = Vec::new();
    for (v, fan) in fans(domain).into_iter().enumerate() {
        let mut least = SHARP;
        let mut sharp = Sharp {
            point: v as u32,
            pieces: Vec::new(),
            ends: Vec::new(),
            distance: f64::INFINITY,
            steps: 1,
        };
        for (k, a) in fan.iter().enumerate() {
            let b = &fan[(k + 1) % fan.len()];
            let angle = between(a, b);
            let Some(piece) = a.left.filter(|_| angle < SHARP) else {
                continue;
            };
            if angle < CUSP {
                return Err(MeshError::TooClose {
                    piece: domain.piece_names[piece as usize].clone(),
                    at: domain.points[v],
                });
            }
            least = least.min(angle);
            if let Some(area) = max_area {
                let most = (2.0 * area / angle.sin()).sqrt();
                sharp.distance = sharp.distance.min(most);
            }
            sharp.pieces.push(piece);
            sharp.ends.extend([(a.side, a.starts), (b.side, b.starts)]);
        }
        if sharp.pieces.is_empty() {
            continue;
        }
        sharp.pieces.sort_unstable();
        sharp.ends.sort_unstable();
        sharp.ends.dedup();
        for &(s, _) in &sharp.ends {
            let side = &domain.sides[s];
            // A third leaves a middle where both ends are sharp; an arc is to stay near its chord.
            let most = side.length(&domain.points) / 3.0;
            let flat = side
                .arc
                .map_or(most, |arc| 0.25 * least * arc.circle.radius);
            sharp.distance = sharp.distance.min(most).min(flat);
        }
        list.push(sharp);
    }
    keep_clear(domain, &mut list);
    Ok(list)
}

/// Keeps the cuts at half the distance to sides that do not meet the corner, nor lie on it as the other
/// hand of a slit does.
fn keep_clear(domain: &Domain, list: &mut [Sharp]) {
    if list.is_empty() {
        return;
    }
    let points = &domain.points;
    let boxes: Vec<Extent> = domain.sides.iter().map(|s| s.extent(points)).collect();
    let tree = Tree::new(&boxes);
    let other_hand = TOLERANCE * domain.size();
    for sharp in list {
        let at = points[sharp.point as usize];
        let others = tree.nearest(at, |s| {
            let side = &domain.sides[s];
            if side.from == sharp.point || side.to == sharp.point {
                f64::INFINITY
            } else {
                beyond(side.distance(points, at), other_hand)
            }
        });
        sharp.distance = sharp.distance.min(0.5 * others);
    }
}
