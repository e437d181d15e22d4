//! Marks on a section: centroid, shear centre, flexure centre, extremes, axes, the scale bar.

use sectile_mesh::{Point, Vector};

use super::page::{INK, Label, Page, Pen, number};
use super::rect::Rect;

/// The colour of the shear centre.
pub const SHEAR: &str = "#a63a12";
/// The colour of the axes of the section file.
pub const AXES: &str = "#0b6b62";
/// The colour of the flexure centre.
pub const FLEXURE: &str = "#1f5f99";

/// A kind of mark. The three centres differ in shape, and can be told apart when they coincide.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mark {
    /// A quartered disc.
    Centroid,
    /// A diamond.
    ShearCentre,
    /// A saltire.
    FlexureCentre,
    /// A ring with a dot.
    Extreme,
}

impl Mark {
    /// Half of its size, mm.
    #[must_use]
    pub fn radius(self) -> f64 {
        match self {
            Self::Centroid => 1.3,
            Self::ShearCentre => 2.2,
            Self::FlexureCentre => 1.5,
            Self::Extreme => 1.1,
        }
    }

    /// Draws the white edge that keeps it legible on any ground. Where marks coincide, draw all edges
    /// before the first mark.
    pub fn draw_edge(self, page: &mut Page, at: Point) {
        let r = self.radius();
        let p = |dx: f64, dy: f64| Point::new(at.x + dx, at.y + dy);
        let pen = Pen::line("#ffffff", 0.9);
        match self {
            Self::Centroid => {}
            Self::ShearCentre => {
                page.polygon(&[p(r, 0.0), p(0.0, -r), p(-r, 0.0), p(0.0, r)], pen);
            }
            Self::FlexureCentre => {
                page.line(p(-r, -r), p(r, r), pen);
                page.line(p(-r, r), p(r, -r), pen);
            }
            Self::Extreme => page.circle(at, r, Pen::line("#ffffff", 0.7)),
        }
    }

    /// Draws it.
    pub fn draw(self, page: &mut Page, at: Point) {
        page.marks.push(Rect::about(at, self.radius()));
        let r = self.radius();
        let p = |dx: f64, dy: f64| Point::new(at.x + dx, at.y + dy);
        match self {
            Self::Centroid => {
                page.circle(at, r, Pen::line(INK, 0.2).filled("#ffffff"));
                let [x0, y0, x1, y1] = [at.x - r, at.y - r, at.x + r, at.y + r].map(number);
                let (x, y, r) = (number(at.x), number(at.y), number(r));
                let data = format!(
                    "M{x} {y}L{x} {y0}A{r} {r} 0 0 1 {x1} {y}Z M{x} {y}L{x} {y1}A{r} {r} 0 0 1 {x0} {y}Z"
                );
                page.path(data, Pen::fill(INK));
            }
            Self::ShearCentre => {
                let corners = [p(r, 0.0), p(0.0, -r), p(-r, 0.0), p(0.0, r)];
                page.polygon(&corners, Pen::line(SHEAR, 0.4));
            }
            Self::FlexureCentre => {
                page.line(p(-r, -r), p(r, r), Pen::line(FLEXURE, 0.4));
                page.line(p(-r, r), p(r, -r), Pen::line(FLEXURE, 0.4));
            }
            Self::Extreme => {
                page.circle(at, r, Pen::line(INK, 0.25));
                page.circle(at, 0.3, Pen::fill(INK));
            }
        }
    }
}

/// An arrow from `a` to `b` with a slender head of `head` mm at `b`.
pub fn arrow(page: &mut Page, a: Point, b: Point, head: f64, pen: Pen) {
    let d = b - a;
    let length = d.length();
    if length < 1e-9 {
        return;
    }
    let u = d * (1.0 / length);
    let foot = b - u * head;
    page.line(a, foot, pen);
    arrowhead(page, b, u, head, pen.stroke);
}

/// A filled arrowhead with its tip at `tip`, pointing along the unit vector `u`.
pub fn arrowhead(page: &mut Page, tip: Point, u: Vector, head: f64, colour: &str) {
    let foot = tip - u * head;
    let w = u.perpendicular() * (0.17 * head);
    page.polygon(&[tip, foot + w, foot - w], Pen::fill(colour));
}

/// Small arrows x and y at `at`, their letters only where nothing else is; returns what these cover.
pub fn axes(page: &mut Page, at: Point, taken: &[Rect]) -> Vec<Rect> {
    let (right, up) = (Point::new(at.x + 7.0, at.y), Point::new(at.x, at.y - 7.0));
    for tip in [right, up] {
        page.line(at, tip, Pen::line("#ffffff", 0.9));
    }
    for tip in [right, up] {
        arrow(page, at, tip, 1.8, Pen::line(AXES, 0.3));
    }
    page.circle(at, 0.55, Pen::line(AXES, 0.25).filled("#ffffff"));
    let mut covered = Vec::new();
    for (letter, place) in [
        ("x", Point::new(right.x + 0.7, at.y + 0.7)),
        ("y", Point::new(at.x - 0.7, up.y - 1.0)),
    ] {
        let mut label = Label::small(letter);
        label.colour = AXES;
        label.backed = true;
        if !taken.iter().any(|t| t.overlaps(&label.rect(place))) {
            covered.push(page.text(place, &label));
        }
    }
    covered
}

/// The round length, in units of the section, whose bar is nearest below `limit` mm.
#[must_use]
pub fn round_length(scale: f64, limit: f64) -> f64 {
    let most = limit / scale;
    let decade = 10f64.powi(most.log10().floor() as i32);
    [5.0, 2.0, 1.0]
        .iter()
        .map(|r| r * decade)
        .find(|&l| l <= most)
        .unwrap_or(decade)
}

/// A scale bar that starts at `at` (its baseline), two fields, with its length; returns its width.
pub fn scale_bar(page: &mut Page, at: Point, scale: f64, unit: &str) -> f64 {
    let length = round_length(scale, 32.0);
    let w = length * scale;
    let (y0, y1) = (at.y - 1.1, at.y);
    page.rect(
        Rect::new(at.x, y0, at.x + 0.5 * w, y1),
        Pen::line(INK, 0.15).filled(INK),
    );
    page.rect(
        Rect::new(at.x + 0.5 * w, y0, at.x + w, y1),
        Pen::line(INK, 0.15).filled("#ffffff"),
    );
    let text = format!("{} {unit}", crate::write::digits::short(length, 6));
    let label = Label::small(&text);
    page.text(Point::new(at.x + w + 1.2, at.y), &label);
    w + 1.2 + label.width()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bars_have_round_lengths_below_the_limit() {
        for (scale, expected) in [
            (1.0, 20.0),
            (0.5, 50.0),
            (0.32, 100.0),
            (64.0, 0.5),
            (0.017, 1000.0),
        ] {
            let length = round_length(scale, 32.0);
            assert!((length / expected - 1.0).abs() < 1e-12, "{scale} {length}");
            assert!(length * scale <= 32.0 + 1e-9);
        }
    }
}
