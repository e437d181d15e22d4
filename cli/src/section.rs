//! A section as its file states it: the plain value that the solver's inputs are taken from.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::domain::seam::SeamRequest;
use sectile_mesh::outline::piece::Piece;
use sectile_solver::material::Material;
use sectile_solver::stress::forces::SectionForces;

/// The units of a section file. Lengths stay in the file's unit throughout.
#[derive(Clone, Debug, PartialEq)]
pub struct Units {
    /// `mm`, `cm`, `m`, `in` or `ft`.
    pub length: &'static str,
    /// `N`, `kN`, `MN`, `lbf` or `kip`.
    pub force: &'static str,
    /// Force times length, such as `kN m`.
    pub moment: String,
    /// `Pa`, `kPa`, `MPa`, `GPa`, `psi` or `ksi`.
    pub stress: &'static str,
}

impl Units {
    /// Metres in one unit of length.
    #[must_use]
    pub fn metres(&self) -> f64 {
        match self.length {
            "mm" => 1e-3,
            "cm" => 1e-2,
            "in" => 0.0254,
            "ft" => 0.3048,
            _ => 1.0,
        }
    }
}

/// A section ready to be solved.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    /// Its title; the file's stem where the file has none.
    pub title: String,
    /// Its units.
    pub units: Units,
    /// Its materials; with none in the file, one without a name (E = 1, ν = 0.3) and a note.
    pub materials: Vec<Material>,
    /// The material whose moduli the properties refer to, where the file names one.
    pub reference: Option<usize>,
    /// Whether the file has no material, so that results must say what was assumed.
    pub assumed_material: bool,
    /// Its pieces, lengths in `units.length`.
    pub pieces: Vec<Piece>,
    /// What pieces that touch are to each other.
    pub contact: Contact,
    /// What joins them; with [`Contact::Seams`] only.
    pub seams: Vec<SeamInput>,
    /// Its load cases.
    pub actions: Vec<Action>,
    /// Sums of them.
    pub combinations: Vec<Combination>,
    /// Points at which stresses are wanted.
    pub probes: Vec<Probe>,
    /// Lines along which stresses are wanted.
    pub cuts: Vec<Cut>,
}

/// What pieces that touch along a line are to each other.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Contact {
    /// One solid.
    Fused,
    /// Two, unless a seam joins them.
    Seams,
}

/// A seam that joins two pieces.
#[derive(Clone, Debug, PartialEq)]
pub struct SeamInput {
    /// What is to be made, lengths in `units.length`; its name is unlike that of any other seam or
    /// piece.
    pub request: SeamRequest,
    /// The stress that its throat may be given, in `units.stress`.
    pub allowable: Option<f64>,
    /// Force per length along x and y that the seam carries beside the shear flow, in `units.force`
    /// over `units.length`.
    pub direct: [f64; 2],
    /// Length and pitch of an intermittent seam.
    pub intermittent: Option<Intermittent>,
}

/// An intermittent seam: parts of one length at one pitch, in `units.length`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Intermittent {
    /// Length of each part.
    pub length: f64,
    /// From the start of one part to the start of the next; at least the length.
    pub pitch: f64,
}

/// The materials that pieces and weld metal are of, by first use.
#[must_use]
pub fn materials_used(domain: &Domain) -> Vec<usize> {
    let mut used: Vec<usize> = Vec::new();
    for &material in &domain.piece_materials {
        if !used.contains(&material) {
            used.push(material);
        }
    }
    used
}

impl Section {
    /// The material whose moduli the properties refer to; `None` where there is no other.
    #[must_use]
    pub fn reference_of(&self, domain: &Domain) -> Option<&Material> {
        let used = materials_used(domain);
        let reference = self.reference.or_else(|| used.first().copied())?;
        let several = used.iter().any(|&material| material != reference);
        several.then(|| self.materials.get(reference)).flatten()
    }
}

/// A load case: section forces.
#[derive(Clone, Debug, PartialEq)]
pub struct Action {
    /// Its name, unlike that of any other action or combination.
    pub name: String,
    /// Its section forces in `units.force` and `units.length` (F, F·L, F·L²), not zero; without the
    /// torque that the shear forces have about the shear centre when `at` is given.
    pub forces: SectionForces,
    /// A point on the lines of action of the shear forces; `None`: the shear centre.
    pub at: Option<Point>,
}

/// A sum of actions, each times a factor.
#[derive(Clone, Debug, PartialEq)]
pub struct Combination {
    /// Its name, unlike that of any action or other combination.
    pub name: String,
    /// Indices of actions, each once, and their factors.
    pub factors: Vec<(usize, f64)>,
}

/// A point of the material.
#[derive(Clone, Debug, PartialEq)]
pub struct Probe {
    /// Its name.
    pub name: String,
    /// Where it is, lengths in `units.length`; on the edge exactly if the file means the edge.
    pub at: Point,
}

/// A line that crosses the material.
#[derive(Clone, Debug, PartialEq)]
pub struct Cut {
    /// Its name.
    pub name: String,
    /// Where it starts, lengths in `units.length`.
    pub from: Point,
    /// Where it ends.
    pub to: Point,
}
