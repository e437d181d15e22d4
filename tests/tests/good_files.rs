//! Files without fault: what is read is what was written.

use std::f64::consts::PI;

use sectile::read::{ReadSection, section_from_text};
use sectile::section::Contact;
use sectile_mesh::Point;
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_solver::stress::forces::SectionForces;
use sectile_tests::{file_name, outline_area, ring_area, section_files};

fn read_file(name: &str) -> ReadSection {
    let name = format!("{name}.section.toml");
    let path = section_files("good")
        .into_iter()
        .find(|path| file_name(path) == name)
        .unwrap_or_else(|| panic!("there is no {name}"));
    let text = std::fs::read_to_string(path).expect("good files are UTF-8");
    section_from_text(&name, &text).unwrap_or_else(|faults| panic!("{faults}"))
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-12 * b.abs().max(1.0)
}

fn areas(read: &ReadSection) -> Vec<f64> {
    read.section
        .pieces
        .iter()
        .map(|piece| outline_area(&piece.outline))
        .collect()
}

#[test]
fn every_good_and_every_demo_file_is_read() {
    let files: Vec<_> = section_files("good")
        .into_iter()
        .chain(section_files("../cli/demo"))
        .collect();
    assert!(files.len() >= 12, "only {} files", files.len());
    for path in files {
        let text = std::fs::read_to_string(&path).expect("good files are UTF-8");
        assert!(
            text.to_lowercase().contains("invented"),
            "{} does not say so",
            file_name(&path)
        );
        let read =
            section_from_text(file_name(&path), &text).unwrap_or_else(|faults| panic!("{faults}"));
        assert!(!read.domain.sides.is_empty(), "{}", file_name(&path));
    }
}

#[test]
fn lengths_in_inches_feet_fractions_and_millimetres_agree_to_the_last_digit() {
    let inches = read_file("units-in-inches");
    assert_eq!(inches.section.title, "Flat in inches (invented)");
    assert_eq!(inches.section.units.length, "in");
    assert_eq!(inches.section.units.moment, "kip in");
    let corners: Vec<Point> = inches.section.pieces[0]
        .outline
        .outer
        .sides
        .iter()
        .map(|side| side.from)
        .collect();
    for corner in [[0.0, 0.0], [4.0, 0.0], [4.0, 0.375], [0.0, 0.375]] {
        let corner = Point::new(corner[0], corner[1]);
        assert!(
            corners.iter().any(|found| found.distance(corner) < 1e-15),
            "{corner:?} in {corners:?}"
        );
    }
    let steel = &inches.section.materials[0];
    // 200 GPa in ksi and 490 lb/ft³ in kg/m³, by the definitions of pound, inch and pound-force.
    assert!(
        close(steel.young, 200e3 / 6.894_757_293_168_361),
        "{}",
        steel.young
    );
    assert_eq!(steel.yield_stress, Some(50.0));
    assert!(close(
        steel.density.unwrap_or_default(),
        490.0 * 0.453_592_37 / 0.028_316_846_592
    ));
    assert!(close(steel.shear, steel.young / 2.6));

    let millimetres = read_file("units-in-millimetres");
    assert_eq!(millimetres.section.title, "units-in-millimetres");
    assert!(close(areas(&millimetres)[0], 101.6 * 9.525));
    assert_eq!(millimetres.section.materials[0].shear, 80_000.0);
    assert_eq!(millimetres.section.materials[0].density, Some(7850.0));
    assert_eq!(millimetres.section.pieces[0].name, "piece 1");
}

#[test]
fn rounded_corners_arcs_and_holes() {
    let read = read_file("rounded-and-arched");
    let outline = &read.section.pieces[0].outline;
    // 100 × 60, two corners cut back by (1 − π/4) r², a half disc of radius 30 beside it.
    let outer = 6000.0 - 2.0 * (1.0 - 0.25 * PI) * 100.0 + 0.5 * PI * 900.0;
    assert!(
        close(ring_area(&outline.outer), outer),
        "{}",
        ring_area(&outline.outer)
    );
    assert_eq!(outline.holes.len(), 2);
    assert!(close(outline_area(outline), outer - 100.0 * PI - 400.0));
    assert_eq!(
        outline
            .outer
            .sides
            .iter()
            .filter(|side| side.arc.is_some())
            .count(),
        3
    );
    assert!(read.section.assumed_material);
    assert_eq!(read.section.materials[0].young, 1.0);
    assert_eq!(read.section.materials[0].poisson, 0.3);
    assert_eq!(read.domain.parts, 1);
}

