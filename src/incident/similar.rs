//! What it was last time: closed incidents of this farm that resembled what is seen now. They are shown beside the causes
//! and never move a probability.

use std::collections::BTreeSet;

use super::model::Incident;
use crate::engine::Engine;
use crate::knowledge::Knowledge;

/// A closed incident that resembled this.
#[derive(Debug, Clone, PartialEq)]
pub struct Similar {
    /// Its id.
    pub id: String,
    /// When it was opened, unix seconds.
    pub opened: i64,
    /// The confirmed cause's id.
    pub cause: String,
    /// Its name.
    pub name: String,
    /// Seconds until it was closed.
    pub took: i64,
    /// What came of it.
    pub outcome: Option<String>,
    /// How alike, 0 to 1.
    pub likeness: f64,
}

/// From this likeness on it is worth showing.
const ALIKE: f64 = 0.35;
/// So many are shown.
const SHOWN: usize = 3;
/// A finding or sign holds from this degree on.
const HOLDS: f64 = 0.5;

impl Similar {
    /// Ids of the findings and signs that hold, those that are rare on ordinary days first.
    pub fn holding(engine: &Engine<'_>, knowledge: &Knowledge) -> Vec<String> {
        let findings = knowledge.findings.iter().filter(|f| {
            knowledge
                .finding(&f.id)
                .is_some_and(|id| engine.finding(id).lo >= HOLDS)
        });
        let signs = knowledge.vocabulary.signs.iter().filter(|s| {
            knowledge.vocabulary.sign(&s.id).is_some_and(|id| {
                let degree = engine.evidence(crate::knowledge::Evidence::Sign(id));
                degree.lo >= HOLDS
            })
        });
        let mut all: Vec<(f64, &str)> = findings
            .map(|f| (f.background, f.id.as_str()))
            .chain(signs.map(|s| (s.background, s.id.as_str())))
            .filter(|(background, _)| *background < HOLDS)
            .collect();
        all.sort_by(|a, b| a.0.total_cmp(&b.0));
        all.into_iter().map(|(_, id)| id.to_owned()).collect()
    }
}

/// The most alike of closed incidents with a confirmed cause. Likeness is the share of what holds in both, each thing
/// weighed by how rarely it holds on ordinary days.
pub fn similar(holding: &[String], incidents: &[Incident], knowledge: &Knowledge) -> Vec<Similar> {
    let now: BTreeSet<&str> = holding.iter().map(String::as_str).collect();
    let weight = |ids: &BTreeSet<&str>| ids.iter().map(|id| rarity(id, knowledge)).sum::<f64>();
    let mut found: Vec<Similar> = incidents
        .iter()
        .filter_map(|incident| {
            let closed = incident.closed.as_ref()?;
            let cause = closed.cause.clone()?;
            let then: BTreeSet<&str> = incident.findings.iter().map(String::as_str).collect();
            let both = weight(&now.intersection(&then).copied().collect());
            let either = weight(&now.union(&then).copied().collect());
            let likeness = if either > 0.0 { both / either } else { 0.0 };
            (likeness >= ALIKE).then(|| Similar {
                id: incident.id.clone(),
                opened: incident.opened,
                name: knowledge
                    .cause(&cause)
                    .map_or_else(|| cause.clone(), |c| knowledge[c].name.clone()),
                cause,
                took: (closed.time - incident.opened).max(0),
                outcome: closed.outcome.clone(),
                likeness,
            })
        })
        .collect();
    found.sort_by(|a, b| b.likeness.total_cmp(&a.likeness));
    found.truncate(SHOWN);
    found
}

/// How much it tells that something holds: the less often it does on ordinary days, the more.
fn rarity(id: &str, knowledge: &Knowledge) -> f64 {
    let background = knowledge
        .finding(id)
        .map(|f| knowledge[f].background)
        .or_else(|| {
            let sign = knowledge.vocabulary.sign(id)?;
            Some(knowledge.vocabulary[sign].background)
        });
    -background.unwrap_or(0.1).clamp(0.001, 0.999).ln()
}
