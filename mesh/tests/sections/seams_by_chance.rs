//! Seams by chance: of any proportions, between pieces that fit together and pieces that do not.

use proptest::prelude::*;

use sectile_mesh::domain::fault::Fault;
use sectile_mesh::domain::seam::{SeamKind, SeamRequest};
use sectile_mesh::domain::{build, build_seamed};
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::shape::circle;
use sectile_mesh::triangulate::{Sizing, triangulate};

use crate::chance::{lattice_pieces, wall};
use crate::check::check_mesh;
use crate::seams::{both, check, fillet, groove, near, ring_part};
use crate::shapes::{moved, of_rings, piece, point, rectangle};

/// Lengths from next to nothing to more than any piece has, now and then no length.
fn length() -> impl Strategy<Value = f64> {
    prop_oneof![
        8 => 0.05..1.5_f64,
        2 => (-12.0..1.0_f64).prop_map(|e| 10.0_f64.powf(e)),
        1 => prop::sample::select(vec![0.5, 1.0, 2.0, 0.0, -1.0, f64::NAN, 1e300]),
    ]
}

fn request() -> impl Strategy<Value = SeamRequest> {
    let kind = prop_oneof![
        (length(), length()).prop_map(|(a, b)| SeamKind::Fillet { legs: [a, b] }),
        length().prop_map(|a| SeamKind::Fillet { legs: [a, a] }),
        prop::option::of(length()).prop_map(|depth| SeamKind::Groove { depth }),
    ];
    let near = prop::option::of((-3.0..4.0_f64, -3.0..4.0_f64));
    let gap = prop_oneof![3 => Just(0.0), 1 => length()];
    (0..6_usize, 0..6_usize, near, kind, any::<bool>(), gap).prop_map(
        |(a, b, near, kind, both, gap)| SeamRequest {
            name: "seam".into(),
            between: [a, b],
            near: near.map(|(x, y)| point(x, y)),
            kind,
            both,
            gap,
            material: 0,
        },
    )
}

