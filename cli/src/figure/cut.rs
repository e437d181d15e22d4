//! Plots of the stresses along a cut: normal stress, and shear stress across the cut, over the distance
//! from the cut's beginning; beside them where the cut lies.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_solver::stress::cut::{CutResult, CutSample};

use super::levels::Levels;
use super::marks::{Mark, SHEAR, arrow};
use super::outline;
use super::page::{Anchor, FAINT, Finished, INK, Label, MARGIN, Page, Pen, number};
use super::path::simplified;
use super::place::Ground;
use super::rect::Rect;
use super::response::described;
use super::text::{self, LABEL, SMALL};
use super::view::View;
use crate::response::Response;
use crate::section::{Cut, Units};
use crate::write::units::stress_per_force;
use crate::write::{CAUTION, digits};

/// Height of a plot, mm.
const HEIGHT: f64 = 36.0;
/// Width of the sketch beside the plots, mm.
const SKETCH: f64 = 32.0;
const AREA: &str = "#e4e9ee";

/// Draws the plots of one cut under one response.
#[must_use]
pub fn draw(
    title: &str,
    units: &Units,
    domain: &Domain,
    cut: &Cut,
    response: &Response,
    result: &CutResult,
    width: f64,
) -> Finished {
    let place = |p: Point| format!("({}, {})", digits::short(p.x, 5), digits::short(p.y, 5));
    let subtitle = format!(
        "Cut {} from {} to {}: normal stress σ and shear stress τ_n across the cut, in {}, under {}.",
        cut.name,
        place(cut.from),
        place(cut.to),
        units.stress,
        described(units, response),
    );
    let mut page = Page::new(width, &response.name, title, &subtitle);
    let beside = width >= 100.0;
    let right = width - MARGIN - if beside { SKETCH + 5.0 } else { 0.0 };
    let top = page.cursor;
    let factor = stress_per_force(units);
    let along = |value: fn(&CutSample) -> f64| -> Vec<Vec<Point>> {
        let run = |run: &Vec<CutSample>| {
            run.iter()
                .map(|s| Point::new(s.distance, factor * value(s)))
                .collect()
        };
        result.runs.iter().map(run).collect()
    };
    let size = result
        .runs
        .iter()
        .flatten()
        .map(|s| factor * s.stress.von_mises())
        .fold(0.0, f64::max);
    let (shown, nought): (Vec<_>, Vec<_>) = [
        ("σ", along(|s| s.stress.sigma)),
        ("τ_n", along(|s| s.normal_shear)),
    ]
    .into_iter()
    .partition(|(_, runs)| {
        let greatest = runs.iter().flatten().map(|p| p.y.abs()).fold(0.0, f64::max);
        greatest > 1e-7 * size
    });
    let left = MARGIN
        + shown
            .iter()
            .map(|(_, runs)| numbers(runs))
            .fold(0.0, f64::max)
        + 1.8;
    for (name, runs) in &shown {
        plot(
            &mut page,
            (left, right),
            &format!("{name} in {}", units.stress),
            runs,
        );
    }
    page.cursor += 0.4 * SMALL;
    let caption = format!("distance along the cut in {}", units.length);
    let at = Point::new(right, page.cursor);
    page.text(at, &Label::small(&caption).anchored(Anchor::End));
    page.cursor += 0.5 * SMALL;
    for (name, _) in &nought {
        page.cursor += 1.2 * LABEL;
        let text = format!("{name} is zero along the cut.");
        page.text(Point::new(MARGIN, page.cursor), &Label::new(&text));
        page.cursor += 0.3 * LABEL;
    }
    if beside {
        let area = Rect::new(
            width - MARGIN - SKETCH,
            top + 3.0,
            width - MARGIN,
            page.cursor,
        );
        sketch(&mut page, domain, cut, area);
    }
    let flow = format!("{}/{}", units.force, units.length);
    let short = |x: f64| digits::short(x, 4);
    let notes = [
        format!(
            "What crosses the cut: shear flow {} {flow}, normal force {} {flow}, over {} {} of material.",
            short(result.shear_flow),
            short(result.normal_force),
            short(result.material),
            units.length
        ),
        "Tension is positive, and shear stress to the right of the cut's direction. The flow is that of \
         the equilibrated field, the plot shows the mean field."
            .to_string(),
    ];
    page.finish(&notes, CAUTION)
}

