//! Points at which material hangs together by nothing, and the parts that hang together by sides.

use super::DomainSide;
use super::fault::Fault;
use crate::point::Point;

/// Two or more gaps around one point.
#[must_use]
pub fn pinches(points: &[Point], sides: &[DomainSide], pieces: usize) -> Vec<Fault> {
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

/// Number of parts that no side connects.
#[must_use]
pub fn connected_parts(pieces: usize, sides: &[DomainSide]) -> usize {
    let leader = leaders(pieces, sides, |_, _| true);
    (0..pieces).filter(|&i| leader[i] == i).count()
}

/// For each piece the first piece that chosen sides connect it to.
#[must_use]
pub fn leaders(
    pieces: usize,
    sides: &[DomainSide],
    connects: impl Fn(usize, &DomainSide) -> bool,
) -> Vec<usize> {
    let mut leader: Vec<usize> = (0..pieces).collect();
    fn find(leader: &mut [usize], mut x: usize) -> usize {
        while leader[x] != x {
            leader[x] = leader[leader[x]];
            x = leader[x];
        }
        x
    }
    for (s, side) in sides.iter().enumerate() {
        if let (Some(a), Some(b)) = (side.left, side.right)
            && connects(s, side)
        {
            let (a, b) = (find(&mut leader, a as usize), find(&mut leader, b as usize));
            leader[a.max(b)] = a.min(b);
        }
    }
    (0..pieces).map(|i| find(&mut leader, i)).collect()
}
