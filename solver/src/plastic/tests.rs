//! Plastic moduli, neutral axes and the interaction surface against closed forms. Each by elementary
//! integration unless a source is named.
#![allow(clippy::unwrap_used)]

use std::f64::consts::{FRAC_PI_2, FRAC_PI_3, FRAC_PI_4, PI, SQRT_2};

use approx::assert_relative_eq;
use sectile_mesh::domain::{Domain, build};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::shape::{bar, circle, polygon, tube};
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};

use super::axis::plastic_axis;
use super::interaction::{PlasticState, Surface};
use super::{Plastic, analyse};
use crate::property::area::area_moments;

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn piece(outline: Outline, material: usize) -> Piece {
    Piece {
        name: format!("piece {material}"),
        outline,
        material,
    }
}

fn solid(corners: &[[f64; 2]]) -> Domain {
    let corners: Vec<Point> = corners.iter().map(|&[x, y]| p(x, y)).collect();
    domain(Outline {
        outer: polygon(&corners),
        holes: Vec::new(),
    })
}

fn domain(outline: Outline) -> Domain {
    build(&[piece(outline, 0)]).unwrap()
}

fn rectangle(b: f64, h: f64) -> Domain {
    domain(bar(p(0.0, 0.0), b, h))
}

fn disc(radius: f64) -> Domain {
    domain(Outline {
        outer: circle(p(0.0, 0.0), 2.0 * radius),
        holes: Vec::new(),
    })
}

/// The half disc of radius 1 with x > 0.
fn half_disc() -> Domain {
    let mut outline = Outline {
        outer: polygon(&[p(0.0, -1.0), p(0.0, 1.0)]),
        holes: Vec::new(),
    };
    outline.outer.sides = vec![
        Side {
            from: p(0.0, -1.0),
            to: p(0.0, 1.0),
            arc: Some(Arc {
                circle: Circle {
                    centre: p(0.0, 0.0),
                    radius: 1.0,
                },
                sweep: PI,
            }),
            corner: 0,
        },
        Side {
            from: p(0.0, 1.0),
            to: p(0.0, -1.0),
            arc: None,
            corner: 1,
        },
    ];
    domain(outline)
}

/// Flanges 100 × 10, web 6 × 180.
fn i_section() -> Domain {
    solid(&[
        [-50.0, 0.0],
        [50.0, 0.0],
        [50.0, 10.0],
        [3.0, 10.0],
        [3.0, 190.0],
        [50.0, 190.0],
        [50.0, 200.0],
        [-50.0, 200.0],
        [-50.0, 190.0],
        [-3.0, 190.0],
        [-3.0, 10.0],
        [-50.0, 10.0],
    ])
}

/// Rectangle 100 × 200, its lower half yielding at 200, its upper half at 100.
fn two_yields() -> Domain {
    build(&[
        piece(bar(p(0.0, 50.0), 100.0, 100.0), 0),
        piece(bar(p(0.0, 150.0), 100.0, 100.0), 1),
    ])
    .unwrap()
}

fn geometric(domain: &Domain) -> Plastic {
    analyse(domain, &[None], 0, area_moments(domain, |_| 1.0).centroid).unwrap()
}

fn surface(domain: &Domain) -> Surface {
    geometric(domain).surface
}

fn shape_factors(domain: &Domain) -> [f64; 2] {
    let m = area_moments(domain, |_| 1.0);
    let [left, right, bottom, top] = m.extent;
    let [z_x, z_y] = geometric(domain).moduli();
    [
        z_x / (m.xx / top.max(-bottom)),
        z_y / (m.yy / right.max(-left)),
    ]
}

