//! The map of the reference triangle onto a mesh triangle, exact on circular sides.
//!
//! Reference corners: 0 at (0,0), 1 at (1,0), 2 at (0,1). A circular side adds its bulge (see
//! [`crate::arc`]) and nothing on the other two sides.

use crate::arc::Bulge;
use crate::mesh::{Mesh, NONE};
use crate::outline::side::Circle;
use crate::point::{Point, Vector};

/// Position and derivative of a triangle's map at a reference point.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct MapPoint {
    /// Position.
    pub x: f64,
    /// Position.
    pub y: f64,
    /// `[∂x/∂ξ, ∂x/∂η, ∂y/∂ξ, ∂y/∂η]`.
    pub jacobian: [f64; 4],
    /// Its determinant.
    pub det: f64,
}

impl MapPoint {
    /// The gradient of a function from its reference derivatives.
    #[must_use]
    pub fn gradient(&self, d_xi: f64, d_eta: f64) -> [f64; 2] {
        let [a, b, c, d] = self.jacobian;
        [
            (d * d_xi - c * d_eta) / self.det,
            (a * d_eta - b * d_xi) / self.det,
        ]
    }

    /// Piola's transform of a reference field: fluxes through sides are kept, divergence becomes
    /// `div̂ / det`.
    #[must_use]
    pub fn piola(&self, s: [f64; 2]) -> [f64; 2] {
        let [a, b, c, d] = self.jacobian;
        [
            (a * s[0] + b * s[1]) / self.det,
            (c * s[0] + d * s[1]) / self.det,
        ]
    }

    /// Largest factor by which Piola's transform can enlarge `∫|σ|²` here: `σ_max(F)² / det`.
    #[must_use]
    pub fn piola_stretch(&self) -> f64 {
        let [a, b, c, d] = self.jacobian;
        let half = 0.5 * (a * a + b * b + c * c + d * d);
        (half + (half * half - self.det * self.det).max(0.0).sqrt()) / self.det
    }
}

/// The map of one triangle, exact on circular sides.
#[derive(Clone, Copy, Debug)]
pub struct TriangleMap {
    corners: [Point; 3],
    /// The bulge of side k, from corner k+1 to k+2.
    bulges: [Option<Bulge>; 3],
}

impl TriangleMap {
    /// The map onto triangle `t` of `mesh`, with the vertices and circles of the mesh seen at other
    /// coordinates (the mesh's own, for no change).
    #[must_use]
    pub fn of(mesh: &Mesh, t: usize, vertices: &[Point], circles: &[Circle]) -> Self {
        let corners = mesh.triangles[t].map(|i| vertices[i as usize]);
        let mut bulges = [None; 3];
        for k in 0..3 {
            let side = mesh.sides[mesh.triangle_sides[t][k] as usize];
            if side.circle != NONE {
                bulges[k] = Some(Bulge::new(
                    circles[side.circle as usize],
                    corners[(k + 1) % 3],
                    corners[(k + 2) % 3],
                ));
            }
        }
        Self { corners, bulges }
    }

    /// Whether the map is affine.
    #[must_use]
    pub fn is_straight(&self) -> bool {
        self.bulges.iter().all(Option::is_none)
    }

    /// The map at (ξ, η).
    #[must_use]
    pub fn at(&self, xi: f64, eta: f64) -> MapPoint {
        let [p0, p1, p2] = self.corners;
        let (e1, e2) = (p1 - p0, p2 - p0);
        let mut x = p0 + e1 * xi + e2 * eta;
        let (mut dxi, mut deta) = (e1, e2);
        let lambda = [1.0 - xi - eta, xi, eta];
        const D: [[f64; 2]; 3] = [[-1.0, -1.0], [1.0, 0.0], [0.0, 1.0]];
        for k in 0..3 {
            if let Some(bulge) = &self.bulges[k] {
                let (a, b) = ((k + 1) % 3, (k + 2) % 3);
                let (la, lb) = (lambda[a], lambda[b]);
                let (g, dg) = bulge.at(0.5 * (1.0 + lb - la));
                x = x + g * (la * lb);
                let partial = |c: usize| -> Vector {
                    g * (D[a][c] * lb + la * D[b][c]) + dg * (0.5 * la * lb * (D[b][c] - D[a][c]))
                };
                dxi += partial(0);
                deta += partial(1);
            }
        }
        MapPoint {
            x: x.x,
            y: x.y,
            jacobian: [dxi.x, deta.x, dxi.y, deta.y],
            det: dxi.cross(deta),
        }
    }

    /// The map at each of `points`, into `out`.
    pub fn fill(&self, points: &[[f64; 2]], out: &mut Vec<MapPoint>) {
        out.clear();
        if self.is_straight() {
            let base = self.at(0.0, 0.0);
            let [a, b, c, d] = base.jacobian;
            out.extend(points.iter().map(|&[xi, eta]| MapPoint {
                x: base.x + a * xi + b * eta,
                y: base.y + c * xi + d * eta,
                ..base
            }));
        } else {
            out.extend(points.iter().map(|&[xi, eta]| self.at(xi, eta)));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn curved() -> TriangleMap {
        let corners = [
            Point::new(0.1, 0.05),
            Point::new(1.0, 0.0),
            Point::new(0.0, 1.0),
        ];
        let unit = Circle {
            centre: Point::default(),
            radius: 1.0,
        };
        TriangleMap {
            corners,
            bulges: [Some(Bulge::new(unit, corners[1], corners[2])), None, None],
        }
    }

    #[test]
    fn the_curved_side_lies_on_its_circle_and_the_others_are_straight() {
        let map = curved();
        for i in 0..=10 {
            let t = f64::from(i) / 10.0;
            let p = map.at(1.0 - t, t);
            assert!((p.x.hypot(p.y) - 1.0).abs() < 1e-15);
            let q = map.at(t, 0.0);
            assert!((q.x - (0.1 + 0.9 * t)).abs() < 1e-15);
        }
    }

    #[test]
    fn derivatives_agree_with_differences() {
        let map = curved();
        let h = 1e-6;
        for &(x, y) in &[(0.2, 0.3), (0.7, 0.2), (0.01, 0.98)] {
            let p = map.at(x, y);
            let (e, w) = (map.at(x + h, y), map.at(x - h, y));
            let (n, s) = (map.at(x, y + h), map.at(x, y - h));
            let d = [
                (e.x - w.x) / (2.0 * h),
                (n.x - s.x) / (2.0 * h),
                (e.y - w.y) / (2.0 * h),
                (n.y - s.y) / (2.0 * h),
            ];
            for (a, b) in p.jacobian.iter().zip(d) {
                assert!((a - b).abs() < 1e-9);
            }
        }
    }
}
