//! Cautions, rounds, media, publications, and the whole that is being made.

use std::collections::BTreeMap;

use super::entry::{id, seconds, sources, within, words};
use super::names::Names;
use super::tests::test;
use crate::decode::Section;
use crate::fault::Fault;
use crate::knowledge::{
    Cause, CauseId, Caution, Family, Finding, FindingId, Knowledge, Media, Reference, Round,
    Scales, Species, Step, StepId, WalkRules,
};
use crate::vocabulary::{EventId, ReadingId, Vocabulary};

/// The rule base while it is read.
pub(super) struct Made {
    pub findings: Vec<Finding>,
    pub causes: Vec<Cause>,
    pub steps: Vec<Step>,
    pub good: Vec<(StepId, CauseId, f64)>,
    pub harm: Vec<(StepId, CauseId, f64)>,
    pub cautions: Vec<Caution>,
    pub species: Vec<Species>,
    pub rounds: Vec<Round>,
    pub media: Vec<Media>,
    pub references: Vec<Reference>,
    pub families: Vec<Family>,
    pub scales: Option<Scales>,
    pub walk: Option<WalkRules>,
    pub pace: super::pace::Parts,
    digest: String,
}

pub(super) fn empty(digest: String) -> Made {
    Made {
        findings: Vec::new(),
        causes: Vec::new(),
        steps: Vec::new(),
        good: Vec::new(),
        harm: Vec::new(),
        cautions: Vec::new(),
        species: Vec::new(),
        rounds: Vec::new(),
        media: Vec::new(),
        references: Vec::new(),
        families: Vec::new(),
        scales: None,
        walk: None,
        pace: super::pace::Parts::default(),
        digest,
    }
}

/// Reads what is left of one file.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    for mut section in root.sections("caution") {
        let caution = caution(&mut section, names, made);
        section.finish();
        made.cautions.extend(caution);
    }
    for mut section in root.sections("round") {
        let round = round(&mut section, names, made);
        section.finish();
        made.rounds.extend(round);
    }
    for mut section in root.sections("media") {
        let media = media(&mut section, names, made);
        section.finish();
        made.media.extend(media);
    }
    for mut section in root.sections("source") {
        let reference = reference(&mut section);
        section.finish();
        made.references.extend(reference);
    }
}

