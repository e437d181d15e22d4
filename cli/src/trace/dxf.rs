//! Drawings in the drawing exchange format, as text.

mod entity;
mod insert;
mod scan;

use std::collections::BTreeMap;

use dxf::Drawing as Library;
use dxf::entities::{Entity, EntityType};
use kurbo::Affine;

use super::Options;
use super::drawing::{Drawing, Path};
use crate::read::fault::Fault;
use entity::No;
use insert::{Block, Insert, Item};
use scan::{Record, Scan, complete, scan};

/// Entities that the library is given at a time.
const BATCH: usize = 2000;
/// Faults of one file that are told.
const MOST_FAULTS: usize = 20;

/// Reads a drawing.
///
/// # Errors
/// Every entity that is faulty; or the file is no DXF, or was cut short.
pub fn read(bytes: &[u8], options: &Options) -> Result<Drawing, Vec<Fault>> {
    if bytes.starts_with(b"AutoCAD Binary DXF") {
        return Err(vec![Fault::whole(
            "this is a binary DXF file",
            "save it as DXF text (ASCII)",
        )]);
    }
    let text = match std::str::from_utf8(bytes) {
        Ok(text) => text.into(),
        // Before 2007 such files were in the Windows encoding.
        Err(_) => encoding_rs::WINDOWS_1252.decode(bytes).0,
    };
    let scanned = scan(text.trim_start_matches('\u{feff}')).map_err(|fault| vec![fault])?;
    let (unit, factor, unit_from) = unit(&scanned, options);
    let mut reader = Reader {
        drawing: Drawing::new(unit, unit_from),
        faults: Vec::new(),
    };
    reader.drawing.ignored = scanned.ignored.clone();
    let blocks = reader.blocks(&scanned);
    let items = reader.items(&scanned.entities, true);
    if reader.faults.is_empty() {
        let scale = Affine::scale(factor * options.scale);
        let mut expansion = insert::Expansion {
            blocks: &blocks,
            drawing: &mut reader.drawing,
            faults: &mut reader.faults,
            sides: 0,
            inserts: 0,
        };
        expansion.expand(&items, scale, None, 0);
    }
    if reader.faults.is_empty() {
        return Ok(reader.drawing);
    }
    reader.faults.truncate(MOST_FAULTS);
    Err(reader.faults)
}

/// The section file's unit, by what the drawing's numbers are multiplied for it, and where it is from.
fn unit(scanned: &Scan<'_>, options: &Options) -> (&'static str, f64, String) {
    if let Some(unit) = options.units {
        return (unit, 1.0, "as --units says".to_owned());
    }
    let stated = |unit, factor, name: &str| {
        let from = if name.is_empty() {
            "as the drawing's header says".to_owned()
        } else {
            format!("from the drawing's {name}")
        };
        (unit, factor, from)
    };
    // Codes of the header variable $INSUNITS.
    match scanned.units.and_then(|code| code.parse::<i32>().ok()) {
        Some(1) => stated("in", 1.0, ""),
        Some(2) => stated("ft", 1.0, ""),
        Some(4) => stated("mm", 1.0, ""),
        Some(5) => stated("cm", 1.0, ""),
        Some(6) => stated("m", 1.0, ""),
        Some(8) => stated("in", 1e-6, "microinches"),
        Some(9) => stated("in", 1e-3, "thousandths of an inch"),
        Some(10) => stated("ft", 3.0, "yards"),
        Some(13) => stated("mm", 1e-3, "micrometres"),
        Some(14) => stated("mm", 100.0, "decimetres"),
        _ => (
            "mm",
            1.0,
            "which is assumed: the drawing states no unit (--units)".to_owned(),
        ),
    }
}

struct Reader {
    drawing: Drawing,
    faults: Vec<Fault>,
}

impl Reader {
    fn blocks(&mut self, scanned: &Scan<'_>) -> BTreeMap<String, Block> {
        let mut blocks = BTreeMap::new();
        for text in &scanned.blocks {
            let mut file = String::from("0\nSECTION\n2\nBLOCKS\n");
            push(&mut file, text.head.text);
            file.push_str("0\nENDBLK\n0\nENDSEC\n0\nEOF\n");
            let library = self.load(&file, text.head.line);
            let Some(head) = library.as_ref().and_then(|l| l.blocks().next()) else {
                self.not_read(&text.head);
                continue;
            };
            let block = Block {
                base: sectile_mesh::Point::new(head.base_point.x, head.base_point.y),
                items: self.items(&text.entities, false),
            };
            blocks.insert(head.name.to_uppercase(), block);
        }
        blocks
    }

