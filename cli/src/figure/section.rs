//! The section as drawn: outline, overall dimensions, principal axes, centroid, shear and flexure
//! centre with their coordinates.

use sectile_mesh::domain::Domain;
use sectile_mesh::{Point, Vector};
use sectile_solver::figure::Figure;
use sectile_solver::quantity::Quantity;

use super::marks::{self, Mark};
use super::outline::{self, Shape};
use super::page::{FAINT, Finished, INK, Label, MARGIN, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::text::{self, LABEL, SMALL};
use super::view::View;
use crate::section::Units;
use crate::write::{CAUTION, digits, units as unit_names};

/// The fill of material.
pub const MATERIAL: &str = "#dfe3e8";
/// Room for a dimension line with its text, mm.
const DIMENSION_ROOM: f64 = 8.0;
/// From the outline to a dimension line, mm.
const DIMENSION_AT: f64 = 6.8;
/// How far axes reach past the outline, mm.
const AXIS_OVERHANG: f64 = 2.6;
/// The drawing is not made higher than this, mm.
const MOST_HEIGHT: f64 = 105.0;
/// Width of a block of coordinates, mm.
const BLOCK: f64 = 50.0;
/// A centre farther from the outline than this many times the section's size is not drawn.
const FARTHEST: f64 = 3.0;

/// A marked centre.
struct Centre {
    mark: Mark,
    letter: &'static str,
    name: &'static str,
    remark: &'static str,
    x: (Quantity, Figure),
    y: (Quantity, Figure),
}

impl Centre {
    fn at(&self) -> Point {
        Point::new(self.x.1.value, self.y.1.value)
    }
}

/// Draws the section; properties that are absent are left out.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
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

    page.path(
        outline::boundary_path(domain, &view),
        Pen::line(INK, 0.3).filled(MATERIAL),
    );
    let seams = outline::interface_path(domain, &view);
    if !seams.is_empty() {
        page.path(seams, Pen::line(INK, 0.13));
    }

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

fn centres(get: &dyn Fn(Quantity) -> Option<Figure>) -> Vec<Centre> {
    use Quantity as Q;
    [
        (
            Mark::Centroid,
            "C",
            "centroid",
            "",
            Q::CentroidX,
            Q::CentroidY,
        ),
        (
            Mark::ShearCentre,
            "S",
            "shear centre",
            "independent of Poisson's ratio; loads refer to it",
            Q::ShearCentreX,
            Q::ShearCentreY,
        ),
        (
            Mark::FlexureCentre,
            "F",
            "flexure centre",
            "no mean rotation under flexure; depends on Poisson's ratio",
            Q::FlexureCentreX,
            Q::FlexureCentreY,
        ),
    ]
    .into_iter()
    .filter_map(|(mark, letter, name, remark, x, y)| {
        Some(Centre {
            mark,
            letter,
            name,
            remark,
            x: (x, get(x)?),
            y: (y, get(y)?),
        })
    })
    .collect()
}

enum Principal {
    /// The angle of axis 1, degrees.
    Axes(Figure),
    /// Both principal moments are equal.
    Any,
}

fn principal(get: &dyn Fn(Quantity) -> Option<Figure>) -> Option<Principal> {
    let angle = get(Quantity::PrincipalAngle)?;
    let (a, b) = (
        get(Quantity::PrincipalMoment1)?,
        get(Quantity::PrincipalMoment2)?,
    );
    // Equal within rounding: the angle says nothing.
    let equal = (a.value - b.value).abs() <= 1e-9 * a.value.abs() + a.half_width() + b.half_width();
    Some(if equal {
        Principal::Any
    } else {
        Principal::Axes(angle)
    })
}

/// On which sides the dimension lines stand.
#[derive(Clone, Copy)]
struct Turned {
    /// The height is given on the right instead of on the left.
    height_right: bool,
    /// The width is given above instead of below.
    width_above: bool,
}

impl Turned {
    /// Room around the drawing, mm, as left, top, right, bottom.
    fn room(self) -> Rect {
        let pick = |dimension: bool, bare: f64| if dimension { DIMENSION_ROOM } else { bare };
        Rect::new(
            pick(!self.height_right, 8.0),
            // The text stands above the line, away from the outline.
            if self.width_above {
                DIMENSION_ROOM + 3.0
            } else {
                6.0
            },
            pick(self.height_right, 3.0),
            pick(!self.width_above, 5.0),
        )
    }
}

fn dimensions(page: &mut Page, ground: &mut Ground, extent: Rect, solid: Rect, turned: Turned) {
    let thin = Pen::line(FAINT, 0.12);
    let (near, far, y) = if turned.width_above {
        (
            solid.y0 - 1.0,
            solid.y0 - DIMENSION_AT - 1.0,
            solid.y0 - DIMENSION_AT,
        )
    } else {
        (
            solid.y1 + 1.0,
            solid.y1 + DIMENSION_AT + 1.0,
            solid.y1 + DIMENSION_AT,
        )
    };
    for x in [solid.x0, solid.x1] {
        page.line(Point::new(x, near), Point::new(x, far), thin);
    }
    let text = digits::short(extent.width(), 6);
    let (a, b) = (Point::new(solid.x0, y), Point::new(solid.x1, y));
    ground.taken.push(marks::dimension(page, a, b, &text));
    // Labels keep off the dimension lines too.
    ground.leaders.push((a, b));

    let (near, far, x) = if turned.height_right {
        (
            solid.x1 + 1.0,
            solid.x1 + DIMENSION_AT + 1.0,
            solid.x1 + DIMENSION_AT,
        )
    } else {
        (
            solid.x0 - 1.0,
            solid.x0 - DIMENSION_AT - 1.0,
            solid.x0 - DIMENSION_AT,
        )
    };
    for y in [solid.y0, solid.y1] {
        page.line(Point::new(near, y), Point::new(far, y), thin);
    }
    let text = digits::short(extent.height(), 6);
    let (a, b) = (Point::new(x, solid.y1), Point::new(x, solid.y0));
    ground.taken.push(marks::dimension(page, a, b, &text));
    ground.leaders.push((a, b));
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

/// A figure with its ±; exact ones without trailing zeros.
fn printed(figure: &Figure) -> String {
    let mut text = digits::print(figure);
    if text.half_width.is_none() && text.value.contains('.') {
        text.value = text
            .value
            .trim_end_matches('0')
            .trim_end_matches('.')
            .into();
    }
    digits::minus_sign(&text.line())
}

/// A mark, a heading and lines below it.
struct Block {
    mark: Option<Mark>,
    heading: String,
    remark: String,
    lines: Vec<String>,
}

fn centre_block(centre: &Centre, units: &Units) -> Block {
    let line = |(q, f): &(Quantity, Figure)| {
        let text = printed(f);
        let unit = unit_names::pretty(q.dimension(), units);
        format!("{} = {text} {unit}", q.symbol())
    };
    Block {
        mark: Some(centre.mark),
        heading: format!("{}  {}", centre.letter, centre.name),
        remark: centre.remark.into(),
        lines: vec![line(&centre.x), line(&centre.y)],
    }
}

fn principal_block(principal: &Principal) -> Block {
    Block {
        mark: None,
        heading: "1, 2  principal axes".into(),
        remark: String::new(),
        lines: vec![match principal {
            Principal::Axes(angle) => format!("axis 1 at α = {}° from x", printed(angle)),
            Principal::Any => "every axis through C is one".into(),
        }],
    }
}

/// Draws a block with its upper left corner at `at`, within `width`; returns its lower edge.
fn draw_block(page: &mut Page, at: Point, block: &Block, width: f64) -> f64 {
    let indent = 6.0;
    let limit = width - indent;
    let mut y = at.y + 0.78 * LABEL;
    match block.mark {
        Some(mark) => mark.draw(page, Point::new(at.x + 2.4, y - 0.36 * LABEL)),
        None => page.line(
            Point::new(at.x, y - 0.36 * LABEL),
            Point::new(at.x + 5.0, y - 0.36 * LABEL),
            Pen::line(INK, 0.15).dashed("2.2 0.5 0.4 0.5"),
        ),
    }
    let mut label = Label::new(&block.heading);
    label.bold = true;
    page.text(Point::new(at.x + indent, y), &label);
    for line in text::wrap(&block.remark, SMALL, limit) {
        y += 1.2 * SMALL;
        let mut label = Label::small(&line);
        label.colour = FAINT;
        page.text(Point::new(at.x + indent, y), &label);
    }
    for line in &block.lines {
        y += 1.3 * LABEL;
        let mut label = Label::new(line);
        label.size *= (limit / label.width()).min(1.0);
        page.text(Point::new(at.x + indent, y), &label);
    }
    y + 0.26 * LABEL
}
