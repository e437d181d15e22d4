//! Drawings as scalable vector graphics.

mod path;
mod shape;
mod style;

use std::collections::BTreeMap;
use std::str::FromStr;

use kurbo::Affine;
use roxmltree::{Document, Node, ParsingOptions};
use sectile_mesh::outline::side::Side;
use svgtypes::{AspectRatio, Length, LengthUnit, Transform, ViewBox};

use super::Options;
use super::drawing::{Drawing, MOST_SIDES, Path, Shape, point};
use crate::read::fault::Fault;
use path::Run;
use style::Style;

const XLINK: &str = "http://www.w3.org/1999/xlink";
/// The drawing program that writes layers into SVG uses this name space for them.
const LAYERS: &str = "http://www.inkscape.org/namespaces/inkscape";
/// Elements that are used by others or describe, and draw nothing in their place.
const SILENT: &[&str] = &[
    "defs",
    "symbol",
    "clipPath",
    "mask",
    "pattern",
    "marker",
    "linearGradient",
    "radialGradient",
    "filter",
    "metadata",
    "title",
    "desc",
    "style",
    "script",
    "namedview",
];
/// `use` within `use`.
const DEEPEST: usize = 16;
/// Faults of one file that are told.
const MOST_FAULTS: usize = 20;

/// Reads a drawing.
///
/// # Errors
/// Every element that is faulty; or the text is no SVG.
pub fn read(text: &str, options: &Options) -> Result<Drawing, Vec<Fault>> {
    let parsing = ParsingOptions {
        // Many programs write the document type of SVG 1.1.
        allow_dtd: true,
        nodes_limit: 8_000_000,
        ..ParsingOptions::default()
    };
    let document = Document::parse_with_options(text, parsing).map_err(|error| {
        vec![Fault::whole(
            format!("this is no sound XML: {error}"),
            "export the drawing again",
        )]
    })?;
    let root = document.root_element();
    if root.tag_name().name() != "svg" {
        return Err(vec![Fault::whole(
            format!(
                "the file's outermost element is <{}>, not <svg>",
                root.tag_name().name()
            ),
            "name an SVG drawing",
        )]);
    }
    let page = page(root, options).map_err(|what| {
        vec![Fault::whole(
            format!("the <svg> element {what}"),
            "mend it, or export the drawing again",
        )]
    })?;
    let ids = document
        .descendants()
        .filter_map(|node| Some((node.attribute("id")?, node)))
        .collect();
    let mut reader = Reader {
        drawing: Drawing::new(page.unit, page.unit_from.clone()),
        faults: Vec::new(),
        ids,
        page: page.frame,
        map: page.map,
        sides: 0,
        visited: 0,
    };
    reader.walk(root);
    reader.finish()
}

/// How user units become lengths.
struct Page {
    map: Affine,
    unit: &'static str,
    unit_from: String,
    /// The page in user units: x, y, width, height.
    frame: Option<[f64; 4]>,
}

fn page(root: Node<'_, '_>, options: &Options) -> Result<Page, String> {
    let stated = |name: &str| -> Result<Option<Length>, String> {
        match root.attribute(name) {
            None => Ok(None),
            Some(text) => Length::from_str(text.trim())
                .map(Some)
                .map_err(|error| format!("has {name}=\"{text}\", which is no length: {error}")),
        }
    };
    let (width, height) = (stated("width")?, stated("height")?);
    let view = match root.attribute("viewBox") {
        None => None,
        Some(text) => {
            let view = ViewBox::from_str(text)
                .map_err(|error| format!("has viewBox=\"{text}\": {error}"))?;
            Some([view.x, view.y, view.w, view.h])
        }
    };
    let physical = |length: Option<Length>| {
        use LengthUnit::{Cm, In, Mm, Pc, Pt};
        let length = length.filter(|l| matches!(l.unit, Mm | Cm | In | Pt | Pc))?;
        Some(shape::pixels(length)? * 25.4 / 96.0).filter(|mm| *mm > 0.0 && mm.is_finite())
    };
    let (w, h) = (physical(width), physical(height));
    let frame = view.or_else(|| {
        let (w, h) = (shape::pixels(width?)?, shape::pixels(height?)?);
        Some([0.0, 0.0, w, h])
    });
    let stretched = root
        .attribute("preserveAspectRatio")
        .and_then(|text| AspectRatio::from_str(text).ok())
        .is_some_and(|ratio| ratio.align == svgtypes::Align::None);
    // Millimetres a user unit along x and y, if the page has a size.
    let scale = match (view, w, h) {
        (Some([_, _, vw, vh]), Some(w), Some(h)) if stretched => Some((w / vw, h / vh)),
        (Some([_, _, vw, vh]), Some(w), Some(h)) => {
            Some(((w / vw).min(h / vh), (w / vw).min(h / vh)))
        }
        (Some([_, _, vw, _]), Some(w), None) => Some((w / vw, w / vw)),
        (Some([_, _, _, vh]), None, Some(h)) => Some((h / vh, h / vh)),
        (None, Some(_), _) | (None, _, Some(_)) => Some((25.4 / 96.0, 25.4 / 96.0)),
        _ => None,
    };
    let (scale, unit, unit_from) = match (options.units, scale) {
        (Some(unit), _) => ((1.0, 1.0), unit, "as --units says of user units".to_owned()),
        (None, Some(scale)) => (scale, "mm", "from the page's width".to_owned()),
        (None, None) => (
            (1.0, 1.0),
            "mm",
            "which is assumed: the page has no size in mm or in (--units, --scale)".to_owned(),
        ),
    };
    // y is down in SVG and up here; the page's lower left corner becomes the origin.
    let lower = frame.map_or((0.0, 0.0), |[x, y, _, h]| (x, y + h));
    let map = Affine::scale(options.scale)
        * Affine::scale_non_uniform(scale.0, -scale.1)
        * Affine::translate((-lower.0, -lower.1));
    if !map.is_finite() {
        return Err("has a size that is no number".to_owned());
    }
    Ok(Page {
        map,
        unit,
        unit_from,
        frame,
    })
}

