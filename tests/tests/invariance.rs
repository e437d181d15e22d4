//! What must not depend on how a section is placed, written or solved: figures follow the tensor laws
//! under shift, turn, mirror and scale; the numbering of corners, a needless cut through the material
//! and the number of threads change nothing. Exact figures to 1e-9, bounded ones by their enclosures.

#![allow(clippy::unwrap_used)]

use proptest::prelude::*;
use proptest::test_runner::RngSeed;
use sectile_mesh::domain::build;
use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::{Point, Vector};
use sectile_solver::figure::{Figure, Trust};
use sectile_solver::material::Material;
use sectile_solver::quantity::{Dimension, Quantity};
use sectile_solver::solution::{Settings, Solution, solve};

/// Outer edge first, then the holes.
type Loops = Vec<Vec<Corner>>;

const EXACT: f64 = 1e-9;

fn corner(x: f64, y: f64) -> Corner {
    Corner {
        at: Point::new(x, y),
        round: None,
        via: None,
    }
}

fn rounded(x: f64, y: f64, round: f64) -> Corner {
    Corner {
        round: Some(round),
        ..corner(x, y)
    }
}

fn circle(x: f64, y: f64, r: f64) -> Vec<Corner> {
    let half = |at: f64, via: f64| Corner {
        via: Some(Point::new(x, y + via)),
        ..corner(x + at, y)
    };
    vec![half(r, -r), half(-r, r)]
}

/// Channel with unequal flanges and rounded roots; web from x = 0 to t.
fn channel(p: [f64; 4]) -> Loops {
    let [b1, b2, t, r] = [
        40.0 + 40.0 * p[0],
        30.0 + 20.0 * p[1],
        5.0 + 6.0 * p[2],
        3.0 + 5.0 * p[3],
    ];
    vec![vec![
        corner(0.0, 0.0),
        corner(b1, 0.0),
        corner(b1, 1.3 * t),
        rounded(t, 1.3 * t, r),
        rounded(t, 120.0 - t, r),
        corner(b2, 120.0 - t),
        corner(b2, 120.0),
        corner(0.0, 120.0),
    ]]
}

/// Four unequal sides with a round hole off the middle and a square one.
fn bored(p: [f64; 4]) -> Loops {
    let s = 8.0 + 4.0 * p[3];
    vec![
        vec![
            corner(-50.0, -30.0),
            corner(50.0 + 20.0 * p[0], -35.0),
            corner(40.0, 30.0 + 20.0 * p[1]),
            corner(-45.0, 35.0),
        ],
        circle(-18.0, 2.0, 8.0 + 6.0 * p[2]),
        vec![
            rounded(12.0, -10.0, 3.0),
            rounded(12.0 + s, -10.0, 3.0),
            rounded(12.0 + s, -10.0 + s, 3.0),
            rounded(12.0, -10.0 + s, 3.0),
        ],
    ]
}

/// Angle with a rounded root and toes.
fn angle(p: [f64; 4]) -> Loops {
    let [a, b, t] = [50.0 + 30.0 * p[0], 70.0 + 30.0 * p[1], 6.0 + 6.0 * p[2]];
    let r = 4.0 + 4.0 * p[3];
    vec![vec![
        corner(0.0, 0.0),
        corner(a, 0.0),
        rounded(a, t, 0.5 * t),
        rounded(t, t, r),
        rounded(t, b, 0.5 * t),
        corner(0.0, b),
    ]]
}

fn shape(kind: usize, p: [f64; 4]) -> Loops {
    [channel, bored, angle][kind % 3](p)
}

fn piece(loops: &Loops) -> Piece {
    let mut rings = loops.iter().map(|l| ring_from_corners(l).unwrap());
    Piece {
        name: "body".into(),
        outline: Outline {
            outer: rings.next().unwrap(),
            holes: rings.collect(),
        },
        material: 0,
    }
}

fn solve_pieces(pieces: &[Piece], tolerance: f64) -> Solution {
    let domain = build(pieces).unwrap();
    let material = Material {
        name: "body".into(),
        young: 1.0,
        poisson: 0.3,
        shear: 0.5 / 1.3,
        yield_stress: None,
        density: None,
    };
    let settings = Settings {
        tolerance,
        order: None,
        max_unknowns: 400_000,
        reference: None,
    };
    let solution = solve(&domain, &[material], 1.0, &settings, &mut |_| ()).unwrap();
    assert!(solution.reached);
    solution
}

