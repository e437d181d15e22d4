//! The solved section.

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::mesh::Mesh;

use crate::corner::SingularCorner;
use crate::figure::Figure;
use crate::geometry::Frame;
use crate::level::Fields;
use crate::material::Material;
use crate::mixture::Ratio;
use crate::plastic::Plastic;
use crate::property::area::AreaMoments;
use crate::property::shear::ShearProperties;
use crate::quantity::Quantity;
use crate::tables::Tables;

pub use crate::adapt::{default_order, exclusion_radius};

/// What the adaptive loop aims at.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Settings {
    /// Half-width of the bounds over the value, for every figure that is not exact.
    pub tolerance: f64,
    /// Order of the elements; `None`: the default.
    pub order: Option<usize>,
    /// The loop stops before a mesh whose larger system has more unknowns than this.
    pub max_unknowns: usize,
    /// The material (index) whose moduli the properties refer to; `None`: the first piece's.
    pub reference: Option<usize>,
}

/// One turn of the adaptive loop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Level {
    /// Triangles.
    pub triangles: usize,
    /// Unknowns of the larger of the two systems.
    pub unknowns: usize,
    /// The figure that is farthest from its tolerance.
    pub worst: Quantity,
    /// Its half-width over its scale (1e-4: reached a tolerance of 1e-4).
    pub worst_error: f64,
}

/// Wall-clock seconds by stage.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Timings {
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
}

/// Something that the reader must know.
#[derive(Clone, Debug, PartialEq)]
pub struct Note {
    /// Its kind, stable for programs: `sharp-corner`, `tolerance-not-reached`, `separate-parts`, …
    pub kind: &'static str,
    /// What it says.
    pub text: String,
    /// Where, in the axes of the section file.
    pub at: Option<Point>,
}

/// A solved section: mesh, fields and properties. Lengths are in the unit of the domain.
#[derive(Clone, Debug)]
pub struct Solution {
    /// The last mesh.
    pub mesh: Mesh,
    /// Order of the elements.
    pub order: usize,
    /// The turns of the adaptive loop.
    pub levels: Vec<Level>,
    /// Whether every figure met the tolerance.
    pub reached: bool,
    /// The properties in the order of [`Quantity::ALL`]; those that do not apply are absent.
    pub properties: Vec<(Quantity, Figure)>,
    /// Full plasticity, moments about the centroid that elastic stresses use; none where only some of
    /// the materials state a yield stress, or none of several.
    pub plastic: Option<Plastic>,
    /// The points at which the calculated stress has no limit.
    pub corners: Vec<SingularCorner>,
    /// Findings.
    pub notes: Vec<Note>,
    /// Seconds by stage.
    pub timings: Timings,
    /// The fields; none for a section in separate parts.
    pub(crate) solved: Option<Solved>,
}

/// The fields with what is needed to evaluate them.
#[derive(Clone, Debug)]
pub(crate) struct Solved {
    pub frame: Frame,
    /// In the solver's coordinates.
    pub moments: AreaMoments,
    /// Factor on what Poisson's ratio adds to flexure, see [`Mixture::poisson_factor`].
    pub poisson_factor: f64,
    /// Moduli over the reference's, by piece.
    pub ratios: Vec<Ratio>,
    pub shear: ShearProperties,
    /// `∫ω²` of the primal warping function about the shear centre; zero for a section whose
    /// warping cannot be told from none: it carries no bimoment.
    pub warping_square: f64,
    /// Bounds on what the projection of the sources leaves out, by source.
    pub oscillation: [f64; 3],
    pub fields: Fields,
    pub tables: &'static Tables,
}

impl Solution {
    /// A property, where it applies.
    #[must_use]
    pub fn get(&self, quantity: Quantity) -> Option<Figure> {
        self.properties
            .iter()
            .find(|(q, _)| *q == quantity)
            .map(|(_, f)| *f)
    }
}

/// Why a section cannot be solved.
#[derive(Debug, thiserror::Error, PartialEq)]
pub enum SolveError {
    /// The mesh could not be made.
    #[error("the section could not be meshed: {0}")]
    Mesh(String),
    /// A factorisation broke down.
    #[error("the linear system could not be factorised: {0}")]
    Factor(String),
    /// A setting is out of range.
    #[error("{0}")]
    Setting(String),
}

/// Solves a section: the adaptive loop until every figure meets the tolerance or the unknowns run
/// out. `materials` are indexed by [`Domain::piece_materials`]; `metres` in the domain's unit of
/// length serve the mass alone; `progress` is called after each level.
///
/// # Errors
/// See [`SolveError`].
pub fn solve(
    domain: &Domain,
    materials: &[Material],
    metres: f64,
    settings: &Settings,
    progress: &mut dyn FnMut(&Level),
) -> Result<Solution, SolveError> {
    crate::adapt::solve(domain, materials, metres, settings, progress)
}
