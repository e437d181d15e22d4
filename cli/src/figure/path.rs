//! Long path data in few characters: whole multiples of a quantum, each point relative to the last.

use sectile_mesh::Point;

/// Path data in the making.
pub struct FinePath {
    quantum: f64,
    data: String,
    at: (i64, i64),
}

impl FinePath {
    /// Empty, with the smallest distance that it tells apart, mm.
    #[must_use]
    pub fn new(quantum: f64) -> Self {
        Self {
            quantum,
            data: String::new(),
            at: (0, 0),
        }
    }

    fn quantised(&self, p: Point) -> (i64, i64) {
        // Coordinates are a few hundred mm at most.
        let q = |x: f64| (x / self.quantum).round() as i64;
        (q(p.x), q(p.y))
    }

    fn pair(&mut self, command: char, to: (i64, i64)) {
        self.data.push(command);
        let (dx, dy) = (to.0 - self.at.0, to.1 - self.at.1);
        self.data.push_str(&dx.to_string());
        // A minus sign separates by itself.
        if dy >= 0 {
            self.data.push(' ');
        }
        self.data.push_str(&dy.to_string());
        self.at = to;
    }

    /// Starts a new part.
    pub fn move_to(&mut self, p: Point) {
        let to = self.quantised(p);
        self.pair('m', to);
    }

    /// Straight on to `p`; steps that vanish in rounding are left out.
    pub fn line_to(&mut self, p: Point) {
        let to = self.quantised(p);
        if to != self.at {
            self.pair('l', to);
        }
    }

    /// Along a circular arc of at most half a turn to `p`; `clockwise` as seen on the page.
    pub fn arc_to(&mut self, p: Point, radius: f64, clockwise: bool) {
        let to = self.quantised(p);
        if to == self.at {
            return;
        }
        let r = (radius / self.quantum).round().max(1.0) as i64;
        let flag = u8::from(clockwise);
        let (dx, dy) = (to.0 - self.at.0, to.1 - self.at.1);
        self.data
            .push_str(&format!("a{r} {r} 0 0 {flag} {dx} {dy}"));
        self.at = to;
    }

    /// A closed loop; loops that shrink to fewer than three points are left out.
    pub fn closed(&mut self, points: &[Point]) {
        let mut fine: Vec<(i64, i64)> = points.iter().map(|&p| self.quantised(p)).collect();
        fine.dedup();
        while fine.len() > 1 && fine.first() == fine.last() {
            fine.pop();
        }
        if fine.len() < 3 {
            return;
        }
        for (i, &to) in fine.iter().enumerate() {
            self.pair(if i == 0 { 'm' } else { 'l' }, to);
        }
        self.data.push('z');
        self.at = fine[0];
    }

    /// An open line.
    pub fn open(&mut self, points: &[Point]) {
        for (i, &p) in points.iter().enumerate() {
            if i == 0 {
                self.move_to(p);
            } else {
                self.line_to(p);
            }
        }
    }

    /// The data.
    #[must_use]
    pub fn finish(self) -> String {
        self.data
    }

    /// Characters so far.
    #[must_use]
    pub fn len(&self) -> usize {
        self.data.len()
    }

    /// Whether nothing has been drawn.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.data.is_empty()
    }
}

/// Leaves out points of an open line that lie within `tolerance` of the line through those kept
/// (Douglas and Peucker's method); the ends stay.
#[must_use]
pub fn simplified(points: &[Point], tolerance: f64) -> Vec<Point> {
    if points.len() < 3 {
        return points.to_vec();
    }
    let mut keep = vec![false; points.len()];
    keep[0] = true;
    keep[points.len() - 1] = true;
    let mut stack = vec![(0, points.len() - 1)];
    while let Some((a, b)) = stack.pop() {
        let mut farthest = (tolerance, 0);
        for i in a + 1..b {
            let d = distance(points[i], points[a], points[b]);
            if d > farthest.0 {
                farthest = (d, i);
            }
        }
        if farthest.1 > 0 {
            keep[farthest.1] = true;
            stack.push((a, farthest.1));
            stack.push((farthest.1, b));
        }
    }
    let kept = points.iter().zip(&keep).filter(|(_, k)| **k);
    kept.map(|(p, _)| *p).collect()
}

/// The same for a closed loop, whose first point is not repeated at its end.
#[must_use]
pub fn simplified_loop(points: &[Point], tolerance: f64) -> Vec<Point> {
    if points.len() < 4 {
        return points.to_vec();
    }
    // The point farthest from the first one splits the loop into two lines.
    let mut split = 0;
    for i in 1..points.len() {
        if points[i].distance(points[0]) > points[split].distance(points[0]) {
            split = i;
        }
    }
    let mut back = points[split..].to_vec();
    back.push(points[0]);
    let mut out = simplified(&points[..=split], tolerance);
    let back = simplified(&back, tolerance);
    out.extend_from_slice(&back[1..back.len() - 1]);
    out
}

/// Distance of `p` from the stretch between `a` and `b`.
fn distance(p: Point, a: Point, b: Point) -> f64 {
    let d = b - a;
    let square = d.dot(d);
    if square == 0.0 {
        return p.distance(a);
    }
    let t = ((p - a).dot(d) / square).clamp(0.0, 1.0);
    p.distance(a.lerp(b, t))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn data_is_relative_and_whole() {
        let mut path = FinePath::new(0.01);
        path.move_to(Point::new(1.0, 2.0));
        path.line_to(Point::new(1.5, 1.0));
        path.line_to(Point::new(1.501, 1.001));
        path.arc_to(Point::new(2.5, 1.0), 0.5, true);
        assert_eq!(path.finish(), "m100 200l50-100a50 50 0 0 1 100 0");
    }

    #[test]
    fn loops_are_closed_once_and_slivers_left_out() {
        let mut path = FinePath::new(0.1);
        let p = Point::new;
        path.closed(&[p(0.0, 0.0), p(1.0, 0.0), p(1.0, 1.0), p(0.0, 0.01)]);
        path.closed(&[p(0.0, 0.0), p(0.01, 0.0), p(5.0, 0.0)]);
        assert_eq!(path.finish(), "m0 0l10 0l0 10z");
    }

    #[test]
    fn corners_survive_and_points_between_them_go() {
        let p = Point::new;
        let mut square = Vec::new();
        for i in 0..10 {
            square.push(p(f64::from(i) * 0.1, 0.0));
        }
        square.extend([
            p(1.0, 0.0),
            p(1.0, 0.5),
            p(1.0, 1.0),
            p(0.0, 1.0),
            p(0.0, 0.3),
        ]);
        let kept = simplified_loop(&square, 1e-9);
        assert_eq!(kept, [p(0.0, 0.0), p(1.0, 0.0), p(1.0, 1.0), p(0.0, 1.0)]);
    }

    #[test]
    fn simplified_circle_stays_within_tolerance() {
        let circle: Vec<Point> = (0..1000)
            .map(|i| {
                let t = f64::from(i) * std::f64::consts::TAU / 1000.0;
                Point::new(20.0 * t.cos(), 20.0 * t.sin())
            })
            .collect();
        let kept = simplified_loop(&circle, 0.01);
        assert!(kept.len() < 150, "{}", kept.len());
        for (i, &a) in kept.iter().enumerate() {
            let b = kept[(i + 1) % kept.len()];
            // The sagitta over every chord that is kept.
            assert!(20.0 - a.lerp(b, 0.5).distance(Point::default()) < 0.0101);
        }
    }
}
