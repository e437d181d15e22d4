//! The reference cases: what a section is, what a source says of it, and how far the source goes.

use std::collections::BTreeMap;
use std::fmt;

use sectile_solver::quantity::Quantity;
use serde::Deserialize;

use crate::outline::Loop;

/// What an expected value rests on, and so by which rule it is compared (see [`crate::verdict`]).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Status {
    /// Closed form or convergent series, summed to 15 digits or more.
    Exact,
    /// Converged finite elements of others' or our own making; the digits are trustworthy but for the last.
    Numeric,
    /// Printed in a public text that was read.
    Published,
    /// Recalled, not read.
    Memory,
    /// Custom of the trade, no source.
    CommonPractice,
}

impl Status {
    /// The word in tables.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Self::Exact => "exact",
            Self::Numeric => "numeric",
            Self::Published => "published",
            Self::Memory => "memory",
            Self::CommonPractice => "common practice",
        }
    }
}

/// A section with what is known of it.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Case {
    /// Unique name.
    pub id: String,
    /// What the section is.
    pub title: String,
    /// Status of the values that state none of their own.
    pub status: Status,
    /// Author, title, year, place; one text a source.
    pub source: Vec<String>,
    /// Poisson's ratio, unless a value states its own.
    #[serde(default = "steel")]
    pub nu: f64,
    /// The source's unit of length in the unit of the outline: 10 for a table in cm of an outline in mm.
    #[serde(default = "one")]
    pub unit: f64,
    /// What the reader should know of the values.
    pub note: Option<String>,
    /// The quantities that the README's table shows.
    #[serde(default)]
    pub show: Vec<String>,
    /// The outer edge.
    pub outline: Loop,
    /// The holes.
    #[serde(default)]
    pub holes: Vec<Loop>,
    /// The expected values by the key of the quantity.
    pub expect: BTreeMap<String, Expected>,
}

fn steel() -> f64 {
    0.3
}

fn one() -> f64 {
    1.0
}

/// What is expected of one quantity: a value in the case's own status and source, or one or more
/// with their own.
#[derive(Clone, Debug, Deserialize)]
#[serde(untagged)]
pub enum Expected {
    /// One.
    One(Value),
    /// Several.
    Many(Vec<Value>),
}

/// A value.
#[derive(Clone, Debug, Deserialize)]
#[serde(untagged)]
pub enum Value {
    /// As printed, in the case's status and source.
    Plain(String),
    /// With more to say.
    Rich(Expectation),
}

/// An expected value that differs from its case in something.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Expectation {
    /// As printed, so that its digits are known.
    pub value: String,
    /// Poisson's ratio.
    pub nu: Option<f64>,
    /// Status.
    pub status: Option<Status>,
    /// Source.
    pub source: Option<String>,
    /// Relative tolerance for what is printed with less accuracy than digits.
    #[serde(default)]
    pub tolerance: f64,
    /// Factor from the printed value to ours, instead of the power of `unit`.
    pub scale: Option<f64>,
    /// Added after scaling.
    #[serde(default)]
    pub offset: f64,
    /// The printed value is the quotient by this quantity.
    pub over: Option<String>,
    /// Why this value is known not to be met. Meeting it then is a failure too.
    pub known_failure: Option<String>,
    /// What the reader should know.
    pub note: Option<String>,
}

/// One value to be compared, everything resolved.
#[derive(Clone, Debug)]
pub struct Claim {
    /// The quantity.
    pub quantity: Quantity,
    /// The printed value is `quantity / over`.
    pub over: Option<Quantity>,
    /// As printed.
    pub printed: String,
    /// In the unit and axes of the outline.
    pub value: f64,
    /// Half a unit in the last printed place, in the unit of the outline.
    pub half_place: f64,
    /// Absolute tolerance from the stated relative one.
    pub tolerance: f64,
    /// Poisson's ratio.
    pub nu: f64,
    /// Status.
    pub status: Status,
    /// Sources.
    pub source: Vec<String>,
    /// Why it is known not to be met.
    pub known_failure: Option<String>,
    /// Whether it is the first of its quantity for the case's own ν, which the README shows.
    pub leading: bool,
}

/// What is wrong with a case file.
#[derive(Debug)]
pub struct CaseError(String);

impl CaseError {
    /// A fault of the case `id`.
    #[must_use]
    pub fn of(id: &str, what: &str) -> Self {
        Self(format!("case `{id}`: {what}"))
    }
}

impl fmt::Display for CaseError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.0)
    }
}

impl std::error::Error for CaseError {}

#[derive(Deserialize)]
struct File {
    case: Vec<Case>,
}

/// The case files: name and text.
const FILES: [(&str, &str); 6] = [
    ("torsion", include_str!("../cases/torsion.toml")),
    ("shear_centre", include_str!("../cases/shear_centre.toml")),
    (
        "shear_coefficient",
        include_str!("../cases/shear_coefficient.toml"),
    ),
    ("plastic", include_str!("../cases/plastic.toml")),
    ("geometry", include_str!("../cases/geometry.toml")),
    ("profiles", include_str!("../cases/profiles.toml")),
];

