//! The section properties that the program gives: key, symbol, dimension and group of each, in the
//! order in which an engineer reads them.

/// The heading under which a property is listed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Group {
    /// Area, perimeter, centroid.
    Geometry,
    /// Second moments, moduli, plastic moduli.
    Bending,
    /// Torsion and warping constants.
    Torsion,
    /// Shear centre, shear areas.
    Shear,
    /// Fully plastic forces and moments.
    Plasticity,
    /// Stiffnesses of a section of several materials.
    Stiffness,
}

/// The physical dimension of a property.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// Length to this power; 0: a pure number.
    Length(i32),
    /// Mass per length, kg/m.
    MassPerLength,
    /// Degrees.
    Angle,
    /// Force times length to this power; the force is the materials' stress times length².
    ForceLength(i32),
}

macro_rules! quantities {
    ($($variant:ident $key:literal $symbol:literal $group:ident $dimension:expr, $doc:literal;)*) => {
        /// A section property; the documentation of each gives its formula.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum Quantity { $(#[doc = $doc] $variant,)* }

        impl Quantity {
            /// Every property in reading order.
            pub const ALL: &'static [Self] = &[$(Self::$variant,)*];

            /// The key in results files.
            #[must_use]
            pub fn key(self) -> &'static str { match self { $(Self::$variant => $key,)* } }

            /// The symbol in tables.
            #[must_use]
            pub fn symbol(self) -> &'static str { match self { $(Self::$variant => $symbol,)* } }

            /// The heading it belongs under.
            #[must_use]
            pub fn group(self) -> Group { match self { $(Self::$variant => Group::$group,)* } }

            /// Its dimension.
            #[must_use]
            pub fn dimension(self) -> Dimension { match self { $(Self::$variant => $dimension,)* } }

            /// What it is, in words and as a formula.
            #[must_use]
            pub fn description(self) -> &'static str { match self { $(Self::$variant => $doc,)* } }
        }
    };
}

use Dimension::{Angle, ForceLength, Length, MassPerLength};

