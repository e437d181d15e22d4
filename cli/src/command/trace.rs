//! `trace`: a section file from a drawing.

use std::fs::File;
use std::io::{Read, Write, stdout};
use std::path::{Path, PathBuf};

use clap::Args;

use super::Outcome;
use crate::read::fault::{Fault, Faults};
use crate::read::quantity::LENGTHS;
use crate::read::show;
use crate::trace::format::Format;
use crate::trace::{Options, Refusal, Traced, open, trace};
use crate::write::files;

/// Drawings beyond this size are refused unread: a DXF of 50 MB with 359,000 lines takes 600 MB at its peak.
const LARGEST_DRAWING: u64 = 128 << 20;

/// Options of `trace`.
#[derive(Args, Clone, Debug)]
#[command(
    after_help = "Drawings: DXF as text (LINE, ARC, CIRCLE, LWPOLYLINE, POLYLINE, ELLIPSE, SPLINE, \
    INSERT), SVG, GeoJSON, WKT, corners as CSV (x,y a line; a blank line or another third column starts a \
    new loop). Loops within loops are holes; each layer is a piece.\n\n\
    Examples:\n  \
    sectile trace rail.dxf                      writes rail.section.toml beside it\n  \
    sectile trace sheet.dxf --layer OUTLINE --layer HOLES --out rail.section.toml\n  \
    sectile trace scan.svg --scale 0.25 --units mm --gap 0.2\n  \
    sectile trace rail.dxf && sectile solve rail.section.toml\n\n\
    Exit codes: 0 written; 2 nothing written: with a reason, and where outlines stay open with a picture, \
    NAME.open.svg."
)]
pub struct TraceArgs {
    /// The drawing.
    #[arg(value_name = "DRAWING")]
    pub drawing: PathBuf,
    /// Write the section file here. Default: NAME.section.toml beside the drawing.
    #[arg(long, value_name = "FILE")]
    pub out: Option<PathBuf>,
    /// Trace this layer only; may be given several times.
    #[arg(long, value_name = "NAME")]
    pub layer: Vec<String>,
    /// Join loose ends up to this far apart, in the section file's unit. Default: 1/10000 of the
    /// drawing's size.
    #[arg(long, value_parser = not_negative, value_name = "LENGTH")]
    pub gap: Option<f64>,
    /// Turn splines, ellipses and other curves into arcs within this distance, in the section file's
    /// unit. Default: 1/10000 of the drawing's size.
    #[arg(long, value_parser = positive, value_name = "LENGTH")]
    pub chord: Option<f64>,
    /// Multiply the drawing's coordinates by this.
    #[arg(long, default_value = "1", value_parser = positive, value_name = "FACTOR")]
    pub scale: f64,
    /// The unit of the drawing's numbers, whatever it says itself: mm, cm, m, in or ft.
    #[arg(long, value_parser = unit, value_name = "UNIT")]
    pub units: Option<&'static str>,
    /// Replace a section file that is there already.
    #[arg(long)]
    pub force: bool,
}

fn positive(text: &str) -> Result<f64, String> {
    match text.trim().parse::<f64>() {
        Ok(value) if value > 0.0 && value.is_finite() => Ok(value),
        _ => Err("give a positive number, such as 0.1".into()),
    }
}

fn not_negative(text: &str) -> Result<f64, String> {
    match text.trim().parse::<f64>() {
        Ok(value) if value >= 0.0 && value.is_finite() => Ok(value),
        _ => Err("give a number from 0 up, such as 0.1".into()),
    }
}

fn unit(text: &str) -> Result<&'static str, String> {
    LENGTHS
        .iter()
        .copied()
        .find(|known| *known == text.trim())
        .ok_or_else(|| format!("the units of length are {}", LENGTHS.join(", ")))
}

/// Runs the command.
#[must_use]
pub fn run(args: &TraceArgs) -> Outcome {
    match traced(args) {
        Ok((path, remarks)) => {
            let mut text = String::new();
            for remark in remarks {
                text.push_str(&remark);
                text.push('\n');
            }
            // A reader that closed the pipe has all that it wants.
            let _ = writeln!(stdout(), "{text}The section file is {}", path.display());
            Outcome::Answered
        }
        Err(faults) => {
            let name = args.drawing.display().to_string();
            show::print(&Faults::new(&name, "", faults));
            Outcome::NoAnswer
        }
    }
}

