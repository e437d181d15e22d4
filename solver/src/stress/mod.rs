//! Stresses under section forces: fields, extremes, points and cuts.

pub mod cut;
pub mod extreme;
pub mod field;
pub mod forces;
mod locate;
pub mod measure;
pub mod probe;
pub mod state;

#[cfg(test)]
mod tests;
