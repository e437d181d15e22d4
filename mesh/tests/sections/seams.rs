//! Pieces joined by seams: areas, hands of slits, loops, throats.

use std::collections::BTreeSet;
use std::f64::consts::{PI, SQRT_2, TAU};

use sectile_mesh::Point;
use sectile_mesh::bisect::bisect;
use sectile_mesh::corners::reentrant_corners;
use sectile_mesh::domain::fault::{Fault, SeamFault};
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::domain::{Domain, build, build_seamed};
use sectile_mesh::grade::grade_to;
use sectile_mesh::mesh::{Mesh, NONE};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::shape::{circle, tube};
use sectile_mesh::quality::{defects, least_angle};
use sectile_mesh::triangulate::{Sizing, triangulate};

use crate::check::{check_mesh, check_triangulation, exact_area};
use crate::shapes::{arc, i_section, line, moved, of_rings, piece, point, rectangle};

pub fn fillet(between: [usize; 2], leg: f64) -> SeamRequest {
    SeamRequest {
        name: format!("{}-{}", between[0], between[1]),
        between,
        near: None,
        kind: SeamKind::Fillet { legs: [leg; 2] },
        both: false,
        gap: 0.0,
        material: 0,
    }
}

pub fn groove(between: [usize; 2], depth: Option<f64>) -> SeamRequest {
    SeamRequest {
        kind: SeamKind::Groove { depth },
        ..fillet(between, 1.0)
    }
}

pub fn near(x: f64, y: f64, request: SeamRequest) -> SeamRequest {
    SeamRequest {
        near: Some(point(x, y)),
        ..request
    }
}

pub fn both(request: SeamRequest) -> SeamRequest {
    SeamRequest {
        both: true,
        ..request
    }
}

/// What every seamed section keeps; `metal`: the area of the weld metal.
pub fn check(name: &str, pieces: &[Piece], domain: &Domain, metal: f64) -> Mesh {
    let mesh = triangulate(domain, &Sizing::default()).unwrap();
    let area = exact_area(pieces) + metal;
    check_triangulation(name, &mesh, domain, area);
    assert_eq!(domain.parts, 1, "{name}");
    let outer = mesh.loop_is_outer.iter().filter(|o| **o).count();
    assert_eq!(outer, 1, "{name}: one connected part");
    // Its own corners are cut off, at half of the free angle between the faces.
    let least = least_angle(&mesh);
    assert!(least > 9.0, "{name}: {least}°");
    check_hands(name, domain);
    check_throats(name, domain, &mesh);
    // Finer meshes keep it: bisected everywhere, and graded to the slits' ends.
    let finer = bisect(&mesh, &vec![true; mesh.triangles.len()]).mesh;
    check_mesh(name, &finer, area);
    check_throats(name, domain, &finer);
    let corners = reentrant_corners(domain);
    let targets: Vec<(u32, f64)> = corners
        .iter()
        .map(|c| {
            assert!(c.wall > 0.0 && c.wall.is_finite(), "{name}: {c:?}");
            (c.point, 0.05 * c.wall)
        })
        .collect();
    let graded = grade_to(&mesh, &targets);
    check_mesh(name, &graded, area);
    check_throats(name, domain, &graded);
    assert_eq!(mesh, triangulate(domain, &Sizing::default()).unwrap());
    mesh
}

/// Every hand has its other: the hands of a slit lie on one line, with one piece each, and share their
/// ends no more than one of them.
fn check_hands(name: &str, domain: &Domain) {
    let at = |v: u32| domain.points[v as usize];
    let hands: Vec<_> = domain.sides.iter().filter(|s| s.faying).collect();
    for hand in &hands {
        let others: Vec<_> = hands
            .iter()
            .filter(|o| {
                (at(o.from), at(o.to)) == (at(hand.from), at(hand.to))
                    && o.arc == hand.arc
                    && (o.left.is_some(), o.right.is_some())
                        == (hand.right.is_some(), hand.left.is_some())
            })
            .collect();
        assert_eq!(others.len(), 1, "{name}: {hand:?}");
        assert!(
            (others[0].from, others[0].to) != (hand.from, hand.to),
            "{name}: a slit would be fused"
        );
    }
    // Pieces share no more points than the seams' metal and fused lines have.
    for (v, p) in domain.points.iter().enumerate() {
        let around: Vec<_> = domain
            .sides
            .iter()
            .filter(|s| s.from == v as u32 || s.to == v as u32)
            .collect();
        assert!(!around.is_empty(), "{name}: {p:?} is no side's end");
        let gaps = around
            .iter()
            .filter(|s| s.left.is_none() || s.right.is_none())
            .count();
        assert!(gaps == 0 || gaps == 2, "{name}: {gaps} free sides at {p:?}");
    }
}

