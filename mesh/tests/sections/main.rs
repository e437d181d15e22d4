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
mod seams;
mod shapes;
