//! Outlines of straight and circular sides, valid planar domains, triangulation and bisection.
//!
//! This crate knows nothing of physics, materials' properties or files: it takes points and gives
//! triangles. `Piece`s become one [`domain::Domain`], a domain becomes a [`mesh::Mesh`].

pub mod arc;
pub mod bisect;
pub mod corners;
pub mod domain;
pub mod grade;
pub mod junction;
pub mod map;
pub mod mesh;
pub mod outline;
pub mod point;
pub mod quality;
mod topology;
pub mod tree;
pub mod triangulate;

pub use point::{Point, Vector};
