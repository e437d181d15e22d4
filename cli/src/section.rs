//! A section as its file states it: the plain value that the solver's inputs are taken from.

use sectile_mesh::Point;
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
    /// Whether the file has no material, so that results must say what was assumed.
    pub assumed_material: bool,
    /// Its pieces, lengths in `units.length`.
    pub pieces: Vec<Piece>,
    /// Its load cases.
    pub actions: Vec<Action>,
    /// Sums of them.
    pub combinations: Vec<Combination>,
    /// Points at which stresses are wanted.
    pub probes: Vec<Probe>,
    /// Lines along which stresses are wanted.
    pub cuts: Vec<Cut>,
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
