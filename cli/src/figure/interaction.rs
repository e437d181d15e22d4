//! Curves of the fully plastic N, M_x and M_y, each over its fully plastic value.

use sectile_mesh::Point;

use super::levels::Levels;
use super::page::{Anchor, FAINT, Finished, INK, Label, MARGIN, Page, Pen, number};
use super::rect::Rect;
use super::text::{LABEL, SMALL};
use crate::interaction::{Interaction, LEVELS};
use crate::section::Units;
use crate::write::digits;
use crate::write::interaction::{LIMITS, PLASTIC_CAUTION};
use crate::write::units::moment_per_force;

/// Room for the numbers beside a plot, mm.
const NUMBERS: f64 = 9.0;
/// Width of a number and the space beside it, mm.
const NUMBER: f64 = 6.8;
/// Dashes of the curves at rising N, mm.
const DASHES: [&str; 5] = ["", "3 1", "1.6 1", "0.8 0.8", "0.3 0.8"];

/// Draws the curves.
#[must_use]
pub fn draw(title: &str, units: &Units, interaction: &Interaction, width: f64) -> Finished {
    let subtitle = "Axial force and moments at which the whole section yields, over their fully plastic \
                    values; about the centroid.";
    let mut page = Page::new(width, "Plastic interaction", title, subtitle);
    let [mx, my] = interaction.moments;
    let n = interaction.n;
    let beside = 0.5 * (width - 2.0 * MARGIN - 4.0);
    let top = page.cursor;
    let mut bottom = top;
    let pairs = [
        ("M_x / M_px", interaction.about_x(), 0),
        ("M_y / M_py", interaction.about_y(), 1),
    ];
    for (across, curve, k) in pairs {
        page.cursor = top;
        let left = MARGIN + k as f64 * (beside + 4.0);
        let points: Vec<Point> = curve
            .iter()
            .map(|p| Point::new(if k == 0 { p.mx / mx } else { p.my / my }, p.n / n))
            .collect();
        plot(
            &mut page,
            [left, left + beside],
            [across, "N / N_p"],
            &[(points, "")],
        );
        bottom = page.cursor;
    }
    page.cursor = bottom;
    let curves: Vec<(Vec<Point>, &str)> = LEVELS
        .iter()
        .zip(DASHES)
        .map(|(&level, dashes)| {
            let mut points: Vec<Point> = interaction
                .at_level(level)
                .iter()
                .map(|p| Point::new(p.my / my, p.mx / mx))
                .collect();
            points.extend(points.first().copied());
            (points, dashes)
        })
        .collect();
    let from = page.cursor;
    plot(
        &mut page,
        [MARGIN, MARGIN + beside],
        ["M_y / M_py", "M_x / M_px"],
        &curves,
    );
    let end = page.cursor;
    page.cursor = from + LABEL;
    let x = MARGIN + beside + 6.0;
    let sample = (0.07 * width).clamp(4.0, 9.0);
    for (level, dashes) in LEVELS.iter().zip(DASHES) {
        page.cursor += 1.7 * LABEL;
        let y = page.cursor - 0.35 * LABEL;
        page.line(
            Point::new(x, y),
            Point::new(x + sample, y),
            Pen::line(INK, 0.4).dashed(dashes),
        );
        let text = format!("N = {} N_p", digits::short(*level, 2));
        page.text(
            Point::new(x + sample + 2.0, page.cursor),
            &Label::new(&text),
        );
    }
    page.cursor = end.max(page.cursor);
    let moment = moment_per_force(units);
    let short = |v: f64| digits::short(v, 5);
    let notes = [
        format!(
            "Fully plastic values, each alone: N {} {}, Mx {} {}, My {} {}.",
            short(n),
            units.force,
            short(mx * moment),
            units.moment,
            short(my * moment),
            units.moment
        ),
        "Over Mx the neutral axis is parallel to x, over My to y; the other moment is as it comes. N is \
         positive in tension."
            .to_string(),
        digits::minus_sign(LIMITS),
    ];
    page.finish(&notes, PLASTIC_CAUTION)
}

/// One square plot below the cursor, from left to right; moves the cursor below its numbers.
fn plot(page: &mut Page, [left, right]: [f64; 2], names: [&str; 2], curves: &[(Vec<Point>, &str)]) {
    let all = || curves.iter().flat_map(|(points, _)| points);
    let range = |of: fn(&Point) -> f64| {
        let (low, high) = all()
            .map(of)
            .fold((0.0_f64, 0.0_f64), |(l, h), v| (l.min(v), h.max(v)));
        Levels::between(low, high)
    };
    let (xs, ys) = (range(|p| p.x), range(|p| p.y));
    page.cursor += 0.9 * LABEL;
    page.text(Point::new(left, page.cursor), &Label::new(names[1]));
    page.cursor += 0.9 * LABEL;
    let side = right - left - NUMBERS - 1.0;
    let frame = Rect::new(
        left + NUMBERS,
        page.cursor,
        left + NUMBERS + side,
        page.cursor + side,
    );
    let ends = |l: &Levels| (l.edge(0), l.edge(l.bands()));
    let ((x0, x1), (y0, y1)) = (ends(&xs), ends(&ys));
    let on_page = |p: Point| {
        Point::new(
            frame.x0 + side * (p.x - x0) / (x1 - x0),
            frame.y1 - side * (p.y - y0) / (y1 - y0),
        )
    };
    let pen = |v: f64| {
        if v.abs() < 1e-9 {
            Pen::line(INK, 0.2)
        } else {
            Pen::line(FAINT, 0.06)
        }
    };
    // Numbers are left out where they would meet.
    let every = |levels: &Levels| (NUMBER * levels.bands() as f64 / side).ceil().max(1.0) as i64;
    for i in 0..=xs.bands() {
        let v = xs.edge(i);
        let at = on_page(Point::new(v, y0));
        page.line(at, Point::new(at.x, frame.y0), pen(v));
        if (xs.first + i as i64).rem_euclid(every(&xs)) == 0 {
            let text = digits::short(v, 3);
            let label = Label::small(&text).anchored(Anchor::Middle);
            page.text(Point::new(at.x, frame.y1 + 1.6 + 0.85 * SMALL), &label);
        }
    }
    for i in 0..=ys.bands() {
        let v = ys.edge(i);
        let at = on_page(Point::new(x0, v));
        page.line(at, Point::new(frame.x1, at.y), pen(v));
        if (ys.first + i as i64).rem_euclid(every(&ys)) == 0 {
            let text = digits::short(v, 3);
            let label = Label::small(&text).anchored(Anchor::End);
            page.text(Point::new(frame.x0 - 1.2, at.y + 0.36 * SMALL), &label);
        }
    }
    for (points, dashes) in curves {
        let mut data = String::new();
        for (i, p) in points.iter().map(|p| on_page(*p)).enumerate() {
            let command = if i == 0 { 'M' } else { 'L' };
            data.push_str(&format!("{command}{} {}", number(p.x), number(p.y)));
        }
        page.path(data, Pen::line(INK, 0.4).dashed(dashes));
    }
    page.cursor = frame.y1 + 1.6 + 2.1 * SMALL;
    let at = Point::new(frame.x1, page.cursor + 0.4 * SMALL);
    page.text(at, &Label::new(names[0]).anchored(Anchor::End));
    page.cursor += 1.6 * LABEL;
}
