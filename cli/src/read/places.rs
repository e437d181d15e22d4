//! Where a section file states what only its geometry, or a later stage, can find fault with.

use std::ops::Range;

use super::ReadSection;
use super::fault::{Fault, Faults};
use super::geometry::{point, short};
use super::syntax::printable;

/// A probe that lies outside of the material by no more than this part of the section's size is meant
/// to lie on the edge: so far off is a point of a round edge written with six or seven digits.
const SLACK: f64 = 1e-6;

/// The text of a section file and the places in it that faults of its entries mark.
#[derive(Clone, Debug, PartialEq)]
pub struct Places {
    pub(super) file: String,
    /// The text of the file.
    pub text: String,
    /// By material: its name.
    pub(super) materials: Vec<Range<usize>>,
    /// By probe: its point.
    pub(super) probes: Vec<Range<usize>>,
    /// By cut: its name, or the table.
    pub(super) cuts: Vec<Range<usize>>,
}

impl ReadSection {
    /// The refusal of the file for `faults`, in the form that reading refuses in.
    #[must_use]
    pub fn refused(&self, faults: Vec<Fault>) -> Box<Faults> {
        Faults::new(&self.places.file, &self.places.text, faults)
    }

    /// The fault of the probe of index `probe` that lies outside of the material.
    #[must_use]
    pub fn probe_outside(&self, probe: usize) -> Fault {
        let (name, at) = self
            .section
            .probes
            .get(probe)
            .map_or_else(Default::default, |probe| (printable(&probe.name), probe.at));
        let near = self.domain.nearest_on_boundary(at).unwrap_or(at);
        marked(
            &self.places.probes,
            probe,
            "no material here",
            format!(
                "probe \"{name}\" lies outside of the material, {} {} from its edge",
                short(near.distance(at)),
                self.section.units.length
            ),
            format!(
                "the nearest point of the edge is {}; a probe may lie on the edge or inside",
                point(near)
            ),
        )
    }

    /// The fault of the cut of index `cut` that misses the material.
    #[must_use]
    pub fn cut_misses(&self, cut: usize) -> Fault {
        let (name, from, to) = self
            .section
            .cuts
            .get(cut)
            .map_or_else(Default::default, |cut| {
                (printable(&cut.name), cut.from, cut.to)
            });
        marked(
            &self.places.cuts,
            cut,
            "no material on it",
            format!(
                "cut \"{name}\" from {} to {} misses the material",
                point(from),
                point(to)
            ),
            "let the line run through the material; along an edge it does not, and its ends may lie \
             outside or inside",
        )
    }

    /// The fault of the material of index `material` that states no yield stress though something
    /// asks for it, such as the utilisation.
    #[must_use]
    pub fn yield_missing(&self, material: usize) -> Fault {
        let Some(stated) = self
            .section
            .materials
            .get(material)
            .filter(|_| !self.section.assumed_material)
        else {
            return Fault::whole(
                format!(
                    "{} has no material, and so no yield stress to compare with",
                    self.places.file
                ),
                "add a table such as [material.steel] with E, nu and yield",
            );
        };
        let name = printable(&stated.name);
        marked(
            &self.places.materials,
            material,
            "no `yield`",
            format!("material \"{name}\" has no yield stress to compare with"),
            format!("add the line `yield = …` to [material.{name}], in units.stress"),
        )
    }

    /// Moves probes that are outside by their rounding only onto the edge; the faults of those that
    /// are farther outside, and of cuts that miss the material.
    pub(super) fn settle(&mut self) -> Vec<Fault> {
        let slack = SLACK * self.domain.size();
        let mut faults = Vec::new();
        for i in 0..self.section.probes.len() {
            let at = self.section.probes[i].at;
            if self.domain.contains(at, 0.0) {
                continue;
            }
            match self.domain.nearest_on_boundary(at) {
                Some(near) if near.distance(at) <= slack => self.section.probes[i].at = near,
                _ => faults.push(self.probe_outside(i)),
            }
        }
        for (i, cut) in self.section.cuts.iter().enumerate() {
            if !self.domain.is_crossed(cut.from, cut.to) {
                faults.push(self.cut_misses(i));
            }
        }
        faults
    }
}

fn marked(
    places: &[Range<usize>],
    index: usize,
    remark: &str,
    message: String,
    remedy: impl Into<String>,
) -> Fault {
    match places.get(index) {
        Some(range) => Fault::at(range.clone(), remark, message, remedy),
        None => Fault::whole(message, remedy),
    }
}
