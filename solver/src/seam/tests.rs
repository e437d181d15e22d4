#![allow(clippy::unwrap_used)]

use std::f64::consts::SQRT_2;

use sectile_mesh::Point;
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::domain::{Domain, build_seamed};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::profile::{Dimensions, Form, profile};
use sectile_mesh::outline::shape::{circle, polygon};
use sectile_mesh::outline::side::{Arc, Circle, Side};

use super::demand::{Laying, Size, demand};
use super::flow::SeamFlows;
use crate::geometry::Geometry;
use crate::kernel::Kernel;
use crate::material::Material;
use crate::quantity::Quantity;
use crate::solution::{Settings, Solution, solve};
use crate::space::Space;
use crate::stress::field::UnitFields;
use crate::stress::forces::SectionForces;

fn piece(name: &str, outline: Outline) -> Piece {
    Piece {
        name: name.into(),
        outline,
        material: 0,
    }
}

fn rectangle(x0: f64, y0: f64, x1: f64, y1: f64) -> Outline {
    let corners = [[x0, y0], [x1, y0], [x1, y1], [x0, y1]];
    Outline {
        outer: polygon(&corners.map(|p| Point::new(p[0], p[1]))),
        holes: Vec::new(),
    }
}

fn fillet(between: [usize; 2], leg: f64) -> SeamRequest {
    SeamRequest {
        name: "seam".into(),
        between,
        near: None,
        kind: SeamKind::Fillet { legs: [leg; 2] },
        both: true,
        gap: 0.0,
        material: 0,
    }
}

fn groove(between: [usize; 2], depth: Option<f64>, near: Option<[f64; 2]>) -> SeamRequest {
    SeamRequest {
        kind: SeamKind::Groove { depth },
        near: near.map(|p| Point::new(p[0], p[1])),
        both: near.is_none(),
        ..fillet(between, 1.0)
    }
}

struct Seamed {
    domain: Domain,
    solution: Solution,
    fields: UnitFields,
    flows: SeamFlows,
}

fn seamed(pieces: &[Piece], requests: &[SeamRequest], tolerance: f64) -> Seamed {
    let domain = build_seamed(pieces, requests).unwrap();
    let material = |name: &str, young: f64, poisson: f64| Material {
        name: name.into(),
        young,
        poisson,
        shear: 0.5 * young / (1.0 + poisson),
        yield_stress: None,
        density: None,
    };
    let materials = [
        material("steel", 210_000.0, 0.3),
        material("aluminium", 70_000.0, 0.33),
    ];
    let settings = Settings {
        tolerance,
        order: None,
        max_unknowns: 500_000,
        reference: None,
    };
    let solution = solve(&domain, &materials, 1e-3, &settings, &mut |_| {}).unwrap();
    let fields = UnitFields::new(&solution, 1).unwrap();
    let flows = SeamFlows::new(&solution, &domain, &fields.superposition).unwrap();
    assert_eq!(flows.len(), domain.seams.len());
    Seamed {
        domain,
        solution,
        fields,
        flows,
    }
}

const UNITS: [SectionForces; 4] = {
    let zero = SectionForces {
        n: 0.0,
        vx: 0.0,
        vy: 0.0,
        mx: 0.0,
        my: 0.0,
        t: 0.0,
        b: 0.0,
        tw: 0.0,
    };
    [
        SectionForces { vx: 1.0, ..zero },
        SectionForces { vy: 1.0, ..zero },
        SectionForces { t: 1.0, ..zero },
        SectionForces { tw: 1.0, ..zero },
    ]
};

/// The parts that throats divide the section into, by piece of the domain.
fn parts(domain: &Domain) -> Vec<usize> {
    let n = domain.piece_names.len();
    let mut part: Vec<usize> = (0..n).collect();
    for side in &domain.sides {
        let (Some(a), Some(b)) = (side.left, side.right) else {
            continue;
        };
        if domain
            .seams
            .iter()
            .any(|s| s.hands == [a, b] || s.hands == [b, a])
        {
            continue;
        }
        let (a, b) = (part[a as usize], part[b as usize]);
        for p in &mut part {
            if *p == a.max(b) {
                *p = a.min(b);
            }
        }
    }
    part
}