/// Levels of a plot, which has its zero line.
fn levels(runs: &[Vec<Point>]) -> Levels {
    let all = || runs.iter().flatten().map(|p| p.y);
    Levels::between(all().fold(0.0, f64::min), all().fold(0.0, f64::max))
}

/// Width of a plot's numbers.
fn numbers(runs: &[Vec<Point>]) -> f64 {
    levels(runs)
        .printed()
        .iter()
        .map(|t| text::width(t, SMALL, false))
        .fold(0.0, f64::max)
}

/// One plot below the cursor, its frame from `left` to `right`; moves the cursor below its numbers.
fn plot(page: &mut Page, (left, right): (f64, f64), quantity: &str, runs: &[Vec<Point>]) {
    let all = || runs.iter().flatten().map(|p| p.x);
    let (x0, x1) = (
        all().fold(f64::INFINITY, f64::min),
        all().fold(f64::NEG_INFINITY, f64::max),
    );
    let levels = levels(runs);
    let printed = levels.printed();
    page.cursor += 0.78 * LABEL;
    let caption = match levels.power() {
        0 => quantity.to_string(),
        power => format!("{quantity} (times 10{})", digits::superscript(power)),
    };
    page.text(Point::new(MARGIN, page.cursor), &Label::new(&caption));
    page.cursor += 0.26 * LABEL + 0.5 * SMALL;

    let frame = Rect::new(left, page.cursor, right - 1.0, page.cursor + HEIGHT);
    let (bottom, top) = (levels.edge(0), levels.edge(levels.bands()));
    let across = frame.width() / (x1 - x0).max(f64::MIN_POSITIVE);
    let up = frame.height() / (top - bottom);
    let on_page = |p: Point| {
        Point::new(
            frame.x0 + across * (p.x - x0),
            frame.y1 - up * (p.y - bottom),
        )
    };
    let zero = on_page(Point::new(x0, 0.0)).y;

    let curves: Vec<Vec<Point>> = runs
        .iter()
        .map(|run| {
            let points: Vec<Point> = run.iter().map(|&p| on_page(p)).collect();
            simplified(&points, 0.02)
        })
        .collect();
    for curve in &curves {
        if let (Some(first), Some(last)) = (curve.first(), curve.last()) {
            let mut area = curve.clone();
            area.push(Point::new(last.x, zero));
            area.push(Point::new(first.x, zero));
            page.polygon(&area, Pen::fill(AREA));
        }
    }
    let step = frame.height() / levels.bands() as f64;
    let every = ((1.25 * SMALL) / step).ceil().max(1.0) as i64;
    for (i, text) in printed.iter().enumerate() {
        let y = frame.y1 - step * i as f64;
        if (levels.first + i as i64).rem_euclid(every) == 0 {
            page.line(
                Point::new(frame.x0, y),
                Point::new(frame.x1, y),
                Pen::line(FAINT, 0.06),
            );
            let at = Point::new(frame.x0 - 1.5, y + 0.36 * SMALL);
            page.text(at, &Label::small(text).anchored(Anchor::End));
        }
    }
    page.line(
        Point::new(frame.x0, zero),
        Point::new(frame.x1, zero),
        Pen::line(INK, 0.2),
    );
    distances(page, frame, x0, x1);
    for curve in &curves {
        page.path(polyline(curve), Pen::line(INK, 0.4));
        for end in [curve.first(), curve.last()].into_iter().flatten() {
            page.line(*end, Point::new(end.x, zero), Pen::line(INK, 0.2));
        }
    }
    label_extremes(page, frame, &on_page, runs);
    page.cursor = frame.y1 + 1.0 + 1.2 * SMALL + 2.5;
}

pub(super) fn polyline(points: &[Point]) -> String {
    let mut data = String::new();
    for (i, p) in points.iter().enumerate() {
        let command = if i == 0 { 'M' } else { 'L' };
        data.push_str(&format!("{command}{} {}", number(p.x), number(p.y)));
    }
    data
}