/// Every throat is made of mesh sides between its two hands, from point to point.
fn check_throats(name: &str, domain: &Domain, mesh: &Mesh) {
    for seam in &domain.seams {
        let mut length = 0.0;
        let ends: BTreeSet<(u32, u32)> = mesh
            .sides
            .iter()
            .filter(|s| {
                s.right != NONE && {
                    let pieces = [s.left, s.right].map(|t| mesh.piece[t as usize]);
                    pieces == seam.hands || [pieces[1], pieces[0]] == seam.hands
                }
            })
            .map(|s| {
                let [a, b] = s.vertices;
                let chord = mesh.vertices[a as usize].distance(mesh.vertices[b as usize]);
                length += mesh
                    .circles
                    .get(s.circle as usize)
                    .map_or(chord, |c| 2.0 * c.radius * (0.5 * chord / c.radius).asin());
                (a, b)
            })
            .collect();
        let wanted: f64 = domain
            .seams
            .iter()
            .filter(|s| s.hands == seam.hands)
            .map(|s| s.throat_length)
            .sum();
        assert!(
            (length - wanted).abs() < 1e-9 * wanted,
            "{name}: {} is {length} long, not {wanted}",
            seam.name
        );
        for v in &seam.throat {
            assert!(
                ends.iter().any(|e| e.0 == *v || e.1 == *v),
                "{name}: the throat of {} has lost point {v}",
                seam.name
            );
        }
    }
}

/// Number of inner loops.
fn holes(mesh: &Mesh) -> usize {
    mesh.loop_is_outer.iter().filter(|o| !**o).count()
}

/// Length of slits, both hands counted once.
fn slit(domain: &Domain) -> f64 {
    let length = |s: &sectile_mesh::domain::DomainSide| match s.arc {
        None => domain.points[s.from as usize].distance(domain.points[s.to as usize]),
        Some(arc) => arc.circle.radius * arc.sweep.abs(),
    };
    0.5 * domain
        .sides
        .iter()
        .filter(|s| s.faying)
        .map(length)
        .sum::<f64>()
}

/// Two flats 100 × 10, the upper one moved by `offset` to the right.
pub fn flats(offset: f64) -> Vec<Piece> {
    vec![
        piece("lower", rectangle(0.0, 0.0, 100.0, 10.0)),
        piece("upper", rectangle(offset, 10.0, 100.0 + offset, 20.0)),
    ]
}

fn close(a: Point, x: f64, y: f64) -> bool {
    a.distance(point(x, y)) < 1e-9
}