#[test]
fn shape_factors_of_simple_sections() {
    // Every one in e.g. J. Baker & J. Heyman, Plastic Design of Frames 1, 1969 (from memory), and by
    // elementary integration.
    let close = |domain: &Domain, expected: [f64; 2]| {
        for (ours, exact) in shape_factors(domain).into_iter().zip(expected) {
            assert_relative_eq!(ours, exact, max_relative = 1e-14);
        }
    };
    close(&rectangle(3.0, 7.0), [1.5, 1.5]);
    close(&disc(2.5), [16.0 / (3.0 * PI); 2]);
    let diamond = solid(&[[1.0, 0.0], [0.0, 1.0], [-1.0, 0.0], [0.0, -1.0]]);
    close(&diamond, [2.0, 2.0]);
    // A tube with r of R: (4/3)(R³ − r³) R / ((π/4)(R⁴ − r⁴)).
    let (outer, inner) = (1.0_f64, 0.6_f64);
    let exact = 16.0 / (3.0 * PI) * outer * (outer.powi(3) - inner.powi(3))
        / (outer.powi(4) - inner.powi(4));
    close(&domain(tube(p(3.0, -4.0), 2.0, 0.4)), [exact; 2]);
    // Towards a thin tube 4/π.
    let thin = shape_factors(&domain(tube(p(0.0, 0.0), 2.0, 1e-6)))[0];
    assert_relative_eq!(thin, 4.0 / PI, max_relative = 2e-6);
    // A triangle about an axis parallel to its base: (2 − √2) · 4.
    let triangle = solid(&[[0.0, 0.0], [5.0, 0.0], [1.0, 3.0]]);
    assert_relative_eq!(
        shape_factors(&triangle)[0],
        4.0 * (2.0 - SQRT_2),
        max_relative = 1e-13
    );
}

#[test]
fn moduli_and_neutral_axes() {
    let [x, y] = geometric(&i_section()).moduli();
    assert_relative_eq!(x, 238_600.0, max_relative = 1e-14);
    assert_relative_eq!(y, 51_620.0, max_relative = 1e-14);

    // Tee, stem 10 × 140, flange 120 × 12 on top: the axis lies within the flange.
    let tee = solid(&[
        [-5.0, 0.0],
        [5.0, 0.0],
        [5.0, 140.0],
        [60.0, 140.0],
        [60.0, 152.0],
        [-60.0, 152.0],
        [-60.0, 140.0],
        [-5.0, 140.0],
    ]);
    let plastic = geometric(&tee);
    let centroid = area_moments(&tee, |_| 1.0).centroid;
    assert_relative_eq!(
        centroid.y + plastic.axes[0].offset,
        140.0 + 20.0 / 120.0,
        max_relative = 1e-14
    );
    let [x, y] = plastic.moduli();
    assert_relative_eq!(x, 106_636.0 + 2.0 / 3.0, max_relative = 1e-14);
    assert_relative_eq!(y, 46_700.0, max_relative = 1e-14);

    // Unequal I: 100 × 10 below, 60 × 10 above, web 8 × 180. Half of 3040 is 1000 below and 520 of
    // web: 65 above the flange.
    let unequal = solid(&[
        [-50.0, 0.0],
        [50.0, 0.0],
        [50.0, 10.0],
        [4.0, 10.0],
        [4.0, 190.0],
        [30.0, 190.0],
        [30.0, 200.0],
        [-30.0, 200.0],
        [-30.0, 190.0],
        [-4.0, 190.0],
        [-4.0, 10.0],
        [-50.0, 10.0],
    ]);
    let plastic = geometric(&unequal);
    let centroid = area_moments(&unequal, |_| 1.0).centroid;
    assert_relative_eq!(
        centroid.y + plastic.axes[0].offset,
        75.0,
        max_relative = 1e-14
    );
    let exact = 1000.0 * 70.0 + 520.0 * 32.5 + 8.0 * 115.0 * 57.5 + 600.0 * 120.0;
    assert_relative_eq!(plastic.moduli()[0], exact, max_relative = 1e-14);

    // Half disc: the halving line x = c has θ − sin θ cos θ = π/4 with c = cos θ, and
    // Z = (4/3) sin³θ − 2/3.
    let half = half_disc();
    let plastic = geometric(&half);
    let theta = super::root::zero(|t| t - t.sin() * t.cos() - FRAC_PI_4, 0.0, PI);
    let centroid = area_moments(&half, |_| 1.0).centroid;
    assert_relative_eq!(
        centroid.x + plastic.axes[1].offset,
        theta.cos(),
        max_relative = 1e-14
    );
    assert_relative_eq!(
        plastic.moduli()[1],
        4.0 / 3.0 * theta.sin().powi(3) - 2.0 / 3.0,
        max_relative = 1e-13
    );
    assert_relative_eq!(plastic.moduli()[0], 2.0 / 3.0, max_relative = 1e-14);
}

