//! The fully plastic torque by the sand heap.
//!
//! The stress function of a section that yields in shear everywhere has the constant slope k, the yield
//! stress in shear: it is k times a heap of sand of unit slope on the section (A. Nadai, 1923; Theory
//! of Flow and Fracture of Solids 1, 1950, from memory), with a flat top over each hole at the height of
//! the hole's edge (M. A. Sadowsky, J. Appl. Mech. 8, 1941). The torque is twice the volume,
//! `T_p = 2k ∫φ dA`, φ the least way from the outer edge.

mod cell;
mod face;
mod height;
mod integral;
#[cfg(test)]
mod tests;

use std::cmp::Ordering;
use std::collections::BinaryHeap;

use sectile_mesh::domain::Domain;
use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::outline::side::Circle;
use sectile_mesh::{Point, Vector};

use crate::figure::{Figure, Trust};
use cell::{Volume, nearest, volume};
use face::{Form, Plane};
use height::Edge;
use integral::{Triangle, area, of_segment};

/// Plastic torsion modulus `2∫φ dA`, length³, over the section and its holes, enclosed: `tolerance` is
/// the half-width over the value at which the division of the section ends. `mesh`: any triangulation
/// of the domain; the coarser, the faster. `None` for a section in separate parts, whose torque depends
/// on what holds them together.
#[must_use]
pub fn torsion_modulus(domain: &Domain, mesh: &Mesh, tolerance: f64) -> Option<Figure> {
    if domain.parts != 1 {
        return None;
    }
    let edge = Edge::new(domain);
    let division = Division::new(&edge, mesh);
    Some(division.refined(tolerance))
}

/// Cells beyond which the division goes no further; the bounds then are as wide as they are.
const MOST_CELLS: usize = 1_000_000;

/// A part of the section.
enum Shape {
    /// A triangle.
    Triangle(Triangle),
    /// Between a chord and the arc beyond it, the material within the circle.
    Segment(Segment),
}

#[derive(Clone, Copy)]
struct Segment {
    face: u32,
    circle: Circle,
    from: Point,
    to: Point,
}

struct Cell {
    shape: Shape,
    /// The triangle of the mesh that it is part of.
    root: u32,
    volume: Volume,
}

/// The section in parts.
struct Division<'a> {
    edge: &'a Edge,
    cells: Vec<Cell>,
    /// By triangle of the mesh: sides whose circle it reaches into.
    hung: Vec<Vec<u32>>,
    /// Volume over the triangles' overhang, to be taken off.
    excess: f64,
    /// A length that counts as none.
    least: f64,
    /// What rounding may have done to the volume.
    rounding: f64,
}

/// A cell by its uncertainty; of equals the first.
#[derive(PartialEq)]
struct Next {
    gap: f64,
    index: usize,
}

impl Eq for Next {}

impl PartialOrd for Next {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Next {
    fn cmp(&self, other: &Self) -> Ordering {
        (self.gap.total_cmp(&other.gap)).then(other.index.cmp(&self.index))
    }
}

impl<'a> Division<'a> {
    fn new(edge: &'a Edge, mesh: &Mesh) -> Self {
        let corner = |v: u32| mesh.vertices[v as usize];
        let triangles: Vec<Triangle> = mesh.triangles.iter().map(|t| t.map(corner)).collect();
        let coordinate = |p: &Point| p.x.abs().max(p.y.abs());
        let mut size = mesh.vertices.iter().map(coordinate).fold(0.0, f64::max);
        for circle in &mesh.circles {
            size = size.max(circle.radius + coordinate(&circle.centre));
        }
        let whole: f64 = triangles.iter().map(area).sum();
        let mut division = Self {
            edge,
            cells: Vec::with_capacity(triangles.len()),
            hung: vec![Vec::new(); triangles.len()],
            excess: 0.0,
            least: 64.0 * f64::EPSILON * size,
            rounding: 128.0 * f64::EPSILON * size * whole,
        };
        for (root, faces) in candidates(edge, mesh, &triangles).into_iter().enumerate() {
            for k in 0..3 {
                let side = mesh.sides[mesh.triangle_sides[root][k] as usize];
                if side.circle != NONE && side.right == NONE {
                    let [a, b] = [(k + 1) % 3, (k + 2) % 3].map(|i| triangles[root][i]);
                    let circle = mesh.circles[side.circle as usize];
                    division.add_chord(root, &faces, circle, a, b);
                }
            }
            division.add(Shape::Triangle(triangles[root]), root as u32, &faces);
        }
        division
    }