fn solved(loops: &Loops) -> Solution {
    solve_pieces(&[piece(loops)], 1e-4)
}

fn get(solution: &Solution, q: Quantity) -> Figure {
    solution.get(q).unwrap()
}

/// `x ↦ shift + scale · turn(mirror(x))`, the mirror taking x to −x.
#[derive(Clone, Copy, Debug)]
struct Placement {
    scale: f64,
    turn: f64,
    mirror: bool,
    shift: Vector,
}

impl Placement {
    /// The orthogonal matrix, by rows.
    fn matrix(&self) -> [[f64; 2]; 2] {
        let (s, c) = self.turn.sin_cos();
        let m = if self.mirror { -1.0 } else { 1.0 };
        [[c * m, -s], [s * m, c]]
    }

    fn point(&self, p: Point) -> Point {
        let [a, b] = self.matrix();
        let v = Vector::new(a[0] * p.x + a[1] * p.y, b[0] * p.x + b[1] * p.y);
        Point::default() + v * self.scale + self.shift * self.scale
    }

    fn loops(&self, loops: &Loops) -> Loops {
        let place = |c: &Corner| Corner {
            at: self.point(c.at),
            round: c.round.map(|r| r * self.scale),
            via: c.via.map(|v| self.point(v)),
        };
        loops
            .iter()
            .map(|l| l.iter().map(place).collect())
            .collect()
    }

    /// The symmetric matrix `[xx, xy, yy]` in the new axes, times `factor`.
    fn tensor(&self, [xx, xy, yy]: [f64; 3], factor: f64) -> [f64; 3] {
        let m = self.matrix();
        let entry = |i: usize, j: usize| {
            factor
                * (m[i][0] * m[j][0] * xx
                    + (m[i][0] * m[j][1] + m[i][1] * m[j][0]) * xy
                    + m[i][1] * m[j][1] * yy)
        };
        [entry(0, 0), entry(0, 1), entry(1, 1)]
    }
}

fn power(q: Quantity) -> Option<i32> {
    match q.dimension() {
        Dimension::Length(n) => Some(n),
        Dimension::MassPerLength | Dimension::Angle | Dimension::ForceLength(_) => None,
    }
}

fn overlap(a: &Figure, b: &Figure) -> bool {
    a.low <= b.high && b.low <= a.high
}

/// Two figures that speak of the same thing, `size` the scale of rounding.
fn agree(q: Quantity, a: Figure, b: Figure, size: f64) {
    assert_eq!(a.trust, b.trust, "{}", q.key());
    if a.trust == Trust::Exact {
        assert!(
            (a.value - b.value).abs() <= EXACT * size,
            "{}: {a:?} {b:?}",
            q.key()
        );
    } else {
        let slack = Figure::around(b.value, b.half_width() + 1e-12 * size, b.trust);
        assert!(overlap(&a, &slack), "{}: {a:?} {b:?}", q.key());
    }
}

fn second_moments(s: &Solution) -> [f64; 3] {
    // ∫x², ∫xy, ∫y².
    [
        get(s, Quantity::SecondMomentY).value,
        get(s, Quantity::ProductMoment).value,
        get(s, Quantity::SecondMomentX).value,
    ]
}

fn pair(s: &Solution, x: Quantity, y: Quantity) -> (Point, f64) {
    let (x, y) = (get(s, x), get(s, y));
    (
        Point::new(x.value, y.value),
        x.half_width().hypot(y.half_width()),
    )
}

