//! Integrals over triangles and between a chord and its arc.

use sectile_mesh::{Point, Vector};

use super::face::{Cone, Plane};
use crate::element::quadrature::gauss_legendre;

/// A triangle, anticlockwise.
pub type Triangle = [Point; 3];

/// Its area.
#[must_use]
pub fn area(t: &Triangle) -> f64 {
    0.5 * (t[1] - t[0]).cross(t[2] - t[0])
}

/// Its centroid.
#[must_use]
pub fn centroid(t: &Triangle) -> Point {
    Point::new(
        (t[0].x + t[1].x + t[2].x) / 3.0,
        (t[0].y + t[1].y + t[2].y) / 3.0,
    )
}

/// `∫min(planes) dA`: the triangle is divided by the line on which two of them are equal, and so on in
/// either part.
#[must_use]
pub fn of_least(t: &Triangle, planes: &[Plane]) -> f64 {
    let Some((first, rest)) = planes.split_first() else {
        return 0.0;
    };
    if rest.is_empty() {
        return area(t) * first.on(centroid(t));
    }
    // (polygon, its least plane so far, how many others have been compared)
    let mut parts = vec![(t.to_vec(), *first, 0)];
    let mut sum = 0.0;
    while let Some((polygon, least, compared)) = parts.pop() {
        let Some(other) = rest.get(compared) else {
            sum += of_plane(&polygon, &least);
            continue;
        };
        // Rounding gives a difference of nothing any sign, corner by corner.
        let over: Vec<f64> = polygon
            .iter()
            .map(|&p| {
                let (a, b) = (least.on(p), other.on(p));
                let noise = 64.0 * f64::EPSILON * a.abs().max(b.abs());
                if (a - b).abs() > noise { a - b } else { 0.0 }
            })
            .collect();
        if over.iter().all(|&d| d <= 0.0) {
            parts.push((polygon, least, compared + 1));
        } else if over.iter().all(|&d| d >= 0.0) {
            parts.push((polygon, *other, compared + 1));
        } else {
            let [below, above] = divided(&polygon, &over);
            parts.push((below, least, compared + 1));
            parts.push((above, *other, compared + 1));
        }
    }
    sum
}

/// `∫plane dA` over a convex polygon.
fn of_plane(polygon: &[Point], plane: &Plane) -> f64 {
    polygon
        .windows(2)
        .skip(1)
        .map(|w| {
            let t = [polygon[0], w[0], w[1]];
            area(&t) * plane.on(centroid(&t))
        })
        .sum()
}

/// The parts of a convex polygon where a linear function, given at its corners, is negative and
/// positive.
fn divided(polygon: &[Point], values: &[f64]) -> [Vec<Point>; 2] {
    let n = polygon.len();
    let mut parts = [Vec::with_capacity(n + 1), Vec::with_capacity(n + 1)];
    for i in 0..n {
        let j = (i + 1) % n;
        let (u, v) = (values[i], values[j]);
        if u <= 0.0 {
            parts[0].push(polygon[i]);
        }
        if u >= 0.0 {
            parts[1].push(polygon[i]);
        }
        if u * v < 0.0 {
            let p = polygon[i].lerp(polygon[j], u / (u - v));
            parts[0].push(p);
            parts[1].push(p);
        }
    }
    parts
}

/// `∫cone dA` and a bound on its rounding: from the centre c each edge, h off it and from s to t along
/// its line, gives `h/6 [s √(h²+s²) + h² arsinh(s/h)]`.
#[must_use]
pub fn of_cone(t: &Triangle, cone: &Cone) -> (f64, f64) {
    let (mut sum, mut size) = (0.0, 0.0);
    for i in 0..3 {
        let (a, b) = (t[i] - cone.centre, t[(i + 1) % 3] - cone.centre);
        let edge = b - a;
        let length = edge.length();
        if length == 0.0 {
            continue;
        }
        let along: Vector = edge * (1.0 / length);
        let h = a.cross(along);
        let part = |s: f64, r: f64| {
            let bend = if h == 0.0 {
                0.0
            } else {
                h * h * (s / h.abs()).asinh()
            };
            h / 6.0 * (s * r + bend)
        };
        let (p, q) = (
            part(a.dot(along), a.length()),
            part(b.dot(along), b.length()),
        );
        sum += q - p;
        size += p.abs() + q.abs();
    }
    let flat = area(t) * (cone.base - cone.sense * cone.radius);
    let rounding = 8.0 * f64::EPSILON * (size + flat.abs());
    (flat + cone.sense * sum, rounding)
}