/// Ticks and round numbers below a plot.
pub(super) fn distances(page: &mut Page, frame: Rect, x0: f64, x1: f64) {
    let levels = Levels::between(x0, x1);
    let unit = 10f64.powi(levels.power());
    let printed = levels.printed();
    let across = frame.width() / (x1 - x0).max(f64::MIN_POSITIVE);
    let widest = printed
        .iter()
        .map(|t| text::width(t, SMALL, false))
        .fold(0.0, f64::max);
    let every = ((widest + 2.0) / (across * levels.step)).ceil().max(1.0) as i64;
    let mut end = f64::NEG_INFINITY;
    for (i, text) in printed.iter().enumerate() {
        let d = levels.edge(i);
        let slack = 1e-6 * levels.step;
        if d < x0 - slack || d > x1 + slack || (levels.first + i as i64).rem_euclid(every) != 0 {
            continue;
        }
        let x = frame.x0 + across * (d - x0);
        page.line(
            Point::new(x, frame.y1),
            Point::new(x, frame.y1 + 0.8),
            Pen::line(INK, 0.15),
        );
        // Small and large distances are written out in full.
        let text = if unit == 1.0 {
            text.clone()
        } else {
            digits::short(d, 4)
        };
        let label = Label::small(&text).anchored(Anchor::Middle);
        let at = Point::new(x, frame.y1 + 1.3 + 0.85 * SMALL);
        let rect = label.rect(at);
        if rect.x0 > end + 0.8 && rect.x1 <= page.width() - MARGIN {
            page.text(at, &label);
            end = rect.x1;
        }
    }
}

/// The largest and the smallest value, each once.
fn label_extremes(
    page: &mut Page,
    frame: Rect,
    on_page: &dyn Fn(Point) -> Point,
    runs: &[Vec<Point>],
) {
    let all: Vec<Point> = runs.iter().flatten().copied().collect();
    let pick = |sign: f64| {
        all.iter()
            .copied()
            .reduce(|a, b| if sign * b.y > sign * a.y { b } else { a })
    };
    let (Some(high), Some(low)) = (pick(1.0), pick(-1.0)) else {
        return;
    };
    let size = high.y.abs().max(low.y.abs());
    let mut wanted = vec![high];
    if high.y - low.y > 1e-6 * size {
        wanted.push(low);
    }
    wanted.retain(|p| p.y.abs() > 1e-3 * size);
    let mut ground = Ground {
        area: frame.grown(-0.3),
        taken: wanted
            .iter()
            .map(|&p| Rect::about(on_page(p), Mark::Extreme.radius()))
            .collect(),
        // Labels keep off the curve.
        leaders: runs
            .iter()
            .flat_map(|run| run.windows(2).map(|w| (on_page(w[0]), on_page(w[1]))))
            .collect(),
        shape: None,
    };
    for p in wanted {
        let at = on_page(p);
        Mark::Extreme.draw_edge(page, at);
        Mark::Extreme.draw(page, at);
        let text = digits::short(p.y, 4);
        let mut label = Label::new(&text);
        label.bold = true;
        label.backed = true;
        let own = label.rect(Point::default());
        let Some(placed) = ground.place(at, Mark::Extreme.radius(), own.width(), own.height())
        else {
            continue;
        };
        if let Some((a, b)) = placed.leader {
            page.line(a, b, Pen::line(INK, 0.15));
        }
        page.text(Point::new(placed.rect.x0, placed.rect.y0 - own.y0), &label);
    }
}

/// The outline with the cut as an arrow.
fn sketch(page: &mut Page, domain: &Domain, cut: &Cut, area: Rect) {
    let bounds = outline::extent(domain).with(cut.from).with(cut.to);
    let view = View::fit(bounds, area);
    page.path(
        outline::boundary_path(domain, &view),
        Pen::line(INK, 0.2).filled(AREA),
    );
    let (a, b) = (view.point(cut.from), view.point(cut.to));
    let length = a.distance(b);
    let pen = Pen::line(SHEAR, 0.45);
    // A cut through a thin wall is shorter than an arrow: it is lengthened on the page to be seen.
    let least = 5.0;
    let (a, b) = if length < least && length > 0.0 {
        let (middle, u) = (a.lerp(b, 0.5), (b - a) * (1.0 / length));
        (middle - u * (0.5 * least), middle + u * (0.5 * least))
    } else {
        (a, b)
    };
    arrow(page, a, b, 2.0, pen);
}
