//! VTU files read back by a reader that is none of ours, the crate vtkio.

use sectile::read::{ReadSection, section_from_text};
use sectile::write::units::stress_per_force;
use sectile::write::vtu;
use sectile_solver::solution::{Settings, Solution, solve};
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::state::Stress;
use vtkio::model::{
    Attribute, CellType, DataSet, Piece, UnstructuredGridPiece, VertexNumbers, Vtk,
};

const RING: &str = r#"
title = "Ring (invented)"
[[piece]]
name = "ring"
outline = { circle = { at = [50, 60], d = 120 } }
holes = [{ circle = { at = [50, 60], d = 90 } }]
"#;

const ANGLE: &str = r#"
title = "Angle (invented)"
[units]
length = "in"
force = "kip"
moment = "kip in"
stress = "ksi"
[[piece]]
name = "angle"
outline = [[0, 0], [4, 0], [4, 0.5], [0.5, 0.5], [0.5, 6], [0, 6]]
"#;

const FORCES: SectionForces = SectionForces {
    n: 12.0,
    vx: 3.0,
    vy: -40.0,
    mx: 900.0,
    my: -70.0,
    t: 250.0,
    b: 0.0,
    tw: 0.0,
};

fn solved(text: &str) -> (ReadSection, Solution) {
    let read = section_from_text("test.section.toml", text).unwrap_or_else(|f| panic!("{f}"));
    let settings = Settings {
        tolerance: 1e-3,
        order: None,
        max_unknowns: 100_000,
        reference: None,
    };
    let metres = read.section.units.metres();
    let materials = &read.section.materials;
    let solution =
        solve(&read.domain, materials, metres, &settings, &mut |_| {}).expect("a sound section");
    (read, solution)
}

/// The file's only piece.
fn read_back(text: &str) -> UnstructuredGridPiece {
    let vtk = Vtk::parse_xml(text.as_bytes()).unwrap_or_else(|fault| panic!("{fault}"));
    let DataSet::UnstructuredGrid { mut pieces, .. } = vtk.data else {
        panic!("no unstructured grid");
    };
    assert_eq!(pieces.len(), 1);
    let Piece::Inline(piece) = pieces.remove(0) else {
        panic!("the piece is not in the file");
    };
    *piece
}

/// What a point array holds.
type Measure = fn(&Stress) -> f64;

fn array(piece: &UnstructuredGridPiece, name: &str) -> Vec<f64> {
    let found = piece
        .data
        .point
        .iter()
        .find_map(|attribute| match attribute {
            Attribute::DataArray(array) if array.name == name => Some(array.data.clone()),
            _ => None,
        });
    let data = found.unwrap_or_else(|| panic!("no field {name}"));
    data.cast_into().expect("numbers")
}

#[test]
fn fields_read_back_with_their_sums() {
    for (text, order) in [(RING, 4), (ANGLE, 2), (ANGLE, 6)] {
        let (read, solution) = solved(text);
        let units = &read.section.units;
        let fields = UnitFields::new(&solution, order).expect("one part");
        let file = vtu::field(
            units,
            &solution,
            &read.domain.piece_materials,
            &fields,
            &FORCES,
        );
        if let Ok(folder) = std::env::var("SECTILE_FIGURES") {
            let name = format!("{folder}/{}-{order}.vtu", read.section.title);
            std::fs::write(name, &file).expect("a folder");
        }
        let piece = read_back(&file);

        let per = (order + 1) * (order + 2) / 2;
        let triangles = solution.mesh.triangles.len();
        assert_eq!(
            piece.cells.types,
            vec![CellType::LagrangeTriangle; triangles]
        );
        let VertexNumbers::XML {
            connectivity,
            offsets,
        } = &piece.cells.cell_verts
        else {
            panic!("cells of another kind of file");
        };
        assert_eq!(
            *connectivity,
            (0..(triangles * per) as u64).collect::<Vec<_>>()
        );
        let ends: Vec<u64> = (1..=triangles).map(|k| (k * per) as u64).collect();
        assert_eq!(*offsets, ends);

        let points: Vec<f64> = piece.points.clone().cast_into().expect("numbers");
        assert_eq!(points.len(), 3 * triangles * per);
        let sum = |values: &mut dyn Iterator<Item = f64>| values.sum::<f64>();
        let same = |name: &str, found: f64, expected: f64, size: f64| {
            assert!(
                (found - expected).abs() <= 1e-9 * size,
                "{name}: {found} {expected}"
            );
        };
        let size = 200.0 * fields.positions.len() as f64;
        same(
            "x",
            sum(&mut points.iter().step_by(3).copied()),
            sum(&mut fields.positions.iter().map(|p| p.x)),
            size,
        );

        let factor = stress_per_force(units);
        let stresses = fields.stresses(&FORCES);
        let measures: [(&str, Measure); 6] = [
            ("sigma", |s| s.sigma),
            ("tau", |s| s.shear()),
            ("von_mises", |s| s.von_mises()),
            ("tresca", |s| s.tresca()),
            ("principal_1", |s| s.principal()[0]),
            ("principal_3", |s| s.principal()[1]),
        ];
        for (name, of) in measures {
            let values = array(&piece, &format!("{name} [{}]", units.stress));
            let expected = factor * sum(&mut stresses.iter().map(of));
            let size = sum(&mut values.iter().map(|v| v.abs()));
            assert!(size > 0.0, "{name}");
            same(name, sum(&mut values.iter().copied()), expected, size);
        }
        let shear = array(&piece, &format!("shear stress [{}]", units.stress));
        let size = sum(&mut shear.iter().map(|v| v.abs()));
        for (c, of) in [(|s: &Stress| s.tau.x) as fn(&Stress) -> f64, |s| s.tau.y]
            .into_iter()
            .enumerate()
        {
            let found = sum(&mut shear.iter().skip(c).step_by(3).copied());
            same(
                "shear",
                found,
                factor * sum(&mut stresses.iter().map(of)),
                size,
            );
        }
        // Each value stands at its own point: the normal stress is linear in x and y.
        let sigma = array(&piece, &format!("sigma [{}]", units.stress));
        let direct = |x: f64, y: f64| {
            let near = |i: &usize| {
                let p = fields.positions[*i];
                (p.x - x).abs() + (p.y - y).abs()
            };
            let i = (0..fields.positions.len())
                .min_by(|a, b| near(a).total_cmp(&near(b)))
                .expect("points");
            factor * stresses[i].sigma
        };
        let greatest = sigma.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        for k in (0..sigma.len()).step_by(97) {
            let expected = direct(points[3 * k], points[3 * k + 1]);
            assert!((sigma[k] - expected).abs() <= 1e-9 * greatest);
        }
    }
}

