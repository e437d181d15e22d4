//! The commands, one a file.

pub mod new;
