//! Answers from a file in the place of a person: somebody who picks the vital signs that are so, tells the most striking
//! of what is known, and then answers what is asked, with "don't know" for what the file does not hold.

use super::{Answer, Ask, Given, Next, Screen, Stage, Stop, Turn, Walk};
use crate::history::answers::{Answers, Happened};
use crate::knowledge::{Bound, Knowledge, Limit, Side};
use crate::vocabulary::ReadingId;

/// Who answers from a file.
#[derive(Debug, Clone, Copy)]
pub struct Attendant<'a> {
    /// What is known.
    pub answers: &'a Answers,
    /// When it is said, unix seconds.
    pub time: i64,
}

impl Attendant<'_> {
    /// Goes through a walk to where asking stops.
    pub fn walk(&self, walk: &mut Walk<'_>) -> Stop {
        loop {
            match self.turn(walk, &walk.next()) {
                Ok(turn) => walk.take(turn),
                Err(stop) => return stop,
            }
        }
    }

    /// What is answered to what comes next.
    ///
    /// # Errors
    /// Why asking stops, when it does.
    pub fn turn(&self, walk: &Walk<'_>, next: &Next) -> Result<Turn, Stop> {
        let says = |screen: &Screen| {
            screen
                .asks
                .iter()
                .map(|ask| self.says(*ask))
                .collect::<Vec<_>>()
        };
        Ok(match next {
            Next::Stop(stop) => return Err(*stop),
            Next::Vital(screen) => Turn {
                stage: Stage::Vital,
                given: says(screen)
                    .into_iter()
                    .filter(|g| g.answer == Answer::Seen(true))
                    .collect(),
            },
            Next::Tell => Turn {
                stage: Stage::Told,
                given: self.tells(walk),
            },
            Next::Ask(screen) => Turn {
                stage: Stage::Asked,
                given: says(screen),
            },
        })
    }

    /// Tells everything the file holds that has not been said: the outcome then rests on the whole file.
    pub fn tell_the_rest(&self, walk: &mut Walk<'_>) {
        let given = self
            .all()
            .filter(|g| walk.answered(g.ask).is_none())
            .collect();
        walk.take(Turn {
            stage: Stage::Told,
            given,
        });
    }

    /// What is answered to a question.
    pub fn says(&self, ask: Ask) -> Given {
        self.all().find(|g| g.ask == ask).unwrap_or(Given {
            ask,
            answer: Answer::Unknown,
            time: self.time,
        })
    }

    /// What is told without being asked: the most striking things, as many as a person would.
    pub fn tells(&self, walk: &Walk<'_>) -> Vec<Given> {
        let said = walk.given();
        let knowledge = walk.knowledge();
        let mut striking: Vec<(f64, Given)> = self
            .all()
            .filter(|g| said.iter().all(|s| s.ask != g.ask))
            .filter_map(|g| Some((self.strikes(walk, &g)?, g)))
            .collect();
        striking.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.ask.cmp(&b.1.ask)));
        striking.truncate(knowledge.walk.told.saturating_sub(said.len()));
        striking.into_iter().map(|s| s.1).collect()
    }

    /// How striking it is; `None` for what nobody would mention: what is not so, and numbers as they should be.
    fn strikes(&self, walk: &Walk<'_>, given: &Given) -> Option<f64> {
        /// What is alarming is mentioned before what is as rare and not alarming.
        const ALARMING: f64 = 2.0;
        /// A number outside its band strikes as much as a sign that is seen on one day in fifty.
        const OFF: f64 = 4.0;
        /// What was done or happened comes to mind a little later.
        const HAPPENED: f64 = 3.9;
        let words = &walk.knowledge().vocabulary;
        match (given.ask, given.answer) {
            (Ask::Sign(id), Answer::Seen(true)) => {
                let alarming = if words[id].alarming { ALARMING } else { 0.0 };
                Some(alarming - words[id].background.max(1e-6).ln())
            }
            (Ask::Reading(id), Answer::Number(value)) => is_off(walk, id, value).then_some(OFF),
            (Ask::Event(_), Answer::Happened(Happened::Ago(_) | Happened::At(_))) => Some(HAPPENED),
            _ => None,
        }
    }

    fn all(&self) -> impl Iterator<Item = Given> + '_ {
        let time = self.time;
        let readings = self
            .answers
            .readings
            .iter()
            .map(|r| (Ask::Reading(r.0), Answer::Number(r.1)));
        let signs = self
            .answers
            .signs
            .iter()
            .map(|s| (Ask::Sign(s.0), Answer::Seen(s.1)));
        let events = self
            .answers
            .events
            .iter()
            .map(|e| (Ask::Event(e.0), Answer::Happened(e.1)));
        readings
            .chain(signs)
            .chain(events)
            .map(move |(ask, answer)| Given { ask, answer, time })
    }
}

/// Outside the band that the site or its fish have for it.
fn is_off(walk: &Walk<'_>, reading: ReadingId, value: f64) -> bool {
    let bound = |side: Side| {
        walk.assessor()
            .limits()
            .resolve(Bound::Named(Limit::Target(reading, side)))
    };
    bound(Side::Low).is_some_and(|low| value < low)
        || bound(Side::High).is_some_and(|high| value > high)
}

/// The ids of answers, in their order.
pub fn ids(knowledge: &Knowledge, given: &[Given]) -> Vec<String> {
    given
        .iter()
        .map(|g| g.ask.id(&knowledge.vocabulary).to_owned())
        .collect()
}
