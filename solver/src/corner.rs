//! Points at which the calculated shear stress has no limit: sharp re-entrant corners, ends of slits,
//! and points where pieces of different moduli meet at an angle.
//!
//! Near a point the warping behaves like `r^λ Φ(θ)`, so the stress like `r^(λ−1)`: without limit for
//! λ < 1. In a sector of modulus g, `Φ″ + λ²Φ = 0`; Φ and gΦ′ are continuous from sector to sector,
//! gΦ′ vanishes on free sides, and both are periodic around a closed point. One material of angle α with
//! a gap: `λ = π/α`.

use sectile_mesh::Point;
use sectile_mesh::corners::{ReentrantCorner, reentrant_corners};
use sectile_mesh::domain::Domain;
use sectile_mesh::junction::{Junction, junctions};

use crate::mixture::Ratio;

/// A point at which the calculated shear stress has no limit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SingularCorner {
    /// The mesh's vertex.
    pub point: u32,
    /// Where it is.
    pub at: Point,
    /// Angle of the material around it, radians.
    pub interior_angle: f64,
    /// Whether different moduli meet there.
    pub mixed: bool,
    /// λ < 1: the stress grows like `r^(λ − 1)`.
    pub exponent: f64,
    /// Distance to the nearest side that does not meet it: the scale of the wall.
    pub wall: f64,
}

/// Exponents this close to 1 count as 1.
const WEAK: f64 = 1e-3;

/// The singular corners of a domain in the order of its points; `ratios` by piece.
#[must_use]
pub fn singular_corners(domain: &Domain, ratios: &[Ratio]) -> Vec<SingularCorner> {
    let modulus = |piece: u32| ratios[piece as usize].g;
    let mixed: Vec<Junction> = if ratios.iter().all(|r| r.g == ratios[0].g) {
        Vec::new()
    } else {
        junctions(domain)
            .into_iter()
            .filter(|j| {
                let first = modulus(j.sectors[0].piece);
                j.sectors.iter().any(|s| modulus(s.piece) != first)
            })
            .collect()
    };
    let is_mixed = |c: &ReentrantCorner| mixed.iter().any(|j| j.point == c.point);
    let plain = reentrant_corners(domain)
        .into_iter()
        .filter(|c| !is_mixed(c))
        .map(|c| SingularCorner {
            point: c.point,
            at: c.at,
            interior_angle: c.interior_angle,
            mixed: false,
            exponent: std::f64::consts::PI / c.interior_angle,
            wall: c.wall,
        });
    let junctions = mixed.iter().filter_map(|j| {
        let sectors: Vec<[f64; 2]> = j
            .sectors
            .iter()
            .map(|s| [s.angle, modulus(s.piece)])
            .collect();
        Some(SingularCorner {
            point: j.point,
            at: j.at,
            interior_angle: j.sectors.iter().map(|s| s.angle).sum(),
            mixed: true,
            exponent: exponent(&sectors, j.closed)?,
            wall: j.wall,
        })
    });
    let mut out: Vec<SingularCorner> = plain.chain(junctions).collect();
    out.sort_by_key(|c| c.point);
    out
}

/// The least λ in (0, 1) of sectors `[angle, g]`; `None` if there is none.
fn exponent(sectors: &[[f64; 2]], closed: bool) -> Option<f64> {
    // What must vanish: starts below zero and reaches it from there at the least λ.
    let miss = |lambda: f64| {
        // Columns carry (Φ, gΦ′/λ) from (1, 0) and from (0, 1).
        let mut m = [[1.0, 0.0], [0.0, 1.0]];
        for &[angle, g] in sectors {
            let (s, c) = (lambda * angle).sin_cos();
            m = m.map(|[phi, flow]| [c * phi + s / g * flow, c * flow - g * s * phi]);
        }
        if closed {
            m[0][0] + m[1][1] - 2.0
        } else {
            m[0][1]
        }
    };
    const STEPS: usize = 500;
    let end = 1.0 - WEAK;
    let at = |k: usize| end * k as f64 / STEPS as f64;
    let k = (1..=STEPS).find(|&k| miss(at(k)) >= 0.0)?;
    let (mut low, mut high) = (at(k - 1), at(k));
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if miss(middle) >= 0.0 {
            high = middle;
        } else {
            low = middle;
        }
    }
    Some(high)
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::exponent;
    use std::f64::consts::{PI, TAU};

    #[test]
    fn one_material_has_the_exponent_of_its_angle() {
        for angle in [1.5 * PI, 1.2 * PI, TAU] {
            let whole = exponent(&[[angle, 3.0]], false).unwrap();
            let split = exponent(&[[0.3 * angle, 3.0], [0.7 * angle, 3.0]], false).unwrap();
            assert!((whole - PI / angle).abs() < 1e-12, "{whole}");
            assert!((split - whole).abs() < 1e-12, "{split}");
        }
        assert_eq!(exponent(&[[0.5 * PI, 1.0]], false), None);
        assert_eq!(exponent(&[[PI, 1.0], [PI, 1.0]], true), None);
    }

    /// Two half planes of different moduli bond along a straight line: no singularity. A bond that meets a
    /// free straight edge at a right angle has none either; at other angles it has where the softer sector
    /// is the wider one: tan λα₁ · g₁ + tan λα₂ · g₂ = 0.
    #[test]
    fn two_materials_follow_their_tangents() {
        assert_eq!(exponent(&[[PI, 1.0], [PI, 30.0]], true), None);
        assert_eq!(exponent(&[[0.5 * PI, 1.0], [0.5 * PI, 30.0]], false), None);
        let (a, b, g) = (0.25 * PI, 0.75 * PI, 30.0);
        let lambda = exponent(&[[a, g], [b, 1.0]], false).unwrap();
        assert!((g * (lambda * a).tan() + (lambda * b).tan()).abs() < 1e-6);
        assert!(lambda > 0.5 && lambda < 1.0, "{lambda}");
        assert_eq!(exponent(&[[a, 1.0], [b, g]], false), None);
    }
}