    /// A triangle's side that is the chord of an arc of the edge, the triangle to its left.
    fn add_chord(&mut self, root: usize, faces: &[u32], circle: Circle, from: Point, to: Point) {
        let within = (to - from).cross(circle.centre - from) > 0.0;
        let middle = from.lerp(to, 0.5);
        let on_circle = |j: &u32| {
            let face = &self.edge.faces[*j as usize];
            matches!(face.form, Form::Cone(cone) if (cone.sense < 0.0) == within
                && (cone.centre, cone.radius) == (circle.centre, circle.radius))
        };
        let own: Vec<u32> = faces.iter().copied().filter(on_circle).collect();
        let facing = |j: &&u32| self.edge.faces[**j as usize].faces(middle);
        let Some(&face) = own.iter().find(facing).or(own.first()) else {
            return;
        };
        let segment = Segment {
            face,
            circle,
            from,
            to,
        };
        if within {
            self.add(Shape::Segment(segment), root as u32, faces);
        } else {
            // Over the overhang the heap goes on sinking from the height of the hole's edge.
            let height = self.edge.height(&self.edge.faces[face as usize]);
            let [flat, heap] = of_segment(circle.radius, segment.half_angle());
            self.excess += height * flat - heap;
            self.hung[root].extend(own);
        }
    }

    fn add(&mut self, shape: Shape, root: u32, faces: &[u32]) -> usize {
        let volume = match &shape {
            Shape::Triangle(t) => {
                let hung = &self.hung[root as usize];
                volume(self.edge, t, faces, hung, self.least)
            }
            Shape::Segment(segment) => segment.volume(self.edge, faces, self.least),
        };
        self.cells.push(Cell {
            shape,
            root,
            volume,
        });
        self.cells.len() - 1
    }

