//! A line of lettering and what it covers.

use sectile_mesh::Point;

use super::page::INK;
use super::rect::Rect;
use super::text::{self, LABEL, SMALL};

/// Where a text hangs on its point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Anchor {
    /// It starts there.
    Start,
    /// Its middle is there.
    Middle,
    /// It ends there.
    End,
}

/// One line of lettering; the point is on its baseline.
#[derive(Clone, Debug)]
pub struct Label<'a> {
    /// The text; `x_s` sets an s below the line where `rich`.
    pub text: &'a str,
    /// Where it hangs.
    pub anchor: Anchor,
    /// Height of the type, mm.
    pub size: f64,
    /// Heavier.
    pub bold: bool,
    /// Its colour.
    pub colour: &'a str,
    /// Whether underscores set subscripts.
    pub rich: bool,
    /// Turned about its point, degrees anticlockwise.
    pub turn: f64,
    /// On white, so that it can be read on any ground.
    pub backed: bool,
}

impl<'a> Label<'a> {
    /// Plain lettering of the common size.
    #[must_use]
    pub fn new(text: &'a str) -> Self {
        Self {
            text,
            anchor: Anchor::Start,
            size: LABEL,
            bold: false,
            colour: INK,
            rich: true,
            turn: 0.0,
            backed: false,
        }
    }

    /// Small lettering.
    #[must_use]
    pub fn small(text: &'a str) -> Self {
        Self {
            size: SMALL,
            ..Self::new(text)
        }
    }

    /// Hung otherwise.
    #[must_use]
    pub fn anchored(self, anchor: Anchor) -> Self {
        Self { anchor, ..self }
    }

    /// Its runs, on the line and below it.
    #[must_use]
    pub fn runs(&self) -> Vec<text::Run> {
        if self.rich {
            text::runs(self.text)
        } else {
            vec![text::Run {
                text: self.text.into(),
                sub: false,
            }]
        }
    }

    /// Its width, mm.
    #[must_use]
    pub fn width(&self) -> f64 {
        text::runs_width(&self.runs(), self.size, self.bold)
    }

    /// What it covers when hung at `at`.
    #[must_use]
    pub fn rect(&self, at: Point) -> Rect {
        let w = self.width();
        let start = match self.anchor {
            Anchor::Start => 0.0,
            Anchor::Middle => -0.5 * w,
            Anchor::End => -w,
        };
        let (up, down) = (0.78 * self.size, 0.26 * self.size);
        let flat = Rect::new(start, -up, start + w, down);
        let (s, c) = self.turn.to_radians().sin_cos();
        // The page's y runs down.
        let turned = |x: f64, y: f64| Point::new(at.x + x * c + y * s, at.y - x * s + y * c);
        [flat.x0, flat.x1]
            .into_iter()
            .flat_map(|x| [turned(x, flat.y0), turned(x, flat.y1)])
            .fold(Rect::EMPTY, Rect::with)
    }
}
