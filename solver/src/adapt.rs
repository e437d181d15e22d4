//! The adaptive loop: solve, measure the gaps, refine where they are large, until every figure is
//! inside its tolerance.

use std::time::Instant;

use sectile_mesh::Point;
use sectile_mesh::bisect::bisect;
use sectile_mesh::domain::Domain;
use sectile_mesh::grade::grade_to;
use sectile_mesh::mesh::Mesh;
use sectile_mesh::triangulate::{Sizing, triangulate};

use crate::corner::{SingularCorner, singular_corners};
use crate::figure::Figure;
use crate::geometry::Frame;
use crate::level::{LevelResult, solve_level, unknowns};
use crate::material::Material;
use crate::mixture::Mixture;
use crate::plastic;
use crate::problem::COUNT;
use crate::property::area::{AreaMoments, area_moments, piece_areas};
use crate::property::bending::exact_properties;
use crate::property::shear::{Enclosures, ShearProperties};
use crate::quantity::Quantity;
use crate::solution::{Level, Note, Settings, Solution, SolveError, Solved, Timings};
use crate::tables::Tables;

/// Order of the elements unless stated. Measured over the validation set of 99 sections, to 1e-4:
/// order 3 takes 2.4 s on one core, 4 takes 3.4 s, 5 takes 4.1 s. On the sharp channel of the benches
/// to 1e-6 order 4 takes half the time of order 3, and stays ahead below.
#[must_use]
pub fn default_order(tolerance: f64) -> usize {
    if tolerance >= 2e-5 { 3 } else { 4 }
}

/// The least tolerance that double precision can honour.
const LEAST_TOLERANCE: f64 = 1e-10;

/// A figure that the loop drives into its tolerance.
struct Aim {
    quantity: Quantity,
    /// Half-width over its scale.
    error: f64,
    /// Weights of the problems' squared gaps in that error.
    weights: [f64; COUNT],
}

