//! Loose lines and arcs that lie on one another become one.

use std::f64::consts::{FRAC_PI_2, TAU};

use sectile_mesh::Point;
use sectile_mesh::outline::side::{Arc, Side};

use super::loops::Tolerances;

/// Directions that differ by less, radians, may be one line's.
const PARALLEL: f64 = 1e-6;

/// The sides without overlaps: those that share more than an end become one that covers them, and how
/// many were left out for it. The others are kept as they are, in their order.
#[must_use]
pub fn united(sides: Vec<Side>, tolerances: &Tolerances) -> (Vec<Side>, usize) {
    let before = sides.len();
    let mut kept: Vec<(usize, Side)> = Vec::with_capacity(before);
    let (arcs, lines): (Vec<_>, Vec<_>) = sides
        .into_iter()
        .enumerate()
        .partition(|(_, side)| side.arc.is_some());
    unite_lines(lines, tolerances, &mut kept);
    unite_arcs(arcs, tolerances, &mut kept);
    kept.sort_by_key(|(index, _)| *index);
    let removed = before - kept.len();
    (kept.into_iter().map(|(_, side)| side).collect(), removed)
}

/// Runs of items whose keys follow one another within `within`, each run in the order of the keys.
fn runs<T: Clone>(items: &[T], key: impl Fn(&T) -> f64, within: f64) -> Vec<Vec<T>> {
    let mut sorted = items.to_vec();
    sorted.sort_by(|a, b| key(a).total_cmp(&key(b)));
    let mut runs: Vec<Vec<T>> = Vec::new();
    let mut last = f64::NEG_INFINITY;
    for item in sorted {
        let here = key(&item);
        if here - last <= within
            && let Some(run) = runs.last_mut()
        {
            run.push(item);
        } else {
            runs.push(vec![item]);
        }
        last = here;
    }
    runs
}

/// A line with its direction in (−90°, 90°], its offset from the middle of the drawing and where along
/// that direction it starts and ends.
#[derive(Clone, Debug)]
struct Line {
    index: usize,
    side: Side,
    angle: f64,
    offset: f64,
    start: f64,
    end: f64,
}

fn unite_lines(lines: Vec<(usize, Side)>, tolerances: &Tolerances, kept: &mut Vec<(usize, Side)>) {
    let Some(origin) = lines.first().map(|(_, side)| side.from) else {
        return;
    };
    let same = tolerances.same();
    let lines: Vec<Line> = lines
        .into_iter()
        .map(|(index, side)| {
            let mut d = side.to - side.from;
            if d.x < 0.0 || (d.x == 0.0 && d.y < 0.0) {
                d = -d;
            }
            let mut angle = d.angle();
            if angle <= -FRAC_PI_2 + PARALLEL {
                angle += std::f64::consts::PI;
                d = -d;
            }
            let d = d * (1.0 / d.length());
            let (a, b) = ((side.from - origin).dot(d), (side.to - origin).dot(d));
            Line {
                index,
                side,
                angle,
                offset: d.cross(side.from - origin),
                start: a.min(b),
                end: a.max(b),
            }
        })
        .collect();
    let beside = same + 2.0 * PARALLEL * tolerances.size;
    for parallel in runs(&lines, |l| l.angle, PARALLEL) {
        for mut run in runs(&parallel, |l| l.offset, beside) {
            run.sort_by(|a, b| a.start.total_cmp(&b.start).then(a.index.cmp(&b.index)));
            let mut rest = run.into_iter();
            let Some(mut covering) = rest.next() else {
                continue;
            };
            for line in rest {
                if line.start < covering.end - same && in_line(&covering.side, &line.side, same) {
                    covering = covering.with(&line);
                } else if line.end > covering.end {
                    kept.push((covering.index, covering.side));
                    covering = line;
                } else {
                    kept.push((line.index, line.side));
                }
            }
            kept.push((covering.index, covering.side));
        }
    }
}

impl Line {
    /// The line that covers both; the side keeps the sense of the first.
    fn with(self, other: &Self) -> Self {
        let index = self.index.min(other.index);
        if other.end <= self.end {
            return Self { index, ..self };
        }
        let forward =
            |l: &Self| (l.side.to - l.side.from).dot(sectile_mesh::Vector::at_angle(l.angle)) > 0.0;
        let far = if forward(other) {
            other.side.to
        } else {
            other.side.from
        };
        let mut side = self.side;
        if forward(&self) {
            side.to = far;
        } else {
            side.from = far;
        }
        Self {
            index,
            side,
            end: other.end,
            ..self
        }
    }
}

/// Whether both ends of the shorter line lie on the longer one's line.
fn in_line(a: &Side, b: &Side, same: f64) -> bool {
    let (long, short) = if a.from.distance(a.to) >= b.from.distance(b.to) {
        (a, b)
    } else {
        (b, a)
    };
    let d = long.to - long.from;
    let off = |p: Point| (d.cross(p - long.from) / d.length()).abs();
    off(short.from) <= same && off(short.to) <= same
}

/// An arc run through anticlockwise: the angle and the point where it starts, the same where it ends.
#[derive(Clone, Debug)]
struct Turn {
    index: usize,
    side: Side,
    arc: Arc,
    start: (f64, Point),
    end: (f64, Point),
    joined: bool,
}

