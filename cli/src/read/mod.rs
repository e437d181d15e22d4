//! Section files in: TOML text to a [`Section`] and its [`Domain`], or every fault at once.

mod action;
mod combination;
mod cut;
pub(crate) mod excerpt;
pub mod fault;
mod fields;
pub mod file;
mod geometry;
mod joint;
mod later;
mod material;
mod names;
pub mod near;
mod path;
mod piece;
mod place;
pub mod places;
mod probe;
mod profile;
pub mod quantity;
mod ring;
mod seam;
mod shape;
pub mod show;
mod syntax;
mod units;
pub mod vary;

use sectile_mesh::domain::fault::Fault as Found;
use sectile_mesh::domain::seam::SeamRequest;
use sectile_mesh::domain::{self, Domain};
use sectile_mesh::outline::piece::Piece;

use crate::section::{Action, Combination, Contact, Cut, Probe, SeamInput, Section};
use fault::{Fault, Faults};
use fields::{Fields, Reader};
use geometry::{PieceText, Sources};
use names::Names;
use places::Places;
use seam::SeamText;
use vary::Vary;

pub use file::{section_from_path, text_from_path};

/// Keys of the file's top level.
const KEYS: &[&str] = &[
    "title",
    "units",
    "material",
    "reference",
    "contact",
    "piece",
    "seam",
    "action",
    "combination",
    "probe",
    "cut",
    "vary",
];

/// A section file that has been read without fault.
#[derive(Clone, Debug, PartialEq)]
pub struct ReadSection {
    /// What the file states.
    pub section: Section,
    /// The valid planar regions that its pieces make.
    pub domain: Domain,
    /// What the file's sweep varies; the section itself is the file as written.
    pub sweep: Vec<Vary>,
    /// Where the file states it, for faults that are found later.
    pub places: Places,
}

/// Reads the section file `text`; messages call it `name`.
///
/// # Errors
/// Every fault found. Faults of the TOML hide those of its entries; faults of entries hide those of
/// the geometry that depends on them; nothing else is hidden.
pub fn section_from_text(name: &str, text: &str) -> Result<ReadSection, Box<Faults>> {
    if text
        .trim_matches(|c: char| c.is_whitespace() || c == '\u{feff}')
        .is_empty()
    {
        let fault = Fault::whole(
            format!("{name} is empty"),
            "`sectile new` writes a starter file",
        );
        return Err(Faults::new(name, text, vec![fault]));
    }
    let value = toml_span::parse(text)
        .map_err(|error| Faults::new(name, text, vec![syntax::fault(text, &error)]))?;
    let mut reader = Reader {
        units: units::defaults(),
        faults: Vec::new(),
    };
    let mut read = read(&mut reader, name, text, &value);
    if let Some(read) = &mut read {
        reader.faults.extend(read.settle());
    }
    match read {
        Some(read) if reader.faults.is_empty() => Ok(read),
        _ => Err(Faults::new(name, text, reader.faults)),
    }
}

