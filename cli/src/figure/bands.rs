//! Iso-bands and the lines between them, exact on small triangles with linear values.
//!
//! Bands are nested: for each level the region `value ≥ level`, painted from low to high, each over
//! the last. No two neighbours meet in a seam, where printers and screens would let paper through, and
//! the area of band i is that of region i less that of region i+1.

use sectile_mesh::Point;

use super::surface::Surface;

/// A point where a region's edge turns: a point of the surface (twice the same index), or the place
/// where an edge between two of them is crossed (lower index first).
type Node = (u32, u32);

/// A surface cut at a level.
pub struct Cut<'a> {
    surface: &'a Surface,
    values: &'a [f64],
    level: f64,
    /// In each cell that the level crosses, the segment that has `value ≥ level` on the inner hand.
    segments: Vec<(Node, Node)>,
}

impl<'a> Cut<'a> {
    /// Cuts `surface`, whose points have `values`, at `level`.
    #[must_use]
    pub fn new(surface: &'a Surface, values: &'a [f64], level: f64) -> Self {
        let mut segments = Vec::new();
        for cell in &surface.cells {
            let inside = cell.map(|v| values[v as usize] >= level);
            if inside == [true; 3] || inside == [false; 3] {
                continue;
            }
            let (mut leave, mut enter) = ((0, 0), (0, 0));
            for k in 0..3 {
                let l = (k + 1) % 3;
                match (inside[k], inside[l]) {
                    (true, false) => leave = crossing(cell[k], cell[l]),
                    (false, true) => enter = crossing(cell[k], cell[l]),
                    _ => {}
                }
            }
            segments.push((leave, enter));
        }
        Self {
            surface,
            values,
            level,
            segments,
        }
    }

    /// The region `value ≥ level` as closed loops, the region on the same hand of each as cells are
    /// oriented; its area is the sum of the loops' signed areas.
    #[must_use]
    pub fn region(&self) -> Vec<Vec<Point>> {
        let inside = |v: u32| self.values[v as usize] >= self.level;
        let mut segments = self.segments.clone();
        for &[a, b] in &self.surface.rim {
            match (inside(a), inside(b)) {
                (true, true) => segments.push(((a, a), (b, b))),
                (true, false) => segments.push(((a, a), crossing(a, b))),
                (false, true) => segments.push((crossing(a, b), (b, b))),
                (false, false) => {}
            }
        }
        // A closed chain ends in the node that it starts with.
        let places = |nodes: Vec<Node>| {
            let open = &nodes[..nodes.len() - 1];
            open.iter().map(|&n| self.place(n)).collect()
        };
        chain(&segments).into_iter().map(places).collect()
    }

    /// The lines `value = level` inside the surface, open or closed (first point repeated).
    #[must_use]
    pub fn lines(&self) -> Vec<Vec<Point>> {
        let places = |nodes: Vec<Node>| nodes.iter().map(|&n| self.place(n)).collect();
        chain(&self.segments).into_iter().map(places).collect()
    }

    fn place(&self, (a, b): Node) -> Point {
        let (p, q) = (
            self.surface.points[a as usize],
            self.surface.points[b as usize],
        );
        if a == b {
            return p;
        }
        let (u, v) = (self.values[a as usize], self.values[b as usize]);
        p.lerp(q, ((self.level - u) / (v - u)).clamp(0.0, 1.0))
    }
}

fn crossing(a: u32, b: u32) -> Node {
    (a.min(b), a.max(b))
}

