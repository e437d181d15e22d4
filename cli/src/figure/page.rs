//! The page: print size, header, drawing primitives in millimetres, small print, and the SVG text.
//!
//! One user unit of the SVG is one millimetre of print; y runs down.

use svg::Document;
use svg::node::Blob;
use svg::node::element::{Circle, Group, Path, Rectangle};

use sectile_mesh::Point;

pub use super::label::{Anchor, Label};
use super::rect::Rect;
use super::text::{self, FACES, LABEL, SMALL, TITLE};

/// White space around everything, mm.
pub const MARGIN: f64 = 4.0;
/// The colour of lines and lettering.
pub const INK: &str = "#1b1f24";
/// The colour of what should stand back.
pub const FAINT: &str = "#69717a";

/// How a shape is drawn.
#[derive(Clone, Copy, Debug)]
pub struct Pen<'a> {
    /// Line colour or `none`.
    pub stroke: &'a str,
    /// Line width, mm.
    pub width: f64,
    /// Fill colour or `none`.
    pub fill: &'a str,
    /// Dashes, mm; empty: solid.
    pub dashes: &'a str,
}

impl<'a> Pen<'a> {
    /// A solid line.
    #[must_use]
    pub const fn line(stroke: &'a str, width: f64) -> Self {
        Self {
            stroke,
            width,
            fill: "none",
            dashes: "",
        }
    }

    /// A fill without a line.
    #[must_use]
    pub const fn fill(fill: &'a str) -> Self {
        Self {
            stroke: "none",
            width: 0.0,
            fill,
            dashes: "",
        }
    }

    /// With dashes.
    #[must_use]
    pub const fn dashed(self, dashes: &'a str) -> Self {
        Self { dashes, ..self }
    }

    /// With a fill.
    #[must_use]
    pub const fn filled(self, fill: &'a str) -> Self {
        Self { fill, ..self }
    }
}

/// A page in the making.
pub struct Page {
    width: f64,
    /// The next free line below what has been drawn, mm.
    pub cursor: f64,
    nodes: Vec<Box<dyn svg::Node>>,
    /// What every text covers, for placing others and for tests.
    pub labels: Vec<Rect>,
    /// What every mark covers, which no text may.
    pub marks: Vec<Rect>,
}

impl Page {
    /// A page with its header: what the figure shows and of which section, and a line on units.
    #[must_use]
    pub fn new(width: f64, kind: &str, title: &str, subtitle: &str) -> Self {
        let mut page = Self {
            width,
            cursor: MARGIN,
            nodes: Vec::new(),
            labels: Vec::new(),
            marks: Vec::new(),
        };
        let limit = width - 2.0 * MARGIN;
        // A narrow page makes the heading smaller first, then shorter.
        let size = (TITLE * limit / text::width(kind, TITLE, true)).clamp(SMALL, TITLE);
        let kind = text::shorten(kind, size, true, limit);
        let mut label = Label::new(&kind);
        label.size = size;
        label.bold = true;
        label.rich = false;
        page.cursor += 0.78 * TITLE;
        page.text(Point::new(MARGIN, page.cursor), &label);
        let left = limit - label.width() - 3.0;
        // A title that has no room beside the figure's kind goes below it.
        let short = text::shorten(title, LABEL, false, left.max(0.0));
        let mut label = Label::new(&short);
        label.rich = false;
        label.colour = FAINT;
        if left > 25.0 && short == title {
            let at = Point::new(width - MARGIN, page.cursor);
            page.text(at, &label.anchored(Anchor::End));
            page.cursor += 0.26 * TITLE;
        } else {
            page.cursor += 0.26 * TITLE + 1.1 * LABEL;
            let short = text::shorten(title, LABEL, false, limit);
            label.text = &short;
            page.text(Point::new(MARGIN, page.cursor), &label);
            page.cursor += 0.26 * LABEL;
        }
        for line in text::wrap(subtitle, SMALL, limit) {
            page.cursor += 1.15 * SMALL;
            let mut label = Label::small(&line);
            label.colour = FAINT;
            page.text(Point::new(MARGIN, page.cursor), &label);
        }
        page.cursor += 0.26 * SMALL + 1.0;
        page.line(
            Point::new(MARGIN, page.cursor),
            Point::new(width - MARGIN, page.cursor),
            Pen::line(INK, 0.18),
        );
        page.cursor += 2.0;
        page
    }

    /// Width of the page, mm.
    #[must_use]
    pub fn width(&self) -> f64 {
        self.width
    }

    /// Draws path data given in mm.
    pub fn path(&mut self, data: String, pen: Pen) {
        self.push(stroked_path(data, pen, 1.0));
    }

    /// Draws path data given in whole multiples of `quantum` mm, which keeps long paths short.
    pub fn fine_path(&mut self, data: String, quantum: f64, pen: Pen) {
        let group = Group::new()
            .set("transform", format!("scale({})", number(quantum)))
            .add(stroked_path(data, pen, quantum));
        self.push(group);
    }

    /// Draws a straight line.
    pub fn line(&mut self, a: Point, b: Point, pen: Pen) {
        self.path(
            format!(
                "M{} {}L{} {}",
                number(a.x),
                number(a.y),
                number(b.x),
                number(b.y)
            ),
            pen,
        );
    }

    /// Draws a closed polygon.
    pub fn polygon(&mut self, points: &[Point], pen: Pen) {
        let mut data = String::new();
        for (i, p) in points.iter().enumerate() {
            let command = if i == 0 { 'M' } else { 'L' };
            data.push_str(&format!("{command}{} {}", number(p.x), number(p.y)));
        }
        data.push('Z');
        self.path(data, pen);
    }

