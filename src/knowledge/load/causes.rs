//! `causes/*.toml`.

use super::entry::{id, place, share, sources, verify, within, words};
use super::findings::urgency;
use super::names::Names;
use super::rest::Made;
use super::tests::test;
use crate::decode::Section;
use crate::knowledge::{Cause, CauseId, Effect, Evidence, Lookalike, StepId, Test, Trigger};

/// Reads the causes of one file.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    for mut section in root.sections("cause") {
        let number = u16::try_from(made.causes.len()).unwrap_or(u16::MAX);
        let cause = one(&mut section, names, made);
        let good = steps(&mut section, "steps", names);
        let harm = steps(&mut section, "avoid", names);
        section.finish();
        if let Some(cause) = cause {
            made.causes.push(cause);
            let number = CauseId(number);
            made.good
                .extend(good.into_iter().map(|(s, v)| (s, number, v)));
            made.harm
                .extend(harm.into_iter().map(|(s, v)| (s, number, v)));
        }
    }
}

fn one(section: &mut Section<'_>, names: &Names, made: &Made) -> Option<Cause> {
    let id = id(section, |id| made.causes.iter().any(|c| c.id == id));
    let name = words(section, "name");
    let family = words(section, "family");
    let urgency = section.required("urgency").and_then(|n| urgency(&n));
    let usual = share(section, "usual");
    let mechanism = words(section, "mechanism");
    let outlook = words(section, "outlook");
    let better = words(section, "better");
    let call = words(section, "call");
    let triggers = section
        .sections("trigger")
        .into_iter()
        .filter_map(|s| trigger(s, names))
        .collect();
    let effects = section
        .sections("effect")
        .into_iter()
        .filter_map(|s| effect(s, names))
        .collect();
    let lookalikes = section
        .sections("lookalike")
        .into_iter()
        .filter_map(|s| lookalike(s, names))
        .collect();
    Some(Cause {
        verify: verify(section, names),
        source: sources(section, names),
        place: place(section),
        id: id?,
        name: name?,
        family: family?,
        urgency: urgency?,
        usual: usual?,
        mechanism: mechanism?,
        outlook: outlook?,
        better: better?,
        call: call?,
        triggers,
        effects,
        lookalikes,
    })
}

fn trigger(mut section: Section<'_>, names: &Names) -> Option<Trigger> {
    let when = section
        .required("when")
        .and_then(|n| test(&n, names, false));
    let odds_times = section
        .required("odds_times")
        .and_then(|n| within(&n, 0.001, 1000.0));
    let if_not = section
        .node("odds_times_if_not")
        .map_or(Some(1.0), |n| within(&n, 0.001, 1000.0));
    let source = sources(&mut section, names);
    section.finish();
    Some(Trigger {
        when: when?,
        odds_times: odds_times?,
        odds_times_if_not: if_not?,
        source,
    })
}

fn effect(mut section: Section<'_>, names: &Names) -> Option<Effect> {
    let evidence = section
        .required("when")
        .and_then(|node| match test(&node, names, false)? {
            Test::Finding(id) => Some(Evidence::Finding(id)),
            Test::Sign { sign, within: None } => Some(Evidence::Sign(sign)),
            _ => {
                node.fault(
                    "effect-needs-finding",
                    "an effect is a finding or a sign",
                    "define a finding with this test and a background, and name it here",
                );
                None
            }
        });
    let seen_in = share(&mut section, "seen_in");
    let delay = section.text("delay").unwrap_or_default();
    let source = sources(&mut section, names);
    section.finish();
    Some(Effect {
        evidence: evidence?,
        seen_in: seen_in?,
        delay,
        source,
    })
}

fn lookalike(mut section: Section<'_>, names: &Names) -> Option<Lookalike> {
    let cause = section
        .required("cause")
        .and_then(|n| names.cause(&n, &n.text()?));
    let tell = words(&mut section, "tell");
    section.finish();
    Some(Lookalike {
        cause: cause?,
        tell: tell?,
    })
}

fn steps(section: &mut Section<'_>, key: &str, names: &Names) -> Vec<(StepId, f64)> {
    let Some(mut table) = section.section(key) else {
        return Vec::new();
    };
    let mut found = Vec::new();
    for id in table.keys() {
        let Some(node) = table.node(&id) else {
            continue;
        };
        if let (Some(step), Some(value)) = (names.step(&node, &id), within(&node, 0.0, 1.0)) {
            found.push((step, value));
        }
    }
    table.finish();
    found
}
