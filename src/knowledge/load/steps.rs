//! `steps/*.toml`.

use std::collections::BTreeMap;

use super::entry::{id, place, sources, verify, within, words};
use super::names::Names;
use super::rest::Made;
use super::tests::test;
use crate::decode::Section;
use crate::knowledge::{CauseId, Step, When};

/// Reads the steps of one file.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    for mut section in root.sections("step") {
        let step = one(&mut section, names, made);
        section.finish();
        made.steps.extend(step);
    }
}

fn one(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Step> {
    let id = id(section, |id| made.steps.iter().any(|s| s.id == id));
    let temptation = section.flag("temptation").unwrap_or(false);
    let text = words(section, "text");
    let when = section.required("when").and_then(|node| {
        let word = node.text()?;
        let found = When::from_word(&word);
        if found.is_none() {
            node.fault(
                "unknown-word",
                format!("unknown `when` `{word}`"),
                "use now, hours, days or recovery",
            );
        }
        found
    });
    let effort = section
        .node("effort")
        .map_or(Some(5.0), |n| within(&n, 0.1, 10_000.0));
    let avoid_text = section.text("avoid_text").unwrap_or_default();
    if temptation && avoid_text.trim().is_empty() {
        section.fault(
            "no-words",
            "a temptation has no `avoid_text`",
            "say what not to do and why",
        );
    }
    let needs = section.node("needs").and_then(|n| test(&n, names, true));
    let never_if = section.node("never_if").and_then(|n| test(&n, names, true));
    let check_first = section.text("check_first").unwrap_or_default();
    if never_if.is_some() && check_first.trim().is_empty() {
        section.fault(
            "no-words",
            "`never_if` without `check_first`",
            "say what to look at first when it is not known",
        );
    }
    Some(Step {
        detail: section.text("detail").unwrap_or_default(),
        first_aid: section.flag("first_aid").unwrap_or(false),
        people_first: section.flag("people_first").unwrap_or(false),
        pinned: section.flag("pinned").unwrap_or(false),
        looks: section.flag("looks").unwrap_or(false),
        choice: section.text("choice").unwrap_or_default(),
        helps: amounts(section, "helps", names),
        harms: amounts(section, "harms", names),
        equipment: section.text("equipment"),
        verify: verify(section, names),
        pace: section.text("pace"),
        source: sources(section, names),
        place: place(section),
        temptation,
        needs,
        never_if,
        check_first,
        avoid_text,
        id: id?,
        text: text?,
        when: when?,
        effort: effort?,
    })
}

fn amounts(section: &mut Section<'_>, key: &str, names: &Names) -> BTreeMap<CauseId, f64> {
    let mut found = BTreeMap::new();
    let Some(mut table) = section.section(key) else {
        return found;
    };
    for id in table.keys() {
        let Some(node) = table.node(&id) else {
            continue;
        };
        if let Some(value) = within(&node, 0.0, 1.0) {
            for cause in names.causes(&node, &id) {
                found.insert(cause, value);
            }
        }
    }
    table.finish();
    found
}

/// Adds what the causes say of the steps to the steps; what a cause says wins over what a step says of its family.
pub(super) fn join(made: &mut Made) {
    for (step, cause, value) in made.good.drain(..) {
        if let Some(step) = made.steps.get_mut(step.index()) {
            step.helps.insert(cause, value);
        }
    }
    for (step, cause, value) in made.harm.drain(..) {
        if let Some(step) = made.steps.get_mut(step.index()) {
            step.harms.insert(cause, value);
        }
    }
}