    /// Draws a circle.
    pub fn circle(&mut self, centre: Point, radius: f64, pen: Pen) {
        let mut circle = Circle::new()
            .set("cx", number(centre.x))
            .set("cy", number(centre.y))
            .set("r", number(radius))
            .set("fill", pen.fill);
        if pen.stroke != "none" {
            circle = circle
                .set("stroke", pen.stroke)
                .set("stroke-width", number(pen.width));
        }
        if !pen.dashes.is_empty() {
            circle = circle.set("stroke-dasharray", pen.dashes);
        }
        self.push(circle);
    }

    /// Draws a rectangle.
    pub fn rect(&mut self, rect: Rect, pen: Pen) {
        self.polygon(
            &[
                Point::new(rect.x0, rect.y0),
                Point::new(rect.x1, rect.y0),
                Point::new(rect.x1, rect.y1),
                Point::new(rect.x0, rect.y1),
            ],
            pen,
        );
    }

    /// Writes a line of text and returns what it covers.
    pub fn text(&mut self, at: Point, label: &Label) -> Rect {
        let rect = label.rect(at);
        if label.text.is_empty() {
            return rect;
        }
        if label.backed {
            self.push(
                Rectangle::new()
                    .set("x", number(rect.x0 - 0.3))
                    .set("y", number(rect.y0 - 0.15))
                    .set("width", number(rect.width() + 0.6))
                    .set("height", number(rect.height() + 0.3))
                    .set("rx", "0.4")
                    .set("fill", "#ffffff")
                    .set("fill-opacity", "0.85"),
            );
        }
        let anchor = match label.anchor {
            Anchor::Start => "",
            Anchor::Middle => r#" text-anchor="middle""#,
            Anchor::End => r#" text-anchor="end""#,
        };
        let weight = if label.bold {
            r#" font-weight="bold""#
        } else {
            ""
        };
        let turn = if label.turn != 0.0 {
            format!(
                r#" transform="rotate({} {} {})""#,
                number(-label.turn),
                number(at.x),
                number(at.y)
            )
        } else {
            String::new()
        };
        // Written whole: the elements of the crate put line breaks, hence spaces, between runs.
        self.push(Blob::new(format!(
            r#"<text x="{}" y="{}" font-size="{:.2}" fill="{}"{anchor}{weight}{turn}>{}</text>"#,
            number(at.x),
            number(at.y),
            label.size,
            label.colour,
            text::markup(&label.runs(), label.size),
        )));
        self.labels.push(rect);
        rect
    }

    /// Ends the page below the cursor with footnotes and the caution, and returns the SVG.
    #[must_use]
    pub fn finish(mut self, footnotes: &[String], caution: &str) -> Finished {
        let limit = self.width - 2.0 * MARGIN;
        self.cursor += 1.0;
        for (text, colour) in footnotes
            .iter()
            .map(|t| (t.as_str(), INK))
            .chain([(caution, FAINT)])
        {
            for line in text::wrap(text, SMALL, limit) {
                self.cursor += 1.2 * SMALL;
                let mut label = Label::small(&line);
                label.colour = colour;
                label.rich = false;
                self.text(Point::new(MARGIN, self.cursor), &label);
            }
        }
        let height = (self.cursor + 0.26 * SMALL + MARGIN).ceil();
        let sheet = Rectangle::new()
            .set("width", number(self.width))
            .set("height", number(height))
            .set("fill", "#ffffff");
        let mut document = Document::new()
            .set("width", format!("{}mm", number(self.width)))
            .set("height", format!("{}mm", number(height)))
            .set(
                "viewBox",
                format!("0 0 {} {}", number(self.width), number(height)),
            )
            .set("font-family", FACES)
            .set("stroke-linejoin", "round")
            .add(sheet);
        for node in self.nodes {
            document = document.add(node);
        }
        Finished {
            svg: format!("{document}\n"),
            page: Rect::new(0.0, 0.0, self.width, height),
            labels: self.labels,
            marks: self.marks,
        }
    }

    fn push<T: Into<Box<dyn svg::Node>>>(&mut self, node: T) {
        self.nodes.push(node.into());
    }
}

/// A figure.
#[derive(Clone, Debug)]
pub struct Finished {
    /// The SVG text.
    pub svg: String,
    /// The page, mm.
    pub page: Rect,
    /// What every text on it covers.
    pub labels: Vec<Rect>,
    /// What every mark on it covers.
    pub marks: Vec<Rect>,
}

fn stroked_path(data: String, pen: Pen, quantum: f64) -> Path {
    let mut path = Path::new().set("d", data).set("fill", pen.fill);
    if pen.fill != "none" {
        path = path.set("fill-rule", "evenodd");
    }
    if pen.stroke != "none" {
        path = path
            .set("stroke", pen.stroke)
            .set("stroke-width", number(pen.width / quantum));
    }
    if !pen.dashes.is_empty() {
        let dashes: Vec<String> = pen
            .dashes
            .split_whitespace()
            .filter_map(|d| d.parse::<f64>().ok())
            .map(|d| number(d / quantum))
            .collect();
        path = path.set("stroke-dasharray", dashes.join(" "));
    }
    path
}

/// A coordinate to a micrometre of print, without trailing zeros or minus zero.
#[must_use]
pub fn number(x: f64) -> String {
    let text = format!("{x:.3}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" || text.is_empty() {
        "0".into()
    } else {
        text.into()
    }
}
