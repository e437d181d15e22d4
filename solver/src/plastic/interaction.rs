//! The interaction surface: the axial forces and bending moments under which a section yields as a
//! whole.
//!
//! A neutral axis at angle α from x with tension f_y on its left and compression f_y on its right gives
//! one point (N, M_x, M_y) of the surface; all neutral axes give all of it. The set of states that the
//! section can bear (lower-bound theorem of limit analysis) is convex, symmetric about zero, and has
//! the support function
//!
//! `h(e, k_x, k_y) = ∫ f_y |e + k_x y + k_y x| dA = max (N e + M_x k_x + M_y k_y)`,
//!
//! the plastic work of the strain rate `e + k_x y + k_y x`, so that a point's strain rate is normal to
//! the surface there. Yield is by the normal stress alone: shear force, torsion and bimoment are not
//! part of it. Moments are `M_x = ∫σ y dA`, `M_y = ∫σ x dA` about the origin given.

use std::f64::consts::{FRAC_PI_2, TAU};

use sectile_mesh::domain::Domain;
use sectile_mesh::{Point, Vector};

use super::axis::moment_about;
use super::half::Slices;
use super::root::zero;
use crate::property::boundary::{EdgeSide, weighted_sides};

/// The interaction surface of a section.
#[derive(Clone, Debug)]
pub struct Surface {
    /// Relative to the origin, with the jump of the yield stress.
    sides: Vec<(EdgeSide, f64)>,
    /// Fully plastic axial force.
    squash: f64,
    /// Where it acts, from the origin.
    centre: Vector,
    /// Largest distance of a point of the section from there, along x plus along y.
    size: f64,
}

/// A point of the surface and the neutral axis that it belongs to.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PlasticState {
    /// Angle α of the neutral axis from x, radians; tension lies to its left.
    pub direction: f64,
    /// Distance of the neutral axis from the origin, positive on its left: at `(−sin α, cos α)·offset`.
    pub offset: f64,
    /// `∫σ dA`, tension positive.
    pub n: f64,
    /// `∫σ y dA`.
    pub mx: f64,
    /// `∫σ x dA`.
    pub my: f64,
}

impl PlasticState {
    /// The moment about an axis through the origin along the neutral axis: that on which the strain
    /// rate works.
    #[must_use]
    pub fn moment(&self) -> f64 {
        let across = across(self.direction);
        self.my * across.x + self.mx * across.y
    }
}

/// How far section forces are from the surface.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Collapse {
    /// The surface is reached at this multiple of the forces.
    pub factor: f64,
    /// The neutral axis there, with the forces of the surface's point; `None` where the whole section
    /// yields in tension or in compression.
    pub state: Option<PlasticState>,
}

fn along(direction: f64) -> Vector {
    Vector::at_angle(direction)
}

fn across(direction: f64) -> Vector {
    along(direction).perpendicular()
}

impl Surface {
    /// The surface for a yield stress of each piece; moments are about `origin`.
    #[must_use]
    pub fn new(domain: &Domain, yield_of_piece: impl Fn(u32) -> f64, origin: Point) -> Self {
        let sides: Vec<(EdgeSide, f64)> = weighted_sides(domain, yield_of_piece)
            .iter()
            .map(|(side, jump)| (side.relative_to(origin), *jump))
            .collect();
        let level = Slices::new(&sides, along(0.0));
        let upright = Slices::new(&sides, along(-FRAC_PI_2));
        let [squash, x, y] = level.total;
        Self {
            sides,
            squash,
            centre: Vector::new(x / squash, y / squash),
            size: level.high - level.low + upright.high - upright.low,
        }
    }

    /// Fully plastic axial force `N_p = ∫f_y dA`.
    #[must_use]
    pub fn squash(&self) -> f64 {
        self.squash
    }

    /// Where it acts, from the origin: with several yield stresses it may have moments.
    #[must_use]
    pub fn centre(&self) -> Vector {
        self.centre
    }

    /// The section cut by lines at the angle `direction` from x.
    #[must_use]
    pub(super) fn slices(&self, direction: f64) -> Slices {
        Slices::new(&self.sides, along(direction))
    }

