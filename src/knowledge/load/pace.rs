//! Limits of pace, words of plans, rates and substances.

use std::collections::BTreeMap;
use std::collections::btree_map::Entry;

use super::entry::{sources, within, words};
use super::names::Names;
use super::rest::Made;
use crate::decode::Section;
use crate::fault::{Fault, did_you_mean};
use crate::knowledge::{
    Dosable, InstrumentDoubt, Kinetic, Kinetics, PaceLimit, PaceLimits, PaceWords, Pacing, Use,
};

/// The parts while they are read.
#[derive(Debug, Default)]
pub(super) struct Parts {
    limits: BTreeMap<String, PaceLimit>,
    words: BTreeMap<String, String>,
    kinetics: BTreeMap<String, Kinetic>,
    substances: Vec<Dosable>,
    doubts: Vec<InstrumentDoubt>,
}

/// Reads what one file has of them.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    let parts = &mut made.pace;
    for mut s in root.sections("pace_limit") {
        if let Some(id) = known_id(&mut s, PaceLimits::IDS)
            && let Some(limit) = limit(&mut s, &id, names)
        {
            put(&s, &mut parts.limits, id, limit);
        }
        s.finish();
    }
    for mut s in root.sections("pace_text") {
        if let Some(id) = known_id(&mut s, PaceWords::IDS)
            && let Some(text) = words(&mut s, "text")
        {
            put(&s, &mut parts.words, id, text);
        }
        s.finish();
    }
    for mut s in root.sections("kinetic") {
        if let Some(id) = known_id(&mut s, Kinetics::IDS)
            && let Some(kinetic) = kinetic(&mut s, names)
        {
            put(&s, &mut parts.kinetics, id, kinetic);
        }
        s.finish();
    }
    for mut s in root.sections("substance") {
        let substance = substance(&mut s, names);
        if let Some(substance) = substance {
            if parts.substances.iter().any(|o| o.id == substance.id) {
                twice(&s, &substance.id);
            } else {
                parts.substances.push(substance);
            }
        }
        s.finish();
    }
    for mut s in root.sections("pace_doubt") {
        let cause = s
            .required("cause")
            .and_then(|n| names.cause(&n, &n.text()?));
        let readings = s.node("readings").map_or_else(Vec::new, |node| {
            let ids = node.texts().unwrap_or_default();
            ids.iter().filter_map(|r| names.reading(&node, r)).collect()
        });
        s.finish();
        parts
            .doubts
            .extend(cause.map(|cause| InstrumentDoubt { cause, readings }));
    }
}

fn known_id(s: &mut Section<'_>, known: &[&str]) -> Option<String> {
    let node = s.required("id")?;
    let id = node.text()?;
    if known.contains(&id.as_str()) {
        return Some(id);
    }
    node.fault(
        "unknown-id",
        format!("nothing asks for `{id}`"),
        did_you_mean(&id, known.iter().copied(), "take it out"),
    );
    None
}

fn put<T>(s: &Section<'_>, all: &mut BTreeMap<String, T>, id: String, entry: T) {
    match all.entry(id) {
        Entry::Occupied(taken) => twice(s, taken.key()),
        Entry::Vacant(free) => {
            free.insert(entry);
        }
    }
}

fn twice(s: &Section<'_>, id: &str) {
    s.fault_at_key(
        "id",
        "id-twice",
        format!("`{id}` is defined twice"),
        "take one out",
    );
}

fn limit(s: &mut Section<'_>, id: &str, names: &Names) -> Option<PaceLimit> {
    let above_zero = |n: crate::decode::Node<'_>| within(&n, 1e-9, 1e6);
    let value = s.required("value").and_then(above_zero);
    let cold = s.node("cold").and_then(above_zero);
    Some(PaceLimit {
        id: id.to_owned(),
        name: words(s, "name")?,
        unit: words(s, "unit")?,
        instead: words(s, "instead")?,
        contested: s.text("contested").unwrap_or_default(),
        source: sources(s, names),
        value: value?,
        cold,
    })
}

fn kinetic(s: &mut Section<'_>, names: &Names) -> Option<Kinetic> {
    let value = s.required_number("value");
    let low = s.required_number("low");
    let high = s.required_number("high");
    let unit = words(s, "unit");
    let source = sources(s, names);
    let (value, low, high) = (value?, low?, high?);
    if !(low <= value && value <= high && low >= 0.0) {
        s.fault(
            "out-of-order",
            "`low`, `value` and `high` are not in order",
            "low must not be above value, nor value above high, nor low below 0",
        );
    }
    Some(Kinetic {
        value,
        low,
        high,
        unit: unit?,
        source,
    })
}

fn substance(s: &mut Section<'_>, names: &Names) -> Option<Dosable> {
    let used_as = s.required("use").and_then(|node| {
        let word = node.text()?;
        let found = Use::WORDS.iter().find(|(w, _)| *w == word);
        if found.is_none() {
            node.fault(
                "unknown-word",
                format!("unknown use `{word}`"),
                did_you_mean(&word, Use::WORDS.iter().map(|(w, _)| *w), "take it out"),
            );
        }
        found.map(|(_, used_as)| *used_as)
    });
    let percent = s.node("percent").and_then(|n| within(&n, 0.1, 100.0));
    let density = s.node("density").and_then(|n| within(&n, 0.5, 3.0));
    let mut gives = BTreeMap::new();
    if let Some(mut table) = s.section("gives") {
        for key in table.keys() {
            if let Some(value) = table.number(&key) {
                gives.insert(key, value);
            }
        }
        table.finish();
    }
    Some(Dosable {
        id: words(s, "id")?,
        name: words(s, "name")?,
        strong: s.flag("strong").unwrap_or(false),
        liquid: percent.zip(density),
        good_to_ph: s.number("good_to_ph"),
        per_chlorine: s.number("per_chlorine"),
        source: sources(s, names),
        used_as: used_as?,
        gives,
    })
}

/// Closes the parts; what is missing is a fault each.
pub(super) fn finish(mut parts: Parts, faults: &mut Vec<Fault>) -> Option<Pacing> {
    let mut miss = |what: &str, id: &str| {
        faults.push(Fault::whole(
            "missing-entry",
            format!("the rule base has no {what} `{id}`"),
            "add it; see knowledge/README.md",
        ));
    };
    for id in PaceLimits::IDS
        .iter()
        .filter(|id| !parts.limits.contains_key(**id))
    {
        miss("pace limit", id);
    }
    for id in PaceWords::IDS
        .iter()
        .filter(|id| !parts.words.contains_key(**id))
    {
        miss("text of plans", id);
    }
    for id in Kinetics::IDS
        .iter()
        .filter(|id| !parts.kinetics.contains_key(**id))
    {
        miss("rate", id);
    }
    Some(Pacing {
        limits: PaceLimits::gather(|id| parts.limits.remove(id))?,
        words: PaceWords::gather(|id| parts.words.remove(id))?,
        kinetics: Kinetics::gather(|id| parts.kinetics.remove(id))?,
        substances: parts.substances,
        doubts: parts.doubts,
    })
}
