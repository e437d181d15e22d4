//! The arrangement of the pieces' sides, and what can be wrong with it.

use std::collections::BTreeMap;

use super::contact::contacts;
use super::edge::{Edge, Extent, edges_of, extent, middle, parameter, signed_area, winding};
use super::fault::{Fault, Place};
use super::overlap::{second_opinion, shared_area};
use super::{Domain, DomainSide, TOLERANCE};
use crate::outline::piece::Piece;
use crate::outline::side::{Arc, Circle};
use crate::point::Point;

/// Pieces with more sides than this are not shown to the second judge.
const SECOND_OPINION_LIMIT: usize = 2000;
/// Faults of crossing sides reported for one piece or pair: more would be the same mistake.
const MOST_CROSSINGS: usize = 10;

/// See [`super::build`].
pub fn arrange(pieces: &[Piece]) -> Result<Domain, Vec<Fault>> {
    let edges: Vec<Edge> = pieces
        .iter()
        .enumerate()
        .flat_map(|(i, p)| edges_of(i, p))
        .collect();
    let size = section_size(&edges);
    let tolerance = TOLERANCE * size;
    let mut faults: Vec<Fault> = pieces
        .iter()
        .enumerate()
        .filter(|(_, p)| signed_area(&p.outline.outer).abs() <= tolerance * size)
        .map(|(piece, _)| Fault::NoArea { piece })
        .collect();

    let meetings = meetings(&edges, tolerance);
    let mut cuts: Vec<Vec<Point>> = vec![Vec::new(); edges.len()];
    for meeting in &meetings {
        if edges[meeting.a].place.piece == edges[meeting.b].place.piece {
            faults.extend(meeting.fault_within_piece(&edges, tolerance));
        } else {
            cuts[meeting.a].extend(&meeting.at);
            cuts[meeting.b].extend(&meeting.at);
        }
    }
    limit_crossings(&mut faults);
    if faults.is_empty() {
        faults.extend(misplaced_holes(pieces, &edges));
        for (piece, p) in pieces.iter().enumerate() {
            let count: usize = p.outline.outer.sides.len()
                + p.outline.holes.iter().map(|h| h.sides.len()).sum::<usize>();
            if faults.is_empty()
                && count <= SECOND_OPINION_LIMIT
                && let Some(reason) = second_opinion(p)
            {
                faults.push(Fault::NotSimple { piece, reason });
            }
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }

    let (points, parts) = cut(&edges, &cuts, tolerance);
    let (sides, stacked) = join(&parts);
    faults.extend(overlaps(
        pieces, &edges, &points, &parts, &sides, &stacked, tolerance,
    ));
    if faults.is_empty() {
        faults.extend(pinches(&points, &sides, pieces.len()));
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    let parts = connected_parts(pieces.len(), &sides);
    Ok(Domain {
        points,
        sides,
        piece_names: pieces.iter().map(|p| p.name.clone()).collect(),
        piece_materials: pieces.iter().map(|p| p.material).collect(),
        parts,
    })
}

fn section_size(edges: &[Edge]) -> f64 {
    let mut e = [
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::INFINITY,
        f64::NEG_INFINITY,
    ];
    for edge in edges {
        let b = extent(&edge.side, 0.0);
        e = [
            e[0].min(b[0]),
            e[1].max(b[1]),
            e[2].min(b[2]),
            e[3].max(b[3]),
        ];
    }
    (e[1] - e[0]).max(e[3] - e[2]).max(f64::MIN_POSITIVE)
}

/// Two edges that meet.
struct Meeting {
    a: usize,
    b: usize,
    at: Vec<Point>,
}

/// All pairs of edges that meet, found by a sweep over their boxes.
fn meetings(edges: &[Edge], tolerance: f64) -> Vec<Meeting> {
    let boxes: Vec<Extent> = edges.iter().map(|e| extent(&e.side, tolerance)).collect();
    let mut order: Vec<usize> = (0..edges.len()).collect();
    order.sort_by(|&i, &j| boxes[i][0].total_cmp(&boxes[j][0]).then(i.cmp(&j)));
    let mut active: Vec<usize> = Vec::new();
    let mut out = Vec::new();
    for &i in &order {
        active.retain(|&j| boxes[j][1] >= boxes[i][0]);
        for &j in &active {
            if boxes[j][2] > boxes[i][3] || boxes[j][3] < boxes[i][2] {
                continue;
            }
            let (a, b) = (i.min(j), i.max(j));
            let at = contacts(&edges[a].side, &edges[b].side, tolerance);
            if !at.is_empty() {
                out.push(Meeting { a, b, at });
            }
        }
        active.push(i);
    }
    out.sort_by_key(|m| (m.a, m.b));
    out
}

impl Meeting {
    /// What is wrong with two edges of one piece that meet: nothing, if they follow one another and
    /// share no more than that end.
    fn fault_within_piece(&self, edges: &[Edge], tolerance: f64) -> Option<Fault> {
        let (p, q) = (&edges[self.a], &edges[self.b]);
        let (a, b) = (p.place, q.place);
        let common: Vec<Point> = [(p.side.to, q.side.from), (q.side.to, p.side.from)]
            .into_iter()
            .filter(|(u, v)| u == v)
            .map(|(u, _)| u)
            .collect();
        let at = *self.at.iter().find(|c| {
            a.ring != b.ring || common.iter().all(|e| e.distance(**c) > 4.0 * tolerance)
        })?;
        Some(match (a.ring, b.ring) {
            (r, s) if r == s => Fault::SelfCrossing { a, b, at },
            (0, _) => Fault::HoleCrossesEdge {
                hole: b,
                edge: a,
                at,
            },
            (_, 0) => Fault::HoleCrossesEdge {
                hole: a,
                edge: b,
                at,
            },
            _ => Fault::HolesMeet { a, b, at },
        })
    }
}

/// Keeps the first few crossings of each kind and ring.
fn limit_crossings(faults: &mut Vec<Fault>) {
    let mut seen: BTreeMap<(u8, Place, Place), usize> = BTreeMap::new();
    let ring = |p: &Place| Place { side: 0, ..*p };
    faults.retain(|fault| {
        let key = match fault {
            Fault::SelfCrossing { a, b, .. } => (0, ring(a), ring(b)),
            Fault::HoleCrossesEdge { hole, edge, .. } => (1, ring(hole), ring(edge)),
            Fault::HolesMeet { a, b, .. } => (2, ring(a), ring(b)),
            _ => return true,
        };
        let count = seen.entry(key).or_default();
        *count += 1;
        *count <= MOST_CROSSINGS
    });
}

/// Holes outside of their piece or inside one another; no two rings meet.
fn misplaced_holes(pieces: &[Piece], edges: &[Edge]) -> Vec<Fault> {
    let mut faults = Vec::new();
    for (i, piece) in pieces.iter().enumerate() {
        if piece.outline.holes.is_empty() {
            continue;
        }
        let own: Vec<&Edge> = edges.iter().filter(|e| e.place.piece == i).collect();
        let about = |ring: usize, p: Point| {
            winding(own.iter().copied().filter(|e| e.place.ring == ring), p) != 0
        };
        for h in 1..=piece.outline.holes.len() {
            let Some(edge) = own.iter().find(|e| e.place.ring == h) else {
                continue;
            };
            let at = middle(&edge.side);
            if !about(0, at) {
                faults.push(Fault::HoleOutside { hole: edge.place });
            }
            for g in 1..=piece.outline.holes.len() {
                if g != h && about(g, at) {
                    let other = own.iter().find(|e| e.place.ring == g);
                    faults.push(Fault::HolesMeet {
                        a: edge.place,
                        b: other.map_or(edge.place, |e| e.place),
                        at,
                    });
                }
            }
        }
    }
    faults
}

/// A part of an edge between two points of the arrangement.
#[derive(Clone, Copy)]
struct Part {
    from: u32,
    to: u32,
    arc: Option<Arc>,
    piece: u32,
    middle: Point,
}

/// Points within the tolerance of each other are one: the first that is seen.
struct Points {
    list: Vec<Point>,
    /// By grid cell of twice the tolerance.
    cells: BTreeMap<(i64, i64), Vec<u32>>,
    tolerance: f64,
}

impl Points {
    fn index(&mut self, p: Point) -> u32 {
        let cell = 4.0 * self.tolerance;
        let (i, j) = ((p.x / cell).floor() as i64, (p.y / cell).floor() as i64);
        for di in -1..=1 {
            for dj in -1..=1 {
                for &k in self.cells.get(&(i + di, j + dj)).into_iter().flatten() {
                    if self.list[k as usize].distance(p) <= 2.0 * self.tolerance {
                        return k;
                    }
                }
            }
        }
        let k = self.list.len() as u32;
        self.list.push(p);
        self.cells.entry((i, j)).or_default().push(k);
        k
    }
}

/// Cuts each edge where others meet it.
fn cut(edges: &[Edge], cuts: &[Vec<Point>], tolerance: f64) -> (Vec<Point>, Vec<Part>) {
    let mut points = Points {
        list: Vec::new(),
        cells: BTreeMap::new(),
        tolerance,
    };
    // Corners first: they keep their coordinates.
    for edge in edges {
        points.index(edge.side.from);
    }
    let mut parts = Vec::new();
    for (edge, cuts) in edges.iter().zip(cuts) {
        let side = &edge.side;
        let mut stops: Vec<(f64, u32)> = cuts
            .iter()
            .filter_map(|&p| Some((parameter(side, p)?, points.index(p))))
            .collect();
        stops.push((0.0, points.index(side.from)));
        stops.push((1.0, points.index(side.to)));
        stops.sort_by(|a, b| a.0.total_cmp(&b.0));
        stops.dedup_by_key(|s| s.1);
        for w in stops.windows(2) {
            let (from, to) = (w[0].1, w[1].1);
            let (a, b) = (points.list[from as usize], points.list[to as usize]);
            let arc = side.arc.map(|arc| Arc {
                circle: arc.circle,
                sweep: sweep_between(&arc.circle, a, b, arc.sweep.signum()),
            });
            let part = crate::outline::side::Side {
                from: a,
                to: b,
                arc,
                corner: side.corner,
            };
            parts.push(Part {
                from,
                to,
                arc,
                piece: edge.place.piece as u32,
                middle: middle(&part),
            });
        }
    }
    (points.list, parts)
}

fn sweep_between(circle: &Circle, a: Point, b: Point, sense: f64) -> f64 {
    let (u, v) = (a - circle.centre, b - circle.centre);
    let angle = u.cross(v).atan2(u.dot(v));
    if angle * sense > 0.0 {
        angle
    } else {
        angle + std::f64::consts::TAU * sense
    }
}

/// Joins parts that run along each other. Parts of two pieces that lie on the same hand of a side are
/// stacked: the pieces overlap.
fn join(parts: &[Part]) -> (Vec<DomainSide>, Vec<(u32, u32)>) {
    let mut sides: Vec<DomainSide> = Vec::new();
    let mut known: BTreeMap<(u32, u32), Vec<usize>> = BTreeMap::new();
    let mut stacked = Vec::new();
    for part in parts {
        let key = (part.from.min(part.to), part.from.max(part.to));
        let twins = known.entry(key).or_default();
        let twin = twins.iter().copied().find(|&s| same_curve(&sides[s], part));
        let Some(s) = twin else {
            twins.push(sides.len());
            sides.push(DomainSide {
                from: part.from,
                to: part.to,
                arc: part.arc,
                left: Some(part.piece),
                right: None,
            });
            continue;
        };
        let side = &mut sides[s];
        let hand = if side.from == part.from {
            &mut side.left
        } else {
            &mut side.right
        };
        match *hand {
            None => *hand = Some(part.piece),
            Some(other) => stacked.push((other.min(part.piece), other.max(part.piece))),
        }
    }
    (sides, stacked)
}

/// Whether a part runs along a side with the same ends: both straight, or arcs that bulge alike.
fn same_curve(side: &DomainSide, part: &Part) -> bool {
    match (side.arc, part.arc) {
        (None, None) => true,
        (Some(a), Some(b)) => {
            let turned = if side.from == part.from {
                b.sweep
            } else {
                -b.sweep
            };
            let near = 1e-6 * a.circle.radius.max(b.circle.radius);
            (a.circle.radius - b.circle.radius).abs() < near && a.sweep * turned > 0.0
        }
        _ => false,
    }
}

/// Pairs of pieces that share area.
fn overlaps(
    pieces: &[Piece],
    edges: &[Edge],
    points: &[Point],
    parts: &[Part],
    sides: &[DomainSide],
    stacked: &[(u32, u32)],
    tolerance: f64,
) -> Vec<Fault> {
    if pieces.len() < 2 {
        return Vec::new();
    }
    let boxes: Vec<Extent> = (0..pieces.len())
        .map(|i| {
            let own = edges.iter().filter(|e| e.place.piece == i);
            own.map(|e| extent(&e.side, 0.0)).fold(
                [
                    f64::INFINITY,
                    f64::NEG_INFINITY,
                    f64::INFINITY,
                    f64::NEG_INFINITY,
                ],
                |m, e| {
                    [
                        m[0].min(e[0]),
                        m[1].max(e[1]),
                        m[2].min(e[2]),
                        m[3].max(e[3]),
                    ]
                },
            )
        })
        .collect();
    // Parts that are interfaces lie on the edge of their neighbour, not inside it.
    let shared: BTreeMap<(u32, u32), Vec<[u32; 2]>> =
        sides.iter().fold(BTreeMap::new(), |mut m, s| {
            if let (Some(l), Some(r)) = (s.left, s.right) {
                m.entry((s.from.min(s.to), s.from.max(s.to)))
                    .or_insert_with(Vec::new)
                    .push([l, r]);
            }
            m
        });
    let by_piece: Vec<Vec<&Edge>> = (0..pieces.len())
        .map(|i| edges.iter().filter(|e| e.place.piece == i).collect())
        .collect();
    let mut pairs: BTreeMap<(usize, usize), Point> = BTreeMap::new();
    for &(a, b) in stacked {
        let at = points.first().copied().unwrap_or_default();
        pairs.entry((a as usize, b as usize)).or_insert(at);
    }
    for part in parts {
        let a = part.piece as usize;
        let key = (part.from.min(part.to), part.from.max(part.to));
        for b in 0..pieces.len() {
            let (m, e) = (part.middle, boxes[b]);
            if b == a || m.x < e[0] || m.x > e[1] || m.y < e[2] || m.y > e[3] {
                continue;
            }
            let between = |x: &[u32; 2]| x.contains(&(b as u32)) && x.contains(&part.piece);
            if shared.get(&key).is_some_and(|v| v.iter().any(between))
                || pairs.contains_key(&(a.min(b), a.max(b)))
                || by_piece[b]
                    .iter()
                    .any(|x| super::edge::distance(&x.side, m) <= tolerance)
            {
                continue;
            }
            if winding(by_piece[b].iter().copied(), m) > 0 {
                pairs.insert((a.min(b), a.max(b)), m);
            }
        }
    }
    pairs
        .into_iter()
        .map(|((a, b), at)| {
            let (area, at) = shared_area(&pieces[a], &pieces[b]).unwrap_or((0.0, at));
            Fault::PiecesOverlap { a, b, at, area }
        })
        .collect()
}

/// Points at which material hangs together by nothing: two or more gaps around one point.
fn pinches(points: &[Point], sides: &[DomainSide], pieces: usize) -> Vec<Fault> {
    if pieces < 2 {
        return Vec::new();
    }
    let mut gaps = vec![0u32; points.len()];
    let mut around: Vec<Vec<u32>> = vec![Vec::new(); points.len()];
    for side in sides {
        for v in [side.from, side.to] {
            around[v as usize].extend(side.left.iter().chain(&side.right));
        }
        // Each gap is entered over one free side: the one with the gap to its right, leaving the point.
        if side.right.is_none() {
            gaps[side.from as usize] += 1;
        }
        if side.left.is_none() {
            gaps[side.to as usize] += 1;
        }
    }
    let mut faults = Vec::new();
    for (v, &gaps) in gaps.iter().enumerate() {
        if gaps > 1 {
            let mut meet = around[v].clone();
            meet.sort_unstable();
            meet.dedup();
            let (a, b) = (meet[0] as usize, *meet.last().unwrap_or(&meet[0]) as usize);
            faults.push(Fault::PiecesTouchInPoint {
                a,
                b,
                at: points[v],
            });
        }
    }
    faults
}

fn connected_parts(pieces: usize, sides: &[DomainSide]) -> usize {
    let mut leader: Vec<usize> = (0..pieces).collect();
    fn find(leader: &mut [usize], mut x: usize) -> usize {
        while leader[x] != x {
            leader[x] = leader[leader[x]];
            x = leader[x];
        }
        x
    }
    for side in sides {
        if let (Some(a), Some(b)) = (side.left, side.right) {
            let (a, b) = (find(&mut leader, a as usize), find(&mut leader, b as usize));
            leader[a.max(b)] = a.min(b);
        }
    }
    (0..pieces).filter(|&i| leader[i] == i).count()
}