#[test]
fn two_corners_suffice_with_an_arc_and_none_with_a_circle() {
    assert!(close(
        areas(&read_file("half-disc-of-two-corners"))[0],
        0.5 * PI * 2500.0
    ));
    assert!(close(areas(&read_file("disc"))[0], PI * (1600.0 - 225.0)));
}

#[test]
fn plates_tubes_and_bars() {
    let fused = read_file("plates-fused");
    assert_eq!(areas(&fused), [800.0, 800.0]);
    assert_eq!(fused.domain.parts, 1);
    assert!(!fused.section.assumed_material);
    let apart = read_file("tube-and-bar-apart");
    assert!(close(areas(&apart)[0], PI * (2500.0 - 2025.0)));
    assert!(close(areas(&apart)[1], 2400.0 - 100.0 * PI));
    assert_eq!(apart.domain.parts, 2);
}

#[test]
fn a_piece_is_of_the_material_that_it_names() {
    let read = read_file("one-of-two-materials");
    let material = &read.section.materials[read.section.pieces[0].material];
    assert_eq!(
        (material.name.as_str(), material.young),
        ("steel", 210_000.0)
    );
}

#[test]
fn other_spellings_of_toml_say_the_same() {
    let read = read_file("dotted-keys");
    assert_eq!(read.section.title, "Dotted (invented)");
    assert_eq!(areas(&read), [24.0]);
    assert_eq!(read.section.materials[0].young, 210_000.0);
}

#[test]
fn profiles_have_the_areas_that_their_dimensions_give() {
    let read = read_file("profiles");
    let corner = 1.0 - 0.25 * PI; // of a fillet of radius 1
    let sloped = 200.0 * 8.0 + 2.0 * 72.0 * (12.0 - 0.08 * 4.0);
    let expected = [
        150.0 * 12.0 + 200.0 * 20.0 + 268.0 * 8.0 + 4.0 * corner * 225.0,
        sloped,
        sloped,
        9.0 * (110.0 + 70.0 - 9.0) + corner * (100.0 - 2.0 * 16.0),
        140.0 * 12.0 + 118.0 * 8.0 + 2.0 * corner * 100.0,
        140.0 * 90.0 - 128.0 * 78.0 + 4.0 * corner * (25.0 - 121.0),
        140.0 * 90.0 - 120.0 * 78.0,
    ];
    for ((piece, area), expected) in read.section.pieces.iter().zip(areas(&read)).zip(expected) {
        // The slope as an angle is written to ten digits.
        let digits = if piece.name.ends_with("angle") {
            1e-9
        } else {
            1e-12
        };
        assert!(
            (area / expected - 1.0).abs() < digits,
            "{}: {area}, not {expected}",
            piece.name
        );
    }
    assert_eq!(read.domain.parts, 7);
}

#[test]
fn a_piece_is_mirrored_then_turned_then_moved() {
    let read = read_file("placed");
    let has = |piece: usize, x: f64, y: f64| {
        let sides = &read.section.pieces[piece].outline.outer.sides;
        let at = Point::new(x, y);
        assert!(
            sides.iter().any(|side| side.from.distance(at) < 1e-12),
            "no {at:?} in {sides:?}"
        );
    };
    // Ends of the legs and the inner corner.
    has(0, 70.0, 0.0);
    has(0, 0.0, 110.0);
    has(0, 9.0, 9.0);
    // (x, y) → (x, −y) → (y, x) → (100 + y, x).
    has(1, 100.0, 70.0);
    has(1, 210.0, 0.0);
    has(1, 109.0, 9.0);
    has(2, -320.0, 40.0);
    let nose = &read.section.pieces[2].outline;
    assert!(
        close(outline_area(nose), area_of_nose() - 9.0 * PI),
        "{}",
        outline_area(nose)
    );
    let hole = nose.holes[0].sides[0].arc.expect("a hole is a circle");
    assert!(hole.circle.centre.distance(Point::new(-310.0, 10.0)) < 1e-12);
    let (sin, cos) = 0.5_f64.sin_cos();
    has(3, 10.0 * cos - 5.0 * sin, 300.0 + 10.0 * sin + 5.0 * cos);
}

