//! Charts of figures against one that varies: a plot for each figure, below each other, and in each a
//! curve for each value of a second one that varies. Black on white: curves differ in dashes and in
//! their names beside their ends.

use sectile_mesh::Point;

use super::cut::{distances, polyline};
use super::levels::Levels;
use super::page::{Anchor, FAINT, Finished, INK, Label, MARGIN, Page, Pen};
use super::rect::Rect;
use super::text::{self, LABEL, SMALL};
use crate::write::{CAUTION, digits};

/// Height of a plot that is alone, and of one of several, mm.
const HEIGHTS: [f64; 2] = [62.0, 44.0];
/// Dashes of the curves, in turn.
const DASHES: [&str; 5] = ["", "2.4 1", "0.7 0.8", "4 0.9 0.7 0.9", "1.3 0.7"];
/// Curves with more points than this are drawn without marks.
const MOST_MARKS: usize = 40;

/// Words below the plots have at least this room, mm.
const LEAST_WORD: f64 = 6.0;

/// What varies along the plots.
#[derive(Clone, Debug, PartialEq)]
pub enum Axis {
    /// Numbers in rising order.
    Numbers(Vec<f64>),
    /// Words, at equal distances.
    Words(Vec<String>),
}

/// A figure at one place of the axis, with its enclosure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sample {
    /// Its value.
    pub value: f64,
    /// The lower end.
    pub low: f64,
    /// The upper end.
    pub high: f64,
}

/// A figure along the axis.
#[derive(Clone, Debug, PartialEq)]
pub struct Curve {
    /// What it is told by; empty where there is one only.
    pub name: String,
    /// One entry a place of the axis; `None` where there is no answer.
    pub samples: Vec<Option<Sample>>,
}

/// The plot of one figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Plot {
    /// What it is, with its unit.
    pub caption: String,
    /// Its curves.
    pub curves: Vec<Curve>,
}

/// Draws the plots below each other on a page.
#[must_use]
pub fn draw(
    kind: &str,
    title: &str,
    subtitle: &str,
    (caption, axis): (&str, &Axis),
    plots: &[Plot],
    width: f64,
) -> Finished {
    let mut page = Page::new(width, kind, title, subtitle);
    let scales: Vec<Levels> = plots.iter().map(levels).collect();
    let printed = scales.iter().flat_map(Levels::printed);
    let widest = |texts: &mut dyn Iterator<Item = String>| {
        texts
            .map(|t| text::width(&t, SMALL, false))
            .fold(0.0, f64::max)
    };
    let left = MARGIN + widest(&mut printed.into_iter()) + 1.8;
    let names = plots.iter().flat_map(|plot| &plot.curves);
    let beside = widest(&mut names.map(|curve| curve.name.clone())).min(0.35 * width);
    let right = width - MARGIN - if beside > 0.0 { beside + 5.0 } else { 3.0 };
    let height = HEIGHTS[usize::from(plots.len() > 1)];
    for (plot, levels) in plots.iter().zip(&scales) {
        page.cursor += 0.78 * LABEL;
        let caption = match levels.power() {
            0 => plot.caption.clone(),
            power => format!("{} (times 10{})", plot.caption, digits::superscript(power)),
        };
        page.text(Point::new(MARGIN, page.cursor), &Label::new(&caption));
        page.cursor += 0.26 * LABEL + 0.5 * SMALL;
        let frame = Rect::new(left, page.cursor, right, page.cursor + height);
        panel(&mut page, frame, axis, plot, levels);
        page.cursor = frame.y1 + 1.0 + 1.2 * SMALL + 2.5;
    }
    page.cursor += 0.4 * SMALL;
    let short = text::shorten(caption, SMALL, false, right - MARGIN);
    let mut label = Label::small(&short).anchored(Anchor::End);
    label.rich = false;
    page.text(Point::new(right, page.cursor), &label);
    page.cursor += 0.5 * SMALL;
    let mut notes = Vec::new();
    let all = || {
        plots
            .iter()
            .flat_map(|p| &p.curves)
            .flat_map(|c| &c.samples)
    };
    if all().any(Option::is_none) {
        notes.push(
            "Curves are broken where a section failed or a figure does not apply.".to_owned(),
        );
    }
    if all().flatten().any(|s| s.low < s.value || s.high > s.value) {
        notes.push("Upright strokes are bounds, where they are wide enough to be seen.".to_owned());
    }
    page.finish(&notes, CAUTION)
}

