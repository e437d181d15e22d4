//! The outline of a domain as path data with true arcs, its extent, and where it has material.

use sectile_mesh::domain::{Domain, DomainSide};
use sectile_mesh::{Point, Vector};

use super::page::number;
use super::rect::Rect;
use super::view::View;

/// Arcs that sweep more than this are written in two, since half a turn has no unique arc flag.
const LONGEST_SWEEP: f64 = 3.0;

/// A side walked in one sense: index and whether against its own direction.
type Walk = (usize, bool);

/// The boundary sides in closed loops, material to the left.
#[must_use]
pub fn loops(domain: &Domain) -> Vec<Vec<Walk>> {
    loops_about(domain, |_| true)
}

/// The edges of the pieces for which `inside` holds, taken as one region, in closed loops with that
/// region to the left.
fn loops_about(domain: &Domain, inside: impl Fn(u32) -> bool) -> Vec<Vec<Walk>> {
    let mut leaving: Vec<Vec<Walk>> = vec![Vec::new(); domain.points.len()];
    for (index, side) in domain.sides.iter().enumerate() {
        match (
            side.left.is_some_and(&inside),
            side.right.is_some_and(&inside),
        ) {
            (true, false) => leaving[side.from as usize].push((index, false)),
            (false, true) => leaving[side.to as usize].push((index, true)),
            _ => {}
        }
    }
    let mut loops = Vec::new();
    for start in 0..leaving.len() {
        while let Some(first) = leaving[start].pop() {
            let mut walk = vec![first];
            let mut at = end(&domain.sides[first.0], first.1);
            while let Some(next) = leaving[at].pop() {
                walk.push(next);
                at = end(&domain.sides[next.0], next.1);
            }
            loops.push(walk);
        }
    }
    loops
}

fn end(side: &DomainSide, reversed: bool) -> usize {
    if reversed {
        side.from as usize
    } else {
        side.to as usize
    }
}

/// Path data of all boundary loops, to be filled by the even-odd rule.
#[must_use]
pub fn boundary_path(domain: &Domain, view: &View) -> String {
    region_path(domain, view, |_| true)
}

/// Path data of the edges of some pieces taken as one region, to be filled by the even-odd rule.
#[must_use]
pub fn region_path(domain: &Domain, view: &View, inside: impl Fn(u32) -> bool) -> String {
    let mut data = String::new();
    for walk in loops_about(domain, inside) {
        for (i, &(index, reversed)) in walk.iter().enumerate() {
            side_data(
                &mut data,
                domain,
                &domain.sides[index],
                reversed,
                i == 0,
                view,
            );
        }
        data.push('Z');
    }
    data
}

/// Path data of the sides between two pieces; empty where there is one.
#[must_use]
pub fn interface_path(domain: &Domain, view: &View) -> String {
    sides_path(domain, view, |side| {
        side.left.is_some() && side.right.is_some()
    })
}

/// Path data of the sides for which `wanted` holds, each by itself.
#[must_use]
pub fn sides_path(domain: &Domain, view: &View, wanted: impl Fn(&DomainSide) -> bool) -> String {
    let mut data = String::new();
    for side in domain.sides.iter().filter(|side| wanted(side)) {
        side_data(&mut data, domain, side, false, true, view);
    }
    data
}

fn side_data(
    data: &mut String,
    domain: &Domain,
    side: &DomainSide,
    reversed: bool,
    start: bool,
    view: &View,
) {
    let (from, to) = (
        domain.points[side.from as usize],
        domain.points[side.to as usize],
    );
    let (from, to) = if reversed { (to, from) } else { (from, to) };
    let pair = |p: Point| {
        let q = view.point(p);
        format!("{} {}", number(q.x), number(q.y))
    };
    if start {
        data.push_str(&format!("M{}", pair(from)));
    }
    let Some(arc) = side.arc else {
        data.push_str(&format!("L{}", pair(to)));
        return;
    };
    let sweep = if reversed { -arc.sweep } else { arc.sweep };
    let r = number(arc.circle.radius * view.scale);
    // The page's y runs down: anticlockwise in the section is SVG's sweep flag 0.
    let flag = u8::from(sweep < 0.0);
    if sweep.abs() > LONGEST_SWEEP {
        let middle = turned(from, arc.circle.centre, 0.5 * sweep);
        data.push_str(&format!("A{r} {r} 0 0 {flag} {}", pair(middle)));
    }
    data.push_str(&format!("A{r} {r} 0 0 {flag} {}", pair(to)));
}