/// Solves a section. See [`crate::solution::solve`].
pub(crate) fn solve(
    domain: &Domain,
    materials: &[Material],
    metres: f64,
    settings: &Settings,
    progress: &mut dyn FnMut(&Level),
) -> Result<Solution, SolveError> {
    let order = check(settings)?;
    let mixture = Mixture::new(domain, materials, settings)?;
    let mut clock = Timings::default();
    let start = Instant::now();
    let moments = area_moments(domain, |p| mixture.ratios[p as usize].e);
    let mut properties = exact_properties(domain, &moments, &mixture, materials, metres);
    let areas = piece_areas(domain);
    let poisson = mixture.poisson(domain, materials, &areas);
    let reference = &materials[mixture.reference];
    let factor = mixture.poisson_factor(reference, poisson);
    clock.bounds += start.elapsed().as_secs_f64();

    let start = Instant::now();
    let corners = singular_corners(domain, &mixture.ratios);
    let mut mesh =
        triangulate(domain, &Sizing::default()).map_err(|e| SolveError::Mesh(e.to_string()))?;
    clock.mesh += start.elapsed().as_secs_f64();
    let start = Instant::now();
    let yields: Vec<Option<f64>> = materials.iter().map(|m| m.yield_stress).collect();
    let plastic = plastic::analyse(domain, &yields, mixture.reference, moments.centroid)
        .map(|p| p.with_torsion(domain, &mesh, settings.tolerance));
    if let Some(plastic) = &plastic {
        properties.extend(plastic::quantities::properties(plastic, &moments));
    }
    properties.sort_by_key(|(q, _)| *q);
    clock.bounds += start.elapsed().as_secs_f64();
    let mut notes: Vec<Note> = corners.iter().map(corner_note).collect();
    notes.extend(mixture_notes(domain, &mixture, materials, poisson));
    notes.extend(missing_yield(domain, materials));

    let frame = Frame {
        origin: moments.centroid,
        scale: ((moments.xx + moments.yy) / moments.area).sqrt(),
    };
    if domain.parts > 1 {
        notes.push(Note {
            kind: "separate-parts",
            text: format!(
                "The section is in {} separate parts. They bend together only if something else holds \
                 them together; torsion, shear and warping properties of a disconnected section \
                 depend on that connection and are not given.",
                domain.parts
            ),
            at: None,
        });
        return Ok(Solution {
            mesh,
            order,
            levels: Vec::new(),
            reached: true,
            properties,
            plastic,
            corners,
            notes,
            timings: clock,
            solved: None,
        });
    }

    let start = Instant::now();
    mesh = grade(&mesh, &corners, settings.tolerance);
    clock.mesh += start.elapsed().as_secs_f64();

    let scaled = scaled_moments(&moments, &frame);
    let start = Instant::now();
    let tables = Tables::of(order);
    clock.assemble += start.elapsed().as_secs_f64();
    let mut levels: Vec<Level> = Vec::new();
    let mut eigenvalue = f64::NAN;
    loop {
        let result = solve_level(
            &mesh,
            &frame,
            &scaled,
            &mixture.ratios,
            tables,
            levels.is_empty(),
            &mut clock,
        )?;
        if let Some(e) = result.eigenvalue {
            eigenvalue = e;
        }
        let start = Instant::now();
        let enclosures = Enclosures::new(result.total);
        let shear = enclosures.properties(&scaled, factor, eigenvalue);
        let aims = aims(&enclosures, &shear, &scaled, factor, eigenvalue);
        let worst = aims
            .iter()
            .max_by(|a, b| a.error.total_cmp(&b.error))
            .map_or((Quantity::TorsionConstant, 0.0), |a| (a.quantity, a.error));
        let level = Level {
            triangles: mesh.triangles.len(),
            unknowns: result.unknowns,
            worst: worst.0,
            worst_error: worst.1,
        };
        progress(&level);
        levels.push(level);
        let reached = worst.1 <= settings.tolerance;
        let rounding = !reached && limited_by_rounding(&aims, &result, settings.tolerance);
        let next = if reached || rounding {
            None
        } else {
            refine(&mesh, &result, &aims, order, settings)
        };
        clock.bounds += start.elapsed().as_secs_f64();
        if let Some((finer, seconds)) = next {
            clock.mesh += seconds;
            clock.bounds -= seconds;
            mesh = finer;
            continue;
        }
        if !reached {
            notes.push(not_reached(&levels, settings, rounding));
        }
        let shear_area = if mixture.uniform {
            scaled.area
        } else {
            let sum: f64 = areas
                .iter()
                .zip(&mixture.ratios)
                .map(|(a, r)| a * r.g)
                .sum();
            sum / frame.scale.powi(2)
        };
        let found = outward(&shear, &moments, &scaled, shear_area, &frame);
        if mixture.several {
            properties.extend(stiffnesses(&found, reference));
        }
        properties.extend(found);
        properties.sort_by_key(|(q, _)| *q);
        return Ok(Solution {
            mesh,
            order,
            levels,
            reached,
            properties,
            plastic,
            corners,
            notes,
            timings: clock,
            solved: Some(Solved {
                frame,
                moments: scaled,
                poisson_factor: factor,
                ratios: mixture.ratios,
                shear,
                warping_square: if shear.warping.low > 0.0 {
                    result.total.source_square
                } else {
                    0.0
                },
                oscillation: result.total.oscillation.map(|o| o.max(0.0).sqrt()),
                fields: result.fields,
                tables,
            }),
        });
    }
}

fn check(settings: &Settings) -> Result<usize, SolveError> {
    let order = settings
        .order
        .unwrap_or_else(|| default_order(settings.tolerance));
    if !(1..=crate::element::lagrange::MAX_ORDER).contains(&order) {
        return Err(SolveError::Setting(format!(
            "the order of the elements must be 1 to {}, not {order}",
            crate::element::lagrange::MAX_ORDER
        )));
    }
    let tolerance = settings.tolerance;
    if !(LEAST_TOLERANCE..1.0).contains(&tolerance) {
        return Err(SolveError::Setting(format!(
            "the tolerance must be at least {LEAST_TOLERANCE:e} (double precision carries no more) and \
             below 1, not {tolerance:e}"
        )));
    }
    Ok(order)
}

