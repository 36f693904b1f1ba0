//! What entries of every kind have in common: ids, sources, durations, shares.

use jiff::{Span, SpanRelativeTo, Unit};

use super::names::Names;
use crate::decode::{Node, Section};
use crate::fault::Place;
use crate::knowledge::Verify;

/// Seconds of a duration such as `30 min`, `3 d` or `2 weeks`, or a fault.
pub(super) fn seconds(node: &Node<'_>) -> Option<i64> {
    let text = node.text()?;
    let parsed = text.parse::<Span>().ok().and_then(|span| {
        span.total((Unit::Second, SpanRelativeTo::days_are_24_hours()))
            .ok()
    });
    match parsed {
        #[allow(clippy::cast_possible_truncation)]
        Some(total) if total > 0.0 && total < 1e10 => Some(total as i64),
        _ => {
            node.fault(
                "not-a-duration",
                format!("`{text}` is not a duration"),
                "write something like `30 min`, `6 h`, `3 d` or `2 weeks`",
            );
            None
        }
    }
}

/// A number within bounds, or a fault.
pub(super) fn within(node: &Node<'_>, low: f64, high: f64) -> Option<f64> {
    let value = node.number()?;
    if (low..=high).contains(&value) {
        return Some(value);
    }
    node.fault(
        "out-of-range",
        format!("`{}` is {value}, not between {low} and {high}", node.name()),
        format!("give a number from {low} to {high}"),
    );
    None
}

/// A share that must be there, strictly between 0 and 1 (a certainty could never be argued with).
pub(super) fn share(section: &mut Section<'_>, key: &str) -> Option<f64> {
    within(&section.required(key)?, 0.00001, 0.99999)
}

/// The sources of an entry; an entry without any is a fault.
pub(super) fn sources(section: &mut Section<'_>, names: &Names) -> Vec<String> {
    let Some(node) = section.node("source") else {
        section.fault(
            "no-source",
            "an entry with numbers names no source",
            "add `source = [\"…\"]`: a key of sources.toml, `common-practice` or `from-memory`",
        );
        return Vec::new();
    };
    let keys = node.texts().unwrap_or_default();
    for key in &keys {
        names.check_source(&node, key);
    }
    if keys.is_empty() {
        node.fault(
            "no-source",
            "the list of sources is empty",
            "name at least one source",
        );
    }
    keys
}

/// A text that must be there and say something.
pub(super) fn words(section: &mut Section<'_>, key: &str) -> Option<String> {
    let node = section.required(key)?;
    let text = node.text()?;
    if text.trim().is_empty() {
        node.fault(
            "no-words",
            format!("`{key}` is empty"),
            "say it in a few plain words",
        );
        return None;
    }
    Some(text)
}

/// A kebab-case id that must be there and be new.
pub(super) fn id(section: &mut Section<'_>, taken: impl Fn(&str) -> bool) -> Option<String> {
    let node = section.required("id")?;
    let text = node.text()?;
    let kebab = !text.is_empty()
        && text.split('-').all(|w| {
            !w.is_empty()
                && w.chars()
                    .all(|c| c.is_ascii_lowercase() || c.is_ascii_digit())
        });
    if !kebab {
        node.fault(
            "not-an-id",
            format!("`{text}` is not an id"),
            "write lower-case words joined by hyphens",
        );
    } else if taken(&text) {
        node.fault(
            "id-twice",
            format!("`{text}` is defined twice"),
            "take one out, or rename it",
        );
        return None;
    }
    Some(text)
}

/// `verify = { id = …, direction = …, by = … }`.
pub(super) fn verify(section: &mut Section<'_>, names: &Names) -> Option<Verify> {
    let mut table = section.section("verify")?;
    let id = table.required("id").and_then(|node| {
        let id = node.text()?;
        let known = names.vocabulary.reading(&id).is_some() || names.vocabulary.sign(&id).is_some();
        if !known {
            names.reading(&node, &id);
        }
        Some(id)
    });
    let direction = table.required("direction").and_then(|node| {
        let word = node.text()?;
        if !["rising", "falling", "steady", "gone"].contains(&word.as_str()) {
            node.fault(
                "unknown-word",
                format!("unknown direction `{word}`"),
                "use rising, falling, steady or gone",
            );
        }
        Some(word)
    });
    let by = table.required("by").and_then(|n| seconds(&n));
    table.finish();
    Some(Verify {
        id: id?,
        direction: direction?,
        by: by?,
    })
}

/// Where an entry is written, for messages about it later.
pub(super) fn place(section: &Section<'_>) -> Option<Place> {
    section.place()
}