    /// The point of the surface for a neutral axis.
    #[must_use]
    pub fn at(&self, direction: f64, offset: f64) -> PlasticState {
        state(&self.slices(direction), direction, offset)
    }

    /// The point for a neutral axis of a direction under an axial force, `|n| ≤ N_p`.
    #[must_use]
    pub fn at_force(&self, direction: f64, n: f64) -> PlasticState {
        at_force(&self.slices(direction), direction, n)
    }

    /// The closed curve M_x–M_y at an axial force, `|n| ≤ N_p`: neutral axes all round, anticlockwise,
    /// the first at angle 0. Besides [`DIRECTIONS`] equal steps there are as many points as it takes
    /// for the chords to stay within `deviation` of the curve, relative to its largest moments: between
    /// two points the curve lies between their chord and their tangents.
    #[must_use]
    pub fn moments_at(&self, n: f64, deviation: f64) -> Vec<PlasticState> {
        let state = |direction: f64| self.at_force(direction, n);
        let mut points: Vec<PlasticState> = (0..=DIRECTIONS)
            .map(|k| state(TAU * k as f64 / DIRECTIONS as f64))
            .collect();
        let (mx, my) = points.iter().fold((0.0_f64, 0.0_f64), |(mx, my), p| {
            let [x, y] = [self.centre.x, self.centre.y].map(|c| n * c);
            (mx.max((p.mx - y).abs()), my.max((p.my - x).abs()))
        });
        // At the ends the curve is a point but for rounding.
        if mx.min(my) <= 1e-12 * self.size * self.squash {
            points.truncate(1);
            return points;
        }
        let place = |p: &PlasticState| {
            let tangent = along(p.direction);
            (
                Point::new(p.my / my, p.mx / mx),
                Vector::new(tangent.x / my, tangent.y / mx),
            )
        };
        let mut curve = refined(&points, deviation, place, |a, b| {
            (b.direction - a.direction > LEAST_ANGLE)
                .then(|| state(0.5 * (a.direction + b.direction)))
        });
        curve.pop();
        curve
    }

    /// The curve of N and the moment about the neutral axis's direction, from −N_p to N_p, for neutral
    /// axes of one direction: the largest moment of that sense with the other moment left free. Points
    /// at [`FORCES`] equal steps of N and as many as the `deviation` asks for, see
    /// [`Self::moments_at`].
    #[must_use]
    pub fn force_and_moment(&self, direction: f64, deviation: f64) -> Vec<PlasticState> {
        let slices = self.slices(direction);
        let state = |n: f64| at_force(&slices, direction, n);
        let points: Vec<PlasticState> = (0..=FORCES)
            .map(|k| state(self.squash * (2.0 * k as f64 / FORCES as f64 - 1.0)))
            .collect();
        let most = points
            .iter()
            .map(|p| p.moment().abs())
            .fold(0.0_f64, f64::max);
        let place = |p: &PlasticState| {
            (
                Point::new(p.n / self.squash, p.moment() / most),
                // The strain rate is (−c, 1) along N and the moment.
                Vector::new(1.0 / self.squash, p.offset / most),
            )
        };
        refined(&points, deviation, place, |a, b| {
            (b.n - a.n > 1e-9 * self.squash).then(|| state(0.5 * (a.n + b.n)))
        })
    }