/// What the reader must know where there are several materials.
fn mixture_notes(
    domain: &Domain,
    mixture: &Mixture,
    materials: &[Material],
    poisson: f64,
) -> Vec<Note> {
    if !mixture.several {
        return Vec::new();
    }
    let mut text = format!(
        "Several materials: area, moments and C_w are weighted by E, J and the shear areas by G, over \
         those of {}; the centroid is that of E. Stresses are true stresses of each piece, one-sided \
         where pieces meet. Bonds are taken as perfect: slip, creep, shrinkage and cracks are not \
         in the figures.",
        materials[mixture.reference].name
    );
    let differs = domain
        .piece_materials
        .iter()
        .any(|&m| materials[m].poisson != poisson);
    if differs {
        text.push_str(&format!(
            " Poisson's ratios differ: flexure takes the mean by EA, {poisson:.3}, in all pieces, and \
             the stresses by which pieces hinder each other's sideways contraction are left out.",
        ));
    }
    vec![Note {
        kind: "several-materials",
        text,
        at: None,
    }]
}

/// Full plasticity takes a yield stress of every material; told where some state one.
fn missing_yield(domain: &Domain, materials: &[Material]) -> Option<Note> {
    let used = || domain.piece_materials.iter().map(|&m| &materials[m]);
    let missing = used().find(|m| m.yield_stress.is_none())?;
    used().any(|m| m.yield_stress.is_some()).then(|| Note {
        kind: "plasticity-not-given",
        text: format!(
            "Plastic moduli and fully plastic forces are not given: {:?} states no yield stress.",
            missing.name
        ),
        at: None,
    })
}

fn corner_note(corner: &SingularCorner) -> Note {
    const LEFT_OUT: &str = "the calculated shear stress grows there without limit, so points close to \
         it (a tenth of the wall, unless another share is asked for) are left out of the extremes.";
    let degrees = corner.interior_angle.to_degrees();
    let (kind, text) = if corner.mixed {
        (
            "material-corner",
            format!("Pieces of different stiffness meet at an angle: {LEFT_OUT}"),
        )
    } else if degrees > 359.5 {
        (
            "slit-end",
            format!(
                "End of a slit between pieces, the root of a seam: {LEFT_OUT} Fatigue and fracture \
                 there are not judged."
            ),
        )
    } else {
        (
            "sharp-corner",
            format!(
                "Sharp re-entrant corner of {degrees:.0}°: {LEFT_OUT} Give the corner its real radius \
                 with `round` to obtain the stress in it.",
            ),
        )
    };
    Note {
        kind,
        text,
        at: Some(corner.at),
    }
}

/// Distance from a sharp re-entrant corner within which stresses are not quoted: a tenth of the wall.
#[must_use]
pub fn exclusion_radius(corner: &SingularCorner) -> f64 {
    0.1 * corner.wall
}

fn not_reached(levels: &[Level], settings: &Settings, rounding: bool) -> Note {
    let last = levels.last();
    let reason = if rounding {
        "Rounding in double precision is what is left of it: a finer mesh would not help."
            .to_owned()
    } else {
        format!(
            "The limit of {} unknowns stopped the refinement; a larger --max-unknowns makes the bounds \
             narrower.",
            settings.max_unknowns
        )
    };
    Note {
        kind: "tolerance-not-reached",
        text: format!(
            "The tolerance of {:e} was not reached with {} unknowns: {} stands at {:.1e}. {reason} The \
             bounds given are true all the same.",
            settings.tolerance,
            last.map_or(0, |l| l.unknowns),
            last.map_or("", |l| l.worst.key()),
            last.map_or(0.0, |l| l.worst_error),
        ),
        at: None,
    }
}

/// Whether the gaps of every figure outside the tolerance are well within it: what is left is rounding.
fn limited_by_rounding(aims: &[Aim], result: &LevelResult, tolerance: f64) -> bool {
    let gaps = result.total.gaps();
    aims.iter().filter(|a| a.error > tolerance).all(|a| {
        let share: f64 = a.weights.iter().zip(gaps).map(|(w, g)| w * g).sum();
        share < GAP_SHARE * tolerance
    })
}

fn scaled_moments(m: &AreaMoments, frame: &Frame) -> AreaMoments {
    let s = frame.scale;
    AreaMoments {
        area: m.area / (s * s),
        centroid: Point::default(),
        xx: m.xx / s.powi(4),
        yy: m.yy / s.powi(4),
        xy: m.xy / s.powi(4),
        third_y: m.third_y / s.powi(5),
        third_x: m.third_x / s.powi(5),
        extent: m.extent.map(|e| e / s),
        reach: m.reach / s,
    }
}

