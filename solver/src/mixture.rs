//! Several materials in one section: moduli of each piece over those of a reference material.
//!
//! Everything is solved per unit of the reference's moduli: with `e = E/E₀` and `g = G/G₀` by piece,
//! `σ = e (…)`, `τ = g (grad u + h)`, sources carry e, energies 1/g.

use sectile_mesh::domain::Domain;

use crate::material::Material;
use crate::solution::{Settings, SolveError};

/// Moduli of a piece over the reference's.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ratio {
    /// `e = E/E₀`.
    pub e: f64,
    /// `g = G/G₀`.
    pub g: f64,
}

/// The moduli of the reference itself.
pub const UNIT: Ratio = Ratio { e: 1.0, g: 1.0 };

/// The materials of a section against a reference.
#[derive(Clone, Debug, PartialEq)]
pub struct Mixture {
    /// Index of the reference material.
    pub reference: usize,
    /// By piece.
    pub ratios: Vec<Ratio>,
    /// Whether all pieces have the reference's moduli.
    pub uniform: bool,
    /// Whether there is more than one material.
    pub several: bool,
}

impl Mixture {
    /// The mixture of a domain's materials: against the one that the settings name, else against that
    /// of the first piece.
    ///
    /// # Errors
    /// A material that does not exist, or moduli that are no positive numbers.
    pub fn new(
        domain: &Domain,
        materials: &[Material],
        settings: &Settings,
    ) -> Result<Self, SolveError> {
        let reference = settings
            .reference
            .or_else(|| domain.piece_materials.first().copied())
            .unwrap_or(0);
        let find = |m: usize| {
            let material = materials.get(m).ok_or_else(|| {
                SolveError::Setting(format!("the section has no material number {}", m + 1))
            })?;
            if [material.young, material.shear]
                .iter()
                .all(|x| x.is_finite() && *x > 0.0)
            {
                Ok(material)
            } else {
                Err(SolveError::Setting(format!(
                    "the moduli of the material {:?} must be positive numbers",
                    material.name
                )))
            }
        };
        let base = find(reference)?;
        let ratios = domain
            .piece_materials
            .iter()
            .map(|&m| {
                let own = find(m)?;
                Ok(Ratio {
                    e: own.young / base.young,
                    g: own.shear / base.shear,
                })
            })
            .collect::<Result<Vec<Ratio>, SolveError>>()?;
        let uniform = ratios.iter().all(|r| *r == UNIT);
        let several = domain.piece_materials.iter().any(|&m| m != reference);
        Ok(Self {
            reference,
            ratios,
            uniform,
            several,
        })
    }

    /// The common Poisson's ratio: the mean of the pieces' by `E A`. `areas` by piece.
    #[must_use]
    pub fn poisson(&self, domain: &Domain, materials: &[Material], areas: &[f64]) -> f64 {
        let of = |piece: usize| materials[domain.piece_materials[piece]].poisson;
        let first = of(0);
        if (0..areas.len()).all(|p| of(p) == first) {
            return first;
        }
        let (mut sum, mut weight) = (0.0, 0.0);
        for (piece, (area, ratio)) in areas.iter().zip(&self.ratios).enumerate() {
            sum += ratio.e * area * of(piece);
            weight += ratio.e * area;
        }
        sum / weight
    }

    /// The factor on what Poisson's ratio adds to flexure: `2 ν G₀/E₀`, which is `ν/(1+ν)` in a
    /// section of one isotropic material.
    #[must_use]
    pub fn poisson_factor(&self, base: &Material, poisson: f64) -> f64 {
        if self.uniform {
            poisson / (1.0 + poisson)
        } else {
            2.0 * poisson * base.shear / base.young
        }
    }
}
