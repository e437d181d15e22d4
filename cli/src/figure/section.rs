//! The section as drawn: outline, overall dimensions, principal axes, centroid, shear and flexure
//! centre with their coordinates.

use sectile_mesh::domain::Domain;
use sectile_mesh::{Point, Vector};
use sectile_solver::figure::Figure;
use sectile_solver::quantity::Quantity;

use super::centres::{
    BLOCK, Block, Centre, Principal, centre_block, centres, draw_block, principal, principal_block,
};
use super::dimension::{Turned, dimensions};
use super::joints;
use super::marks::{self, Mark};
use super::outline::{self, Shape};
use super::page::{Finished, INK, Label, MARGIN, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::text::SMALL;
use super::view::View;
use crate::section::Units;
use crate::write::CAUTION;

/// The fill of material.
pub const MATERIAL: &str = "#dfe3e8";
/// How far axes reach past the outline, mm.
const AXIS_OVERHANG: f64 = 2.6;
/// The drawing is not made higher than this, mm.
const MOST_HEIGHT: f64 = 105.0;
/// A centre farther from the outline than this many times the section's size is not drawn.
const FARTHEST: f64 = 3.0;

/// Draws the section; properties that are absent are left out. `materials`: names, by index.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
    materials: &[&str],
    properties: &[(Quantity, Figure)],
    width: f64,
) -> Finished {
    let get = |q: Quantity| properties.iter().find(|(p, _)| *p == q).map(|(_, f)| *f);
    let mut page = Page::new(
        width,
        "Section",
        title,
        &format!(
            "Lengths in {}, in the axes of the section file.",
            units.length
        ),
    );
    let extent = outline::extent(domain);
    let size = extent.width().hypot(extent.height());
    let (centres, far): (Vec<Centre>, Vec<Centre>) = centres(&get).into_iter().partition(|c| {
        let p = c.at();
        let near = extent.grown(FARTHEST * size);
        p.is_finite() && near.contains(&Rect::about(p, 0.0))
    });
    let bounds = centres.iter().fold(extent, |b, c| b.with(c.at()));

    let tall = bounds.height() > 0.75 * bounds.width();
    let beside = tall && width >= 2.0 * BLOCK + 30.0;
    let right = width - MARGIN - if beside { BLOCK + 4.0 } else { 3.0 };
    // Dimension lines keep off a centre that stands beside the outline, where the other side is free.
    let margin = 1e-6 * size;
    let turned = Turned {
        height_right: bounds.x0 < extent.x0 - margin && bounds.x1 <= extent.x1 + margin,
        width_above: bounds.y0 < extent.y0 - margin && bounds.y1 <= extent.y1 + margin,
    };
    let side = turned.room();
    let upper = page.cursor + side.y0;
    let area = Rect::new(
        MARGIN + side.x0,
        upper,
        right - side.x1,
        upper + MOST_HEIGHT,
    );
    let mut view = View::fit(bounds, area);
    if beside {
        // To the left edge rather than in the middle, so that the blocks stand near.
        let spare = area.width() - view.rect(bounds).width();
        let narrower = Rect::new(area.x0, area.y0, area.x1 - 0.6 * spare, area.y1);
        view = View::fit(bounds, narrower);
    }
    let drawn = view.rect(bounds);
    let solid = view.rect(extent);
    let top = page.cursor;

    joints::fill(&mut page, domain, &view);
    page.path(outline::boundary_path(domain, &view), Pen::line(INK, 0.3));
    let interfaces = outline::interface_path(domain, &view);
    if !interfaces.is_empty() {
        page.path(interfaces, Pen::line(INK, 0.13));
    }
    joints::draw(&mut page, domain, &view);

    let shape = Shape::new(domain, &view);
    let mut ground = Ground {
        area: Rect::new(
            MARGIN,
            top,
            if beside { right + 2.0 } else { width - MARGIN },
            drawn.y1 + side.y1,
        ),
        taken: centres
            .iter()
            .map(|c| Rect::about(view.point(c.at()), c.mark.radius() + 0.3))
            .chain(joints::places(domain, &view))
            .collect(),
        leaders: Vec::new(),
        shape: Some(&shape),
    };
    dimensions(&mut page, &mut ground, extent, solid, turned);
    origin(&mut page, &mut ground, &view, drawn);
    let principal = principal(&get);
    if let (Some(Principal::Axes(angle)), Some(c)) = (
        &principal,
        centres.iter().find(|c| c.mark == Mark::Centroid),
    ) {
        let at = view.point(c.at());
        axes(&mut page, &mut ground, at, angle.value, solid);
    }
    for centre in &centres {
        centre.mark.draw_edge(&mut page, view.point(centre.at()));
    }
    for centre in &centres {
        centre.mark.draw(&mut page, view.point(centre.at()));
    }
    letters(&mut page, &mut ground, &centres, &view);
    joints::numbers(&mut page, &mut ground, domain, &view);

    let mut blocks: Vec<Block> = centres
        .iter()
        .chain(&far)
        .map(|c| centre_block(c, units))
        .collect();
    blocks.extend(principal.map(|p| principal_block(&p)));
    let bottom = drawn.y1 + side.y1 + 1.0;
    if beside {
        let mut y = top + 2.0;
        for block in &blocks {
            y = draw_block(
                &mut page,
                Point::new(width - MARGIN - BLOCK, y),
                block,
                BLOCK,
            ) + 2.5;
        }
        page.cursor = bottom.max(y);
    } else {
        let columns = (((width - 2.0 * MARGIN) / BLOCK).floor() as usize).max(1);
        page.cursor = bottom + 1.0;
        let column = (width - 2.0 * MARGIN) / columns as f64;
        for row in blocks.chunks(columns) {
            let upper = page.cursor;
            let mut low = upper;
            for (i, block) in row.iter().enumerate() {
                let x = MARGIN + i as f64 * column;
                low = low.max(draw_block(&mut page, Point::new(x, upper), block, column));
            }
            page.cursor = low + 2.0;
        }
    }
    joints::key(&mut page, domain, materials);
    page.cursor += 2.0;
    let at = Point::new(MARGIN, page.cursor);
    marks::scale_bar(&mut page, at, view.scale, units.length);
    page.cursor += 1.0;
    let notes: Vec<String> = far
        .iter()
        .map(|c| format!("The {} lies outside the figure.", c.name))
        .collect();
    page.finish(&notes, CAUTION)
}

