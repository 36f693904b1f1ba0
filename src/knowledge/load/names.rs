//! The first pass: every id there is, so that entries may refer to each other in any order.

use std::collections::{BTreeMap, HashMap, HashSet};

use toml::de::{DeTable, DeValue};

use crate::decode::Node;
use crate::fault::did_you_mean;
use crate::knowledge::{CauseId, FindingId, StepId};
use crate::vocabulary::{EventId, ReadingId, SignId, Vocabulary};

/// All ids of all files.
#[derive(Debug, Default)]
pub(super) struct Names {
    pub vocabulary: Vocabulary,
    pub comfort: BTreeMap<(ReadingId, u8), f64>,
    findings: HashMap<String, u16>,
    causes: HashMap<String, u16>,
    steps: HashMap<String, u16>,
    families: HashMap<String, Vec<CauseId>>,
    sources: HashSet<String>,
}

/// What stands for a source that is no publication.
const PLAIN_SOURCES: [&str; 4] = ["common-practice", "from-memory", "derived", "measured"];

impl Names {
    /// Takes the ids of one file; faults in them are found by the second pass.
    pub fn collect(&mut self, table: &DeTable<'_>) {
        for (id, entry) in entries(table, "cause", "id") {
            let number = insert(&mut self.causes, id);
            if let (Some(family), Some(number)) = (text(entry, "family"), number) {
                self.families
                    .entry(family.to_owned())
                    .or_default()
                    .push(CauseId(number));
            }
        }
        for (id, _) in entries(table, "finding", "id") {
            insert(&mut self.findings, id);
        }
        for (id, _) in entries(table, "step", "id") {
            insert(&mut self.steps, id);
        }
        for (key, _) in entries(table, "source", "key") {
            self.sources.insert(key.to_owned());
        }
    }

    pub fn finding(&self, node: &Node<'_>, id: &str) -> Option<FindingId> {
        let found = self.findings.get(id).copied().map(FindingId);
        report(
            node,
            "finding",
            id,
            found.is_some(),
            self.findings.keys().map(String::as_str),
        );
        found
    }

    pub fn cause(&self, node: &Node<'_>, id: &str) -> Option<CauseId> {
        let found = self.causes.get(id).copied().map(CauseId);
        report(
            node,
            "cause",
            id,
            found.is_some(),
            self.causes.keys().map(String::as_str),
        );
        found
    }

    /// A cause, or all causes of a family.
    pub fn causes(&self, node: &Node<'_>, id: &str) -> Vec<CauseId> {
        if let Some(members) = self.families.get(id) {
            return members.clone();
        }
        let known = self.causes.keys().chain(self.families.keys());
        let found = self.causes.get(id).copied().map(CauseId);
        report(
            node,
            "cause or family",
            id,
            found.is_some(),
            known.map(String::as_str),
        );
        found.into_iter().collect()
    }

    pub fn step(&self, node: &Node<'_>, id: &str) -> Option<StepId> {
        let found = self.steps.get(id).copied().map(StepId);
        report(
            node,
            "step",
            id,
            found.is_some(),
            self.steps.keys().map(String::as_str),
        );
        found
    }

    pub fn reading(&self, node: &Node<'_>, id: &str) -> Option<ReadingId> {
        let found = self.vocabulary.reading(id);
        let known = self.vocabulary.readings.iter().map(|r| r.id.as_str());
        report(node, "reading", id, found.is_some(), known);
        found
    }

    pub fn sign(&self, node: &Node<'_>, id: &str) -> Option<SignId> {
        let found = self.vocabulary.sign(id);
        let known = self.vocabulary.signs.iter().map(|r| r.id.as_str());
        report(node, "sign", id, found.is_some(), known);
        found
    }

    pub fn event(&self, node: &Node<'_>, id: &str) -> Option<EventId> {
        let found = self.vocabulary.event(id);
        let known = self.vocabulary.events.iter().map(|r| r.id.as_str());
        report(node, "event", id, found.is_some(), known);
        found
    }

    /// Checks a source key.
    pub fn check_source(&self, node: &Node<'_>, key: &str) {
        let known = self.sources.contains(key) || PLAIN_SOURCES.contains(&key);
        let all = self.sources.iter().map(String::as_str).chain(PLAIN_SOURCES);
        report(node, "source", key, known, all);
    }
}

fn report<'a>(
    node: &Node<'_>,
    what: &str,
    id: &str,
    known: bool,
    all: impl Iterator<Item = &'a str>,
) {
    if !known {
        node.fault(
            "unknown-id",
            format!("unknown {what} `{id}`"),
            did_you_mean(id, all, "define it, or use one that is defined"),
        );
    }
}

fn insert(ids: &mut HashMap<String, u16>, id: &str) -> Option<u16> {
    if ids.contains_key(id) {
        return None; // two of one id are reported when the entry is read
    }
    let number = u16::try_from(ids.len()).ok()?;
    ids.insert(id.to_owned(), number);
    Some(number)
}

fn text<'t>(table: &'t DeTable<'_>, key: &str) -> Option<&'t str> {
    match table.get(key)?.get_ref() {
        DeValue::String(s) => Some(s),
        _ => None,
    }
}

fn entries<'t>(
    table: &'t DeTable<'t>,
    kind: &'t str,
    id: &'t str,
) -> impl Iterator<Item = (&'t str, &'t DeTable<'t>)> {
    let list = match table.get(kind).map(toml::Spanned::get_ref) {
        Some(DeValue::Array(list)) => Some(list),
        _ => None,
    };
    list.into_iter().flatten().filter_map(move |item| {
        if let DeValue::Table(entry) = item.get_ref() {
            Some((text(entry, id)?, entry))
        } else {
            None
        }
    })
}
