//! Warping, flexure and restrained-warping problems on a meshed cross-section, each with its dual,
//! and from them every section property with its bounds.
//!
//! This crate knows nothing of section files, figures or the terminal: it takes a
//! [`sectile_mesh::domain::Domain`] with materials and gives a [`solution::Solution`].

pub mod figure;
pub mod material;
pub mod quantity;
pub mod sample;
pub mod solution;