/// On every part and for every unit force: the flows out of it through its seams balance the source,
/// to 1e-8 of the flows that there are.
fn check_balance(name: &str, s: &Seamed) {
    let solved = s.solution.solved.as_ref().unwrap();
    let geometry = Geometry::new(&s.solution.mesh, &solved.frame);
    let kernel = Kernel {
        geometry: &geometry,
        space: Space::new(&s.solution.mesh, s.solution.order),
        tables: solved.tables,
        ratios: &solved.ratios,
    };
    let torsion = &solved.fields.torsion;
    let integrals = solved
        .fields
        .sources
        .map(|source| kernel.source_integrals(source, Some(torsion)));
    let part = parts(&s.domain);
    let mut distinct = part.clone();
    distinct.sort_unstable();
    distinct.dedup();
    assert!(distinct.len() > 1, "{name}");
    // By symmetry there may be none: then a ten-thousandth of force over length, or torque over length².
    let l = solved.frame.scale;
    let least = [1.0 / l, 1.0 / l, 1.0 / (l * l), 1.0 / (l * l)].map(|q| 1e-4 * q);
    for (u, unit) in UNITS.iter().enumerate() {
        let flow = |k: usize| s.flows.under(k, unit);
        let size = (0..s.flows.len()).fold(0.0_f64, |m, k| m.max(flow(k).abs()));
        for &own in &distinct {
            let mut out = 0.0;
            for (k, seam) in s.domain.seams.iter().enumerate() {
                let [a, b] = seam.hands.map(|p| part[p as usize] == own);
                out += (f64::from(u8::from(a)) - f64::from(u8::from(b))) * flow(k);
            }
            let mut gained = [0.0; crate::problem::COUNT];
            for (k, &problem) in crate::problem::SOURCES.iter().enumerate() {
                gained[problem] = (0..s.solution.mesh.triangles.len())
                    .filter(|&t| part[s.solution.mesh.piece[t] as usize] == own)
                    .map(|t| integrals[k][t])
                    .sum();
            }
            let gained = s.fields.superposition.combined(&gained)[u] * solved.frame.scale;
            let scale = size.max(gained.abs()).max(least[u]);
            assert!(
                (out + gained).abs() <= 1e-8 * scale,
                "{name}, unit {u}, part {own}: {out} out, {gained} gained"
            );
        }
    }
}

/// A disc, or a ring whose bore is off its middle.
fn of_circles(d: f64, bore: Option<f64>, off: f64) -> Outline {
    let centre = |off: f64| Point::new(off, 0.5 * off);
    Outline {
        outer: circle(centre(if bore.is_some() { 0.0 } else { off }), d),
        holes: bore
            .map(|bore| circle(centre(off), bore))
            .into_iter()
            .collect(),
    }
}

/// A part of a ring about the origin.
fn ring_part(r0: f64, r1: f64, from: f64, to: f64) -> Outline {
    let at = |r: f64, a: f64| Point::new(r * a.cos(), r * a.sin());
    let arc = |r: f64, a: f64, b: f64| Side {
        from: at(r, a),
        to: at(r, b),
        arc: Some(Arc {
            circle: Circle {
                centre: Point::default(),
                radius: r,
            },
            sweep: b - a,
        }),
        corner: 0,
    };
    let line = |from, to| Side {
        from,
        to,
        arc: None,
        corner: 0,
    };
    Outline {
        outer: Ring {
            sides: vec![
                arc(r1, from, to),
                line(at(r1, to), at(r0, to)),
                arc(r0, to, from),
                line(at(r0, from), at(r1, from)),
            ],
        },
        holes: Vec::new(),
    }
}

fn cover_plated() -> Vec<Piece> {
    // Flanges 200 × 15, web 10 × 300 fused to one piece, plate 160 × 12.
    let d = Dimensions {
        h: 330.0,
        b: 200.0,
        tw: 10.0,
        tf: 15.0,
        ..Dimensions::default()
    };
    vec![
        piece("beam", profile(Form::I, &d).unwrap()),
        piece("top", rectangle(-80.0, 165.0, 80.0, 177.0)),
        piece("bottom", rectangle(-80.0, -177.0, 80.0, -165.0)),
    ]
}

