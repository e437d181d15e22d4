#![allow(clippy::unwrap_used)]
use super::*;
use crate::figure::samples;
use crate::section::{Cut, Probe};
use crate::write::field::{FIELD, field_csv};
use sectile_mesh::Point;
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::Solution;
use sectile_solver::stress::extreme::{Quotable, extremes, load_factor_to_yield};
use sectile_solver::stress::field::{UnitFields, weighted_points};
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::{cut, probe};

/// A channel with three actions, the last a combination.
pub(crate) struct Sample {
    pub units: Units,
    pub solution: Solution,
    pub pieces: Vec<String>,
    pub probes: Vec<Probe>,
    pub cuts: Vec<Cut>,
    pub responses: Responses,
}

impl Sample {
    pub(crate) fn new() -> Self {
        let cut = (Point::new(-1.0, 60.0), Point::new(9.0, 60.0));
        Self::of(&samples::channel(), Point::new(4.0, 100.0), cut)
    }

    pub(crate) fn of(
        domain: &sectile_mesh::domain::Domain,
        probe_at: Point,
        (from, to): (Point, Point),
    ) -> Self {
        let solution = samples::solved(domain);
        let fields = UnitFields::new(&solution, 4).unwrap();
        let probes = vec![Probe {
            name: "toe".into(),
            at: probe_at,
        }];
        let cuts = vec![Cut {
            name: "web".into(),
            from,
            to,
        }];
        let centre = Point::new(
            solution.get(Quantity::ShearCentreX).unwrap().value,
            solution.get(Quantity::ShearCentreY).unwrap().value,
        );
        let exclusion = 0.1;
        let quotable = Quotable::new(&solution, &fields, exclusion);
        let at = Point::new(40.0, 100.0);
        let pull = SectionForces {
            n: 120.0,
            mx: 3000.0,
            ..SectionForces::default()
        };
        let wheel = SectionForces {
            vy: -40.0,
            mx: 12_000.0,
            ..SectionForces::default()
        };
        let offset = wheel.torque_of_offset(at, centre);
        let wheel = SectionForces { t: offset, ..wheel };
        let respond = |name: &str, forces: SectionForces, at: Option<Point>, offset: f64| {
            let found = extremes(&solution, &fields, &quotable, &forces, &[Some(0.355)]);
            Response {
                name: name.into(),
                combination: name.contains('+'),
                forces,
                at,
                torque: forces.t + forces.tw,
                offset_torque: offset,
                load_factor: load_factor_to_yield(&found),
                plastic_factor: Some(2.468),
                extremes: found,
                energy_error: fields.energy_error(&forces),
                probes: vec![(
                    0,
                    probe::at_point(&solution, &fields, &forces, probes[0].at),
                )],
                cuts: vec![(
                    0,
                    cut::cut(&solution, &fields, &forces, cuts[0].from, cuts[0].to).unwrap(),
                )],
                seams: Vec::new(),
                materials: Vec::new(),
            }
        };
        let list = vec![
            respond("pull, eccentric", pull, None, 0.0),
            respond("wheel at midspan", wheel, Some(at), offset),
            respond(
                "1.35 pull + 1.5 wheel",
                pull * 1.35 + wheel * 1.5,
                None,
                1.5 * offset,
            ),
        ];
        let envelope = Measure::ALL
            .iter()
            .map(|&m| {
                let sign = if m.is_least() { -1.0 } else { 1.0 };
                let value = |i: usize| sign * list[i].extremes.get(m).unwrap().value;
                let worst = (0..list.len())
                    .max_by(|&a, &b| value(a).total_cmp(&value(b)))
                    .unwrap();
                (m, worst, *list[worst].extremes.get(m).unwrap())
            })
            .collect();
        Self {
            units: crate::write::json::tests::sample_units(),
            pieces: vec!["body".into()],
            probes,
            cuts,
            responses: Responses {
                list,
                fields,
                envelope,
                materials: Vec::new(),
                seams: Vec::new(),
                exclusion,
            },
            solution,
        }
    }

    pub(crate) fn names(&self) -> Names<'_> {
        Names {
            pieces: &self.pieces,
            probes: &self.probes,
            cuts: &self.cuts,
            seams: &[],
            stated: &[],
            materials: &[],
        }
    }
}

fn rows(text: &str, columns: &[&str]) -> Vec<::csv::StringRecord> {
    let mut reader = ::csv::Reader::from_reader(text.as_bytes());
    assert_eq!(reader.headers().unwrap(), columns);
    reader.records().map(Result::unwrap).collect()
}

fn float(row: &::csv::StringRecord, columns: &[&str], name: &str) -> f64 {
    row[columns.iter().position(|c| *c == name).unwrap()]
        .parse()
        .unwrap()
}

