//! Reference elements: orthonormal and Lagrange polynomials, quadrature, tables of both, and the
//! polynomial fields of given divergence.

pub mod divergence;
pub mod lagrange;
pub mod orthonormal;
pub mod quadrature;
pub mod table;