/// Round levels about all that a plot shows; a figure that stays the same lies in the middle.
fn levels(plot: &Plot) -> Levels {
    let all = || plot.curves.iter().flat_map(|c| &c.samples).flatten();
    let low = all().map(|s| s.low).fold(f64::INFINITY, f64::min);
    let high = all().map(|s| s.high).fold(f64::NEG_INFINITY, f64::max);
    if !(low.is_finite() && high.is_finite()) {
        return Levels::between(0.0, 1.0);
    }
    let size = low.abs().max(high.abs());
    if high - low > 1e-6 * size {
        Levels::between(low, high)
    } else {
        let spread = if size > 0.0 { 0.1 * size } else { 1.0 };
        Levels::between(low - spread, high + spread)
    }
}

/// One plot in its frame, with the numbers of its scales.
fn panel(page: &mut Page, frame: Rect, axis: &Axis, plot: &Plot, levels: &Levels) {
    let step = frame.height() / levels.bands() as f64;
    for (i, text) in levels.printed().iter().enumerate() {
        let y = frame.y1 - step * i as f64;
        let ends = (Point::new(frame.x0, y), Point::new(frame.x1, y));
        page.line(ends.0, ends.1, Pen::line(FAINT, 0.06));
        let at = Point::new(frame.x0 - 1.5, y + 0.36 * SMALL);
        page.text(at, &Label::small(text).anchored(Anchor::End));
    }
    let places: Vec<f64> = match axis {
        Axis::Numbers(numbers) => {
            let (x0, x1) = ends(numbers);
            distances(page, frame, x0, x1);
            let across = frame.width() / (x1 - x0);
            numbers
                .iter()
                .map(|x| frame.x0 + across * (x - x0))
                .collect()
        }
        Axis::Words(words) => {
            let share = frame.width() / words.len().max(1) as f64;
            let places: Vec<f64> = (0..words.len())
                .map(|i| frame.x0 + share * (i as f64 + 0.5))
                .collect();
            // Where there is no room for all, evenly fewer.
            let every = (LEAST_WORD / share).ceil().max(1.0);
            for (word, x) in words.iter().zip(&places).step_by(every as usize) {
                let short = text::shorten(word, SMALL, false, share * every - 1.0);
                let mut label = Label::small(&short).anchored(Anchor::Middle);
                label.rich = false;
                page.text(Point::new(*x, frame.y1 + 1.3 + 0.85 * SMALL), &label);
            }
            places
        }
    };
    let bottom = Point::new(frame.x0, frame.y1);
    page.line(bottom, Point::new(frame.x1, frame.y1), Pen::line(INK, 0.2));
    page.line(bottom, Point::new(frame.x0, frame.y0), Pen::line(INK, 0.2));

    let (low, high) = (levels.edge(0), levels.edge(levels.bands()));
    let height = |value: f64| frame.y1 - frame.height() * (value - low) / (high - low);
    let mut names: Vec<(Point, &str)> = Vec::new();
    for (k, curve) in plot.curves.iter().enumerate() {
        let mut runs: Vec<Vec<Point>> = vec![Vec::new()];
        for (x, sample) in places.iter().zip(&curve.samples) {
            match sample {
                None => runs.push(Vec::new()),
                Some(sample) => {
                    let ends = (height(sample.low), height(sample.high));
                    if ends.0 - ends.1 > 0.4 {
                        let (a, b) = (Point::new(*x, ends.0), Point::new(*x, ends.1));
                        page.line(a, b, Pen::line(INK, 0.15));
                    }
                    if let Some(run) = runs.last_mut() {
                        run.push(Point::new(*x, height(sample.value)));
                    }
                }
            }
        }
        for run in &runs {
            if run.len() > 1 {
                let pen = Pen::line(INK, 0.35).dashed(DASHES[k % DASHES.len()]);
                page.path(polyline(run), pen);
            }
            // A point between two gaps shows by its mark alone.
            if run.len() == 1 || places.len() <= MOST_MARKS {
                let fill = if k % 2 == 0 { INK } else { "#ffffff" };
                for &p in run {
                    page.circle(p, 0.65, Pen::line(INK, 0.2).filled(fill));
                }
            }
        }
        let end = runs.iter().rev().find_map(|run| run.last());
        if let Some(end) = end.filter(|_| !curve.name.is_empty()) {
            names.push((*end, &curve.name));
        }
    }
    write_names(page, frame, names);
}

