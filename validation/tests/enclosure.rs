//! The promise of the bounds: the true value lies inside them, whatever the tolerance and the order
//! of the elements. Where the enclosure is estimated (the warping constant's upper end), this counts
//! that the estimate is on the safe side.

use sectile_solver::figure::Trust;
use sectile_solver::solution::Settings;
use sectile_validation::cases::{self, Case, Claim, Status};
use sectile_validation::outline::{piece, polygon};
use sectile_validation::solve::{all_rows, settings, solve_pieces};
use sectile_validation::verdict::{Row, enclosure_count, judge};

/// Cases with at least one exact value.
fn exact_cases() -> Vec<Case> {
    let mut cases = cases::all().expect("case files");
    cases.retain(|c| {
        let claims = c.claims().expect("claims");
        claims.iter().any(|x| x.status == Status::Exact)
    });
    cases
}

/// Solves and fails on every exact or numeric value outside its enclosure.
fn enclosed(cases: &[Case], settings: &Settings) -> Vec<Row> {
    let mut rows = all_rows(cases, settings).expect("every case is solved");
    rows.retain(|r| matches!(r.claim.status, Status::Exact | Status::Numeric));
    let bad: Vec<String> = rows
        .iter()
        .filter(|r| !r.as_expected())
        .map(Row::line)
        .collect();
    assert!(bad.is_empty(), "{settings:?}\n{}", bad.join("\n"));
    rows
}

#[test]
fn true_values_lie_inside_at_every_tolerance() {
    let cases = exact_cases();
    for tolerance in [0.5, 1e-2, 1e-3, 1e-4, 1e-6] {
        let rows = enclosed(&cases, &settings(tolerance));
        let (bounded, held) = enclosure_count(&rows, Trust::Bounded);
        assert!(bounded >= 130, "{bounded} bounded values");
        assert_eq!(held, bounded);
        let (estimated, held) = enclosure_count(&rows, Trust::Estimated);
        assert!(estimated >= 14, "{estimated} estimated values");
        assert_eq!(held, estimated, "the estimate is not conservative");
    }
}

#[test]
fn true_values_lie_inside_to_eight_digits() {
    const IDS: [&str; 12] = [
        "circle",
        "annulus",
        "annulus-thin",
        "rectangle-1-1",
        "rectangle-10-1",
        "equilateral",
        "grooved-shaft",
        "sector-90",
        "sector-270",
        "eccentric-bore-far",
        "semicircle",
        "circle-flexure",
    ];
    let mut cases = exact_cases();
    cases.retain(|c| IDS.contains(&c.id.as_str()));
    assert_eq!(cases.len(), IDS.len());
    enclosed(&cases, &settings(1e-8));
}

#[test]
fn true_values_lie_inside_for_every_order_of_elements() {
    let cases = exact_cases();
    for (order, tolerance) in [(1, 3e-2), (2, 1e-3), (3, 1e-4), (5, 1e-5)] {
        let settings = Settings {
            order: Some(order),
            ..settings(tolerance)
        };
        enclosed(&cases, &settings);
    }
}

/// A rule that nothing can fail shows nothing: a value just outside the enclosure is refused.
#[test]
fn values_outside_are_refused() {
    let mut cases = exact_cases();
    cases.retain(|c| c.id == "rectangle-2-1" || c.id == "semicircle");
    let mut refused = 0;
    for case in &cases {
        let (piece, departure) = piece(&case.outline, &case.holes).expect("geometry");
        let solution = solve_pieces(&[piece], case.nu, &settings(1e-4)).expect("solved");
        for claim in case.claims().expect("claims") {
            if claim.status != Status::Exact || claim.nu != case.nu {
                continue;
            }
            let figure = solution.get(claim.quantity).expect("given");
            for end in [
                figure.low - 0.1 * figure.half_width(),
                figure.high + 0.1 * figure.half_width(),
            ] {
                let moved = Claim {
                    value: end,
                    ..claim.clone()
                };
                let row = judge(case, &moved, &solution, departure).expect("judged");
                assert!(!row.holds(), "{}", row.line());
                refused += 1;
            }
        }
    }
    assert!(refused >= 20);
}

/// Two blocks on a thin neck, and thin strips: their free membranes have low eigenvalues, on which the
/// upper end of the warping constant rests. No source: a loose enclosure is held against a tight one.
#[test]
fn loose_enclosures_meet_tight_ones_on_nearly_separate_sections() {
    let dumbbell = |neck: f64, length: f64| {
        let (m, l) = (0.5 * neck, length);
        polygon(&[
            [-1.0, -0.5],
            [0.0, -0.5],
            [0.0, -m],
            [l, -m],
            [l, -0.7],
            [l + 1.2, -0.7],
            [l + 1.2, 0.7],
            [l, 0.7],
            [l, m],
            [0.0, m],
            [0.0, 0.5],
            [-1.0, 0.5],
        ])
    };
    let strip = |t: f64| polygon(&[[0.0, 0.0], [1.0, 0.0], [1.0, t], [0.0, t]]);
    let sections = [
        ("wide neck", dumbbell(0.3, 1.0)),
        ("narrow neck", dumbbell(0.05, 0.05)),
        ("narrow long neck", dumbbell(0.05, 5.0)),
        ("very narrow neck", dumbbell(0.01, 1.0)),
        ("strip", strip(0.1)),
        ("thin strip", strip(0.01)),
    ];
    for (name, outline) in sections {
        let (body, _) = piece(&outline, &[]).expect("geometry");
        let pieces = [body];
        let tight = solve_pieces(&pieces, 0.3, &settings(1e-6)).expect("solved");
        assert!(tight.reached);
        for order in 1..=4 {
            for tolerance in [0.9, 0.1] {
                let loose = Settings {
                    order: Some(order),
                    ..settings(tolerance)
                };
                let loose = solve_pieces(&pieces, 0.3, &loose).expect("solved");
                for (q, a) in &loose.properties {
                    let b = tight.get(*q).expect("given");
                    assert!(
                        a.low <= b.high && b.low <= a.high,
                        "{name}, order {order}, {tolerance}: {} {a:?} {b:?}",
                        q.key()
                    );
                }
            }
        }
    }
}