/// Section forces in the order of the file format's keys N, Vx, Vy, Mx, My, T, B, Tw.
fn assert_forces(found: SectionForces, expected: [f64; 8]) {
    let f = found;
    for (found, expected) in [f.n, f.vx, f.vy, f.mx, f.my, f.t, f.b, f.tw]
        .into_iter()
        .zip(expected)
    {
        assert!(close(found, expected), "{f:?}: {found}, not {expected}");
    }
}

#[test]
fn actions_are_in_the_units_of_force_and_of_length() {
    let read = read_file("actions-everything");
    let section = &read.section;
    let names: Vec<&str> = section.actions.iter().map(|a| a.name.as_str()).collect();
    assert_eq!(
        names,
        ["bare numbers", "own units", "action 3", "turned round"]
    );
    // Kips and inches: 1 kip ft = 12 kip in, 1 kip ft in = 12 kip in², 1 kip ft² = 144 kip in².
    assert_forces(
        section.actions[0].forces,
        [3.0, -1.5, 2.0, 120.0, -3.0, 12.0, 24.0, 6.0],
    );
    assert_eq!(section.actions[0].at, Some(Point::new(-1.0, 12.0)));
    // 1 kip = 4448.2216152605 N and 1 in = 0.0254 m by definition.
    let kip_inch = 4_448.221_615_260_5 * 0.0254;
    assert_forces(
        section.actions[1].forces,
        [0.5, 1.0, -0.5, 12.0, 12.0, 113.0 / kip_inch, 288.0, 36.0],
    );
    assert_eq!(section.actions[1].at, None);
    assert_forces(
        section.actions[2].forces,
        [0.0, 0.0, 0.0, 0.0, 0.0, 12.0, 0.0, 0.0],
    );
    assert_forces(
        section.actions[3].forces,
        [0.0, 0.0, 0.0, 0.0, 0.0, 0.0, -432.0, 0.0],
    );

    // Newtons and metres, bare moments in kN cm = 10 N m.
    let metric = read_file("actions-in-metres");
    assert_forces(
        metric.section.actions[0].forces,
        [1.0, 0.0, 0.0, 10.0, 0.0, 0.0, 10.0, 0.0],
    );
    assert_forces(
        metric.section.actions[1].forces,
        [1e6, 0.0, 0.0, 1.0, 0.0, 0.0, 1e3, 0.0],
    );
}

#[test]
fn combinations_probes_and_cuts_are_as_written() {
    let read = read_file("actions-everything");
    let section = &read.section;
    assert_eq!(section.combinations[0].name, "ultimate");
    assert_eq!(
        section.combinations[0].factors,
        [(1, 1.5), (0, 1.35), (2, -1.0)]
    );
    assert_eq!(section.combinations[1].name, "combination 2");
    assert_eq!(section.combinations[1].factors, [(3, 2.0)]);

    let probes: Vec<(&str, Point)> = section
        .probes
        .iter()
        .map(|probe| (probe.name.as_str(), probe.at))
        .collect();
    assert_eq!(
        probes,
        [
            ("toe", Point::new(0.5, 0.5)),
            ("probe 2", Point::new(0.5, 4.0)),
            ("corner", Point::new(4.0, 8.0)),
        ]
    );
    let [web, flange] = &section.cuts[..] else {
        panic!("{:?}", section.cuts);
    };
    assert_eq!(
        (web.name.as_str(), web.from),
        ("web", Point::new(-1.0, 4.0))
    );
    assert_eq!(flange.name, "cut 2");
    assert_eq!(flange.from, Point::new(3.0, 0.25));
    assert_eq!(flange.to, Point::new(2.0, 0.25));
}

#[test]
fn probes_written_with_few_digits_lie_on_the_round_edge_they_mean() {
    let text = "[[piece]]\noutline = { circle = { at = [0, 0], d = 100 } }\n\
        [[probe]]\nat = [35.35534, 35.35534]\n[[probe]]\nat = [35.35533, 35.35533]\n";
    let read = section_from_text("disc.section.toml", text).expect("both are on the disc");
    let [outside, inside] = &read.section.probes[..] else {
        panic!("{:?}", read.section.probes);
    };
    let radius = |at: Point| at.distance(Point::default());
    assert!((radius(outside.at) - 50.0).abs() < 1e-13, "{outside:?}");
    assert_eq!(inside.at, Point::new(35.35533, 35.35533));
    let farther = text.replace("35.35534", "35.356");
    let faults = section_from_text("disc.section.toml", &farther).expect_err("one is off it");
    assert_eq!(faults.faults().len(), 1);
    assert_eq!(faults.line(&faults.faults()[0]), Some(4));
}

