//! Which triangle a point lies in, and where in it.

use sectile_mesh::Point;
use sectile_mesh::map::TriangleMap;

use crate::evaluate::Evaluator;

/// A point in a triangle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Located {
    /// The triangle.
    pub triangle: usize,
    /// Reference coordinates (ξ, η), inside the triangle.
    pub reference: [f64; 2],
}

/// Points this far outside of a triangle, in reference coordinates, still belong to it.
const SLACK: f64 = 1e-6;

/// Every triangle that holds `at` (in the file's axes), in order of index.
#[must_use]
pub fn locate(evaluator: &Evaluator, at: Point) -> Vec<Located> {
    let p = evaluator.solved.frame.inward(at);
    (0..evaluator.triangles())
        .filter_map(|triangle| {
            let reference = invert(&evaluator.map(triangle), p)?;
            Some(Located {
                triangle,
                reference,
            })
        })
        .collect()
}

/// The reference coordinates of `p` under a map, if it lies in the triangle: Newton's iteration from
/// the middle, after a look at the box about the triangle.
#[must_use]
pub fn invert(map: &TriangleMap, p: Point) -> Option<[f64; 2]> {
    let corners = [[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]].map(|[x, y]| map.at(x, y));
    let reach = corners.iter().fold(
        [
            f64::INFINITY,
            f64::NEG_INFINITY,
            f64::INFINITY,
            f64::NEG_INFINITY,
        ],
        |e, c| [e[0].min(c.x), e[1].max(c.x), e[2].min(c.y), e[3].max(c.y)],
    );
    // Arcs of at most 30° rise above their chord by less than a tenth of it.
    let margin = if map.is_straight() { 1e-6 } else { 0.1 }
        * ((reach[1] - reach[0]) + (reach[3] - reach[2]));
    if p.x < reach[0] - margin
        || p.x > reach[1] + margin
        || p.y < reach[2] - margin
        || p.y > reach[3] + margin
    {
        return None;
    }
    let (mut xi, mut eta) = (1.0 / 3.0, 1.0 / 3.0);
    let mut settled = false;
    for _ in 0..20 {
        let at = map.at(xi, eta);
        let (dx, dy) = (p.x - at.x, p.y - at.y);
        let [a, b, c, d] = at.jacobian;
        let step = [(d * dx - b * dy) / at.det, (a * dy - c * dx) / at.det];
        xi += step[0];
        eta += step[1];
        if !(xi.abs() < 10.0 && eta.abs() < 10.0) {
            return None;
        }
        if step[0].abs() + step[1].abs() < 1e-12 {
            settled = true;
            break;
        }
    }
    let inside = settled && xi > -SLACK && eta > -SLACK && xi + eta < 1.0 + SLACK;
    inside.then(|| {
        let (xi, eta) = (xi.max(0.0), eta.max(0.0));
        let over = (xi + eta).max(1.0);
        [xi / over, eta / over]
    })
}
