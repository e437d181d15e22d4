//! Stresses under section forces: fields, extremes, points and cuts.

pub mod forces;
pub mod state;
