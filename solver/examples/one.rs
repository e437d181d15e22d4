use sectile_mesh::Point;
use sectile_mesh::domain::build;
use sectile_mesh::outline::piece::{Outline, Piece};
use sectile_mesh::outline::shape::polygon;
use sectile_solver::material::Material;
use sectile_solver::solution::{Settings, solve};
fn main() {
    let a: Vec<String> = std::env::args().collect();
    let tol: f64 = a[1].parse().unwrap();
    let order: usize = a[2].parse().unwrap();
    let c = [
        [0., 0.],
        [80., 0.],
        [80., 12.],
        [8., 12.],
        [8., 188.],
        [80., 188.],
        [80., 200.],
        [0., 200.],
    ];
    let p = vec![Piece {
        name: "b".into(),
        outline: Outline {
            outer: polygon(&c.map(|[x, y]| Point::new(x, y))),
            holes: vec![],
        },
        material: 0,
    }];
    let d = build(&p).unwrap();
    let m = Material {
        name: "s".into(),
        young: 1.0,
        poisson: 0.3,
        shear: 0.4,
        yield_stress: None,
        density: None,
    };
    let s = solve(
        &d,
        &[m],
        1e-3,
        &Settings {
            tolerance: tol,
            order: Some(order),
            max_unknowns: 2_000_000,
        },
        &mut |_| {},
    )
    .unwrap();
    println!(
        "{:?} {:?}",
        s.levels
            .iter()
            .map(|l| (l.triangles, l.unknowns, l.worst_error))
            .collect::<Vec<_>>(),
        s.timings
    );
}