#[test]
fn any_direction_of_the_neutral_axis() {
    // A square about an axis at 45°: side³ √2/6; a disc about any: (4/3) r³.
    let z =
        |domain: &Domain, direction: f64| plastic_axis(&surface(domain).slices(direction)).moment;
    assert_relative_eq!(
        z(&rectangle(2.0, 2.0), FRAC_PI_4),
        8.0 * SQRT_2 / 6.0,
        max_relative = 1e-14
    );
    for k in 0..24 {
        let exact = 4.0 / 3.0 * 1.5_f64.powi(3);
        assert_relative_eq!(
            z(&disc(1.5), 0.1 + f64::from(k) * FRAC_PI_3 / 4.0),
            exact,
            max_relative = 1e-13
        );
    }
    // Turning the axis by half a turn exchanges tension and compression.
    let surface = surface(&i_section());
    let (a, b) = (surface.at(0.7, 11.0), surface.at(0.7 + PI, -11.0));
    for (a, b) in [(a.n, b.n), (a.mx, b.mx), (a.my, b.my)] {
        assert_relative_eq!(a, -b, max_relative = 1e-12);
    }
}

#[test]
fn a_line_in_a_gap_is_its_middle() {
    let two = build(&[
        piece(bar(p(0.0, -50.0), 30.0, 10.0), 0),
        piece(bar(p(0.0, 70.0), 30.0, 10.0), 0),
    ])
    .unwrap();
    let plastic = geometric(&two);
    assert_relative_eq!(plastic.axes[0].offset, 0.0, epsilon = 1e-12);
    assert_relative_eq!(plastic.moduli()[0], 300.0 * 120.0, max_relative = 1e-14);
}

#[test]
fn two_yield_stresses() {
    // Force below y = 75: 100·75·200 = 1.5e6 = 100·25·200 + 100·100·100.
    let domain = two_yields();
    let yields = [Some(200.0), Some(100.0)];
    for reference in [0, 1] {
        let plastic = analyse(&domain, &yields, reference, p(0.0, 0.0)).unwrap();
        assert!(!plastic.uniform);
        assert_relative_eq!(plastic.surface.squash(), 3e6, max_relative = 1e-15);
        assert_relative_eq!(plastic.axes[0].offset, 75.0, max_relative = 1e-14);
        assert_relative_eq!(plastic.axes[0].moment, 137.5e6, max_relative = 1e-14);
        assert_relative_eq!(
            plastic.moduli()[0],
            137.5e6 / yields[reference].unwrap(),
            max_relative = 1e-14
        );
        // About y each half has Z = b²h/4.
        assert_relative_eq!(
            plastic.axes[1].moment,
            300.0 * 250_000.0,
            max_relative = 1e-14
        );
        assert_relative_eq!(plastic.axes[1].offset, 0.0, epsilon = 1e-12);
        // N_p acts at (200·50 + 100·150)/300.
        assert_relative_eq!(
            plastic.surface.centre().y,
            250.0 / 3.0,
            max_relative = 1e-14
        );
    }
    // Equal yield stresses are one section: the interface does not show.
    let joined = analyse(&domain, &[Some(2.0), Some(2.0)], 0, p(0.0, 100.0)).unwrap();
    let whole = analyse(&rectangle(100.0, 200.0), &[Some(2.0)], 0, p(0.0, 0.0)).unwrap();
    assert!(joined.uniform);
    for i in 0..2 {
        assert_relative_eq!(joined.moduli()[i], whole.moduli()[i], max_relative = 1e-14);
    }
}

#[test]
fn yields_that_are_not_all_stated() {
    let domain = two_yields();
    assert!(analyse(&domain, &[Some(1.0), None], 0, p(0.0, 0.0)).is_none());
    assert!(analyse(&domain, &[None, None], 0, p(0.0, 0.0)).is_none());
    assert!(analyse(&rectangle(1.0, 1.0), &[], 0, p(0.0, 0.0)).is_some());
}