#[test]
fn flows_balance_on_every_part() {
    let flats = vec![
        piece("lower", rectangle(0.0, 0.0, 100.0, 10.0)),
        piece("upper", rectangle(15.0, 10.0, 115.0, 22.0)),
    ];
    let box_of_plates = vec![
        piece("bottom", rectangle(0.0, 0.0, 200.0, 20.0)),
        piece("top", rectangle(0.0, 280.0, 200.0, 300.0)),
        piece("left", rectangle(0.0, 20.0, 16.0, 280.0)),
        piece("right", rectangle(184.0, 20.0, 200.0, 280.0)),
    ];
    let corner = |a, b, x, y| groove([a, b], Some(10.0), Some([x, y]));
    let disc = of_circles(100.0, None, 0.0);
    let mut mixed = flats.clone();
    mixed[1].material = 1;
    let cases = [
        ("two materials", mixed, vec![fillet([0, 1], 6.0)]),
        ("flats", flats.clone(), vec![fillet([0, 1], 6.0)]),
        (
            "one fillet",
            flats.clone(),
            vec![SeamRequest {
                near: Some(Point::new(15.0, 10.0)),
                both: false,
                ..fillet([1, 0], 6.0)
            }],
        ),
        ("grooves", flats, vec![groove([1, 0], Some(12.0), None)]),
        (
            "cover plates",
            cover_plated(),
            vec![fillet([0, 1], 6.0), fillet([2, 0], 5.0)],
        ),
        (
            "box",
            box_of_plates,
            vec![
                corner(0, 2, 0.0, 20.0),
                corner(0, 3, 200.0, 20.0),
                corner(1, 2, 0.0, 280.0),
                corner(1, 3, 200.0, 280.0),
            ],
        ),
        (
            "pad on a bar",
            vec![
                piece("bar", disc.clone()),
                piece("pad", ring_part(50.0, 58.0, 0.3, 1.9)),
            ],
            vec![groove([0, 1], Some(20.0), None)],
        ),
        (
            "pad on a bar, fillets",
            vec![
                piece("bar", disc),
                piece("pad", ring_part(50.0, 58.0, 0.3, 1.9)),
            ],
            vec![fillet([0, 1], 5.0)],
        ),
        (
            "core in a tube",
            vec![
                piece("core", of_circles(100.0, None, 2.0)),
                piece("tube", of_circles(130.0, Some(100.0), 2.0)),
            ],
            vec![groove([0, 1], None, None)],
        ),
        (
            "fit-up",
            vec![
                piece("flange", rectangle(-60.0, -14.0, 50.0, -0.7)),
                piece("web", rectangle(-4.0, 0.0, 4.0, 100.0)),
            ],
            vec![SeamRequest {
                gap: 1.0,
                ..fillet([0, 1], 6.0)
            }],
        ),
    ];
    for (name, pieces, requests) in cases {
        check_balance(name, &seamed(&pieces, &requests, 2e-2));
    }
}

#[test]
fn flow_of_a_cover_plate_is_v_q_over_n_i() {
    // Jourawski's formula, from memory: V Q over I, shared by the two seams of each plate alike. The weld
    // metal counts with the part that it is on.
    let leg = 6.0;
    let s = seamed(
        &cover_plated(),
        &[fillet([0, 1], leg), fillet([0, 2], leg)],
        1e-2,
    );
    let inertia = s.solution.get(Quantity::SecondMomentX).unwrap().value;
    // Half of each triangle lies on the plate: corners root, foot and toe on the plate's edge.
    let half = 0.25 * leg * leg;
    let first_moment = 160.0 * 12.0 * 171.0 + 2.0 * half * (165.0 + (leg + 0.5 * leg) / 3.0);
    for (plate, seams) in s.domain.seams.chunks(2).enumerate() {
        // What the plate's stress gains flows in from the beam, against the sense of τ.
        let sign = if seams[0].at.y > 0.0 { 1.0 } else { -1.0 };
        let expected = sign * first_moment / inertia;
        let [one, other] = [0, 1].map(|k| s.flows.under(2 * plate + k, &UNITS[1]));
        let flow = one + other;
        assert!(
            (flow / expected - 1.0).abs() < 1e-9,
            "{flow}, expected {expected}"
        );
        // Each has half of it by symmetry, which the mesh has not.
        assert!((one / other - 1.0).abs() < 1e-3, "{one} {other}");
    }
}

