//! Do no harm: over very many random states of random farms, no page advises and forbids the same thing, no `never_if`
//! that is known to hold is broken, first aid is there when fish may die, and no medicine is named as advice.
//!
//! `HARM_STATES=1000000 cargo test --test harm` runs more states than the ordinary 20,000.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod directed;
mod random;
mod states;
mod words;

use gillside::assessment::{Assessor, Review};
use gillside::course::{Advice, Ground, advise};
use gillside::diagnosis::Doctor;
use gillside::engine::Engine;
use gillside::knowledge::{self, Knowledge, StepId, When};

/// The embedded rule base.
fn rule_base() -> Knowledge {
    knowledge::load(&knowledge::embedded(), &[]).unwrap_or_else(|faults| {
        panic!(
            "{}",
            faults
                .iter()
                .map(ToString::to_string)
                .collect::<Vec<_>>()
                .join("\n")
        )
    })
}

/// What is advised of the facts as they stand, and whether each caution of the rule base is due.
struct Page<'k> {
    knowledge: &'k Knowledge,
    review: Review<'k>,
    advice: Advice,
    cautions: Vec<&'k str>,
    /// Steps whose `never_if` is known to hold.
    forbidden: Vec<StepId>,
}

impl<'k> Page<'k> {
    fn of(assessor: &Assessor<'k>, engine: &Engine<'k>) -> Self {
        let knowledge = assessor.knowledge();
        let review = assessor.review(engine);
        let ground = Ground {
            knowledge,
            engine,
            site: assessor.site(),
            limits: assessor.limits(),
            ranking: &review.ranking,
            decision: &review.decision,
        };
        let advice = advise(&ground);
        let cautions = knowledge
            .cautions
            .iter()
            .filter(|c| c.always || c.when.as_ref().is_some_and(|t| ground.holds(t)))
            .map(|c| c.id.as_str())
            .collect();
        let forbidden = (0u16..)
            .zip(&knowledge.steps)
            .filter(|(_, s)| s.never_if.as_ref().is_some_and(|t| ground.holds(t)))
            .map(|(n, _)| StepId(n))
            .collect();
        Self {
            knowledge,
            advice,
            cautions,
            forbidden,
            review,
        }
    }

    fn id(&self, step: StepId) -> &'k str {
        &self.knowledge[step].id
    }

    fn aid(&self) -> Vec<&'k str> {
        self.advice
            .first_aid
            .iter()
            .map(|a| self.id(a.step))
            .collect()
    }

    fn steps(&self, when: When) -> Vec<&'k str> {
        self.advice
            .steps
            .iter()
            .filter(|a| self.knowledge[a.step].when == when)
            .map(|a| self.id(a.step))
            .collect()
    }

    fn all_steps(&self) -> Vec<&'k str> {
        let advised = self.advice.first_aid.iter().chain(&self.advice.steps);
        advised.map(|a| self.id(a.step)).collect()
    }

    fn avoid(&self) -> Vec<&'k str> {
        self.advice.avoid.iter().map(|w| self.id(w.step)).collect()
    }

    fn probability(&self, cause: &str) -> f64 {
        let id = self.knowledge.cause(cause).expect("a known cause");
        Doctor::any_of(&self.review.ranking, &[id])
    }
}