#[test]
fn rectangle_under_axial_force_and_two_moments() {
    // m_x + n² + ¾ m_y² = 1 where the neutral axis meets the two sides parallel to y, |n| + 3/2 |m_y| ≤ 1:
    // W. F. Chen & T. Atsuta, Theory of Beam-Columns 2, 1977 (from memory), and elementary. With m_y = 0
    // it is 1 − n².
    let (b, h, f) = (30.0, 70.0, 2.0);
    let surface = analyse(&rectangle(b, h), &[Some(f)], 0, p(0.0, 0.0))
        .unwrap()
        .surface;
    let (n_p, mx_p, my_p) = (f * b * h, f * b * h * h / 4.0, f * h * b * b / 4.0);
    assert_relative_eq!(surface.squash(), n_p, max_relative = 1e-15);
    for (n, my) in [
        (0.0, 0.0),
        (0.3, 0.0),
        (-0.6, 0.0),
        (0.0, 0.5),
        (0.2, -0.5),
        (-0.5, 0.3),
        (0.85, 0.1),
    ] {
        let mx = 1.0 - n * n - 0.75 * my * my;
        for grown in [1.0, 0.1, 250.0] {
            let collapse = surface
                .collapse(grown * n * n_p, grown * mx * mx_p, grown * my * my_p)
                .unwrap();
            assert_relative_eq!(collapse.factor, 1.0 / grown, max_relative = 2e-15);
            let state = collapse.state.unwrap();
            assert_relative_eq!(state.n, n * n_p, epsilon = 1e-6 * n_p);
            assert_relative_eq!(state.mx, mx * mx_p, epsilon = 1e-6 * mx_p);
            assert_relative_eq!(state.my, my * my_p, epsilon = 1e-6 * my_p);
        }
        // The curve at this axial force passes within its deviation.
        for point in surface.moments_at(n * n_p, 1e-3) {
            let (x, y) = (point.mx / mx_p, point.my / my_p);
            if n.abs() + 1.5 * y.abs() <= 1.0 {
                assert_relative_eq!(x.abs(), 1.0 - n * n - 0.75 * y * y, epsilon = 1e-13);
            }
        }
    }
    let curve = surface.force_and_moment(0.0, 1e-3);
    assert_relative_eq!(curve[0].n, -n_p, max_relative = 1e-14);
    for point in &curve {
        let n = point.n / n_p;
        assert_relative_eq!(point.mx / mx_p, 1.0 - n * n, epsilon = 1e-14);
        assert_relative_eq!(point.my, 0.0, epsilon = 1e-12 * my_p);
    }
}

#[test]
fn a_disc_under_axial_force_and_moment() {
    // Neutral axis at r cos θ: n = 1 − 2(θ − sin θ cos θ)/π, m = sin³θ.
    let surface = surface(&disc(3.0));
    let (n_p, m_p) = (PI * 9.0, 36.0);
    for k in 1..20 {
        let theta = f64::from(k) * PI / 20.0;
        let n = -(1.0 - 2.0 * (theta - theta.sin() * theta.cos()) / PI);
        let m = theta.sin().powi(3);
        let turn = 0.3 * f64::from(k);
        let (x, y) = (m * turn.cos(), m * turn.sin());
        let collapse = surface.collapse(n * n_p, x * m_p, y * m_p).unwrap();
        assert_relative_eq!(collapse.factor, 1.0, max_relative = 1e-14);
    }
}

#[test]
fn axial_force_alone_and_nothing() {
    let surface = surface(&i_section());
    for n in [2.0, -2.0] {
        let collapse = surface.collapse(n, 0.0, 0.0).unwrap();
        assert_relative_eq!(collapse.factor, 1540.0, max_relative = 1e-14);
        assert!(collapse.state.is_none());
        // A moment that is small beyond notice changes the factor by as little.
        let nearly = surface.collapse(n, 1e-9, -1e-9).unwrap();
        assert_relative_eq!(nearly.factor, 1540.0, max_relative = 1e-8);
    }
    assert!(surface.collapse(0.0, 0.0, 0.0).is_none());
}

