//! Boxes in a balanced tree: which of them overlap, and which item lies nearest to a point.

use crate::point::Point;

/// A box with sides along the axes: `[x_min, x_max, y_min, y_max]`.
pub type Extent = [f64; 4];

/// The box of nothing.
pub const EMPTY: Extent = [
    f64::INFINITY,
    f64::NEG_INFINITY,
    f64::INFINITY,
    f64::NEG_INFINITY,
];

/// Boxes in a leaf.
const LEAF: usize = 8;

/// The box about two boxes.
#[must_use]
pub fn hull(a: Extent, b: Extent) -> Extent {
    [
        a[0].min(b[0]),
        a[1].max(b[1]),
        a[2].min(b[2]),
        a[3].max(b[3]),
    ]
}

/// Whether two boxes have a point in common.
#[must_use]
pub fn overlap(a: &Extent, b: &Extent) -> bool {
    a[0] <= b[1] && b[0] <= a[1] && a[2] <= b[3] && b[2] <= a[3]
}

/// A binary tree over boxes: node k has the children 2k+1 and 2k+2; every node covers one run of
/// `order`, halved at its middle.
#[derive(Clone, Debug)]
pub struct Tree<'a> {
    boxes: &'a [Extent],
    order: Vec<u32>,
    nodes: Vec<Extent>,
}

impl<'a> Tree<'a> {
    /// The tree over `boxes`.
    #[must_use]
    pub fn new(boxes: &'a [Extent]) -> Self {
        let mut tree = Self {
            boxes,
            order: (0..boxes.len() as u32).collect(),
            nodes: Vec::new(),
        };
        tree.fill(0, 0, boxes.len());
        tree
    }

    fn fill(&mut self, node: usize, from: usize, to: usize) {
        let boxes = self.boxes;
        let run = &mut self.order[from..to];
        let around = run.iter().fold(EMPTY, |m, &i| hull(m, boxes[i as usize]));
        if self.nodes.len() <= node {
            self.nodes.resize(node + 1, EMPTY);
        }
        self.nodes[node] = around;
        if run.len() <= LEAF {
            return;
        }
        let axis = if around[1] - around[0] >= around[3] - around[2] {
            0
        } else {
            2
        };
        let middle = |i: u32| boxes[i as usize][axis] + boxes[i as usize][axis + 1];
        let half = run.len() / 2;
        run.select_nth_unstable_by(half, |&i, &j| {
            middle(i).total_cmp(&middle(j)).then(i.cmp(&j))
        });
        self.fill(2 * node + 1, from, from + half);
        self.fill(2 * node + 2, from + half, to);
    }

    /// Calls `found` with the index of each box that overlaps `range`, in no order worth relying on.
    pub fn overlapping(&self, range: &Extent, found: &mut impl FnMut(usize)) {
        self.overlapping_below(0, 0, self.order.len(), range, found);
    }

    fn overlapping_below(
        &self,
        node: usize,
        from: usize,
        to: usize,
        range: &Extent,
        found: &mut impl FnMut(usize),
    ) {
        if !overlap(&self.nodes[node], range) {
            return;
        }
        if to - from <= LEAF {
            for &i in &self.order[from..to] {
                if overlap(&self.boxes[i as usize], range) {
                    found(i as usize);
                }
            }
            return;
        }
        let middle = from + (to - from) / 2;
        self.overlapping_below(2 * node + 1, from, middle, range, found);
        self.overlapping_below(2 * node + 2, middle, to, range, found);
    }

    /// All pairs `(i, j)`, `i < j`, of boxes that overlap, sorted.
    #[must_use]
    pub fn pairs(&self) -> Vec<(usize, usize)> {
        let mut pairs = Vec::new();
        for (i, range) in self.boxes.iter().enumerate() {
            self.overlapping(range, &mut |j| {
                if i < j {
                    pairs.push((i, j));
                }
            });
        }
        pairs.sort_unstable();
        pairs
    }

    /// The least of `distance(i)` over all items, infinite if there are none; an item may answer
    /// infinity to be passed over. No item may be nearer than its box.
    #[must_use]
    pub fn nearest(&self, p: Point, mut distance: impl FnMut(usize) -> f64) -> f64 {
        let mut best = f64::INFINITY;
        // (node, from, to), the nearer child on top.
        let mut stack = vec![(0, 0, self.order.len())];
        while let Some((node, from, to)) = stack.pop() {
            if gap(&self.nodes[node], p) >= best {
                continue;
            }
            if to - from <= LEAF {
                for &i in &self.order[from..to] {
                    if gap(&self.boxes[i as usize], p) < best {
                        best = best.min(distance(i as usize));
                    }
                }
                continue;
            }
            let middle = from + (to - from) / 2;
            let (l, r) = ((2 * node + 1, from, middle), (2 * node + 2, middle, to));
            if gap(&self.nodes[l.0], p) < gap(&self.nodes[r.0], p) {
                stack.extend([r, l]);
            } else {
                stack.extend([l, r]);
            }
        }
        best
    }
}

/// Distance from a point to a box.
fn gap(b: &Extent, p: Point) -> f64 {
    let x = (b[0] - p.x).max(p.x - b[1]).max(0.0);
    let y = (b[2] - p.y).max(p.y - b[3]).max(0.0);
    x.hypot(y)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Boxes spread without order by a linear congruence.
    fn boxes(n: usize) -> Vec<Extent> {
        let mut state = 1u64;
        let mut next = || {
            state = state
                .wrapping_mul(6364136223846793005)
                .wrapping_add(1442695040888963407);
            (state >> 40) as f64 / (1u64 << 24) as f64
        };
        (0..n)
            .map(|_| {
                let (x, y, w, h) = (next(), next(), 0.1 * next(), 0.1 * next());
                [x, x + w, y, y + h]
            })
            .collect()
    }

    #[test]
    fn pairs_are_those_that_all_against_all_finds() {
        for n in [0, 1, 8, 9, 300] {
            let boxes = boxes(n);
            let mut expected = Vec::new();
            for i in 0..n {
                for j in i + 1..n {
                    if overlap(&boxes[i], &boxes[j]) {
                        expected.push((i, j));
                    }
                }
            }
            assert_eq!(Tree::new(&boxes).pairs(), expected);
        }
    }

    #[test]
    fn nearest_is_the_least_distance_of_all() {
        let boxes = boxes(300);
        let tree = Tree::new(&boxes);
        for b in &boxes {
            let p = Point::new(b[3], b[0]);
            let all = boxes.iter().map(|b| gap(b, p)).filter(|&d| d > 0.0);
            let seen = tree.nearest(p, |i| {
                let d = gap(&boxes[i], p);
                if d > 0.0 { d } else { f64::INFINITY }
            });
            assert_eq!(seen, all.fold(f64::INFINITY, f64::min));
        }
    }
}
