//! Full plasticity: what a section bears when all of it yields, exactly on straight and circular
//! sides.
//!
//! Materials are rigid and perfectly plastic, with the same yield stress in tension and compression.
//! Stresses in any consistent unit S, lengths in the domain's unit L; forces in S·L², moments in S·L³.

pub mod axis;
mod half;
pub mod heap;
pub mod interaction;
pub(crate) mod quantities;
mod root;
#[cfg(test)]
mod tests;

use std::f64::consts::FRAC_PI_2;

use sectile_mesh::Point;
use sectile_mesh::domain::Domain;
use sectile_mesh::mesh::Mesh;

use crate::figure::Figure;
use axis::{PlasticAxis, plastic_axis};
use heap::torsion_modulus;
use interaction::Surface;

/// Full plasticity of a section.
#[derive(Clone, Debug)]
pub struct Plastic {
    /// The yield stress that the moduli relate to; `None` where no material states one: the moduli
    /// then are those of one yield stress, whatever it is.
    pub yield_stress: Option<f64>,
    /// Whether all pieces have the same.
    pub uniform: bool,
    /// Neutral axes of pure bending: at y about x, at x about y, relative to the origin; their moments
    /// over the yield stress are the plastic moduli.
    pub axes: [PlasticAxis; 2],
    /// The interaction of N, M_x and M_y, moments about the origin; in units of the yield stress where
    /// there is none.
    pub surface: Surface,
    /// Plastic torsion modulus, length³: the fully plastic torque over the yield stress in shear, which
    /// is f_y/√3 after von Mises. None for several yield stresses or a section in separate parts.
    pub torsion_modulus: Option<Figure>,
}

impl Plastic {
    /// Plastic moduli about x and y, length³: plastic moments over [`Self::yield_stress`].
    #[must_use]
    pub fn moduli(&self) -> [f64; 2] {
        let unit = self.yield_stress.unwrap_or(1.0);
        self.axes.map(|axis| axis.moment / unit)
    }

    /// The same with the torsion modulus, where there is one; see [`heap::torsion_modulus`].
    #[must_use]
    pub fn with_torsion(mut self, domain: &Domain, mesh: &Mesh, tolerance: f64) -> Self {
        if self.uniform {
            self.torsion_modulus = torsion_modulus(domain, mesh, tolerance);
        }
        self
    }
}

/// Full plasticity of a domain whose materials have the yield stresses `yields`, moments about
/// `origin`; moduli relate to the material `reference`. Without the torque, see
/// [`Plastic::with_torsion`].
///
/// `None` where some of the materials used state a yield stress and others do not, and where several
/// materials state none.
#[must_use]
pub fn analyse(
    domain: &Domain,
    yields: &[Option<f64>],
    reference: usize,
    origin: Point,
) -> Option<Plastic> {
    let first = *domain.piece_materials.first()?;
    let one = domain.piece_materials.iter().all(|&m| m == first);
    let of_piece: Option<Vec<f64>> = domain
        .piece_materials
        .iter()
        .map(|&m| yields.get(m).copied().flatten())
        .collect();
    let (of_piece, yield_stress) = match of_piece {
        Some(list) => {
            let stated = yields.get(reference).copied().flatten();
            let unit = stated.unwrap_or(list[0]);
            (list, Some(unit))
        }
        None if one => (vec![1.0; domain.piece_materials.len()], None),
        None => return None,
    };
    let uniform = of_piece.iter().all(|&f| f == of_piece[0]);
    let surface = Surface::new(domain, |p| of_piece[p as usize], origin);
    Some(Plastic {
        yield_stress,
        uniform,
        axes: [0.0, -FRAC_PI_2].map(|direction| plastic_axis(&surface.slices(direction))),
        surface,
        torsion_modulus: None,
    })
}
