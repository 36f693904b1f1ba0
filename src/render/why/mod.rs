//! Explains one thing of the rule base: what it is, what it rests on, where its numbers come from.

mod cause;
mod finding;
mod limit;
mod proof;
mod sources;
mod step;
mod test;
mod words;

use super::block::Block;
use crate::engine::Limits;
use crate::fault::nearest;
use crate::knowledge::Knowledge;
use crate::site::Site;

pub use proof::{cause as cause_proof, finding as finding_proof};
pub use sources::citation;

/// What an explanation is written from.
#[derive(Debug, Clone, Copy)]
pub struct Book<'a> {
    /// The rule base.
    pub knowledge: &'a Knowledge,
    /// The farm, for its units and its limits.
    pub site: &'a Site,
    /// Its limits.
    pub limits: &'a Limits<'a>,
}

impl Book<'_> {
    /// Explains everything that has this id; `None` when nothing has.
    pub fn explain(&self, id: &str) -> Option<Vec<Block>> {
        let k = self.knowledge;
        let words = &k.vocabulary;
        let mut page = Vec::new();
        if let Some(cause) = k.cause(id) {
            cause::explain(self, cause, &mut page);
        }
        if let Some(finding) = k.finding(id) {
            finding::explain(self, finding, &mut page);
        }
        if let Some(step) = k.step(id) {
            step::explain(self, step, &mut page);
        }
        if let Some(reading) = words.reading(id) {
            words::reading(self, reading, &mut page);
        }
        if let Some(sign) = words.sign(id) {
            words::sign(self, sign, &mut page);
        }
        if let Some(event) = words.event(id) {
            words::event(self, event, &mut page);
        }
        for caution in k.cautions.iter().filter(|c| c.id == id) {
            words::caution(self, caution, &mut page);
        }
        for round in k.rounds.iter().filter(|r| r.id == id) {
            words::round(self, round, &mut page);
        }
        for family in k.families.iter().filter(|f| f.id == id) {
            words::family(self, family, &mut page);
        }
        for species in k.species.iter().filter(|s| s.id == id) {
            limit::species(self, species, &mut page);
        }
        for reference in k.references.iter().filter(|r| r.key == id) {
            sources::explain(self, reference, &mut page);
        }
        limit::explain(self, id, &mut page);
        (!page.is_empty()).then_some(page)
    }

    /// The id that was probably meant.
    pub fn nearest(&self, id: &str) -> Option<String> {
        let k = self.knowledge;
        let words = &k.vocabulary;
        let limits = limit::ids(k);
        let all = (k.causes.iter().map(|c| c.id.as_str()))
            .chain(k.findings.iter().map(|f| f.id.as_str()))
            .chain(k.steps.iter().map(|s| s.id.as_str()))
            .chain(words.readings.iter().map(|r| r.id.as_str()))
            .chain(words.signs.iter().map(|s| s.id.as_str()))
            .chain(words.events.iter().map(|e| e.id.as_str()))
            .chain(k.cautions.iter().map(|c| c.id.as_str()))
            .chain(k.rounds.iter().map(|r| r.id.as_str()))
            .chain(k.families.iter().map(|f| f.id.as_str()))
            .chain(k.species.iter().map(|s| s.id.as_str()))
            .chain(k.references.iter().map(|r| r.key.as_str()))
            .chain(limits.iter().map(String::as_str));
        nearest(id, all).map(str::to_owned)
    }

    /// A paragraph.
    fn para(page: &mut Vec<Block>, heading: &str, text: &str) {
        if !text.is_empty() {
            page.push(Block::Heading(heading.to_owned()));
            page.push(Block::Para(text.to_owned()));
        }
    }

    /// A list under a heading, where there is anything to list.
    fn list(page: &mut Vec<Block>, heading: &str, items: Vec<String>) {
        if !items.is_empty() {
            page.push(Block::Heading(heading.to_owned()));
            page.extend(items.into_iter().map(Block::Bullet));
        }
    }
}