quantities! {
    Area "area" "A" Geometry Length(2), "Area, ∫dA";
    WeightedArea "weighted_area" "A_E" Geometry Length(2), "Several materials: ∫(E/E₀) dA, E₀ of the reference material";
    Perimeter "perimeter" "u" Geometry Length(1), "Length of the outer edge";
    HolePerimeter "perimeter_holes" "u_i" Geometry Length(1), "Length of all hole edges";
    MassPerLength "mass_per_length" "m" Geometry MassPerLength, "Mass per length, from the material's density";
    CentroidX "centroid_x" "x_c" Geometry Length(1), "Centroid, x in the axes of the section file";
    CentroidY "centroid_y" "y_c" Geometry Length(1), "Centroid, y in the axes of the section file";
    SecondMomentX "second_moment_x" "I_x" Bending Length(4), "Second moment of area about the centroidal x axis, ∫y² dA";
    SecondMomentY "second_moment_y" "I_y" Bending Length(4), "Second moment of area about the centroidal y axis, ∫x² dA";
    ProductMoment "product_moment" "I_xy" Bending Length(4), "Product moment about the centroid, ∫xy dA";
    PrincipalMoment1 "principal_moment_1" "I_1" Bending Length(4), "Larger principal second moment";
    PrincipalMoment2 "principal_moment_2" "I_2" Bending Length(4), "Smaller principal second moment";
    PrincipalAngle "principal_angle" "α" Bending Angle, "Angle from x to axis 1, anticlockwise; bending about axis 1 has I_1";
    RadiusOfGyrationX "radius_of_gyration_x" "i_x" Bending Length(1), "√(I_x/A)";
    RadiusOfGyrationY "radius_of_gyration_y" "i_y" Bending Length(1), "√(I_y/A)";
    RadiusOfGyration1 "radius_of_gyration_1" "i_1" Bending Length(1), "√(I_1/A)";
    RadiusOfGyration2 "radius_of_gyration_2" "i_2" Bending Length(1), "√(I_2/A)";
    SectionModulusTop "section_modulus_top" "W_top" Bending Length(3), "I_x over the distance from the centroid to the highest fibre";
    SectionModulusBottom "section_modulus_bottom" "W_bot" Bending Length(3), "I_x over the distance from the centroid to the lowest fibre";
    SectionModulusLeft "section_modulus_left" "W_left" Bending Length(3), "I_y over the distance from the centroid to the leftmost fibre";
    SectionModulusRight "section_modulus_right" "W_right" Bending Length(3), "I_y over the distance from the centroid to the rightmost fibre";
    PlasticModulusX "plastic_modulus_x" "Z_x" Bending Length(3), "Plastic modulus for bending about x, ∫|y − y_p| dA; with several yield stresses M_px over the reference material's";
    PlasticModulusY "plastic_modulus_y" "Z_y" Bending Length(3), "Plastic modulus for bending about y, ∫|x − x_p| dA; with several yield stresses M_py over the reference material's";
    PlasticCentroidX "plastic_centroid_x" "x_p" Bending Length(1), "Plastic neutral axis of bending about y: the line x = x_p halves the area, with several yield stresses the yield force";
    PlasticCentroidY "plastic_centroid_y" "y_p" Bending Length(1), "Plastic neutral axis of bending about x: the line y = y_p halves the area, with several yield stresses the yield force";
    TorsionConstant "torsion_constant" "J" Torsion Length(4), "Torsion constant, T = G J θ′";
    WarpingConstant "warping_constant" "C_w" Torsion Length(6), "Warping constant, ∫ω² dA, ω about the shear centre with zero mean";
    PlasticTorsionModulus "plastic_torsion_modulus" "Z_t" Torsion Length(3), "Plastic torsion modulus, 2∫φ dA: fully plastic torque over the yield stress in shear (f_y/√3 after von Mises), φ the least distance from the edge";
    ShearCentreX "shear_centre_x" "x_s" Shear Length(1), "Shear centre independent of Poisson's ratio (energy), x in the axes of the section file; loads refer to it";
    ShearCentreY "shear_centre_y" "y_s" Shear Length(1), "Shear centre independent of Poisson's ratio (energy), y in the axes of the section file; loads refer to it";
    FlexureCentreX "flexure_centre_x" "x_f" Shear Length(1), "Flexure centre: zero mean rotation under flexure, depends on Poisson's ratio, x in the axes of the section file";
    FlexureCentreY "flexure_centre_y" "y_f" Shear Length(1), "Flexure centre: zero mean rotation under flexure, depends on Poisson's ratio, y in the axes of the section file";
    ShearAreaX "shear_area_x" "A_sx" Shear Length(2), "Shear area for a force along x: V²/(G A_s) = ∫τ²/G dA";
    ShearAreaY "shear_area_y" "A_sy" Shear Length(2), "Shear area for a force along y: V²/(G A_s) = ∫τ²/G dA";
    ShearCoefficientX "shear_coefficient_x" "κ_x" Shear Length(0), "Shear area for a force along x over the area";
    ShearCoefficientY "shear_coefficient_y" "κ_y" Shear Length(0), "Shear area for a force along y over the area";
    PolarRadius "polar_radius" "r_0" Shear Length(1), "Polar radius about the shear centre, r₀² = (I_x + I_y)/A + distance² of centroid and shear centre";
    MonosymmetryX "monosymmetry_x" "β_x" Shear Length(1), "(1/I_x) ∫y(x²+y²) dA − 2 y_s about centroidal axes";
    MonosymmetryY "monosymmetry_y" "β_y" Shear Length(1), "(1/I_y) ∫x(x²+y²) dA − 2 x_s about centroidal axes";
    PlasticAxialForce "plastic_axial_force" "N_p" Plasticity ForceLength(0), "Fully plastic axial force, ∫f_y dA";
    PlasticMomentX "plastic_moment_x" "M_px" Plasticity ForceLength(1), "Fully plastic moment about x, ∫f_y |y − y_p| dA: neutral axis parallel to x, no axial force, the moment about y left free";
    PlasticMomentY "plastic_moment_y" "M_py" Plasticity ForceLength(1), "Fully plastic moment about y, ∫f_y |x − x_p| dA: neutral axis parallel to y, no axial force, the moment about x left free";
    PlasticTorque "plastic_torque" "T_p" Plasticity ForceLength(1), "Fully plastic torque, Z_t f_y/√3 (yield in shear after von Mises), warping free";
    AxialStiffness "axial_stiffness" "EA" Stiffness ForceLength(0), "Axial stiffness, ∫E dA";
    BendingStiffnessX "bending_stiffness_x" "EI_x" Stiffness ForceLength(2), "Bending stiffness about the centroidal x axis, ∫E y² dA";
    BendingStiffnessY "bending_stiffness_y" "EI_y" Stiffness ForceLength(2), "Bending stiffness about the centroidal y axis, ∫E x² dA";
    TorsionStiffness "torsion_stiffness" "GJ" Stiffness ForceLength(2), "Torsion stiffness, torque over rate of twist";
    WarpingStiffness "warping_stiffness" "EC_w" Stiffness ForceLength(4), "Warping stiffness, ∫E ω² dA, ω about the shear centre with zero mean";
}