    /// What the library makes of the entities, as paths and inserted blocks.
    fn items(&mut self, records: &[Record<'_>], counted: bool) -> Vec<Item> {
        let mut items = Vec::with_capacity(records.len());
        for batch in records.chunks(BATCH) {
            self.batch(batch, counted, &mut items);
        }
        items
    }

    /// One batch; halved where the library does not find all of it, until what is faulty is alone.
    fn batch(&mut self, records: &[Record<'_>], counted: bool, items: &mut Vec<Item>) {
        if self.faults.len() >= MOST_FAULTS {
            return;
        }
        let mut file = String::from("0\nSECTION\n2\nENTITIES\n");
        for record in records {
            push(&mut file, record.text);
        }
        file.push_str("0\nENDSEC\n0\nEOF\n");
        let library = Library::load_with_encoding(&mut file.as_bytes(), encoding_rs::UTF_8);
        drop(file);
        let entities: Vec<&Entity> = match &library {
            Ok(library) => library.entities().collect(),
            Err(_) => Vec::new(),
        };
        let whole = entities.len() == records.len()
            && entities
                .iter()
                .zip(records)
                .all(|(e, record)| matches(e, record) && complete(record));
        if whole {
            for (entity, record) in entities.into_iter().zip(records) {
                self.entity(entity, record, counted, items);
            }
        } else if let [record] = records {
            self.not_read(record);
        } else {
            let (first, second) = records.split_at(records.len() / 2);
            drop(library);
            self.batch(first, counted, items);
            self.batch(second, counted, items);
        }
    }

    fn entity(
        &mut self,
        entity: &Entity,
        record: &Record<'_>,
        counted: bool,
        items: &mut Vec<Item>,
    ) {
        let common = &entity.common;
        let ignored = if common.is_in_paper_space {
            Some("entity on a sheet")
        } else if !common.is_visible {
            Some("hidden entity")
        } else if common.layer.eq_ignore_ascii_case("DEFPOINTS") {
            Some("entity on the layer of dimension points")
        } else {
            None
        };
        if let Some(kind) = ignored {
            if counted {
                self.drawing.ignore(kind);
            }
            return;
        }
        let layer = self.drawing.layer(&common.layer);
        let found = match &entity.specific {
            EntityType::Insert(insert) => {
                Insert::read(insert, layer, record.line).map(Item::Insert)
            }
            other => entity::path(other).map(|path| {
                Item::Path(Path {
                    layer,
                    line: record.line,
                    ..path
                })
            }),
        };
        match found {
            Ok(item) => items.push(item),
            Err(No::Ignored(kind)) => self.drawing.ignore(kind),
            Err(No::Faulty(what, remedy)) => self.faults.push(Fault::whole(
                format!("the {} in line {} {what}", record.kind, record.line),
                remedy,
            )),
        }
    }

    fn load(&mut self, file: &str, line: usize) -> Option<Library> {
        let loaded = Library::load_with_encoding(&mut file.as_bytes(), encoding_rs::UTF_8);
        loaded
            .map_err(|error| {
                self.faults.push(Fault::whole(
                    format!("the block in line {line} cannot be read: {error}"),
                    "mend it in the drawing and export it again",
                ));
            })
            .ok()
    }

    fn not_read(&mut self, record: &Record<'_>) {
        self.faults.push(Fault::whole(
            format!(
                "the {} in line {} cannot be read: a value is missing, or is not of the kind that its \
                 code asks for",
                record.kind, record.line
            ),
            "the file is damaged: export it again",
        ));
    }
}

/// Whether the library's entity is the one of the record, with all vertices.
fn matches(entity: &Entity, record: &Record<'_>) -> bool {
    match &entity.specific {
        EntityType::Line(_) => record.kind == "LINE",
        EntityType::Arc(_) => record.kind == "ARC",
        EntityType::Circle(_) => record.kind == "CIRCLE",
        EntityType::Ellipse(_) => record.kind == "ELLIPSE",
        EntityType::Spline(_) => record.kind == "SPLINE",
        EntityType::Insert(_) => record.kind == "INSERT",
        EntityType::LwPolyline(_) => record.kind == "LWPOLYLINE",
        EntityType::Polyline(line) => {
            record.kind == "POLYLINE" && line.vertices().count() == record.vertices
        }
        _ => false,
    }
}

fn push(file: &mut String, text: &str) {
    file.push_str(text);
    if !text.ends_with('\n') {
        file.push('\n');
    }
}
