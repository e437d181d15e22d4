//! Section forces: what an action puts on the section.

use std::ops::{Add, Mul};

use sectile_mesh::Point;

/// Section forces in consistent units: a force F and the length L of the domain, so that stresses come
/// out in F/L².
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct SectionForces {
    /// Axial force at the centroid, tension positive.
    pub n: f64,
    /// Shear force along x through the shear centre.
    pub vx: f64,
    /// Shear force along y through the shear centre.
    pub vy: f64,
    /// `∫σ y dA` about the centroid: tension on the upper side is positive.
    pub mx: f64,
    /// `∫σ x dA` about the centroid: tension on the right side is positive.
    pub my: f64,
    /// Saint-Venant torque about the shear centre, positive anticlockwise.
    pub t: f64,
    /// Bimoment `∫σ ω dA`.
    pub b: f64,
    /// Warping torque `−dB/dz` about the shear centre.
    pub tw: f64,
}

/// The parts of an action in the order of [`SectionForces::parts`].
pub const PART_NAMES: [&str; 8] = ["N", "Vx", "Vy", "Mx", "My", "T", "B", "Tw"];

impl SectionForces {
    /// The forces one by one, each alone, in the order of [`PART_NAMES`].
    #[must_use]
    pub fn parts(&self) -> [Self; 8] {
        let zero = Self::default();
        [
            Self { n: self.n, ..zero },
            Self {
                vx: self.vx,
                ..zero
            },
            Self {
                vy: self.vy,
                ..zero
            },
            Self {
                mx: self.mx,
                ..zero
            },
            Self {
                my: self.my,
                ..zero
            },
            Self { t: self.t, ..zero },
            Self { b: self.b, ..zero },
            Self {
                tw: self.tw,
                ..zero
            },
        ]
    }

    /// The torque about the shear centre `centre` of the shear forces acting along lines through
    /// `at`: `(x − x_s) V_y − (y − y_s) V_x`.
    #[must_use]
    pub fn torque_of_offset(&self, at: Point, centre: Point) -> f64 {
        (at.x - centre.x) * self.vy - (at.y - centre.y) * self.vx
    }
}

impl Add for SectionForces {
    type Output = Self;
    fn add(self, o: Self) -> Self {
        Self {
            n: self.n + o.n,
            vx: self.vx + o.vx,
            vy: self.vy + o.vy,
            mx: self.mx + o.mx,
            my: self.my + o.my,
            t: self.t + o.t,
            b: self.b + o.b,
            tw: self.tw + o.tw,
        }
    }
}

impl Mul<f64> for SectionForces {
    type Output = Self;
    fn mul(self, s: f64) -> Self {
        Self {
            n: self.n * s,
            vx: self.vx * s,
            vy: self.vy * s,
            mx: self.mx * s,
            my: self.my * s,
            t: self.t * s,
            b: self.b * s,
            tw: self.tw * s,
        }
    }
}
