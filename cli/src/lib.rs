//! Section files in; tables, figures and results out. Knows nothing of numerics.

pub mod answer;
pub mod batch;
pub mod command;
mod digest;
pub mod figure;
pub mod interaction;
pub mod read;
pub mod report;
pub mod response;
pub mod section;
pub mod trace;
pub mod write;
