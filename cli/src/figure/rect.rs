//! Upright rectangles, in the section plane or on the page.

use sectile_mesh::Point;

/// `x0 ≤ x ≤ x1`, `y0 ≤ y ≤ y1`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rect {
    /// Smallest x.
    pub x0: f64,
    /// Smallest y.
    pub y0: f64,
    /// Largest x.
    pub x1: f64,
    /// Largest y.
    pub y1: f64,
}

impl Rect {
    /// The rectangle that contains nothing and grows from there.
    pub const EMPTY: Self = Self {
        x0: f64::INFINITY,
        y0: f64::INFINITY,
        x1: f64::NEG_INFINITY,
        y1: f64::NEG_INFINITY,
    };

    /// From two corners with `x0 ≤ x1`, `y0 ≤ y1`.
    #[must_use]
    pub const fn new(x0: f64, y0: f64, x1: f64, y1: f64) -> Self {
        Self { x0, y0, x1, y1 }
    }

    /// A square about a point.
    #[must_use]
    pub fn about(p: Point, half: f64) -> Self {
        Self::new(p.x - half, p.y - half, p.x + half, p.y + half)
    }

    /// Grown so that it contains `p`.
    #[must_use]
    pub fn with(self, p: Point) -> Self {
        Self::new(
            self.x0.min(p.x),
            self.y0.min(p.y),
            self.x1.max(p.x),
            self.y1.max(p.y),
        )
    }

    /// The smallest that contains both.
    #[must_use]
    pub fn union(self, other: Self) -> Self {
        self.with(Point::new(other.x0, other.y0))
            .with(Point::new(other.x1, other.y1))
    }

    /// Moved out by `margin` on every side.
    #[must_use]
    pub fn grown(self, margin: f64) -> Self {
        Self::new(
            self.x0 - margin,
            self.y0 - margin,
            self.x1 + margin,
            self.y1 + margin,
        )
    }

    /// Extent in x.
    #[must_use]
    pub fn width(&self) -> f64 {
        self.x1 - self.x0
    }

    /// Extent in y.
    #[must_use]
    pub fn height(&self) -> f64 {
        self.y1 - self.y0
    }

    /// Its middle.
    #[must_use]
    pub fn centre(&self) -> Point {
        Point::new(0.5 * (self.x0 + self.x1), 0.5 * (self.y0 + self.y1))
    }

    /// Whether the two share more than an edge.
    #[must_use]
    pub fn overlaps(&self, other: &Self) -> bool {
        self.x0 < other.x1 && other.x0 < self.x1 && self.y0 < other.y1 && other.y0 < self.y1
    }

    /// Whether `other` lies inside.
    #[must_use]
    pub fn contains(&self, other: &Self) -> bool {
        self.x0 <= other.x0 && self.y0 <= other.y0 && other.x1 <= self.x1 && other.y1 <= self.y1
    }

    /// Whether the straight line from `a` to `b` enters the interior.
    #[must_use]
    pub fn meets_line(&self, a: Point, b: Point) -> bool {
        let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
        for (start, delta, low, high) in [
            (a.x, b.x - a.x, self.x0, self.x1),
            (a.y, b.y - a.y, self.y0, self.y1),
        ] {
            if delta == 0.0 {
                if start <= low || start >= high {
                    return false;
                }
            } else {
                let (t, u) = ((low - start) / delta, (high - start) / delta);
                enter = enter.max(t.min(u));
                leave = leave.min(t.max(u));
            }
        }
        enter < leave
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_through_beside_and_short_of_a_rectangle() {
        let r = Rect::new(0.0, 0.0, 2.0, 1.0);
        let p = Point::new;
        assert!(r.meets_line(p(-1.0, 0.5), p(3.0, 0.5)));
        assert!(r.meets_line(p(1.0, 0.5), p(5.0, 5.0)));
        assert!(!r.meets_line(p(-1.0, 0.5), p(-0.1, 0.5)));
        assert!(!r.meets_line(p(-1.0, 1.0), p(3.0, 1.0)));
        assert!(!r.meets_line(p(2.5, -1.0), p(2.5, 2.0)));
        assert!(!r.meets_line(p(-1.0, 0.9), p(0.5, 2.4)));
    }

    #[test]
    fn union_and_overlap() {
        let a = Rect::new(0.0, 0.0, 1.0, 1.0);
        let b = Rect::new(1.0, 0.0, 2.0, 1.0);
        assert!(!a.overlaps(&b));
        assert!(a.overlaps(&b.grown(0.1)));
        assert_eq!(a.union(b), Rect::new(0.0, 0.0, 2.0, 1.0));
        assert!(Rect::EMPTY.union(a).contains(&a));
    }
}
