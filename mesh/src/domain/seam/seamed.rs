//! Pieces joined by seams and by nothing else.

use super::faying::runs;
use super::filler::Fillers;
use super::fillet::{Metal, lay};
use super::groove::{Groove, grooves_meant};
use super::inside_corner::corners_meant;
use super::request::{Seam, SeamKind, SeamRequest};
use super::unfuse::{Unfused, unfuse};
use crate::domain::arrange::{Fused, fuse};
use crate::domain::edge::{distance, middle};
use crate::domain::fan::{Leaving, fans};
use crate::domain::fault::{Fault, Misfit, Obstacle, SeamFault};
use crate::domain::pinch::leaders;
use crate::domain::{Domain, DomainSide};
use crate::outline::piece::Piece;
use crate::point::Point;

/// A seam that has its place.
struct Placed {
    request: usize,
    name: String,
    work: Work,
}

enum Work {
    Fillet(Metal),
    Groove(Groove),
}

impl Placed {
    fn metal(&self) -> Option<&Metal> {
        match &self.work {
            Work::Fillet(metal) => Some(metal),
            Work::Groove(_) => None,
        }
    }

    fn at(&self) -> Point {
        match &self.work {
            Work::Fillet(metal) => metal.root,
            Work::Groove(groove) => groove.at,
        }
    }
}

/// See [`crate::domain::build_seamed`].
pub fn join_by_seams(pieces: &[Piece], requests: &[SeamRequest]) -> Result<Domain, Vec<Fault>> {
    let touching = fuse(pieces, &[])?;
    let placed = place(&touching, requests, pieces.len())?;

    let fillers = Fillers::new(
        pieces.len(),
        requests,
        placed
            .iter()
            .map(|seam| (seam.request, seam.name.as_str(), seam.metal())),
    );
    let all: Vec<Piece> = pieces
        .iter()
        .cloned()
        .chain(fillers.pieces.clone())
        .collect();
    let stops: Vec<Point> = placed
        .iter()
        .filter_map(|seam| match &seam.work {
            Work::Groove(groove) => groove.stop,
            Work::Fillet(_) => None,
        })
        .collect();
    let fused = fuse(&all, &stops).map_err(|faults| fillers.tell(&faults))?;
    let owners = owners(&fused, requests, &placed, &fillers)?;
    let joined: Vec<bool> = owners.iter().map(Option::is_some).collect();
    let leaders = leaders(all.len(), &fused.domain.sides, |s, _| joined[s]);
    let hanging: Vec<usize> = (0..all.len()).filter(|&p| leaders[p] != 0).collect();
    if !hanging.is_empty() {
        return Err(vec![fillers.hanging(&hanging)]);
    }

    let Unfused { mut domain, ends } = unfuse(&fused.domain, &joined);
    domain.parts = 1;
    for (k, seam) in placed.iter().enumerate() {
        let between = requests[seam.request].between.map(|p| p as u32);
        let (hands, start) = match &seam.work {
            Work::Fillet(laid) => {
                let [a, b] = fillers.halves[k].unwrap_or_default();
                let hands = if laid.on == between { [a, b] } else { [b, a] };
                (hands, laid.root)
            }
            Work::Groove(groove) => {
                let inner = groove.stretch.last().map_or(groove.outer, |s| s.to);
                (between, inner)
            }
        };
        let chains = runs(&fused.domain, |s, side| {
            owners[s] == Some(k) && parts(side, hands)
        });
        let [chain] = &chains[..] else {
            return Err(vec![misfit(seam, Misfit::InTheWay)]);
        };
        let [first, last] = chain
            .ends(&fused.domain)
            .map(|v| fused.domain.points[v as usize].distance(start));
        let chain = if last < first {
            chain.turned()
        } else {
            chain.clone()
        };
        let length = chain.length(&fused.domain);
        let mut throat: Vec<u32> = Vec::new();
        for &(s, forward) in &chain.sides {
            let [from, to] = ends[s];
            let (from, to) = if forward { (from, to) } else { (to, from) };
            if throat.is_empty() {
                throat.push(from);
            }
            throat.push(to);
        }
        domain.seams.push(Seam {
            request: seam.request,
            name: seam.name.clone(),
            between,
            hands,
            metal: fillers.halves[k].map_or(Vec::new(), |halves| halves.to_vec()),
            throat,
            throat_length: length,
            full_throat: seam.metal().map_or(length, |metal| metal.full_throat),
            legs: seam.metal().map(|metal| metal.legs),
            gap: seam.metal().map_or(0.0, |metal| metal.gap),
            at: seam.at(),
        });
    }
    Ok(domain)
}

/// Finds the place of every seam.
fn place(
    touching: &Fused,
    requests: &[SeamRequest],
    pieces: usize,
) -> Result<Vec<Placed>, Vec<Fault>> {
    let (domain, tolerance) = (&touching.domain, touching.tolerance);
    let fans = fans(domain);
    let mut placed = Vec::new();
    let mut faults = Vec::new();
    for (seam, request) in requests.iter().enumerate() {
        let works = match (unsound(request, pieces), request.kind) {
            (Some(fault), _) => Err(vec![fault]),
            (None, SeamKind::Fillet { legs }) => fillets(domain, &fans, request, legs, tolerance),
            (None, SeamKind::Groove { depth }) => grooves_meant(domain, request, depth, tolerance)
                .map(|grooves| grooves.into_iter().map(Work::Groove).collect())
                .map_err(|fault| vec![fault]),
        };
        match works {
            Ok(works) => placed.extend(named(seam, request, works, tolerance)),
            Err(found) => {
                faults.extend(found.into_iter().map(|fault| Fault::Seam { seam, fault }));
            }
        }
    }
    if faults.is_empty() {
        Ok(placed)
    } else {
        Err(faults)
    }
}

