//! The boundary-value problems of a section, all of one form.
//!
//! Each problem asks for the shear stress τ (per unit G) with a given divergence and a given curl:
//!
//! ```text
//! div τ = −f in the section,   τ·n = 0 on every edge,   τ = grad u + h
//! ```
//!
//! with a known source `f` and a known field `h`. Its Galerkin solution `u` (the *primal*) and its
//! equilibrated partner `τ* = τ₀ + curl φ` (the *dual*; `div τ₀ = −f`, `τ₀·n = 0`, φ zero on outer
//! edges and constant on each hole's) enclose τ: by Prager & Synge, "Approximations in elasticity
//! based on the concept of function space", Quart. Appl. Math. 5 (1947) 241–269,
//! `|τ_p − τ|² + |τ* − τ|² = |τ_p − τ*|²`, the *gap*, without constants.
//!
//! Axes are centroidal, `curl φ = (∂φ/∂y, −∂φ/∂x)`.

/// Saint-Venant torsion, unit rate of twist: `h = (−y, x)`, `f = 0`; u is the warping function.
pub const TORSION: usize = 0;
/// Flexure without Poisson's ratio, `∂σ/∂z = x`: `h = 0`, `f = x`.
pub const FLEXURE_X: usize = 1;
/// Flexure without Poisson's ratio, `∂σ/∂z = y`: `h = 0`, `f = y`.
pub const FLEXURE_Y: usize = 2;
/// What Poisson's ratio adds for `∂σ/∂z = x`, times ν/(1+ν): `curl τ = −y`, `h = (y²/2, 0)`, `f = 0`.
pub const POISSON_X: usize = 3;
/// What Poisson's ratio adds for `∂σ/∂z = y`, times ν/(1+ν): `curl τ = x`, `h = (0, x²/2)`, `f = 0`.
pub const POISSON_Y: usize = 4;
/// Restrained warping: `h = 0`, `f = ω` about the shear centre with zero mean.
pub const RESTRAINED: usize = 5;
/// Number of problems.
pub const COUNT: usize = 6;

/// The problems with a source, in the order in which sources are stored.
pub const SOURCES: [usize; 3] = [FLEXURE_X, FLEXURE_Y, RESTRAINED];

/// The pairs of problems whose stress products are integrated.
pub const PAIRS: [(usize, usize); 13] = [
    (TORSION, TORSION),
    (TORSION, POISSON_X),
    (TORSION, POISSON_Y),
    (POISSON_X, POISSON_X),
    (POISSON_X, POISSON_Y),
    (POISSON_Y, POISSON_Y),
    (FLEXURE_X, FLEXURE_X),
    (FLEXURE_X, FLEXURE_Y),
    (FLEXURE_Y, FLEXURE_Y),
    (RESTRAINED, RESTRAINED),
    (TORSION, FLEXURE_X),
    (TORSION, FLEXURE_Y),
    (TORSION, RESTRAINED),
];

/// Index of a pair in [`PAIRS`], in either order.
///
/// # Panics
/// If the pair is not listed: a broken contract inside this crate.
#[must_use]
pub fn pair(a: usize, b: usize) -> usize {
    match PAIRS
        .iter()
        .position(|&(p, q)| (p, q) == (a, b) || (p, q) == (b, a))
    {
        Some(i) => i,
        None => unreachable!("problems {a} and {b} are never paired"),
    }
}

/// The known field `h` of a problem at (x, y).
#[must_use]
pub fn known_field(problem: usize, x: f64, y: f64) -> [f64; 2] {
    match problem {
        TORSION => [-y, x],
        POISSON_X => [0.5 * y * y, 0.0],
        POISSON_Y => [0.0, 0.5 * x * x],
        _ => [0.0; 2],
    }
}
