//! The edge of the material as directed sides, and integrals along it.

use std::f64::consts::{PI, TAU};
use std::sync::OnceLock;

use sectile_mesh::domain::{Domain, DomainSide};
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

/// A free side with the domain's points that it runs between.
#[derive(Clone, Copy, Debug)]
pub struct DirectedEdge {
    /// The side, material to its left.
    pub side: EdgeSide,
    /// Index of its first point.
    pub from: u32,
    /// Index of its last point.
    pub to: u32,
    /// Whether it lies against another piece to which it is not joined.
    pub faying: bool,
}

/// The free sides of a domain with the points that they run between; interfaces are left out.
pub fn directed_edges(domain: &Domain) -> impl Iterator<Item = DirectedEdge> {
    domain.sides.iter().filter_map(|s| {
        let (side, from, to) = match (s.left, s.right) {
            (Some(_), None) => (along(domain, s), s.from, s.to),
            (None, Some(_)) => (against(domain, s), s.to, s.from),
            _ => return None,
        };
        Some(DirectedEdge {
            side,
            from,
            to,
            faying: s.faying,
        })
    })
}

/// The sides across which a quantity that is constant on each piece jumps, with the jump: integrals
/// over the weighted area are those along these sides, each times its number.
#[must_use]
pub fn weighted_sides(domain: &Domain, weight: impl Fn(u32) -> f64) -> Vec<(EdgeSide, f64)> {
    domain
        .sides
        .iter()
        .filter_map(|s| {
            let (side, jump) = match (s.left, s.right) {
                (Some(l), None) => (along(domain, s), weight(l)),
                (None, Some(r)) => (against(domain, s), weight(r)),
                (Some(l), Some(r)) => (along(domain, s), weight(l) - weight(r)),
                (None, None) => return None,
            };
            (jump != 0.0).then_some((side, jump))
        })
        .collect()
}

fn along(domain: &Domain, s: &DomainSide) -> EdgeSide {
    EdgeSide {
        from: domain.points[s.from as usize],
        to: domain.points[s.to as usize],
        arc: s.arc,
    }
}

fn against(domain: &Domain, s: &DomainSide) -> EdgeSide {
    EdgeSide {
        from: domain.points[s.to as usize],
        to: domain.points[s.from as usize],
        arc: s.arc.map(|mut arc| {
            arc.sweep = -arc.sweep;
            arc
        }),
    }
}
