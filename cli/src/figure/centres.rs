//! The centres and principal axes of a section: what is known of each, and its block of coordinates
//! beside the drawing.

use sectile_mesh::Point;
use sectile_solver::figure::Figure;
use sectile_solver::quantity::Quantity;

use super::marks::Mark;
use super::page::{FAINT, INK, Label, Page, Pen};
use super::text::{self, LABEL, SMALL};
use crate::section::Units;
use crate::write::{digits, units as unit_names};

/// Width of a block of coordinates, mm.
pub const BLOCK: f64 = 50.0;

/// A marked centre.
pub struct Centre {
    /// Its mark.
    pub mark: Mark,
    /// Its letter beside the mark.
    pub letter: &'static str,
    /// Its name.
    pub name: &'static str,
    /// What sets it apart.
    pub remark: &'static str,
    /// Its x.
    pub x: (Quantity, Figure),
    /// Its y.
    pub y: (Quantity, Figure),
}

impl Centre {
    /// Where it is, section axes.
    pub fn at(&self) -> Point {
        Point::new(self.x.1.value, self.y.1.value)
    }
}

/// The centres that have both coordinates.
pub fn centres(get: &dyn Fn(Quantity) -> Option<Figure>) -> Vec<Centre> {
    use Quantity as Q;
    [
        (
            Mark::Centroid,
            "C",
            "centroid",
            "",
            Q::CentroidX,
            Q::CentroidY,
        ),
        (
            Mark::ShearCentre,
            "S",
            "shear centre",
            "independent of Poisson's ratio; loads refer to it",
            Q::ShearCentreX,
            Q::ShearCentreY,
        ),
        (
            Mark::FlexureCentre,
            "F",
            "flexure centre",
            "no mean rotation under flexure; depends on Poisson's ratio",
            Q::FlexureCentreX,
            Q::FlexureCentreY,
        ),
    ]
    .into_iter()
    .filter_map(|(mark, letter, name, remark, x, y)| {
        Some(Centre {
            mark,
            letter,
            name,
            remark,
            x: (x, get(x)?),
            y: (y, get(y)?),
        })
    })
    .collect()
}

/// What is known of the principal axes.
pub enum Principal {
    /// The angle of axis 1, degrees.
    Axes(Figure),
    /// Both principal moments are equal.
    Any,
}

/// The principal axes, where their angle is known.
pub fn principal(get: &dyn Fn(Quantity) -> Option<Figure>) -> Option<Principal> {
    let angle = get(Quantity::PrincipalAngle)?;
    let (a, b) = (
        get(Quantity::PrincipalMoment1)?,
        get(Quantity::PrincipalMoment2)?,
    );
    // Equal within rounding: the angle says nothing.
    let equal = (a.value - b.value).abs() <= 1e-9 * a.value.abs() + a.half_width() + b.half_width();
    Some(if equal {
        Principal::Any
    } else {
        Principal::Axes(angle)
    })
}

/// A figure with its ±; exact ones without trailing zeros.
fn printed(figure: &Figure) -> String {
    let mut text = digits::print(figure);
    if text.half_width.is_none() && text.value.contains('.') {
        text.value = text
            .value
            .trim_end_matches('0')
            .trim_end_matches('.')
            .into();
    }
    digits::minus_sign(&text.line())
}

/// A mark, a heading and lines below it.
pub struct Block {
    mark: Option<Mark>,
    heading: String,
    remark: String,
    lines: Vec<String>,
}

/// The block of a centre.
pub fn centre_block(centre: &Centre, units: &Units) -> Block {
    let line = |(q, f): &(Quantity, Figure)| {
        let text = printed(f);
        let unit = unit_names::pretty(q.dimension(), units);
        format!("{} = {text} {unit}", q.symbol())
    };
    Block {
        mark: Some(centre.mark),
        heading: format!("{}  {}", centre.letter, centre.name),
        remark: centre.remark.into(),
        lines: vec![line(&centre.x), line(&centre.y)],
    }
}

/// The block of the principal axes.
pub fn principal_block(principal: &Principal) -> Block {
    Block {
        mark: None,
        heading: "1, 2  principal axes".into(),
        remark: String::new(),
        lines: vec![match principal {
            Principal::Axes(angle) => format!("axis 1 at α = {}° from x", printed(angle)),
            Principal::Any => "every axis through C is one".into(),
        }],
    }
}

/// Draws a block with its upper left corner at `at`, within `width`; returns its lower edge.
pub fn draw_block(page: &mut Page, at: Point, block: &Block, width: f64) -> f64 {
    let indent = 6.0;
    let limit = width - indent;
    let mut y = at.y + 0.78 * LABEL;
    match block.mark {
        Some(mark) => mark.draw(page, Point::new(at.x + 2.4, y - 0.36 * LABEL)),
        None => page.line(
            Point::new(at.x, y - 0.36 * LABEL),
            Point::new(at.x + 5.0, y - 0.36 * LABEL),
            Pen::line(INK, 0.15).dashed("2.2 0.5 0.4 0.5"),
        ),
    }
    let mut label = Label::new(&block.heading);
    label.bold = true;
    page.text(Point::new(at.x + indent, y), &label);
    for line in text::wrap(&block.remark, SMALL, limit) {
        y += 1.2 * SMALL;
        let mut label = Label::small(&line);
        label.colour = FAINT;
        page.text(Point::new(at.x + indent, y), &label);
    }
    for line in &block.lines {
        y += 1.3 * LABEL;
        let mut label = Label::new(line);
        label.size *= (limit / label.width()).min(1.0);
        page.text(Point::new(at.x + indent, y), &label);
    }
    y + 0.26 * LABEL
}