fn unite_arcs(arcs: Vec<(usize, Side)>, tolerances: &Tolerances, kept: &mut Vec<(usize, Side)>) {
    let same = tolerances.same();
    let turns: Vec<Turn> = arcs
        .into_iter()
        .filter_map(|(index, side)| {
            let arc = side.arc?;
            let (first, last) = if arc.sweep > 0.0 {
                (side.from, side.to)
            } else {
                (side.to, side.from)
            };
            let start = (first - arc.circle.centre).angle().rem_euclid(TAU);
            Some(Turn {
                index,
                side,
                arc,
                start: (start, first),
                end: (start + arc.sweep.abs(), last),
                joined: false,
            })
        })
        .collect();
    // An arc rebuilt from rounded ends has its centre a little elsewhere.
    let near = 4.0 * same;
    for by_x in runs(&turns, |t| t.arc.circle.centre.x, near) {
        for by_y in runs(&by_x, |t| t.arc.circle.centre.y, near) {
            for circle in runs(&by_y, |t| t.arc.circle.radius, near) {
                unite_on_circle(circle, same, kept);
            }
        }
    }
}

fn unite_on_circle(mut run: Vec<Turn>, same: f64, kept: &mut Vec<(usize, Side)>) {
    run.sort_by(|a, b| a.start.0.total_cmp(&b.start.0).then(a.index.cmp(&b.index)));
    let mut covering: Vec<Turn> = Vec::new();
    for turn in run {
        match covering.last_mut() {
            Some(last) if turn.start.0 < last.end.0 - same / last.arc.circle.radius => {
                last.cover(&turn, 0.0);
            }
            _ => covering.push(turn),
        }
    }
    // The last one may reach over the first.
    while covering.len() > 1 {
        let first = covering[0].clone();
        let Some(last) = covering.last_mut() else {
            break;
        };
        if first.start.0 + TAU >= last.end.0 - same / last.arc.circle.radius {
            break;
        }
        last.cover(&first, TAU);
        covering.remove(0);
    }
    for turn in covering {
        kept.push((turn.index, turn.whole(same)));
    }
}

impl Turn {
    fn cover(&mut self, other: &Self, turned: f64) {
        self.index = self.index.min(other.index);
        self.joined = true;
        if other.end.0 + turned > self.end.0 {
            self.end = (other.end.0 + turned, other.end.1);
        }
    }

    fn whole(&self, same: f64) -> Side {
        if !self.joined {
            return self.side;
        }
        let sweep = self.end.0 - self.start.0;
        let full = sweep * self.arc.circle.radius >= TAU * self.arc.circle.radius - same;
        let side = |to: Point, sweep: f64| Side {
            from: self.start.1,
            to,
            arc: Some(Arc {
                sweep,
                circle: self.arc.circle,
            }),
            corner: 0,
        };
        if full {
            side(self.start.1, TAU)
        } else {
            side(self.end.1, sweep)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use sectile_mesh::outline::corner::arc_through;

    const T: Tolerances = Tolerances {
        size: 100.0,
        gap: 0.01,
        chord: 0.01,
    };

    fn line(x0: f64, y0: f64, x1: f64, y1: f64) -> Side {
        Side {
            from: Point::new(x0, y0),
            to: Point::new(x1, y1),
            arc: None,
            corner: 0,
        }
    }

    fn arc(from: f64, to: f64) -> Side {
        let at = |a: f64| {
            Point::new(
                10.0 + 5.0 * a.to_radians().cos(),
                5.0 * a.to_radians().sin(),
            )
        };
        Side {
            from: at(from),
            to: at(to),
            arc: arc_through(at(from), at(0.5 * (from + to)), at(to)),
            corner: 0,
        }
    }

    #[test]
    fn lines_that_cover_one_another_become_one() {
        let (sides, removed) = united(
            vec![
                line(0.0, 0.0, 10.0, 10.0),
                line(7.0, 7.0, 20.0, 20.0),
                line(3.0, 3.0, 1.0, 1.0),
                line(20.0, 20.0, 30.0, 30.0),
                line(0.0, 5.0, 10.0, 15.0),
                line(50.0, 0.0, 50.0, 9.0),
                line(50.0, 9.0, 50.0, 0.0),
            ],
            &T,
        );
        assert_eq!(removed, 3);
        assert_eq!(
            sides,
            [
                line(0.0, 0.0, 20.0, 20.0),
                line(20.0, 20.0, 30.0, 30.0),
                line(0.0, 5.0, 10.0, 15.0),
                line(50.0, 0.0, 50.0, 9.0),
            ]
        );
    }

    #[test]
    fn arcs_on_one_circle_become_one() {
        let (sides, removed) = united(
            vec![arc(0.0, 90.0), arc(120.0, 45.0), arc(200.0, 250.0)],
            &T,
        );
        assert_eq!((sides.len(), removed), (2, 1));
        assert!((sides[0].arc.expect("an arc").sweep.to_degrees() - 120.0).abs() < 1e-9);
        // Over the direction of x, where angles start again.
        let (sides, removed) = united(vec![arc(10.0, 60.0), arc(-40.0, 20.0)], &T);
        assert_eq!((sides.len(), removed), (1, 1));
        assert!((sides[0].arc.expect("an arc").sweep.to_degrees() - 100.0).abs() < 1e-9);
        // Three that make a circle.
        let (sides, _) = united(
            vec![arc(0.0, 140.0), arc(100.0, 270.0), arc(260.0, 370.0)],
            &T,
        );
        assert_eq!(sides.len(), 1);
        assert_eq!(
            (sides[0].from, sides[0].arc.expect("an arc").sweep),
            (sides[0].to, TAU)
        );
    }
}
