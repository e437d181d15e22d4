//! The interaction of N, M_x and M_y at full plasticity, as tables and figures show it. Consistent units:
//! the file's force F and length L.

use std::f64::consts::{FRAC_PI_2, PI};

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_solver::plastic::analyse;
use sectile_solver::plastic::interaction::{PlasticState, Surface};
use sectile_solver::stress::forces::SectionForces;

use crate::section::Section;
use crate::write::units::consistent_materials;

/// N over N_p of the curves of M_x and M_y.
pub const LEVELS: [f64; 5] = [0.0, 0.2, 0.4, 0.6, 0.8];
/// How far chords may be from a curve, over its largest moments.
const DEVIATION: f64 = 1e-3;

/// The interaction of a section of which every piece has a yield stress.
#[derive(Clone, Debug)]
pub struct Interaction {
    surface: Surface,
    /// Fully plastic axial force.
    pub n: f64,
    /// Plastic moments about x and y without axial force.
    pub moments: [f64; 2],
}

impl Interaction {
    /// The interaction about `origin`, the centroid; `None` where a piece has no yield stress.
    #[must_use]
    pub fn new(section: &Section, domain: &Domain, origin: Point) -> Option<Self> {
        let materials = consistent_materials(section);
        let yields: Vec<Option<f64>> = materials.iter().map(|m| m.yield_stress).collect();
        let stated = |&m: &usize| yields.get(m).copied().flatten().is_some();
        if !domain.piece_materials.iter().all(stated) {
            return None;
        }
        let reference = domain.piece_materials.first().copied()?;
        let surface = analyse(domain, &yields, reference, origin)?.surface;
        let n = surface.squash();
        Some(Self {
            moments: [
                surface.at_force(0.0, 0.0).mx,
                surface.at_force(-FRAC_PI_2, 0.0).my,
            ],
            n,
            surface,
        })
    }

    /// N and M_x: neutral axes parallel to x, tension on either side, M_y as it comes.
    #[must_use]
    pub fn about_x(&self) -> Vec<PlasticState> {
        self.both_senses(0.0)
    }

    /// N and M_y: neutral axes parallel to y, M_x as it comes.
    #[must_use]
    pub fn about_y(&self) -> Vec<PlasticState> {
        self.both_senses(-FRAC_PI_2)
    }

    /// M_x and M_y, closed, at a multiple of N_p.
    #[must_use]
    pub fn at_level(&self, level: f64) -> Vec<PlasticState> {
        self.surface.moments_at(level * self.n, DEVIATION)
    }

    /// Tension lies to the left of the neutral axis: above at 0, on the right at −90°.
    fn both_senses(&self, direction: f64) -> Vec<PlasticState> {
        let mut curve = self.surface.force_and_moment(direction, DEVIATION);
        let mut back = self.surface.force_and_moment(direction + PI, DEVIATION);
        back.reverse();
        curve.extend(back);
        curve
    }

    /// The multiple of N, M_x and M_y of an action at which the section is fully plastic; shear, torsion
    /// and bimoment are no part of it. `None` without N, M_x and M_y.
    #[must_use]
    pub fn load_factor(&self, forces: &SectionForces) -> Option<f64> {
        let collapse = self.surface.collapse(forces.n, forces.mx, forces.my)?;
        Some(collapse.factor)
    }
}