/// The axes of the section file: at their origin if that is in sight.
fn origin(page: &mut Page, ground: &mut Ground, view: &View, drawn: Rect) {
    let at = view.point(Point::default());
    let sight = drawn.grown(0.5);
    if sight.contains(&Rect::about(at, 0.0))
        && ground
            .area
            .contains(&Rect::new(at.x, at.y - 11.0, at.x + 10.0, at.y))
    {
        let labels = marks::axes(page, at, &ground.taken);
        ground.taken.extend(labels);
        ground.taken.push(Rect::about(at, 1.0));
        ground.leaders.push((at, at + Vector::new(7.0, 0.0)));
        ground.leaders.push((at, at + Vector::new(0.0, -7.0)));
    }
}

/// Principal axes 1 and 2 through the centroid, as far as the outline reaches.
fn axes(page: &mut Page, ground: &mut Ground, at: Point, degrees: f64, solid: Rect) {
    let frame = solid.grown(AXIS_OVERHANG);
    for (number, turn) in [("1", 0.0), ("2", 90.0)] {
        let d = Vector::at_angle((degrees + turn).to_radians());
        let d = Vector::new(d.x, -d.y);
        let (a, b) = (
            at + d * (-reach(at, -d, frame)),
            at + d * reach(at, d, frame),
        );
        page.line(a, b, Pen::line(INK, 0.15).dashed("4 0.8 0.6 0.8"));
        ground.leaders.push((a, b));
        let label = Label::small(number);
        // At the end that points right or up, if that is free.
        let ends = if d.x > 0.5 || (d.x > -0.5 && d.y < 0.0) {
            [(b, d), (a, -d)]
        } else {
            [(a, -d), (b, d)]
        };
        for (tip, out) in ends {
            let m = tip + out * 1.6;
            let base = Point::new(m.x - 0.5 * label.width(), m.y + 0.36 * SMALL);
            let rect = label.rect(base);
            if ground.area.contains(&rect) && !ground.taken.iter().any(|t| t.overlaps(&rect)) {
                page.text(base, &label);
                ground.taken.push(rect);
                break;
            }
        }
    }
}

/// How far one can go from `at` along the unit vector `d` inside `frame`.
fn reach(at: Point, d: Vector, frame: Rect) -> f64 {
    let axis = |x: f64, d: f64, low: f64, high: f64| {
        if d > 1e-12 {
            (high - x) / d
        } else if d < -1e-12 {
            (low - x) / d
        } else {
            f64::INFINITY
        }
    };
    axis(at.x, d.x, frame.x0, frame.x1)
        .min(axis(at.y, d.y, frame.y0, frame.y1))
        .max(0.0)
}

/// One label for centres that coincide in print.
fn letters(page: &mut Page, ground: &mut Ground, centres: &[Centre], view: &View) {
    let mut done = vec![false; centres.len()];
    for i in 0..centres.len() {
        if done[i] {
            continue;
        }
        let at = view.point(centres[i].at());
        let mut text = String::new();
        let mut radius: f64 = 0.0;
        for j in i..centres.len() {
            if !done[j] && view.point(centres[j].at()).distance(at) < 0.6 {
                done[j] = true;
                if !text.is_empty() {
                    text.push_str(", ");
                }
                text.push_str(centres[j].letter);
                radius = radius.max(centres[j].mark.radius());
            }
        }
        let mut label = Label::new(&text);
        label.bold = true;
        label.backed = true;
        let size = label.rect(Point::default());
        if let Some(placed) = ground.place(at, radius, size.width(), size.height()) {
            if let Some((a, b)) = placed.leader {
                page.line(a, b, Pen::line(INK, 0.13));
            }
            page.text(Point::new(placed.rect.x0, placed.rect.y0 - size.y0), &label);
        }
    }
}
