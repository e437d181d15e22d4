//! The extremes of a field that may be quoted: found outside the circles about sharp corners, marked
//! with value and place.

use sectile_mesh::Point;
use sectile_mesh::outline::side::Circle;

use super::field::Field;
use super::marks::Mark;
use super::outline;
use super::page::{INK, Label, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::surface::Surface;
use super::view::View;
use crate::write::digits;

/// An extreme that may be quoted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extreme {
    /// Its value.
    pub value: f64,
    /// Its place, section axes.
    pub at: Point,
}

/// The largest of `sign · value` outside the excluded circles and on them, where it lies beside a
/// corner without limit: there values are interpolated between points inside and outside, which for
/// such a field errs upwards.
///
/// Of the places that reach it within 2·10⁻⁴, the accuracy of the field, the one nearest to the middle
/// of the section is given (a plateau has its extreme there), then the highest, then the leftmost.
#[must_use]
pub fn extreme(
    surface: &Surface,
    values: &[f64],
    excluded: &[Circle],
    sign: f64,
) -> Option<Extreme> {
    let points = &surface.points;
    // The circle that a point lies in.
    let inside: Vec<Option<&Circle>> = points
        .iter()
        .map(|p| excluded.iter().find(|c| p.distance(c.centre) < c.radius))
        .collect();
    let mut found: Vec<(f64, Point)> = (0..points.len())
        .filter(|&i| inside[i].is_none())
        .map(|i| (sign * values[i], points[i]))
        .collect();
    for cell in &surface.cells {
        for k in 0..3 {
            let (a, b) = (cell[k] as usize, cell[(k + 1) % 3] as usize);
            if let (Some(circle), None) = (inside[a], inside[b]) {
                let t = leaving(points[a], points[b], circle);
                let value = values[a] + t * (values[b] - values[a]);
                found.push((sign * value, points[a].lerp(points[b], t)));
            }
        }
    }
    found.retain(|(v, _)| v.is_finite());
    let value = found
        .iter()
        .map(|(v, _)| *v)
        .fold(f64::NEG_INFINITY, f64::max);
    let near = value - 2e-4 * value.abs();
    let extent = points.iter().fold(Rect::EMPTY, |r, &p| r.with(p));
    // Rounding of coordinates must not decide which of two mirrored places is taken.
    let grain = 1e-6 * extent.width().max(extent.height()).max(f64::MIN_POSITIVE);
    let rank = |p: Point| [p.distance(extent.centre()), -p.y, p.x].map(|x| (x / grain).round());
    found
        .iter()
        .filter(|(v, _)| *v >= near)
        .min_by(|(_, p), (_, q)| {
            let (a, b) = (rank(*p), rank(*q));
            (0..3).fold(std::cmp::Ordering::Equal, |o, k| {
                o.then(a[k].total_cmp(&b[k]))
            })
        })
        .map(|(_, p)| Extreme {
            value: sign * value,
            at: *p,
        })
}

/// Where the line from `a` inside a circle to `b` outside of it leaves it, as a share of the way.
fn leaving(a: Point, b: Point, circle: &Circle) -> f64 {
    let (d, f) = (b - a, a - circle.centre);
    let (p, q) = (d.dot(d), d.dot(f));
    let rest = circle.radius.powi(2) - f.dot(f);
    ((-q + (q * q + p * rest).max(0.0).sqrt()) / p).clamp(0.0, 1.0)
}

/// Marks the extremes, with value and place; says them again in the notes.
pub fn mark_extremes(
    page: &mut Page,
    ground: &mut Ground,
    field: &Field,
    view: &View,
    (low, high): (Extreme, Extreme),
    notes: &mut Vec<String>,
) {
    let place = |p: Point| {
        let extent = outline::extent(field.domain);
        let grain = 1e-7 * extent.width().max(extent.height());
        let tidy = |x: f64| digits::short(if x.abs() < grain { 0.0 } else { x }, 4);
        format!("({}, {})", tidy(p.x), tidy(p.y))
    };
    let value = |v: f64| {
        let text = digits::short(v, 4);
        if field.signed && v > 0.0 {
            format!("+{text}")
        } else {
            text
        }
    };
    let mut wanted = vec![(format!("Largest {}", field.symbol), high)];
    if field.signed {
        wanted.push((format!("smallest {}", field.symbol), low));
    }
    for (_, extreme) in &wanted {
        ground
            .taken
            .push(Rect::about(view.point(extreme.at), Mark::Extreme.radius()));
    }
    let mut said = Vec::new();
    for (word, extreme) in wanted {
        let at = view.point(extreme.at);
        Mark::Extreme.draw_edge(page, at);
        Mark::Extreme.draw(page, at);
        let (first, second) = (value(extreme.value), place(extreme.at));
        said.push(format!("{word}: {first} {} at {second}", field.unit));
        let mut label = Label::new(&first);
        label.bold = true;
        label.backed = true;
        let mut below = Label::small(&second);
        below.backed = true;
        let (a, b) = (label.rect(Point::default()), below.rect(Point::default()));
        let w = a.width().max(b.width());
        let h = a.height() + b.height();
        let Some(placed) = ground.place(at, Mark::Extreme.radius(), w, h) else {
            continue;
        };
        if let Some((p, q)) = placed.leader {
            page.line(p, q, Pen::line("#ffffff", 0.5));
            page.line(p, q, Pen::line(INK, 0.15));
        }
        let r = placed.rect;
        page.text(Point::new(r.x0, r.y0 - a.y0), &label);
        page.text(Point::new(r.x0, r.y0 + a.height() - b.y0), &below);
    }
    notes.push(format!("{}.", said.join("; ")));
}