/// The first mesh is graded to the singular corners, whose exponent λ is known: the energy within r
/// is like `r^(2λ)`, and what the smallest triangles hold must be below the tolerance.
fn grade(mesh: &Mesh, corners: &[SingularCorner], tolerance: f64) -> Mesh {
    let targets: Vec<(u32, f64)> = corners
        .iter()
        .map(|c| {
            let ratio = (10.0 * tolerance).powf(0.5 / c.exponent).clamp(1e-6, 0.5);
            (c.point, c.wall * ratio)
        })
        .collect();
    grade_to(mesh, &targets)
}

/// The figures that the loop drives, with their scales: the value for the torsion constant, the shear
/// areas and the warping constant (at least a thousandth of J times the polar radius squared: below
/// that warping plays no part in any member), the polar radius for centres.
fn aims(
    enclosures: &Enclosures,
    shear: &ShearProperties,
    m: &AreaMoments,
    factor: f64,
    eigenvalue: f64,
) -> Vec<Aim> {
    let weights = enclosures.gap_weights(m, factor, eigenvalue, shear.shear_area.map(|a| a.value));
    let polar = (m.xx + m.yy) / m.area;
    let radius = polar_radius(shear, polar).value;
    let floor = 1e-3 * shear.torsion.value * polar;
    let list: [(Quantity, Figure, f64); 8] = [
        (
            Quantity::TorsionConstant,
            shear.torsion,
            shear.torsion.value,
        ),
        (
            Quantity::WarpingConstant,
            shear.warping,
            shear.warping.value.max(floor),
        ),
        (Quantity::ShearCentreX, shear.centre[0], radius),
        (Quantity::ShearCentreY, shear.centre[1], radius),
        (Quantity::FlexureCentreX, shear.flexure_centre[0], radius),
        (Quantity::FlexureCentreY, shear.flexure_centre[1], radius),
        (
            Quantity::ShearAreaX,
            shear.shear_area[0],
            shear.shear_area[0].value,
        ),
        (
            Quantity::ShearAreaY,
            shear.shear_area[1],
            shear.shear_area[1].value,
        ),
    ];
    list.into_iter()
        .zip(weights)
        .map(|((quantity, figure, scale), row)| Aim {
            quantity,
            error: figure.half_width() / scale.abs(),
            weights: row.map(|w| w / scale.abs()),
        })
        .collect()
}

fn polar_radius(shear: &ShearProperties, polar: f64) -> Figure {
    let [x, y] = shear.centre;
    Figure::exact(polar, polar)
        .plus(x.squared())
        .plus(y.squared())
        .root()
}

/// Refines towards the tolerance: each triangle's share of the errors that are still too large says
/// how often it is bisected, so that the shares become equal and their sum the tolerance. `None` if
/// that would pass the limit of unknowns, or nothing is left to refine.
fn refine(
    mesh: &Mesh,
    result: &LevelResult,
    aims: &[Aim],
    order: usize,
    settings: &Settings,
) -> Option<(Mesh, f64)> {
    let start = Instant::now();
    let mut combined = [0.0; COUNT];
    for aim in aims.iter().filter(|a| a.error > settings.tolerance) {
        for (c, w) in combined.iter_mut().zip(aim.weights) {
            *c += w / settings.tolerance;
        }
    }
    let shares: Vec<f64> = result
        .local_gaps()
        .iter()
        .map(|g| g.iter().zip(combined).map(|(g, w)| g * w).sum())
        .collect();
    // A bisection of a smooth field's triangle leaves each child 2^-(p+1) of the share.
    let child = 0.5_f64.powi(order as i32 + 1);
    let bisections = |share: f64, target: f64| {
        let (mut n, mut s) = (0u8, share);
        while s > target && n < MOST_BISECTIONS {
            s *= child;
            n += 1;
        }
        n
    };
    // The target share for which the children's shares sum to half the tolerance.
    let predicted = |target: f64| -> (f64, f64) {
        shares.iter().fold((0.0, 0.0), |(sum, count), &s| {
            let n = i32::from(bisections(s, target));
            (sum + s * (2.0 * child).powi(n), count + 2.0_f64.powi(n))
        })
    };
    let most = shares.iter().fold(0.0_f64, |m, &s| m.max(s));
    let count = shares.len() as f64;
    if most <= 0.0 {
        return None;
    }
    let mut target = most;
    for _ in 0..200 {
        let (sum, predicted) = predicted(target);
        if sum <= 0.5 && predicted >= LEAST_GROWTH * count || predicted > GROWTH * count {
            break;
        }
        target *= 0.7;
    }
    let mut wanted: Vec<u8> = shares.iter().map(|&s| bisections(s, target)).collect();
    if wanted.iter().all(|&n| n == 0) {
        // Every share is small yet the sum is too large: refine all.
        wanted.fill(1);
    }
    let mut finer: Option<Mesh> = None;
    while wanted.iter().any(|&n| n > 0) {
        let old = finer.as_ref().unwrap_or(mesh);
        let marked: Vec<bool> = wanted.iter().map(|&n| n > 0).collect();
        let refined = bisect(old, &marked);
        wanted = refined
            .parent
            .iter()
            .map(|&p| wanted[p as usize].saturating_sub(1))
            .collect();
        finer = Some(refined.mesh);
    }
    let finer = finer?;
    (unknowns(&finer, order) <= settings.max_unknowns)
        .then(|| (finer, start.elapsed().as_secs_f64()))
}

