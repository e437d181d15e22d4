//! The interaction of N, M_x and M_y at full plasticity, as tables and figures show it. Consistent units:
//! the file's force F and length L.

use std::f64::consts::{FRAC_PI_2, PI};

use sectile_solver::plastic::interaction::{PlasticState, Surface};
use sectile_solver::solution::Solution;
use sectile_solver::stress::forces::SectionForces;

/// N over N_p of the curves of M_x and M_y.
pub const LEVELS: [f64; 5] = [0.0, 0.2, 0.4, 0.6, 0.8];
/// How far chords may be from a curve, over its largest moments.
const DEVIATION: f64 = 1e-3;

/// The interaction of a section of which every piece has a yield stress.
#[derive(Clone, Copy, Debug)]
pub struct Interaction<'a> {
    surface: &'a Surface,
    /// Fully plastic axial force.
    pub n: f64,
    /// Plastic moments about x and y without axial force.
    pub moments: [f64; 2],
}

impl<'a> Interaction<'a> {
    /// The interaction about the centroid; `None` where a piece has no yield stress.
    #[must_use]
    pub fn new(solution: &'a Solution) -> Option<Self> {
        let plastic = solution.plastic.as_ref()?;
        plastic.yield_stress?;
        Some(Self {
            surface: &plastic.surface,
            n: plastic.surface.squash(),
            moments: plastic.axes.map(|axis| axis.moment),
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
