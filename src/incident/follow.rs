//! Is the reading moving as it should by the time it should?

use super::model::{Checked, Incident};
use crate::history::log::Log;
use crate::history::memory::Memory;
use crate::knowledge::Knowledge;

/// What checks are looked up in.
#[derive(Debug, Clone, Copy)]
pub struct Book<'a> {
    /// The words.
    pub knowledge: &'a Knowledge,
    /// The log; `None` where there is none.
    pub log: Option<&'a Log>,
    /// What is remembered of it: readings that are worked out from others.
    pub memory: Option<&'a Memory>,
    /// What is taken for now, unix seconds.
    pub now: i64,
}

/// How a check stands.
#[derive(Debug, Clone, PartialEq)]
pub enum Look {
    /// It is not due yet. The newest value since, and whether it moves as it should so far.
    Waiting(Option<(i64, f64)>, Option<bool>),
    /// It is due, and nothing was read that could tell.
    Unread,
    /// It moved as it should: when that was seen, and the value.
    Met(i64, f64),
    /// It did not: when that was seen, and the value.
    Missed(i64, f64),
}

/// A check of an incident. For a sign the values are 1 (seen) and 0 (looked for and not there).
#[derive(Debug, Clone, PartialEq)]
pub struct Check {
    /// The step it belongs to.
    pub step: String,
    /// Whether the step was done.
    pub done: bool,
    /// What should move, which way, by when.
    pub verify: Checked,
    /// How it stands.
    pub look: Look,
}

impl Check {
    /// Something has to be read or looked at for it.
    pub fn is_open(&self) -> bool {
        matches!(self.look, Look::Waiting(..) | Look::Unread)
    }
}

/// All checks of an incident as the log tells. Steps that are checked by the same thing moving the same way share one
/// check: that of the step that was done, else the earliest. A step for later days is checked once it was done.
pub fn checks(incident: &Incident, book: &Book<'_>) -> Vec<Check> {
    let mut all: Vec<Check> = Vec::new();
    for step in &incident.steps {
        let Some(verify) = &step.verify else { continue };
        if step.done.is_none() && !step.is_soon() {
            continue;
        }
        let check = Check {
            step: step.id.clone(),
            done: step.done.is_some(),
            look: looked(verify, step.done.unwrap_or(incident.opened), book),
            verify: verify.clone(),
        };
        let same = all
            .iter_mut()
            .find(|c| c.verify.id == verify.id && c.verify.direction == verify.direction);
        match same {
            None => all.push(check),
            Some(old) => {
                let earlier = check.verify.due < old.verify.due;
                if (check.done, earlier) > (old.done, false) && (check.done || !old.done) {
                    *old = check;
                }
            }
        }
    }
    all.sort_by_key(|c| c.verify.due);
    all
}

/// A reading counts as the answer when it is taken in the last quarter of the time there is, or later.
const LATE: i64 = 4;

/// How one check stands; `since` is when the step was done, or the incident opened.
pub fn looked(verify: &Checked, since: i64, book: &Book<'_>) -> Look {
    let now = book.now;
    let values = book.values(&verify.id, since);
    let Some((time, value)) = values.last().copied() else {
        return if now < verify.due {
            Look::Waiting(None, None)
        } else {
            Look::Unread
        };
    };
    let least = least(&verify.id, verify.from, book.knowledge);
    // Without a value from before, the first one since is what it moves from.
    let from = verify
        .from
        .or_else(|| values.first().map(|v| v.1).filter(|_| values.len() > 1));
    let so_far = moves(&verify.direction, from, value, least);
    let answers = time >= verify.due - (verify.due - since).max(0) / LATE;
    match so_far {
        Some(true) if answers => Look::Met(time, value),
        Some(false) if answers && now >= verify.due => Look::Missed(time, value),
        _ if now < verify.due => Look::Waiting(Some((time, value)), so_far),
        _ => Look::Unread,
    }
}

impl Book<'_> {
    /// Values of a reading or sign after `since`, oldest first.
    pub fn values(&self, id: &str, since: i64) -> Vec<(i64, f64)> {
        let words = &self.knowledge.vocabulary;
        let during = |time: i64| time > since && time <= self.now;
        if let Some(reading) = words.reading(id).filter(|r| words[*r].derived) {
            let track = self.memory.and_then(|m| m.reading(reading));
            let series = track.and_then(|t| t.newest()).map(|s| s.newest());
            let values = series.into_iter().flatten().copied();
            return values.filter(|(time, _)| during(*time)).collect();
        }
        let rows = self.log.map_or(&[][..], |log| &log.rows);
        let rows = rows.iter().filter(|r| during(r.time));
        if let Some(reading) = words.reading(id) {
            return rows
                .filter_map(|r| r.value(reading).map(|v| (r.time, v.amount)))
                .collect();
        }
        let Some(sign) = words.sign(id) else {
            return Vec::new();
        };
        rows.filter_map(|r| {
            let (_, seen) = r.signs.iter().find(|(s, _)| *s == sign)?;
            Some((r.time, f64::from(u8::from(*seen))))
        })
        .collect()
    }

    /// The newest value of a reading; signs have none to move from.
    pub fn newest(&self, id: &str) -> Option<f64> {
        self.knowledge.vocabulary.reading(id)?;
        self.values(id, i64::MIN).last().map(|v| v.1)
    }
}

/// The smallest difference that is one.
fn least(id: &str, from: Option<f64>, knowledge: &Knowledge) -> f64 {
    knowledge.vocabulary.reading(id).map_or(0.5, |reading| {
        let reading = &knowledge.vocabulary[reading];
        let share = reading.resolution_share * from.unwrap_or(0.0).abs();
        reading.resolution.max(share)
    })
}

fn moves(direction: &str, from: Option<f64>, value: f64, least: f64) -> Option<bool> {
    Some(match direction {
        "gone" => value < least,
        "rising" => value - from? >= least,
        "falling" => from? - value >= least,
        _ => (value - from?).abs() < 2.0 * least,
    })
}
