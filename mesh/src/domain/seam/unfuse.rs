//! Pieces that only lie against each other, taken apart.

use std::collections::BTreeMap;

use crate::domain::{Domain, DomainSide};

/// A domain with slits.
pub struct Unfused {
    /// The domain.
    pub domain: Domain,
    /// For each side that was fused, its ends in the new domain.
    pub ends: Vec<[u32; 2]>,
}

/// Takes a domain's interfaces apart but for those that are `fused`: each becomes two sides, one a hand,
/// on one and the same line.
///
/// Around a point the pieces that hang together by fused sides get one copy of it. So a point has at most
/// one gap, a slit's end within fused material is one point for both hands, and pieces that meet in a
/// point only do not hang together. A slit of one side that ends at such points both ways is divided once
/// more, or its hands would have the same ends.
#[must_use]
pub fn unfuse(planar: &Domain, fused: &[bool]) -> Unfused {
    let copies = Copies::new(planar, fused);
    let mut domain = Domain {
        points: copies.points.clone(),
        sides: Vec::new(),
        ..planar.clone()
    };
    let mut ends = Vec::with_capacity(planar.sides.len());
    for (s, side) in planar.sides.iter().enumerate() {
        let hands: Vec<(bool, u32)> = [(true, side.left), (false, side.right)]
            .into_iter()
            .filter_map(|(left, piece)| Some((left, piece?)))
            .collect();
        let ends_for = |piece: u32| [side.from, side.to].map(|v| copies.of(v, piece));
        let Some(&(_, piece)) = hands.first() else {
            continue;
        };
        ends.push(ends_for(piece));
        if hands.len() < 2 || fused[s] {
            let [from, to] = ends_for(piece);
            domain.sides.push(DomainSide { from, to, ..*side });
            continue;
        }
        let closed = ends_for(hands[0].1) == ends_for(hands[1].1);
        for (left, piece) in hands {
            let [from, to] = ends_for(piece);
            let hand = DomainSide {
                from,
                to,
                left: side.left.filter(|_| left),
                right: side.right.filter(|_| !left),
                faying: true,
                ..*side
            };
            if closed {
                let middle = domain.points.len() as u32;
                domain.points.push(side.at(&planar.points, 0.5));
                let arc = side.arc.map(|mut arc| {
                    arc.sweep *= 0.5;
                    arc
                });
                domain.sides.push(DomainSide {
                    to: middle,
                    arc,
                    ..hand
                });
                domain.sides.push(DomainSide {
                    from: middle,
                    arc,
                    ..hand
                });
            } else {
                domain.sides.push(hand);
            }
        }
    }
    Unfused { domain, ends }
}

/// The copies of the points.
struct Copies {
    points: Vec<crate::Point>,
    /// The copy of a point for a piece that meets it.
    of: BTreeMap<(u32, u32), u32>,
}

impl Copies {
    fn new(planar: &Domain, fused: &[bool]) -> Self {
        // Around each point the pieces, each with the first one that it hangs together with.
        let mut around: Vec<Vec<(u32, u32)>> = vec![Vec::new(); planar.points.len()];
        for side in &planar.sides {
            for v in [side.from, side.to] {
                let list = &mut around[v as usize];
                for piece in side.left.into_iter().chain(side.right) {
                    if !list.iter().any(|p| p.0 == piece) {
                        list.push((piece, piece));
                    }
                }
            }
        }
        for (side, _) in planar.sides.iter().zip(fused).filter(|(_, f)| **f) {
            let (Some(a), Some(b)) = (side.left, side.right) else {
                continue;
            };
            for v in [side.from, side.to] {
                let list = &mut around[v as usize];
                let group = |piece| list.iter().find(|p| p.0 == piece).map_or(piece, |p| p.1);
                let (a, b) = (group(a), group(b));
                for p in list.iter_mut().filter(|p| p.1 == a.max(b)) {
                    p.1 = a.min(b);
                }
            }
        }
        let mut copies = Self {
            points: Vec::with_capacity(planar.points.len()),
            of: BTreeMap::new(),
        };
        for (v, list) in around.iter_mut().enumerate() {
            list.sort_unstable_by_key(|p| (p.1, p.0));
            for group in list.chunk_by(|p, q| p.1 == q.1) {
                let copy = copies.points.len() as u32;
                copies.points.push(planar.points[v]);
                for &(piece, _) in group {
                    copies.of.insert((v as u32, piece), copy);
                }
            }
        }
        copies
    }

    fn of(&self, v: u32, piece: u32) -> u32 {
        self.of[&(v, piece)]
    }
}
