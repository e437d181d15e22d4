//! What the readers of all formats hand on: paths of lines, arcs and curves on layers.

use std::collections::BTreeMap;

use kurbo::Affine;
use sectile_mesh::outline::side::Side;
use sectile_mesh::tree::{EMPTY, Extent, hull};
use sectile_mesh::{Point, Vector};

use super::curve::{Curve, elliptic};

/// Sides that a drawing may have after its blocks are expanded: more is no section.
pub const MOST_SIDES: usize = 500_000;

/// One stroke of a path.
#[derive(Clone, Debug, PartialEq)]
pub enum Shape {
    /// A line, an arc of a circle, or a whole circle (ends coincide, sweep 2π).
    Side(Side),
    /// Anything else; it becomes arcs.
    Curve(Curve),
}

/// Shapes that follow one another, as one entity of the drawing.
#[derive(Clone, Debug, PartialEq)]
pub struct Path {
    /// Index into the drawing's layers.
    pub layer: usize,
    /// Line of the file, from 1.
    pub line: usize,
    /// Whether the entity itself says that it is closed.
    pub closed: bool,
    /// Its shapes in order.
    pub shapes: Vec<Shape>,
}

/// A drawing that has been read.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Drawing {
    /// Everything that can be traced.
    pub paths: Vec<Path>,
    /// Names of the layers.
    pub layers: Vec<String>,
    /// The unit of length of the coordinates.
    pub unit: &'static str,
    /// Where the unit is from, as the end of "Lengths are in mm, …".
    pub unit_from: String,
    /// What cannot be traced, by kind.
    pub ignored: BTreeMap<String, usize>,
    /// Sentences for the user.
    pub notes: Vec<String>,
    indices: BTreeMap<String, usize>,
}

impl Drawing {
    /// An empty drawing in the unit; `unit_from` ends the sentence "Lengths are in mm, …".
    #[must_use]
    pub fn new(unit: &'static str, unit_from: String) -> Self {
        Self {
            unit,
            unit_from,
            ..Self::default()
        }
    }

    /// An empty drawing of a format without units: in the `stated` one, else in mm, for the reason given.
    #[must_use]
    pub fn stating_none(stated: Option<&'static str>, assumed: &str) -> Self {
        match stated {
            Some(unit) => Self::new(unit, "as --units says".to_owned()),
            None => Self::new("mm", assumed.to_owned()),
        }
    }

    /// The index of the layer `name`, which is added if it is new.
    pub fn layer(&mut self, name: &str) -> usize {
        if let Some(&index) = self.indices.get(name) {
            return index;
        }
        let index = self.layers.len();
        self.layers.push(name.to_owned());
        self.indices.insert(name.to_owned(), index);
        index
    }

    /// Counts one thing that is not traced.
    pub fn ignore(&mut self, kind: &str) {
        *self.ignored.entry(kind.to_owned()).or_default() += 1;
    }

    /// The layers that have paths, in the order of their names.
    #[must_use]
    pub fn used_layers(&self) -> Vec<usize> {
        let mut used = vec![false; self.layers.len()];
        for path in &self.paths {
            used[path.layer] = true;
        }
        self.indices
            .values()
            .copied()
            .filter(|&layer| used[layer])
            .collect()
    }

    /// The box about all paths, about their control points where they are curves.
    #[must_use]
    pub fn extent(&self) -> Extent {
        let shapes = self.paths.iter().flat_map(|path| &path.shapes);
        shapes.fold(EMPTY, |extent, shape| hull(extent, shape.extent()))
    }
}

impl Path {
    /// The closed polygon through `corners`; a last corner that repeats the first is left out.
    #[must_use]
    pub fn polygon(layer: usize, line: usize, corners: &[Point]) -> Self {
        let mut path = Self::polyline(layer, line, corners);
        if let (Some(first), Some(last)) = (corners.first(), corners.last())
            && first != last
        {
            path.shapes.push(straight(*last, *first));
        }
        path.closed = true;
        path
    }

    /// The lines from corner to corner.
    #[must_use]
    pub fn polyline(layer: usize, line: usize, corners: &[Point]) -> Self {
        let pairs = corners.windows(2).filter(|pair| pair[0] != pair[1]);
        Self {
            layer,
            line,
            closed: false,
            shapes: pairs.map(|pair| straight(pair[0], pair[1])).collect(),
        }
    }

    /// The path as `map` moves, turns, scales and mirrors it.
    #[must_use]
    pub fn mapped(&self, map: Affine) -> Self {
        Self {
            shapes: self.shapes.iter().map(|shape| shape.mapped(map)).collect(),
            ..*self
        }
    }
}

impl Shape {
    /// The shape as `map` moves, turns, scales and mirrors it; an arc whose circle does not stay one
    /// becomes a curve.
    #[must_use]
    pub fn mapped(&self, map: Affine) -> Self {
        if map == Affine::IDENTITY {
            return self.clone();
        }
        match self {
            Self::Curve(curve) => curve.mapped(map),
            Self::Side(side) => {
                let ends = (point(map, side.from), point(map, side.to));
                let Some(arc) = side.arc else {
                    return straight(ends.0, ends.1);
                };
                let u = side.from - arc.circle.centre;
                let v = u.perpendicular() * arc.sweep.signum();
                elliptic(
                    point(map, arc.circle.centre),
                    vector(map, u),
                    vector(map, v),
                    (0.0, arc.sweep.abs()),
                    Some(ends),
                )
            }
        }
    }

    fn extent(&self) -> Extent {
        match self {
            Self::Curve(curve) => curve
                .control_points()
                .iter()
                .fold(EMPTY, |e, p| hull(e, [p.x, p.x, p.y, p.y])),
            Self::Side(side) => side_extent(side),
        }
    }
}

/// A straight side.
#[must_use]
pub fn straight(from: Point, to: Point) -> Shape {
    Shape::Side(Side {
        from,
        to,
        arc: None,
        corner: 0,
    })
}

/// The box about a side.
#[must_use]
pub fn side_extent(side: &Side) -> Extent {
    let of = |p: Point| [p.x, p.x, p.y, p.y];
    let ends = hull(of(side.from), of(side.to));
    let Some(arc) = side.arc else { return ends };
    let start = (side.from - arc.circle.centre).angle();
    let (low, high) = (start.min(start + arc.sweep), start.max(start + arc.sweep));
    let quarter = std::f64::consts::FRAC_PI_2;
    let first = (low / quarter).ceil() as i64;
    let last = (high / quarter).floor() as i64;
    (first..=last.min(first + 4))
        .map(|k| arc.circle.centre + Vector::at_angle(k as f64 * quarter) * arc.circle.radius)
        .fold(ends, |extent, p| hull(extent, of(p)))
}

/// The image of a point.
#[must_use]
pub fn point(map: Affine, p: Point) -> Point {
    let q = map * kurbo::Point::new(p.x, p.y);
    Point::new(q.x, q.y)
}

/// The image of a vector.
#[must_use]
pub fn vector(map: Affine, v: Vector) -> Vector {
    let [a, b, c, d, ..] = map.as_coeffs();
    Vector::new(a * v.x + c * v.y, b * v.x + d * v.y)
}
