//! Values of a TOML table, taken by key with their types checked; every fault is noted and reading goes on.

use std::ops::Range;

use sectile_mesh::Point;
use toml_span::Value;
use toml_span::value::{Table, ValueInner};

use super::excerpt::hidden;
use super::fault::Fault;
use super::near::{listed, nearest};
use super::quantity::{Dimension, Unit, quantity};
use super::syntax::printable;
use crate::section::Units;

/// Coordinates and sizes beyond this are refused: their squares would lose the section's shape.
const LARGEST_LENGTH: f64 = 1e9;

/// Section forces beyond this are refused: their squares must stay finite in any unit.
const LARGEST_ACTION: f64 = 1e30;

/// What all readers share: the file's units and the faults found so far.
#[derive(Debug)]
pub(super) struct Reader {
    pub(super) units: Units,
    pub(super) faults: Vec<Fault>,
}

/// The byte range of a value.
pub(super) fn span(value: &Value<'_>) -> Range<usize> {
    value.span.into()
}

/// A table whose keys are all known.
pub(super) struct Fields<'t> {
    /// What the table is, with its article.
    pub(super) what: &'t str,
    table: &'t Table<'t>,
    span: Range<usize>,
    /// Known keys that unknown ones come nearest to.
    misspelt: Vec<String>,
}

impl<'t> Fields<'t> {
    /// The table `value`; faults for each of its keys that is not among `known`.
    pub(super) fn open(
        reader: &mut Reader,
        value: &'t Value<'t>,
        what: &'t str,
        known: &[&str],
    ) -> Option<Self> {
        let Some(table) = value.as_table() else {
            reader.wrong_type(
                value,
                what,
                &format!("a table {{ … }} with {}", known.join(", ")),
            );
            return None;
        };
        let mut misspelt = Vec::new();
        for key in table.keys() {
            if !known.contains(&key.name.as_ref()) {
                let near = meant(&key.name, known);
                reader
                    .faults
                    .push(unknown_key(&key.name, key.span.into(), what, known, near));
                misspelt.extend(near.map(str::to_owned));
            }
        }
        Some(Self {
            what,
            table,
            span: span(value),
            misspelt,
        })
    }

    /// Whether an unknown key of the table most likely means `key`.
    pub(super) fn is_misspelt(&self, key: &str) -> bool {
        self.misspelt.iter().any(|near| near == key) && self.get(key).is_none()
    }

    /// The value of `key`, if it is there.
    pub(super) fn get(&self, key: &str) -> Option<&'t Value<'t>> {
        self.table.get(key)
    }

    /// Where `key` is written.
    pub(super) fn key_span(&self, key: &str) -> Option<Range<usize>> {
        self.table
            .get_key_value(key)
            .map(|(key, _)| key.span.into())
    }

    /// The value of `key`; a fault if it is missing, unless its misspelling has been told already.
    pub(super) fn need(
        &self,
        reader: &mut Reader,
        key: &str,
        remedy: &str,
    ) -> Option<&'t Value<'t>> {
        let value = self.get(key);
        if value.is_none() && !self.is_misspelt(key) {
            reader.faults.push(Fault::at(
                self.span(),
                format!("no `{key}` here"),
                format!("{} needs `{key}`", self.what),
                remedy,
            ));
        }
        value
    }

    /// Where the table is written.
    pub(super) fn span(&self) -> Range<usize> {
        self.span.clone()
    }
}

/// The known key that an unknown one most likely means.
fn meant<'k>(name: &str, known: &[&'k str]) -> Option<&'k str> {
    known
        .iter()
        .copied()
        .find(|key| other_words(name).contains(key))
        .or_else(|| nearest(name, known))
}