#[test]
fn flow_of_a_thin_closed_box_in_torsion_is_t_over_twice_its_area() {
    // Bredt's first formula, from memory: q = T/(2A₀), thin walls.
    let (a, b, t) = (300.0, 200.0, 2.0);
    let pieces = vec![
        piece("bottom", rectangle(0.0, 0.0, a, t)),
        piece("top", rectangle(0.0, b - t, a, b)),
        piece("left", rectangle(0.0, t, t, b - t)),
        piece("right", rectangle(a - t, t, a, b - t)),
    ];
    let full = |x, y| groove([x, y], None, Some([0.0, 0.0]));
    let requests = [full(0, 2), full(2, 1), full(1, 3), full(3, 0)];
    let s = seamed(&pieces, &requests, 1e-2);
    let expected = 0.5 / ((a - t) * (b - t));
    for k in 0..4 {
        // Clockwise from the bottom over the left, the top and the right plate: against the torque.
        let flow = s.flows.under(k, &UNITS[2]);
        assert!((flow / -expected - 1.0).abs() < 1e-3, "{flow} {expected}");
    }
}

#[test]
fn demand_adds_vectors_and_finds_sizes() {
    let pieces = vec![
        piece("flange", rectangle(-60.0, -14.0, 60.0, 0.0)),
        piece("web", rectangle(-4.0, 1.0, 4.0, 100.0)),
    ];
    let request = SeamRequest {
        gap: 1.0,
        ..fillet([0, 1], 6.0)
    };
    let domain = build_seamed(&pieces, &[request]).unwrap();
    let seam = &domain.seams[0];
    assert!((seam.full_throat - 6.0 / SQRT_2).abs() < 1e-12);
    assert!((seam.throat_length - 5.0 / SQRT_2).abs() < 1e-12);
    let laying = Laying {
        direct: [30.0, -60.0],
        intermittent: Some([50.0, 150.0]),
        allowable: Some(100.0),
    };
    // √(20² + 30² + 60²) = 70, over a third of the length.
    let d = demand(seam, &laying, -20.0);
    assert!((d.resultant - 210.0).abs() < 1e-12);
    assert!((d.stress - 210.0 / seam.throat_length).abs() < 1e-12);
    assert!((d.utilisation.unwrap() - d.stress / 100.0).abs() < 1e-12);
    // A throat of 2.1 and a gap of 1: legs of 2.1 √2 + 1.
    let Some(Size::Legs(legs)) = d.needed else {
        panic!()
    };
    for leg in legs {
        assert!((leg - (2.1 * SQRT_2 + 1.0)).abs() < 1e-12, "{leg}");
    }
    // With those legs the seam is just used up.
    let enough = SeamRequest {
        gap: 1.0,
        ..fillet([0, 1], legs[0])
    };
    let domain = build_seamed(&pieces, &[enough]).unwrap();
    let d = demand(&domain.seams[0], &laying, -20.0);
    assert!((d.utilisation.unwrap() - 1.0).abs() < 1e-9);
    // Nothing stated: nothing judged.
    let d = demand(&domain.seams[0], &Laying::default(), 0.0);
    assert_eq!((d.resultant, d.utilisation, d.needed), (0.0, None, None));
}

#[test]
fn depth_needed_of_a_groove() {
    let pieces = vec![
        piece("lower", rectangle(0.0, 0.0, 100.0, 10.0)),
        piece("upper", rectangle(0.0, 10.0, 100.0, 20.0)),
    ];
    let domain = build_seamed(&pieces, &[groove([0, 1], Some(4.0), None)]).unwrap();
    let laying = Laying {
        allowable: Some(50.0),
        ..Laying::default()
    };
    let d = demand(&domain.seams[1], &laying, 300.0);
    assert!((d.stress - 75.0).abs() < 1e-9 && (d.utilisation.unwrap() - 1.5).abs() < 1e-12);
    assert_eq!(d.needed, Some(Size::Depth(6.0)));
}
