//! What the section answers to its actions and combinations: the plain values that tables, files and
//! figures are made of. Consistent units: the file's force F and length L, stresses F/L².

use sectile_mesh::Point;
use sectile_mesh::domain::seam::Seam;
use sectile_solver::material::Material;
use sectile_solver::seam::demand::Demand;
use sectile_solver::stress::cut::CutResult;
use sectile_solver::stress::extreme::{Extreme, Extremes};
use sectile_solver::stress::field::UnitFields;
use sectile_solver::stress::forces::SectionForces;
use sectile_solver::stress::measure::Measure;
use sectile_solver::stress::probe::ProbeStress;

use crate::section::{Cut, Probe, SeamInput};

/// The answer to one action or combination.
#[derive(Clone, Debug, PartialEq)]
pub struct Response {
    /// Its name.
    pub name: String,
    /// Whether it combines actions.
    pub combination: bool,
    /// The section forces, the torque of the line of action in `t`.
    pub forces: SectionForces,
    /// The line of action of its shear forces, where one is given.
    pub at: Option<Point>,
    /// Torque about the shear centre, Saint-Venant's and warping torque, F·L.
    pub torque: f64,
    /// What the line of action added to it.
    pub offset_torque: f64,
    /// The extremes that may be quoted.
    pub extremes: Extremes,
    /// First yield is reached at this multiple of the action.
    pub load_factor: Option<f64>,
    /// N, M_x and M_y make the section fully plastic at this multiple; shear, torsion and bimoment are
    /// no part of it.
    pub plastic_factor: Option<f64>,
    /// Relative error in energy of the shear stress, guaranteed.
    pub energy_error: f64,
    /// By index of the probe.
    pub probes: Vec<(usize, Vec<ProbeStress>)>,
    /// By index of the cut.
    pub cuts: Vec<(usize, CutResult)>,
    /// In the order of the domain's seams.
    pub seams: Vec<Demand>,
    /// The extremes in each material alone, by its index; none where there is only one.
    pub materials: Vec<(usize, Extremes)>,
}

/// The worst of each measure over several responses: which one, and its extreme.
pub type Envelope = Vec<(Measure, usize, Extreme)>;

/// The answers to all of a file's actions and combinations.
#[derive(Clone, Debug)]
pub struct Responses {
    /// In the order of the file, combinations last.
    pub list: Vec<Response>,
    /// The unit fields that they are made of.
    pub fields: UnitFields,
    /// The worst of each measure over all of them.
    pub envelope: Envelope,
    /// The same in each material alone.
    pub materials: Vec<(usize, Envelope)>,
    /// By seam of the domain, the response that asks most of it.
    pub seams: Vec<usize>,
    /// Extremes keep off sharp re-entrant corners by this share of the wall.
    pub exclusion: f64,
}

/// The names that the writers of responses need.
#[derive(Clone, Copy, Debug)]
pub struct Names<'a> {
    /// Pieces, by index.
    pub pieces: &'a [String],
    /// Probes, by index.
    pub probes: &'a [Probe],
    /// Cuts, by index.
    pub cuts: &'a [Cut],
    /// The seams that the section has.
    pub seams: &'a [Seam],
    /// What the file states of them, by [`Seam::request`].
    pub stated: &'a [SeamInput],
    /// Materials, by index.
    pub materials: &'a [Material],
}

impl<'a> Names<'a> {
    /// The name of a piece; empty where it has none.
    #[must_use]
    pub fn piece(&self, piece: u32) -> &'a str {
        self.pieces.get(piece as usize).map_or("", |n| n.as_str())
    }

    /// The name of a material; empty where it has none.
    #[must_use]
    pub fn material(&self, material: usize) -> &'a str {
        self.materials.get(material).map_or("", |m| m.name.as_str())
    }

    /// The seams with what the file states of each.
    pub fn joints(&self) -> impl Iterator<Item = (&'a Seam, &'a SeamInput)> {
        let stated = self.stated;
        self.seams
            .iter()
            .filter_map(move |seam| Some((seam, stated.get(seam.request)?)))
    }
}

impl Responses {
    /// The demands that exceed what is allowed: index of the seam and of the response that asks most of
    /// it.
    #[must_use]
    pub fn overstressed(&self) -> Vec<(usize, usize)> {
        self.seams
            .iter()
            .enumerate()
            .filter(|&(seam, &response)| {
                let demand = self.list.get(response).and_then(|r| r.seams.get(seam));
                demand
                    .and_then(|demand| demand.utilisation)
                    .is_some_and(|utilisation| utilisation > 1.0)
            })
            .map(|(seam, &response)| (seam, response))
            .collect()
    }
}