/// The fault of a key that nobody knows.
fn unknown_key(
    name: &str,
    at: Range<usize>,
    what: &str,
    known: &[&str],
    near: Option<&str>,
) -> Fault {
    let mut remedy = near.map_or_else(String::new, |near| {
        format!("the nearest known key is `{near}`")
    });
    if known.len() > 1 {
        remedy.push_str(&format!("; {what} can have {}", listed(known, "and")));
    }
    Fault::at(
        at,
        "not known",
        format!("`{}` is not a key of {what}", printable(name)),
        remedy,
    )
}

/// Keys that a writer may mean by another word for the same thing.
fn other_words(word: &str) -> &'static [&'static str] {
    match word.to_lowercase().as_str() {
        "thickness" | "wall" => &["t", "tw"],
        "web" => &["tw"],
        "flange" => &["tf"],
        "diameter" => &["d"],
        "radius" | "fillet" | "rounding" => &["round", "r"],
        "width" | "breadth" => &["b"],
        "height" | "depth" => &["h", "groove"],
        "poisson" => &["nu"],
        "v" => &["nu", "Vy"],
        "axial" | "normal" | "fz" | "nz" | "p" => &["N"],
        "fx" | "qx" => &["Vx"],
        "qy" | "f" | "q" => &["Vy"],
        "m" | "bending" => &["Mx"],
        "torque" | "torsion" | "mz" | "mt" | "tz" => &["T"],
        "bimoment" | "mw" | "bw" => &["B"],
        "young" | "modulus" => &["E"],
        "g" => &["shear"],
        "fy" => &["yield", "Vy"],
        "strength" => &["yield", "allowable"],
        "rho" | "weight" => &["density"],
        "rotate" | "rotation" | "angle" => &["turn"],
        "flip" | "reflect" => &["mirror"],
        "position" | "centre" | "center" | "point" | "origin" | "move" => &["at"],
        "corners" | "points" | "polygon" | "path" => &["outline"],
        "hole" | "openings" | "cutouts" => &["holes"],
        "arc" | "through" => &["via"],
        "shape" | "type" | "kind" => &["form"],
        "start" => &["from"],
        "end" => &["to"],
        "part" | "parts" | "pieces" => &["piece", "between"],
        "load" | "loads" | "case" | "cases" => &["action", "factors"],
        "actions" | "sum" | "coefficients" => &["action", "factors"],
        "line" | "section" | "slice" => &["cut"],
        "weld" | "welds" | "joint" | "seams" => &["seam", "fillet"],
        "leg" | "legs" | "size" | "throat" | "a" | "z" => &["fillet"],
        "penetration" | "butt" | "bevel" => &["groove"],
        "spacing" | "every" | "step" => &["pitch"],
        "fitup" | "fit_up" | "root_opening" | "opening" | "root" | "clearance" => &["gap"],
        "ends" => &["at"],
        "filler" | "metal" | "electrode" => &["material"],
        "limit" | "resistance" | "allowed" => &["allowable"],
        "line_load" | "flow" => &["direct"],
        _ => &[],
    }
}

impl Reader {
    /// Notes that `value`, meant to be `what`, has another type than `expected`.
    pub(super) fn wrong_type(&mut self, value: &Value<'_>, what: &str, expected: &str) {
        self.faults.push(Fault::at(
            span(value),
            "",
            format!("{what} cannot be {}", type_name(value)),
            format!("write {expected}"),
        ));
    }

    /// A text.
    pub(super) fn text<'t>(&mut self, value: &'t Value<'_>, what: &str) -> Option<&'t str> {
        let text = value.as_str();
        if text.is_none() {
            self.wrong_type(value, what, "a text in quotation marks");
        }
        text
    }

    /// A text that fits in a table or a title: one line, nothing in it that a terminal would obey.
    pub(super) fn line<'t>(&mut self, value: &'t Value<'_>, what: &str) -> Option<&'t str> {
        let text = self.text(value, what)?;
        if !text.chars().any(hidden) {
            return Some(text);
        }
        self.faults.push(Fault::at(
            span(value),
            "",
            format!("{what} must be one line of printable text"),
            "remove line breaks and control characters",
        ));
        None
    }

