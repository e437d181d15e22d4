//! Whole figures from made-up sections and fields: everything on the page, nothing over anything.

#![allow(clippy::unwrap_used)]
use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_mesh::{Point, Vector};
use sectile_solver::figure::{Figure, Trust};
use sectile_solver::quantity::Quantity as Q;
use sectile_solver::sample::{Lattice, UnitForce};
use sectile_solver::solution::{Settings, solve};

use sectile_solver::stress::measure::Measure;

use super::page::Finished;
use super::style::Drawing;
use super::surface::{Sharing, Surface};
use super::*;
use crate::interaction::Interaction;
use crate::write::actions::tests::Sample;

fn bands(width_mm: f64) -> Style {
    Style {
        width_mm,
        drawing: Drawing::Bands,
    }
}

fn lines(width_mm: f64) -> Style {
    Style {
        width_mm,
        drawing: Drawing::Lines,
    }
}

fn units() -> Units {
    Units {
        length: "mm",
        force: "kN",
        moment: "kN m".into(),
        stress: "MPa",
    }
}

fn properties(centres: [(f64, f64); 3], angle: f64) -> Vec<(Q, Figure)> {
    let f = |value: f64| Figure::around(value, 0.0012, Trust::Bounded);
    let e = |value: f64| Figure::around(value, 0.0, Trust::Exact);
    vec![
        (Q::CentroidX, e(centres[0].0)),
        (Q::CentroidY, e(centres[0].1)),
        (Q::PrincipalMoment1, e(2e6)),
        (Q::PrincipalMoment2, e(1e6)),
        (Q::PrincipalAngle, e(angle)),
        (Q::ShearCentreX, f(centres[1].0)),
        (Q::ShearCentreY, f(centres[1].1)),
        (Q::FlexureCentreX, f(centres[2].0)),
        (Q::FlexureCentreY, f(centres[2].1)),
    ]
}

/// Well formed, labels on the page and clear of each other, file small.
fn sound(name: &str, figure: &Finished) {
    if let Ok(folder) = std::env::var("SECTILE_FIGURES") {
        std::fs::write(format!("{folder}/{name}.svg"), &figure.svg).unwrap();
    }
    assert!(
        figure.svg.len() <= 400_000,
        "{name}: {} bytes",
        figure.svg.len()
    );
    let mut content = String::new();
    let _ = svg::read(&figure.svg).map(|_| content.push('x'));
    assert!(!content.is_empty());
    for (i, a) in figure.labels.iter().enumerate() {
        assert!(
            figure.page.contains(a),
            "{name}: {a:?} outside {:?}",
            figure.page
        );
        for b in &figure.marks {
            assert!(
                !a.grown(-1e-6).overlaps(b),
                "{name}: {a:?} over the mark {b:?}"
            );
        }
        for b in &figure.labels[..i] {
            assert!(!a.grown(-1e-6).overlaps(b), "{name}: {a:?} over {b:?}");
        }
    }
    for (x, y) in coordinates(&figure.svg) {
        let p = Rect::about(Point::new(x, y), 0.0);
        assert!(figure.page.contains(&p), "{name}: ({x}, {y}) outside");
    }
}

use super::rect::Rect;

