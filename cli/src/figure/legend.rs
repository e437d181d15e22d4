//! The scale of a field's colours: a row of boxes with the levels between them.

use sectile_mesh::Point;

use super::colour::Rgb;
use super::levels::Levels;
use super::page::{Anchor, INK, Label, Page, Pen};
use super::rect::Rect;
use super::text::{self, LABEL, SMALL};

/// Thickness of the scale, mm.
const THICK: f64 = 3.6;

/// What a scale shows.
#[derive(Clone, Debug)]
pub struct Scale<'a> {
    /// What the numbers are, with their unit, such as `|τ| in MPa`.
    pub quantity: &'a str,
    /// Levels.
    pub levels: Levels,
    /// One colour a band.
    pub colours: &'a [Rgb],
    /// Whether values above the last level are painted in the last colour.
    pub open_above: bool,
}

impl Scale<'_> {
    fn caption(&self) -> String {
        match self.levels.power() {
            0 => self.quantity.into(),
            power => format!(
                "{} (times 10{})",
                self.quantity,
                crate::write::digits::superscript(power)
            ),
        }
    }

    /// What the lines and the numbers on them are, and the step between them, for a drawing without bands.
    #[must_use]
    pub fn in_words(&self) -> String {
        format!(
            "Lines of equal {}; from line to line {}.",
            self.caption(),
            self.levels.number(1)
        )
    }

    fn band(&self, page: &mut Page, i: usize, rect: Rect, lying: bool) {
        let hex = self.colours[i].hex();
        let pen = Pen::line(INK, 0.1).filled(&hex);
        if self.open_above && i + 1 == self.levels.bands() {
            // A pointed end: the scale goes on.
            let m = rect.centre();
            let points = if lying {
                [
                    Point::new(rect.x0, rect.y0),
                    Point::new(rect.x1, rect.y0),
                    Point::new(rect.x1 + 0.6 * THICK, m.y),
                    Point::new(rect.x1, rect.y1),
                    Point::new(rect.x0, rect.y1),
                ]
            } else {
                [
                    Point::new(rect.x0, rect.y1),
                    Point::new(rect.x0, rect.y0),
                    Point::new(m.x, rect.y0 - 0.6 * THICK),
                    Point::new(rect.x1, rect.y0),
                    Point::new(rect.x1, rect.y1),
                ]
            };
            page.polygon(&points, pen);
        } else {
            page.rect(rect, pen);
        }
    }

    /// Draws the scale lying below the cursor, over the width of `span`, and moves the cursor.
    pub fn lying(&self, page: &mut Page, span: (f64, f64)) {
        let caption = self.caption();
        page.cursor += 0.78 * LABEL;
        page.text(Point::new(span.0, page.cursor), &Label::new(&caption));
        page.cursor += 0.26 * LABEL + 0.8;
        let n = self.levels.bands();
        let printed = self.levels.printed();
        let widest = printed
            .iter()
            .map(|t| text::width(t, SMALL, false))
            .fold(0.0, f64::max);
        // Room for half a number at both ends and for the point.
        let (start, end) = (
            span.0 + 0.5 * widest,
            span.1 - 0.5 * widest.max(1.2 * THICK),
        );
        let w = (end - start) / n as f64;
        let every = ((widest + 1.5) / w).ceil().max(1.0) as usize;
        let (y0, y1) = (page.cursor, page.cursor + THICK);
        for i in 0..n {
            let x0 = start + w * i as f64;
            self.band(page, i, Rect::new(x0, y0, x0 + w, y1), true);
        }
        // Numbers are left out evenly, counted from zero where zero is on the scale.
        for (i, number) in printed.iter().enumerate() {
            if (self.levels.first + i as i64).rem_euclid(every as i64) == 0 {
                let at = Point::new(start + w * i as f64, y1 + 0.5 + 0.9 * SMALL);
                page.text(at, &Label::small(number).anchored(Anchor::Middle));
            }
        }
        page.cursor = y1 + 0.5 + 1.2 * SMALL;
    }

    /// Draws the scale standing in `area`, low at the bottom.
    pub fn standing(&self, page: &mut Page, area: Rect) {
        let mut y = area.y0;
        for line in text::wrap(&self.caption(), LABEL, area.width()) {
            y += 0.78 * LABEL;
            page.text(Point::new(area.x0, y), &Label::new(&line));
            y += 0.4 * LABEL;
        }
        y += 1.0 + if self.open_above { 0.6 * THICK } else { 0.0 } + 0.4 * SMALL;
        let n = self.levels.bands();
        let h = ((area.y1 - 0.5 * SMALL - y) / n as f64).min(7.0);
        let every = ((1.2 * SMALL) / h).ceil().max(1.0) as usize;
        for (i, number) in self.levels.printed().iter().enumerate() {
            let low = y + h * (n - i) as f64;
            if i < n {
                let rect = Rect::new(area.x0, low - h, area.x0 + THICK, low);
                self.band(page, i, rect, false);
            }
            if (self.levels.first + i as i64).rem_euclid(every as i64) == 0 {
                let at = Point::new(area.x0 + THICK + 1.2, low + 0.36 * SMALL);
                page.text(at, &Label::small(number));
            }
        }
    }
}
