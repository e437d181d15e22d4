//! VTU: the stress field as an XML file of Lagrange triangles, for programs that show fields.
//!
//! One cell a triangle of the mesh, of the order of the lattice, with points of its own: stresses may
//! jump from one triangle to the next. The format is the XML `UnstructuredGrid` of VTK, version 1.0,
//! data in base64 with a 64-bit length before each array. Source: the VTK file formats document of
//! Kitware; the order of a Lagrange triangle's points is from memory and checked against VTK's own
//! reader.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;

use sectile_solver::solution::Solution;
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;

use super::actions::scaled;
use super::units::stress_per_force;
use crate::section::Units;

/// VTK's number of a Lagrange triangle.
const LAGRANGE_TRIANGLE: u8 = 69;

/// The text of `field-<action>.vtu`: points in the file's unit of length with z = 0, stresses as point
/// data named with their unit, piece and material of each cell, from 0 in the order of the file, as cell
/// data; weld metal follows the pieces. `materials`: by piece.
#[must_use]
pub fn field(
    units: &Units,
    solution: &Solution,
    materials: &[usize],
    fields: &UnitFields,
    forces: &SectionForces,
) -> String {
    let per = fields.lattice.points.len();
    let order = node_order(fields.lattice.divisions);
    let cells = fields.positions.len() / per.max(1);
    // Source of each point of the file.
    let from: Vec<usize> = (0..cells)
        .flat_map(|t| order.iter().map(move |&k| t * per + k))
        .collect();
    let factor = stress_per_force(units);
    let stresses: Vec<_> = fields
        .stresses(forces)
        .iter()
        .map(|s| scaled(s, factor))
        .collect();
    let pick = |of: &dyn Fn(usize) -> f64| from.iter().map(|&i| of(i) + 0.0).collect::<Vec<f64>>();

    let mut points = Vec::with_capacity(3 * from.len());
    let mut shear = Vec::with_capacity(3 * from.len());
    for &i in &from {
        points.extend([fields.positions[i].x, fields.positions[i].y, 0.0]);
        shear.extend([stresses[i].tau.x + 0.0, stresses[i].tau.y + 0.0, 0.0]);
    }
    let unit = units.stress;
    let scalars = [
        ("sigma", pick(&|i| stresses[i].sigma)),
        ("tau", pick(&|i| stresses[i].shear())),
        ("von_mises", pick(&|i| stresses[i].von_mises())),
        ("tresca", pick(&|i| stresses[i].tresca())),
        ("principal_1", pick(&|i| stresses[i].principal()[0])),
        ("principal_3", pick(&|i| stresses[i].principal()[1])),
    ];

    let mut out = String::from("<?xml version=\"1.0\"?>\n");
    out.push_str(
        "<VTKFile type=\"UnstructuredGrid\" version=\"1.0\" byte_order=\"LittleEndian\" \
         header_type=\"UInt64\">\n<UnstructuredGrid>\n",
    );
    out.push_str(&format!(
        "<Piece NumberOfPoints=\"{}\" NumberOfCells=\"{cells}\">\n",
        from.len()
    ));
    out.push_str(&format!(
        "<PointData Scalars=\"von_mises [{unit}]\" Vectors=\"shear stress [{unit}]\">\n"
    ));
    for (name, values) in &scalars {
        floats(&mut out, &format!("{name} [{unit}]"), 1, values);
    }
    floats(&mut out, &format!("shear stress [{unit}]"), 3, &shear);
    out.push_str("</PointData>\n<CellData>\n");
    let pieces: Vec<i64> = solution.mesh.piece.iter().map(|&p| i64::from(p)).collect();
    integers(&mut out, "piece", &pieces);
    let materials: Vec<i64> = solution
        .mesh
        .piece
        .iter()
        .map(|&p| materials.get(p as usize).map_or(-1, |&m| m as i64))
        .collect();
    integers(&mut out, "material", &materials);
    out.push_str("</CellData>\n<Points>\n");
    floats(
        &mut out,
        &format!("position [{}]", units.length),
        3,
        &points,
    );
    out.push_str("</Points>\n<Cells>\n");
    let connectivity: Vec<i64> = (0..from.len() as i64).collect();
    integers(&mut out, "connectivity", &connectivity);
    let offsets: Vec<i64> = (1..=cells as i64).map(|k| k * per as i64).collect();
    integers(&mut out, "offsets", &offsets);
    array(
        &mut out,
        "UInt8",
        "types",
        1,
        &vec![LAGRANGE_TRIANGLE; cells],
    );
    out.push_str("</Cells>\n</Piece>\n</UnstructuredGrid>\n</VTKFile>\n");
    out
}

