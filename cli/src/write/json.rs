//! Results for programs: the object of `--json` and `results.json`.
//!
//! Numbers are written with the fewest digits that read back to the same double; minus zero is
//! written as zero; what is not a finite number (an enclosure without end) is `null`.

use serde::ser::SerializeMap;
use serde::{Serialize, Serializer};

use sectile_solver::solution::Solution;

use super::seams::remarks;
use super::{CAUTION, units, wording};
use crate::response::{Names, Responses};
use crate::section::Units;

pub mod action;
pub mod material;
pub mod seam;

use action::{Action, Exclusion, Extremes};
use material::Material;
use seam::Seam;

/// What the command knows beside the solution.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Run {
    /// Seconds spent on reading the section file.
    pub read: f64,
    /// Seconds spent on the actions.
    pub actions: f64,
    /// Seconds spent on writing, as far as known when the object is made.
    pub write: f64,
    /// Seconds from start to now.
    pub total: f64,
    /// Peak memory of the process in bytes, where the system tells.
    pub peak_memory: Option<u64>,
}

/// The results of one section.
#[derive(Clone, Debug, Serialize)]
pub struct Results {
    /// The section's title.
    pub title: String,
    /// The section file: as it was given, or relative to the output folder.
    pub source: String,
    /// The program and its version.
    pub program: String,
    /// What the reader must heed.
    pub caution: &'static str,
    /// The units of the section file.
    pub units: UnitNames,
    /// Whether every figure met the tolerance.
    pub tolerance_reached: bool,
    /// The properties by key, in reading order.
    pub properties: Properties,
    /// The material whose moduli the properties refer to, where there are several.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reference: Option<String>,
    /// The materials, where there are several.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub materials: Vec<Material>,
    /// The seams that join the pieces.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub seams: Vec<Seam>,
    /// Actions and combinations.
    pub actions: Vec<Action>,
    /// The worst over all of them, where there are any.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub envelope: Option<Extremes>,
    /// Where extremes are not quoted.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub exclusion: Option<Exclusion>,
    /// The last mesh.
    pub mesh: MeshSize,
    /// Seconds by stage.
    pub timings: Timings,
    /// Findings.
    pub notes: Vec<Note>,
    /// The files in the output folder; none where nothing is written.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub files: Vec<String>,
}

/// The units of the section file.
#[derive(Clone, Debug, Serialize)]
pub struct UnitNames {
    /// Of length.
    pub length: String,
    /// Of force.
    pub force: String,
    /// Of moment.
    pub moment: String,
    /// Of stress.
    pub stress: String,
}

