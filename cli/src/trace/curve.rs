//! Curves that are neither lines nor arcs of circles.

use std::f64::consts::{FRAC_PI_2, TAU};

use kurbo::Affine;
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};

use super::drawing::{Shape, point, vector};

/// A curve as its format states it.
#[derive(Clone, Debug, PartialEq)]
pub enum Curve {
    /// `centre + u cos t + v sin t`, t from `range.0` to `range.1`, radians, with its ends as stated.
    Ellipse {
        /// The centre.
        centre: Point,
        /// Half of a conjugate diameter, at t = 0.
        u: Vector,
        /// Half of the other one, at t = 90°.
        v: Vector,
        /// First and last t.
        range: (f64, f64),
        /// First and last point.
        ends: (Point, Point),
    },
    /// A cubic by its four control points.
    Cubic([Point; 4]),
    /// A rational B-spline.
    Spline(Box<Spline>),
}

/// A rational B-spline: `knots.len() = points.len() + degree + 1`, one positive weight a point.
#[derive(Clone, Debug, PartialEq)]
pub struct Spline {
    /// Degree, at least 1.
    pub degree: usize,
    /// Knots, never falling.
    pub knots: Vec<f64>,
    /// Control points.
    pub points: Vec<Point>,
    /// Their weights.
    pub weights: Vec<f64>,
}

/// How far the image of a circle may be from a circle, over its radius, to be kept as one.
const ROUND: f64 = 1e-8;

/// The arc `centre + u cos t + v sin t` for t over `range`: of a circle where u and v are equally long
/// and at right angles. `ends`: its first and last point where they are known better than by angles.
#[must_use]
pub fn elliptic(
    centre: Point,
    u: Vector,
    v: Vector,
    range: (f64, f64),
    ends: Option<(Point, Point)>,
) -> Shape {
    let at = |t: f64| centre + u * t.cos() + v * t.sin();
    let (first, last) = ends.unwrap_or_else(|| (at(range.0), at(range.1)));
    let whole = range.1 - range.0 >= TAU * (1.0 - 1e-12);
    let last = if whole { first } else { last };
    let (a, b) = (u.length(), v.length());
    if (a - b).abs() <= ROUND * a && u.dot(v).abs() <= ROUND * a * b && a > 0.0 {
        let sweep = (range.1 - range.0).min(TAU) * u.cross(v).signum();
        return Shape::Side(Side {
            from: first,
            to: last,
            arc: Some(Arc {
                circle: Circle {
                    centre,
                    radius: 0.5 * (a + b),
                },
                sweep,
            }),
            corner: 0,
        });
    }
    Shape::Curve(Curve::Ellipse {
        centre,
        u,
        v,
        range,
        ends: (first, last),
    })
}

/// A whole circle.
#[must_use]
pub fn circle(centre: Point, radius: f64) -> Shape {
    elliptic(
        centre,
        Vector::new(radius, 0.0),
        Vector::new(0.0, radius),
        (0.0, TAU),
        None,
    )
}

/// The cubic that is the quadratic with these control points.
#[must_use]
pub fn quadratic(a: Point, b: Point, c: Point) -> Curve {
    Curve::Cubic([a, a.lerp(b, 2.0 / 3.0), c.lerp(b, 2.0 / 3.0), c])
}

impl Curve {
    /// The curve as `map` moves, turns, scales and mirrors it.
    #[must_use]
    pub fn mapped(&self, map: Affine) -> Shape {
        match self {
            Self::Ellipse {
                centre,
                u,
                v,
                range,
                ends,
            } => elliptic(
                point(map, *centre),
                vector(map, *u),
                vector(map, *v),
                *range,
                Some((point(map, ends.0), point(map, ends.1))),
            ),
            Self::Cubic(points) => Shape::Curve(Self::Cubic(points.map(|p| point(map, p)))),
            Self::Spline(spline) => Shape::Curve(Self::Spline(Box::new(Spline {
                points: spline.points.iter().map(|p| point(map, *p)).collect(),
                ..(**spline).clone()
            }))),
        }
    }

    /// Points whose hull holds the curve.
    #[must_use]
    pub fn control_points(&self) -> Vec<Point> {
        match self {
            Self::Cubic(points) => points.to_vec(),
            Self::Spline(spline) => spline.points.clone(),
            Self::Ellipse { .. } => {
                // Of an arc the hull is not known so simply; its own points will do for a size.
                let (a, b) = self.range();
                (0..=32)
                    .map(|i| self.at(a + (b - a) * f64::from(i) / 32.0))
                    .collect()
            }
        }
    }

    fn range(&self) -> (f64, f64) {
        match self {
            Self::Ellipse { range, .. } => *range,
            Self::Cubic(_) => (0.0, 1.0),
            Self::Spline(spline) => (
                spline.knots[spline.degree],
                spline.knots[spline.points.len()],
            ),
        }
    }

    /// The parameter's stretches on which the curve is smooth and turns little.
    #[must_use]
    pub fn stretches(&self) -> Vec<(f64, f64)> {
        let (a, b) = self.range();
        let equal = |n: usize| {
            let step = (b - a) / n as f64;
            (0..n)
                .map(|i| {
                    let end = if i + 1 == n {
                        b
                    } else {
                        a + step * (i + 1) as f64
                    };
                    (a + step * i as f64, end)
                })
                .collect()
        };
        match self {
            Self::Ellipse { .. } => equal(((b - a) / FRAC_PI_2 - 1e-9).ceil().max(1.0) as usize),
            Self::Cubic(_) => equal(2),
            Self::Spline(spline) => spline.knots[spline.degree..=spline.points.len()]
                .windows(2)
                .filter(|pair| pair[1] > pair[0])
                .map(|pair| (pair[0], pair[1]))
                .collect(),
        }
    }

    /// The point at t.
    #[must_use]
    pub fn at(&self, t: f64) -> Point {
        match self {
            Self::Ellipse {
                centre,
                u,
                v,
                range,
                ends,
            } => {
                if t == range.0 {
                    ends.0
                } else if t == range.1 {
                    ends.1
                } else {
                    *centre + *u * t.cos() + *v * t.sin()
                }
            }
            Self::Cubic([a, b, c, d]) => {
                let (ab, bc, cd) = (a.lerp(*b, t), b.lerp(*c, t), c.lerp(*d, t));
                ab.lerp(bc, t).lerp(bc.lerp(cd, t), t)
            }
            Self::Spline(spline) => spline.at(t),
        }
    }
}

impl Spline {
    /// De Boor's recurrence in homogeneous coordinates.
    fn at(&self, t: f64) -> Point {
        let (p, n) = (self.degree, self.points.len());
        let inner = &self.knots[p..n];
        // The last knot not beyond t; at the end of the curve the last stretch of any length.
        let mut k = p + inner.partition_point(|knot| *knot <= t).max(1) - 1;
        while k > p && self.knots[k] == self.knots[k + 1] {
            k -= 1;
        }
        let mut d: Vec<[f64; 3]> = (0..=p)
            .map(|j| {
                let i = j + k - p;
                let w = self.weights[i];
                [self.points[i].x * w, self.points[i].y * w, w]
            })
            .collect();
        for r in 1..=p {
            for j in (r..=p).rev() {
                let (low, high) = (self.knots[j + k - p], self.knots[j + 1 + k - r]);
                let a = if high > low {
                    (t - low) / (high - low)
                } else {
                    0.0
                };
                for c in 0..3 {
                    d[j][c] = (1.0 - a) * d[j - 1][c] + a * d[j][c];
                }
            }
        }
        let [x, y, w] = d[p];
        Point::new(x / w, y / w)
    }
}
