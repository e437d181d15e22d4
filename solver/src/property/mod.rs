//! Section properties from the outline (exact) and from the solved fields (with bounds).

pub mod area;
pub mod bending;
pub mod boundary;
pub mod shear;
