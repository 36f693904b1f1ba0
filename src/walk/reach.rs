//! What would have to be asked to settle a test that is not settled.

use super::Ask;
use crate::engine::{Engine, Limits};
use crate::history::balance::inputs;
use crate::knowledge::{Evidence, Test};
use crate::site::Site;
use crate::vocabulary::ReadingId;

/// Looks at tests as the facts stand.
pub(super) struct Reach<'a, 'k> {
    pub engine: &'a Engine<'k>,
    pub site: &'a Site,
    pub limits: &'a Limits<'k>,
}

/// Findings that rest on findings that rest on findings are too far away to ask for.
const DEEPEST: usize = 3;

impl Reach<'_, '_> {
    /// What would settle a piece of evidence; `None` when nothing a person can say now would.
    pub fn evidence(&self, evidence: Evidence) -> Option<Vec<Ask>> {
        let mut asks = match evidence {
            Evidence::Sign(id) => vec![Ask::Sign(id)],
            Evidence::Finding(id) => self.test(&self.engine.knowledge()[id].when, 0)?,
        };
        asks.sort();
        asks.dedup();
        Some(asks)
    }

    /// What would settle a test: nothing for one that is settled.
    pub fn test(&self, test: &Test, depth: usize) -> Option<Vec<Ask>> {
        match test {
            Test::Level { reading, .. } => Some(self.level(*reading)),
            // A change is between two readings: without an earlier one the present one says nothing of it.
            Test::Changed { reading, .. } | Test::Unusual { reading, .. } => {
                let before = self
                    .engine
                    .memory()
                    .reading(*reading)
                    .and_then(|t| t.newest())
                    .is_some();
                before.then(|| self.level(*reading))
            }
            Test::Sign { sign, .. } => {
                let known = !self.engine.evidence(Evidence::Sign(*sign)).is_unknown();
                Some(if known {
                    Vec::new()
                } else {
                    vec![Ask::Sign(*sign)]
                })
            }
            Test::Event { event, .. } => {
                let known = self.settled(test);
                Some(if known {
                    Vec::new()
                } else {
                    vec![Ask::Event(*event)]
                })
            }
            Test::Finding(id) => {
                let degree = self.engine.finding(*id);
                if degree.hi - degree.lo < 0.5 {
                    Some(Vec::new())
                } else if depth == DEEPEST {
                    None
                } else {
                    self.test(&self.engine.knowledge()[*id].when, depth + 1)
                }
            }
            Test::All(parts) => {
                let mut asks = Vec::new();
                for part in parts {
                    asks.extend(self.test(part, depth)?);
                }
                Some(asks)
            }
            Test::Any(parts) | Test::NOf(_, parts) => {
                let open: Vec<Ask> = parts
                    .iter()
                    .filter_map(|p| self.test(p, depth))
                    .flatten()
                    .collect();
                (!open.is_empty()).then_some(open)
            }
            Test::Not(part) => self.test(part, depth),
            Test::Site { .. } => self.settled(test).then(Vec::new),
            Test::Odd { .. } | Test::Stuck { .. } | Test::Disagree { .. } | Test::Cause { .. } => {
                None
            }
        }
    }

    fn settled(&self, test: &Test) -> bool {
        let degree = self
            .engine
            .judge_test(test, self.site, self.limits, &|_| 0.0);
        degree.hi - degree.lo < 0.5
    }

    fn level(&self, reading: ReadingId) -> Vec<Ask> {
        let words = &self.engine.knowledge().vocabulary;
        let open = |id: ReadingId| (!self.fresh(id)).then_some(Ask::Reading(id));
        if words[reading].derived {
            inputs(&words[reading].id)
                .iter()
                .filter_map(|id| open(words.reading(id)?))
                .collect()
        } else {
            open(reading).into_iter().collect()
        }
    }

    fn fresh(&self, id: ReadingId) -> bool {
        let memory = self.engine.memory();
        let good_for = self.engine.knowledge().vocabulary[id].good_for;
        memory
            .reading(id)
            .and_then(|t| t.newest())
            .and_then(|s| s.last())
            .is_some_and(|(time, _)| memory.now() - time <= good_for)
    }
}