    /// One of `known`, which is returned itself.
    pub(super) fn choice(
        &mut self,
        value: &Value<'_>,
        what: &str,
        known: &[&'static str],
    ) -> Option<&'static str> {
        let text = self.text(value, what)?;
        let found = known.iter().copied().find(|word| *word == text);
        if found.is_none() {
            let remedy = match known {
                [only] => format!("write \"{only}\", or leave the key out"),
                _ => format!(
                    "the nearest known one is \"{}\"; choose {}",
                    nearest(text, known).unwrap_or_default(),
                    listed(known, "or").replace('`', "\"")
                ),
            };
            self.faults.push(Fault::at(
                span(value),
                "not known",
                format!("{what} cannot be \"{}\"", printable(text)),
                remedy,
            ));
        }
        found
    }

    /// A pure number.
    pub(super) fn number(&mut self, value: &Value<'_>, what: &str) -> Option<f64> {
        match plain_number(value) {
            Some(number) => self.finite(number, value, what),
            None => {
                self.wrong_type(value, what, "a number, without quotation marks");
                None
            }
        }
    }

    /// A quantity: a bare number in the file's unit, or a text with its own.
    pub(super) fn quantity(
        &mut self,
        value: &Value<'_>,
        what: &str,
        dimension: Dimension,
    ) -> Option<f64> {
        let unit = self.unit(dimension);
        self.converted(value, what, unit, unit)
    }

    /// A section force, moment or bimoment in the file's units of force and of length, `F`, `F·L` or
    /// `F·L²`; a bare number is in the unit of force, of moment, or of moment times length.
    pub(super) fn action(
        &mut self,
        value: &Value<'_>,
        what: &str,
        dimension: Dimension,
    ) -> Option<f64> {
        let (force, length) = (self.unit(Dimension::Force), self.unit(Dimension::Length));
        let consistent = match dimension {
            Dimension::Moment => force.times_length(length),
            Dimension::Bimoment => force.times_length(length).times_length(length),
            _ => force,
        };
        let amount = self.converted(value, what, self.unit(dimension), consistent)?;
        self.measurable(amount, value, what)
    }

    /// A force per length of either sign, in the unit of force over that of length.
    pub(super) fn line_load(&mut self, value: &Value<'_>, what: &str) -> Option<f64> {
        let amount = self.quantity(value, what, Dimension::LineLoad)?;
        self.measurable(amount, value, what)
    }

    fn measurable(&mut self, amount: f64, value: &Value<'_>, what: &str) -> Option<f64> {
        if amount.abs() <= LARGEST_ACTION {
            return Some(amount);
        }
        self.faults.push(Fault::at(
            span(value),
            "too large",
            format!("{what} is beyond all measure"),
            "check the exponent and the unit; see [units]",
        ));
        None
    }

    /// A quantity in the unit `wanted`: a bare number is in `bare`, a text has its own.
    fn converted(
        &mut self,
        value: &Value<'_>,
        what: &str,
        bare: Unit,
        wanted: Unit,
    ) -> Option<f64> {
        let dimension = wanted.dimension;
        if let Some(number) = plain_number(value) {
            let number = self.finite(number, value, what)?;
            return self.finite(bare.convert(number, wanted), value, what);
        }
        let Some(text) = value.as_str() else {
            self.wrong_type(
                value,
                what,
                &format!(
                    "a number, or a text with a unit such as \"{}\"",
                    dimension.example()
                ),
            );
            return None;
        };
        match quantity(text, dimension, wanted) {
            Ok(number) => Some(number),
            Err(misread) => {
                self.faults.push(Fault::at(
                    span(value),
                    what,
                    misread.message,
                    misread.remedy,
                ));
                None
            }
        }
    }

