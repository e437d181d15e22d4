//! The stress at a point of the section and the measures made of it.

use sectile_mesh::Vector;

/// Normal stress along the bar and the two shear stresses on the section.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Stress {
    /// σ_z, tension positive.
    pub sigma: f64,
    /// τ_zx and τ_zy.
    pub tau: Vector,
}

impl Stress {
    /// Resultant shear stress `√(τ_x² + τ_y²)`.
    #[must_use]
    pub fn shear(&self) -> f64 {
        self.tau.length()
    }

    /// Von Mises' equivalent stress `√(σ² + 3τ²)`.
    #[must_use]
    pub fn von_mises(&self) -> f64 {
        (self.sigma * self.sigma + 3.0 * self.tau.dot(self.tau)).sqrt()
    }

    /// Tresca's equivalent stress `√(σ² + 4τ²)`.
    #[must_use]
    pub fn tresca(&self) -> f64 {
        (self.sigma * self.sigma + 4.0 * self.tau.dot(self.tau)).sqrt()
    }

    /// The largest and the smallest principal stress, `σ/2 ± √(σ²/4 + τ²)`; the middle one is zero.
    #[must_use]
    pub fn principal(&self) -> [f64; 2] {
        let radius = 0.5 * self.tresca();
        [0.5 * self.sigma + radius, 0.5 * self.sigma - radius]
    }
}
