//! Which question comes next, and when asking stops.

use super::{Answer, Ask, Prospect, Stage, Walk};
use crate::course::{Ground, advise};
use crate::diagnosis::{Ranking, Scored};
use crate::knowledge::{CauseId, StepId, When};

/// Things that are asked together, because they are looked at in the same place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Screen {
    /// The place or instrument, as the rule base names it.
    pub title: String,
    /// What is asked, most telling first.
    pub asks: Vec<Ask>,
}

/// Why asking stops.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stop {
    /// One cause stands out.
    StandsOut(CauseId),
    /// No question is worth its effort.
    NothingWorthAsking,
    /// The first steps would be the same whatever the answer.
    SameSteps,
    /// Enough was asked for now.
    EnoughAsked,
}

/// What comes next.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Next {
    /// Let those be picked that are so: what is not picked was not looked at.
    Vital(Screen),
    /// Let the person tell what was noticed, measured or done.
    Tell,
    /// Ask this.
    Ask(Screen),
    /// Say what there is to say.
    Stop(Stop),
}

/// Whether the first steps stay is looked at for so many of the best questions.
const LOOKED_AHEAD: usize = 5;
/// So many steps are what is done first.
const FIRST_STEPS: usize = 3;

impl Walk<'_> {
    /// What comes next.
    pub fn next(&self) -> Next {
        let had = |stage: Stage| self.turns().iter().any(|t| t.stage == stage);
        if !had(Stage::Vital) {
            let vital = self.knowledge().walk.vital.iter().map(|s| Ask::Sign(*s));
            return Next::Vital(Screen {
                title: "first of all".to_owned(),
                asks: vital.collect(),
            });
        }
        if !had(Stage::Told) {
            return Next::Tell;
        }
        let rules = &self.knowledge().walk;
        let ranking = &self.review().ranking;
        if let Some(first) = ranking.order().into_iter().next()
            && ranking.of(first) >= rules.stands_out
        {
            return Next::Stop(Stop::StandsOut(first));
        }
        let given = self.given();
        let asked = given.len();
        if asked >= rules.most {
            return Next::Stop(Stop::EnoughAsked);
        }
        let mut open: Vec<(Prospect, f64)> = self
            .prospects()
            .into_iter()
            .filter(|p| self.open(&given, p.ask))
            .map(|p| {
                let worth =
                    p.bits / (p.ask.question(&self.knowledge().vocabulary).effort + rules.asking);
                (p, worth)
            })
            .collect();
        open.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.ask.cmp(&b.0.ask)));
        let Some((best, worth)) = open.first() else {
            return Next::Stop(Stop::NothingWorthAsking);
        };
        if *worth < rules.least_bits {
            return Next::Stop(Stop::NothingWorthAsking);
        }
        let looked_at = open
            .iter()
            .take(LOOKED_AHEAD)
            .filter(|(_, w)| *w >= rules.least_bits);
        if self.leads()
            && looked_at
                .clone()
                .all(|(p, _)| self.steps_stay(p) >= rules.same_steps)
        {
            return Next::Stop(Stop::SameSteps);
        }
        let words = &self.knowledge().vocabulary;
        let title = &best.ask.question(words).screen;
        let asks = open
            .iter()
            .filter(|(p, w)| p.ask.question(words).screen == *title && *w >= rules.together * worth)
            .map(|(p, _)| p.ask)
            .take(rules.lines.min(rules.most.saturating_sub(asked)))
            .collect();
        Next::Ask(Screen {
            title: title.clone(),
            asks,
        })
    }

    /// Whether there is a leading cause, so that steps for it are advised at all.
    fn leads(&self) -> bool {
        let ranking = &self.review().ranking;
        ranking
            .order()
            .first()
            .is_some_and(|c| ranking.of(*c) >= 0.5)
    }

    /// Not asked yet, and not on a screen of which something can't be measured now.
    fn open(&self, given: &[super::Given], ask: Ask) -> bool {
        let words = &self.knowledge().vocabulary;
        let screen = &ask.question(words).screen;
        if ask.question(words).text.is_empty() {
            return false;
        }
        given.iter().all(|g| {
            g.ask != ask
                && !(g.answer == Answer::CannotMeasure && g.ask.question(words).screen == *screen)
        })
    }

    /// The probability that the first steps stay as they are when this is answered.
    fn steps_stay(&self, prospect: &Prospect) -> f64 {
        let ranking = &self.review().ranking;
        let now = self.first_steps(ranking);
        prospect
            .outcomes
            .iter()
            .map(|shares| {
                let (probability, after) = given(ranking, shares);
                if self.first_steps(&after) == now {
                    probability
                } else {
                    0.0
                }
            })
            .sum()
    }

    fn first_steps(&self, ranking: &Ranking) -> Vec<StepId> {
        let decision = self
            .assessor()
            .doctor()
            .decide(self.engine(), ranking, false);
        let advice = advise(&Ground {
            knowledge: self.knowledge(),
            engine: self.engine(),
            site: self.assessor().site(),
            limits: self.assessor().limits(),
            ranking,
            decision: &decision,
        });
        let soon = advice
            .steps
            .iter()
            .filter(|s| self.knowledge()[s.step].when <= When::Hours);
        let mut first: Vec<StepId> = soon.map(|s| s.step).take(FIRST_STEPS).collect();
        first.sort_unstable_by_key(|s| s.index());
        first
    }
}

/// The ranking after an outcome that shows with this probability under each set, and how likely that outcome is.
pub(super) fn given(ranking: &Ranking, shares: &[f64]) -> (f64, Ranking) {
    let sets = ranking.sets.iter().zip(shares);
    let total: f64 = ranking
        .sets
        .iter()
        .take(shares.len())
        .map(|s| s.probability)
        .sum();
    let mean: f64 = sets.clone().map(|(s, q)| s.probability * q).sum();
    let mut causes = vec![0.0; ranking.causes.len()];
    let mut nothing = 0.0;
    let mut after = Vec::with_capacity(shares.len());
    for (set, share) in sets {
        let probability = if mean > 0.0 {
            set.probability * share / mean
        } else {
            0.0
        };
        for cause in &set.causes {
            if let Some(sum) = causes.get_mut(cause.index()) {
                *sum += probability;
            }
        }
        if set.causes.is_empty() {
            nothing = probability;
        }
        after.push(Scored {
            causes: set.causes.clone(),
            probability,
        });
    }
    let ranking = Ranking {
        causes,
        nothing,
        sets: after,
        weights: ranking.weights.clone(),
    };
    (if total > 0.0 { mean / total } else { 0.0 }, ranking)
}