/// Joins directed segments end to start. Chains that begin where none arrives come first, then loops.
fn chain(segments: &[(Node, Node)]) -> Vec<Vec<Node>> {
    let mut order: Vec<usize> = (0..segments.len()).collect();
    order.sort_unstable_by_key(|&i| (segments[i].0, i));
    let mut arriving: Vec<Node> = segments.iter().map(|s| s.1).collect();
    arriving.sort_unstable();
    let mut used = vec![false; segments.len()];
    let leaving = |node: Node, used: &[bool]| {
        let first = order.partition_point(|&i| segments[i].0 < node);
        order[first..]
            .iter()
            .take_while(|&&i| segments[i].0 == node)
            .copied()
            .find(|&i| !used[i])
    };
    let mut chains = Vec::new();
    for only_open in [true, false] {
        for &start in &order {
            if used[start] || (only_open && arriving.binary_search(&segments[start].0).is_ok()) {
                continue;
            }
            let mut nodes = vec![segments[start].0];
            let mut next = Some(start);
            while let Some(i) = next {
                used[i] = true;
                nodes.push(segments[i].1);
                next = leaving(segments[i].1, &used);
            }
            chains.push(nodes);
        }
    }
    chains
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::levels::Levels;
    use crate::figure::samples;

    fn area(points: &[Point]) -> f64 {
        let n = points.len();
        let twice: f64 = (0..n)
            .map(|i| {
                let (a, b) = (points[i], points[(i + 1) % n]);
                a.x * b.y - b.x * a.y
            })
            .sum();
        0.5 * twice
    }

    fn cells_area(surface: &Surface) -> f64 {
        let corner = |c: &[u32; 3]| c.map(|v| surface.points[v as usize]);
        surface.cells.iter().map(|c| area(&corner(c))).sum()
    }

    /// The part of a triangle with linear values that lies at or above a level, by formula.
    fn part_above(p: [Point; 3], v: [f64; 3], level: f64) -> f64 {
        let whole = area(&p);
        let mut s = v;
        s.sort_by(f64::total_cmp);
        let [lo, mid, hi] = s;
        if level <= lo {
            whole
        } else if level > hi {
            0.0
        } else if level >= mid && hi > mid {
            whole * (hi - level).powi(2) / ((hi - lo) * (hi - mid))
        } else {
            whole * (1.0 - (level - lo).powi(2) / ((hi - lo) * (mid - lo)))
        }
    }

    #[test]
    fn bands_cover_the_area_exactly_once() {
        for (surface, values) in [samples::wavy_rectangle(), samples::wavy_annulus()] {
            let low = values.iter().copied().fold(f64::INFINITY, f64::min);
            let high = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
            let levels = Levels::between(low, high);
            let whole = cells_area(&surface);
            let mut above: Vec<f64> = (0..=levels.bands())
                .map(|i| {
                    let level = if i == 0 {
                        f64::NEG_INFINITY
                    } else {
                        levels.edge(i)
                    };
                    Cut::new(&surface, &values, level)
                        .region()
                        .iter()
                        .map(|l| area(l))
                        .sum()
                })
                .collect();
            above.push(0.0);
            assert!((above[0] - whole).abs() < 1e-9 * whole);
            let bands: Vec<f64> = above.windows(2).map(|w| w[0] - w[1]).collect();
            assert!(bands.iter().all(|&b| b >= -1e-12), "{bands:?}");
            assert!((bands.iter().sum::<f64>() - whole).abs() < 1e-9 * whole);
            // And each region has the area that the linear values give it.
            for (i, &found) in above.iter().enumerate().skip(1).take(levels.bands()) {
                let expected: f64 = surface
                    .cells
                    .iter()
                    .map(|c| {
                        part_above(
                            c.map(|v| surface.points[v as usize]),
                            c.map(|v| values[v as usize]),
                            levels.edge(i),
                        )
                    })
                    .sum();
                assert!(
                    (found - expected).abs() < 1e-9 * whole,
                    "{i} {found} {expected}"
                );
            }
        }
    }

    #[test]
    fn levels_through_lattice_points_do_no_harm() {
        // Values that are whole numbers at the points, levels at those numbers.
        let (surface, _) = samples::wavy_rectangle();
        let values: Vec<f64> = surface.points.iter().map(|p| (8.0 * p.x).round()).collect();
        let whole = cells_area(&surface);
        for level in 0..=8 {
            let found: f64 = Cut::new(&surface, &values, f64::from(level))
                .region()
                .iter()
                .map(|l| area(l))
                .sum();
            assert!(found >= 0.0 && found <= whole * (1.0 + 1e-12));
        }
    }

    #[test]
    fn lines_of_a_plane_are_straight_and_span_the_rectangle() {
        let (surface, _) = samples::wavy_rectangle();
        let values: Vec<f64> = surface.points.iter().map(|p| p.x).collect();
        let found = Cut::new(&surface, &values, 0.333).lines();
        assert_eq!(found.len(), 1);
        assert!(found[0].iter().all(|p| (p.x - 0.333).abs() < 1e-12));
        let (a, b) = (found[0][0], found[0][found[0].len() - 1]);
        let height = samples::WAVY_HEIGHT;
        assert!(((a.y - b.y).abs() - height).abs() < 1e-12);
    }
}
