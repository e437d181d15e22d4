//! Values written on iso-lines: where a line is long and straight enough and nothing else is covered.

use sectile_mesh::{Point, Vector};

use super::label::{Anchor, Label};
use super::levels::Levels;
use super::page::{Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::text::SMALL;

/// Distance of the points that a line is looked at in, mm.
const STEP: f64 = 0.4;
/// A line may leave the chord under its label by this, mm.
const BEND: f64 = 0.35;
/// What must be left of a line beside its label, mm.
const SHOWN: f64 = 1.6;
/// White before and behind the text, mm.
const PAD: f64 = 0.5;
/// White between a label and any other line, mm.
const AIR: f64 = 0.2;
/// Half the height of the white, mm: digits are about 0.72 of the type high.
const HALF: f64 = 0.42 * SMALL;
/// Half the height that is kept free for lettering with descenders, mm.
const LETTERING: f64 = 0.63 * SMALL;
/// A line gets another label for each such length, mm.
const AGAIN: f64 = 90.0;

/// A line of equal value on the page.
#[derive(Clone, Debug)]
pub struct Contour {
    /// Its value in steps of the levels.
    pub multiple: i64,
    /// Its points, mm; the first repeated at the end where it is closed.
    pub points: Vec<Point>,
}

/// A value and its place on a line.
#[derive(Clone, Debug, PartialEq)]
pub struct Written {
    /// The level in steps.
    pub multiple: i64,
    /// The middle of the text.
    pub middle: Point,
    /// Angle of the text, degrees anticlockwise, above −90 and at most 90.
    pub turn: f64,
    /// Length of the white under the text, mm.
    pub length: f64,
}

impl Written {
    fn along(&self) -> Vector {
        let d = Vector::at_angle(self.turn.to_radians());
        Vector::new(d.x, -d.y)
    }

    /// The corners of the white under the text.
    #[must_use]
    pub fn corners(&self) -> [Point; 4] {
        self.box_of(HALF)
    }

    fn box_of(&self, half: f64) -> [Point; 4] {
        let u = self.along() * (0.5 * self.length);
        let v = Vector::new(-u.y, u.x) * (2.0 * half / self.length);
        let m = self.middle;
        [m - u - v, m + u - v, m + u + v, m - u + v]
    }

    /// The upright rectangle about it and about all that lettering may cover.
    #[must_use]
    pub fn rect(&self) -> Rect {
        self.box_of(LETTERING)
            .into_iter()
            .fold(Rect::EMPTY, Rect::with)
    }

    fn covers(&self, p: Point) -> bool {
        let (u, d) = (self.along(), p - self.middle);
        let v = Vector::new(-u.y, u.x);
        d.dot(u).abs() <= 0.5 * self.length + AIR && d.dot(v).abs() <= HALF + AIR
    }

    fn on_material(&self, ground: &Ground) -> bool {
        let [a, b, c, d] = self.corners();
        ground.shape.is_none_or(|shape| {
            (0..=8).all(|i| {
                let t = f64::from(i) / 8.0;
                let (p, q) = (a.lerp(b, t), d.lerp(c, t));
                [p, p.lerp(q, 0.5), q].iter().all(|&x| shape.covers(x))
            })
        })
    }
}

/// Finds places on the lines, in their order, and takes them from the ground.
#[must_use]
pub fn places(contours: &[Contour], levels: &Levels, ground: &mut Ground) -> Vec<Written> {
    let lines: Vec<Vec<Point>> = contours.iter().map(|c| even(&c.points)).collect();
    let mut out = Vec::new();
    for (own, contour) in contours.iter().enumerate() {
        let text = levels.number(contour.multiple);
        let length = Label::small(&text).width() + 2.0 * PAD;
        let line = &lines[own];
        let span = (length / STEP).ceil() as usize;
        let whole = STEP * line.len().saturating_sub(1) as f64;
        if whole < length + SHOWN {
            continue;
        }
        let mut candidates: Vec<(f64, usize, Written)> = (0..line.len().saturating_sub(span))
            .filter_map(|start| {
                let (bend, turn, middle) = chord(&line[start..=start + span])?;
                let off = (start as f64 + 0.5 * span as f64) * STEP - 0.5 * whole;
                let cost = bend / BEND + 0.4 * turn.abs() / 90.0 + 0.6 * off.abs() / whole;
                let written = Written {
                    multiple: contour.multiple,
                    middle,
                    turn,
                    length,
                };
                Some((cost, start, written))
            })
            .collect();
        candidates.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)));
        let most = 1 + (whole / AGAIN) as usize;
        let mut taken: Vec<usize> = Vec::new();
        for (_, start, written) in candidates {
            if taken.len() == most {
                break;
            }
            let rect = written.rect();
            let close = |t: &usize| (t.abs_diff(start) as f64) * STEP < 0.5 * AGAIN;
            let free = !taken.iter().any(close)
                && ground.area.contains(&rect)
                && !ground.taken.iter().any(|t| t.overlaps(&rect))
                && !ground.leaders.iter().any(|(a, b)| rect.meets_line(*a, *b))
                && written.on_material(ground)
                && !lines.iter().enumerate().any(|(l, points)| {
                    points.iter().enumerate().any(|(i, &p)| {
                        // The stretch under the label and its next points are its own.
                        let mine = l == own && i + 2 >= start && i <= start + span + 2;
                        !mine && written.covers(p)
                    })
                });
            if free {
                ground.taken.push(rect.grown(AIR));
                taken.push(start);
                out.push(written);
            }
        }
    }
    out
}

