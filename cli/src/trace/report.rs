//! What was found in a drawing and done with it.

use std::collections::BTreeMap;

use sectile_mesh::outline::side::Side;

use super::chain::Joint;
use super::drawing::Drawing;
use super::loops::Tolerances;
use super::nest::Piece;
use super::number::{place, short};

/// Joints that are told one by one.
const MOST_TOLD: usize = 5;

/// Counts and lengths.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Report {
    lines: usize,
    arcs: usize,
    curves: usize,
    departure: f64,
    /// Sides that lay on others and were left out.
    pub overlapping: usize,
    /// Sides that had no length and were left out.
    pub short: usize,
    /// Ends that were joined.
    pub joints: Vec<Joint>,
    outlines: usize,
    holes: usize,
    size: f64,
    chord: f64,
    gap: f64,
    layers: Vec<String>,
}

impl Report {
    /// Of a drawing that has not been traced yet.
    #[must_use]
    pub fn new(drawing: &Drawing, tolerances: &Tolerances) -> Self {
        Self {
            size: tolerances.size,
            chord: tolerances.chord,
            gap: tolerances.gap,
            layers: drawing
                .used_layers()
                .into_iter()
                .map(|layer| drawing.layers[layer].clone())
                .collect(),
            ..Self::default()
        }
    }

    /// A line, arc or circle of the drawing.
    pub fn side(&mut self, side: &Side) {
        if side.arc.is_some() {
            self.arcs += 1;
        } else {
            self.lines += 1;
        }
    }

    /// A curve of the drawing, which became arcs.
    pub fn curve(&mut self, departure: f64) {
        self.curves += 1;
        self.departure = self.departure.max(departure);
    }

    /// What came out.
    pub fn pieces(&mut self, pieces: &[Piece]) {
        self.outlines = pieces.len();
        self.holes = pieces.iter().map(|piece| piece.holes.len()).sum();
    }

    /// The sentences, without full stops where they stand alone on a line.
    #[must_use]
    pub fn sentences(&self, drawing: &Drawing) -> Vec<String> {
        let mut out = vec![format!(
            "Lengths are in {}, {}; the drawing is {} wide or high.",
            drawing.unit,
            drawing.unit_from,
            short(self.size)
        )];
        let what: Vec<String> = [
            counted_one(self.lines, "line"),
            counted_one(self.arcs, "arc or circle"),
            counted_one(self.curves, "other curve"),
        ]
        .into_iter()
        .flatten()
        .collect();
        let layers = match self.layers.len() {
            0 | 1 => String::new(),
            n if n <= 8 => format!(" on the layers {}", self.layers.join(", ")),
            n => format!(" on {n} layers"),
        };
        out.push(format!(
            "Traced: {}{layers}, into {} and {}.",
            what.join(", "),
            number_of(self.outlines, "outline"),
            number_of(self.holes, "hole"),
        ));
        if self.curves > 0 {
            out.push(format!(
                "Other curves became arcs within {}; the largest departure found is {}.",
                short(self.chord),
                short(self.departure)
            ));
        }
        if self.overlapping > 0 {
            out.push(format!(
                "Left out, because they lay on others: {}.",
                number_of(self.overlapping, "side")
            ));
        }
        if self.short > 0 {
            out.push(format!(
                "Left out, because they had no length: {}.",
                number_of(self.short, "side")
            ));
        }
        out.extend(self.joined());
        if !drawing.ignored.is_empty() {
            out.push(format!("Not read: {}.", counted(&drawing.ignored)));
        }
        out.extend(drawing.notes.iter().cloned());
        out
    }

    fn joined(&self) -> Option<String> {
        let mut joints: Vec<&Joint> = self.joints.iter().collect();
        joints.sort_by(|a, b| b.width.total_cmp(&a.width));
        let first = joints.first()?;
        if joints.len() == 1 {
            return Some(format!(
                "Joined: 1 gap, {} wide, at {} (--gap {}).",
                short(first.width),
                place(first.at, self.size),
                short(self.gap)
            ));
        }
        let told: Vec<String> = joints
            .iter()
            .take(MOST_TOLD)
            .map(|joint| format!("{} at {}", short(joint.width), place(joint.at, self.size)))
            .collect();
        Some(format!(
            "Joined: {} gaps (--gap {}), the widest {}.",
            joints.len(),
            short(self.gap),
            told.join(", ")
        ))
    }
}

/// "3 TEXT, 1 DIMENSION".
#[must_use]
pub fn counted(kinds: &BTreeMap<String, usize>) -> String {
    let parts: Vec<String> = kinds
        .iter()
        .map(|(kind, count)| format!("{count} {kind}"))
        .collect();
    parts.join(", ")
}

fn counted_one(count: usize, what: &str) -> Option<String> {
    (count > 0).then(|| number_of(count, what))
}

fn number_of(count: usize, what: &str) -> String {
    match (count, what) {
        (1, _) => format!("1 {what}"),
        (n, "arc or circle") => format!("{n} arcs and circles"),
        (n, _) => format!("{n} {what}s"),
    }
}
