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
/// Half of an arrow's breadth with its white edge, mm.
const HALF_BREADTH: f64 = 0.4;
/// Places tried in a cell of the grid.
const TRIES: usize = 30;
const QUANTUM: f64 = 0.01;

/// Draws arrows on a grid, their length growing with the root of the stress: in each of its cells one
/// where the stress is large and not far from the middle, and one against it where the flow turns
/// back within the cell, as it does across a thin wall in torsion. Surface and vectors in page axes.
pub fn draw(page: &mut Page, surface: &Surface, field: &[Vector], greatest: f64, shape: &Shape) {
    let cell = |p: Point| ((p.x / SPACING).floor(), (p.y / SPACING).floor());
    let mut order: Vec<(i64, i64, f64, usize)> = Vec::new();
    for (i, p) in surface.points.iter().enumerate() {
        let size = field[i].length();
        if size.is_nan() || size < LEAST * greatest || size == 0.0 {
            continue;
        }
        let (cx, cy) = cell(*p);
        let middle = Point::new((cx + 0.5) * SPACING, (cy + 0.5) * SPACING);
        // Stresses are compared in tenths of the greatest, so that rounding decides nothing.
        let large = (10.0 * (size / greatest).min(1.0)).round();
        let merit = large - 8.0 * p.distance(middle) / SPACING;
        order.push((cx as i64, cy as i64, merit, i));
    }
    order.sort_by(|a, b| {
        (a.0, a.1)
            .cmp(&(b.0, b.1))
            .then(b.2.total_cmp(&a.2))
            .then(a.3.cmp(&b.3))
    });
    let mut path = FinePath::new(QUANTUM);
    for group in order.chunk_by(|a, b| (a.0, a.1) == (b.0, b.1)) {
        let find = |against: Option<Vector>| {
            group
                .iter()
                .map(|c| c.3)
                .filter(|&i| against.is_none_or(|a| field[i].dot(a) < -0.7 * field[i].length()))
                .take(TRIES)
                .find_map(|i| Arrow::new(surface.points[i], field[i], greatest, shape))
        };
        let Some(first) = find(None) else { continue };
        let second = find(Some(first.along));
        first.draw(&mut path);
        if let Some(second) = second {
            second.draw(&mut path);
        }
    }
    let data = path.finish();
    if !data.is_empty() {
        page.fine_path(data.clone(), QUANTUM, Pen::line("#ffffff", 0.45));
        page.fine_path(data, QUANTUM, Pen::line("#14181c", 0.18));
    }
}

struct Arrow {
    at: Point,
    along: Vector,
    half: f64,
}

impl Arrow {
    /// `None` where it would stick out of the material, which would say something wrong about the edge.
    fn new(at: Point, stress: Vector, greatest: f64, shape: &Shape) -> Option<Self> {
        let size = stress.length();
        let along = stress * (1.0 / size);
        let half = 0.5 * (LONGEST * (size / greatest).min(1.0).sqrt()).max(SHORTEST);
        let side = along.perpendicular() * HALF_BREADTH;
        let corners = [at + along * half, at - along * half, at + side, at - side];
        let arrow = Self { at, along, half };
        corners.iter().all(|&p| shape.covers(p)).then_some(arrow)
    }

    fn draw(&self, path: &mut FinePath) {
        let (tail, tip) = (
            self.at - self.along * self.half,
            self.at + self.along * self.half,
        );
        let barb = (0.7 * self.half).min(0.9);
        let side = self.along.perpendicular() * (0.45 * barb);
        path.open(&[tail, tip]);
        path.open(&[
            tip - self.along * barb + side,
            tip,
            tip - self.along * barb - side,
        ]);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::rect::Rect;
    use crate::figure::samples;
    use crate::figure::view::View;

    #[test]
    fn flow_that_turns_back_in_a_thin_wall_has_arrows_both_ways() {
        // A wall of 5 mm in print, stress growing from its middle line to both faces.
        let domain = samples::rectangle(60.0, 5.0);
        let mesh = samples::rectangle_mesh(60, 12, 60.0, 5.0);
        let view = View::fit(
            Rect::new(0.0, 0.0, 60.0, 5.0),
            Rect::new(0.0, 0.0, 60.0, 5.0),
        );
        let shape = Shape::new(&domain, &view);
        let points: Vec<Point> = mesh.vertices.iter().map(|&p| view.point(p)).collect();
        let field: Vec<Vector> = points.iter().map(|p| Vector::new(p.y - 2.5, 0.0)).collect();
        let surface = Surface::new(points, mesh.triangles);
        let mut page = Page::new(100.0, "", "", "");
        draw(&mut page, &surface, &field, 2.5, &shape);
        let svg = page.finish(&[], "").svg;
        let start = svg.find("d=\"m").expect("arrows") + 3;
        let data = &svg[start..start + svg[start..].find('"').expect("end")];
        // Each shaft is the only level stroke of its arrow: `l` with no step in y.
        let shafts: Vec<i64> = data
            .split('m')
            .filter_map(|part| part.split_once('l'))
            .filter_map(|(_, step)| step.strip_suffix(" 0")?.parse().ok())
            .collect();
        let (right, left) = (
            shafts.iter().filter(|&&s| s > 0).count(),
            shafts.iter().filter(|&&s| s < 0).count(),
        );
        assert!(right >= 8 && left >= 8, "{right} {left}");
    }
}