/// Writes the values on the lines.
pub fn write(page: &mut Page, levels: &Levels, places: &[Written]) {
    for place in places {
        page.polygon(&place.corners(), Pen::fill("#ffffff"));
        let text = levels.number(place.multiple);
        let mut label = Label::small(&text).anchored(Anchor::Middle);
        label.turn = place.turn;
        let u = place.along();
        // The baseline lies half a digit's height below the line.
        let down = Vector::new(-u.y, u.x) * (0.36 * SMALL);
        page.text(place.middle + down, &label);
    }
}

/// The greatest distance of a stretch from its chord, its angle in degrees, and the label's middle.
/// `None`: too bent.
fn chord(points: &[Point]) -> Option<(f64, f64, Point)> {
    let (a, b) = (points[0], points[points.len() - 1]);
    let d = b - a;
    let length = d.length();
    if length < 0.9 * STEP * (points.len() - 1) as f64 {
        return None;
    }
    let n = Vector::new(-d.y, d.x) * (1.0 / length);
    let (mut low, mut high) = (0.0_f64, 0.0_f64);
    for p in points {
        let off = (*p - a).dot(n);
        (low, high) = (low.min(off), high.max(off));
    }
    let bend = high.max(-low);
    if bend > BEND {
        return None;
    }
    let mut turn = (-d.y).atan2(d.x).to_degrees();
    // To be read from below or from the right, also where rounding tips an upright line over.
    if turn > 90.0 + 1e-6 {
        turn -= 180.0;
    } else if turn <= -90.0 + 1e-6 {
        turn += 180.0;
    }
    Some((bend, turn, a.lerp(b, 0.5) + n * (0.5 * (low + high))))
}

