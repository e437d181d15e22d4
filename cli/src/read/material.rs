//! The tables `[material.NAME]`.

use std::ops::Range;

use sectile_solver::material::Material;
use toml_span::Value;

use super::excerpt::hidden;
use super::fault::Fault;
use super::fields::{Fields, Reader, span};
use super::near::nearest;
use super::quantity::Dimension;
use super::syntax::printable;

const KEYS: &[&str] = &["E", "nu", "shear", "yield", "density"];

/// What a section without a material is given: with one material no property depends on E, and ν
/// enters the shear figures only.
pub(super) fn assumed() -> Material {
    let (young, poisson) = (1.0, 0.3);
    Material {
        name: String::new(),
        young,
        poisson,
        shear: 0.5 * young / (1.0 + poisson),
        yield_stress: None,
        density: None,
    }
}

/// All materials in the order of the file. A faulty one keeps its place with assumed values, so that
/// pieces can still be matched to it by name.
pub(super) fn read_all(reader: &mut Reader, value: &Value<'_>) -> Vec<Material> {
    let Some(table) = value.as_table() else {
        reader.wrong_type(
            value,
            "`material`",
            "a table for each material, headed [material.steel]",
        );
        return Vec::new();
    };
    let mut entries: Vec<_> = table.iter().collect();
    entries.sort_by_key(|(key, _)| key.span.start);
    if let Some((key, _)) = entries.first()
        && entries.iter().all(|(_, value)| value.as_table().is_none())
    {
        reader.faults.push(Fault::at(
            key.span.into(),
            "",
            "a material needs a name",
            "head the table [material.steel], with a name of your choice after the dot",
        ));
        return Vec::new();
    }
    for (key, _) in &entries {
        if key.name.chars().any(hidden) {
            reader.faults.push(Fault::at(
                key.span.into(),
                "",
                "the name of a material must be one line of printable text",
                "remove line breaks and control characters",
            ));
        }
    }
    entries
        .into_iter()
        .map(|(key, value)| Material {
            name: key.name.to_string(),
            ..read(reader, value).unwrap_or_else(assumed)
        })
        .collect()
}

/// The index of the material that `value` names; `what` is the key in words.
pub(super) fn named(
    reader: &mut Reader,
    value: &Value<'_>,
    what: &str,
    materials: &[Material],
) -> Option<usize> {
    let text = reader.text(value, what)?;
    let found = materials.iter().position(|known| known.name == text);
    if found.is_none() {
        let known: Vec<&str> = materials.iter().map(|known| known.name.as_str()).collect();
        reader.faults.push(Fault::at(
            span(value),
            "not in this file",
            format!("there is no material \"{}\"", printable(text)),
            match nearest(text, &known) {
                Some(near) => format!(
                    "the nearest known one is \"{}\"; or add a table [material.{}]",
                    printable(near),
                    printable(text)
                ),
                None => format!(
                    "add a table [material.{}] with E and nu, or remove the line",
                    printable(text)
                ),
            },
        ));
    }
    found
}

/// Where the names of the materials are written, in the order of the file.
pub(super) fn heads(value: &Value<'_>) -> Vec<Range<usize>> {
    let mut heads: Vec<Range<usize>> = value
        .as_table()
        .into_iter()
        .flat_map(|table| table.keys())
        .map(|key| key.span.into())
        .collect();
    heads.sort_by_key(|range| range.start);
    heads
}

fn read(reader: &mut Reader, value: &Value<'_>) -> Option<Material> {
    let fields = Fields::open(reader, value, "a material", KEYS)?;
    let young = fields
        .need(reader, "E", "give Young's modulus, as in E = \"210 GPa\"")
        .and_then(|value| reader.positive(value, "Young's modulus E", Dimension::Stress));
    let poisson = fields
        .need(reader, "nu", "give Poisson's ratio, as in nu = 0.3")
        .and_then(|value| poisson(reader, value));
    let mut optional = |key, what, dimension| match fields.get(key) {
        None => Some(None),
        Some(value) => reader.positive(value, what, dimension).map(Some),
    };
    let shear = optional("shear", "the shear modulus", Dimension::Stress);
    let yield_stress = optional("yield", "the yield stress", Dimension::Stress);
    let density = optional("density", "the density", Dimension::Density);
    let (young, poisson) = (young?, poisson?);
    Some(Material {
        name: String::new(),
        young,
        poisson,
        shear: shear?.unwrap_or(0.5 * young / (1.0 + poisson)),
        yield_stress: yield_stress?,
        density: density?,
    })
}

fn poisson(reader: &mut Reader, value: &Value<'_>) -> Option<f64> {
    let nu = reader.number(value, "Poisson's ratio nu")?;
    if nu > -1.0 && nu < 0.5 {
        return Some(nu);
    }
    reader.faults.push(Fault::at(
        span(value),
        "outside (−1, 0.5)",
        "Poisson's ratio nu must lie between −1 and 0.5, both excluded",
        "an elastic body cannot have it otherwise; most metals have 0.25 to 0.35; for a nearly \
         incompressible material take a value such as 0.49",
    ));
    None
}