/// The laws that hold under any placement.
fn follows(before: &Solution, after: &Solution, placement: &Placement) {
    use Quantity as Q;
    let s = placement.scale;
    for q in [
        Q::Area,
        Q::Perimeter,
        Q::PrincipalMoment1,
        Q::PrincipalMoment2,
        Q::RadiusOfGyration1,
        Q::RadiusOfGyration2,
        Q::TorsionConstant,
        Q::WarpingConstant,
        Q::PolarRadius,
    ] {
        let expected = get(before, q).scaled(s.powi(power(q).unwrap()));
        agree(q, expected, get(after, q), expected.value);
    }
    let size = s * get(before, Q::PolarRadius).value;
    let reach = size + s * placement.shift.length();
    let (old, _) = pair(before, Q::CentroidX, Q::CentroidY);
    let (new, _) = pair(after, Q::CentroidX, Q::CentroidY);
    assert!(placement.point(old).distance(new) <= EXACT * reach);

    let expected = placement.tensor(second_moments(before), s.powi(4));
    let polar = expected[0] + expected[2];
    for (e, f) in expected.into_iter().zip(second_moments(after)) {
        assert!((e - f).abs() <= EXACT * polar, "{e} {f}");
    }
    // An angle of axes, where they are determined: within half a turn.
    let [i1, i2] = [Q::PrincipalMoment1, Q::PrincipalMoment2].map(|q| get(before, q).value);
    let [a, b] = [before, after].map(|s| get(s, Q::PrincipalAngle).value.to_radians());
    let turned = placement.turn
        + if placement.mirror {
            std::f64::consts::PI - a
        } else {
            a
        };
    assert!((turned - b).sin().abs() * (i1 - i2) <= EXACT * i1);

    for (x, y) in [
        (Q::ShearCentreX, Q::ShearCentreY),
        (Q::FlexureCentreX, Q::FlexureCentreY),
    ] {
        let ((old, e), (new, f)) = (pair(before, x, y), pair(after, x, y));
        let distance = placement.point(old).distance(new);
        assert!(
            distance <= s * e + f + 1e-12 * reach,
            "{}: {distance:e} with errors {:e} and {f:e}",
            x.key(),
            s * e
        );
    }
    // The trace of the shear flexibility.
    let trace = |sol: &Solution| {
        let one = Figure::around(1.0, 0.0, Trust::Exact);
        let [a, b] = [Q::ShearAreaX, Q::ShearAreaY].map(|q| one.over(get(sol, q)));
        a.plus(b)
    };
    let expected = trace(before).scaled(s.powi(-2));
    agree(Q::ShearAreaX, expected, trace(after), expected.value);
}

/// Every figure, where the axes keep their directions.
fn same_in_every_figure(before: &Solution, after: &Solution, placement: &Placement) {
    use Quantity as Q;
    let s = placement.scale;
    let keys = |sol: &Solution| sol.properties.iter().map(|p| p.0).collect::<Vec<_>>();
    assert_eq!(keys(before), keys(after));
    let length = s * get(before, Q::PolarRadius).value;
    for (q, f) in &before.properties {
        let Some(n) = power(*q) else { continue };
        let shift = match q {
            Q::CentroidX | Q::PlasticCentroidX | Q::ShearCentreX | Q::FlexureCentreX => {
                placement.shift.x
            }
            Q::CentroidY | Q::PlasticCentroidY | Q::ShearCentreY | Q::FlexureCentreY => {
                placement.shift.y
            }
            _ => 0.0,
        } * s;
        let mut expected = f.scaled(s.powi(n));
        expected.value += shift;
        expected.low += shift;
        expected.high += shift;
        let size = match n {
            1 => length + shift.abs(),
            4 => length.powi(2) * s * s * get(before, Q::Area).value,
            _ => expected.value.abs(),
        };
        agree(*q, expected, get(after, *q), size);
    }
}

fn few(cases: u32) -> ProptestConfig {
    ProptestConfig {
        cases,
        rng_seed: RngSeed::Fixed(20_261_201),
        failure_persistence: None,
        max_shrink_iters: 40,
        ..ProptestConfig::default()
    }
}

fn parameters() -> impl Strategy<Value = (usize, [f64; 4])> {
    (0..3_usize, prop::array::uniform4(0.0..1.0_f64))
}

