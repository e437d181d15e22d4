//! Geometry and bending: everything that the outline alone gives, exactly.

use sectile_mesh::domain::Domain;

use super::area::{AreaMoments, perimeters, piece_areas};
use crate::figure::Figure;
use crate::material::Material;
use crate::mixture::Mixture;
use crate::quantity::Quantity;

/// The exact properties, in the domain's unit of length, from moments weighted by E over the
/// reference's; `metres` in that unit are needed for the mass alone.
#[must_use]
pub fn exact_properties(
    domain: &Domain,
    moments: &AreaMoments,
    mixture: &Mixture,
    materials: &[Material],
    metres: f64,
) -> Vec<(Quantity, Figure)> {
    let m = moments;
    let (a, c) = (m.area, m.centroid);
    let polar = m.xx + m.yy;
    let [outer, holes] = perimeters(domain);
    let areas = piece_areas(domain);
    let area = if mixture.uniform {
        a
    } else {
        areas.iter().sum()
    };
    let mut out = vec![(Quantity::Area, Figure::exact(area, area))];
    if mixture.several {
        let young = materials[mixture.reference].young;
        out.extend([
            (Quantity::WeightedArea, Figure::exact(a, a)),
            (
                Quantity::AxialStiffness,
                Figure::exact(young * a, young * a),
            ),
            (
                Quantity::BendingStiffnessX,
                Figure::exact(young * m.xx, young * polar),
            ),
            (
                Quantity::BendingStiffnessY,
                Figure::exact(young * m.yy, young * polar),
            ),
        ]);
    }
    out.push((Quantity::Perimeter, Figure::exact(outer, outer)));
    if holes > 0.0 {
        out.push((Quantity::HolePerimeter, Figure::exact(holes, holes)));
    }
    let density = |piece: usize| materials[domain.piece_materials[piece]].density;
    let mass_of = |(piece, area): (usize, &f64)| Some(density(piece)? * area);
    let mass = if mixture.several {
        areas.iter().enumerate().map(mass_of).sum()
    } else {
        mass_of((0, &area))
    };
    if let Some(mass) = mass {
        let mass: f64 = mass * metres * metres;
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