/// Properties by key; a map in the file, a list here so that reading order is kept.
#[derive(Clone, Debug)]
pub struct Properties(pub Vec<(&'static str, Property)>);

impl Serialize for Properties {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for (key, property) in &self.0 {
            map.serialize_entry(key, property)?;
        }
        map.end()
    }
}

/// One property with its enclosure.
#[derive(Clone, Debug, Serialize)]
pub struct Property {
    /// The best value.
    pub value: f64,
    /// Lower end of the enclosure.
    pub low: f64,
    /// Upper end of the enclosure.
    pub high: f64,
    /// `exact`, `bounded` or `estimated`.
    pub trust: &'static str,
    /// Such as `mm4`; empty for a pure number.
    pub unit: String,
    /// Such as `I_x`.
    pub symbol: &'static str,
}

/// The size of the last mesh.
#[derive(Clone, Debug, Serialize)]
pub struct MeshSize {
    /// Triangles.
    pub triangles: usize,
    /// Unknowns of the larger of the two systems.
    pub unknowns: usize,
    /// Order of the elements.
    pub order: usize,
    /// Turns of the adaptive loop.
    pub levels: usize,
}

/// Wall-clock seconds by stage.
#[derive(Clone, Debug, Serialize)]
pub struct Timings {
    /// Reading the section file and making one region of its pieces.
    pub read: f64,
    /// Triangulation and bisection.
    pub mesh: f64,
    /// Fill-reducing ordering.
    pub order: f64,
    /// Element matrices and assembly.
    pub assemble: f64,
    /// Factorisation.
    pub factor: f64,
    /// Triangular solves.
    pub solve: f64,
    /// Particular fluxes, gaps, bounds and properties.
    pub bounds: f64,
    /// Stresses under the file's actions.
    pub actions: f64,
    /// Tables and figures.
    pub write: f64,
    /// All of it.
    pub total: f64,
    /// Peak memory in bytes, where the system tells.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub peak_memory: Option<u64>,
}

/// A finding.
#[derive(Clone, Debug, Serialize)]
pub struct Note {
    /// Its kind, stable for programs.
    pub kind: &'static str,
    /// What it says.
    pub text: String,
    /// Where, in the axes and unit of the section file.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub at: Option<[f64; 2]>,
}

impl Results {
    /// Collects the results of a solution.
    #[must_use]
    pub fn new(title: &str, source: &str, units: &Units, solution: &Solution, run: &Run) -> Self {
        let properties = solution
            .properties
            .iter()
            .map(|(quantity, figure)| {
                let property = Property {
                    value: no_minus_zero(figure.value),
                    low: no_minus_zero(figure.low),
                    high: no_minus_zero(figure.high),
                    trust: wording::trust(figure.trust),
                    unit: units::ascii(quantity.dimension(), units),
                    symbol: quantity.symbol(),
                };
                (quantity.key(), property)
            })
            .collect();
        let t = &solution.timings;
        Self {
            title: title.into(),
            source: source.into(),
            program: program(),
            caution: CAUTION,
            units: UnitNames {
                length: units.length.into(),
                force: units.force.into(),
                moment: units.moment.clone(),
                stress: units.stress.into(),
            },
            tolerance_reached: solution.reached,
            properties: Properties(properties),
            reference: None,
            materials: Vec::new(),
            seams: Vec::new(),
            actions: Vec::new(),
            envelope: None,
            exclusion: None,
            mesh: MeshSize {
                triangles: solution.mesh.triangles.len(),
                unknowns: solution.levels.last().map_or(0, |level| level.unknowns),
                order: solution.order,
                levels: solution.levels.len(),
            },
            timings: Timings {
                read: run.read,
                mesh: t.mesh,
                order: t.order,
                assemble: t.assemble,
                factor: t.factor,
                solve: t.solve,
                bounds: t.bounds,
                actions: run.actions,
                write: run.write,
                total: run.total,
                peak_memory: run.peak_memory,
            },
            notes: solution
                .notes
                .iter()
                .map(|note| Note {
                    kind: note.kind,
                    text: note.text.clone(),
                    at: note.at.map(|p| [no_minus_zero(p.x), no_minus_zero(p.y)]),
                })
                .collect(),
            files: Vec::new(),
        }
    }

    /// With the materials of a section of several: all that are `used`, and the one that the properties
    /// refer to.
    #[must_use]
    pub fn with_materials(
        self,
        units: &Units,
        names: &Names,
        used: &[usize],
        reference: &str,
        responses: Option<&Responses>,
    ) -> Self {
        Self {
            reference: Some(reference.into()),
            materials: material::materials(units, names, used, responses),
            ..self
        }
    }

    /// With the section's seams, and notes on what is to be known of their demands.
    #[must_use]
    pub fn with_seams(mut self, names: &Names, responses: Option<&Responses>) -> Self {
        self.seams = seam::seams(names, responses);
        self.notes
            .extend(remarks(names).into_iter().map(|text| Note {
                kind: "seams",
                text: text.into(),
                at: None,
            }));
        self
    }

    /// With the responses to the file's actions.
    #[must_use]
    pub fn with_responses(
        self,
        units: &Units,
        names: &Names,
        solution: &Solution,
        responses: &Responses,
    ) -> Self {
        Self {
            actions: action::actions(units, names, responses),
            envelope: Some(action::envelope(units, names, responses)),
            exclusion: Some(Exclusion {
                share_of_wall: responses.exclusion,
                corners: solution.corners.len(),
            }),
            ..self
        }
    }

    /// One line of JSON, for standard output.
    #[must_use]
    pub fn line(&self) -> String {
        // Serialising plain structs with string keys to memory does not fail.
        serde_json::to_string(self).unwrap_or_default()
    }

    /// Indented JSON that ends in a line break, for `results.json`.
    #[must_use]
    pub fn pretty(&self) -> String {
        let mut text = serde_json::to_string_pretty(self).unwrap_or_default();
        text.push('\n');
        text
    }
}

/// The program's name and version.
#[must_use]
pub fn program() -> String {
    format!("sectile {}", env!("CARGO_PKG_VERSION"))
}

/// A number with the fewest digits that read back to the same double; minus zero is `0`, what is not
/// finite is empty.
#[must_use]
pub fn number(x: f64) -> String {
    if !x.is_finite() {
        return String::new();
    }
    let x = no_minus_zero(x);
    let magnitude = x.abs();
    if x == 0.0 || (1e-5..1e16).contains(&magnitude) {
        format!("{x}")
    } else {
        format!("{x:e}")
    }
}

fn no_minus_zero(x: f64) -> f64 {
    // IEEE 754: −0 + 0 = +0.
    x + 0.0
}

#[cfg(test)]
pub(crate) mod tests;