#[test]
fn faults_that_later_stages_find_are_told_like_those_of_reading() {
    let read = read_file("one-of-two-materials");
    let faults = read.refused(vec![read.yield_missing(read.section.pieces[0].material)]);
    let report = faults.to_string();
    assert!(
        report.contains("material \"steel\" has no yield stress to compare with"),
        "{report}"
    );
    assert!(report.contains("[material.steel]"), "{report}");
    let fault = &faults.faults()[0];
    let line = faults.line(fault).expect("the fault is located");
    let text = std::fs::read_to_string(
        section_files("good")
            .iter()
            .find(|path| file_name(path) == faults.file())
            .expect("the file is there"),
    )
    .expect("good files are UTF-8");
    assert_eq!(text.lines().nth(line - 1), Some("[material.steel]"));

    let assumed = read_file("rounded-and-arched");
    let report = assumed.refused(vec![assumed.yield_missing(0)]).to_string();
    assert!(report.contains("has no material"), "{report}");
}

/// 20 × 40 and a segment of height 10 on a chord of 40: radius 25, half angle asin(4/5).
fn area_of_nose() -> f64 {
    let angle = 2.0 * 0.8_f64.asin();
    800.0 + 0.5 * 625.0 * (angle - angle.sin())
}

#[test]
fn seams_are_as_written() {
    let read = read_file("seams-everything");
    let section = &read.section;
    assert_eq!(section.contact, Contact::Seams);
    assert_eq!(section.reference, Some(0));
    let [cap, web, splice] = &section.seams[..] else {
        panic!("{:?}", section.seams);
    };
    let request = |name: &str, between, kind| SeamRequest {
        name: name.into(),
        between,
        near: None,
        kind,
        both: false,
        gap: 0.0,
        material: 0,
    };
    let legs = |a, b| SeamKind::Fillet { legs: [a, b] };
    assert_eq!(
        cap.request,
        SeamRequest {
            both: true,
            gap: 0.125,
            material: 1,
            ..request("cap to flange", [0, 2], legs(0.3125, 0.3125))
        }
    );
    // 1 ksi is 6.894757 MPa (seven digits, from memory).
    let allowable = cap.allowable.expect("it is given");
    assert!((allowable - 150.0 / 6.894_757).abs() < 1e-5, "{allowable}");
    assert!(close(cap.direct[0], 0.1) && close(cap.direct[1], 0.012));
    let interval = cap.intermittent.expect("it is given");
    assert_eq!((interval.length, interval.pitch), (3.0, 12.0));
    assert_eq!(
        web.request,
        SeamRequest {
            near: Some(Point::new(0.25, 0.0)),
            ..request("seam 2", [1, 0], legs(0.25, 0.375))
        }
    );
    assert_eq!(
        (web.allowable, web.direct, web.intermittent),
        (Some(21.0), [0.0; 2], None)
    );
    assert_eq!(
        splice.request,
        SeamRequest {
            near: Some(Point::new(-0.25, -8.0)),
            ..request(
                "splice",
                [1, 3],
                SeamKind::Groove {
                    depth: Some(0.1875)
                }
            )
        }
    );

    // The cap is 1/16 in off, so that its throat starts at its own corner: the legs' triangle is
    // 0.3125/√2 high, and a leg that starts 1/16 in lower has 0.25 left: 0.25/√2.
    let domain = &read.domain;
    let names: Vec<&str> = domain.seams.iter().map(|seam| seam.name.as_str()).collect();
    assert_eq!(
        names,
        [
            "cap to flange, end 1",
            "cap to flange, end 2",
            "seam 2",
            "splice"
        ]
    );
    for seam in &domain.seams[..2] {
        assert!(close(seam.throat_length, 0.25 * 0.5_f64.sqrt()), "{seam:?}");
        assert!((seam.gap - 0.0625).abs() < 1e-12, "{seam:?}");
    }
    // Twice the area of the legs' triangle over its longest side.
    assert!(close(
        domain.seams[2].throat_length,
        0.25 * 0.375 / 0.25_f64.hypot(0.375)
    ));
    assert!(close(domain.seams[3].throat_length, 0.1875));
}
