//! Where the section lies on the page: one scale, x to the right, y up on paper.

use sectile_mesh::Point;

use super::rect::Rect;

/// The map from section axes to millimetres of the page.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct View {
    /// Millimetres of print in one unit of length of the section.
    pub scale: f64,
    /// The section's origin on the page.
    origin: Point,
}

impl View {
    /// `bounds` (section axes) as large as fits into `area` (page), in its middle from left to right
    /// and at its upper edge.
    #[must_use]
    pub fn fit(bounds: Rect, area: Rect) -> Self {
        let extent = bounds.width().max(bounds.height());
        let least = if extent > 0.0 { 1e-9 * extent } else { 1.0 };
        let scale = (area.width() / bounds.width().max(least))
            .min(area.height() / bounds.height().max(least));
        let middle = bounds.centre();
        Self {
            scale,
            origin: Point::new(
                area.centre().x - scale * middle.x,
                area.y0 + scale * bounds.y1,
            ),
        }
    }

    /// A point of the section on the page.
    #[must_use]
    pub fn point(&self, p: Point) -> Point {
        Point::new(
            self.origin.x + self.scale * p.x,
            self.origin.y - self.scale * p.y,
        )
    }

    /// A rectangle of the section on the page.
    #[must_use]
    pub fn rect(&self, r: Rect) -> Rect {
        Rect::EMPTY
            .with(self.point(Point::new(r.x0, r.y0)))
            .with(self.point(Point::new(r.x1, r.y1)))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fits_and_turns_y_over() {
        let area = Rect::new(10.0, 20.0, 110.0, 70.0);
        let view = View::fit(Rect::new(-1.0, 0.0, 3.0, 4.0), area);
        assert_eq!(view.scale, 12.5);
        assert_eq!(view.point(Point::new(1.0, 4.0)), Point::new(60.0, 20.0));
        assert_eq!(view.point(Point::new(1.0, 0.0)), Point::new(60.0, 70.0));
        let flat = View::fit(Rect::new(0.0, 0.0, 1.0, 0.0), area);
        assert!(flat.scale.is_finite());
    }
}
