//! What is wrong between entries of the rule base that each can be read: findings nothing rests on, causes that show
//! nothing, steps no cause uses.

use super::{Evidence, Knowledge, Test};
use crate::fault::{Fault, Place};

/// Checks the whole rule base; an empty list is a clean one.
pub fn check(knowledge: &Knowledge) -> Vec<Fault> {
    let mut faults = Vec::new();
    unreachable_findings(knowledge, &mut faults);
    causes(knowledge, &mut faults);
    families(knowledge, &mut faults);
    steps(knowledge, &mut faults);
    rounds(knowledge, &mut faults);
    faults
}

fn fault(place: Option<&Place>, code: &'static str, reason: String, cure: &str) -> Fault {
    Fault {
        place: place.cloned(),
        code,
        reason,
        cure: cure.to_owned(),
    }
}

/// A finding is used by a cause, a caution, a step or another finding, or it is a danger of its own.
fn unreachable_findings(knowledge: &Knowledge, faults: &mut Vec<Fault>) {
    let mut used = vec![false; knowledge.findings.len()];
    let mut mark = |test: &Test| {
        for id in test.findings() {
            used[id.index()] = true;
        }
    };
    for finding in &knowledge.findings {
        mark(&finding.when);
    }
    for cause in &knowledge.causes {
        for trigger in &cause.triggers {
            mark(&trigger.when);
        }
    }
    for test in knowledge
        .steps
        .iter()
        .flat_map(|s| [&s.needs, &s.never_if])
        .chain(knowledge.cautions.iter().map(|c| &c.when))
        .chain(knowledge.rounds.iter().map(|r| &r.needs))
        .flatten()
    {
        mark(test);
    }
    for effect in knowledge.causes.iter().flat_map(|c| &c.effects) {
        if let Evidence::Finding(id) = effect.evidence {
            used[id.index()] = true;
        }
    }
    for (finding, used) in knowledge.findings.iter().zip(used) {
        if !used && finding.danger.is_none() {
            faults.push(fault(
                finding.place.as_ref(),
                "unused-finding",
                format!("nothing uses the finding `{}`", finding.id),
                "make it an effect or a trigger of a cause, or take it out",
            ));
        }
    }
}

fn causes(knowledge: &Knowledge, faults: &mut Vec<Fault>) {
    for (index, cause) in knowledge.causes.iter().enumerate() {
        let place = cause.place.as_ref();
        if cause.effects.is_empty() {
            faults.push(fault(
                place,
                "cause-without-effect",
                format!("the cause `{}` has no effect", cause.id),
                "say what it shows",
            ));
        }
        if cause.verify.is_none() {
            faults.push(fault(
                place,
                "cause-without-verify",
                format!("the cause `{}` does not say how recovery shows", cause.id),
                "add `verify = { id = …, direction = …, by = … }`",
            ));
        }
        for (n, effect) in cause.effects.iter().enumerate() {
            if cause.effects[..n]
                .iter()
                .any(|e| e.evidence == effect.evidence)
            {
                faults.push(fault(
                    place,
                    "effect-twice",
                    format!("the cause `{}` names one effect twice", cause.id),
                    "keep one of the two",
                ));
            }
        }
        let helped = knowledge.steps.iter().any(|s| {
            s.helps
                .iter()
                .any(|(c, good)| c.index() == index && *good > 0.0 && !s.temptation)
        });
        if !helped {
            faults.push(fault(
                place,
                "cause-without-step",
                format!("no step helps under the cause `{}`", cause.id),
                "name one in its `[cause.steps]`",
            ));
        }
    }
}

/// Every family has a name that can lead a page, and every name has causes.
fn families(knowledge: &Knowledge, faults: &mut Vec<Fault>) {
    for (index, cause) in knowledge.causes.iter().enumerate() {
        let named = knowledge.families.iter().any(|f| f.id == cause.family);
        let told = knowledge.causes[..index]
            .iter()
            .any(|c| c.family == cause.family);
        if !named && !told {
            faults.push(fault(
                cause.place.as_ref(),
                "family-without-name",
                format!("the family `{}` has no name", cause.family),
                "add a `[[family]]` with its id and name to scales.toml",
            ));
        }
    }
    for family in &knowledge.families {
        if knowledge.family(&family.id).next().is_none() {
            faults.push(fault(
                family.place.as_ref(),
                "unused-family",
                format!("no cause is of the family `{}`", family.id),
                "take it out, or correct its id",
            ));
        }
    }
}

fn steps(knowledge: &Knowledge, faults: &mut Vec<Fault>) {
    for step in &knowledge.steps {
        if step.helps.is_empty() && step.harms.is_empty() {
            faults.push(fault(
                step.place.as_ref(),
                "unused-step",
                format!("no cause uses the step `{}`", step.id),
                "name it in a cause's steps or avoid, or take it out",
            ));
        }
        if step.temptation && step.helps.values().any(|v| *v > 0.0) {
            faults.push(fault(
                step.place.as_ref(),
                "temptation-helps",
                format!("the temptation `{}` is said to help", step.id),
                "a temptation is never advised; take the good out or drop `temptation`",
            ));
        }
    }
}

fn rounds(knowledge: &Knowledge, faults: &mut Vec<Fault>) {
    for round in &knowledge.rounds {
        for cause in &round.protects {
            if knowledge.cause(cause).is_none() {
                faults.push(fault(
                    None,
                    "unknown-id",
                    format!(
                        "the round `{}` guards against an unknown cause `{cause}`",
                        round.id
                    ),
                    "use a cause's id",
                ));
            }
        }
    }
}