fn read(
    reader: &mut Reader,
    name: &str,
    text: &str,
    value: &toml_span::Value<'_>,
) -> Option<ReadSection> {
    let known = [KEYS, later::KEYS].concat();
    let fields = Fields::open(reader, value, "a section file", &known)?;
    later::refuse(reader, value.as_table()?);

    let faults = reader.faults.len();
    if let Some(value) = fields.get("units") {
        units::read(reader, value);
    }
    // With a wrong unit of length the pieces would not fit each other.
    let sure_of_units = reader.faults.len() == faults;
    let title = fields
        .get("title")
        .and_then(|value| reader.line(value, "the title"))
        .map_or_else(|| stem(name), str::to_owned);
    let materials = fields
        .get("material")
        .map(|value| material::read_all(reader, value))
        .unwrap_or_default();
    let loads = loads(reader, &fields);
    let (probes, at_probes): (Vec<Probe>, Vec<_>) = fields
        .get("probe")
        .map(|value| probe::read_all(reader, value))
        .unwrap_or_default()
        .into_iter()
        .unzip();
    let (cuts, at_cuts): (Vec<Cut>, Vec<_>) = fields
        .get("cut")
        .map(|value| cut::read_all(reader, value))
        .unwrap_or_default()
        .into_iter()
        .unzip();
    let sweep = fields
        .get("vary")
        .map(|list| vary::read_all(reader, text, value, list))
        .unwrap_or_default();
    let Some(value) = fields.get("piece").filter(|value| !is_empty_list(value)) else {
        if !fields.is_misspelt("piece") {
            reader.faults.push(Fault::whole(
                format!("{name} has no piece"),
                "add a [[piece]] with an outline or a profile; `sectile new` shows how",
            ));
        }
        return None;
    };
    let reference = fields
        .get("reference")
        .and_then(|value| material::named(reader, value, "the reference material", &materials));
    let pieces = piece::read_all(reader, value, &materials);
    let contact = seam::contact(reader, &fields);
    let seams = fields
        .get("seam")
        .map(|value| seam::read_all(reader, value, &pieces, &materials))
        .unwrap_or_default();
    let complete = pieces.iter().all(|read| read.piece.is_some())
        && seams.iter().all(Option::is_some)
        && !fields.is_misspelt("seam");
    let (pieces, texts): (Vec<Piece>, Vec<PieceText>) =
        pieces.into_iter().filter_map(|read| read.piece).unzip();
    let (seams, seam_texts): (Vec<SeamInput>, Vec<SeamText>) = seams.into_iter().flatten().unzip();
    let domain = if sure_of_units {
        let sources = Sources {
            pieces: &pieces,
            texts: &texts,
            seams: &seams,
            seam_texts: &seam_texts,
            unit: reader.units.length,
        };
        regions(reader, sources, contact, complete)
    } else {
        None
    };

    let assumed_material = materials.is_empty();
    Some(ReadSection {
        section: Section {
            title,
            units: reader.units.clone(),
            materials: if assumed_material {
                vec![material::assumed()]
            } else {
                materials
            },
            reference,
            assumed_material,
            pieces,
            contact,
            seams,
            actions: loads.0,
            combinations: loads.1,
            probes,
            cuts,
        },
        domain: domain?,
        sweep,
        places: Places {
            file: name.to_owned(),
            text: text.to_owned(),
            materials: fields
                .get("material")
                .map(material::heads)
                .unwrap_or_default(),
            probes: at_probes,
            cuts: at_cuts,
        },
    })
}

/// The actions and their combinations, which share their names.
fn loads(reader: &mut Reader, fields: &Fields<'_>) -> (Vec<Action>, Vec<Combination>) {
    let mut names = Names::new("actions or combinations");
    let actions = match fields.get("action") {
        Some(value) => action::read_all(reader, value, &mut names),
        // Combinations cannot be matched to actions under a misspelt heading.
        None => (!fields.is_misspelt("action")).then(Vec::new),
    };
    let combinations = fields
        .get("combination")
        .map(|value| combination::read_all(reader, value, actions.as_deref(), &mut names));
    (
        actions
            .into_iter()
            .flatten()
            .filter_map(|read| read.action)
            .collect(),
        combinations.into_iter().flatten().flatten().collect(),
    )
}

/// The domain of the pieces; with some of them or of the seams missing, faults that these could cure
/// are left out.
fn regions(
    reader: &mut Reader,
    sources: Sources<'_>,
    contact: Contact,
    complete: bool,
) -> Option<Domain> {
    let pieces = sources.pieces;
    if pieces.is_empty() {
        return None;
    }
    let built = if contact == Contact::Seams && complete {
        let requests: Vec<SeamRequest> = sources.seams.iter().map(|s| s.request.clone()).collect();
        domain::build_seamed(pieces, &requests)
    } else {
        domain::build(pieces)
    };
    match built {
        Ok(domain) => Some(domain),
        Err(found) => {
            let certain = |fault: &&Found| match **fault {
                Found::PiecesTouchInPoint { .. } => complete,
                _ => true,
            };
            let told = found
                .iter()
                .filter(certain)
                .map(|fault| sources.fault(fault));
            reader.faults.extend(told);
            None
        }
    }
}

fn is_empty_list(value: &toml_span::Value<'_>) -> bool {
    value.as_array().is_some_and(Vec::is_empty)
}

/// A title for a file without one: its name without folders and endings.
fn stem(name: &str) -> String {
    let file = name.rsplit(['/', '\\']).next().unwrap_or(name);
    let file = file.strip_suffix(".toml").unwrap_or(file);
    file.strip_suffix(".section").unwrap_or(file).to_owned()
}
