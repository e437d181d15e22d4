//! What the figures of fields have in common: bands, scale, extremes, sharp corners.

use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_mesh::{Point, Vector};

use super::SIZE_LIMIT;
use super::arrows;
use super::bands::Cut;
use super::colour::{self, Rgb};
use super::contour::{self, Contour};
use super::extreme::{Extreme, extreme, mark_extremes};
use super::guide::Guide;
use super::legend::Scale;
use super::levels::Levels;
use super::marks::{self, Mark};
use super::outline::{self, Shape};
use super::page::{Finished, INK, Label, MARGIN, Page, Pen};
use super::path::{FinePath, simplified, simplified_loop};
use super::place::Ground;
use super::rect::Rect;
use super::style::{Drawing, Style};
use super::surface::Surface;
use super::text::{self, LABEL};
use super::view::View;
use crate::section::Units;
use crate::write::{CAUTION, digits};

const RINGS: &str = "Dashed rings:";
const MOST_HEIGHT: f64 = 120.0;
/// Width of a standing scale, mm.
const STANDING: f64 = 30.0;

/// A field to be drawn.
#[derive(Clone, Copy)]
pub struct Field<'a> {
    /// What the figure shows, its heading.
    pub kind: &'a str,
    /// The section's title.
    pub title: &'a str,
    /// A line on what the field is and in which unit.
    pub subtitle: &'a str,
    /// The field's symbol, such as `|τ|`.
    pub symbol: &'a str,
    /// Its unit.
    pub unit: &'a str,
    /// Units of the section.
    pub units: &'a Units,
    /// The section.
    pub domain: &'a Domain,
    /// Small triangles, section axes.
    pub surface: &'a Surface,
    /// Values at the surface's points.
    pub values: &'a [f64],
    /// Values up to this size are nought, and how to say so where all are.
    pub nought: Option<(f64, &'a str)>,
    /// Whether negative values are as good as positive ones.
    pub signed: bool,
    /// Directions to be shown by arrows, section axes.
    pub direction: Option<&'a [Vector]>,
    /// Where extremes are not quoted: about sharp re-entrant corners.
    pub excluded: &'a [Circle],
    /// A point to be marked, such as the shear centre.
    pub mark: Option<(Mark, Point)>,
    /// Smallest and largest value to be quoted, where they are known better than from the surface.
    pub quoted: Option<[Extreme; 2]>,
    /// Lines across the field.
    pub guides: &'a [Guide],
    /// What else is to be said below.
    pub remark: &'a str,
}

/// Draws the field.
#[must_use]
pub fn draw(field: &Field, style: Style) -> Finished {
    let mut last = None;
    // Finer than a printer's dot first; coarser where the file would grow too large.
    for tolerance in [0.008, 0.02, 0.05, 0.1, 0.2] {
        let finished = attempt(field, style, tolerance);
        if finished.svg.len() <= SIZE_LIMIT {
            return finished;
        }
        last = Some(finished);
    }
    last.unwrap_or_else(|| attempt(field, style, 0.5))
}

