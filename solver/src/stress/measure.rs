//! The measures of stress whose extremes are asked for.

use super::state::Stress;

/// A measure of stress.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Measure {
    /// Largest normal stress.
    SigmaMax,
    /// Smallest normal stress.
    SigmaMin,
    /// Resultant shear stress.
    Tau,
    /// Von Mises' equivalent stress.
    VonMises,
    /// Tresca's equivalent stress.
    Tresca,
    /// Largest principal stress.
    Principal1,
    /// Smallest principal stress.
    Principal3,
    /// Von Mises' equivalent stress over the yield stress.
    Utilisation,
}

impl Measure {
    /// Every measure in reading order.
    pub const ALL: &'static [Self] = &[
        Self::SigmaMax,
        Self::SigmaMin,
        Self::Tau,
        Self::VonMises,
        Self::Tresca,
        Self::Principal1,
        Self::Principal3,
        Self::Utilisation,
    ];

    /// Its key in results files.
    #[must_use]
    pub fn key(self) -> &'static str {
        match self {
            Self::SigmaMax => "sigma_max",
            Self::SigmaMin => "sigma_min",
            Self::Tau => "tau",
            Self::VonMises => "von_mises",
            Self::Tresca => "tresca",
            Self::Principal1 => "principal_1",
            Self::Principal3 => "principal_3",
            Self::Utilisation => "utilisation",
        }
    }

    /// Its value; no utilisation without a yield stress.
    #[must_use]
    pub fn of(self, stress: &Stress, yield_stress: Option<f64>) -> Option<f64> {
        Some(match self {
            Self::SigmaMax | Self::SigmaMin => stress.sigma,
            Self::Tau => stress.shear(),
            Self::VonMises => stress.von_mises(),
            Self::Tresca => stress.tresca(),
            Self::Principal1 => stress.principal()[0],
            Self::Principal3 => stress.principal()[1],
            Self::Utilisation => stress.von_mises() / yield_stress?,
        })
    }

    /// Whether the smallest value is the extreme one.
    #[must_use]
    pub fn is_least(self) -> bool {
        matches!(self, Self::SigmaMin | Self::Principal3)
    }
}
