//! A walk: what it started from, what was answered, and what follows.

use super::worth::{Lens, View};
use super::{Answer, Ask, Given, Prospect};
use crate::assessment::{Assessment, Assessor, Review};
use crate::engine::Engine;
use crate::history::answers::Happened;
use crate::history::log::{Row, Value};
use crate::knowledge::Knowledge;

/// Long before any farm: an event that did not happen did not happen since then.
const EVER: i64 = i64::MIN / 2;

/// A walk under way.
#[derive(Debug, Clone)]
pub struct Walk<'k> {
    assessor: Assessor<'k>,
    lens: Lens,
    /// What was known before the first question.
    base: Engine<'k>,
    given: Vec<Given>,
    engine: Engine<'k>,
    review: Review<'k>,
}

impl<'k> Walk<'k> {
    /// A walk at `now` (unix seconds). `base` knows what the site and its log tell.
    pub fn new(assessor: Assessor<'k>, mut base: Engine<'k>, now: i64) -> Self {
        base.advance(now);
        let engine = base.clone();
        let review = assessor.review(&engine);
        Self {
            lens: Lens::new(assessor.knowledge(), assessor.doctor()),
            assessor,
            base,
            given: Vec::new(),
            engine,
            review,
        }
    }

    /// The rule base.
    pub fn knowledge(&self) -> &'k Knowledge {
        self.assessor.knowledge()
    }

    /// What was answered, in the order of asking.
    pub fn given(&self) -> &[Given] {
        &self.given
    }

    /// The facts as they stand.
    pub fn engine(&self) -> &Engine<'k> {
        &self.engine
    }

    /// Who assesses.
    pub fn assessor(&self) -> &Assessor<'k> {
        &self.assessor
    }

    /// Causes and verdict as they stand.
    pub fn review(&self) -> &Review<'k> {
        &self.review
    }

    /// The whole outcome as it stands. `places` and `last_row` are the log's.
    pub fn assess(&self, places: &[String], last_row: Option<i64>) -> Assessment {
        self.assessor.assess(&self.engine, places, last_row)
    }

    /// Takes answers in, in the order they were asked for; an answer to what was asked before replaces it.
    pub fn answer(&mut self, answers: impl IntoIterator<Item = Given>) {
        for given in answers {
            match self.given.iter_mut().find(|g| g.ask == given.ask) {
                Some(old) => *old = given,
                None => self.given.push(given),
            }
        }
        self.work_out();
    }

    /// Takes the last `count` answers back, and undoes what followed from them.
    pub fn back(&mut self, count: usize) {
        self.given.truncate(self.given.len().saturating_sub(count));
        self.work_out();
    }

    /// What was answered to a question.
    pub fn answered(&self, ask: Ask) -> Option<Answer> {
        self.given.iter().find(|g| g.ask == ask).map(|g| g.answer)
    }

    /// What asking is worth, for everything that tells something.
    pub fn prospects(&self) -> Vec<Prospect> {
        View {
            knowledge: self.knowledge(),
            engine: &self.engine,
            site: self.assessor.site(),
            limits: self.assessor.limits(),
            doctor: self.assessor.doctor(),
            ranking: &self.review.ranking,
            lens: &self.lens,
        }
        .prospects()
    }

    /// Everything that is known, from the start and the list of answers.
    fn work_out(&mut self) {
        let mut engine = self.base.clone();
        let given = &self.given;
        let mut events: Vec<(Option<i64>, crate::vocabulary::EventId)> = given
            .iter()
            .filter_map(|g| match (g.ask, g.answer) {
                (Ask::Event(id), Answer::Happened(Happened::Ago(age))) => Some((Some(g.time.saturating_sub(age)), id)),
                (Ask::Event(id), Answer::Happened(Happened::At(time))) => Some((Some(time), id)),
                (Ask::Event(id), Answer::Happened(Happened::Never)) => Some((None, id)),
                _ => None,
            })
            .collect();
        events.sort_unstable();
        if !events.is_empty() {
            engine.tell(|memory| {
                for (time, id) in events {
                    match time {
                        Some(time) => memory.happened(id, time),
                        None => memory.did_not_happen(id, EVER),
                    }
                }
            });
        }
        let mut rows: Vec<Row> = Vec::new();
        for g in given {
            let row = match rows.iter_mut().find(|r| r.time == g.time) {
                Some(row) => row,
                None => {
                    rows.push(Row { time: g.time, ..Row::default() });
                    let Some(row) = rows.last_mut() else { continue };
                    row
                }
            };
            match (g.ask, g.answer) {
                (Ask::Reading(id), Answer::Number(amount)) => row.values.push((id, Value { amount, below: false })),
                (Ask::Sign(id), Answer::Seen(seen)) => row.signs.push((id, seen)),
                _ => {}
            }
        }
        rows.sort_by_key(|r| r.time);
        for row in &rows {
            engine.observe(row);
        }
        self.review = self.assessor.review(&engine);
        self.engine = engine;
    }
}