    /// Divides the cells of the greatest uncertainty until all of it is within the tolerance.
    fn refined(mut self, tolerance: f64) -> Figure {
        let gap = |cell: &Cell| cell.volume.high - cell.volume.low;
        let tops = self.edge.tops - self.excess;
        let mut low: f64 = self.cells.iter().map(|c| c.volume.low).sum();
        let mut open: f64 = self.cells.iter().map(gap).sum();
        let mut queue: BinaryHeap<Next> = self
            .cells
            .iter()
            .enumerate()
            .map(|(index, c)| Next { gap: gap(c), index })
            .collect();
        let mut divided = vec![false; self.cells.len()];
        while open > 2.0 * tolerance * (low + tops) && self.cells.len() < MOST_CELLS {
            let Some(Next { gap: own, index }) = queue.pop() else {
                break;
            };
            if own <= 0.0 {
                break;
            }
            divided[index] = true;
            let parent = &self.cells[index];
            low -= parent.volume.low;
            open -= own;
            let root = parent.root;
            let faces = parent.volume.faces.clone();
            for part in parts(parent) {
                let index = self.add(part, root, &faces);
                divided.push(false);
                let cell = &self.cells[index];
                low += cell.volume.low;
                open += gap(cell);
                queue.push(Next {
                    gap: gap(cell),
                    index,
                });
            }
        }
        let (mut low, mut high) = (tops, tops);
        for (cell, _) in self.cells.iter().zip(divided).filter(|(_, d)| !d) {
            low += cell.volume.low;
            high += cell.volume.high;
        }
        let half_width = 0.5 * (high - low) + self.rounding;
        let volume = 0.5 * (low + high);
        // Planes and lone cones are integrated in closed form.
        let trust = if high - low <= 1e-12 * volume {
            Trust::Exact
        } else {
            Trust::Bounded
        };
        Figure::around(2.0 * volume, 2.0 * half_width, trust)
    }
}

/// Two to three parts of a cell.
fn parts(cell: &Cell) -> Vec<Shape> {
    match &cell.shape {
        Shape::Triangle(t) => {
            let by_line = cell.volume.split.and_then(|line| divided(t, &line));
            by_line
                .unwrap_or_else(|| halves(t))
                .into_iter()
                .map(Shape::Triangle)
                .collect()
        }
        Shape::Segment(segment) => {
            let middle = segment.middle();
            vec![
                Shape::Triangle([segment.from, middle, segment.to]),
                Shape::Segment(Segment {
                    to: middle,
                    ..*segment
                }),
                Shape::Segment(Segment {
                    from: middle,
                    ..*segment
                }),
            ]
        }
    }
}

/// The triangle divided by a line through its inside.
fn divided(t: &Triangle, line: &Plane) -> Option<Vec<Triangle>> {
    let values = t.map(|p| line.on(p));
    // The corner that stands alone on its side, or a corner on the line between the two others.
    for i in 0..3 {
        let (j, k) = ((i + 1) % 3, (i + 2) % 3);
        let (u, v, w) = (values[i], values[j], values[k]);
        let slim = 1e-9 * (u.abs() + v.abs() + w.abs());
        if u.abs() <= slim && v * w < 0.0 {
            let p = t[j].lerp(t[k], v / (v - w));
            return Some(vec![[t[i], t[j], p], [t[i], p, t[k]]]);
        }
        if u * v < 0.0 && u * w < 0.0 && v.abs().min(w.abs()) > slim {
            let p = t[i].lerp(t[j], u / (u - v));
            let q = t[i].lerp(t[k], u / (u - w));
            let rest = if p.distance(t[k]) < q.distance(t[j]) {
                [[p, t[j], t[k]], [p, t[k], q]]
            } else {
                [[p, t[j], q], [q, t[j], t[k]]]
            };
            return Some(vec![[t[i], p, q], rest[0], rest[1]]);
        }
    }
    None
}

/// The triangle halved at its longest side.
fn halves(t: &Triangle) -> Vec<Triangle> {
    let length = |i: usize| t[(i + 1) % 3].distance(t[(i + 2) % 3]);
    let mut i = 0;
    for k in 1..3 {
        if length(k) > length(i) {
            i = k;
        }
    }
    let (j, k) = ((i + 1) % 3, (i + 2) % 3);
    let p = t[j].lerp(t[k], 0.5);
    vec![[t[i], t[j], p], [t[i], p, t[k]]]
}

impl Segment {
    fn half_angle(&self) -> f64 {
        let sine = 0.5 * self.from.distance(self.to) / self.circle.radius;
        sine.min(1.0).asin()
    }

    /// The arc's middle.
    fn middle(&self) -> Point {
        let centre = self.circle.centre;
        let outward = self.from.lerp(self.to, 0.5) - centre;
        // A chord that is a diameter has its arc on the right.
        let direction = if outward.length() > 1e-9 * self.circle.radius {
            outward
        } else {
            -(self.to - self.from).perpendicular()
        };
        centre + direction * (self.circle.radius / direction.length())
    }