/// An element that waits to be drawn.
#[derive(Clone)]
struct Waiting<'a, 'i> {
    node: Node<'a, 'i>,
    map: Affine,
    style: Style,
    layer: usize,
    uses: usize,
}

struct Reader<'a, 'i> {
    drawing: Drawing,
    faults: Vec<Fault>,
    ids: BTreeMap<&'a str, Node<'a, 'i>>,
    page: Option<[f64; 4]>,
    map: Affine,
    sides: usize,
    visited: usize,
}

impl<'a, 'i> Reader<'a, 'i> {
    fn walk(&mut self, root: Node<'a, 'i>) {
        let layer = self.drawing.layer("");
        let mut waiting = vec![Waiting {
            node: root,
            map: self.map,
            style: Style::START,
            layer,
            uses: 0,
        }];
        while let Some(next) = waiting.pop() {
            self.visited += 1;
            if self.sides > MOST_SIDES || self.visited > 8 * MOST_SIDES {
                self.faults.push(Fault::whole(
                    format!("the drawing has more than {MOST_SIDES} sides once all uses are drawn"),
                    "export the section by itself",
                ));
                return;
            }
            if self.faults.len() >= MOST_FAULTS {
                return;
            }
            self.element(next, &mut waiting);
        }
    }

    fn finish(self) -> Result<Drawing, Vec<Fault>> {
        if self.faults.is_empty() {
            Ok(self.drawing)
        } else {
            Err(self.faults)
        }
    }

    fn fault(&mut self, node: Node<'a, 'i>, what: &str) {
        let line = self.line(node);
        self.faults.push(Fault::whole(
            format!("the <{}> in line {line} {what}", node.tag_name().name()),
            "mend it, or export the drawing again",
        ));
    }

    fn line(&self, node: Node<'a, 'i>) -> usize {
        node.document().text_pos_at(node.range().start).row as usize
    }

    fn element(&mut self, here: Waiting<'a, 'i>, waiting: &mut Vec<Waiting<'a, 'i>>) {
        let node = here.node;
        let name = node.tag_name().name();
        if !node.is_element() || SILENT.contains(&name) {
            return;
        }
        let Some(style) = here.style.of(node) else {
            return;
        };
        let map = match node.attribute("transform").map(Transform::from_str) {
            None => here.map,
            Some(Ok(t)) => here.map * Affine::new([t.a, t.b, t.c, t.d, t.e, t.f]),
            Some(Err(error)) => {
                self.fault(node, &format!("has a faulty transform: {error}"));
                return;
            }
        };
        let within = Waiting {
            map,
            style,
            ..here.clone()
        };
        match name {
            "svg" | "g" | "a" | "switch" => {
                if name == "svg"
                    && node.parent_element().is_some()
                    && node.attribute("viewBox").is_some()
                {
                    self.fault(node, "is a page within a page");
                    return;
                }
                let layer = match node.attribute((LAYERS, "groupmode")) {
                    Some("layer") => {
                        let label = node.attribute((LAYERS, "label"));
                        self.drawing
                            .layer(label.or(node.attribute("id")).unwrap_or(""))
                    }
                    _ => here.layer,
                };
                // The last one waits longest: elements come in the order of the file.
                let children: Vec<_> = node.children().filter(Node::is_element).collect();
                waiting.extend(children.into_iter().rev().map(|node| Waiting {
                    node,
                    layer,
                    ..within.clone()
                }));
            }
            "use" => self.use_of(node, within, waiting),
            _ => match shape::of(node) {
                Ok(Some(runs)) => {
                    let seen = style.visible && (style.fill || style.stroke);
                    self.runs(&within, runs, seen);
                }
                Ok(None) => self.drawing.ignore(&format!("<{}>", shown(name))),
                Err(what) => self.fault(node, &what),
            },
        }
    }