#[test]
fn offset_flats_with_a_fillet_at_either_edge() {
    let pieces = flats(20.0);
    let domain = build_seamed(&pieces, &[both(fillet([0, 1], 6.0))]).unwrap();
    let mesh = check("offset flats", &pieces, &domain, 2.0 * 18.0);
    assert_eq!(domain.piece_names.len(), 6);
    let [left, right] = &domain.seams[..] else {
        panic!("{:?}", domain.seams)
    };
    assert_eq!(
        (left.name.as_str(), right.name.as_str()),
        ("0-1, end 1", "0-1, end 2")
    );
    assert!(close(left.at, 20.0, 10.0) && close(right.at, 100.0, 10.0));
    for seam in [left, right] {
        assert!((seam.throat_length - 3.0 * SQRT_2).abs() < 1e-12);
        assert_eq!(
            (seam.legs, seam.gap, seam.between),
            (Some([6.0; 2]), 0.0, [0, 1])
        );
        assert_eq!(seam.throat.len(), 2);
        assert_eq!(domain.points[seam.throat[0] as usize], seam.at);
        assert!(
            seam.metal
                .iter()
                .all(|&m| domain.piece_names[m as usize] == seam.name)
        );
    }
    assert!(close(domain.points[left.throat[1] as usize], 17.0, 13.0));
    assert!(close(domain.points[right.throat[1] as usize], 103.0, 7.0));
    // The slit between the roots is one inner loop without area.
    assert_eq!(holes(&mesh), 1);
    assert!((slit(&domain) - 80.0).abs() < 1e-12);
    // Both roots are ends of the slit: a full turn of material.
    let tips: Vec<f64> = reentrant_corners(&domain)
        .iter()
        .filter(|c| (c.interior_angle - TAU).abs() < 1e-12)
        .map(|c| c.at.x)
        .collect();
    assert_eq!(tips, [100.0, 20.0]);
}

#[test]
fn one_fillet_leaves_the_slit_open() {
    let pieces = flats(20.0);
    let request = near(0.0, 20.0, fillet([1, 0], 6.0));
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let mesh = check("one fillet", &pieces, &domain, 18.0);
    assert_eq!(holes(&mesh), 0);
    let [seam] = &domain.seams[..] else { panic!() };
    assert!(close(seam.at, 20.0, 10.0));
    // The first hand is on the first piece, the upper one.
    let first = seam.hands[0];
    let touches = |piece| {
        domain.sides.iter().any(|s| {
            [s.left, s.right] == [Some(first), Some(piece)]
                || [s.right, s.left] == [Some(first), Some(piece)]
        })
    };
    assert!(touches(1) && !touches(0));
    // At the open end each flat has a corner of its own.
    let there = domain
        .points
        .iter()
        .filter(|p| close(**p, 100.0, 10.0))
        .count();
    assert_eq!(there, 2);
}

#[test]
fn flush_flats_with_grooves_at_both_ends() {
    let pieces = flats(0.0);
    let request = both(groove([0, 1], Some(15.0)));
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let mesh = check("grooves", &pieces, &domain, 0.0);
    assert_eq!(holes(&mesh), 1);
    assert!((slit(&domain) - 70.0).abs() < 1e-12);
    for (seam, (x, inner)) in domain.seams.iter().zip([(7.5, 15.0), (92.5, 85.0)]) {
        assert!(close(seam.at, x, 10.0));
        assert!(close(domain.points[seam.throat[0] as usize], inner, 10.0));
        assert_eq!((seam.hands, seam.metal.len(), seam.legs), ([0, 1], 0, None));
        assert!((seam.throat_length - 15.0).abs() < 1e-12);
    }
    // Fused from one end to 99.9 of 100, from the other the rest but for a slit of 0.05.
    let requests = [
        near(0.0, 10.0, groove([0, 1], Some(99.9))),
        near(100.0, 10.0, groove([0, 1], Some(0.05))),
    ];
    let domain = build_seamed(&pieces, &requests).unwrap();
    let mesh = check("grooves that nearly meet", &pieces, &domain, 0.0);
    assert_eq!(holes(&mesh), 1);
}

#[test]
fn a_full_groove_is_the_solid() {
    let pieces = flats(20.0);
    let domain = build_seamed(&pieces, &[groove([0, 1], None)]).unwrap();
    let mesh = check("full groove", &pieces, &domain, 0.0);
    let solid = build(&pieces).unwrap();
    assert_eq!(domain.points, solid.points);
    assert_eq!(domain.sides, solid.sides);
    assert_eq!(mesh, triangulate(&solid, &Sizing::default()).unwrap());
    assert_eq!(domain.seams[0].throat_length, 80.0);
    let single = &pieces[..1];
    assert_eq!(build_seamed(single, &[]).unwrap(), build(single).unwrap());
}

