//! Loose sides are chained into loops, over gaps up to a width.

use std::collections::HashMap;

use sectile_mesh::Point;
use sectile_mesh::outline::side::Side;

use super::loops::{Loop, Tolerances, with_ends};
use super::number::{place, short};
use crate::read::fault::Fault;

/// Ends that were apart and are one now.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Joint {
    /// Where they are now: half-way.
    pub at: Point,
    /// How far apart they were.
    pub width: f64,
}

/// Two ends of outlines that are too far apart to be joined.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Opening {
    /// One end.
    pub from: Point,
    /// The end that is nearest to it.
    pub to: Point,
}

/// A place where more than two ends meet, or might.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crowd {
    /// Where.
    pub at: Point,
    /// How many ends.
    pub ends: usize,
    /// Whether they are one place; else they are within the gap of one another.
    pub met: bool,
}

/// What became of the loose sides of a layer.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Chained {
    /// The closed loops.
    pub loops: Vec<Loop>,
    /// The gaps that are left.
    pub open: Vec<Opening>,
    /// The gaps that were closed.
    pub joints: Vec<Joint>,
    /// Places where it is not clear which ends belong together.
    pub crowded: Vec<Crowd>,
}

/// More loose ends than this are paired along their own outlines only.
const MOST_PAIRED: usize = 2000;

/// Chains `sides`.
#[must_use]
pub fn chained(sides: Vec<Side>, tolerances: &Tolerances) -> Chained {
    let mut out = Chained::default();
    // Whole circles need no partner.
    let (whole, sides): (Vec<Side>, Vec<Side>) = sides.into_iter().partition(|s| s.from == s.to);
    out.loops
        .extend(whole.into_iter().map(|side| Loop { sides: vec![side] }));

    let mut nodes = Nodes::new(tolerances.same());
    let ends: Vec<[usize; 2]> = sides
        .iter()
        .map(|side| [nodes.at(side.from), nodes.at(side.to)])
        .collect();
    let mut places = nodes.places;
    let mut at_node: Vec<Vec<usize>> = vec![Vec::new(); places.len()];
    for (i, [a, b]) in ends.iter().enumerate() {
        at_node[*a].push(i);
        at_node[*b].push(i);
    }
    for (node, here) in at_node.iter().enumerate() {
        if here.len() > 2 {
            out.crowded.push(Crowd {
                at: places[node],
                ends: here.len(),
                met: true,
            });
        }
    }
    if !out.crowded.is_empty() {
        return out;
    }
    // `partner[n]`: the loose end that node n is joined with over a gap.
    let mut partner: Vec<Option<usize>> = vec![None; places.len()];
    join(
        &at_node,
        &ends,
        &mut places,
        &mut partner,
        tolerances.gap,
        &mut out,
    );
    if !out.crowded.is_empty() {
        return out;
    }
    walk(&sides, &ends, &at_node, &places, &partner, &mut out);
    out
}

/// Joins loose ends that are within `gap`, the nearest first.
fn join(
    at_node: &[Vec<usize>],
    ends: &[[usize; 2]],
    places: &mut [Point],
    partner: &mut [Option<usize>],
    gap: f64,
    out: &mut Chained,
) {
    let loose: Vec<usize> = (0..places.len())
        .filter(|&n| at_node[n].len() == 1)
        .collect();
    let cell = |p: Point| {
        let of = |c: f64| (c / gap.max(f64::MIN_POSITIVE)).floor();
        (of(p.x), of(p.y))
    };
    let key = |x: f64, y: f64| (x.to_bits(), y.to_bits());
    let mut cells: HashMap<(u64, u64), Vec<usize>> = HashMap::new();
    if gap > 0.0 {
        for &node in &loose {
            let (x, y) = cell(places[node]);
            cells.entry(key(x + 0.0, y + 0.0)).or_default().push(node);
        }
    }
    let mut pairs: Vec<(f64, usize, usize)> = Vec::new();
    for &node in &loose {
        if gap <= 0.0 {
            break;
        }
        let (x, y) = cell(places[node]);
        let mut near = 0;
        for (dx, dy) in
            (-1..=1).flat_map(|dx| (-1..=1).map(move |dy| (f64::from(dx), f64::from(dy))))
        {
            let Some(here) = cells.get(&key(x + dx + 0.0, y + dy + 0.0)) else {
                continue;
            };
            for &other in here {
                let width = places[node].distance(places[other]);
                let one_line = at_node[node][0] == at_node[other][0]
                    && ends[at_node[node][0]].contains(&other);
                if other == node || width > gap || one_line {
                    continue;
                }
                near += 1;
                if other > node && near <= 8 {
                    pairs.push((width, node, other));
                }
            }
        }
        if near > 8 {
            out.crowded.push(Crowd {
                at: places[node],
                ends: near + 1,
                met: false,
            });
            return;
        }
    }
    pairs.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
    let mut left_out: Vec<usize> = Vec::new();
    for &(width, a, b) in &pairs {
        match (partner[a], partner[b]) {
            (None, None) => {
                partner[a] = Some(b);
                partner[b] = Some(a);
                let at = places[a].lerp(places[b], 0.5);
                places[a] = at;
                places[b] = at;
                out.joints.push(Joint { at, width });
            }
            (None, Some(_)) => left_out.push(a),
            (Some(_), None) => left_out.push(b),
            (Some(_), Some(_)) => {}
        }
    }
    left_out.retain(|&node| partner[node].is_none());
    left_out.sort_unstable();
    left_out.dedup();
    out.crowded.extend(left_out.into_iter().map(|node| Crowd {
        at: places[node],
        ends: 3,
        met: false,
    }));
}