fn attempt(field: &Field, style: Style, tolerance: f64) -> Finished {
    let width = style.width_mm;
    let lines = style.drawing == Drawing::Lines;
    let mut page = Page::new(width, field.kind, field.title, field.subtitle);
    let extent = outline::extent(field.domain);
    let sight = extent.grown(1.5 * extent.width().hypot(extent.height()));
    let bounds = field
        .mark
        .iter()
        .map(|(_, p)| *p)
        .chain(field.guides.iter().map(|g| g.nearest(extent.centre())))
        .filter(|p| sight.contains(&Rect::about(*p, 0.0)))
        .fold(extent, Rect::with);
    let [low, high] = match field.quoted {
        Some(quoted) => quoted.map(Some),
        None => [-1.0, 1.0].map(|sign| extreme(field.surface, field.values, field.excluded, sign)),
    };
    let (Some(high), Some(low)) = (high, low) else {
        let note = "The field has no value outside the excluded places.".to_string();
        return page.finish(&[note], CAUTION);
    };
    if let Some((floor, words)) = field.nought
        && high.value.abs().max(low.value.abs()) <= floor
    {
        return nothing(page, field, words);
    }
    let levels = if field.signed {
        Levels::between(low.value.min(0.0), high.value.max(0.0))
    } else {
        Levels::between(0.0, high.value)
    };
    let colours = colours(&levels, field.signed);
    let top = levels.edge(levels.bands());
    let open_above = field.values.iter().any(|&v| v > top + 1e-3 * levels.step);
    let quantity = format!("{} in {}", field.symbol, field.unit);
    let scale = Scale {
        quantity: &quantity,
        levels,
        colours: &colours,
        open_above,
    };

    let beside = !lines && bounds.height() > 0.7 * bounds.width() && width >= 100.0;
    let right = width - MARGIN - if beside { STANDING + 4.0 } else { 0.0 };
    // Labels of extremes stand around the section where they can: room for them on all sides.
    let area = Rect::new(
        MARGIN + if beside { 14.0 } else { 4.0 },
        page.cursor + 7.0,
        right - if beside { 14.0 } else { 4.0 },
        page.cursor + 7.0 + MOST_HEIGHT,
    );
    let view = View::fit(bounds, area);
    let drawn = view.rect(bounds);
    let top_of_drawing = page.cursor;
    let shape = Shape::new(field.domain, &view);
    let bands = (!lines).then_some(colours.as_slice());
    let contours = paint(&mut page, field, &levels, bands, &view, &shape, tolerance);
    let bottom = drawn.y1 + 7.0;

    let mut ground = Ground {
        area: Rect::new(MARGIN, top_of_drawing, right, bottom),
        taken: Vec::new(),
        leaders: Vec::new(),
        shape: Some(&shape),
    };
    for circle in field.excluded {
        let r = (circle.radius * view.scale).max(0.5);
        page.circle(
            view.point(circle.centre),
            r,
            Pen::line(INK, 0.18).dashed("0.7 0.5"),
        );
    }
    let mut notes = Vec::new();
    for guide in field.guides {
        if guide.draw(&mut page, &mut ground, &view, drawn) {
            notes.push(guide.note().to_string());
        }
    }
    if let Some((mark, p)) = field.mark {
        let p = view.point(p);
        if drawn.grown(0.01).contains(&Rect::about(p, 0.0)) {
            mark.draw_edge(&mut page, p);
            mark.draw(&mut page, p);
            ground.taken.push(Rect::about(p, mark.radius() + 0.3));
            notes.push("Diamond: shear centre.".to_string());
        }
    }
    if field.signed {
        notes.push("Heavy line: zero; dashed lines: negative.".to_string());
    }
    mark_extremes(
        &mut page,
        &mut ground,
        field,
        &view,
        (low, high),
        &mut notes,
    );

    if lines {
        // Rings about sharp corners stay whole.
        let rings = field.excluded.iter().map(|c| {
            let r = (c.radius * view.scale).max(0.5);
            Rect::about(view.point(c.centre), r)
        });
        ground.taken.extend(rings);
        let places = contour::places(&contours, &levels, &mut ground);
        contour::write(&mut page, &levels, &places);
        page.cursor = bottom + 0.5;
        for line in text::wrap(&scale.in_words(), LABEL, width - 2.0 * MARGIN) {
            page.cursor += 1.2 * LABEL;
            page.text(Point::new(MARGIN, page.cursor), &Label::new(&line));
        }
    } else if beside {
        let column = Rect::new(
            width - MARGIN - STANDING,
            top_of_drawing + 1.0,
            width - MARGIN,
            (top_of_drawing + 75.0).min(bottom.max(top_of_drawing + 45.0)),
        );
        scale.standing(&mut page, column);
        page.cursor = bottom.max(column.y1);
    } else {
        page.cursor = bottom + 0.5;
        let most = 120.0_f64.min(width - 2.0 * MARGIN);
        scale.lying(&mut page, (MARGIN, MARGIN + most));
    }
    page.cursor += 4.5;
    let at = Point::new(MARGIN, page.cursor);
    marks::scale_bar(&mut page, at, view.scale, field.units.length);
    page.cursor += 0.5;
    let above = match (open_above, lines) {
        (false, _) => "",
        (true, false) => " The pointed end of the scale stands for all that is above it.",
        (true, true) => " Nearer to them the field rises beyond the lines that are drawn.",
    };
    excluded_note(field, above, &mut notes);
    // The short ones share a line.
    let (long, short): (Vec<String>, Vec<String>) =
        notes.into_iter().partition(|n| n.starts_with(RINGS));
    let mut notes = vec![short.join(" ")];
    notes.extend((!field.remark.is_empty()).then(|| field.remark.to_string()));
    notes.extend(long);
    page.finish(&notes, CAUTION)
}