/// End points of all path data, in mm.
fn coordinates(text: &str) -> Vec<(f64, f64)> {
    use svg::node::element::path::{Command, Data, Position};
    use svg::parser::Event;
    let mut out = Vec::new();
    let mut scale = 1.0;
    for event in svg::read(text).unwrap() {
        let Event::Tag(name, kind, attributes) = event else {
            continue;
        };
        if name == "g" {
            scale = match (kind, attributes.get("transform")) {
                (svg::node::element::tag::Type::Start, Some(t)) => t
                    .trim_start_matches("scale(")
                    .trim_end_matches(')')
                    .parse()
                    .unwrap(),
                _ => 1.0,
            };
        }
        let Some(data) = attributes.get("d") else {
            continue;
        };
        let (mut x, mut y) = (0.0_f64, 0.0_f64);
        let mut start = (0.0, 0.0);
        for command in Data::parse(data).unwrap().iter() {
            let (position, parameters, stride, first) = match command {
                Command::Move(p, v) => (p, v, 2, true),
                Command::Line(p, v) => (p, v, 2, false),
                Command::EllipticalArc(p, v) => (p, v, 7, false),
                Command::Close => {
                    (x, y) = start;
                    continue;
                }
                other => panic!("{other:?}"),
            };
            for chunk in parameters.chunks(stride) {
                let (a, b) = (f64::from(chunk[stride - 2]), f64::from(chunk[stride - 1]));
                match position {
                    Position::Absolute => (x, y) = (a, b),
                    Position::Relative => (x, y) = (x + a, y + b),
                }
                if first {
                    start = (x, y);
                }
                out.push((scale * x, scale * y));
            }
        }
    }
    assert!(!out.is_empty());
    out
}