/// The ends of the axis, apart even where there is one number only.
fn ends(numbers: &[f64]) -> (f64, f64) {
    let x0 = numbers.iter().copied().fold(f64::INFINITY, f64::min);
    let x1 = numbers.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    if x1 > x0 {
        (x0, x1)
    } else if x0.is_finite() {
        let spread = if x0 == 0.0 { 1.0 } else { 0.1 * x0.abs() };
        (x0 - spread, x0 + spread)
    } else {
        (0.0, 1.0)
    }
}

/// The names of the curves to the right of the frame, in the order of their ends, moved apart; where
/// there is no room for all, evenly fewer.
fn write_names(page: &mut Page, frame: Rect, mut names: Vec<(Point, &str)>) {
    let line = 1.25 * SMALL;
    names.sort_by(|a, b| a.0.y.total_cmp(&b.0.y));
    let room = (frame.height() / line).floor().max(1.0) as usize;
    let every = names.len().div_ceil(room).max(1);
    let names: Vec<(Point, &str)> = names.into_iter().step_by(every).collect();
    let mut heights: Vec<f64> = names.iter().map(|(end, _)| end.y).collect();
    for i in 1..heights.len() {
        heights[i] = heights[i].max(heights[i - 1] + line);
    }
    if let Some(last) = heights.last_mut() {
        *last = last.min(frame.y1);
    }
    for i in (1..heights.len()).rev() {
        heights[i - 1] = heights[i - 1].min(heights[i] - line);
    }
    let x = frame.x1 + 3.0;
    let limit = page.width() - MARGIN - x - 0.5;
    for ((end, name), y) in names.into_iter().zip(heights) {
        let short = text::shorten(name, SMALL, false, limit);
        let mut label = Label::small(&short);
        label.rich = false;
        let pen = Pen::line(FAINT, 0.1);
        let knee = Point::new(x - 0.5, y);
        page.line(Point::new(end.x + 0.8, end.y), knee, pen);
        page.text(Point::new(x, y + 0.36 * SMALL), &label);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn plot(curves: usize, shape: impl Fn(f64) -> f64) -> Plot {
        let sample = |k: usize, i: usize| {
            let value = shape(i as f64 + 0.1 * k as f64);
            (i != 3).then_some(Sample {
                value,
                low: value,
                high: value + 0.01 * value.abs(),
            })
        };
        Plot {
            caption: "J in mm⁴".into(),
            curves: (0..curves)
                .map(|k| Curve {
                    name: if curves > 1 {
                        format!("{k} mm, a name of some length")
                    } else {
                        String::new()
                    },
                    samples: (0..8).map(|i| sample(k, i)).collect(),
                })
                .collect(),
        }
    }

    #[test]
    fn nothing_leaves_the_page_and_no_lettering_meets_another() {
        let numbers = Axis::Numbers((0..8).map(|i| 2.0 + 1.7 * f64::from(i)).collect());
        let words = Axis::Words((0..8).map(|i| format!("steel {i}")).collect());
        for axis in [&numbers, &words] {
            for width in [60.0, 160.0] {
                for curves in [1, 3, 60] {
                    let plots = [
                        plot(curves, |x| x.powi(3)),
                        plot(curves, |_| 0.0),
                        plot(curves, |_| -5.0),
                    ];
                    let caption = ("piece.web.plate.t in mm", axis);
                    let figure = draw("Sweep", "A title", "Against t.", caption, &plots, width);
                    for label in &figure.labels {
                        assert!(
                            figure.page.contains(label),
                            "{width} {curves}: {label:?} of {:?}",
                            figure.page
                        );
                    }
                    for (i, a) in figure.labels.iter().enumerate() {
                        for b in &figure.labels[i + 1..] {
                            assert!(!a.grown(-0.3).overlaps(b), "{width} {curves}: {a:?} {b:?}");
                        }
                    }
                }
            }
        }
    }

    #[test]
    fn a_figure_that_stays_the_same_lies_inside_its_scale() {
        for value in [0.0, 5.0, -5.0, 1e-9] {
            let levels = levels(&plot(1, |_| value));
            let (low, high) = (levels.edge(0), levels.edge(levels.bands()));
            assert!(low <= value && value < high, "{low} {value} {high}");
        }
    }
}