fn caution(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Caution> {
    let id = id(section, |id| made.cautions.iter().any(|c| c.id == id));
    let about = words(section, "about");
    let always = section.flag("always").unwrap_or(false);
    let when = section.node("when").and_then(|n| test(&n, names, true));
    if !always && when.is_none() {
        section.fault(
            "no-test",
            "a caution without `when` is not `always`",
            "say when it applies",
        );
    }
    Some(Caution {
        text: words(section, "text")?,
        source: sources(section, names),
        id: id?,
        about: about?,
        always,
        when,
    })
}

fn round(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Round> {
    let id = id(section, |id| made.rounds.iter().any(|c| c.id == id));
    let text = words(section, "text");
    let every = section.required("every").and_then(|n| seconds(&n));
    let readings: Vec<ReadingId> = section.node("readings").map_or_else(Vec::new, |node| {
        let ids = node.texts().unwrap_or_default();
        ids.iter().filter_map(|r| names.reading(&node, r)).collect()
    });
    let events: Vec<EventId> = section.node("events").map_or_else(Vec::new, |node| {
        let ids = node.texts().unwrap_or_default();
        ids.iter().filter_map(|e| names.event(&node, e)).collect()
    });
    Some(Round {
        events,
        needs: section.node("needs").and_then(|n| test(&n, names, true)),
        why: section.text("why").unwrap_or_default(),
        place: section.text("place").unwrap_or_default(),
        protects: section.texts("protects"),
        source: sources(section, names),
        readings,
        id: id?,
        text: text?,
        every: every?,
    })
}

fn media(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Media> {
    Some(Media {
        id: id(section, |id| made.media.iter().any(|m| m.id == id))?,
        name: words(section, "name")?,
        area_m2_per_l: section
            .required("area_m2_per_l")
            .and_then(|n| within(&n, 0.001, 100.0))?,
        source: sources(section, names),
    })
}

fn reference(section: &mut Section<'_>) -> Option<Reference> {
    let year = section
        .node("year")
        .map_or(Some(String::new()), |node| match node.value() {
            crate::decode::Value::Integer(i) => Some(i.to_string()),
            _ => node.text(),
        });
    Some(Reference {
        key: words(section, "key")?,
        author: section.text("author").unwrap_or_default(),
        year: year?,
        title: section.text("title").unwrap_or_default(),
        location: section.text("where").unwrap_or_default(),
        seen: section.text("seen").unwrap_or_default(),
    })
}

impl Made {
    /// Orders the findings into levels and closes the rule base; a cycle is a fault that prints it.
    pub fn finish(
        self,
        vocabulary: Vocabulary,
        comfort: BTreeMap<(ReadingId, u8), f64>,
        faults: &mut Vec<Fault>,
    ) -> Option<Knowledge> {
        if !faults.is_empty() {
            return None; // ids are only sure to match their entries when every entry could be read
        }
        let Some(scales) = self.scales else {
            faults.push(Fault::whole(
                "no-scales",
                "the rule base has no `[scales]`",
                "add knowledge/scales.toml",
            ));
            return None;
        };
        let Some(walk) = self.walk else {
            faults.push(Fault::whole(
                "no-walk",
                "the rule base has no `[walk]`",
                "add knowledge/walk.toml",
            ));
            return None;
        };
        let pacing = super::pace::finish(self.pace, faults)?;
        let order = match order(&self.findings) {
            Ok(order) => order,
            Err(fault) => {
                faults.push(fault);
                return None;
            }
        };
        Some(Knowledge {
            vocabulary,
            comfort,
            findings: self.findings,
            order,
            causes: self.causes,
            steps: self.steps,
            cautions: self.cautions,
            species: self.species,
            rounds: self.rounds,
            media: self.media,
            references: self.references,
            families: self.families,
            scales,
            walk,
            pacing,
            digest: self.digest,
            house_rules: None,
        })
    }
}

/// Depth-first order; a finding met again while its own ground is being laid is a cycle.
fn order(findings: &[Finding]) -> Result<Vec<FindingId>, Fault> {
    #[derive(Clone, Copy, PartialEq)]
    enum State {
        New,
        Open,
        Done,
    }
    fn lay(
        at: usize,
        findings: &[Finding],
        state: &mut [State],
        path: &mut Vec<usize>,
        order: &mut Vec<FindingId>,
    ) -> Result<(), Fault> {
        match state[at] {
            State::Done => return Ok(()),
            State::Open => {
                let start = path.iter().position(|p| *p == at).unwrap_or(0);
                let mut names: Vec<&str> = path[start..]
                    .iter()
                    .map(|p| findings[*p].id.as_str())
                    .collect();
                names.push(&findings[at].id);
                return Err(Fault {
                    place: findings[at].place.clone(),
                    code: "cycle",
                    reason: format!("findings rest on each other: `{}`", names.join(" -> ")),
                    cure: "take one of these links out".to_owned(),
                });
            }
            State::New => {}
        }
        state[at] = State::Open;
        path.push(at);
        for next in findings[at].when.findings() {
            lay(next.index(), findings, state, path, order)?;
        }
        path.pop();
        state[at] = State::Done;
        order.extend(u16::try_from(at).ok().map(FindingId));
        Ok(())
    }
    let mut state = vec![State::New; findings.len()];
    let mut order = Vec::with_capacity(findings.len());
    for at in 0..findings.len() {
        lay(at, findings, &mut state, &mut Vec::new(), &mut order)?;
    }
    Ok(order)
}
