//! Lists of what the rule base holds, and what it rests on.

use serde_json::{Map, Value, json};

use super::Look;
use super::block::{Block, sentence};
use super::text::text;
use super::why::citation;
use crate::knowledge::{Coverage, Knowledge, SourceUse};

/// Entries of one kind: what the kind is called, and ids with their words.
pub type Part<'k> = (&'static str, Vec<(&'k str, &'k str)>);

/// Everything there is, by kind.
pub fn catalog(base: &Knowledge) -> Vec<Part<'_>> {
    let words = &base.vocabulary;
    macro_rules! part {
        ($items:expr, $id:ident, $words:ident) => {
            $items
                .iter()
                .map(|i| (i.$id.as_str(), i.$words.as_str()))
                .collect()
        };
    }
    vec![
        ("causes", part!(base.causes, id, name)),
        ("findings", part!(base.findings, id, name)),
        ("steps", part!(base.steps, id, text)),
        ("readings", part!(words.readings, id, name)),
        ("signs", part!(words.signs, id, name)),
        ("events", part!(words.events, id, name)),
        ("species", part!(base.species, id, name)),
        ("cautions", part!(base.cautions, id, text)),
        ("rounds", part!(base.rounds, id, text)),
        ("media", part!(base.media, id, name)),
        ("families", part!(base.families, id, name)),
        ("sources", part!(base.references, key, title)),
    ]
}

/// A list for a person.
pub fn list_text(parts: &[Part<'_>], look: Look) -> String {
    let mut page = Vec::new();
    for (kind, items) in parts {
        page.push(Block::Heading(format!("{kind} ({})", items.len())));
        page.extend(
            items
                .iter()
                .map(|(id, words)| Block::Bullet(format!("{id}: {words}"))),
        );
    }
    text(&page, look)
}

/// A list for a program.
pub fn list_json(parts: &[Part<'_>]) -> String {
    let mut all = Map::from_iter([("schema".to_owned(), json!(1))]);
    for (kind, items) in parts {
        let items: Vec<Value> = items
            .iter()
            .map(|(id, text)| json!({"id": id, "text": text}))
            .collect();
        all.insert((*kind).to_owned(), json!(items));
    }
    format!("{:#}\n", Value::Object(all))
}

/// What a check without faults says.
pub fn checked(base: &Knowledge, files: usize) -> String {
    let counts: Vec<String> = catalog(base)
        .iter()
        .map(|(kind, items)| format!("{} {kind}", items.len()))
        .collect();
    format!("{files} files, no faults: {}.\n", counts.join(", "))
}

/// What rests on which source, for a person. `whole` names every entry.
pub fn sources_text(
    base: &Knowledge,
    coverage: &Coverage<'_>,
    uses: &[&SourceUse<'_>],
    whole: bool,
    look: Look,
) -> String {
    let mut page = Vec::new();
    if !whole {
        page.push(Block::Para(format!(
            "{} entries name sources. {} ({}) rest on a publication, at least in part; {} ({}) rest on nothing but \
             memory; the rest is common practice, measured here, or arithmetic.",
            coverage.entries,
            coverage.published,
            share(coverage.published, coverage.entries),
            coverage.from_memory_only,
            share(coverage.from_memory_only, coverage.entries),
        )));
    }
    for used in uses {
        page.push(Block::Bullet(format!(
            "{:>4}  {}",
            used.entries.len(),
            citation(base, &used.key)
        )));
        if whole {
            page.extend(
                used.entries
                    .iter()
                    .map(|e| Block::Under(format!("{} {}", sentence(e.kind), e.id))),
            );
        }
    }
    text(&page, look)
}

fn share(part: usize, whole: usize) -> String {
    #[allow(clippy::cast_precision_loss)] // counts of a rule base are small
    let percent = 100.0 * part as f64 / whole.max(1) as f64;
    format!("{percent:.0}%")
}

/// What rests on which source, for a program.
pub fn sources_json(base: &Knowledge, coverage: &Coverage<'_>, uses: &[&SourceUse<'_>]) -> String {
    let uses: Vec<Value> = uses
        .iter()
        .map(|u| {
            let entries = u
                .entries
                .iter()
                .map(|e| json!({"kind": e.kind, "id": e.id}));
            json!({
                "key": u.key,
                "text": citation(base, &u.key),
                "entries": entries.collect::<Vec<_>>(),
            })
        })
        .collect();
    let all = json!({
        "schema": 1,
        "entries": coverage.entries,
        "published": coverage.published,
        "from_memory_only": coverage.from_memory_only,
        "sources": uses,
    });
    format!("{all:#}\n")
}
