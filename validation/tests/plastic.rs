//! Fully plastic forces of sections with yield stresses, through the whole solution.
#![allow(clippy::unwrap_used)]

use sectile_mesh::Point;
use sectile_mesh::domain::build;
use sectile_mesh::outline::piece::Piece;
use sectile_mesh::outline::shape::bar;
use sectile_solver::figure::Figure;
use sectile_solver::material::Material;
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::{Settings, Solution, solve};

/// Steel of a yield stress, MPa.
fn steel(yield_stress: Option<f64>) -> Material {
    Material {
        name: format!("{yield_stress:?}"),
        young: 210_000.0,
        poisson: 0.3,
        shear: 210_000.0 / 2.6,
        yield_stress,
        density: None,
    }
}

/// Rectangle 100 × 200 of two halves, the lower of the first material.
fn halves(materials: &[Material], reference: Option<usize>) -> Solution {
    let half = |y: f64, material: usize| Piece {
        name: format!("half {material}"),
        outline: bar(Point::new(0.0, y), 100.0, 100.0),
        material,
    };
    let domain = build(&[half(50.0, 0), half(150.0, 1)]).unwrap();
    let settings = Settings {
        tolerance: 1e-4,
        order: None,
        max_unknowns: 100_000,
        reference,
    };
    solve(&domain, materials, 1.0, &settings, &mut |_| ()).unwrap()
}

fn meets(figure: Option<Figure>, exact: f64) {
    let figure = figure.unwrap();
    assert!(figure.contains(exact), "{figure:?} {exact}");
    assert!(figure.half_width() <= 1e-4 * exact.abs());
}

/// Forces below and above y = 75: 100·75·200 = 100·25·200 + 100·100·100. By elementary integration.
#[test]
fn a_rectangle_of_two_yield_stresses() {
    let materials = [steel(Some(200.0)), steel(Some(100.0))];
    for (reference, unit) in [(None, 200.0), (Some(0), 200.0), (Some(1), 100.0)] {
        let solution = halves(&materials, reference);
        meets(solution.get(Quantity::PlasticAxialForce), 3e6);
        meets(solution.get(Quantity::PlasticMomentX), 137.5e6);
        meets(solution.get(Quantity::PlasticMomentY), 75e6);
        meets(solution.get(Quantity::PlasticModulusX), 137.5e6 / unit);
        meets(solution.get(Quantity::PlasticCentroidY), 75.0);
        // The heap is of one yield stress.
        assert_eq!(solution.get(Quantity::PlasticTorque), None);
        assert_eq!(solution.get(Quantity::PlasticTorsionModulus), None);
    }
}

/// b²(3a − b)/6 · f_y/√3: A. Nadai, Theory of Flow and Fracture of Solids 1, 1950 (from memory).
#[test]
fn one_yield_stress_in_two_materials_is_one_heap() {
    let solution = halves(&[steel(Some(150.0)), steel(Some(150.0))], None);
    let exact = 1e4 * 500.0 / 6.0 * 150.0 / 3.0_f64.sqrt();
    meets(solution.get(Quantity::PlasticTorque), exact);
    meets(solution.get(Quantity::PlasticModulusX), 1e6);
}

#[test]
fn a_material_without_a_yield_stress_leaves_forces_out() {
    for materials in [
        [steel(Some(150.0)), steel(None)],
        [steel(None), steel(None)],
    ] {
        let solution = halves(&materials, None);
        for quantity in [
            Quantity::PlasticAxialForce,
            Quantity::PlasticMomentX,
            Quantity::PlasticModulusX,
            Quantity::PlasticTorque,
        ] {
            assert_eq!(solution.get(quantity), None);
        }
        assert!(solution.plastic.is_none());
        let told = solution
            .notes
            .iter()
            .any(|n| n.kind == "plasticity-not-given");
        assert_eq!(told, materials[0].yield_stress.is_some());
    }
}