proptest! {
    #![proptest_config(few(24))]

    #[test]
    fn figures_follow_a_turned_mirrored_scaled_and_moved_section(
        (kind, p) in parameters(),
        exponent in -6.0..6.0_f64,
        turn in -3.2..3.2_f64,
        mirror in any::<bool>(),
        shift in (-500.0..500.0_f64, -500.0..500.0_f64),
    ) {
        let placement = Placement {
            scale: 10.0_f64.powf(exponent),
            turn,
            mirror,
            shift: Vector::new(shift.0, shift.1),
        };
        let loops = shape(kind, p);
        follows(&solved(&loops), &solved(&placement.loops(&loops)), &placement);
    }

    #[test]
    fn every_figure_follows_a_scaled_and_moved_section(
        (kind, p) in parameters(),
        exponent in -6.0..6.0_f64,
        shift in (-500.0..500.0_f64, -500.0..500.0_f64),
    ) {
        let placement = Placement {
            scale: 10.0_f64.powf(exponent),
            turn: 0.0,
            mirror: false,
            shift: Vector::new(shift.0, shift.1),
        };
        let loops = shape(kind, p);
        same_in_every_figure(&solved(&loops), &solved(&placement.loops(&loops)), &placement);
    }

    #[test]
    fn numbering_and_sense_of_the_corners_change_nothing(
        (kind, p) in parameters(),
        first in 1..8_usize,
        reversed in any::<[bool; 3]>(),
    ) {
        let loops = shape(kind, p);
        let mut other = loops.clone();
        for (l, &back) in other.iter_mut().zip(&reversed) {
            let n = l.len();
            l.rotate_left(first % n);
            if back {
                *l = backwards(l);
            }
        }
        same_in_every_figure(&solved(&loops), &solved(&other), &HERE);
    }

    #[test]
    fn a_cut_through_the_material_changes_nothing(
        p in prop::array::uniform4(0.0..1.0_f64),
        at in 40.0..80.0_f64,
    ) {
        let whole = channel(p);
        let c = &whole[0];
        let t = c[3].at.x;
        let (low, high) = (corner(t, at), corner(0.0, at));
        let lower = vec![vec![c[0], c[1], c[2], c[3], low, high]];
        let upper = vec![vec![high, low, c[4], c[5], c[6], c[7]]];
        let parts = solve_pieces(&[piece(&lower), piece(&upper)], 1e-4);
        same_in_every_figure(&solved(&whole), &parts, &HERE);
    }

    #[test]
    fn a_tube_made_of_two_halves_is_the_tube(
        (w, h) in (60.0..120.0_f64, 30.0..90.0_f64),
        (t, x) in (4.0..12.0_f64, 0.3..0.7_f64),
    ) {
        let rectangle = |x0: f64, y0: f64, x1: f64, y1: f64| {
            vec![corner(x0, y0), corner(x1, y0), corner(x1, y1), corner(x0, y1)]
        };
        let whole = vec![rectangle(0.0, 0.0, w, h), rectangle(t, t, w - t, h - t)];
        // Cut through both walls at m; the second half starts at its far corner.
        let m = x * w;
        let left = vec![vec![
            corner(0.0, 0.0), corner(m, 0.0), corner(m, t), corner(t, t),
            corner(t, h - t), corner(m, h - t), corner(m, h), corner(0.0, h),
        ]];
        let right = vec![vec![
            corner(w, h), corner(m, h), corner(m, h - t), corner(w - t, h - t),
            corner(w - t, t), corner(m, t), corner(m, 0.0), corner(w, 0.0),
        ]];
        let parts = solve_pieces(&[piece(&left), piece(&right)], 1e-4);
        same_in_every_figure(&solved(&whole), &parts, &HERE);
    }
}

const HERE: Placement = Placement {
    scale: 1.0,
    turn: 0.0,
    mirror: false,
    shift: Vector::new(0.0, 0.0),
};

/// The loop in the other sense: `via` belongs to the side that arrives, so it moves to the corner that
/// the reversed side arrives at.
fn backwards(corners: &[Corner]) -> Vec<Corner> {
    let n = corners.len();
    (0..n)
        .rev()
        .map(|i| Corner {
            via: corners[(i + 1) % n].via,
            ..corners[i]
        })
        .collect()
}

/// Bit for bit the same mesh and figures on one thread, two and three.
#[test]
fn the_number_of_threads_changes_no_bit() {
    for (kind, p) in [(0, [0.2, 0.7, 0.4, 0.9]), (1, [0.6, 0.1, 0.8, 0.3])] {
        let loops = shape(kind, p);
        let on = |threads: usize| {
            let pool = rayon::ThreadPoolBuilder::new()
                .num_threads(threads)
                .build()
                .unwrap();
            let solution = pool.install(|| solve_pieces(&[piece(&loops)], 1e-6));
            let bits: Vec<(Quantity, [u64; 3])> = solution
                .properties
                .iter()
                .map(|(q, f)| (*q, [f.value, f.low, f.high].map(f64::to_bits)))
                .collect();
            let places: Vec<[u64; 2]> = solution
                .mesh
                .vertices
                .iter()
                .map(|v| [v.x.to_bits(), v.y.to_bits()])
                .collect();
            (bits, places, solution.mesh.triangles)
        };
        let one = on(1);
        assert!(one == on(2), "two threads");
        assert!(one == on(3), "three threads");
        assert!(one == on(1), "again");
    }
}