#[test]
fn a_closed_slit_without_inner_points_is_divided() {
    // Three flats around a slit: its hands would otherwise be one side.
    let domain = build_seamed(&flats(0.0), &[both(groove([0, 1], Some(49.0)))]).unwrap();
    let middle: Vec<usize> = (0..domain.points.len())
        .filter(|&v| close(domain.points[v], 50.0, 10.0))
        .collect();
    assert_eq!(middle.len(), 2);
    let mesh = check("short slit", &flats(0.0), &domain, 0.0);
    assert_eq!(holes(&mesh), 1);
    // Its loop has four sides at least, and no triangle of the lower flat knows the upper hand's point.
    let hand = |v: usize| {
        let mut pieces: Vec<u32> = (0..mesh.triangles.len())
            .filter(|&t| mesh.triangles[t].contains(&(v as u32)))
            .map(|t| mesh.piece[t])
            .collect();
        pieces.dedup();
        pieces
    };
    assert_eq!((hand(middle[0]), hand(middle[1])), (vec![0], vec![1]));
}

#[test]
fn a_cover_plate_on_a_rolled_section() {
    for (t, leg) in [(12.0, 6.0), (12.0, 12.0), (10.0, 10.0)] {
        let pieces = vec![
            piece("beam", i_section(15.0)),
            piece("plate", rectangle(-60.0, 150.0, 60.0, 150.0 + t)),
        ];
        let domain = build_seamed(&pieces, &[both(fillet([0, 1], leg))]).unwrap();
        let mesh = check("cover plate", &pieces, &domain, leg * leg);
        assert_eq!(holes(&mesh), 1);
        assert!((slit(&domain) - 120.0).abs() < 1e-12);
    }
    // Legs of 8 on the beam and 5 on the plate.
    let pieces = vec![
        piece("beam", i_section(15.0)),
        piece("plate", rectangle(-60.0, 150.0, 60.0, 162.0)),
    ];
    let request = SeamRequest {
        kind: SeamKind::Fillet { legs: [8.0, 5.0] },
        ..both(fillet([0, 1], 0.0))
    };
    let domain = build_seamed(&pieces, &[request]).unwrap();
    check("unequal legs", &pieces, &domain, 40.0);
    for seam in &domain.seams {
        // Height of a right triangle over its hypotenuse: ab/√(a² + b²).
        assert!((seam.throat_length - 40.0 / 89.0_f64.sqrt()).abs() < 1e-12);
        let foot = domain.points[seam.throat[1] as usize];
        assert!(
            (foot.y - (150.0 + 40.0 * 8.0 / 89.0)).abs() < 1e-12,
            "{foot:?}"
        );
    }
}

#[test]
fn a_box_of_four_plates_with_grooves_in_its_corners() {
    let pieces = vec![
        piece("bottom", rectangle(0.0, 0.0, 200.0, 20.0)),
        piece("top", rectangle(0.0, 280.0, 200.0, 300.0)),
        piece("left", rectangle(0.0, 20.0, 16.0, 280.0)),
        piece("right", rectangle(184.0, 20.0, 200.0, 280.0)),
    ];
    let at = |x: f64, y: f64, a, b| near(x, y, groove([a, b], Some(10.0)));
    let requests = [
        at(0.0, 20.0, 0, 2),
        at(200.0, 20.0, 0, 3),
        at(0.0, 280.0, 1, 2),
        at(200.0, 280.0, 1, 3),
    ];
    let domain = build_seamed(&pieces, &requests).unwrap();
    let mesh = check("box", &pieces, &domain, 0.0);
    // The slits open into the cell.
    assert_eq!(holes(&mesh), 1);
    assert!((slit(&domain) - 24.0).abs() < 1e-12);
    for seam in &domain.seams {
        let outer = domain.points[*seam.throat.last().unwrap() as usize];
        assert!(outer.x == 0.0 || outer.x == 200.0, "{outer:?}");
    }
}

