//! Small arrows that show which way a shear stress flows.

use sectile_mesh::{Point, Vector};

use super::outline::Shape;
use super::page::{Page, Pen};
use super::path::FinePath;
use super::surface::Surface;

/// Spacing of arrows, mm.
const SPACING: f64 = 6.5;
/// Length of the longest arrow, mm.
const LONGEST: f64 = 4.2;
/// Length of the shortest, mm.
const SHORTEST: f64 = 1.6;
/// No arrow where the stress is below this share of the greatest.
const LEAST: f64 = 0.04;
const QUANTUM: f64 = 0.01;

/// Draws arrows at points of a grid, each at the nearest point where the field is known, their length
/// growing with the root of the stress. Surface and vectors in page axes.
pub fn draw(page: &mut Page, surface: &Surface, field: &[Vector], greatest: f64, shape: &Shape) {
    // (cell, distance from its middle, index) of the best point of each cell, by sorting.
    // Points on the rim are left out: half of their arrow would lie on the line.
    let mut on_rim = vec![false; surface.points.len()];
    for v in surface.rim.iter().flatten() {
        on_rim[*v as usize] = true;
    }
    let points = &surface.points;
    let mut candidates: Vec<(i64, i64, f64, usize)> = points
        .iter()
        .enumerate()
        .filter(|(i, _)| !on_rim[*i])
        .map(|(i, p)| {
            let (cx, cy) = ((p.x / SPACING).floor(), (p.y / SPACING).floor());
            let middle = Point::new((cx + 0.5) * SPACING, (cy + 0.5) * SPACING);
            (cx as i64, cy as i64, p.distance(middle), i)
        })
        .collect();
    candidates.sort_by(|a, b| {
        (a.0, a.1)
            .cmp(&(b.0, b.1))
            .then(a.2.total_cmp(&b.2))
            .then(a.3.cmp(&b.3))
    });
    candidates.dedup_by_key(|c| (c.0, c.1));
    let mut path = FinePath::new(QUANTUM);
    for (_, _, _, i) in candidates {
        let size = field[i].length();
        if size.is_nan() || size < LEAST * greatest || size == 0.0 {
            continue;
        }
        let u = field[i] * (1.0 / size);
        let half = 0.5 * (LONGEST * (size / greatest).min(1.0).sqrt()).max(SHORTEST);
        let (tail, tip) = (points[i] - u * half, points[i] + u * half);
        // An arrow that sticks out of the material says something wrong about the edge.
        if !shape.covers(tail) || !shape.covers(tip) {
            continue;
        }
        let barb = (0.7 * half).min(0.9);
        let side = u.perpendicular() * (0.45 * barb);
        path.open(&[tail, tip]);
        path.open(&[tip - u * barb + side, tip, tip - u * barb - side]);
    }
    let data = path.finish();
    if !data.is_empty() {
        page.fine_path(data.clone(), QUANTUM, Pen::line("#ffffff", 0.45));
        page.fine_path(data, QUANTUM, Pen::line("#14181c", 0.18));
    }
}