fn turned(p: Point, centre: Point, angle: f64) -> Point {
    let (s, c) = angle.sin_cos();
    let d = p - centre;
    centre + Vector::new(c * d.x - s * d.y, s * d.x + c * d.y)
}

/// The extent of the material, arcs included.
#[must_use]
pub fn extent(domain: &Domain) -> Rect {
    let mut rect = Rect::EMPTY;
    for side in &domain.sides {
        let from = domain.points[side.from as usize];
        rect = rect.with(from).with(domain.points[side.to as usize]);
        let Some(arc) = side.arc else { continue };
        let start = (from - arc.circle.centre).angle();
        // The four points of the circle that are farthest along the axes, where the arc passes them.
        for k in 0..4 {
            let target = f64::from(k) * std::f64::consts::FRAC_PI_2;
            let ahead = if arc.sweep > 0.0 {
                target - start
            } else {
                start - target
            };
            if ahead.rem_euclid(std::f64::consts::TAU) <= arc.sweep.abs() {
                rect = rect.with(arc.circle.centre + Vector::at_angle(target) * arc.circle.radius);
            }
        }
    }
    rect
}

/// The boundary as polygons on the page, for asking where there is material.
#[derive(Clone, Debug)]
pub struct Shape {
    edges: Vec<(Point, Point)>,
}

impl Shape {
    /// Arcs are cut into chords of about 6°.
    #[must_use]
    pub fn new(domain: &Domain, view: &View) -> Self {
        let mut edges = Vec::new();
        for side in &domain.sides {
            if side.left.is_some() == side.right.is_some() {
                continue;
            }
            let mut at = domain.points[side.from as usize];
            let to = domain.points[side.to as usize];
            if let Some(arc) = side.arc {
                let n = (arc.sweep.abs() / 0.1).ceil().clamp(1.0, 64.0) as usize;
                for _ in 1..n {
                    let next = turned(at, arc.circle.centre, arc.sweep / n as f64);
                    edges.push((view.point(at), view.point(next)));
                    at = next;
                }
            }
            edges.push((view.point(at), view.point(to)));
        }
        Self { edges }
    }

    /// Whether there is material at a point of the page.
    #[must_use]
    pub fn covers(&self, p: Point) -> bool {
        let mut inside = false;
        for (a, b) in &self.edges {
            if (a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x) {
                inside = !inside;
            }
        }
        inside
    }

    /// The share of a rectangle that has material, from a grid of nine points.
    #[must_use]
    pub fn share(&self, rect: &Rect) -> f64 {
        let mut n = 0;
        for i in 0..3 {
            for j in 0..3 {
                let (u, v) = (f64::from(i) / 2.0, f64::from(j) / 2.0);
                n += usize::from(self.covers(Point::new(
                    rect.x0 + u * rect.width(),
                    rect.y0 + v * rect.height(),
                )));
            }
        }
        n as f64 / 9.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::samples;

    fn view() -> View {
        View::fit(
            Rect::new(0.0, 0.0, 100.0, 100.0),
            Rect::new(0.0, 0.0, 100.0, 100.0),
        )
    }

    #[test]
    fn annulus_has_two_loops_of_arcs_and_the_extent_of_its_circle() {
        let domain = samples::annulus(50.0, 50.0, 40.0, 20.0);
        assert_eq!(loops(&domain).len(), 2);
        let data = boundary_path(&domain, &view());
        assert_eq!(data.matches('Z').count(), 2);
        assert!(
            data.matches('A').count() >= 4 && !data.contains('L'),
            "{data}"
        );
        let e = extent(&domain);
        for (found, expected) in [(e.x0, 10.0), (e.y0, 10.0), (e.x1, 90.0), (e.y1, 90.0)] {
            assert!((found - expected).abs() < 1e-12, "{e:?}");
        }
        let shape = Shape::new(&domain, &view());
        assert!(shape.covers(Point::new(80.0, 50.0)));
        assert!(!shape.covers(Point::new(50.0, 50.0)));
        assert!(!shape.covers(Point::new(95.0, 50.0)));
    }

    #[test]
    fn interfaces_are_drawn_apart_from_the_boundary() {
        let domain = samples::two_pieces();
        assert_eq!(loops(&domain).len(), 1);
        assert_eq!(interface_path(&domain, &view()).matches('M').count(), 1);
    }
}
