//! A drawing becomes a section file.
//!
//! ```text
//! bytes ─▶ Drawing (paths of lines, arcs and curves) ─▶ sides ─▶ loops ─▶ pieces ─▶ text
//! ```
//!
//! One file a format reads a drawing; what follows is the same for all of them. Nothing here reads or
//! writes files.

pub mod chain;
pub mod compose;
pub mod csv;
pub mod curve;
pub mod drawing;
pub mod dxf;
pub mod fit;
pub mod format;
pub mod geojson;
pub mod loops;
pub mod nest;
pub mod number;
pub mod open;
pub mod overlap;
pub mod redrawn;
pub mod report;
pub mod svg;
pub mod wkt;

use crate::read::fault::Fault;
use crate::read::file::LARGEST_FILE;
use crate::read::section_from_text;
use drawing::Drawing;
use format::Format;
use loops::Tolerances;
use report::Report;

/// What the user may choose.
#[derive(Clone, Debug)]
pub struct Options {
    /// The layers to trace; empty: all.
    pub layers: Vec<String>,
    /// Loose ends up to this far apart are joined; `None`: a share of the drawing's size. Length, in
    /// the section file's unit.
    pub gap: Option<f64>,
    /// Curves become arcs within this distance; `None`: a share of the drawing's size. Length.
    pub chord: Option<f64>,
    /// Coordinates are multiplied by this first.
    pub scale: f64,
    /// The unit that the drawing's numbers have after that; `None`: the one that the drawing states.
    pub units: Option<&'static str>,
}

impl Default for Options {
    fn default() -> Self {
        Self {
            layers: Vec::new(),
            gap: None,
            chord: None,
            scale: 1.0,
            units: None,
        }
    }
}

/// A section file made from a drawing.
#[derive(Clone, Debug, PartialEq)]
pub struct Traced {
    /// The section file.
    pub text: String,
    /// What was found and done, a sentence a line; the file has them as comments.
    pub remarks: Vec<String>,
}

/// Why a drawing was not traced.
#[derive(Clone, Debug, PartialEq)]
pub struct Refusal {
    /// Every fault found.
    pub faults: Vec<Fault>,
    /// An SVG that shows where outlines stay open.
    pub picture: Option<String>,
}

impl From<Vec<Fault>> for Refusal {
    fn from(faults: Vec<Fault>) -> Self {
        Self {
            faults,
            picture: None,
        }
    }
}

impl From<Fault> for Refusal {
    fn from(fault: Fault) -> Self {
        vec![fault].into()
    }
}

/// Default of [`Options::gap`] over the drawing's size.
const GAP: f64 = 1e-4;
/// Default of [`Options::chord`] over the drawing's size.
const CHORD: f64 = 1e-4;
/// A drawing's smallest size: less cannot be told from a point.
const SMALLEST: f64 = 1e-9;
/// Outlines and holes of one section: reading more back takes more than a gigabyte of memory.
const MOST_LOOPS: usize = 100_000;
/// Farther out than this, products of coordinates lose their digits.
const FARTHEST: f64 = 1e12;

/// Traces the drawing `bytes` of the given format, which messages and the title call `name`.
///
/// # Errors
/// Every fault of the drawing, all at once where they do not hide one another.
pub fn trace(
    name: &str,
    bytes: &[u8],
    format: Format,
    options: &Options,
) -> Result<Traced, Refusal> {
    let mut drawing = format.read(bytes, options)?;
    choose_layers(&mut drawing, &options.layers)?;
    if drawing.paths.is_empty() {
        let mut what = "the drawing has no lines, arcs or curves that can be traced".to_owned();
        if !drawing.ignored.is_empty() {
            what = format!("{what}; not read: {}", report::counted(&drawing.ignored));
        }
        return Err(Fault::whole(
            what,
            "draw the outlines as lines, arcs, polylines, circles, ellipses or splines",
        )
        .into());
    }
    let size = size(&drawing)?;
    let tolerances = Tolerances {
        size,
        gap: length("--gap", options.gap, GAP * size, 0.0, size)?,
        chord: length("--chord", options.chord, CHORD * size, 1e-8 * size, size)?,
    };
    let mut report = Report::new(&drawing, &tolerances);
    let layers = loops::of_drawing(&drawing, &tolerances, &mut report)?;
    let loops: usize = layers.iter().map(|(_, loops)| loops.len()).sum();
    if loops > MOST_LOOPS {
        return Err(Fault::whole(
            format!(
                "the drawing has {loops} closed lines; up to {MOST_LOOPS} are taken as one section"
            ),
            "choose the section's layers with --layer, or export it by itself",
        )
        .into());
    }
    let pieces = nest::pieces(&drawing.layers, layers, size);
    report.pieces(&pieces);
    let traced = compose::section_file(name, format, &drawing, &pieces, &report, size);
    if traced.text.len() as u64 > LARGEST_FILE {
        return Err(Fault::whole(
            format!(
                "the section file would be {} MB; those up to {} MB are read",
                traced.text.len() >> 20,
                LARGEST_FILE >> 20
            ),
            "choose the section's layers with --layer, or allow curves a larger --chord",
        )
        .into());
    }
    let faults = match section_from_text(name, &traced.text) {
        Ok(_) => return Ok(traced),
        Err(faults) => faults,
    };
    Err(unsound(&faults, pieces.len() > 1).into())
}