/// The outline alone, with the words that say why.
fn nothing(mut page: Page, field: &Field, words: &str) -> Finished {
    let extent = outline::extent(field.domain);
    let (width, upper) = (page.width(), page.cursor + 4.0);
    let view = View::fit(
        extent,
        Rect::new(
            MARGIN + 4.0,
            upper,
            width - MARGIN - 4.0,
            upper + MOST_HEIGHT,
        ),
    );
    page.path(
        outline::boundary_path(field.domain, &view),
        Pen::line(INK, 0.28).filled(&colour::diverging(0.0).hex()),
    );
    page.cursor = view.rect(extent).y1 + 6.0;
    let at = Point::new(MARGIN, page.cursor);
    marks::scale_bar(&mut page, at, view.scale, field.units.length);
    page.cursor += 0.5;
    page.finish(&[words.to_string()], CAUTION)
}

fn colours(levels: &Levels, signed: bool) -> Vec<Rgb> {
    let n = levels.bands();
    let reach = levels.edge(0).abs().max(levels.edge(n).abs());
    (0..n)
        .map(|i| {
            let middle = 0.5 * (levels.edge(i) + levels.edge(i + 1));
            if signed {
                colour::diverging(middle / reach)
            } else {
                colour::sequential(i as f64 / (n as f64 - 1.0).max(1.0))
            }
        })
        .collect()
}

/// Bands where there are colours for them, the lines between them, the outline, arrows over bands.
/// Returns the lines.
fn paint(
    page: &mut Page,
    field: &Field,
    levels: &Levels,
    bands: Option<&[Rgb]>,
    view: &View,
    shape: &Shape,
    tolerance: f64,
) -> Vec<Contour> {
    let quantum = 0.01_f64.max(0.5 * tolerance);
    let on_page = Surface {
        points: field
            .surface
            .points
            .iter()
            .map(|&p| view.point(p))
            .collect(),
        cells: field.surface.cells.clone(),
        rim: field.surface.rim.clone(),
    };
    // Under everything the true outline in the lowest colour: chords of the bands leave no paper.
    if let Some(colours) = bands {
        let base = colours[0].hex();
        page.path(outline::boundary_path(field.domain, view), Pen::fill(&base));
    }
    let mut contours = Vec::new();
    let (mut solid, mut dashed) = (FinePath::new(quantum), FinePath::new(quantum));
    let mut nought = FinePath::new(quantum);
    for i in 1..levels.bands() {
        let cut = Cut::new(&on_page, field.values, levels.edge(i));
        if let Some(colours) = bands {
            let mut path = FinePath::new(quantum);
            for points in cut.region() {
                path.closed(&simplified_loop(&points, tolerance));
            }
            if !path.is_empty() {
                page.fine_path(path.finish(), quantum, Pen::fill(&colours[i].hex()));
            }
        }
        let multiple = levels.first + i as i64;
        let path = match multiple {
            0 => &mut nought,
            k if k < 0 => &mut dashed,
            _ => &mut solid,
        };
        for points in cut.lines() {
            path.open(&simplified(&points, tolerance));
            contours.push(Contour { multiple, points });
        }
    }
    // Lines that stand alone are heavier than those between bands.
    let (thin, heavy) = match (bands, field.signed) {
        (None, _) => (0.18, 0.45),
        (Some(_), true) => (0.12, 0.3),
        (Some(_), false) => (0.07, 0.3),
    };
    let thin = Pen::line(INK, thin);
    for (path, pen) in [
        (solid, thin),
        (dashed, thin.dashed("0.9 0.6")),
        (nought, Pen::line(INK, heavy)),
    ] {
        if !path.is_empty() {
            page.fine_path(path.finish(), quantum, pen);
        }
    }
    let seams = outline::interface_path(field.domain, view);
    if !seams.is_empty() {
        page.path(seams, Pen::line(INK, 0.15));
    }
    page.path(
        outline::boundary_path(field.domain, view),
        Pen::line(INK, 0.28),
    );
    if let (Some(direction), Some(_)) = (field.direction, bands) {
        let turned: Vec<Vector> = direction.iter().map(|d| Vector::new(d.x, -d.y)).collect();
        let greatest = levels.edge(levels.bands());
        arrows::draw(page, &on_page, &turned, greatest, shape);
    }
    contours
}

fn excluded_note(field: &Field, above: &str, notes: &mut Vec<String>) {
    if field.excluded.is_empty() {
        return;
    }
    let radii = || field.excluded.iter().map(|c| c.radius);
    let least = digits::short(radii().fold(f64::INFINITY, f64::min), 3);
    let most = digits::short(radii().fold(0.0, f64::max), 3);
    let distance = if least == most {
        most
    } else {
        format!("{least} to {most}")
    };
    let mut text = format!(
        "{RINGS} sharp re-entrant corners, where linear-elastic stress has no limit; the extreme is \
         sought farther than {distance} {} from them.",
        field.units.length
    );
    text.push_str(above);
    notes.push(text);
}
