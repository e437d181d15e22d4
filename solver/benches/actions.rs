//! What an action costs once the section is solved.

use criterion::{Criterion, criterion_group, criterion_main};
use sectile_mesh::Point;
use sectile_mesh::domain::build;
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::shape::polygon;
use sectile_solver::material::Material;
use sectile_solver::solution::{Settings, solve};
use sectile_solver::stress::extreme::{DEFAULT_EXCLUSION, Quotable, extremes};
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;

fn bench(c: &mut Criterion) {
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
    let piece = Piece {
        name: "channel".into(),
        outline: Outline {
            outer: polygon(&corners.map(|[x, y]| Point::new(x, y))),
            holes: Vec::new(),
        },
        material: 0,
    };
    let domain = build(&[piece]).unwrap_or_else(|f| panic!("{f:?}"));
    let steel = Material {
        name: "steel".into(),
        young: 210_000.0,
        poisson: 0.3,
        shear: 80_769.0,
        yield_stress: Some(355.0),
        density: None,
    };
    let settings = Settings {
        tolerance: 1e-4,
        order: None,
        max_unknowns: 1_000_000,
        reference: None,
    };
    let solution =
        solve(&domain, &[steel], 1e-3, &settings, &mut |_| {}).unwrap_or_else(|e| panic!("{e}"));
    let fields = UnitFields::new(&solution, 8).unwrap_or_else(|| panic!("one part"));
    let quotable = Quotable::new(&solution, &fields, DEFAULT_EXCLUSION);
    let action = |k: f64| SectionForces {
        n: 10.0 * k,
        vx: 3.0,
        vy: -40.0 + k,
        mx: 12_000.0,
        my: -700.0 * k,
        t: 90.0,
        b: 1000.0 * k,
        tw: 5.0,
    };
    c.bench_function("extremes of 200 actions on the channel", |b| {
        b.iter(|| {
            (0..200)
                .map(|k| {
                    extremes(
                        &solution,
                        &fields,
                        &quotable,
                        &action(f64::from(k)),
                        &[Some(355.0)],
                    )
                })
                .collect::<Vec<_>>()
        });
    });
    c.bench_function("unit fields of the channel", |b| {
        b.iter(|| UnitFields::new(&solution, 8));
    });
}

criterion_group! {
    name = benches;
    config = Criterion::default().sample_size(10);
    targets = bench
}
criterion_main!(benches);
