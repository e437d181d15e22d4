//! One side of the material's edge as the heap sees it: the distance from it.
//!
//! Within a side's zone (the strip across a straight side, the sector of an arc) the nearest point lies
//! within the side, and the distance is a plane or a cone; outside of the zone it lies at an end.

use sectile_mesh::{Point, Vector};

use crate::property::boundary::EdgeSide;

/// A linear function `value + slope·(p − at)`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Plane {
    /// Where it has its value.
    pub at: Point,
    /// Its value there.
    pub value: f64,
    /// Its gradient.
    pub slope: Vector,
}

impl Plane {
    /// Its value at `p`.
    #[must_use]
    pub fn on(&self, p: Point) -> f64 {
        self.value + self.slope.dot(p - self.at)
    }
}

/// `base + sense (|p − centre| − radius)`: the distance from a circle of which the material is outside
/// (`sense` 1, convex) or inside (−1, concave), or from a point (radius 0).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cone {
    /// Centre.
    pub centre: Point,
    /// Radius.
    pub radius: f64,
    /// 1 or −1.
    pub sense: f64,
    /// Value on the circle.
    pub base: f64,
}

impl Cone {
    /// Its value at `p`.
    #[must_use]
    pub fn on(&self, p: Point) -> f64 {
        self.base + self.sense * (p.distance(self.centre) - self.radius)
    }

    /// The plane that touches it at `p`: below a convex cone, above a concave one.
    #[must_use]
    pub fn tangent(&self, p: Point) -> Plane {
        let from = p - self.centre;
        let length = from.length();
        let slope = if length > 0.0 {
            from * (self.sense / length)
        } else {
            Vector::default()
        };
        Plane {
            at: p,
            value: self.on(p),
            slope,
        }
    }
}

/// What the distance from a side is like within its zone.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Form {
    /// From a straight side.
    Plane(Plane),
    /// From an arc.
    Cone(Cone),
}

impl Form {
    /// The value at `p`, negative behind the side.
    #[must_use]
    pub fn on(&self, p: Point) -> f64 {
        match self {
            Self::Plane(plane) => plane.on(p),
            Self::Cone(cone) => cone.on(p),
        }
    }
}

/// A side with the material to its left.
#[derive(Clone, Copy, Debug)]
pub struct Face {
    /// Its geometry.
    pub side: EdgeSide,
    /// The domain's points at its ends.
    pub ends: [u32; 2],
    /// The loop that it belongs to.
    pub owner: u32,
    /// The distance within the zone.
    pub form: Form,
    /// The zone is where both are positive; slopes are unit vectors.
    pub zone: [Plane; 2],
}

impl Face {
    /// The face of a side.
    #[must_use]
    pub fn new(side: EdgeSide, ends: [u32; 2]) -> Self {
        let (a, b) = (side.from, side.to);
        let through = |at: Point, slope: Vector| Plane {
            at,
            value: 0.0,
            slope,
        };
        let (form, zone) = match side.arc {
            None => {
                let along = (b - a) * (1.0 / a.distance(b));
                (
                    Form::Plane(through(a, along.perpendicular())),
                    [through(a, along), through(b, -along)],
                )
            }
            Some(arc) => {
                let (centre, radius) = (arc.circle.centre, arc.circle.radius);
                let turn = arc.sweep.signum();
                let across = |p: Point| (p - centre).perpendicular() * (turn / radius);
                (
                    Form::Cone(Cone {
                        centre,
                        radius,
                        sense: -turn,
                        base: 0.0,
                    }),
                    [through(centre, across(a)), through(centre, -across(b))],
                )
            }
        };
        Self {
            side,
            ends,
            owner: 0,
            form,
            zone,
        }
    }

    /// Whether the nearest point to `p` lies within the side.
    #[must_use]
    pub fn faces(&self, p: Point) -> bool {
        self.zone.iter().all(|z| z.on(p) >= 0.0)
    }

    /// Distance of `p` from the side.
    #[must_use]
    pub fn distance(&self, p: Point) -> f64 {
        if self.faces(p) {
            self.form.on(p).abs()
        } else {
            p.distance(self.side.from).min(p.distance(self.side.to))
        }
    }

    /// Distance between two sides that do not cross: it is reached at an end of one of them, or where
    /// the line of centres or the foot of a centre meets both.
    #[must_use]
    pub fn gap(&self, other: &Self) -> f64 {
        let ends = |f: &Self| [f.side.from, f.side.to];
        let mut least = f64::INFINITY;
        for p in ends(self) {
            least = least.min(other.distance(p));
        }
        for p in ends(other) {
            least = least.min(self.distance(p));
        }
        let direction = match (&self.form, &other.form) {
            (Form::Plane(_), Form::Plane(_)) => return least,
            (Form::Plane(plane), Form::Cone(_)) | (Form::Cone(_), Form::Plane(plane)) => {
                plane.slope
            }
            (Form::Cone(a), Form::Cone(b)) => {
                let d = b.centre - a.centre;
                if d.length() > 0.0 {
                    d * (1.0 / d.length())
                } else {
                    // Concentric: any common radius is as good as the ends' radii, seen above.
                    return least;
                }
            }
        };
        for face in [self, other] {
            if let Form::Cone(cone) = face.form {
                let opposite = if std::ptr::eq(face, self) {
                    other
                } else {
                    self
                };
                for sign in [1.0, -1.0] {
                    let p = cone.centre + direction * (sign * cone.radius);
                    if face.faces(p) {
                        least = least.min(opposite.distance(p));
                    }
                }
            }
        }
        least
    }
}