    fn use_of(
        &mut self,
        node: Node<'a, 'i>,
        within: Waiting<'a, 'i>,
        waiting: &mut Vec<Waiting<'a, 'i>>,
    ) {
        let href = node
            .attribute("href")
            .or_else(|| node.attribute((XLINK, "href")));
        let target = href
            .and_then(|href| href.trim().strip_prefix('#'))
            .and_then(|id| self.ids.get(id).copied());
        let Some(target) = target else {
            self.fault(node, "refers to nothing in this file");
            return;
        };
        if within.uses == DEEPEST {
            self.fault(node, "refers to itself, or to uses within uses too deep");
            return;
        }
        if target.tag_name().name() == "symbol" {
            self.fault(node, "refers to a symbol; ungroup it in the drawing");
            return;
        }
        let (x, y) = match (shape::length(node, "x"), shape::length(node, "y")) {
            (Ok(x), Ok(y)) => (x.unwrap_or(0.0), y.unwrap_or(0.0)),
            (Err(what), _) | (_, Err(what)) => {
                self.fault(node, &what);
                return;
            }
        };
        waiting.push(Waiting {
            node: target,
            map: within.map * Affine::translate((x, y)),
            uses: within.uses + 1,
            ..within
        });
    }

    fn runs(&mut self, here: &Waiting<'a, 'i>, runs: Vec<Run>, seen: bool) {
        if !seen {
            if !runs.is_empty() {
                self.drawing.ignore("shape that is not seen");
            }
            return;
        }
        let line = self.line(here.node);
        let filled_only = here.style.fill && !here.style.stroke;
        for run in runs {
            self.sides += run.shapes.len();
            let mut path = Path {
                layer: here.layer,
                line,
                closed: run.closed,
                shapes: run
                    .shapes
                    .iter()
                    .map(|shape| shape.mapped(here.map))
                    .collect(),
            };
            if filled_only && self.is_page(&path) {
                self.drawing.ignore("background of the page");
                continue;
            }
            // What is only filled is seen as closed.
            if filled_only && !path.closed && path.shapes.len() > 1 {
                close(&mut path);
            }
            self.drawing.paths.push(path);
        }
    }

    /// Whether the path is a rectangle over the whole page.
    fn is_page(&self, path: &Path) -> bool {
        let Some([x, y, w, h]) = self.page else {
            return false;
        };
        let corners: Option<Vec<_>> = path
            .shapes
            .iter()
            .map(|shape| match shape {
                Shape::Side(side @ Side { arc: None, .. }) => Some(side.from),
                _ => None,
            })
            .collect();
        let Some(corners) = corners.filter(|c| (3..=4).contains(&c.len())) else {
            return false;
        };
        let at = |x: f64, y: f64| point(self.map, sectile_mesh::Point::new(x, y));
        let page = [at(x, y), at(x + w, y), at(x + w, y + h), at(x, y + h)];
        let near = 1e-4 * page[0].distance(page[2]);
        corners.len() == 4
            && page
                .iter()
                .all(|p| corners.iter().any(|corner| corner.distance(*p) <= near))
    }
}

fn close(path: &mut Path) {
    let ends = |shape: &Shape| match shape {
        Shape::Side(side) => (side.from, side.to),
        Shape::Curve(curve) => {
            let stretches = curve.stretches();
            let first = stretches.first().map_or(0.0, |s| s.0);
            let last = stretches.last().map_or(1.0, |s| s.1);
            (curve.at(first), curve.at(last))
        }
    };
    if let (Some(first), Some(last)) = (path.shapes.first(), path.shapes.last()) {
        let (from, to) = (ends(last).1, ends(first).0);
        if from != to {
            path.shapes.push(super::drawing::straight(from, to));
        }
        path.closed = true;
    }
}

fn shown(name: &str) -> String {
    name.chars().take(30).collect()
}