/// Follows the sides from end to end.
fn walk(
    sides: &[Side],
    ends: &[[usize; 2]],
    at_node: &[Vec<usize>],
    places: &[Point],
    partner: &[Option<usize>],
    out: &mut Chained,
) {
    let mut used = vec![false; sides.len()];
    // From `node`, the next side and the node at which it is entered.
    let onward = |node: usize, used: &[bool]| -> Option<(usize, usize)> {
        let free = |n: usize| {
            at_node[n]
                .iter()
                .copied()
                .find(|&s| !used[s])
                .map(|s| (s, n))
        };
        free(node).or_else(|| partner[node].and_then(free))
    };
    let follow = |start: usize, used: &mut Vec<bool>| -> (Vec<Side>, usize) {
        let (mut node, mut chain) = (start, Vec::new());
        while let Some((side, entry)) = onward(node, used) {
            used[side] = true;
            let [a, b] = ends[side];
            let (exit, turned) = if entry == a {
                (b, sides[side])
            } else {
                (a, reversed(&sides[side]))
            };
            chain.push(with_ends(&turned, places[entry], places[exit]));
            node = exit;
        }
        (chain, node)
    };
    let mut loose: Vec<(usize, usize)> = Vec::new();
    for node in 0..places.len() {
        if at_node[node].len() == 1 && partner[node].is_none() && !used[at_node[node][0]] {
            let (_, last) = follow(node, &mut used);
            loose.push((node, last));
        }
    }
    for side in 0..sides.len() {
        if !used[side] {
            let (chain, _) = follow(ends[side][0], &mut used);
            out.loops.push(Loop { sides: chain });
        }
    }
    out.open = openings(&loose, places);
}

/// Which loose ends belong together most likely: the nearest first.
fn openings(chains: &[(usize, usize)], places: &[Point]) -> Vec<Opening> {
    let of = |a: usize, b: usize| Opening {
        from: places[a],
        to: places[b],
    };
    let nodes: Vec<usize> = chains.iter().flat_map(|&(a, b)| [a, b]).collect();
    if nodes.len() > MOST_PAIRED {
        return chains.iter().map(|&(a, b)| of(a, b)).collect();
    }
    let mut pairs: Vec<(f64, usize, usize)> = Vec::new();
    for i in 0..nodes.len() {
        for j in i + 1..nodes.len() {
            pairs.push((places[nodes[i]].distance(places[nodes[j]]), i, j));
        }
    }
    pairs.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
    let mut taken = vec![false; nodes.len()];
    let mut out = Vec::new();
    for (_, i, j) in pairs {
        if !taken[i] && !taken[j] {
            (taken[i], taken[j]) = (true, true);
            out.push(of(nodes[i], nodes[j]));
        }
    }
    out
}

fn reversed(side: &Side) -> Side {
    let mut arc = side.arc;
    if let Some(arc) = &mut arc {
        arc.sweep = -arc.sweep;
    }
    Side {
        from: side.to,
        to: side.from,
        arc,
        ..*side
    }
}

/// Places, those within a distance of one another told as one.
struct Nodes {
    same: f64,
    places: Vec<Point>,
    cells: HashMap<(i64, i64), Vec<usize>>,
}

impl Nodes {
    fn new(same: f64) -> Self {
        Self {
            same,
            places: Vec::new(),
            cells: HashMap::new(),
        }
    }

    fn at(&mut self, p: Point) -> usize {
        let cell = |c: f64| (c / self.same).floor() as i64;
        let (x, y) = (cell(p.x), cell(p.y));
        for dx in -1..=1 {
            for dy in -1..=1 {
                let key = (x.saturating_add(dx), y.saturating_add(dy));
                let here = self.cells.get(&key).map_or(&[][..], Vec::as_slice);
                if let Some(&node) = here
                    .iter()
                    .find(|&&node| self.places[node].distance(p) <= self.same)
                {
                    return node;
                }
            }
        }
        self.places.push(p);
        let node = self.places.len() - 1;
        self.cells.entry((x, y)).or_default().push(node);
        node
    }
}

impl Opening {
    /// How wide the gap is.
    #[must_use]
    pub fn width(&self) -> f64 {
        self.from.distance(self.to)
    }

    /// The fault that it is.
    #[must_use]
    pub fn fault(&self, tolerances: &Tolerances) -> Fault {
        let size = tolerances.size;
        let width = self.width();
        let message = format!(
            "an outline is open between {} and {}: the gap is {} wide, --gap is {}",
            place(self.from, size),
            place(self.to, size),
            short(width),
            short(tolerances.gap)
        );
        let remedy = if width <= 0.02 * size {
            format!(
                "close it in the drawing, or allow gaps up to {} with --gap",
                short(1.05 * width)
            )
        } else {
            "close it in the drawing; if it is no outline, choose the outlines' layers with --layer"
                .to_owned()
        };
        Fault::whole(message, remedy)
    }
}

impl Crowd {
    /// The fault that it is.
    #[must_use]
    pub fn fault(&self, layer: &str, size: f64) -> Fault {
        let at = place(self.at, size);
        if self.met {
            return Fault::whole(
                format!(
                    "{} ends meet at {at} on layer \"{layer}\", so it is not clear how the outlines run",
                    self.ends
                ),
                "draw each outline as a closed polyline, or each piece on a layer of its own",
            );
        }
        Fault::whole(
            format!(
                "{} loose ends lie within the gap of one another near {at} on layer \"{layer}\"",
                self.ends
            ),
            "join them in the drawing, or make --gap smaller",
        )
    }
}
