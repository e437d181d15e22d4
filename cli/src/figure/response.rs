//! The figures of a response: von Mises' stress, normal stress with the neutral axis, resultant shear
//! stress with the line of action; and the envelope of all responses.

use rayon::prelude::*;
use sectile_mesh::domain::Domain;
use sectile_mesh::outline::side::Circle;
use sectile_mesh::{Point, Vector};
use sectile_solver::quantity::Quantity;
use sectile_solver::solution::Solution;
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::state::Stress;

use super::extreme::Extreme;
use super::field::{self, Field};
use super::guide::Guide;
use super::marks::Mark;
use super::page::Finished;
use super::style::Style;
use super::surface::{Sharing, Surface};
use super::{cut, divisions};
use crate::response::{Names, Response, Responses};
use crate::section::Units;
use crate::write::slug;
use crate::write::units::{moment_per_force, stress_per_force, unit_of_bimoment};
use crate::write::{actions, digits};

/// Figures are drawn for so many responses; a file may have hundreds.
pub const MOST: usize = 12;
/// A part of the stress that is smaller than this share of von Mises' stress is rounding.
const NOUGHT: f64 = 1e-7;

/// The responses that get figures of their own: all up to [`MOST`], of more those that govern most, in
/// the order of the list.
#[must_use]
pub fn chosen(responses: &Responses) -> Vec<usize> {
    actions::worst(responses, MOST)
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Shown {
    VonMises,
    Sigma,
    Tau,
}

impl Shown {
    const ALL: [Self; 3] = [Self::VonMises, Self::Sigma, Self::Tau];

    fn ending(self) -> &'static str {
        match self {
            Self::VonMises => "von-mises",
            Self::Sigma => "sigma",
            Self::Tau => "tau",
        }
    }
}

/// All figures of responses with their file names, see [`super::responses`].
#[must_use]
pub fn all(
    title: &str,
    units: &Units,
    domain: &Domain,
    solution: &Solution,
    names: &Names,
    responses: &Responses,
    style: Style,
) -> Vec<(String, Finished)> {
    let Some(fields) = UnitFields::new(solution, divisions(solution)) else {
        return Vec::new();
    };
    let sharing = Sharing::new(&solution.mesh, &fields.lattice);
    let excluded: Vec<Circle> = solution
        .corners
        .iter()
        .map(|corner| Circle {
            centre: corner.at,
            radius: responses.exclusion * corner.wall,
        })
        .collect();
    let scene = Scene {
        title,
        units,
        domain,
        surface: sharing.surface(&fields.positions),
        sharing,
        fields,
        excluded,
        shear_centre: solution
            .get(Quantity::ShearCentreX)
            .zip(solution.get(Quantity::ShearCentreY))
            .map(|(x, y)| Point::new(x.value, y.value)),
        style,
    };
    let action_slugs = slug::slugs(responses.list.iter().map(|r| r.name.as_str()));
    let cut_slugs = slug::slugs(names.cuts.iter().map(|c| c.name.as_str()));
    let cut_files = slug::cut_files(&cut_slugs, &action_slugs);
    let chosen = chosen(responses);

    let mut out: Vec<(String, Finished)> = Vec::new();
    if responses.list.len() > 1
        && let Some(figure) = scene.envelope(responses, chosen.len())
    {
        out.push(("stress-envelope-von-mises.svg".into(), figure));
    }
    let fields: Vec<Vec<(String, Finished)>> = chosen
        .par_iter()
        .map(|&i| scene.figures(&responses.list[i], &action_slugs[i]))
        .collect();
    out.extend(fields.into_iter().flatten());
    for &i in &chosen {
        let response = &responses.list[i];
        for (c, result) in &response.cuts {
            let Some(line) = names.cuts.get(*c) else {
                continue;
            };
            let figure = cut::draw(title, units, domain, line, response, result, style.width_mm);
            out.push((format!("{}.svg", cut_files[*c][i]), figure));
        }
    }
    out
}

/// What the figures of all responses share.
struct Scene<'a> {
    title: &'a str,
    units: &'a Units,
    domain: &'a Domain,
    surface: Surface,
    sharing: Sharing,
    fields: UnitFields,
    excluded: Vec<Circle>,
    shear_centre: Option<Point>,
    style: Style,
}