#[test]
fn a_tee_with_fillets_on_both_sides_of_its_web() {
    for turn in [0.0, 33.0, 90.0, 211.0] {
        let pieces: Vec<Piece> = [
            rectangle(-50.0, 0.0, 50.0, 12.0),
            rectangle(-4.0, 12.0, 4.0, 120.0),
        ]
        .iter()
        .map(|o| piece("plate", moved(o, 12.3, -45.6, turn)))
        .collect();
        let domain = build_seamed(&pieces, &[both(fillet([1, 0], 5.0))]).unwrap();
        let mesh = check("tee", &pieces, &domain, 25.0);
        assert_eq!(holes(&mesh), 1);
    }
}

/// A part of a ring about the origin.
pub fn ring_part(r0: f64, r1: f64, from: f64, to: f64) -> Outline {
    let turn = |r: f64, a: f64| point(r * a.cos(), r * a.sin());
    let o = point(0.0, 0.0);
    let sides = vec![
        arc(o, turn(r1, from), turn(r1, to), to - from),
        line(turn(r1, to), turn(r0, to)),
        arc(o, turn(r0, to), turn(r0, from), from - to),
        line(turn(r0, from), turn(r1, from)),
    ];
    of_rings(Ring { sides }, Vec::new())
}

#[test]
fn slits_along_arcs() {
    // A curved plate on another, welded at both ends by grooves.
    for sweep in [0.3, 1.0, 2.0, 3.5, 5.0] {
        let pieces = vec![
            piece("inner", ring_part(40.0, 50.0, 0.2, 0.2 + sweep)),
            piece("outer", ring_part(50.0, 58.0, 0.2, 0.2 + sweep)),
        ];
        let depth = 0.2 * sweep * 50.0;
        let domain = build_seamed(&pieces, &[both(groove([0, 1], Some(depth)))]).unwrap();
        let mesh = check("curved plates", &pieces, &domain, 0.0);
        assert_eq!(holes(&mesh), 1, "{sweep}");
        assert!((slit(&domain) - 30.0 * sweep).abs() < 1e-9);
        assert!((domain.seams[1].throat_length - depth).abs() < 1e-9);
    }
    // A pad on a round bar, with fillets whose legs run along the bar.
    for cover in [0.4, 1.0, 2.5, 4.0] {
        let (from, to) = (0.5 * PI - 0.5 * cover, 0.5 * PI + 0.5 * cover);
        let pieces = vec![
            piece("bar", of_rings(circle(point(0.0, 0.0), 100.0), Vec::new())),
            piece("pad", ring_part(50.0, 58.0, from, to)),
        ];
        let domain = build_seamed(&pieces, &[both(fillet([0, 1], 5.0))]).unwrap();
        // Between a leg of 5 along the circle and one along its radius.
        let a: f64 = 5.0 / 50.0;
        let metal = 0.5 * 50.0 * 55.0 * a.sin() - 0.5 * 50.0 * 50.0 * a;
        let mesh = check("pad on a bar", &pieces, &domain, 2.0 * metal);
        assert_eq!(holes(&mesh), 1, "{cover}");
    }
    // A core in a tube that nothing but a groove holds: the slit is closed, and the seam too.
    let pieces = vec![
        piece("tube", tube(point(3.0, 4.0), 120.0, 10.0)),
        piece("core", of_rings(circle(point(3.0, 4.0), 100.0), Vec::new())),
    ];
    let domain = build_seamed(&pieces, &[groove([0, 1], None)]).unwrap();
    let mesh = check("core", &pieces, &domain, 0.0);
    assert_eq!(holes(&mesh), 0);
    let throat = &domain.seams[0].throat;
    assert_eq!(throat.first(), throat.last());
    assert!((domain.seams[0].throat_length - 100.0 * PI).abs() < 1e-9);
    // Two half shells around a core, joined to it by grooves at one of their edges.
    let pieces = vec![
        piece("core", of_rings(circle(point(0.0, 0.0), 100.0), Vec::new())),
        piece("shell", ring_part(50.0, 58.0, 0.0, PI)),
        piece("shell", ring_part(50.0, 58.0, PI, TAU)),
    ];
    let requests = [
        near(50.0, 0.0, groove([0, 1], Some(20.0))),
        near(50.0, 0.0, groove([0, 2], Some(20.0))),
        groove([1, 2], None),
    ];
    let requests = [
        requests[0].clone(),
        requests[1].clone(),
        near(-54.0, 0.0, requests[2].clone()),
    ];
    let domain = build_seamed(&pieces, &requests).unwrap();
    let mesh = check("shells", &pieces, &domain, 0.0);
    assert_eq!(holes(&mesh), 1);
}

