//! The edge of the material as directed sides, and integrals along it.

use std::f64::consts::{PI, TAU};
use std::sync::OnceLock;

use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Arc;
use sectile_mesh::{Point, Vector};

use crate::element::quadrature::gauss_legendre;

/// A side of the edge, material to its left.
#[derive(Clone, Copy, Debug)]
pub struct EdgeSide {
    /// Start.
    pub from: Point,
    /// End.
    pub to: Point,
    /// The arc it follows, swept from `from` to `to`.
    pub arc: Option<Arc>,
}

impl EdgeSide {
    /// Length along the side.
    #[must_use]
    pub fn length(&self) -> f64 {
        match self.arc {
            None => self.from.distance(self.to),
            Some(arc) => arc.circle.radius * arc.sweep.abs(),
        }
    }

    /// The side seen from another origin.
    #[must_use]
    pub fn relative_to(&self, origin: Point) -> Self {
        let shift = |p: Point| Point::new(p.x - origin.x, p.y - origin.y);
        Self {
            from: shift(self.from),
            to: shift(self.to),
            arc: self.arc.map(|mut a| {
                a.circle.centre = shift(a.circle.centre);
                a
            }),
        }
    }

    /// The side in axes of which the first runs along the unit vector `along`.
    #[must_use]
    pub fn seen_along(&self, along: Vector) -> Self {
        let across = along.perpendicular();
        let see = |p: Point| {
            let v = p - Point::default();
            Point::new(v.dot(along), v.dot(across))
        };
        Self {
            from: see(self.from),
            to: see(self.to),
            arc: self.arc.map(|mut a| {
                a.circle.centre = see(a.circle.centre);
                a
            }),
        }
    }

    /// Angle of the arc's start about its centre.
    #[must_use]
    pub fn start_angle(&self, arc: &Arc) -> f64 {
        (self.from - arc.circle.centre).angle()
    }

    /// The extreme coordinates `[x_min, x_max, y_min, y_max]` of the side.
    #[must_use]
    pub fn extent(&self) -> [f64; 4] {
        let mut e = [
            self.from.x.min(self.to.x),
            self.from.x.max(self.to.x),
            self.from.y.min(self.to.y),
            self.from.y.max(self.to.y),
        ];
        if let Some(arc) = self.arc {
            let start = self.start_angle(&arc);
            for quarter in 0..4 {
                let angle = f64::from(quarter) * 0.5 * PI;
                let ahead = if arc.sweep > 0.0 {
                    (angle - start).rem_euclid(TAU)
                } else {
                    (start - angle).rem_euclid(TAU)
                };
                if ahead < arc.sweep.abs() {
                    let r = arc.circle.radius;
                    let c = arc.circle.centre;
                    match quarter {
                        0 => e[1] = e[1].max(c.x + r),
                        1 => e[3] = e[3].max(c.y + r),
                        2 => e[0] = e[0].min(c.x - r),
                        _ => e[2] = e[2].min(c.y - r),
                    }
                }
            }
        }
        e
    }

    /// `∫ g(x, y) dy` along the side, exact for polynomials of degree up to 5 on straight sides and
    /// to rounding on arcs (ten Gauss points every 30°).
    pub fn integrate_dy<const N: usize>(&self, g: impl Fn(Point) -> [f64; N]) -> [f64; N] {
        let mut sum = [0.0; N];
        let mut add = |p: Point, w: f64| {
            for (s, v) in sum.iter_mut().zip(g(p)) {
                *s += w * v;
            }
        };
        match self.arc {
            None => {
                let dy = self.to.y - self.from.y;
                for &(t, w) in rule(&STRAIGHT, 3) {
                    add(self.from.lerp(self.to, t), w * dy);
                }
            }
            Some(arc) => {
                let parts = (arc.sweep.abs() / (PI / 6.0)).ceil().max(1.0);
                let step = arc.sweep / parts;
                let start = self.start_angle(&arc);
                for k in 0..parts as usize {
                    for &(t, w) in rule(&CURVED, 10) {
                        let angle = start + (k as f64 + t) * step;
                        let n = Vector::at_angle(angle);
                        let p = arc.circle.centre + n * arc.circle.radius;
                        add(p, w * step * arc.circle.radius * n.x);
                    }
                }
            }
        }
        sum
    }
}

static STRAIGHT: OnceLock<Vec<(f64, f64)>> = OnceLock::new();
static CURVED: OnceLock<Vec<(f64, f64)>> = OnceLock::new();

fn rule(cell: &'static OnceLock<Vec<(f64, f64)>>, points: usize) -> &'static [(f64, f64)] {
    cell.get_or_init(|| gauss_legendre(points))
}

/// The free sides of a domain, material to the left; interfaces are left out.
#[must_use]
pub fn edge_sides(domain: &Domain) -> Vec<EdgeSide> {
    domain
        .sides
        .iter()
        .filter_map(|s| {
            let (a, b) = (domain.points[s.from as usize], domain.points[s.to as usize]);
            match (s.left, s.right) {
                (Some(_), None) => Some(EdgeSide {
                    from: a,
                    to: b,
                    arc: s.arc,
                }),
                (None, Some(_)) => Some(EdgeSide {
                    from: b,
                    to: a,
                    arc: s.arc.map(|mut arc| {
                        arc.sweep = -arc.sweep;
                        arc
                    }),
                }),
                _ => None,
            }
        })
        .collect()
}

/// Every side across which a weight of the pieces jumps, with that jump `w_left − w_right` (no material
/// weighs nothing): `Σ jump ∫ g dy` over them is `Σ_pieces w ∮ g dy` around each piece.
#[must_use]
pub fn weighted_sides(domain: &Domain, weight: impl Fn(u32) -> f64) -> Vec<(EdgeSide, f64)> {
    let of = |hand: Option<u32>| hand.map_or(0.0, &weight);
    domain
        .sides
        .iter()
        .map(|s| {
            let side = EdgeSide {
                from: domain.points[s.from as usize],
                to: domain.points[s.to as usize],
                arc: s.arc,
            };
            (side, of(s.left) - of(s.right))
        })
        .filter(|(_, jump)| *jump != 0.0)
        .collect()
}
