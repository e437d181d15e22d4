//! Full plasticity as properties.

use super::Plastic;
use crate::figure::Figure;
use crate::property::area::AreaMoments;
use crate::quantity::Quantity;

/// The properties of a section with the moments `m`, about whose centroid `plastic` was analysed.
#[must_use]
pub(crate) fn properties(plastic: &Plastic, m: &AreaMoments) -> Vec<(Quantity, Figure)> {
    let [left, right, bottom, top] = m.extent;
    let size = (right - left).max(top - bottom);
    let [about_x, about_y] = plastic.axes;
    let [z_x, z_y] = plastic.moduli();
    // The area, weighted by the yield stress.
    let area = plastic.surface.squash() / plastic.yield_stress.unwrap_or(1.0);
    let modulus = |z: f64| Figure::exact(z, z + 1e-2 * area * size);
    // The halving line is found from areas: where the section is thin there, rounding moves it more.
    let line = |at: f64| Figure::exact(at, 10.0 * (size + m.reach));
    let mut out = vec![
        (Quantity::PlasticModulusX, modulus(z_x)),
        (Quantity::PlasticModulusY, modulus(z_y)),
        (
            Quantity::PlasticCentroidX,
            line(m.centroid.x + about_y.offset),
        ),
        (
            Quantity::PlasticCentroidY,
            line(m.centroid.y + about_x.offset),
        ),
    ];
    if let Some(torsion) = plastic.torsion_modulus {
        out.push((Quantity::PlasticTorsionModulus, torsion));
    }
    let Some(yield_stress) = plastic.yield_stress else {
        return out;
    };
    let squash = plastic.surface.squash();
    out.push((Quantity::PlasticAxialForce, Figure::exact(squash, squash)));
    out.push((Quantity::PlasticMomentX, modulus(z_x).scaled(yield_stress)));
    out.push((Quantity::PlasticMomentY, modulus(z_y).scaled(yield_stress)));
    if let Some(torsion) = plastic.torsion_modulus {
        let shear = yield_stress / 3.0_f64.sqrt();
        out.push((Quantity::PlasticTorque, torsion.scaled(shear)));
    }
    out
}
