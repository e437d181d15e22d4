//! Checks of the solver against sources outside the project, each naming its source.
//!
//! The cases are data ([`cases`], in `validation/cases/*.toml`); [`solve`] runs them, [`verdict`]
//! judges every expected value by the rule of its status, [`table`] writes what was found. This
//! crate knows nothing of the command line's section files and changes nothing in the solver.

pub mod cases;
pub mod ellipse;
pub mod outline;
pub mod probe;
pub mod readme;
pub mod solve;
pub mod table;
pub mod verdict;