/// What [`Surface::collapse`] says must be no more than any strain rate allows and no less than the
/// points of the surface allow.
#[test]
fn the_factor_lies_between_both_theorems_of_limit_analysis() {
    let l_shape = solid(&[
        [0.0, 0.0],
        [80.0, 0.0],
        [80.0, 8.0],
        [10.0, 8.0],
        [10.0, 120.0],
        [0.0, 120.0],
    ]);
    let strip = rectangle(1.0, 1000.0);
    for (domain, yields, origin) in [
        (&l_shape, vec![Some(3.0)], p(40.0, 20.0)),
        (&i_section(), vec![Some(3.0)], p(0.0, 100.0)),
        (&two_yields(), vec![Some(200.0), Some(100.0)], p(10.0, 90.0)),
        (&strip, vec![Some(1.0)], p(0.0, 0.0)),
    ] {
        let surface = analyse(domain, &yields, 0, origin).unwrap().surface;
        for k in 0..60 {
            let angle = 0.37 + f64::from(k);
            let slices = surface.slices(0.0);
            let m = (slices.high - slices.low) * surface.squash() * 0.2;
            let forces = [
                surface.squash() * (1.7 * f64::from(k)).sin(),
                m * angle.cos() * 10.0_f64.powi(k % 5 - 2),
                m * angle.sin(),
            ];
            let [n, mx, my] = forces;
            let collapse = surface.collapse(n, mx, my).unwrap();
            let state = collapse.state.unwrap();
            // The state lies on the ray of the forces.
            for (ours, wanted, scale) in [
                (state.n, n, surface.squash()),
                (state.mx, mx, m),
                (state.my, my, m),
            ] {
                assert_relative_eq!(
                    ours,
                    collapse.factor * wanted,
                    epsilon = 1e-5 * (scale + (collapse.factor * wanted).abs())
                );
            }
            // No neutral axis gives less.
            for direction in 0..90 {
                let direction = f64::from(direction) * PI / 45.0;
                let slices = surface.slices(direction);
                for c in 0..=20 {
                    let c = slices.low + f64::from(c) * 0.05 * (slices.high - slices.low);
                    let s = surface.at(direction, c);
                    let work = s.moment() - c * s.n;
                    let ours = PlasticState { n, mx, my, ..s };
                    let done = ours.moment() - c * n;
                    if done > 0.0 {
                        assert!(work / done >= collapse.factor * (1.0 - 1e-12));
                    }
                }
            }
        }
    }
}

#[test]
fn curves_are_convex_closed_and_as_close_as_asked() {
    let surface = surface(&i_section());
    for share in [0.0, 0.4, -0.9] {
        let n = share * surface.squash();
        let curve = surface.moments_at(n, 1e-3);
        let at = |i: usize| {
            let s = curve[i % curve.len()];
            assert_relative_eq!(s.n, n, epsilon = 1e-12 * surface.squash());
            p(s.my, s.mx)
        };
        for i in 0..curve.len() {
            let (a, b, c) = (at(i), at(i + 1), at(i + 2));
            assert!((b - a).cross(c - b) >= -1e-9 * 51_620.0 * 238_600.0, "{i}");
        }
        // The middle of each chord may grow to the curve by little.
        for i in 0..curve.len() {
            let middle = at(i).lerp(at(i + 1), 0.5);
            let factor = surface.collapse(n, middle.y, middle.x).unwrap().factor;
            assert!(factor < 1.002 && factor > 1.0 - 1e-10, "{i} {factor}");
        }
    }
    // At the ends the curve is a point.
    assert_eq!(surface.moments_at(surface.squash(), 1e-3).len(), 1);
}

#[test]
fn sections_far_from_the_origin_and_of_any_size() {
    for scale in [1e-3, 1.0, 1e3] {
        let shift = Vector::new(1e3 * scale, -2e3 * scale);
        let corners = [[0.0, 0.0], [8.0, 0.0], [8.0, 1.0], [1.0, 5.0]];
        let plain = geometric(&solid(&corners));
        let moved = geometric(&solid(
            &corners.map(|[x, y]| [x * scale + shift.x, y * scale + shift.y]),
        ));
        for i in 0..2 {
            assert_relative_eq!(
                moved.moduli()[i],
                plain.moduli()[i] * scale.powi(3),
                max_relative = 1e-11
            );
        }
        let factor = |plastic: &Plastic, s: f64| {
            let forces = (3.0 * s * s, -2.0 * s.powi(3), 5.0 * s.powi(3));
            let (n, mx, my) = forces;
            plastic.surface.collapse(n, mx, my).unwrap().factor
        };
        assert_relative_eq!(
            factor(&moved, scale),
            factor(&plain, 1.0),
            max_relative = 1e-11
        );
    }
    assert_relative_eq!(
        geometric(&disc(1e-3)).axes[1].moment,
        4e-9 / 3.0,
        max_relative = 1e-13
    );
    assert_relative_eq!(
        plastic_axis(&surface(&disc(1.0)).slices(FRAC_PI_2)).offset,
        0.0,
        epsilon = 1e-13
    );
}
