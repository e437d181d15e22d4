//! The columns of the rows: which section, its varied values, the properties asked for, how it went.

use sectile_solver::quantity::Quantity;

use crate::read::near::{listed, nearest};
use crate::read::vary::Vary;

/// The properties of a row where none are named.
pub const DEFAULT: &[Quantity] = &[
    Quantity::Area,
    Quantity::MassPerLength,
    Quantity::CentroidX,
    Quantity::CentroidY,
    Quantity::SecondMomentX,
    Quantity::SecondMomentY,
    Quantity::ProductMoment,
    Quantity::TorsionConstant,
    Quantity::WarpingConstant,
    Quantity::ShearCentreX,
    Quantity::ShearCentreY,
    Quantity::ShearAreaX,
    Quantity::ShearAreaY,
];

/// Columns before the varied ones.
pub const FIRST: [&str; 3] = ["file", "input_sha256", "title"];
/// Columns between the varied ones and the properties: units, and the tolerance asked for.
pub const UNITS: [&str; 4] = ["length_unit", "force_unit", "moment_unit", "tolerance"];
/// Columns after the properties.
pub const LAST: [&str; 3] = ["tolerance_reached", "notes", "error"];

/// What a row holds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Columns {
    /// Paths of the varied values, of all files together in the order in which they come.
    pub varied: Vec<String>,
    /// The properties.
    pub properties: Vec<Quantity>,
    /// Whether each has its lower and upper bound beside it.
    pub bounds: bool,
}

impl Columns {
    /// The columns for files with these sweeps.
    #[must_use]
    pub fn new<'a>(
        properties: Vec<Quantity>,
        bounds: bool,
        sweeps: impl Iterator<Item = &'a Vec<Vary>>,
    ) -> Self {
        let mut varied: Vec<String> = Vec::new();
        for vary in sweeps.flatten() {
            if !varied.contains(&vary.key) {
                varied.push(vary.key.clone());
            }
        }
        Self {
            varied,
            properties,
            bounds,
        }
    }

    /// The heads in order.
    #[must_use]
    pub fn heads(&self) -> Vec<String> {
        let mut heads: Vec<String> = FIRST.map(String::from).into();
        heads.extend(self.varied.iter().cloned());
        heads.extend(UNITS.map(String::from));
        for property in &self.properties {
            heads.push(property.key().into());
            if self.bounds {
                heads.push(format!("{}_low", property.key()));
                heads.push(format!("{}_high", property.key()));
            }
        }
        heads.extend(LAST.map(String::from));
        heads
    }

    /// Where the column of a head is.
    #[must_use]
    pub fn place(&self, head: &str) -> Option<usize> {
        self.heads().iter().position(|own| own == head)
    }
}

/// Properties by their keys, separated by commas, each once; `all` stands for every one.
///
/// # Errors
/// A key is not known: message with the nearest.
pub fn properties(text: &str) -> Result<Vec<Quantity>, String> {
    let mut found: Vec<Quantity> = Vec::new();
    for key in text.split(',').map(str::trim).filter(|key| !key.is_empty()) {
        let named: &[Quantity] = match key {
            "all" => Quantity::ALL,
            _ => &[property(key)?],
        };
        for &quantity in named {
            if !found.contains(&quantity) {
                found.push(quantity);
            }
        }
    }
    if found.is_empty() {
        return Err("no property is named; write keys such as area,torsion_constant".into());
    }
    Ok(found)
}

/// The property of a key.
///
/// # Errors
/// There is none: message with the nearest.
pub fn property(key: &str) -> Result<Quantity, String> {
    let found = Quantity::ALL.iter().copied().find(|q| q.key() == key);
    found.ok_or_else(|| {
        let keys: Vec<&str> = Quantity::ALL.iter().map(|q| q.key()).collect();
        format!(
            "there is no property `{key}`; the nearest is `{}`. Known are {}",
            nearest(key, &keys).unwrap_or_default(),
            listed(&keys, "and")
        )
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn properties_by_key() {
        assert_eq!(
            properties("area, torsion_constant,area"),
            Ok(vec![Quantity::Area, Quantity::TorsionConstant])
        );
        assert_eq!(properties("all").map(|q| q.len()), Ok(Quantity::ALL.len()));
        assert!(properties(" , ").is_err());
        let message = properties("torsion_konstant").expect_err("unknown");
        assert!(message.contains("the nearest is `torsion_constant`"));
    }

    #[test]
    fn bounds_stand_beside_their_value() {
        let columns = Columns::new(vec![Quantity::Area], true, std::iter::empty());
        let heads = columns.heads();
        assert_eq!(heads[7..10], ["area", "area_low", "area_high"]);
        assert_eq!(columns.place("area_low"), Some(8));
    }
}
