//! Warping, flexure and restrained-warping problems on a meshed cross-section, each with its dual,
//! and from them every section property with its bounds.
//!
//! This crate knows nothing of section files, figures or the terminal: it takes a
//! [`sectile_mesh::domain::Domain`] with materials and gives a [`solution::Solution`].

mod adapt;
pub mod corner;
mod element;
mod evaluate;
mod factor;
pub mod figure;
mod geometry;
mod kernel;
mod level;
pub mod material;
mod mixture;
mod ordering;
pub mod plastic;
mod problem;
mod property;
pub mod quantity;
pub mod sample;
pub mod seam;
pub mod solution;
mod space;
pub mod stress;
mod system;
mod tables;
#[cfg(test)]
mod testing;
mod tree_flux;
