//! Seams: the shear flow through their throats, and what follows from it.

pub mod demand;
pub mod flow;

#[cfg(test)]
mod tests;
