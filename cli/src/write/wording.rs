//! The words of the table: short names of properties, groups and kinds of trust.

use sectile_solver::figure::Trust;
use sectile_solver::quantity::{Group, Quantity};
use sectile_solver::stress::measure::Measure;

/// A short name of a property, without its formula.
#[must_use]
pub fn name(quantity: Quantity) -> &'static str {
    use Quantity as Q;
    match quantity {
        Q::Area => "Area",
        Q::WeightedArea => "Area weighted by E",
        Q::Perimeter => "Outer edge, length",
        Q::HolePerimeter => "Hole edges, length",
        Q::MassPerLength => "Mass per length",
        Q::CentroidX => "Centroid, x",
        Q::CentroidY => "Centroid, y",
        Q::SecondMomentX => "Second moment about x",
        Q::SecondMomentY => "Second moment about y",
        Q::ProductMoment => "Product moment",
        Q::PrincipalMoment1 => "Principal moment, 1",
        Q::PrincipalMoment2 => "Principal moment, 2",
        Q::PrincipalAngle => "Axis 1, angle from x",
        Q::RadiusOfGyrationX => "Radius of gyration, x",
        Q::RadiusOfGyrationY => "Radius of gyration, y",
        Q::RadiusOfGyration1 => "Radius of gyration, 1",
        Q::RadiusOfGyration2 => "Radius of gyration, 2",
        Q::SectionModulusTop => "Section modulus, top",
        Q::SectionModulusBottom => "Section modulus, bottom",
        Q::SectionModulusLeft => "Section modulus, left",
        Q::SectionModulusRight => "Section modulus, right",
        Q::PlasticModulusX => "Plastic modulus, x",
        Q::PlasticModulusY => "Plastic modulus, y",
        Q::PlasticCentroidX => "Plastic neutral axis, x",
        Q::PlasticCentroidY => "Plastic neutral axis, y",
        Q::TorsionConstant => "Torsion constant",
        Q::WarpingConstant => "Warping constant",
        Q::PlasticTorsionModulus => "Plastic torsion modulus",
        Q::ShearCentreX => "Shear centre, x",
        Q::ShearCentreY => "Shear centre, y",
        Q::FlexureCentreX => "Flexure centre, x",
        Q::FlexureCentreY => "Flexure centre, y",
        Q::ShearAreaX => "Shear area, x",
        Q::ShearAreaY => "Shear area, y",
        Q::ShearCoefficientX => "Shear coefficient, x",
        Q::ShearCoefficientY => "Shear coefficient, y",
        Q::PolarRadius => "Polar radius",
        Q::MonosymmetryX => "Monosymmetry, x",
        Q::MonosymmetryY => "Monosymmetry, y",
        Q::PlasticAxialForce => "Plastic axial force",
        Q::PlasticMomentX => "Plastic moment, x",
        Q::PlasticMomentY => "Plastic moment, y",
        Q::PlasticTorque => "Plastic torque",
        Q::AxialStiffness => "Axial stiffness",
        Q::BendingStiffnessX => "Bending stiffness, x",
        Q::BendingStiffnessY => "Bending stiffness, y",
        Q::TorsionStiffness => "Torsion stiffness",
        Q::WarpingStiffness => "Warping stiffness",
    }
}

/// The heading of a group.
#[must_use]
pub fn heading(group: Group) -> &'static str {
    match group {
        Group::Geometry => "Geometry",
        Group::Bending => "Bending",
        Group::Torsion => "Torsion and warping",
        Group::Shear => "Shear",
        Group::Plasticity => "Full plasticity",
        Group::Stiffness => "Stiffness",
    }
}

/// A measure of stress.
#[must_use]
pub fn measure(measure: Measure) -> &'static str {
    match measure {
        Measure::SigmaMax => "Normal stress, largest",
        Measure::SigmaMin => "Normal stress, smallest",
        Measure::Tau => "Shear stress, resultant",
        Measure::VonMises => "Von Mises",
        Measure::Tresca => "Tresca",
        Measure::Principal1 => "Principal stress, 1",
        Measure::Principal3 => "Principal stress, 3",
        Measure::Utilisation => "Utilisation of yield",
    }
}

/// The kind of trust, as in results files.
#[must_use]
pub fn trust(trust: Trust) -> &'static str {
    match trust {
        Trust::Exact => "exact",
        Trust::Bounded => "bounded",
        Trust::Estimated => "estimated",
    }
}

/// What a kind of trust promises.
#[must_use]
pub fn promise(trust: Trust) -> &'static str {
    match trust {
        Trust::Exact => "closed form, all digits shown hold",
        Trust::Bounded => "the true value lies within ±, guaranteed from below and from above",
        Trust::Estimated => "± rests on an estimate, chosen to be on the safe side",
    }
}
