//! Geometry and bending: everything that the outline alone gives, exactly.

use sectile_mesh::domain::Domain;

use super::area::{AreaMoments, perimeters};
use crate::figure::Figure;
use crate::material::Material;
use crate::quantity::Quantity;

/// The exact properties, in the domain's unit of length; `metres` in that unit are needed for the
/// mass alone.
#[must_use]
pub fn exact_properties(
    domain: &Domain,
    moments: &AreaMoments,
    material: &Material,
    metres: f64,
) -> Vec<(Quantity, Figure)> {
    let m = moments;
    let (a, c) = (m.area, m.centroid);
    let polar = m.xx + m.yy;
    let [outer, holes] = perimeters(domain);
    let mut out = vec![
        (Quantity::Area, Figure::exact(a, a)),
        (Quantity::Perimeter, Figure::exact(outer, outer)),
    ];
    if holes > 0.0 {
        out.push((Quantity::HolePerimeter, Figure::exact(holes, holes)));
    }
    if let Some(density) = material.density {
        let mass = density * a * metres * metres;
        out.push((Quantity::MassPerLength, Figure::exact(mass, mass)));
    }
    out.push((Quantity::CentroidX, Figure::exact(c.x, m.reach)));
    out.push((Quantity::CentroidY, Figure::exact(c.y, m.reach)));
    out.push((Quantity::SecondMomentX, Figure::exact(m.xx, polar)));
    out.push((Quantity::SecondMomentY, Figure::exact(m.yy, polar)));
    let product = Figure::exact(m.xy, polar);
    out.push((Quantity::ProductMoment, product));

    let half_difference = Figure::exact(0.5 * (m.xx - m.yy), polar).value;
    let radius = half_difference.hypot(product.value);
    let (one, two) = (0.5 * polar + radius, 0.5 * polar - radius);
    out.push((Quantity::PrincipalMoment1, Figure::exact(one, polar)));
    out.push((Quantity::PrincipalMoment2, Figure::exact(two, polar)));
    // I(θ) = I_x cos²θ + I_y sin²θ − 2 I_xy sinθ cosθ is greatest at axis 1.
    let (angle, spread) = if radius > 0.0 {
        (
            0.5 * (-product.value).atan2(half_difference).to_degrees(),
            (polar / radius).min(1e13),
        )
    } else {
        (0.0, 1.0)
    };
    // A negative zero moment would turn 90° into −90°.
    let angle = if angle <= -90.0 + 1e-12 {
        angle + 180.0
    } else {
        angle
    };
    out.push((
        Quantity::PrincipalAngle,
        Figure::exact(angle, 30.0 * spread),
    ));

    for (quantity, moment) in [
        (Quantity::RadiusOfGyrationX, m.xx),
        (Quantity::RadiusOfGyrationY, m.yy),
        (Quantity::RadiusOfGyration1, one),
        (Quantity::RadiusOfGyration2, two),
    ] {
        let r = (moment / a).max(0.0).sqrt();
        out.push((quantity, Figure::exact(r, (polar / a).sqrt())));
    }
    let [left, right, bottom, top] = m.extent;
    for (quantity, moment, distance) in [
        (Quantity::SectionModulusTop, m.xx, top),
        (Quantity::SectionModulusBottom, m.xx, -bottom),
        (Quantity::SectionModulusLeft, m.yy, -left),
        (Quantity::SectionModulusRight, m.yy, right),
    ] {
        let w = moment / distance;
        let lost = 1.0 + (polar / moment).min(1e12) * 0.1 + 0.1 * m.reach / distance;
        out.push((quantity, Figure::exact(w, w * lost)));
    }
    out
}
