//! Integrals over the area, exact on straight and circular sides by Green's theorem.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;

use super::boundary::{DirectedEdge, EdgeSide, directed_edges, weighted_sides};

/// Area, centroid and moments about the centroid, each part of the area times the weight of its piece;
/// lengths in the domain's unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AreaMoments {
    /// `∫ dA`, weighted as all that follow.
    pub area: f64,
    /// Centroid in the domain's axes.
    pub centroid: Point,
    /// `∫ y² dA`.
    pub xx: f64,
    /// `∫ x² dA`.
    pub yy: f64,
    /// `∫ x y dA`.
    pub xy: f64,
    /// `∫ y (x² + y²) dA`.
    pub third_y: f64,
    /// `∫ x (x² + y²) dA`.
    pub third_x: f64,
    /// Extreme coordinates relative to the centroid: `[x_min, x_max, y_min, y_max]`.
    pub extent: [f64; 4],
    /// Largest distance of an extreme coordinate from the origin of the domain's axes: the scale of
    /// rounding in positions.
    pub reach: f64,
}

/// The moments of a domain; `weight` of a piece.
///
/// Positions are taken relative to the centroid before anything is squared, so a section drawn far
/// from the origin loses no digits beyond those of its coordinates.
#[must_use]
pub fn area_moments(domain: &Domain, weight: impl Fn(u32) -> f64) -> AreaMoments {
    let sides = weighted_sides(domain, weight);
    let mut extent = [
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::INFINITY,
        f64::NEG_INFINITY,
    ];
    for e in sides.iter().map(|(side, _)| side.extent()) {
        extent = [
            extent[0].min(e[0]),
            extent[1].max(e[1]),
            extent[2].min(e[2]),
            extent[3].max(e[3]),
        ];
    }
    let reach = extent.iter().fold(0.0_f64, |m, c| m.max(c.abs()));
    let mut origin = Point::new(0.5 * (extent[0] + extent[1]), 0.5 * (extent[2] + extent[3]));
    let mut area = 0.0;
    for _ in 0..2 {
        let [a, sx, sy] = total(&sides, origin, |p| [p.x, 0.5 * p.x * p.x, p.x * p.y]);
        area = a;
        origin = Point::new(origin.x + sx / a, origin.y + sy / a);
    }
    let [yy, xx, xy, third_y, third_x] = total(&sides, origin, |p| {
        let (x, y) = (p.x, p.y);
        [
            x * x * x / 3.0,
            x * y * y,
            0.5 * x * x * y,
            x * x * x * y / 3.0 + x * y * y * y,
            0.25 * x * x * x * x + 0.5 * x * x * y * y,
        ]
    });
    AreaMoments {
        area,
        centroid: origin,
        xx,
        yy,
        xy,
        third_y,
        third_x,
        extent: [
            extent[0] - origin.x,
            extent[1] - origin.x,
            extent[2] - origin.y,
            extent[3] - origin.y,
        ],
        reach,
    }
}

/// The area of each piece.
#[must_use]
pub fn piece_areas(domain: &Domain) -> Vec<f64> {
    let origin = domain.points.first().copied().unwrap_or_default();
    (0..domain.piece_names.len() as u32)
        .map(|piece| {
            let own = weighted_sides(domain, |p| f64::from(u8::from(p == piece)));
            total(&own, origin, |p| [p.x])[0]
        })
        .collect()
}

/// `∮ g dy` over the edge, positions relative to `origin`, each side times its number.
fn total<const N: usize>(
    sides: &[(EdgeSide, f64)],
    origin: Point,
    g: impl Fn(Point) -> [f64; N],
) -> [f64; N] {
    let mut sum = [0.0; N];
    for (side, weight) in sides {
        let part = side.relative_to(origin).integrate_dy(&g);
        for (s, p) in sum.iter_mut().zip(part) {
            *s += weight * p;
        }
    }
    sum
}

/// Length of the outer edges and of the holes' edges, without surfaces that lie against each other: a
/// closed run of free sides is a hole's when it encloses no positive area (material to the left).
#[must_use]
pub fn perimeters(domain: &Domain) -> [f64; 2] {
    // Every point has at most one gap, so at most one free side leaves it with material to its left.
    let mut leaving: Vec<Option<DirectedEdge>> = vec![None; domain.points.len()];
    for edge in directed_edges(domain) {
        leaving[edge.from as usize] = Some(edge);
    }
    let mut out = [0.0; 2];
    for first in 0..leaving.len() {
        let start = domain.points[first];
        let (mut length, mut area) = (0.0, 0.0);
        let mut at = first;
        while let Some(edge) = leaving[at].take() {
            if !edge.faying {
                length += edge.side.length();
            }
            area += edge.side.relative_to(start).integrate_dy(|p| [p.x])[0];
            at = edge.to as usize;
        }
        out[usize::from(area < 0.0)] += length;
    }
    out
}