/// Points at equal distances along a line, from its start.
fn even(points: &[Point]) -> Vec<Point> {
    let Some(&first) = points.first() else {
        return Vec::new();
    };
    let mut out = vec![first];
    let mut left = STEP;
    for pair in points.windows(2) {
        let length = pair[0].distance(pair[1]);
        let mut at = 0.0;
        while length - at >= left {
            at += left;
            out.push(pair[0].lerp(pair[1], at / length));
            left = STEP;
        }
        left -= length - at;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::bands::Cut;
    use crate::figure::samples;
    use crate::figure::surface::Surface;

    fn contours(surface: &Surface, values: &[f64], levels: &Levels) -> Vec<Contour> {
        (1..levels.bands())
            .flat_map(|i| {
                let lines = Cut::new(surface, values, levels.edge(i)).lines();
                lines.into_iter().map(move |points| Contour {
                    multiple: levels.first + i as i64,
                    points,
                })
            })
            .collect()
    }

    fn ground() -> Ground<'static> {
        Ground {
            area: Rect::new(0.0, 0.0, 200.0, 200.0),
            taken: Vec::new(),
            leaders: Vec::new(),
            shape: None,
        }
    }

    /// A field of 100 mm by 60 mm with its function.
    fn field(f: impl Fn(Point) -> f64) -> (Surface, Vec<f64>) {
        let (mut surface, _) = samples::wavy_rectangle();
        let extent = surface.points.iter().fold(Rect::EMPTY, |r, &p| r.with(p));
        for p in &mut surface.points {
            *p = Point::new(
                10.0 + 100.0 * (p.x - extent.x0) / extent.width(),
                10.0 + 60.0 * (p.y - extent.y0) / extent.height(),
            );
        }
        let values = surface.points.iter().map(|&p| f(p)).collect();
        (surface, values)
    }

    #[test]
    fn a_label_has_the_value_of_the_field_under_it_and_its_direction() {
        // A plane: every line is long and straight.
        let f = |p: Point| p.x + 0.5 * p.y - 60.0;
        let (surface, values) = field(f);
        let levels = Levels::between(-45.0, 85.0);
        let lines = contours(&surface, &values, &levels);
        let found = places(&lines, &levels, &mut ground());
        assert_eq!(found.len(), lines.len());
        for w in &found {
            assert!((f(w.middle) - w.multiple as f64 * levels.step).abs() < 1e-9);
            let expected = 2f64.atan().to_degrees();
            assert!((w.turn - expected).abs() < 1e-6, "{}", w.turn);
        }
    }

    #[test]
    fn labels_keep_clear_of_each_other_of_other_lines_and_of_what_is_taken() {
        let f = |p: Point| (p.x / 17.0).sin() + (p.y / 13.0).cos();
        let (surface, values) = field(f);
        let levels = Levels::between(-2.0, 2.0);
        let lines = contours(&surface, &values, &levels);
        let mut ground = ground();
        let before = Rect::new(40.0, 20.0, 70.0, 45.0);
        ground.taken.push(before);
        let found = places(&lines, &levels, &mut ground);
        assert!(found.len() > 16, "{}", found.len());
        for (i, a) in found.iter().enumerate() {
            assert!(!a.rect().overlaps(&before));
            assert!(found[..i].iter().all(|b| !a.rect().overlaps(&b.rect())));
            let others = lines.iter().filter(|l| l.multiple != a.multiple);
            assert!(others.flat_map(|l| even(&l.points)).all(|p| !a.covers(p)));
        }
    }

    #[test]
    fn short_and_bent_lines_stay_without_a_label() {
        let levels = Levels::between(0.0, 1.0);
        let short = vec![Point::new(10.0, 10.0), Point::new(14.0, 10.0)];
        let ring: Vec<Point> = (0..=200)
            .map(|i| Point::new(50.0, 50.0) + Vector::at_angle(f64::from(i) * 0.01 * 3.2) * 2.0)
            .collect();
        let long = vec![Point::new(10.0, 90.0), Point::new(60.0, 90.0)];
        let lines: Vec<Contour> = [short, ring, long]
            .into_iter()
            .map(|points| Contour {
                multiple: 1,
                points,
            })
            .collect();
        let found = places(&lines, &levels, &mut ground());
        assert_eq!(found.len(), 1);
        assert_eq!(found[0].middle.y, 90.0);
        assert_eq!(found[0].turn, 0.0);
    }
}
