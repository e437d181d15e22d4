//! Placing labels: beside their point, clear of each other and of everything that must stay legible.

use sectile_mesh::{Point, Vector};

use super::outline::Shape;
use super::rect::Rect;

/// Directions in order of preference, degrees anticlockwise from the right.
const DIRECTIONS: [f64; 12] = [
    45.0, 0.0, 315.0, 135.0, 180.0, 225.0, 90.0, 270.0, 20.0, 160.0, 340.0, 200.0,
];
/// Distances from the point, mm.
const DISTANCES: [f64; 9] = [0.0, 1.5, 3.0, 5.0, 8.0, 12.0, 17.0, 24.0, 32.0];
/// Air around a placed label, mm.
const AIR: f64 = 0.5;
/// What a label wholly on material costs, in mm of distance.
const ON_MATERIAL: f64 = 12.0;
/// A leader is drawn from here on, mm.
const LEADER_FROM: f64 = 2.5;

/// A label's place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Placed {
    /// What it covers.
    pub rect: Rect,
    /// The line from its point to its edge, where it stands away.
    pub leader: Option<(Point, Point)>,
}

/// What labels must keep clear of.
#[derive(Clone, Debug)]
pub struct Ground<'a> {
    /// Where labels may stand.
    pub area: Rect,
    /// What they may not cover, nor may leaders cross.
    pub taken: Vec<Rect>,
    /// Leaders drawn so far, which labels may not cover.
    pub leaders: Vec<(Point, Point)>,
    /// Material, which they had better not cover.
    pub shape: Option<&'a Shape>,
}

impl Ground<'_> {
    /// The best place for a label of `width` × `height` that belongs to the mark of `radius` about
    /// `at`; it is taken from then on. `None`: there is no room.
    pub fn place(&mut self, at: Point, radius: f64, width: f64, height: f64) -> Option<Placed> {
        let mut best: Option<(f64, Placed)> = None;
        for (rank, direction) in DIRECTIONS.iter().enumerate() {
            let d = Vector::at_angle(direction.to_radians());
            let d = Vector::new(d.x, -d.y);
            for distance in DISTANCES {
                let foot = at + d * (radius + AIR + distance);
                let rect = hung(foot, d, width, height);
                let leader =
                    (distance >= LEADER_FROM).then(|| (at + d * radius, foot + d * (-0.2)));
                if !self.free(at, &rect, leader) {
                    continue;
                }
                let share = self.shape.map_or(0.0, |s| s.share(&rect));
                let cost = distance + ON_MATERIAL * share + 0.05 * rank as f64;
                if best.as_ref().is_none_or(|(least, _)| cost < *least) {
                    best = Some((cost, Placed { rect, leader }));
                }
            }
        }
        let (_, placed) = best?;
        self.taken.push(placed.rect.grown(AIR));
        self.leaders.extend(placed.leader);
        Some(placed)
    }

    fn free(&self, at: Point, rect: &Rect, leader: Option<(Point, Point)>) -> bool {
        self.area.contains(rect)
            && !self.taken.iter().any(|t| t.overlaps(rect))
            && !self.leaders.iter().any(|(a, b)| rect.meets_line(*a, *b))
            && leader.is_none_or(|(a, b)| {
                // A leader starts on its own mark.
                let own = |t: &Rect| t.contains(&Rect::about(at, 0.0));
                !self.taken.iter().any(|t| !own(t) && t.meets_line(a, b))
            })
    }
}

/// The rectangle that touches `foot` with the side or corner that faces against `d`.
fn hung(foot: Point, d: Vector, width: f64, height: f64) -> Rect {
    let side = |x: f64| {
        if x > 0.35 {
            0.0
        } else if x < -0.35 {
            -1.0
        } else {
            -0.5
        }
    };
    let x0 = foot.x + side(d.x) * width;
    let y0 = foot.y + side(d.y) * height;
    Rect::new(x0, y0, x0 + width, y0 + height)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn many_labels_at_one_point_do_not_overlap() {
        let mut ground = Ground {
            area: Rect::new(0.0, 0.0, 100.0, 100.0),
            taken: vec![Rect::about(Point::new(50.0, 50.0), 2.0)],
            leaders: Vec::new(),
            shape: None,
        };
        let placed: Vec<Placed> = (0..6)
            .filter_map(|_| ground.place(Point::new(50.0, 50.0), 2.0, 14.0, 4.0))
            .collect();
        assert!(placed.len() >= 4, "{}", placed.len());
        for (i, a) in placed.iter().enumerate() {
            assert!(ground.area.contains(&a.rect));
            for b in &placed[..i] {
                assert!(!a.rect.overlaps(&b.rect));
                if let Some((p, q)) = a.leader {
                    assert!(!b.rect.meets_line(p, q));
                }
            }
        }
    }

    #[test]
    fn no_room_is_said() {
        let mut ground = Ground {
            area: Rect::new(0.0, 0.0, 10.0, 10.0),
            taken: Vec::new(),
            leaders: Vec::new(),
            shape: None,
        };
        assert!(ground.place(Point::new(5.0, 5.0), 1.0, 14.0, 4.0).is_none());
    }

    #[test]
    fn near_an_edge_the_label_turns_inwards() {
        let mut ground = Ground {
            area: Rect::new(0.0, 0.0, 100.0, 100.0),
            taken: Vec::new(),
            leaders: Vec::new(),
            shape: None,
        };
        let placed = ground
            .place(Point::new(99.0, 1.0), 1.0, 14.0, 4.0)
            .expect("room");
        assert!(placed.rect.x1 <= 99.0 && placed.rect.y0 >= 0.0);
    }
}
