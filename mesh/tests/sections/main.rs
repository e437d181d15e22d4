//! Whole sections through outline, domain, triangulation, bisection and grading.
#![allow(clippy::unwrap_used)]

mod arcs;
mod arrangement;
mod bisection;
mod chance;
mod check;
mod corners;
mod faults;
mod meshes;
mod seam_faults;
mod seams;
mod seams_by_chance;
mod shapes;
