//! Integrals over the area, exact on straight and circular sides by Green's theorem.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;

use super::boundary::{EdgeSide, edge_sides};

/// Area, centroid and moments about the centroid; lengths in the domain's unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AreaMoments {
    /// `∫ dA`.
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

/// The moments of a domain.
///
/// Positions are taken relative to the centroid before anything is squared, so a section drawn far
/// from the origin loses no digits beyond those of its coordinates.
#[must_use]
pub fn area_moments(domain: &Domain) -> AreaMoments {
    let sides = edge_sides(domain);
    let mut extent = [
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::INFINITY,
        f64::NEG_INFINITY,
    ];
    for e in sides.iter().map(EdgeSide::extent) {
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

/// `∮ g dy` over the edge, positions relative to `origin`.
fn total<const N: usize>(
    sides: &[EdgeSide],
    origin: Point,
    g: impl Fn(Point) -> [f64; N],
) -> [f64; N] {
    let mut sum = [0.0; N];
    for side in sides {
        let part = side.relative_to(origin).integrate_dy(&g);
        for (s, p) in sum.iter_mut().zip(part) {
            *s += p;
        }
    }
    sum
}

/// Length of the outer edges and of the holes' edges: a closed run of sides is a hole's when it
/// encloses a negative area (material to the left).
#[must_use]
pub fn perimeters(domain: &Domain) -> [f64; 2] {
    let sides = edge_sides(domain);
    let same = |a: Point, b: Point| a == b;
    let mut used = vec![false; sides.len()];
    // Start points in sorted order, to find the side that follows.
    let key = |p: Point| (p.x, p.y);
    let mut by_start: Vec<usize> = (0..sides.len()).collect();
    by_start.sort_by(|&i, &j| {
        let (a, b) = (key(sides[i].from), key(sides[j].from));
        a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1))
    });
    let following = |p: Point| {
        let k = by_start.partition_point(|&i| {
            let a = key(sides[i].from);
            a.0.total_cmp(&p.x).then(a.1.total_cmp(&p.y)).is_lt()
        });
        by_start.get(k).copied().filter(|&i| same(sides[i].from, p))
    };
    let mut out = [0.0; 2];
    for first in 0..sides.len() {
        if used[first] {
            continue;
        }
        let (mut length, mut area) = (0.0, 0.0);
        let mut at = Some(first);
        while let Some(i) = at {
            if used[i] {
                break;
            }
            used[i] = true;
            length += sides[i].length();
            area += sides[i]
                .relative_to(sides[first].from)
                .integrate_dy(|p| [p.x])[0];
            at = following(sides[i].to);
        }
        out[usize::from(area < 0.0)] += length;
    }
    out
}
