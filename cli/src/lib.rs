//! Section files in; tables, figures and results out. Knows nothing of numerics.

pub mod figure;
pub mod section;
pub mod write;