fn floats(out: &mut String, name: &str, components: usize, values: &[f64]) {
    let bytes: Vec<u8> = values.iter().flat_map(|v| v.to_le_bytes()).collect();
    array(out, "Float64", name, components, &bytes);
}

fn integers(out: &mut String, name: &str, values: &[i64]) {
    let bytes: Vec<u8> = values.iter().flat_map(|v| v.to_le_bytes()).collect();
    array(out, "Int64", name, 1, &bytes);
}

fn array(out: &mut String, kind: &str, name: &str, components: usize, bytes: &[u8]) {
    let mut block = (bytes.len() as u64).to_le_bytes().to_vec();
    block.extend_from_slice(bytes);
    let components = if components == 1 {
        String::new()
    } else {
        format!(" NumberOfComponents=\"{components}\"")
    };
    out.push_str(&format!(
        "<DataArray type=\"{kind}\" Name=\"{name}\"{components} format=\"binary\">"
    ));
    STANDARD.encode_string(&block, out);
    out.push_str("</DataArray>\n");
}

/// The lattice's points in the order of a Lagrange triangle with `n` divisions of a side: corners,
/// then the points within the sides 0–1, 1–2 and 2–0 each in that direction, then the inner points,
/// which are a triangle with `n − 3` divisions, in the same way.
#[must_use]
pub fn node_order(n: usize) -> Vec<usize> {
    // Row i of the lattice has n + 1 − i points; i belongs to vertex 1, j to vertex 2.
    let index = |i: usize, j: usize| i * (n + 1) - i * i.saturating_sub(1) / 2 + j;
    let mut order = Vec::new();
    let (mut k, mut m) = (0, n);
    loop {
        if m == 0 {
            order.push(index(k, k));
            return order;
        }
        order.extend([index(k, k), index(k + m, k), index(k, k + m)]);
        order.extend((1..m).map(|s| index(k + s, k)));
        order.extend((1..m).map(|s| index(k + m - s, k + s)));
        order.extend((1..m).map(|s| index(k, k + m - s)));
        if m < 3 {
            return order;
        }
        (k, m) = (k + 1, m - 3);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use sectile_solver::sample::Lattice;

    #[test]
    fn every_point_once_corners_and_sides_first() {
        for n in 1..=9 {
            let lattice = Lattice::new(n);
            let order = node_order(n);
            let mut sorted = order.clone();
            sorted.sort_unstable();
            assert_eq!(sorted, (0..lattice.points.len()).collect::<Vec<_>>(), "{n}");
            let at = |k: usize| lattice.points[order[k]];
            for k in 0..3 {
                assert_eq!(at(k)[k], 1.0);
            }
            // Sides 0–1, 1–2, 2–0 in direction: the share of the second corner grows.
            for side in 0..3 {
                for s in 1..n {
                    let l = at(3 + side * (n - 1) + s - 1);
                    assert!((l[(side + 1) % 3] - s as f64 / n as f64).abs() < 1e-15);
                    assert_eq!(l[(side + 2) % 3], 0.0);
                }
            }
        }
    }

    #[test]
    fn order_four_has_its_inner_triangle_last() {
        let lattice = Lattice::new(4);
        let order = node_order(4);
        let inner: Vec<[f64; 3]> = order[12..].iter().map(|&k| lattice.points[k]).collect();
        assert_eq!(
            inner,
            [[0.5, 0.25, 0.25], [0.25, 0.5, 0.25], [0.25, 0.25, 0.5]]
        );
    }
}
