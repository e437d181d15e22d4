//! Where a piece is put: mirrored, then turned, then moved.

use super::piece::{Outline, Ring};
use super::side::Side;
use crate::point::Point;

/// The axis in which a piece is mirrored.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mirror {
    /// In the x axis: up becomes down, `y → −y`.
    X,
    /// In the y axis: left becomes right, `x → −x`.
    Y,
}

/// A placement about the piece's own origin.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Placement {
    /// Where the origin goes.
    pub at: Point,
    /// Degrees anticlockwise; multiples of 90 are exact.
    pub turn: f64,
    /// First of all.
    pub mirror: Option<Mirror>,
}

/// The placed outline.
#[must_use]
pub fn placed(outline: &Outline, placement: &Placement) -> Outline {
    let (sin, cos) = sine_cosine(placement.turn);
    let (mx, my) = match placement.mirror {
        None => (1.0, 1.0),
        Some(Mirror::X) => (1.0, -1.0),
        Some(Mirror::Y) => (-1.0, 1.0),
    };
    let point = |p: Point| {
        let (x, y) = (mx * p.x, my * p.y);
        Point::new(
            cos * x - sin * y + placement.at.x,
            sin * x + cos * y + placement.at.y,
        )
    };
    let side = |s: &Side| Side {
        from: point(s.from),
        to: point(s.to),
        arc: s.arc.map(|mut arc| {
            arc.circle.centre = point(arc.circle.centre);
            arc.sweep *= mx * my;
            arc
        }),
        corner: s.corner,
    };
    let ring = |r: &Ring| Ring {
        sides: r.sides.iter().map(side).collect(),
    };
    Outline {
        outer: ring(&outline.outer),
        holes: outline.holes.iter().map(ring).collect(),
    }
}

fn sine_cosine(degrees: f64) -> (f64, f64) {
    let turn = degrees.rem_euclid(360.0);
    if turn == 0.0 {
        (0.0, 1.0)
    } else if turn == 90.0 {
        (1.0, 0.0)
    } else if turn == 180.0 {
        (0.0, -1.0)
    } else if turn == 270.0 {
        (-1.0, 0.0)
    } else {
        turn.to_radians().sin_cos()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::outline::shape::bar;

    #[test]
    fn quarter_turns_are_exact_and_come_after_mirroring() {
        let outline = bar(Point::new(1.0, 2.0), 2.0, 4.0);
        let placement = Placement {
            at: Point::new(10.0, 0.0),
            turn: 90.0,
            mirror: Some(Mirror::Y),
        };
        let corner = placed(&outline, &placement).outer.sides[0].to;
        // (0, 0) → mirrored (0, 0) → turned (0, 0) → moved.
        assert_eq!(corner, Point::new(10.0, 0.0));
        let next = placed(&outline, &placement).outer.sides[1].to;
        // (2, 0) → (−2, 0) → (0, −2) → (10, −2).
        assert_eq!(next, Point::new(10.0, -2.0));
    }
}