/// Area between the chord of half-angle β and its arc of radius R, and the integral over it of the
/// distance from the arc.
///
/// Along the ray at angle θ from the middle the chord is `s = R (cos θ − cos β)/cos θ` below the arc.
#[must_use]
pub fn of_segment(radius: f64, half_angle: f64) -> [f64; 2] {
    let mut sum = [0.0; 2];
    for (x, w) in gauss_legendre(12) {
        let theta = half_angle * (2.0 * x - 1.0);
        let s =
            radius * 2.0 * (0.5 * (half_angle + theta)).sin() * (0.5 * (half_angle - theta)).sin()
                / theta.cos();
        let w = w * 2.0 * half_angle;
        sum[0] += w * s * (radius - 0.5 * s);
        sum[1] += w * s * s * (0.5 * radius - s / 3.0);
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    const T: Triangle = [
        Point::new(0.0, 0.0),
        Point::new(2.0, 0.0),
        Point::new(0.0, 1.0),
    ];

    fn plane(value: f64, x: f64, y: f64) -> Plane {
        Plane {
            at: Point::default(),
            value,
            slope: Vector::new(x, y),
        }
    }

    #[test]
    fn least_of_planes_makes_a_roof() {
        // Over the square of side 2 the distance from the nearest side is a pyramid of height 1: 4/3.
        let sides = [
            plane(0.0, 1.0, 0.0),
            plane(2.0, -1.0, 0.0),
            plane(0.0, 0.0, 1.0),
            plane(2.0, 0.0, -1.0),
            // Once more, and one that is nowhere least.
            plane(0.0, 1.0, 0.0),
            plane(9.0, 0.1, 0.0),
        ];
        let p = |x, y| Point::new(x, y);
        let whole = of_least(&[p(0.0, 0.0), p(2.0, 0.0), p(2.0, 2.0)], &sides)
            + of_least(&[p(0.0, 0.0), p(2.0, 2.0), p(0.0, 2.0)], &sides);
        assert_relative_eq!(whole, 4.0 / 3.0, max_relative = 1e-15);
        assert_relative_eq!(of_least(&T, &[plane(3.0, 0.0, 0.0)]), 3.0);
        // Planes that differ by rounding alone do not break a polygon up.
        let nearly = |k: f64| plane(0.3 + k * 1e-16, 0.1 - k * 1e-17, 0.2 + k * 2e-17);
        let one = of_least(&T, &[sides[0], sides[2], nearly(0.0)]);
        let mut many = vec![sides[0], sides[2]];
        many.extend((0..9).map(|k| nearly(f64::from(k * k % 5))));
        assert_relative_eq!(of_least(&T, &many), one, max_relative = 1e-14);
    }

    #[test]
    fn cones_integrate_to_what_a_fine_division_gives() {
        for (centre, sense) in [
            (Point::new(0.0, 0.0), 1.0),
            (Point::new(0.5, 0.25), 1.0),
            (Point::new(3.0, -1.0), -1.0),
            (Point::new(1.0, 0.0), -1.0),
        ] {
            let cone = Cone {
                centre,
                radius: 4.0,
                sense,
                base: 0.5,
            };
            // Cones are smooth away from the centre: the error of the midpoint rule falls as n⁻².
            let n = 400;
            let mut sum = 0.0;
            for i in 0..n {
                for j in 0..n - i {
                    let at = |i: usize, j: usize| {
                        Point::new(2.0 * i as f64 / n as f64, j as f64 / n as f64)
                    };
                    let lower = [at(i, j), at(i + 1, j), at(i, j + 1)];
                    sum += area(&lower) * cone.on(centroid(&lower));
                    if j + 1 < n - i {
                        let upper = [at(i + 1, j), at(i + 1, j + 1), at(i, j + 1)];
                        sum += area(&upper) * cone.on(centroid(&upper));
                    }
                }
            }
            let (exact, rounding) = of_cone(&T, &cone);
            assert_relative_eq!(exact, sum, max_relative = 1e-6);
            assert!(rounding < 1e-13);
        }
    }

    #[test]
    fn segments_close_the_gap_between_polygon_and_circle() {
        // A disc of radius R under its cone holds πR³/3; a hexagon of it and six segments as much.
        let r = 3.0;
        let cone = Cone {
            centre: Point::default(),
            radius: r,
            sense: -1.0,
            base: 0.0,
        };
        let third = std::f64::consts::FRAC_PI_3;
        let corner = |k: f64| Point::default() + Vector::at_angle(k * third) * r;
        let t = [Point::default(), corner(0.0), corner(1.0)];
        let [flat, heap] = of_segment(r, 0.5 * third);
        let pi = std::f64::consts::PI;
        assert_relative_eq!(6.0 * (area(&t) + flat), pi * r * r, max_relative = 1e-14);
        assert_relative_eq!(
            6.0 * (of_cone(&t, &cone).0 + heap),
            pi * r.powi(3) / 3.0,
            max_relative = 1e-14
        );
        // A flat arc: area 2/3 chord·rise, and the integral 4/15 · chord · rise².
        let beta = 1e-6;
        let (chord, rise) = (2.0 * r * beta, 0.5 * r * beta * beta);
        let [flat, heap] = of_segment(r, beta);
        assert_relative_eq!(flat, 2.0 / 3.0 * chord * rise, max_relative = 1e-11);
        assert_relative_eq!(heap, 4.0 / 15.0 * chord * rise * rise, max_relative = 1e-11);
    }
}