/// Builds and meshes; what is built must mesh without defects or say why not.
fn hold(pieces: &[Piece], requests: &[SeamRequest]) {
    let Ok(domain) = build_seamed(pieces, requests) else {
        return;
    };
    let sizing = Sizing {
        max_area: None,
        max_vertices: 20_000,
    };
    let Ok(mesh) = triangulate(&domain, &sizing) else {
        return;
    };
    let found = sectile_mesh::quality::defects(&mesh);
    assert!(found.is_empty(), "{found:?}");
    assert_eq!(mesh.loop_is_outer.iter().filter(|o| **o).count(), 1);
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 100, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn lapped_plates_of_any_proportions(
        (b, t, u, left, right) in (20.0..300.0_f64, 1.0..40.0_f64, 1.0..40.0_f64, 0.1..60.0_f64, 0.1..60.0_f64),
        (first, second) in (0.05..1.0_f64, 0.3..3.0_f64),
        turn in 0.0..360.0_f64,
    ) {
        let outlines = [rectangle(0.0, 0.0, left + b + right, t), rectangle(left, t, left + b, t + u)];
        let pieces: Vec<Piece> = outlines.iter().map(|o| piece("plate", moved(o, 5.0, -8.0, turn))).collect();
        let leg = first * u.min(left).min(right);
        let other = (leg * second).min(left).min(right);
        let request = SeamRequest { kind: SeamKind::Fillet { legs: [other, leg] }, ..both(fillet([0, 1], 1.0)) };
        let domain = build_seamed(&pieces, &[request]).unwrap();
        check("lapped", &pieces, &domain, leg * other);
        let depth = first.min(0.49) * b;
        let domain = build_seamed(&pieces, &[both(groove([0, 1], Some(depth)))]).unwrap();
        check("lapped, grooves", &pieces, &domain, 0.0);
    }

    #[test]
    fn curved_plates_of_any_proportions(
        (r, wall, t) in (20.0..200.0_f64, 0.05..1.0_f64, 0.02..0.5_f64),
        (from, cover) in (0.0..6.0_f64, 0.05..5.5_f64),
        (leg, share) in (0.05..1.0_f64, 0.02..0.49_f64),
    ) {
        let inside = if wall > 0.9 { circle(point(0.0, 0.0), 2.0 * r) } else { circle(point(0.0, 0.0), 2.0 * r * wall) };
        let outer = circle(point(0.0, 0.0), 2.0 * r);
        let body = if wall > 0.9 { of_rings(inside, Vec::new()) } else { of_rings(outer, vec![inside]) };
        let pad = ring_part(r, r * (1.0 + t), from, from + cover);
        let pieces = vec![piece("body", body), piece("pad", pad)];
        let domain = build_seamed(&pieces, &[both(groove([1, 0], Some(share * cover * r)))]).unwrap();
        check("curved, grooves", &pieces, &domain, 0.0);
        // The legs are no longer than a third of a radius, and the welds do not meet behind the pad.
        let leg = (leg * t * r).min(0.3 * r).min(0.4 * r * (std::f64::consts::TAU - cover));
        let domain = build_seamed(&pieces, &[both(fillet([0, 1], leg))]).unwrap();
        let along = leg / r;
        // A triangle between the radius over the leg along it and the arc, less the sector.
        let metal = 0.5 * r * (r + leg) * along.sin() - 0.5 * r * r * along;
        check("curved, fillets", &pieces, &domain, 2.0 * metal);
    }

    #[test]
    fn fit_ups_of_any_proportions(
        (b, t, left, right) in (20.0..300.0_f64, 2.0..40.0_f64, 10.0..60.0_f64, 10.0..60.0_f64),
        (gap, leg) in (0.001..1.0_f64, 0.1..1.0_f64),
        (lean, turn) in (-25.0..25.0_f64, 0.0..360.0_f64),
        swapped in any::<bool>(),
    ) {
        // A leaning web over a plate, its lower side held off at its nearer corner.
        let web = moved(&rectangle(-0.5 * t, 0.0, 0.5 * t, b), 0.0, 0.0, lean);
        let low = web.outer.sides.iter().map(|s| s.from.y).fold(f64::INFINITY, f64::min);
        let web = moved(&web, 0.0, gap - low, 0.0);
        let plate = rectangle(-left - t, -10.0, right + t, 0.0);
        let outlines = if swapped { [web, plate] } else { [plate, web] };
        let pieces: Vec<Piece> = outlines.iter().map(|o| piece("plate", moved(o, 5.0, -8.0, turn))).collect();
        let most = gap + t * lean.to_radians().sin().abs();
        let leg = (1.2 * most / lean.to_radians().cos() + leg * t).min(10.0).min(b);
        let request = SeamRequest { gap: 1.001 * most, ..both(fillet([0, 1], leg)) };
        match build_seamed(&pieces, &[request]) {
            Ok(domain) => {
                let metal = leg * leg * lean.to_radians().cos();
                check("fit-up", &pieces, &domain, metal);
                for seam in &domain.seams {
                    prop_assert!(seam.gap > 0.0 && seam.gap < most + 1e-9);
                }
            }
            Err(faults) => prop_assert!(most > 8.0, "{:?}", faults),
        }
    }

    #[test]
    fn walls_fused_by_full_grooves_are_solid(pieces in wall()) {
        let Ok(solid) = build(&pieces) else { return Ok(()) };
        let mut pairs: Vec<[usize; 2]> = solid
            .sides
            .iter()
            .filter_map(|s| Some([s.left?.min(s.right?) as usize, s.left?.max(s.right?) as usize]))
            .collect();
        pairs.sort_unstable();
        pairs.dedup();
        let requests: Vec<SeamRequest> = pairs.iter().map(|&pair| groove(pair, None)).collect();
        match build_seamed(&pieces, &requests) {
            Err(faults) => {
                let hanging = matches!(faults[..], [Fault::PiecesHanging { .. }]);
                prop_assert!(solid.parts > 1 && hanging, "{:?}", faults);
            }
            Ok(domain) => {
                prop_assert_eq!(&domain.points, &solid.points);
                prop_assert_eq!(&domain.sides, &solid.sides);
            }
        }
        // Over a part of each line from one end.
        let requests: Vec<SeamRequest> = pairs.iter().map(|&pair| near(-9.0, 100.0, groove(pair, Some(0.04)))).collect();
        if let Ok(domain) = build_seamed(&pieces, &requests) {
            let mesh = triangulate(&domain, &Sizing::default()).unwrap();
            check_mesh("partly joined wall", &mesh, crate::check::exact_area(&pieces));
        }
    }

    #[test]
    fn any_seams_between_blocks_never_panic(pieces in wall(), requests in prop::collection::vec(request(), 0..6)) {
        hold(&pieces, &requests);
    }

    #[test]
    fn any_seams_between_lattice_pieces_never_panic(pieces in lattice_pieces(), requests in prop::collection::vec(request(), 0..4)) {
        hold(&pieces, &requests);
    }
}
