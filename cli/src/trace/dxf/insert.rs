//! Inserted blocks are expanded: moved, turned, scaled, mirrored and repeated.

use std::collections::BTreeMap;

use dxf::entities::Insert as DxfInsert;
use kurbo::{Affine, Vec2};
use sectile_mesh::Point;

use super::entity::{No, below, upright};
use crate::read::fault::Fault;
use crate::trace::drawing::{Drawing, MOST_SIDES, Path};

/// Blocks within blocks.
const DEEPEST: usize = 32;
/// Inserted blocks in all, even if they hold nothing.
const MOST_INSERTS: usize = 1_000_000;

/// A path, or a block in its place.
#[derive(Clone, Debug)]
pub enum Item {
    /// A path in the block's coordinates.
    Path(Path),
    /// A block inserted there.
    Insert(Insert),
}

/// A block.
#[derive(Clone, Debug)]
pub struct Block {
    /// The point that comes to lie where it is inserted.
    pub base: Point,
    /// What it holds.
    pub items: Vec<Item>,
}

/// One or more copies of a block.
#[derive(Clone, Debug)]
pub struct Insert {
    name: String,
    layer: usize,
    line: usize,
    /// From the block's coordinates, with its base point at the origin, to the first copy's.
    map: Affine,
    /// From copy to copy along a row and from row to row.
    steps: (Vec2, Vec2),
    counts: (u32, u32),
}

impl Insert {
    /// As the file states it.
    ///
    /// # Errors
    /// It is in another plane, or its numbers are none.
    pub fn read(insert: &DxfInsert, layer: usize, line: usize) -> Result<Self, No> {
        let up = upright(&insert.extrusion_direction)?;
        let outer = if up { Affine::IDENTITY } else { below() };
        let turn = Affine::rotate(insert.rotation.to_radians());
        let place = outer * Affine::translate((insert.location.x, insert.location.y));
        let map =
            place * turn * Affine::scale_non_uniform(insert.x_scale_factor, insert.y_scale_factor);
        if !map.is_finite() || map.determinant() == 0.0 {
            return Err(No::Faulty(
                "has a place or scale that is no number, or a scale of zero".to_owned(),
                "mend it in the drawing and export it again",
            ));
        }
        let step = |x: f64, y: f64| {
            let turned = outer * turn * kurbo::Point::new(x, y);
            turned.to_vec2()
        };
        let count = |n: i16| u32::from(n.max(1).unsigned_abs());
        Ok(Self {
            name: insert.name.clone(),
            layer,
            line,
            map,
            steps: (
                step(insert.column_spacing, 0.0),
                step(0.0, insert.row_spacing),
            ),
            counts: (count(insert.column_count), count(insert.row_count)),
        })
    }
}

/// The expansion of a drawing's items into its paths.
pub struct Expansion<'a> {
    /// Blocks by their names in capitals.
    pub blocks: &'a BTreeMap<String, Block>,
    /// Takes the paths.
    pub drawing: &'a mut Drawing,
    /// Takes the faults.
    pub faults: &'a mut Vec<Fault>,
    /// Sides so far.
    pub sides: usize,
    /// Inserted blocks so far.
    pub inserts: usize,
}

impl Expansion<'_> {
    /// Adds the items as `map` places them; those on layer 0 are on the layer of the inserted block.
    pub fn expand(&mut self, items: &[Item], map: Affine, layer: Option<usize>, depth: usize) {
        for item in items {
            if !self.faults.is_empty() {
                return;
            }
            match item {
                Item::Path(path) => {
                    self.sides += path.shapes.len();
                    let mut path = path.mapped(map);
                    path.layer = self.on(path.layer, layer);
                    self.drawing.paths.push(path);
                }
                Item::Insert(insert) => self.insert(insert, map, layer, depth),
            }
            if self.sides > MOST_SIDES || self.inserts > MOST_INSERTS {
                self.faults.push(Fault::whole(
                    format!(
                        "the drawing has more than {MOST_SIDES} sides or inserted blocks once its blocks \
                         are expanded"
                    ),
                    "export the section by itself",
                ));
            }
        }
    }

    fn on(&self, own: usize, inserted: Option<usize>) -> usize {
        match inserted {
            Some(layer) if self.drawing.layers[own] == "0" => layer,
            _ => own,
        }
    }

    fn insert(&mut self, insert: &Insert, map: Affine, layer: Option<usize>, depth: usize) {
        let Some(block) = self.blocks.get(&insert.name.to_uppercase()) else {
            self.faults.push(Fault::whole(
                format!(
                    "the INSERT in line {} names a block \"{}\" that the drawing does not have",
                    insert.line, insert.name
                ),
                "remove it, or export the drawing with its blocks",
            ));
            return;
        };
        if depth == DEEPEST {
            self.faults.push(Fault::whole(
                format!(
                    "the block \"{}\" holds itself, or blocks within blocks too deep",
                    insert.name
                ),
                "break the blocks up in the drawing",
            ));
            return;
        }
        let layer = Some(self.on(insert.layer, layer));
        let base = Affine::translate((-block.base.x, -block.base.y));
        for row in 0..insert.counts.1 {
            for column in 0..insert.counts.0 {
                if !self.faults.is_empty() {
                    return;
                }
                self.inserts += 1;
                let step = insert.steps.0 * f64::from(column) + insert.steps.1 * f64::from(row);
                let placed = map * Affine::translate(step) * insert.map * base;
                self.expand(&block.items, placed, layer, depth + 1);
                if self.inserts > MOST_INSERTS {
                    return;
                }
            }
        }
    }
}
