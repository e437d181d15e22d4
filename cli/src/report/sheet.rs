//! The data of the sheet on which other section forces are tried: unit stress fields at the nodes of
//! every triangle, in the declared units.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use serde_json::{Value, json};

use sectile_mesh::domain::{Domain, DomainSide};
use sectile_mesh::{Point, Vector};
use sectile_solver::quantity::Quantity;
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;

use super::Input;
use crate::figure::colour;
use crate::write::units::{moment_per_force, stress_per_force};

/// Most nodes that a page carries: 12 numbers of 3 bytes and 2 of 4 each, a third more in base64: 1.2 MB.
const MOST_NODES: usize = 20_000;
/// Colours of a scale.
const COLOURS: u32 = 49;
/// Angle of the chords that stand for an arc in the picture's outline, radians.
const CHORD: f64 = 0.05;

/// The object that the page's script reads; `None` where there is no stress field to show, or the mesh
/// is too large for a page.
#[must_use]
pub fn data(input: &Input) -> Option<String> {
    let solution = input.solution;
    let triangles = solution.mesh.triangles.len();
    let nodes = |n: usize| (n + 1) * (n + 2) / 2 * triangles;
    let divisions = (1..=solution.order)
        .rev()
        .find(|&n| nodes(n) <= MOST_NODES)?;
    let fields = UnitFields::new(solution, divisions)?;
    let centre = Point::new(
        solution.get(Quantity::ShearCentreX)?.value,
        solution.get(Quantity::ShearCentreY)?.value,
    );
    let units = &input.section.units;
    let moment = moment_per_force(units);

    let [x0, x1, y0, y1] = extent(&fields.positions);
    let origin = Point::new(0.5 * (x0 + x1), 0.5 * (y0 + y1));
    let positions = fields
        .positions
        .iter()
        .flat_map(|p| [p.x - origin.x, p.y - origin.y]);

    let zero = SectionForces::default();
    let normal = [
        SectionForces { n: 1.0, ..zero },
        SectionForces {
            mx: 1.0 / moment,
            ..zero
        },
        SectionForces {
            my: 1.0 / moment,
            ..zero
        },
        SectionForces {
            b: 1.0 / moment,
            ..zero
        },
    ];
    let shear = [
        SectionForces { vx: 1.0, ..zero },
        SectionForces { vy: 1.0, ..zero },
        SectionForces {
            t: 1.0 / moment,
            ..zero
        },
        SectionForces {
            tw: 1.0 / moment,
            ..zero
        },
    ];
    let factor = stress_per_force(units);
    let mut unit_stresses = Vec::with_capacity(12 * fields.units.len());
    for unit in &fields.units {
        unit_stresses.extend(normal.iter().map(|f| factor * unit.under(f).sigma));
        for f in &shear {
            let tau = unit.under(f).tau * factor;
            unit_stresses.extend([tau.x, tau.y]);
        }
    }

    let yields: Vec<Option<f64>> = input
        .domain
        .piece_materials
        .iter()
        .map(|&m| input.section.materials.get(m)?.yield_stress)
        .collect();
    let reference = yields
        .iter()
        .flatten()
        .copied()
        .reduce(f64::min)
        .unwrap_or(100.0);
    let actions: Vec<Value> = input
        .section
        .actions
        .iter()
        .map(|a| {
            let f = &a.forces;
            json!({
                "name": a.name,
                "at": a.at.map(|p| [p.x, p.y]),
                "forces": {
                    "N": f.n, "Vx": f.vx, "Vy": f.vy,
                    "Mx": f.mx * moment, "My": f.my * moment, "T": f.t * moment, "B": f.b * moment,
                },
            })
        })
        .collect();
    let scale = |of: fn(f64) -> colour::Rgb, low: f64| -> Vec<String> {
        (0..COLOURS)
            .map(|i| {
                let t = f64::from(i) / f64::from(COLOURS - 1);
                of(low + (1.0 - low) * t).hex()
            })
            .collect()
    };
    let excluded: Vec<[f64; 3]> = solution
        .corners
        .iter()
        .map(|c| [c.at.x, c.at.y, input.exclusion * c.wall])
        .collect();
    let edges: Vec<Vec<[f64; 2]>> = input
        .domain
        .sides
        .iter()
        .map(|side| chords(input.domain, side))
        .collect();
    let value = json!({
        "units": {
            "length": units.length, "force": units.force,
            "moment": units.moment, "stress": units.stress,
        },
        "centre": [centre.x, centre.y],
        "box": [x0, x1, y0, y1],
        "origin": [origin.x, origin.y],
        "divisions": divisions,
        "pieces": input.domain.piece_names,
        "piece": solution.mesh.piece,
        "yields": yields,
        "reference_stress": reference,
        "excluded": excluded,
        "coarse": divisions < solution.order,
        "positions": encoded(positions, 4),
        "fields": encoded(unit_stresses.into_iter(), 3),
        "edges": edges,
        "moment_per_force_length": moment,
        "actions": actions,
        "colours": {
            "sizes": scale(colour::sequential, 0.0),
            "signed": scale(colour::diverging, -1.0),
        },
    });
    Some(value.to_string())
}

/// Single precision, little-endian, base64. Of the four bytes the upper `width`: with three, 16 bits of the
/// number remain: a relative error of at most 2⁻¹⁶ = 1.5e-5, less than the four digits that a page shows.
fn encoded(numbers: impl Iterator<Item = f64>, width: usize) -> String {
    let lost = 8 * (4 - width as u32);
    let bytes: Vec<u8> = numbers
        .flat_map(|x| {
            // Half a unit of the last bit that is kept.
            let bits = (x as f32).to_bits() + ((1_u32 << lost) >> 1);
            bits.to_le_bytes().into_iter().skip(4 - width)
        })
        .collect();
    STANDARD.encode(bytes)
}

fn extent(points: &[Point]) -> [f64; 4] {
    let start = [
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::INFINITY,
        f64::NEG_INFINITY,
    ];
    points.iter().fold(start, |e, p| {
        [e[0].min(p.x), e[1].max(p.x), e[2].min(p.y), e[3].max(p.y)]
    })
}

/// A side as a line of short chords.
fn chords(domain: &Domain, side: &DomainSide) -> Vec<[f64; 2]> {
    let [a, b] = [side.from, side.to].map(|p| domain.points[p as usize]);
    let mut out = vec![[a.x, a.y]];
    if let Some(arc) = side.arc {
        let parts = (arc.sweep.abs() / CHORD).ceil().max(1.0);
        let start = (a - arc.circle.centre).angle();
        for k in 1..parts as usize {
            let angle = start + arc.sweep * k as f64 / parts;
            let p = arc.circle.centre + Vector::at_angle(angle) * arc.circle.radius;
            out.push([p.x, p.y]);
        }
    }
    out.push([b.x, b.y]);
    out
}
