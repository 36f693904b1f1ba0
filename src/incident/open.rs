//! A new incident from an assessment: what was seen, the ranking, the steps chosen, the checks due.

use super::follow::Book;
use super::model::{Avoided, Checked, Incident, MadeBy, Ranked, Taken};
use crate::assessment::{Assessment, StepReport};
use crate::knowledge::{Knowledge, When};

/// What an incident is opened from.
#[derive(Debug, Clone, Copy)]
pub struct Opening<'a> {
    /// The outcome of the diagnosis.
    pub assessment: &'a Assessment,
    /// What it rests on, and what is taken for now.
    pub book: Book<'a>,
    /// What was seen, in words.
    pub seen: &'a [String],
    /// Ids of the findings and signs that hold.
    pub findings: &'a [String],
    /// Who.
    pub by: Option<&'a str>,
}

/// So many causes of the ranking are kept.
const RANKING: usize = 8;
/// So many steps of each time are chosen.
const STEPS: [(When, usize); 4] = [
    (When::Now, 5),
    (When::Hours, 4),
    (When::Days, 3),
    (When::Recovery, 2),
];

/// The incident; it has no id yet, that is the folder's to give.
pub fn opened(opening: &Opening<'_>) -> Incident {
    let a = opening.assessment;
    let title = match (&a.leading_family, a.causes.first()) {
        (Some(family), _) => family.name.clone(),
        (None, Some(cause)) => cause.name.clone(),
        (None, None) => "Something is wrong, nobody knows what yet".to_owned(),
    };
    let mut steps: Vec<Taken> = a
        .first_aid
        .iter()
        .map(|step| taken(step, opening))
        .collect();
    for (when, most) in STEPS {
        let of_that_time = a.steps.iter().filter(|s| s.when == when).take(most);
        for step in of_that_time {
            if !steps.iter().any(|t| t.id == step.id) {
                steps.push(taken(step, opening));
            }
        }
    }
    Incident {
        id: String::new(),
        title,
        opened: opening.book.now,
        by: opening.by.map(str::to_owned),
        verdict: a.verdict.word().to_owned(),
        seen: opening.seen.to_vec(),
        findings: opening.findings.to_vec(),
        made_by: made_by(opening.book.knowledge),
        ranking: ranking(a),
        steps,
        avoid: a
            .avoid
            .iter()
            .map(|w| Avoided {
                id: w.id.clone(),
                text: w.text.clone(),
            })
            .collect(),
        plan: Vec::new(),
        notes: Vec::new(),
        follows: Vec::new(),
        reopened: Vec::new(),
        closed: None,
    }
}

/// This program and its rule base.
pub(super) fn made_by(knowledge: &Knowledge) -> MadeBy {
    MadeBy {
        version: env!("CARGO_PKG_VERSION").to_owned(),
        knowledge: knowledge.digest.clone(),
        house_rules: knowledge.house_rules.clone(),
    }
}

/// The likeliest causes as they stand.
pub(super) fn ranking(assessment: &Assessment) -> Vec<Ranked> {
    assessment
        .causes
        .iter()
        .take(RANKING)
        .map(|c| Ranked {
            id: c.id.clone(),
            name: c.name.clone(),
            probability: (c.probability * 1e4).round() / 1e4,
        })
        .collect()
}

fn taken(step: &StepReport, opening: &Opening<'_>) -> Taken {
    // A step reckons from the last row, an incident from when it was opened.
    let later = (opening.book.now - opening.assessment.as_of).max(0);
    Taken {
        id: step.id.clone(),
        text: step.text.clone(),
        when: step.when.word().to_owned(),
        because: step.because.clone(),
        check_first: step.check_first.clone(),
        verify: step.verify.as_ref().map(|v| Checked {
            id: v.id.clone(),
            direction: v.direction.clone(),
            due: v.by + later,
            from: opening.book.newest(&v.id),
        }),
        done: None,
        by: None,
    }
}
