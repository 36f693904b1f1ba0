//! What is said at once when a vital sign is bad, and why a question is asked.

use super::next::given;
use super::{Answer, Ask, Walk};
use crate::course::{Ground, advise};
use crate::knowledge::{CauseId, StepId};

impl Walk<'_> {
    /// A vital sign was seen, or fish may die within minutes.
    pub fn alarm(&self) -> bool {
        let seen = |s| self.answered(Ask::Sign(s)) == Some(Answer::Seen(true));
        self.review().decision.first_aid || self.knowledge().walk.vital.iter().any(|s| seen(*s))
    }

    /// What to do before anything else, in this order; nothing without an alarm.
    pub fn first_aid(&self) -> Vec<StepId> {
        if !self.alarm() {
            return Vec::new();
        }
        let mut decision = self.review().decision.clone();
        decision.first_aid = true;
        let advice = advise(&Ground {
            knowledge: self.knowledge(),
            engine: self.engine(),
            site: self.assessor().site(),
            limits: self.assessor().limits(),
            ranking: &self.review().ranking,
            decision: &decision,
        });
        advice.first_aid.iter().map(|a| a.step).collect()
    }

    /// The causes that an answer would tell apart: those whose probability may move most, likeliest now first.
    pub fn separates(&self, ask: Ask) -> Vec<CauseId> {
        const NAMED: usize = 4;
        const MOVES: f64 = 0.01;
        let ranking = &self.review().ranking;
        let Some(prospect) = self.prospects().into_iter().find(|p| p.ask == ask) else {
            return Vec::new();
        };
        let after: Vec<_> = prospect
            .outcomes
            .iter()
            .map(|shares| given(ranking, shares).1)
            .collect();
        let mut moved: Vec<(CauseId, f64)> = ranking
            .order()
            .into_iter()
            .take(20)
            .map(|c| {
                (
                    c,
                    after
                        .iter()
                        .map(|r| (r.of(c) - ranking.of(c)).abs())
                        .fold(0.0, f64::max),
                )
            })
            .filter(|(_, by)| *by >= MOVES)
            .collect();
        moved.sort_by(|a, b| b.1.total_cmp(&a.1));
        moved.truncate(NAMED);
        moved.sort_by(|a, b| ranking.of(b.0).total_cmp(&ranking.of(a.0)));
        moved.into_iter().map(|m| m.0).collect()
    }

    /// Everything of a group that a person may tell and has not said yet.
    pub fn group(&self, group: &crate::knowledge::WalkGroup) -> Vec<Ask> {
        let words = &self.knowledge().vocabulary;
        let signs = (0..words.signs.len())
            .filter_map(|i| u16::try_from(i).ok())
            .map(|i| Ask::Sign(crate::vocabulary::SignId(i)));
        let events = (0..words.events.len())
            .filter_map(|i| u16::try_from(i).ok())
            .map(|i| Ask::Event(crate::vocabulary::EventId(i)));
        let of = |a: &Ask| {
            let screen = &a.question(words).screen;
            match a {
                Ask::Sign(_) => group.signs.contains(screen),
                Ask::Event(_) => group.events.contains(screen),
                Ask::Reading(_) => false,
            }
        };
        signs
            .chain(events)
            .filter(of)
            .filter(|a| self.answered(*a).is_none())
            .collect()
    }
}