#[test]
fn a_fit_up_makes_the_root_open() {
    let gap = 0.8;
    let pieces = vec![
        piece("beam", rectangle(-75.0, -10.0, 75.0, 0.0)),
        piece("plate", rectangle(-60.0, gap, 60.0, 12.0 + gap)),
    ];
    for between in [[0, 1], [1, 0]] {
        let request = SeamRequest {
            gap: 1.0,
            ..both(fillet(between, 6.0))
        };
        let domain = build_seamed(&pieces, &[request]).unwrap();
        let mesh = check("fit-up", &pieces, &domain, 2.0 * 18.0);
        // The space between the welds is a hole with an area.
        assert_eq!(holes(&mesh), 1);
        assert_eq!(slit(&domain), 0.0);
        for seam in &domain.seams {
            assert!((seam.gap - gap).abs() < 1e-12);
            assert!((seam.throat_length - (6.0 - gap) / SQRT_2).abs() < 1e-12);
            assert!((seam.at.y - gap).abs() < 1e-12 && seam.at.x.abs() == 60.0);
        }
    }
    // A web off its flange, not upright, and a plate off a round bar.
    let web = moved(&rectangle(-4.0, 0.0, 4.0, 100.0), 0.0, 0.9, 20.0);
    let pieces = vec![
        piece("flange", rectangle(-50.0, -12.0, 50.0, -1.0)),
        piece("web", web),
    ];
    let request = SeamRequest {
        gap: 4.0,
        ..both(fillet([0, 1], 9.0))
    };
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let metal: f64 = domain
        .seams
        .iter()
        .map(|_| 0.5 * 81.0 * (70.0_f64).to_radians().sin())
        .sum();
    check("tilted web", &pieces, &domain, metal);
    assert!(domain.seams[0].gap != domain.seams[1].gap);
    let pieces = vec![
        piece("bar", of_rings(circle(point(0.0, 0.0), 100.0), Vec::new())),
        piece("fin", rectangle(50.5, -4.0, 90.0, 4.0)),
    ];
    let request = SeamRequest {
        gap: 1.0,
        ..both(fillet([0, 1], 6.0))
    };
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let mesh = triangulate(&domain, &Sizing::default()).unwrap();
    assert_eq!((defects(&mesh).len(), holes(&mesh)), (0, 1));
    let off = 50.5 - (2500.0_f64 - 16.0).sqrt();
    assert!(
        domain.seams.iter().all(|s| s.gap < off && s.gap > 0.5),
        "{:?}",
        domain.seams
    );
}

#[test]
fn pieces_that_meet_in_a_point_hang_together_by_seams_only() {
    // Two bars corner to corner, and a fillet in the corner between them.
    let pieces = vec![
        piece("a", rectangle(0.0, 0.0, 20.0, 20.0)),
        piece("b", rectangle(20.0, 20.0, 40.0, 40.0)),
    ];
    let request = near(15.0, 25.0, fillet([0, 1], 6.0));
    let domain = build_seamed(&pieces, &[request]).unwrap();
    check("corner to corner", &pieces, &domain, 18.0);
    let foot = domain.points[domain.seams[0].throat[1] as usize];
    assert!(close(foot, 17.0, 23.0));
    // Without a hint, and with one that tells nothing, either of two corners would do.
    for request in [fillet([0, 1], 6.0), near(20.0, 20.0, fillet([0, 1], 6.0))] {
        let faults = build_seamed(&pieces, &[request]).unwrap_err();
        assert!(
            matches!(&faults[..], [Fault::Seam { fault: SeamFault::Choice { places }, .. }] if places.len() == 2)
        );
    }
}