#[test]
fn stresses_have_every_measure_of_every_action_and_the_envelope() {
    let sample = Sample::new();
    let text = stresses_csv(&sample.units, &sample.names(), &sample.responses);
    let rows = rows(&text, &STRESSES);
    let n = Measure::ALL.len();
    assert_eq!(rows.len(), 3 * (n + 5) + n + 1);
    for response in &sample.responses.list {
        for (measure, extreme) in &response.extremes.0 {
            let row = rows
                .iter()
                .find(|r| r[0] == response.name && &r[2] == measure.key())
                .unwrap();
            // 1 kN/mm² is 1000 MPa.
            let factor = if *measure == Measure::Utilisation {
                1.0
            } else {
                1e3
            };
            let value = float(row, &STRESSES, "value");
            assert!((value - factor * extreme.value).abs() <= 1e-12 * value.abs());
            assert_eq!(float(row, &STRESSES, "x"), extreme.at.x + 0.0);
            assert_eq!(&row[7], "body");
        }
    }
    assert_eq!(rows.iter().filter(|r| &r[1] == "envelope").count(), n);
    assert_eq!(
        rows.iter().filter(|r| &r[1] == "combination").count(),
        n + 5
    );
    assert_eq!(&rows.last().unwrap()[12], CAUTION);
}

#[test]
fn fields_read_back_and_their_components_agree() {
    let sample = Sample::new();
    let response = &sample.responses.list[1];
    let points = weighted_points(&sample.solution, &sample.responses.fields);
    let text = field_csv(
        &sample.units,
        &sample.names(),
        &sample.solution,
        &points,
        &response.forces,
    );
    let rows = rows(&text, &FIELD);
    assert_eq!(rows.len(), points.len());
    // The sums are the action's forces, in the file's units of stress times length².
    let factor = crate::write::units::stress_per_force(&sample.units);
    let total = |name: &str| -> f64 {
        rows.iter()
            .map(|r| float(r, &FIELD, "weight") * float(r, &FIELD, name) / factor)
            .sum()
    };
    let f = response.forces;
    let size = f.n.abs() + f.vx.abs() + f.vy.abs() + 1e-3;
    assert!((total("sigma") - f.n).abs() < 1e-5 * size);
    assert!((total("tau_x") - f.vx).abs() < 1e-5 * size);
    assert!((total("tau_y") - f.vy).abs() < 1e-5 * size);
    let largest = rows
        .iter()
        .map(|r| float(r, &FIELD, "von_mises"))
        .fold(0.0, f64::max);
    assert!(largest > 10.0);
    for row in &rows {
        let get = |name: &str| float(row, &FIELD, name);
        let slack = 1e-7 * largest;
        for (whole, parts) in [
            ("sigma", ["sigma_axial", "sigma_bending", "sigma_warping"]),
            ("tau_x", ["tau_x_shear", "tau_x_torsion", "tau_x_warping"]),
            ("tau_y", ["tau_y_shear", "tau_y_torsion", "tau_y_warping"]),
        ] {
            let sum: f64 = parts.iter().map(|p| get(p)).sum();
            assert!((get(whole) - sum).abs() < slack, "{whole}");
        }
        assert!((get("tau") - get("tau_x").hypot(get("tau_y"))).abs() < slack);
        let von_mises = (get("sigma").powi(2) + 3.0 * get("tau").powi(2)).sqrt();
        assert!((get("von_mises") - von_mises).abs() < slack);
        assert!((get("principal_1") + get("principal_3") - get("sigma")).abs() < slack);
        assert!((get("principal_1") - get("principal_3") - get("tresca")).abs() < slack);
        assert_eq!(&row[1], "body");
    }
}

#[test]
fn cuts_run_along_their_line_and_integrate_to_what_crosses() {
    let sample = Sample::new();
    let (_, result) = &sample.responses.list[1].cuts[0];
    let text = cut_csv(&sample.units, &sample.names(), result);
    let rows = rows(&text, &CUT);
    assert!(rows.len() > 4);
    let get = |row: &::csv::StringRecord, name: &str| float(row, &CUT, name);
    let mut flow = 0.0;
    for w in rows.windows(2) {
        let step = get(&w[1], "distance") - get(&w[0], "distance");
        assert!(step >= 0.0);
        flow += 0.5 * step * (get(&w[0], "tau_normal") + get(&w[1], "tau_normal"));
        assert!((get(&w[1], "x") + 1.0 - get(&w[1], "distance")).abs() < 1e-9);
    }
    // The trapezoidal rule on the mean field against the equilibrated flow; MPa mm is kN/m.
    let expected = 1e3 * result.shear_flow;
    assert!(
        (flow - expected).abs() < 0.02 * expected.abs(),
        "{flow} {expected}"
    );
}
