//! How long a solve takes from the outline to properties with their bounds.

use criterion::{Criterion, criterion_group, criterion_main};
use sectile_mesh::Point;
use sectile_mesh::domain::{Domain, build};
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::profile::{Dimensions, Form, profile};
use sectile_mesh::outline::shape::polygon;
use sectile_solver::material::Material;
use sectile_solver::solution::{Settings, Solution, solve};

fn piece(outline: Outline) -> Vec<Piece> {
    vec![Piece {
        name: "body".into(),
        outline,
        material: 0,
    }]
}

/// A 200 × 80 channel, web 8, flanges 12, sharp corners.
fn channel() -> Vec<Piece> {
    let corners = [
        [0.0, 0.0],
        [80.0, 0.0],
        [80.0, 12.0],
        [8.0, 12.0],
        [8.0, 188.0],
        [80.0, 188.0],
        [80.0, 200.0],
        [0.0, 200.0],
    ];
    piece(Outline {
        outer: polygon(&corners.map(|[x, y]| Point::new(x, y))),
        holes: Vec::new(),
    })
}

/// A 300 × 150 rolled I with root radii.
fn rolled() -> Vec<Piece> {
    let d = Dimensions {
        h: 300.0,
        b: 150.0,
        tw: 7.1,
        tf: 10.7,
        r: 15.0,
        ..Dimensions::default()
    };
    piece(profile(Form::I, &d).unwrap_or_else(|f| panic!("{f:?}")))
}

fn solved(domain: &Domain, tolerance: f64, order: Option<usize>) -> Solution {
    let steel = Material {
        name: "steel".into(),
        young: 210_000.0,
        poisson: 0.3,
        shear: 80_769.0,
        yield_stress: None,
        density: None,
    };
    let settings = Settings {
        tolerance,
        order,
        max_unknowns: 2_000_000,
        reference: None,
    };
    solve(domain, &[steel], 1e-3, &settings, &mut |_| {}).unwrap_or_else(|e| panic!("{e}"))
}

fn bench(c: &mut Criterion) {
    for (name, pieces) in [("channel", channel()), ("rolled I", rolled())] {
        let domain = build(&pieces).unwrap_or_else(|f| panic!("{f:?}"));
        for tolerance in [1e-4, 1e-6] {
            c.bench_function(&format!("{name} {tolerance:e}"), |b| {
                b.iter(|| solved(&domain, tolerance, None));
            });
        }
        c.bench_function(&format!("{name}: outline to domain"), |b| {
            b.iter(|| build(&pieces));
        });
    }
    let domain = build(&channel()).unwrap_or_else(|f| panic!("{f:?}"));
    for order in 2..=6 {
        c.bench_function(&format!("channel 1e-4 at order {order}"), |b| {
            b.iter(|| solved(&domain, 1e-4, Some(order)));
        });
    }
}

criterion_group!(benches, bench);
criterion_main!(benches);
