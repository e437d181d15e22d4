//! Pieces that share area.

use std::collections::BTreeMap;

use super::DomainSide;
use super::cut::{Part, Stacked};
use super::edge::{Edge, distance, extent, winding};
use super::fault::Fault;
use super::overlap::shared_area;
use crate::outline::piece::Piece;
use crate::point::Point;
use crate::tree::{EMPTY, Extent, Tree, hull};

/// Pairs of pieces that share area: those stacked on one side, and those of which one has a part of
/// its edge inside the other. Along a ring a part's place changes only where the other piece touches.
#[must_use]
pub fn overlaps(
    pieces: &[Piece],
    edges: &[Edge],
    parts: &[Part],
    sides: &[DomainSide],
    stacked: &[Stacked],
    tolerance: f64,
) -> Vec<Fault> {
    if pieces.len() < 2 {
        return Vec::new();
    }
    let edges_of: Vec<&[Edge]> = edges
        .chunk_by(|a, b| a.place.piece == b.place.piece)
        .collect();
    let parts_of = by_piece(pieces.len(), parts);
    let boxes: Vec<Extent> = edges_of
        .iter()
        .map(|own| {
            own.iter()
                .fold(EMPTY, |m, e| hull(m, extent(&e.side, tolerance)))
        })
        .collect();
    let interfaces = interfaces(sides);
    let touching = touching(parts);
    let mut pairs: BTreeMap<(usize, usize), Point> = BTreeMap::new();
    for &(a, b, at) in stacked {
        pairs.entry((a as usize, b as usize)).or_insert(at);
    }
    for (a, b) in Tree::new(&boxes).pairs() {
        for (own, other) in [(a, b), (b, a)] {
            if !pairs.contains_key(&(a, b))
                && let Some(at) = part_inside(
                    parts_of[own],
                    other as u32,
                    edges_of[other],
                    &interfaces,
                    &touching,
                    tolerance,
                )
            {
                pairs.insert((a, b), at);
            }
        }
    }
    pairs
        .into_iter()
        .map(|((a, b), at)| {
            if a == b {
                let reason = "two of its sides run along each other".into();
                return Fault::NotSimple { piece: a, reason };
            }
            let (area, at) = shared_area(&pieces[a], &pieces[b]).unwrap_or((0.0, at));
            Fault::PiecesOverlap { a, b, at, area }
        })
        .collect()
}

/// Each piece's parts; they are in the order of pieces, but a piece may have none left.
fn by_piece(pieces: usize, parts: &[Part]) -> Vec<&[Part]> {
    (0..pieces as u32)
        .map(|i| {
            let from = parts.partition_point(|p| p.piece < i);
            let to = parts.partition_point(|p| p.piece <= i);
            &parts[from..to]
        })
        .collect()
}

/// Sides between two pieces: their ends, lower first, and the pieces, sorted.
fn interfaces(sides: &[DomainSide]) -> Vec<(u32, u32, u32, u32)> {
    let mut list: Vec<_> = sides
        .iter()
        .filter_map(|s| {
            let (l, r) = (s.left?, s.right?);
            Some((s.from.min(s.to), s.from.max(s.to), l.min(r), l.max(r)))
        })
        .collect();
    list.sort_unstable();
    list
}

/// Each point with each piece that has a part there, sorted.
fn touching(parts: &[Part]) -> Vec<(u32, u32)> {
    let mut list: Vec<(u32, u32)> = parts
        .iter()
        .flat_map(|p| [(p.from, p.piece), (p.to, p.piece)])
        .collect();
    list.sort_unstable();
    list.dedup();
    list
}

/// The middle of a part that lies inside the piece `other`.
fn part_inside(
    parts: &[Part],
    other: u32,
    edges: &[Edge],
    interfaces: &[(u32, u32, u32, u32)],
    touching: &[(u32, u32)],
    tolerance: f64,
) -> Option<Point> {
    let mut ring = usize::MAX;
    for part in parts {
        let fresh = part.ring != ring || touching.binary_search(&(part.from, other)).is_ok();
        ring = part.ring;
        if !fresh {
            continue;
        }
        let key = (
            part.from.min(part.to),
            part.from.max(part.to),
            part.piece.min(other),
            part.piece.max(other),
        );
        let m = part.middle;
        if interfaces.binary_search(&key).is_err()
            && winding(edges.iter(), m) > 0
            && edges.iter().all(|e| distance(&e.side, m) > tolerance)
        {
            return Some(m);
        }
    }
    None
}
