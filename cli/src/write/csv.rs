//! `properties.csv`: one row a property, in reading order, every number to full precision.
//!
//! The caution is the last row, key `caution`, its text under `meaning`: a comment line before the
//! header would hide the header from spreadsheets.

use sectile_solver::material::Material;
use sectile_solver::solution::Solution;

use super::json::number;
use super::materials::referred;
use super::{CAUTION, units, wording};
use crate::section::Units;

/// The columns.
pub const COLUMNS: [&str; 8] = [
    "key", "symbol", "value", "low", "high", "trust", "unit", "meaning",
];

/// The text of `properties.csv`; `reference`: the material that the moduli of a section of several refer
/// to, told in a row of that key. UTF-8 without a byte-order mark, lines ended by `\n`.
#[must_use]
pub fn properties(units: &Units, solution: &Solution, reference: Option<&Material>) -> String {
    let mut rows: Vec<[String; 8]> = vec![COLUMNS.map(String::from)];
    for (quantity, figure) in &solution.properties {
        rows.push([
            quantity.key().into(),
            quantity.symbol().into(),
            number(figure.value),
            number(figure.low),
            number(figure.high),
            wording::trust(figure.trust).into(),
            units::ascii(quantity.dimension(), units),
            quantity.description().into(),
        ]);
    }
    if let Some(reference) = reference {
        let mut row: [String; 8] = Default::default();
        row[0] = "reference".into();
        row[7] = referred(units, reference);
        rows.push(row);
    }
    let mut last: [String; 8] = Default::default();
    last[0] = "caution".into();
    last[7] = CAUTION.into();
    rows.push(last);

    let mut writer = ::csv::Writer::from_writer(Vec::new());
    for row in &rows {
        // Writing to memory fails only for rows of unequal length, and these are arrays.
        let _ = writer.write_record(row);
    }
    let bytes = writer.into_inner().unwrap_or_default();
    String::from_utf8(bytes).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;
    use crate::write::json::tests::{sample_solution, sample_units};

    #[test]
    fn rows_read_back_to_the_last_bit_and_the_caution_comes_last() {
        let solution = sample_solution();
        let text = properties(&sample_units(), &solution, None);
        let mut reader = ::csv::Reader::from_reader(text.as_bytes());
        assert_eq!(reader.headers().unwrap(), COLUMNS.as_slice());
        let rows: Vec<_> = reader.records().map(Result::unwrap).collect();
        assert_eq!(rows.len(), solution.properties.len() + 1);
        for (row, (quantity, figure)) in rows.iter().zip(&solution.properties) {
            assert_eq!(&row[0], quantity.key());
            assert_eq!(row[2].parse::<f64>().unwrap(), figure.value);
            assert_eq!(row[3].parse::<f64>().unwrap(), figure.low);
            assert_eq!(row[4].parse::<f64>().unwrap(), figure.high);
            assert!(!row[2].starts_with("-0") || row[2].parse::<f64>().unwrap() < 0.0);
        }
        let last = rows.last().unwrap();
        assert_eq!(&last[0], "caution");
        assert_eq!(&last[7], CAUTION);
    }
}
