//! Dimension lines: the overall width and height of the section.

use sectile_mesh::Point;

use super::marks::arrowhead;
use super::page::{Anchor, FAINT, INK, Label, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use crate::write::digits;

/// Room for a dimension line with its text, mm.
pub const DIMENSION_ROOM: f64 = 8.0;
/// From the outline to a dimension line, mm.
const DIMENSION_AT: f64 = 6.8;

/// On which sides the dimension lines stand.
#[derive(Clone, Copy)]
pub struct Turned {
    /// The height is given on the right instead of on the left.
    pub height_right: bool,
    /// The width is given above instead of below.
    pub width_above: bool,
}

impl Turned {
    /// Room around the drawing, mm, as left, top, right, bottom.
    #[must_use]
    pub fn room(self) -> Rect {
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

/// Draws both; `extent` in section axes, `solid` the same on the page.
pub fn dimensions(page: &mut Page, ground: &mut Ground, extent: Rect, solid: Rect, turned: Turned) {
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
    ground.taken.push(dimension(page, a, b, &text));
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
    ground.taken.push(dimension(page, a, b, &text));
    ground.leaders.push((a, b));
}

/// A dimension line from `a` to `b`, level or upright, with its text in the middle; returns what the
/// text covers.
fn dimension(page: &mut Page, a: Point, b: Point, text: &str) -> Rect {
    let pen = Pen::line(INK, 0.15);
    let d = b - a;
    let length = d.length();
    let u = d * (1.0 / length.max(1e-9));
    let head = 1.7;
    if length > 3.0 * head {
        page.line(a + u * (0.6 * head), b - u * (0.6 * head), pen);
        arrowhead(page, a, -u, head, INK);
        arrowhead(page, b, u, head, INK);
    } else {
        // Too short for two heads inside: they point inwards from outside.
        page.line(a - u * (2.0 * head), b + u * (2.0 * head), pen);
        arrowhead(page, a, u, head, INK);
        arrowhead(page, b, -u, head, INK);
    }
    let upright = d.y.abs() > d.x.abs();
    let mut label = Label::new(text).anchored(Anchor::Middle);
    label.turn = if upright { 90.0 } else { 0.0 };
    let m = a.lerp(b, 0.5);
    let gap = 0.9;
    let at = if upright {
        Point::new(m.x - gap, m.y)
    } else {
        Point::new(m.x, m.y - gap)
    };
    page.text(at, &label)
}