    /// A quantity greater than zero.
    pub(super) fn positive(
        &mut self,
        value: &Value<'_>,
        what: &str,
        dimension: Dimension,
    ) -> Option<f64> {
        let number = if dimension == Dimension::Length {
            self.length(value, what)?
        } else {
            self.quantity(value, what, dimension)?
        };
        if number > 0.0 {
            return Some(number);
        }
        self.faults.push(Fault::at(
            span(value),
            "not positive",
            format!("{what} must be greater than zero"),
            format!(
                "give {} such as \"{}\"",
                dimension.name(),
                dimension.example()
            ),
        ));
        None
    }

    /// A length of either sign.
    pub(super) fn length(&mut self, value: &Value<'_>, what: &str) -> Option<f64> {
        let length = self.quantity(value, what, Dimension::Length)?;
        if length.abs() <= LARGEST_LENGTH {
            return Some(length);
        }
        self.faults.push(Fault::at(
            span(value),
            "too large",
            format!("{what} is beyond ±{LARGEST_LENGTH:e} {}", self.units.length),
            "choose a unit that suits the section's size; see [units]",
        ));
        None
    }

    /// A point `[x, y]`.
    pub(super) fn point(&mut self, value: &Value<'_>, what: &str) -> Option<Point> {
        let Some([x, y]) = value.as_array().map(Vec::as_slice) else {
            let expected = "a point [x, y], two lengths in brackets; x to the right, y up";
            match value.as_array() {
                Some(list) => self.faults.push(Fault::at(
                    span(value),
                    "",
                    format!("{what} cannot be a list of {}", list.len()),
                    format!("write {expected}"),
                )),
                None => self.wrong_type(value, what, expected),
            }
            return None;
        };
        let (x, y) = (
            self.length(x, &format!("x of {what}")),
            self.length(y, &format!("y of {what}")),
        );
        Some(Point::new(x?, y?))
    }

    fn finite(&mut self, number: f64, value: &Value<'_>, what: &str) -> Option<f64> {
        if number.is_finite() {
            return Some(number);
        }
        self.faults.push(Fault::at(
            span(value),
            if number.is_nan() {
                "not a number"
            } else {
                "infinite"
            },
            format!("{what} must be a finite number"),
            "give a number such as 12.5",
        ));
        None
    }

    /// The unit that bare numbers of this dimension have.
    fn unit(&self, dimension: Dimension) -> Unit {
        let name = match dimension {
            Dimension::Length => self.units.length,
            Dimension::Force => self.units.force,
            Dimension::Moment => &self.units.moment,
            Dimension::Bimoment => {
                return self
                    .unit(Dimension::Moment)
                    .times_length(self.unit(Dimension::Length));
            }
            Dimension::Stress => self.units.stress,
            Dimension::LineLoad => {
                return self
                    .unit(Dimension::Force)
                    .over_length(self.unit(Dimension::Length));
            }
            Dimension::Density => return Unit::KG_PER_M3,
            Dimension::Angle => return Unit::DEGREE,
            Dimension::Slope => return Unit::PER_CENT,
        };
        // The reader of [units] lets known names pass only.
        Unit::named(name).unwrap_or(Unit::PER_CENT)
    }
}

fn plain_number(value: &Value<'_>) -> Option<f64> {
    match value.as_ref() {
        // Whole numbers beyond 2^53 round to the nearest, as any decimal does.
        ValueInner::Integer(number) => Some(*number as f64),
        ValueInner::Float(number) => Some(*number),
        _ => None,
    }
}

/// What a value is, in words.
pub(super) fn type_name(value: &Value<'_>) -> &'static str {
    match value.as_ref() {
        ValueInner::String(_) => "a text",
        ValueInner::Integer(_) | ValueInner::Float(_) => "a number",
        ValueInner::Boolean(_) => "true or false",
        ValueInner::Array(_) => "a list",
        ValueInner::Table(_) => "a table",
    }
}
