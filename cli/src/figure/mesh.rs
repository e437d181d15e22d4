//! The mesh: every side of every triangle once, circular ones as true arcs.

use sectile_mesh::domain::Domain;
use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::{Point, Vector};

use super::SIZE_LIMIT;
use super::marks;
use super::outline;
use super::page::{Finished, INK, MARGIN, Page, Pen};
use super::path::FinePath;
use super::rect::Rect;
use super::view::View;
use crate::section::Units;
use crate::write::CAUTION;

const QUANTUM: f64 = 0.01;
const MOST_HEIGHT: f64 = 150.0;

/// Draws the mesh; `size` says how large it is, such as `812 triangles of order 4, 7 034 unknowns`.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
    mesh: &Mesh,
    size: &str,
    width: f64,
) -> Finished {
    // Sides shorter than this in print, mm, are left out where the file would grow too large.
    let mut shortest = 0.0;
    loop {
        let finished = attempt(title, units, domain, mesh, size, width, shortest);
        if finished.svg.len() <= SIZE_LIMIT || shortest > 5.0 {
            return finished;
        }
        shortest = if shortest == 0.0 { 0.1 } else { 1.5 * shortest };
    }
}

fn attempt(
    title: &str,
    units: &Units,
    domain: &Domain,
    mesh: &Mesh,
    size: &str,
    width: f64,
    shortest: f64,
) -> Finished {
    let mut page = Page::new(width, "Mesh", title, size);
    let bounds = outline::extent(domain);
    let area = Rect::new(
        MARGIN + 2.0,
        page.cursor + 1.0,
        width - MARGIN - 2.0,
        page.cursor + 1.0 + MOST_HEIGHT,
    );
    let view = View::fit(bounds, area);
    page.path(outline::boundary_path(domain, &view), Pen::fill("#f3f5f7"));
    let (data, left_out) = inner_sides(mesh, &view, shortest);
    page.fine_path(data, QUANTUM, Pen::line("#3d4f63", line_width(mesh, &view)));
    let seams = outline::interface_path(domain, &view);
    if !seams.is_empty() {
        page.path(seams, Pen::line(INK, 0.2));
    }
    page.path(outline::boundary_path(domain, &view), Pen::line(INK, 0.25));
    page.cursor = view.rect(bounds).y1 + 6.0;
    let at = Point::new(MARGIN, page.cursor);
    marks::scale_bar(&mut page, at, view.scale, units.length);
    let mut notes = Vec::new();
    if left_out > 0 {
        notes.push(format!(
            "{left_out} sides shorter than {} mm in print are not drawn: where no lines are, the mesh is \
             finer than that.",
            crate::write::digits::short(shortest, 2)
        ));
    }
    page.finish(&notes, CAUTION)
}

/// Lines grow thinner where triangles are small in print.
fn line_width(mesh: &Mesh, view: &View) -> f64 {
    let mut lengths: Vec<f64> = mesh
        .sides
        .iter()
        .map(|s| printed_length(mesh, view, s.vertices))
        .collect();
    lengths.sort_by(f64::total_cmp);
    let middle = lengths.get(lengths.len() / 2).copied().unwrap_or(1.0);
    (0.06 * middle).clamp(0.04, 0.12)
}

fn printed_length(mesh: &Mesh, view: &View, [a, b]: [u32; 2]) -> f64 {
    view.scale * mesh.vertices[a as usize].distance(mesh.vertices[b as usize])
}

/// Sides with triangles on both hands, in long trails so that each costs one pair of numbers; and how
/// many were shorter than `shortest`.
fn inner_sides(mesh: &Mesh, view: &View, shortest: f64) -> (String, usize) {
    let mut at: Vec<Vec<u32>> = vec![Vec::new(); mesh.vertices.len()];
    let mut used = vec![true; mesh.sides.len()];
    let mut left_out = 0;
    for (i, side) in mesh.sides.iter().enumerate() {
        if side.right == NONE {
            continue;
        }
        if printed_length(mesh, view, side.vertices) < shortest {
            left_out += 1;
            continue;
        }
        used[i] = false;
        for v in side.vertices {
            at[v as usize].push(i as u32);
        }
    }
    let mut path = FinePath::new(QUANTUM);
    for start in 0..at.len() {
        let mut v = start;
        let mut begun = false;
        loop {
            while at[v].last().is_some_and(|&i| used[i as usize]) {
                at[v].pop();
            }
            let Some(index) = at[v].pop() else {
                if v == start || !begun {
                    break;
                }
                // A trail ended elsewhere: begin again at this vertex while it has sides left.
                v = start;
                begun = false;
                continue;
            };
            used[index as usize] = true;
            if !begun {
                path.move_to(view.point(mesh.vertices[v]));
                begun = true;
            }
            let side = mesh.sides[index as usize];
            let next = if side.vertices[0] as usize == v {
                side.vertices[1]
            } else {
                side.vertices[0]
            } as usize;
            side_to(&mut path, mesh, view, v, next, side.circle);
            v = next;
        }
    }
    (path.finish(), left_out)
}

fn side_to(path: &mut FinePath, mesh: &Mesh, view: &View, from: usize, to: usize, circle: u32) {
    let (a, b) = (mesh.vertices[from], mesh.vertices[to]);
    if circle == NONE {
        path.line_to(view.point(b));
        return;
    }
    let circle = mesh.circles[circle as usize];
    // The shorter arc: anticlockwise where the centre lies to the left.
    let to_centre: Vector = circle.centre - a;
    let clockwise = (b - a).cross(to_centre) < 0.0;
    path.arc_to(view.point(b), view.scale * circle.radius, clockwise);
}
