//! A walk: what it started from, what was answered, and what follows.

use super::worth::{Lens, View};
use super::{Answer, Ask, Given, Prospect};
use crate::assessment::{Assessment, Assessor, Review};
use crate::engine::Engine;
use crate::history::answers::Happened;
use crate::history::log::{Row, Value};
use crate::knowledge::Knowledge;
use crate::vocabulary::EventId;

/// Long before any farm: an event that did not happen did not happen since then.
const EVER: i64 = i64::MIN / 2;

/// Which part of a walk an answer belongs to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stage {
    /// The vital signs, before anything else.
    Vital,
    /// What a person tells without being asked.
    Told,
    /// What was asked for.
    Asked,
}

/// What was answered at once.
#[derive(Debug, Clone, PartialEq)]
pub struct Turn {
    /// In which part of the walk.
    pub stage: Stage,
    /// The answers; none when there was nothing to say.
    pub given: Vec<Given>,
}

/// A walk under way.
#[derive(Debug, Clone)]
pub struct Walk<'k> {
    assessor: Assessor<'k>,
    lens: Lens,
    /// What was known before the first question.
    base: Engine<'k>,
    turns: Vec<Turn>,
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
            turns: Vec::new(),
            engine,
            review,
        }
    }

    /// The rule base.
    pub fn knowledge(&self) -> &'k Knowledge {
        self.assessor.knowledge()
    }

    /// What was answered, turn by turn.
    pub fn turns(&self) -> &[Turn] {
        &self.turns
    }

    /// What was answered, in the order in which it was first asked for or told; the last answer to each.
    pub fn given(&self) -> Vec<Given> {
        let mut all: Vec<Given> = Vec::new();
        for given in self.turns.iter().flat_map(|t| &t.given) {
            match all.iter_mut().find(|g| g.ask == given.ask) {
                Some(earlier) => *earlier = *given,
                None => all.push(*given),
            }
        }
        all
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

    /// Takes a turn's answers in.
    pub fn take(&mut self, turn: Turn) {
        self.turns.push(turn);
        self.work_out();
    }

    /// Takes turns in, as when an interrupted walk goes on.
    pub fn take_all(&mut self, turns: impl IntoIterator<Item = Turn>) {
        self.turns.extend(turns);
        self.work_out();
    }

    /// Takes the last turn back and undoes what followed from it; `None` at the beginning.
    pub fn back(&mut self) -> Option<Turn> {
        let turn = self.turns.pop()?;
        self.work_out();
        Some(turn)
    }

    /// What was last answered to a question.
    pub fn answered(&self, ask: Ask) -> Option<Answer> {
        let mut given = self.turns.iter().rev().flat_map(|t| t.given.iter().rev());
        given.find(|g| g.ask == ask).map(|g| g.answer)
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
        let given = self.given();
        let mut engine = self.base.clone();
        let events = events(&given);
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
        for row in rows(&given) {
            engine.observe(&row);
        }
        self.review = self.assessor.review(&engine);
        self.engine = engine;
    }
}

/// Events by time, those that did not happen first.
fn events(given: &[Given]) -> Vec<(Option<i64>, EventId)> {
    let mut events: Vec<(Option<i64>, EventId)> = given
        .iter()
        .filter_map(|g| match (g.ask, g.answer) {
            (Ask::Event(id), Answer::Happened(happened)) => Some(match happened {
                Happened::Ago(age) => (Some(g.time.saturating_sub(age)), id),
                Happened::At(time) => (Some(time), id),
                Happened::Never => (None, id),
            }),
            _ => None,
        })
        .collect();
    events.sort_unstable();
    events
}

/// Readings and signs as rows of a log, one for each time at which something was answered.
fn rows(given: &[Given]) -> Vec<Row> {
    let mut times: Vec<i64> = given.iter().map(|g| g.time).collect();
    times.sort_unstable();
    times.dedup();
    let row = |time: i64| {
        let mut row = Row {
            time,
            ..Row::default()
        };
        for g in given.iter().filter(|g| g.time == time) {
            match (g.ask, g.answer) {
                (Ask::Reading(id), Answer::Number(amount)) => {
                    row.values.push((
                        id,
                        Value {
                            amount,
                            below: false,
                        },
                    ));
                }
                (Ask::Sign(id), Answer::Seen(seen)) => row.signs.push((id, seen)),
                _ => {}
            }
        }
        row
    };
    times.into_iter().map(row).collect()
}
