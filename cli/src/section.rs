//! A section as its file states it: the plain value that the solver's inputs are taken from.

use sectile_mesh::outline::piece::Piece;
use sectile_solver::material::Material;

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
}