    /// The multiple of the section forces that reaches the surface; `None` without any of the three.
    ///
    /// `min h(d)/(d·F)` over the strain rates d that the forces F work on. For a direction of the
    /// neutral axis the best offset is where the point's N and moment stand in the ratio of the forces',
    /// and over the directions the ratio has one minimum: two zeros, one within the other. The error of
    /// the factor is of second order in theirs.
    #[must_use]
    pub fn collapse(&self, n: f64, mx: f64, my: f64) -> Option<Collapse> {
        // About the centre of the yield force the surface's ends are (±N_p, 0, 0).
        let about =
            |n: f64, mx: f64, my: f64| Vector::new(my - n * self.centre.x, mx - n * self.centre.y);
        let (sense, n) = (if n < 0.0 { -1.0 } else { 1.0 }, n.abs());
        let m = about(n, sense * mx, sense * my);
        if m.length() <= 1e-14 * n * self.size {
            return (n > 0.0).then(|| Collapse {
                factor: self.squash / n,
                state: None,
            });
        }
        let middle = (-m.x).atan2(m.y);
        let mut best: Option<(f64, PlasticState)> = None;
        let mut slope = |turn: f64| {
            let direction = middle + turn;
            let (xi, eta) = (along(direction), across(direction));
            let slices = self.slices(direction);
            let shift = self.centre.dot(eta);
            let m_eta = m.dot(eta);
            let moment = |s: &PlasticState| about(s.n, s.mx, s.my);
            let offset = zero(
                |c| {
                    let s = state(&slices, direction, c);
                    s.n * m_eta - moment(&s).dot(eta) * n
                },
                slices.low,
                slices.high,
            );
            let s = state(&slices, direction, offset);
            let work = moment_about(slices.beyond(offset), slices.total, offset);
            let factor = work / (m_eta - (offset - shift) * n);
            if factor > 0.0 && best.is_none_or(|(f, _)| factor < f) {
                best = Some((factor, s));
            }
            factor * m.dot(xi) - moment(&s).dot(xi)
        };
        // At right angles to the moments the whole section would yield axially.
        let end = FRAC_PI_2 * (1.0 - 1e-12);
        zero(&mut slope, -end, end);
        best.map(|(factor, s)| Collapse {
            factor,
            state: Some(if sense > 0.0 { s } else { s.reversed() }),
        })
    }
}

impl PlasticState {
    /// Tension and compression exchanged.
    fn reversed(&self) -> Self {
        Self {
            direction: self.direction + std::f64::consts::PI,
            offset: -self.offset,
            n: -self.n,
            mx: -self.mx,
            my: -self.my,
        }
    }
}

/// Equal steps of the neutral axis's direction in [`Surface::moments_at`].
pub const DIRECTIONS: usize = 72;
/// Equal steps of N in [`Surface::force_and_moment`].
pub const FORCES: usize = 40;
/// Neutral axes closer than this, in radians, are not told apart.
const LEAST_ANGLE: f64 = 1e-7;

fn state(slices: &Slices, direction: f64, offset: f64) -> PlasticState {
    let (beyond, total) = (slices.beyond(offset), slices.total);
    let [n, xi, eta] = [0, 1, 2].map(|i| 2.0 * beyond[i] - total[i]);
    let moments = along(direction) * xi + across(direction) * eta;
    PlasticState {
        direction,
        offset,
        n,
        mx: moments.y,
        my: moments.x,
    }
}

fn at_force(slices: &Slices, direction: f64, n: f64) -> PlasticState {
    let beyond = 0.5 * (slices.total[0] + n);
    let offset = zero(|c| slices.beyond(c)[0] - beyond, slices.low, slices.high);
    state(slices, direction, offset)
}

/// Points of a convex curve, halved between neighbours until the triangle of chord and tangents is no
/// higher than `deviation`. `place` gives a point's position and tangent; `between` the point between
/// two, or nothing if they are too close.
fn refined(
    points: &[PlasticState],
    deviation: f64,
    place: impl Fn(&PlasticState) -> (Point, Vector),
    between: impl Fn(&PlasticState, &PlasticState) -> Option<PlasticState>,
) -> Vec<PlasticState> {
    let mut curve = Vec::with_capacity(2 * points.len());
    let mut ahead: Vec<PlasticState> = points.iter().rev().copied().collect();
    while let Some(next) = ahead.pop() {
        let Some(last) = curve.last() else {
            curve.push(next);
            continue;
        };
        let ((p, t), (q, u)) = (place(last), place(&next));
        let chord = q - p;
        let height = (chord.cross(u) * chord.cross(t)).abs() / (t.cross(u).abs() * chord.length());
        match between(last, &next) {
            Some(middle) if height > deviation => ahead.extend([next, middle]),
            _ => curve.push(next),
        }
    }
    curve
}