/// What the reader of section files finds wrong with the outlines, told for the drawing.
fn unsound(faults: &crate::read::fault::Faults, several: bool) -> Vec<Fault> {
    let hint = if several {
        "mend the drawing; or, if these are outlines and their holes on several layers, put them on \
         one layer, and if only some layers are meant, choose them with --layer"
    } else {
        "mend the drawing"
    };
    faults
        .faults()
        .iter()
        .map(|fault| {
            Fault::whole(
                format!("the traced outlines make no section: {}", fault.message),
                hint,
            )
        })
        .collect()
}

/// Keeps the paths of the layers `chosen`, all if there are none.
fn choose_layers(drawing: &mut Drawing, chosen: &[String]) -> Result<(), Vec<Fault>> {
    if chosen.is_empty() {
        return Ok(());
    }
    let used = drawing.used_layers();
    let known: Vec<&str> = used.iter().map(|&l| drawing.layers[l].as_str()).collect();
    let faults: Vec<Fault> = chosen
        .iter()
        .filter(|name| !known.contains(&name.as_str()))
        .map(|name| {
            let remedy = if known.is_empty() {
                "the drawing has nothing that can be traced on any layer".to_owned()
            } else if known.len() > 30 {
                format!("the drawing has {} layers that can be traced", known.len())
            } else {
                let quoted: Vec<String> = known.iter().map(|k| format!("\"{k}\"")).collect();
                format!("layers that can be traced: {}", quoted.join(", "))
            };
            Fault::whole(format!("nothing is drawn on a layer \"{name}\""), remedy)
        })
        .collect();
    if !faults.is_empty() {
        return Err(faults);
    }
    let layers = &drawing.layers;
    drawing
        .paths
        .retain(|path| chosen.contains(&layers[path.layer]));
    Ok(())
}

/// The longer side of the box about the drawing.
fn size(drawing: &Drawing) -> Result<f64, Fault> {
    let [x0, x1, y0, y1] = drawing.extent();
    let size = (x1 - x0).max(y1 - y0);
    let farthest = [x0, x1, y0, y1].iter().fold(0.0_f64, |m, c| m.max(c.abs()));
    if !size.is_finite() || farthest > FARTHEST {
        return Err(Fault::whole(
            format!("the drawing has coordinates beyond {FARTHEST:e}"),
            "check its numbers; --scale makes them smaller",
        ));
    }
    if size < SMALLEST {
        return Err(Fault::whole(
            format!("the drawing is {size:e} wide, which is no size"),
            "check its numbers; --scale makes them larger",
        ));
    }
    if farthest > 1e6 * size {
        return Err(Fault::whole(
            format!(
                "the drawing is {} wide but {} away from the origin, too far for its digits",
                number::short(size),
                number::short(farthest)
            ),
            "move it to the origin",
        ));
    }
    Ok(size)
}

/// A length that the user may state, checked.
fn length(
    option: &str,
    stated: Option<f64>,
    default: f64,
    least: f64,
    most: f64,
) -> Result<f64, Fault> {
    match stated {
        None => Ok(default),
        Some(value) if value >= least && value <= 0.1 * most => Ok(value),
        Some(value) => Err(Fault::whole(
            format!("{option} {value} does not suit a drawing that is {most} wide",),
            format!(
                "give a length from {} to {}, in the section file's unit",
                number::short(least),
                number::short(0.1 * most)
            ),
        )),
    }
}