fn traced(args: &TraceArgs) -> Result<(PathBuf, Vec<String>), Vec<Fault>> {
    let one = |fault: Fault| vec![fault];
    let drawing = args.drawing.as_path();
    let bytes = bytes_of(drawing).map_err(one)?;
    let format = Format::of(drawing, &bytes).map_err(one)?;
    let out = match &args.out {
        Some(out) => out.clone(),
        None => drawing.with_extension("section.toml"),
    };
    free(&out, drawing, args.force).map_err(one)?;
    let name = drawing
        .file_name()
        .map(|name| name.to_string_lossy().into_owned())
        .unwrap_or_default();
    let options = Options {
        layers: args.layer.clone(),
        gap: args.gap,
        chord: args.chord,
        scale: args.scale,
        units: args.units,
    };
    let Traced { text, remarks } = match trace(&name, &bytes, format, &options) {
        Ok(traced) => traced,
        Err(refusal) => return Err(with_picture(refusal, &out)),
    };
    files::write(&out, &text).map_err(|error| {
        one(Fault::whole(
            error.to_string(),
            "choose another place with --out",
        ))
    })?;
    Ok((out, remarks))
}

/// Whether the section file may be written to `out`.
fn free(out: &Path, drawing: &Path, force: bool) -> Result<(), Fault> {
    if !out.exists() {
        return Ok(());
    }
    let same = matches!((out.canonicalize(), drawing.canonicalize()), (Ok(a), Ok(b)) if a == b);
    if same || out.is_dir() {
        return Err(Fault::whole(
            format!(
                "{} is {}",
                out.display(),
                if same {
                    "the drawing itself"
                } else {
                    "a folder"
                }
            ),
            "name another file with --out",
        ));
    }
    if force {
        return Ok(());
    }
    Err(Fault::whole(
        format!("{} exists already", out.display()),
        "name another file with --out, or replace it with --force",
    ))
}

/// The faults; where outlines stay open, with the place of the picture that shows it.
fn with_picture(refusal: Refusal, out: &Path) -> Vec<Fault> {
    let Refusal {
        mut faults,
        picture,
    } = refusal;
    let Some(picture) = picture else {
        return faults;
    };
    let name = out
        .file_name()
        .map(|name| name.to_string_lossy().into_owned())
        .unwrap_or_default();
    let stem = name.strip_suffix(".section.toml").unwrap_or(&name);
    let path = out.with_file_name(format!("{stem}.open.svg"));
    let foreign = match std::fs::read_to_string(&path) {
        Ok(text) => !text.contains(open::MARK),
        Err(_) => path.exists(),
    };
    let note = if foreign {
        format!(
            "a picture of it was not written: {} is in the way",
            path.display()
        )
    } else {
        match files::write(&path, &picture) {
            Ok(()) => format!("{} shows where", path.display()),
            Err(error) => error.to_string(),
        }
    };
    if let Some(last) = faults.last_mut() {
        last.remedy = format!("{}; {note}", last.remedy);
    }
    faults
}

fn bytes_of(path: &Path) -> Result<Vec<u8>, Fault> {
    let unreadable = |error: std::io::Error| {
        Fault::whole(
            format!("{} cannot be read: {error}", path.display()),
            "check the path",
        )
    };
    let too_large = || {
        Fault::whole(
            format!(
                "{} is larger than {} MB; reading it would take too much memory",
                path.display(),
                LARGEST_DRAWING >> 20
            ),
            "export the section by itself, without the rest of the drawing",
        )
    };
    if std::fs::metadata(path).map_err(unreadable)?.is_dir() {
        return Err(Fault::whole(
            format!("{} is a folder", path.display()),
            "name a drawing in it",
        ));
    }
    let file = File::open(path).map_err(unreadable)?;
    let size = file.metadata().map_err(unreadable)?.len();
    if size > LARGEST_DRAWING {
        return Err(too_large());
    }
    let mut bytes = Vec::with_capacity(size as usize);
    file.take(LARGEST_DRAWING + 1)
        .read_to_end(&mut bytes)
        .map_err(unreadable)?;
    if bytes.len() as u64 > LARGEST_DRAWING {
        return Err(too_large());
    }
    Ok(bytes)
}
