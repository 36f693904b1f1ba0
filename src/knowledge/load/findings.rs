//! `findings/*.toml`.

use super::entry::{id, place, share, sources, words};
use super::names::Names;
use super::rest::Made;
use super::tests::test;
use crate::decode::Section;
use crate::knowledge::{Finding, Urgency};

/// Reads the findings of one file.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    for mut section in root.sections("finding") {
        let finding = one(&mut section, names, made);
        section.finish();
        made.findings.extend(finding);
    }
}

fn one(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Finding> {
    let id = id(section, |id| made.findings.iter().any(|f| f.id == id));
    let name = words(section, "name");
    let when = section
        .required("when")
        .and_then(|n| test(&n, names, false));
    let background = share(section, "background");
    let danger = section.node("danger").and_then(|n| urgency(&n));
    Some(Finding {
        group: section.text("group").unwrap_or_default(),
        alarming: section.flag("alarming").unwrap_or(false),
        distress: section.flag("distress").unwrap_or(false),
        source: sources(section, names),
        place: place(section),
        danger,
        id: id?,
        name: name?,
        when: when?,
        background: background?,
    })
}

/// One of the words for urgency, or a fault.
pub(super) fn urgency(node: &crate::decode::Node<'_>) -> Option<Urgency> {
    let word = node.text()?;
    let found = Urgency::from_word(&word);
    if found.is_none() {
        node.fault(
            "unknown-word",
            format!("unknown urgency `{word}`"),
            "use minutes, hours, days or weeks",
        );
    }
    found
}