/// Every case, file by file.
///
/// # Errors
/// A file that is not valid, or an id that occurs twice.
pub fn all() -> Result<Vec<Case>, CaseError> {
    let mut cases: Vec<Case> = Vec::new();
    for (name, text) in FILES {
        let file: File =
            toml::from_str(text).map_err(|e| CaseError(format!("{name}.toml: {e}")))?;
        for case in file.case {
            if cases.iter().any(|c| c.id == case.id) {
                return Err(CaseError(format!(
                    "{name}.toml: `{}` occurs twice",
                    case.id
                )));
            }
            cases.push(case);
        }
    }
    Ok(cases)
}

/// The quantity with this key.
fn quantity(key: &str) -> Option<Quantity> {
    Quantity::ALL.iter().copied().find(|q| q.key() == key)
}

impl Case {
    /// The values to be compared, in the order of [`Quantity::ALL`].
    ///
    /// # Errors
    /// An unknown quantity or a value that is not a number.
    pub fn claims(&self) -> Result<Vec<Claim>, CaseError> {
        let fault = |what: String| CaseError::of(&self.id, &what);
        let mut claims = Vec::new();
        for (key, expected) in &self.expect {
            let quantity =
                quantity(key).ok_or_else(|| fault(format!("unknown quantity `{key}`")))?;
            let list = match expected {
                Expected::One(one) => std::slice::from_ref(one),
                Expected::Many(many) => many,
            };
            let mut leading = true;
            for value in list {
                let mut claim = match value {
                    Value::Plain(text) => self.claim(quantity, &Expectation::plain(text)),
                    Value::Rich(e) => self.claim(quantity, e),
                }
                .map_err(fault)?;
                claim.leading = leading && claim.nu == self.nu;
                leading &= !claim.leading;
                claims.push(claim);
            }
        }
        claims.sort_by_key(|c| c.quantity);
        Ok(claims)
    }

    fn claim(&self, q: Quantity, e: &Expectation) -> Result<Claim, String> {
        let over = match &e.over {
            Some(key) => Some(quantity(key).ok_or_else(|| format!("unknown quantity `{key}`"))?),
            None => None,
        };
        let power = power(q) - over.map_or(0, power);
        let scale = e.scale.unwrap_or_else(|| self.unit.powi(power));
        let number: f64 = e
            .value
            .parse()
            .map_err(|_| format!("`{}` is not a number", e.value))?;
        Ok(Claim {
            quantity: q,
            over,
            printed: e.value.clone(),
            value: number * scale + e.offset,
            half_place: 0.5 * last_place(&e.value) * scale.abs(),
            tolerance: e.tolerance * (number * scale).abs(),
            nu: e.nu.unwrap_or(self.nu),
            status: e.status.unwrap_or(self.status),
            source: e
                .source
                .as_ref()
                .map_or_else(|| self.source.clone(), |s| vec![s.clone()]),
            known_failure: e.known_failure.clone(),
            leading: false,
        })
    }
}

impl Expectation {
    fn plain(value: &str) -> Self {
        Self {
            value: value.to_owned(),
            nu: None,
            status: None,
            source: None,
            tolerance: 0.0,
            scale: None,
            offset: 0.0,
            over: None,
            known_failure: None,
            note: None,
        }
    }
}

/// The power of length of a quantity.
#[must_use]
pub fn power(q: Quantity) -> i32 {
    use sectile_solver::quantity::Dimension;
    match q.dimension() {
        Dimension::Length(n) => n,
        Dimension::MassPerLength | Dimension::Angle => 0,
        // A yield stress is what it is, in any unit of length.
        Dimension::ForceLength(n) => n + 2,
    }
}

/// One unit in the last printed place: `"0.0825"` 1e-4, `"1.94e3"` 10.
fn last_place(text: &str) -> f64 {
    let (mantissa, exponent) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
    let decimals = mantissa.split_once('.').map_or(0, |(_, d)| d.len()) as i32;
    10.0_f64.powi(exponent.parse::<i32>().unwrap_or(0) - decimals)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn last_place_is_read_off_the_text() {
        for (text, place) in [
            ("0.0825", 1e-4),
            ("1.94e3", 10.0),
            ("18", 1.0),
            ("-3.5e-2", 1e-3),
        ] {
            assert!((last_place(text) - place).abs() < 1e-12 * place, "{text}");
        }
    }

    #[test]
    fn every_case_is_well_formed_and_names_its_sources() {
        let cases = all().expect("case files are valid");
        assert!(cases.len() >= 60, "{} cases", cases.len());
        for case in &cases {
            let claims = case.claims().expect("claims are valid");
            assert!(!claims.is_empty(), "{}", case.id);
            for claim in &claims {
                assert!(
                    claim.source.iter().all(|s| s.len() > 10) && !claim.source.is_empty(),
                    "{}: {}",
                    case.id,
                    claim.quantity.key()
                );
            }
            for key in &case.show {
                assert!(case.expect.contains_key(key), "{}: show {key}", case.id);
            }
        }
    }
}