#[test]
fn section_figures() {
    type Case = (&'static str, Domain, [(f64, f64); 3], f64);
    let cases: Vec<Case> = vec![
        (
            "section-channel",
            samples::channel(),
            [(22.2, 100.0), (-25.36963, 100.0), (-25.9, 100.0)],
            0.0,
        ),
        (
            "section-rectangle",
            samples::rectangle(300.0, 20.0),
            [(150.0, 10.0); 3],
            0.0,
        ),
        (
            "section-annulus",
            samples::annulus(0.0, 0.0, 60.0, 50.0),
            [(0.0, 0.0); 3],
            12.0,
        ),
        (
            "section-half-disc",
            samples::half_disc(50.0),
            [(0.0, 21.2), (0.0, 25.4), (0.0, 27.1)],
            -33.0,
        ),
        (
            "section-two-pieces",
            samples::two_pieces(),
            [(50.0, 25.0), (51.0, 25.0), (1000.0, 25.0)],
            45.0,
        ),
    ];
    for (name, domain, centres, angle) in &cases {
        for width in [60.0, 80.0, 160.0, 210.0] {
            let figure = section::draw(
                "Boatyard hoist runway, an invented scenario",
                &units(),
                domain,
                &[],
                &properties(*centres, *angle),
                width,
            );
            sound(&format!("{name}-{width}"), &figure);
        }
    }
}

#[test]
fn the_key_names_materials_joints_and_seams() {
    let centres = properties([(0.0, 5.0), (0.0, 8.0), (0.0, 8.0)], 0.0);
    let materials = ["oak", "elm", "ash"];
    let draw = |domain: &Domain| {
        section::draw("Joined", &units(), domain, &materials, &centres, 160.0).svg
    };
    let joined = draw(&samples::joined());
    for word in [
        "oak",
        "elm",
        "ash",
        "weld metal",
        "groove",
        "touching, not joined",
        "cover to flat, end 2",
        "rib to flat",
    ] {
        assert!(joined.contains(word), "{word}");
    }
    let plain = draw(&samples::channel());
    for word in ["oak", "weld metal", "groove", "touching"] {
        assert!(!plain.contains(word), "{word}");
    }
}

#[test]
fn mesh_figures() {
    let annulus = samples::annulus(0.0, 0.0, 2.0, 1.0);
    let mesh = samples::annulus_mesh(24, 2.0, 1.0);
    let figure = mesh::draw("Ring", &units(), &annulus, &mesh, "48 triangles", 160.0);
    sound("mesh-annulus", &figure);
    assert!(figure.svg.contains("a"), "arcs");

    let rectangle = samples::rectangle(100.0, 60.0);
    let mesh = samples::rectangle_mesh(30, 20, 100.0, 60.0);
    let figure = mesh::draw(
        "Plate",
        &units(),
        &rectangle,
        &mesh,
        "1200 triangles",
        160.0,
    );
    sound("mesh-rectangle", &figure);
    assert!(!figure.svg.contains("are not drawn"));
}

#[test]
fn every_inner_side_of_a_mesh_is_drawn_once() {
    let domain = samples::rectangle(100.0, 60.0);
    let mesh = samples::rectangle_mesh(7, 5, 100.0, 60.0);
    let figure = mesh::draw("Plate", &units(), &domain, &mesh, "", 160.0);
    let start = figure.svg.find("d=\"m").unwrap() + 3;
    let data = &figure.svg[start..start + figure.svg[start..].find('"').unwrap()];
    let inner = mesh
        .sides
        .iter()
        .filter(|s| s.right != sectile_mesh::mesh::NONE)
        .count();
    assert_eq!(data.matches('l').count(), inner);
}

fn field_on(mesh: &sectile_mesh::mesh::Mesh, divisions: usize) -> (Surface, Vec<Point>) {
    let lattice = Lattice::new(divisions);
    let sharing = Sharing::new(mesh, &lattice);
    let positions = samples::straight_positions(mesh, &lattice);
    let surface = sharing.surface(&positions);
    let points = surface.points.clone();
    (surface, points)
}

#[test]
fn warping_figures() {
    // The rectangle's first terms: antisymmetric in both axes about the middle.
    for (b, h) in [(100.0, 60.0), (200.0, 15.0), (20.0, 90.0)] {
        let domain = samples::rectangle(b, h);
        let mesh = samples::rectangle_mesh(12, 8, b, h);
        let (surface, points) = field_on(&mesh, 6);
        let values: Vec<f64> = points
            .iter()
            .map(|p| {
                let (x, y) = (p.x - b / 2.0, p.y - h / 2.0);
                x * y
                    - 0.2 * h * h * (3.0 * x / b).sinh() * (std::f64::consts::PI * y / h).sin()
                        / 2.0
            })
            .collect();
        let figure = warping::draw(
            "Plate",
            &units(),
            &domain,
            &surface,
            &values,
            Some(Point::new(b / 2.0, h / 2.0)),
            bands(160.0),
        );
        sound(&format!("warping-{b}"), &figure);
    }
}

#[test]
fn stress_figures() {
    let domain = samples::annulus(0.0, 0.0, 2.0, 1.0);
    let mesh = samples::annulus_mesh(90, 2.0, 1.0);
    let (surface, points) = field_on(&mesh, 6);
    let stress: Vec<Vector> = points
        .iter()
        .map(|p| Vector::new(-p.y, p.x) * 1e-7)
        .collect();
    let figure = stress::draw(
        UnitForce::Torque,
        "Ring",
        &units(),
        &domain,
        &surface,
        &stress,
        &[],
        Some(Point::default()),
        bands(160.0),
    );
    sound("stress-annulus", &figure);

    let (b, h) = (200.0, 30.0);
    let domain = samples::rectangle(b, h);
    let mesh = samples::rectangle_mesh(20, 6, b, h);
    let (surface, points) = field_on(&mesh, 6);
    let peak = Point::new(0.0, h);
    let stress: Vec<Vector> = points
        .iter()
        .map(|p| {
            let eta = 2.0 * p.y / h - 1.0;
            Vector::new(
                0.0,
                1e-3 * (1.0 - eta * eta) + 2e-3 / (p.distance(peak) + 0.02),
            )
        })
        .collect();
    let excluded = [Circle {
        centre: peak,
        radius: 5.0,
    }];
    for width in [90.0, 160.0] {
        let figure = stress::draw(
            UnitForce::ShearY,
            "Plate",
            &units(),
            &domain,
            &surface,
            &stress,
            &excluded,
            Some(Point::new(100.0, 15.0)),
            bands(width),
        );
        sound(&format!("stress-rectangle-{width}"), &figure);
        assert!(figure.svg.contains("Dashed rings"));
    }
}

#[test]
fn quoted_extreme_keeps_out_of_excluded_circles() {
    let (surface, points) = field_on(&samples::rectangle_mesh(50, 50, 1.0, 1.0), 1);
    let values: Vec<f64> = points
        .iter()
        .map(|p| 1.0 / (0.01 + p.x.hypot(p.y)))
        .collect();
    let corner = Circle {
        centre: Point::default(),
        radius: 0.15,
    };
    let free = extreme::extreme(&surface, &values, &[], 1.0).unwrap();
    assert!((free.value - 100.0).abs() < 1e-9);
    // On the circle the field is 1 / 0.16 everywhere; interpolation errs upwards, and little.
    let kept = extreme::extreme(&surface, &values, &[corner], 1.0).unwrap();
    assert!((kept.at.distance(corner.centre) - 0.15).abs() < 1e-9);
    assert!(kept.value >= 6.25 && kept.value < 6.35, "{}", kept.value);
    let everything = [Circle {
        centre: Point::new(0.5, 0.5),
        radius: 9.0,
    }];
    assert!(extreme::extreme(&surface, &values, &everything, 1.0).is_none());
}

#[test]
fn solved_sections() {
    for (name, domain) in [
        ("channel", samples::channel()),
        ("ring", samples::annulus(50.0, 60.0, 60.0, 45.0)),
        ("half-disc", samples::half_disc(50.0)),
        ("flat", samples::rectangle(200.0, 12.0)),
        ("angle", samples::angle()),
        ("holes", samples::plate_with_holes()),
        ("joined", samples::joined()),
    ] {
        let solution = samples::solved(&domain);
        for width in [60.0, 160.0] {
            let figures = finished(
                "An invented bar",
                &units(),
                &domain,
                &samples::materials(),
                &solution,
                bands(width),
            );
            assert_eq!(figures.len(), FILES.len());
            for (file, figure) in &figures {
                sound(
                    &format!("{name}-{width}-{}", file.trim_end_matches(".svg")),
                    figure,
                );
            }
        }
    }
}

/// Channel, angle, plate with holes and ring under the sample's three actions.
fn responding() -> Vec<(&'static str, Domain, Sample)> {
    let p = Point::new;
    [
        (
            "channel",
            samples::channel(),
            p(4.0, 100.0),
            (p(-1.0, 60.0), p(9.0, 60.0)),
        ),
        (
            "angle",
            samples::angle(),
            p(4.0, 100.0),
            (p(-1.0, 60.0), p(9.0, 60.0)),
        ),
        (
            "holes",
            samples::plate_with_holes(),
            p(5.0, 5.0),
            (p(20.0, -1.0), p(20.0, 61.0)),
        ),
        (
            "ring",
            samples::annulus(50.0, 60.0, 60.0, 45.0),
            p(102.0, 60.0),
            (p(50.0, 60.0), p(150.0, 85.0)),
        ),
    ]
    .into_iter()
    .map(|(name, domain, probe, cut)| {
        let sample = Sample::of(&domain, probe, cut);
        (name, domain, sample)
    })
    .collect()
}

fn drawn(domain: &Domain, sample: &Sample, style: Style) -> Vec<(String, Finished)> {
    response::all(
        "An invented bar",
        &sample.units,
        domain,
        &sample.solution,
        &sample.names(),
        &sample.responses,
        style,
    )
}

#[test]
fn responses_have_their_figures() {
    for (name, domain, sample) in responding() {
        for width in [60.0, 160.0] {
            let figures = drawn(&domain, &sample, bands(width));
            let names: Vec<&str> = figures.iter().map(|(n, _)| n.as_str()).collect();
            assert_eq!(
                names,
                [
                    "stress-envelope-von-mises.svg",
                    "stress-pull-eccentric-von-mises.svg",
                    "stress-pull-eccentric-sigma.svg",
                    "stress-wheel-at-midspan-von-mises.svg",
                    "stress-wheel-at-midspan-sigma.svg",
                    "stress-wheel-at-midspan-tau.svg",
                    "stress-1-35-pull-plus-1-5-wheel-von-mises.svg",
                    "stress-1-35-pull-plus-1-5-wheel-sigma.svg",
                    "stress-1-35-pull-plus-1-5-wheel-tau.svg",
                    "cut-web-pull-eccentric.svg",
                    "cut-web-wheel-at-midspan.svg",
                    "cut-web-1-35-pull-plus-1-5-wheel.svg",
                ]
            );
            for (file, figure) in &figures {
                sound(
                    &format!("{name}-{width}-{}", file.trim_end_matches(".svg")),
                    figure,
                );
                if file.ends_with("-sigma.svg") {
                    assert!(figure.svg.contains("neutral axis"), "{file}");
                }
                if file.ends_with("-tau.svg") {
                    assert!(figure.svg.contains("line of action"), "{file}");
                }
            }
        }
    }
}

/// The texts that are turned, which in figures of fields are those on lines.
fn on_lines(svg: &str) -> Vec<&str> {
    let texts = svg.split("<text ").skip(1);
    texts
        .filter(|t| t.contains("rotate("))
        .map(|t| &t[t.find('>').unwrap() + 1..t.find('<').unwrap()])
        .collect()
}

/// The step that a figure in lines states.
fn stated_step(svg: &str) -> f64 {
    let rest = svg.split("from line to line ").nth(1).unwrap();
    let end = rest.find(|c: char| c != '.' && !c.is_ascii_digit());
    rest[..end.unwrap()].trim_end_matches('.').parse().unwrap()
}

#[test]
fn fields_in_lines_carry_their_levels() {
    for (name, domain, sample) in responding() {
        for width in [60.0, 160.0] {
            let draw = || {
                let solution = &sample.solution;
                let mut all: Vec<(String, Finished)> = finished(
                    "An invented bar",
                    &units(),
                    &domain,
                    &[],
                    solution,
                    lines(width),
                )
                .into_iter()
                .map(|(n, f)| (n.to_string(), f))
                .collect();
                all.extend(drawn(&domain, &sample, lines(width)));
                all
            };
            let figures = draw();
            let mut written = 0;
            for (file, figure) in &figures {
                sound(
                    &format!("lines-{name}-{width}-{}", file.trim_end_matches(".svg")),
                    figure,
                );
                if !figure.svg.contains("Lines of equal") {
                    assert!(
                        ["section", "mesh", "cut"]
                            .iter()
                            .any(|f| file.starts_with(f))
                            || figure.svg.contains("does not warp"),
                        "{file}"
                    );
                    continue;
                }
                let step = if width > 100.0 {
                    stated_step(&figure.svg)
                } else {
                    continue;
                };
                for text in on_lines(&figure.svg) {
                    let value: f64 = text.replace('−', "-").parse().unwrap();
                    let multiple = value / step;
                    assert!((multiple - multiple.round()).abs() < 1e-9, "{file}: {text}");
                    assert!(multiple.abs() < 12.5, "{file}: {text}");
                    written += 1;
                }
            }
            assert!(width < 100.0 || written > 12, "{name}: {written}");
            for ((_, once), (_, again)) in figures.iter().zip(&draw()) {
                assert_eq!(once.svg, again.svg);
            }
        }
    }
}

#[test]
fn of_many_responses_those_that_govern_are_drawn() {
    let (_, domain, mut sample) = responding().swap_remove(0);
    let one = sample.responses.list.clone();
    for i in 0..10 {
        for (k, response) in one.iter().enumerate() {
            let mut more = response.clone();
            more.name = format!("more {i} {k}");
            sample.responses.list.push(more);
        }
    }
    let chosen = response::chosen(&sample.responses);
    assert_eq!(chosen.len(), response::MOST);
    assert!(chosen.windows(2).all(|w| w[0] < w[1]));
    let value = |i: usize| {
        let (_, e) = crate::write::actions::governing(&sample.responses.list[i]).unwrap();
        e.value
    };
    let least = chosen
        .iter()
        .map(|&i| value(i))
        .fold(f64::INFINITY, f64::min);
    for i in (0..sample.responses.list.len()).filter(|i| !chosen.contains(i)) {
        assert!(value(i) <= least);
    }
    let figures = drawn(&domain, &sample, bands(160.0));
    assert!(figures.len() <= 1 + 4 * response::MOST);
    let (name, envelope) = &figures[0];
    sound(name, envelope);
    assert!(envelope.svg.contains("that govern"));
}

#[test]
fn the_quoted_extreme_is_that_of_the_tables() {
    let (_, domain, sample) = responding().swap_remove(0);
    let figures = drawn(&domain, &sample, bands(160.0));
    for (file, measure) in [
        ("stress-wheel-at-midspan-von-mises.svg", Measure::VonMises),
        ("stress-wheel-at-midspan-sigma.svg", Measure::SigmaMax),
        ("stress-wheel-at-midspan-sigma.svg", Measure::SigmaMin),
        ("stress-wheel-at-midspan-tau.svg", Measure::Tau),
    ] {
        let (_, figure) = figures.iter().find(|(n, _)| n == file).unwrap();
        let extreme = sample.responses.list[1].extremes.get(measure).unwrap();
        // 1 kN/mm² is 1000 MPa.
        let text = crate::write::digits::short(1e3 * extreme.value, 4);
        assert!(figure.svg.contains(&text), "{file}: {text}");
    }
}

#[test]
fn separate_parts_have_the_figures_that_need_no_torsion() {
    let domain = samples::two_parts();
    let solution = samples::solved(&domain);
    let figures = finished("Two flats", &units(), &domain, &[], &solution, bands(160.0));
    let names: Vec<&str> = figures.iter().map(|(name, _)| *name).collect();
    assert_eq!(names, ["section.svg", "mesh.svg"]);
    for (name, figure) in &figures {
        sound(
            &format!("parts-160-{}", name.trim_end_matches(".svg")),
            figure,
        );
    }
}

#[test]
fn a_very_fine_mesh_stays_below_the_limit_and_says_what_it_leaves_out() {
    let domain = samples::rectangle(100.0, 60.0);
    let mut mesh = samples::rectangle_mesh(260, 150, 100.0, 60.0);
    // Graded: half of the width has most of the triangles.
    for v in &mut mesh.vertices {
        v.x = 100.0 * (v.x / 100.0).powi(3);
    }
    let figure = mesh::draw("Plate", &units(), &domain, &mesh, "78000 triangles", 160.0);
    sound("mesh-very-fine", &figure);
    assert!(figure.svg.contains("are not drawn"));
    assert!(figure.svg.len() > 100_000, "{}", figure.svg.len());
}

#[test]
fn same_input_same_text() {
    let draw = || {
        section::draw(
            "Twice",
            &units(),
            &samples::channel(),
            &[],
            &properties([(22.2, 100.0), (-25.0, 100.0), (-26.0, 100.0)], 0.0),
            160.0,
        )
        .svg
    };
    assert_eq!(draw(), draw());
}

#[test]
fn interaction_curves_keep_to_their_page() {
    let sections = [
        (
            "angle",
            vec![
                (0.0, 0.0),
                (80.0, 0.0),
                (80.0, 8.0),
                (8.0, 8.0),
                (8.0, 120.0),
                (0.0, 120.0),
            ],
        ),
        (
            "strip",
            vec![(0.0, 0.0), (500.0, 0.0), (500.0, 2.0), (0.0, 2.0)],
        ),
    ];
    for (name, corners) in sections {
        let domain = samples::domain(&[samples::polygon(&corners)]);
        let mut material = samples::materials()[0].clone();
        material.yield_stress = Some(0.235);
        let settings = Settings {
            tolerance: 1e-2,
            order: None,
            max_unknowns: 100_000,
            reference: None,
        };
        let solution = solve(&domain, &[material], 1e-3, &settings, &mut |_| {}).unwrap();
        let interaction = Interaction::new(&solution).unwrap();
        for width in [60.0, 100.0, 160.0, 300.0] {
            let figure = interaction::draw("A title", &units(), &interaction, width);
            sound(&format!("interaction-{name}-{width}"), &figure);
        }
    }
}