    /// The heap is no farther from the height of the arc than the arc is away; where no other side is
    /// near it is that distance.
    fn volume(&self, edge: &Edge, faces: &[u32], least: f64) -> Volume {
        let own = &edge.faces[self.face as usize];
        let height = edge.height(own);
        let [flat, heap] = of_segment(self.circle.radius, self.half_angle());
        let middle = self.middle();
        let kept = nearest(edge, middle, middle.distance(self.from), faces);
        // The triangle of chord and tangents holds the segment.
        let rise = middle.distance(self.from.lerp(self.to, 0.5));
        let outward = middle - self.circle.centre;
        let tip = middle + outward * (rise / (self.circle.radius - rise).max(least));
        let hull = [self.from, self.to, tip];
        let alone = kept.faces.iter().all(|&j| {
            let face = &edge.faces[j as usize];
            let behind = |zone: &Plane| hull.iter().all(|&p| zone.on(p) <= least);
            let end = match (behind(&face.zone[0]), behind(&face.zone[1])) {
                (true, _) => face.side.from,
                (_, true) => face.side.to,
                _ => return same_circle(&face.form, &own.form),
            };
            let ends = if face.side.arc.is_some() {
                vec![face.side.from, face.side.to]
            } else {
                vec![end]
            };
            ends.iter()
                .all(|&end| height + own.form.on(end) <= edge.height(face) + least)
        });
        let sure = height * flat;
        Volume {
            low: if alone { sure + heap } else { sure - heap },
            high: sure + heap,
            faces: kept.faces,
            split: None,
        }
    }
}

fn same_circle(a: &Form, b: &Form) -> bool {
    match (a, b) {
        (Form::Cone(a), Form::Cone(b)) => {
            (a.centre, a.radius, a.sense) == (b.centre, b.radius, b.sense)
        }
        _ => false,
    }
}

/// By triangle the sides that may be nearest somewhere over it and the segments beyond its sides.
fn candidates(edge: &Edge, mesh: &Mesh, triangles: &[Triangle]) -> Vec<Vec<u32>> {
    // Boxes about the triangles; an arc of less than half a turn rises by no more than half its chord.
    let boxes: Vec<[Point; 2]> = triangles
        .iter()
        .enumerate()
        .map(|(t, corners)| {
            let curved =
                (0..3).any(|k| mesh.sides[mesh.triangle_sides[t][k] as usize].circle != NONE);
            let [a, b, c] = *corners;
            let longest = a.distance(b).max(b.distance(c)).max(c.distance(a));
            let margin = if curved { 0.5 * longest } else { 0.0 };
            let by = Vector::new(margin, margin);
            let low = Point::new(a.x.min(b.x).min(c.x), a.y.min(b.y).min(c.y));
            let high = Point::new(a.x.max(b.x).max(c.x), a.y.max(b.y).max(c.y));
            [low - by, high + by]
        })
        .collect();
    let mut out = vec![Vec::new(); triangles.len()];
    let all: Vec<u32> = (0..edge.faces.len() as u32).collect();
    let mut groups = vec![((0..triangles.len()).collect::<Vec<usize>>(), all)];
    while let Some((mut group, faces)) = groups.pop() {
        let (mut low, mut high) = match group.first() {
            Some(&t) => (boxes[t][0], boxes[t][1]),
            None => continue,
        };
        for &t in &group {
            low = Point::new(low.x.min(boxes[t][0].x), low.y.min(boxes[t][0].y));
            high = Point::new(high.x.max(boxes[t][1].x), high.y.max(boxes[t][1].y));
        }
        let faces = nearest(edge, low.lerp(high, 0.5), 0.5 * low.distance(high), &faces).faces;
        if group.len() == 1 {
            out[group[0]] = faces;
            continue;
        }
        let wide = high.x - low.x >= high.y - low.y;
        let key = |&t: &usize| {
            let [a, b] = boxes[t];
            if wide { a.x + b.x } else { a.y + b.y }
        };
        let half = group.len() / 2;
        group.select_nth_unstable_by(half, |a, b| key(a).total_cmp(&key(b)).then(a.cmp(b)));
        let rest = group.split_off(half);
        groups.push((group, faces.clone()));
        groups.push((rest, faces));
    }
    out
}