/// The fillets that a request means.
fn fillets(
    domain: &Domain,
    fans: &[Vec<Leaving>],
    request: &SeamRequest,
    legs: [f64; 2],
    tolerance: f64,
) -> Result<Vec<Work>, Vec<SeamFault>> {
    let between = request.between.map(|p| p as u32);
    let corners = corners_meant(domain, fans, request, tolerance).map_err(|fault| vec![fault])?;
    let mut works = Vec::new();
    let mut faults = Vec::new();
    for corner in &corners {
        match lay(between, legs, corner, tolerance) {
            Ok(metal) => works.push(Work::Fillet(metal)),
            Err(found) => {
                for fault in found {
                    if !faults.iter().any(|f| repeats(f, &fault)) {
                        faults.push(fault);
                    }
                }
            }
        }
    }
    if faults.is_empty() {
        Ok(works)
    } else {
        Err(faults)
    }
}

/// Whether a fault says no more than another: the same misfit at the other leg or the other end.
fn repeats(known: &SeamFault, new: &SeamFault) -> bool {
    match (known, new) {
        (SeamFault::Misfit { cause: a, .. }, SeamFault::Misfit { cause: b, .. }) => a == b,
        _ => known == new,
    }
}

/// What is wrong with a request whatever the pieces look like.
fn unsound(request: &SeamRequest, pieces: usize) -> Option<SeamFault> {
    let [a, b] = request.between;
    if a == b || a.max(b) >= pieces {
        return Some(SeamFault::Pieces);
    }
    let sizes = match request.kind {
        SeamKind::Fillet { legs } => legs,
        SeamKind::Groove { depth } => [depth.unwrap_or(1.0); 2],
    };
    let sound = sizes.iter().all(|x| *x > 0.0 && x.is_finite())
        && (0.0..f64::INFINITY).contains(&request.gap)
        && request.near.is_none_or(Point::is_finite);
    (!sound).then_some(SeamFault::Measure)
}

/// Names the seams of a request; of two, the left or lower one first.
fn named(
    request: usize,
    wanted: &SeamRequest,
    works: Vec<Work>,
    tolerance: f64,
) -> impl Iterator<Item = Placed> {
    let mut placed: Vec<Placed> = works
        .into_iter()
        .map(|work| Placed {
            request,
            name: wanted.name.clone(),
            work,
        })
        .collect();
    if let [a, b] = &mut placed[..] {
        let (p, q) = (a.at(), b.at());
        if p.x > q.x + tolerance || ((p.x - q.x).abs() <= tolerance && p.y > q.y) {
            std::mem::swap(a, b);
        }
        for (k, seam) in [a, b].into_iter().enumerate() {
            seam.name = format!("{}, end {}", wanted.name, k + 1);
        }
    }
    placed.into_iter()
}

/// Whether a side has the two pieces on its hands.
fn parts(side: &DomainSide, pieces: [u32; 2]) -> bool {
    let [a, b] = pieces.map(Some);
    (side.left, side.right) == (a, b) || (side.left, side.right) == (b, a)
}

fn misfit(seam: &Placed, cause: Misfit) -> Fault {
    Fault::Seam {
        seam: seam.request,
        fault: SeamFault::Misfit {
            at: seam.at(),
            cause,
        },
    }
}

/// The seam that fuses each side, if any.
fn owners(
    fused: &Fused,
    requests: &[SeamRequest],
    placed: &[Placed],
    fillers: &Fillers<'_>,
) -> Result<Vec<Option<usize>>, Vec<Fault>> {
    let domain = &fused.domain;
    let mut owners: Vec<Option<usize>> = vec![None; domain.sides.len()];
    let mut faults: Vec<Fault> = Vec::new();
    for (k, seam) in placed.iter().enumerate() {
        let between = requests[seam.request].between.map(|p| p as u32);
        for (s, side) in domain.sides.iter().enumerate() {
            let joins = match (&seam.work, fillers.halves[k]) {
                (Work::Fillet(laid), Some([a, b])) => {
                    parts(side, [a, b])
                        || parts(side, [a, laid.on[0]])
                        || parts(side, [b, laid.on[1]])
                }
                (Work::Groove(groove), _) => {
                    let at = middle(&side.side(&domain.points));
                    parts(side, between)
                        && groove
                            .stretch
                            .iter()
                            .any(|part| distance(part, at) <= 4.0 * fused.tolerance)
                }
                _ => false,
            };
            if !joins {
                continue;
            }
            let Some(other) = owners[s].replace(k) else {
                continue;
            };
            let fault = Fault::Seam {
                seam: seam.request,
                fault: SeamFault::Overlap {
                    with: Obstacle::Seam(placed[other].request),
                    at: middle(&side.side(&domain.points)),
                },
            };
            if !faults.contains(&fault) {
                faults.push(fault);
            }
        }
    }
    if faults.is_empty() {
        Ok(owners)
    } else {
        Err(faults)
    }
}