/// Points of a Lagrange triangle of order four in quarters of the sides 0–1 and 0–2: corners, sides
/// 0–1, 1–2, 2–0, inner triangle (VTK file formats and `vtkLagrangeTriangle`, from memory; checked once
/// against VTK 9.7 through the areas and interpolated fields of such cells).
const ORDER_FOUR: [[f64; 2]; 15] = [
    [0.0, 0.0],
    [4.0, 0.0],
    [0.0, 4.0],
    [1.0, 0.0],
    [2.0, 0.0],
    [3.0, 0.0],
    [3.0, 1.0],
    [2.0, 2.0],
    [1.0, 3.0],
    [0.0, 3.0],
    [0.0, 2.0],
    [0.0, 1.0],
    [1.0, 1.0],
    [2.0, 1.0],
    [1.0, 2.0],
];

#[test]
fn points_of_straight_cells_lie_where_the_format_wants_them() {
    let (read, solution) = solved(ANGLE);
    let fields = UnitFields::new(&solution, 4).expect("one part");
    let piece = read_back(&vtu::field(
        &read.section.units,
        &solution,
        &read.domain.piece_materials,
        &fields,
        &FORCES,
    ));
    let points: Vec<f64> = piece.points.cast_into().expect("numbers");
    for cell in points.chunks(3 * ORDER_FOUR.len()) {
        let at = |k: usize| [cell[3 * k], cell[3 * k + 1]];
        let (a, b, c) = (at(0), at(1), at(2));
        for (k, share) in ORDER_FOUR.iter().enumerate() {
            for d in 0..2 {
                let expected =
                    a[d] + 0.25 * share[0] * (b[d] - a[d]) + 0.25 * share[1] * (c[d] - a[d]);
                assert!((at(k)[d] - expected).abs() < 1e-12, "point {k}");
            }
        }
        assert!(cell.iter().skip(2).step_by(3).all(|z| *z == 0.0));
    }
}

#[test]
fn cells_tell_piece_and_material() {
    let text = "title = \"Lined\"\n\
        [material.steel]\nE = 210000\nnu = 0.3\n[material.timber]\nE = 11000\nnu = 0.3\n\
        [[piece]]\nname = \"core\"\nmaterial = \"timber\"\nbar = { at = [0, 0], b = 60, h = 40 }\n\
        [[piece]]\nname = \"lid\"\nmaterial = \"steel\"\nbar = { at = [0, 25], b = 40, h = 10 }\n\
        [[seam]]\nbetween = [\"lid\", \"core\"]\nfillet = 4\nat = \"both\"\n";
    let (read, solution) = solved(text);
    let fields = UnitFields::new(&solution, 2).expect("one part");
    let file = vtu::field(
        &read.section.units,
        &solution,
        &read.domain.piece_materials,
        &fields,
        &FORCES,
    );
    let grid = read_back(&file);
    let of_cells = |name: &str| -> Vec<i64> {
        let found = grid.data.cell.iter().find_map(|attribute| match attribute {
            Attribute::DataArray(array) if array.name == name => Some(array.data.clone()),
            _ => None,
        });
        found
            .expect("the array is there")
            .cast_into()
            .expect("numbers")
    };
    let (piece, material) = (of_cells("piece"), of_cells("material"));
    // Two pieces and two halves of weld metal at each end; the weld metal is of the first piece's material.
    let wanted = [1, 0, 0, 0, 0, 0];
    for (piece, material) in piece.iter().zip(&material) {
        assert_eq!(*material, wanted[*piece as usize]);
    }
    let mut seen = piece.clone();
    seen.sort_unstable();
    seen.dedup();
    assert_eq!(seen, [0, 1, 2, 3, 4, 5]);
}
