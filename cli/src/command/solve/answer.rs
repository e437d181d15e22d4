//! All that is known of one section, for whatever tells it.

use sectile_solver::material::Material;
use sectile_solver::solution::Solution;

use crate::read::ReadSection;
use crate::report;
use crate::response::{Names, Responses};
use crate::section::materials_used;
use crate::write::json::{Results, Run};

/// All that is known of one section.
pub(super) struct Answer {
    /// The section file as `results.json` names it.
    pub source: String,
    pub read: ReadSection,
    pub solution: Solution,
    pub responses: Option<Responses>,
}

impl Answer {
    pub fn names(&self) -> Names<'_> {
        Names {
            pieces: &self.read.domain.piece_names,
            probes: &self.read.section.probes,
            cuts: &self.read.section.cuts,
            seams: &self.read.domain.seams,
            stated: &self.read.section.seams,
            materials: &self.read.section.materials,
        }
    }

    /// The material that the properties of a section of several refer to.
    pub fn reference(&self) -> Option<&Material> {
        self.read.section.reference_of(&self.read.domain)
    }

    pub fn report<'a>(
        &'a self,
        figures: &'a [(String, String)],
        exclusion: f64,
    ) -> report::Input<'a> {
        report::Input {
            source: &self.source,
            text: &self.read.places.text,
            section: &self.read.section,
            domain: &self.read.domain,
            solution: &self.solution,
            responses: self.responses.as_ref(),
            names: self.names(),
            reference: self.reference(),
            figures,
            exclusion,
            watched: false,
        }
    }

    pub fn results(&self, run: &Run) -> Results {
        let section = &self.read.section;
        let units = &section.units;
        let results = Results::new(&section.title, &self.source, units, &self.solution, run)
            .with_seams(&self.names(), self.responses.as_ref());
        let results = match self.reference() {
            Some(reference) => results.with_materials(
                units,
                &self.names(),
                &materials_used(&self.read.domain),
                &reference.name,
                self.responses.as_ref(),
            ),
            None => results,
        };
        match &self.responses {
            None => results,
            Some(responses) => {
                results.with_responses(units, &self.names(), &self.solution, responses)
            }
        }
    }
}
