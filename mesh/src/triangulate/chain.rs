//! The divisions of the domain's sides that all pieces share: arcs, interfaces, sides of sharp corners.

use std::f64::consts::PI;

use super::MeshError;
use super::crowd::crowded_parts;
use super::sharp::{Sharp, sharp_corners};
use crate::domain::{Domain, DomainSide};
use crate::point::Point;

/// Most that one part of an arc may sweep.
const MOST_SWEEP: f64 = PI / 6.0;
/// Halvings of an arc for clearance.
const MOST_HALVINGS: usize = 20;

/// For each side of the domain the parameters (0 to 1) at which it is divided, with the points.
#[derive(Clone, Debug)]
pub struct Chains {
    /// Points inside sides; their vertex numbers follow those of the domain's points.
    pub points: Vec<Point>,
    /// By side: the divisions inside it as (parameter, index into `points`), rising.
    inside: Vec<Vec<(f64, u32)>>,
    /// The sharp corners.
    pub sharp: Vec<Sharp>,
    /// By side: the sharp corners at its start and end.
    sharp_ends: Vec<[Option<u32>; 2]>,
}

impl Chains {
    /// Sides cut at sharp corners, arcs in equal parts of at most 30°, finer where a part's chord would
    /// come close to other sides.
    ///
    /// # Errors
    /// [`MeshError::TooClose`] at a cusp.
    pub fn new(domain: &Domain, max_area: Option<f64>) -> Result<Self, MeshError> {
        let sharp = sharp_corners(domain, max_area)?;
        let mut sharp_ends = vec![[None; 2]; domain.sides.len()];
        for (i, corner) in sharp.iter().enumerate() {
            for &(s, starts) in &corner.ends {
                sharp_ends[s][usize::from(!starts)] = Some(i as u32);
            }
        }
        let mut parameters: Vec<Vec<f64>> = domain
            .sides
            .iter()
            .zip(&sharp_ends)
            .map(|(side, ends)| {
                let cuts = ends.map(|e| e.map(|i| sharp[i as usize].distance));
                first_division(domain, side, cuts)
            })
            .collect();
        for _ in 0..MOST_HALVINGS {
            let crowded = crowded_parts(domain, &parameters, &sharp_ends);
            if crowded.is_empty() {
                break;
            }
            for &(s, k) in crowded.iter().rev() {
                let t = middle(&parameters[s], k);
                parameters[s].insert(k, t);
            }
        }
        let mut chains = Self {
            points: Vec::new(),
            inside: vec![Vec::new(); domain.sides.len()],
            sharp,
            sharp_ends,
        };
        for (s, list) in parameters.into_iter().enumerate() {
            for t in list {
                let index = chains.points.len() as u32;
                chains.points.push(domain.sides[s].at(&domain.points, t));
                chains.inside[s].push((t, index));
            }
        }
        Ok(chains)
    }

    /// The vertices along a side from `from` to `to`.
    #[must_use]
    pub fn vertices_of(&self, domain: &Domain, side: usize) -> Vec<u32> {
        let base = domain.points.len() as u32;
        let s = &domain.sides[side];
        let mut out = vec![s.from];
        out.extend(self.inside[side].iter().map(|&(_, i)| base + i));
        out.push(s.to);
        out
    }

    /// The numbers of parts at start and end of a side that lie in sharp corners of `piece`.
    #[must_use]
    pub fn cut_off(&self, side: usize, piece: u32) -> [usize; 2] {
        self.sharp_ends[side].map(|corner| match corner {
            Some(i) if self.sharp[i as usize].pieces.contains(&piece) => {
                self.sharp[i as usize].steps
            }
            _ => 0,
        })
    }

    /// Halves the parts `(side, part)`; says which pieces are touched. Sides of a sharp corner stay
    /// divided alike: where one of their parts is halved all are.
    #[must_use]
    pub fn split(&mut self, domain: &Domain, parts: &[(usize, usize)]) -> Vec<bool> {
        let mut all = Vec::new();
        let mut steps: Vec<(u32, usize)> = Vec::new();
        for &(s, k) in parts {
            let from_end = self.inside[s].len() - k;
            let before = steps.len();
            for (corner, step) in self.sharp_ends[s].iter().zip([k, from_end]) {
                if let Some(i) = corner.filter(|&i| step < self.sharp[i as usize].steps) {
                    steps.push((i, step));
                }
            }
            if steps.len() == before {
                all.push((s, k));
            }
        }
        steps.sort_unstable();
        steps.dedup();
        for (i, step) in steps {
            let corner = &mut self.sharp[i as usize];
            corner.steps += 1;
            all.extend(corner.ends.iter().map(|&(s, starts)| {
                let last = self.inside[s].len();
                (s, if starts { step } else { last - step })
            }));
        }
        all.sort_unstable();
        all.dedup();
        let mut touched = vec![false; domain.piece_names.len()];
        for parts in all.chunk_by(|a, b| a.0 == b.0) {
            let s = parts[0].0;
            let side = &domain.sides[s];
            let old = std::mem::take(&mut self.inside[s]);
            let parameters: Vec<f64> = old.iter().map(|p| p.0).collect();
            let mut new = old;
            for &(_, k) in parts {
                let t = middle(&parameters, k);
                new.push((t, self.points.len() as u32));
                self.points.push(side.at(&domain.points, t));
            }
            new.sort_by(|a, b| a.0.total_cmp(&b.0));
            self.inside[s] = new;
            for piece in [side.left, side.right].into_iter().flatten() {
                touched[piece as usize] = true;
            }
        }
        touched
    }
}

/// The cuts near sharp ends, at the given distances from start and end, and the equal parts of at most
/// [`MOST_SWEEP`] of what is left of an arc.
fn first_division(domain: &Domain, side: &DomainSide, cuts: [Option<f64>; 2]) -> Vec<f64> {
    let share = |distance: f64| match side.arc {
        None => distance / side.length(&domain.points),
        Some(arc) => 2.0 * (0.5 * distance / arc.circle.radius).asin() / arc.sweep.abs(),
    };
    let low = cuts[0].map(share);
    let high = cuts[1].map(|d| 1.0 - share(d));
    let (a, b) = (low.unwrap_or(0.0), high.unwrap_or(1.0));
    let n = side.arc.map_or(1, |arc| {
        ((b - a) * arc.sweep.abs() / MOST_SWEEP - 1e-9)
            .ceil()
            .max(1.0) as usize
    });
    let between = (1..n).map(|k| a + (b - a) * (k as f64 / n as f64));
    low.into_iter().chain(between).chain(high).collect()
}

/// The middle of part `k` of a side divided at `inside`.
fn middle(inside: &[f64], k: usize) -> f64 {
    let a = if k == 0 { 0.0 } else { inside[k - 1] };
    let b = inside.get(k).copied().unwrap_or(1.0);
    0.5 * (a + b)
}