/// Most bisections of one triangle in one turn.
const MOST_BISECTIONS: u8 = 4;
/// Largest predicted growth of the number of triangles in one turn.
const GROWTH: f64 = 3.0;
/// Least predicted growth: a turn costs a factorisation, so it must be worth it.
const LEAST_GROWTH: f64 = 1.1;
/// Below this part of the tolerance the gaps are not what keeps a figure outside of it.
const GAP_SHARE: f64 = 0.5;

/// GJ and EC_w from J and C_w, which refer to the reference material.
fn stiffnesses(found: &[(Quantity, Figure)], reference: &Material) -> Vec<(Quantity, Figure)> {
    found
        .iter()
        .filter_map(|&(quantity, figure)| match quantity {
            Quantity::TorsionConstant => {
                Some((Quantity::TorsionStiffness, figure.scaled(reference.shear)))
            }
            Quantity::WarpingConstant => {
                Some((Quantity::WarpingStiffness, figure.scaled(reference.young)))
            }
            _ => None,
        })
        .collect()
}

/// The shear properties in the units and axes of the domain; `shear_area`: the area weighted by G, to
/// which shear coefficients refer.
fn outward(
    shear: &ShearProperties,
    m: &AreaMoments,
    scaled: &AreaMoments,
    shear_area: f64,
    frame: &Frame,
) -> Vec<(Quantity, Figure)> {
    let s = frame.scale;
    let place = |f: Figure, origin: f64| {
        let f = f.snapped().scaled(s);
        f.plus(Figure::exact(origin, m.reach))
    };
    let polar = (scaled.xx + scaled.yy) / scaled.area;
    let c = m.centroid;
    let [sx, sy] = shear.centre;
    let wagner = |third: f64, second: f64, centre: Figure| {
        let size = polar.sqrt();
        Figure::exact(third / second, size)
            .minus(centre.snapped().scaled(2.0))
            .snapped()
            .scaled(s)
    };
    let area = Figure::exact(shear_area, shear_area);
    vec![
        (Quantity::TorsionConstant, shear.torsion.scaled(s.powi(4))),
        (
            Quantity::WarpingConstant,
            shear.warping.snapped().scaled(s.powi(6)),
        ),
        (Quantity::ShearCentreX, place(sx, c.x)),
        (Quantity::ShearCentreY, place(sy, c.y)),
        (
            Quantity::FlexureCentreX,
            place(shear.flexure_centre[0], c.x),
        ),
        (
            Quantity::FlexureCentreY,
            place(shear.flexure_centre[1], c.y),
        ),
        (Quantity::ShearAreaX, shear.shear_area[0].scaled(s * s)),
        (Quantity::ShearAreaY, shear.shear_area[1].scaled(s * s)),
        (Quantity::ShearCoefficientX, shear.shear_area[0].over(area)),
        (Quantity::ShearCoefficientY, shear.shear_area[1].over(area)),
        (Quantity::PolarRadius, polar_radius(shear, polar).scaled(s)),
        (
            Quantity::MonosymmetryX,
            wagner(scaled.third_y, scaled.xx, sy),
        ),
        (
            Quantity::MonosymmetryY,
            wagner(scaled.third_x, scaled.yy, sx),
        ),
    ]
}
