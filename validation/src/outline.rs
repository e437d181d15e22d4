//! Loops as the case files write them (the form of the section file, and ellipses) and the pieces
//! that they make.

use std::f64::consts::TAU;

use sectile_mesh::outline::corner::{Corner, ring_from_corners};
use sectile_mesh::outline::piece::{Outline, Piece, Ring};
use sectile_mesh::outline::side::{Arc, Circle, Side};
use sectile_mesh::{Point, Vector};
use serde::Deserialize;

use crate::ellipse::{self, Ellipse};

/// A closed loop.
#[derive(Clone, Debug, Deserialize)]
#[serde(untagged)]
pub enum Loop {
    /// Corners, closed by themselves.
    Corners(Vec<CornerText>),
    /// A full circle.
    Circle {
        /// The circle.
        circle: CircleText,
    },
    /// A full ellipse.
    Ellipse {
        /// The ellipse.
        ellipse: EllipseText,
    },
}

/// A corner: `[x, y]`, or a table with more.
#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(untagged)]
pub enum CornerText {
    /// A plain corner.
    Plain([f64; 2]),
    /// A rounded corner, or one at which an arc arrives.
    Rich {
        /// Where.
        at: [f64; 2],
        /// Rounding radius.
        round: Option<f64>,
        /// A point on the arc that arrives here.
        via: Option<[f64; 2]>,
    },
}

/// A full circle.
#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct CircleText {
    /// Centre.
    pub at: [f64; 2],
    /// Diameter.
    pub d: f64,
}

/// A full ellipse.
#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct EllipseText {
    /// Centre.
    pub at: [f64; 2],
    /// Semi-axis along x.
    pub a: f64,
    /// Semi-axis along y.
    pub b: f64,
}

fn point(p: [f64; 2]) -> Point {
    Point::new(p[0], p[1])
}

impl Loop {
    /// The ring, and how far it departs from the loop that is meant, as a part of its size.
    ///
    /// # Errors
    /// The faults of the corners.
    pub fn ring(&self) -> Result<(Ring, f64), String> {
        match self {
            Self::Corners(corners) => {
                let corners: Vec<Corner> = corners.iter().map(CornerText::corner).collect();
                let ring = ring_from_corners(&corners).map_err(|faults| {
                    faults
                        .iter()
                        .map(|(i, f)| format!("corner {i}: {f}"))
                        .collect::<Vec<_>>()
                        .join("; ")
                })?;
                Ok((ring, 0.0))
            }
            Self::Circle { circle } => Ok((full_circle(point(circle.at), 0.5 * circle.d), 0.0)),
            Self::Ellipse { ellipse: e } => {
                let e = Ellipse {
                    centre: point(e.at),
                    a: e.a,
                    b: e.b,
                };
                let ring = ellipse::ring(&e);
                let departure = ellipse::departure(&e, &ring);
                Ok((ring, departure))
            }
        }
    }
}

/// The loop through plain corners.
#[must_use]
pub fn polygon(corners: &[[f64; 2]]) -> Loop {
    Loop::Corners(corners.iter().map(|&c| CornerText::Plain(c)).collect())
}

impl CornerText {
    fn corner(&self) -> Corner {
        match *self {
            Self::Plain(at) => Corner {
                at: point(at),
                round: None,
                via: None,
            },
            Self::Rich { at, round, via } => Corner {
                at: point(at),
                round,
                via: via.map(point),
            },
        }
    }
}

fn full_circle(centre: Point, radius: f64) -> Ring {
    let start = centre + Vector::new(radius, 0.0);
    Ring {
        sides: vec![Side {
            from: start,
            to: start,
            arc: Some(Arc {
                circle: Circle { centre, radius },
                sweep: TAU,
            }),
            corner: 0,
        }],
    }
}

/// The piece with this outline and these holes, and the sum of the departures of its loops.
///
/// # Errors
/// The faults of the loops.
pub fn piece(outline: &Loop, holes: &[Loop]) -> Result<(Piece, f64), String> {
    let (outer, mut departure) = outline.ring()?;
    let mut rings = Vec::new();
    for hole in holes {
        let (ring, d) = hole.ring()?;
        rings.push(ring);
        departure += d;
    }
    let piece = Piece {
        name: "body".into(),
        outline: Outline {
            outer,
            holes: rings,
        },
        material: 0,
    };
    Ok((piece, departure))
}
