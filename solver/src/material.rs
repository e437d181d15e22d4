//! What the solver must know of a material.

/// An isotropic, linear-elastic material. Stresses in any consistent unit, density in kg/m³.
#[derive(Clone, Debug, PartialEq)]
pub struct Material {
    /// Its name in messages.
    pub name: String,
    /// Young's modulus, positive.
    pub young: f64,
    /// Poisson's ratio in (−1, 0.5).
    pub poisson: f64,
    /// Shear modulus; `E / (2 (1 + ν))` unless stated.
    pub shear: f64,
    /// Yield stress, if stated.
    pub yield_stress: Option<f64>,
    /// Density, kg/m³, if stated.
    pub density: Option<f64>,
}