impl Scene<'_> {
    fn figures(&self, response: &Response, slug: &str) -> Vec<(String, Finished)> {
        let factor = stress_per_force(self.units);
        let stresses: Vec<Stress> = self
            .fields
            .stresses(&response.forces)
            .iter()
            .map(|s| actions::scaled(s, factor))
            .collect();
        let sigma: Vec<f64> = stresses.iter().map(|s| s.sigma).collect();
        let tau: Vec<Vector> = stresses.iter().map(|s| s.tau).collect();
        // Components are averaged over triangles, measures made of the means.
        let sigma = self.sharing.mean(&sigma);
        let tau = self.sharing.mean_vectors(&tau);
        Shown::ALL
            .into_iter()
            .filter_map(|shown| {
                let figure = self.figure(response, shown, &sigma, &tau)?;
                Some((format!("stress-{slug}-{}.svg", shown.ending()), figure))
            })
            .collect()
    }

    fn figure(
        &self,
        response: &Response,
        shown: Shown,
        sigma: &[f64],
        tau: &[Vector],
    ) -> Option<Finished> {
        let factor = stress_per_force(self.units);
        let found = |measure| {
            response.extremes.get(measure).map(|e| Extreme {
                value: e.value * factor,
                at: e.at,
            })
        };
        let whole = found(Measure::VonMises)?;
        let (high, low) = match shown {
            Shown::VonMises => (whole, whole),
            Shown::Sigma => (found(Measure::SigmaMax)?, found(Measure::SigmaMin)?),
            Shown::Tau => (found(Measure::Tau)?, found(Measure::Tau)?),
        };
        let size = high.value.abs().max(low.value.abs());
        if size <= NOUGHT * whole.value || size == 0.0 {
            return None;
        }
        let forces = described(self.units, response);
        let unit = self.units.stress;
        let f = &response.forces;
        let tau_size: Vec<f64> = tau.iter().map(|t| t.length()).collect();
        let (what, symbol, values) = match shown {
            Shown::VonMises => (
                "Von Mises stress √(σ² + 3τ²)",
                "von Mises stress",
                sigma
                    .iter()
                    .zip(tau)
                    .map(|(s, t)| (s * s + 3.0 * t.dot(*t)).sqrt())
                    .collect(),
            ),
            Shown::Sigma => ("Normal stress σ, tension positive,", "σ", sigma.to_vec()),
            Shown::Tau => ("Resultant shear stress |τ|", "|τ|", tau_size),
        };
        let guide = match shown {
            Shown::VonMises => None,
            Shown::Sigma => Guide::neutral_axis(&self.surface, sigma),
            Shown::Tau => self.shear_centre.and_then(|centre| {
                Guide::line_of_action(Vector::new(f.vx, f.vy), response.offset_torque, centre)
            }),
        };
        let subtitle = format!("{what} in {unit} under {forces}.");
        let error = format!(
            "Error of the shear stress in energy: at most {}.",
            digits::percent_up(response.energy_error)
        );
        let field = Field {
            kind: &response.name,
            title: self.title,
            subtitle: &subtitle,
            symbol,
            unit,
            units: self.units,
            domain: self.domain,
            surface: &self.surface,
            values: &values,
            nought: None,
            signed: shown == Shown::Sigma,
            direction: (shown == Shown::Tau).then_some(tau),
            excluded: if shown == Shown::Sigma {
                &[]
            } else {
                &self.excluded
            },
            mark: match shown {
                Shown::Tau => self.shear_centre.map(|p| (Mark::ShearCentre, p)),
                _ => None,
            },
            quoted: Some([low, high]),
            guides: guide.as_slice(),
            remark: if shown == Shown::Sigma || response.energy_error == 0.0 {
                ""
            } else {
                &error
            },
        };
        Some(field::draw(&field, self.style))
    }

    /// At each point the largest von Mises stress over all responses.
    fn envelope(&self, responses: &Responses, drawn: usize) -> Option<Finished> {
        let (_, index, extreme) = responses
            .envelope
            .iter()
            .find(|(m, _, _)| *m == Measure::VonMises)?;
        let factor = stress_per_force(self.units);
        let mut values = vec![0.0; self.surface.points.len()];
        for response in &responses.list {
            let stresses = self.fields.stresses(&response.forces);
            let sigma = self
                .sharing
                .mean(&stresses.iter().map(|s| s.sigma).collect::<Vec<_>>());
            let tau = self
                .sharing
                .mean_vectors(&stresses.iter().map(|s| s.tau).collect::<Vec<_>>());
            for ((value, sigma), tau) in values.iter_mut().zip(sigma).zip(tau) {
                *value = (factor * Stress { sigma, tau }.von_mises()).max(*value);
            }
        }
        let quoted = Extreme {
            value: extreme.value * factor,
            at: extreme.at,
        };
        let n = responses.list.len();
        let subtitle = format!(
            "The largest von Mises stress √(σ² + 3τ²) at each point, in {}, over {n} actions and \
             combinations.",
            self.units.stress
        );
        let mut remark = format!(
            "The largest of all is under {}.",
            responses.list.get(*index)?.name
        );
        if drawn < n {
            remark.push_str(&format!(
                " Figures of their own are drawn for the {drawn} actions and combinations that govern \
                 most; stresses.csv has all."
            ));
        }
        let field = Field {
            kind: "Envelope of all actions",
            title: self.title,
            subtitle: &subtitle,
            symbol: "von Mises stress",
            unit: self.units.stress,
            units: self.units,
            domain: self.domain,
            surface: &self.surface,
            values: &values,
            nought: None,
            signed: false,
            direction: None,
            excluded: &self.excluded,
            mark: None,
            quoted: Some([quoted; 2]),
            guides: &[],
            remark: &remark,
        };
        Some(field::draw(&field, self.style))
    }
}

/// The section forces of a response in words, such as `V_y = −40 kN, M_x = 12 kN m, T = −2.6 kN m`.
#[must_use]
pub fn described(units: &Units, response: &Response) -> String {
    let f = &response.forces;
    let moment = moment_per_force(units);
    let bimoment = unit_of_bimoment(units);
    let all = [
        ("N", f.n, units.force),
        ("V_x", f.vx, units.force),
        ("V_y", f.vy, units.force),
        ("M_x", f.mx * moment, units.moment.as_str()),
        ("M_y", f.my * moment, units.moment.as_str()),
        ("T", f.t * moment, units.moment.as_str()),
        ("B", f.b * moment, bimoment.as_str()),
        ("T_w", f.tw * moment, units.moment.as_str()),
    ];
    let parts: Vec<String> = all
        .iter()
        .filter(|(_, value, _)| *value != 0.0)
        .map(|(symbol, value, unit)| {
            // Neither equals sign nor unit may begin a line.
            let nb = '\u{a0}';
            let unit = unit.replace(' ', "\u{a0}");
            format!("{symbol}{nb}={nb}{}{nb}{unit}", digits::short(*value, 4))
        })
        .collect();
    if parts.is_empty() {
        "no force".into()
    } else {
        parts.join(", ")
    }
}
