//! When a round was last done, as far as the log tells.

use crate::history::log::{Log, Row};
use crate::knowledge::Round;
use crate::record::done_in;

/// Unix seconds of the last time: all its readings were read, one of its events was noted, or a note says it was done.
pub(super) fn last(round: &Round, log: &Log) -> Option<i64> {
    let newest = |wanted: &dyn Fn(&Row) -> bool| {
        let found = log.rows.iter().rev().find(|r| wanted(r));
        found.map(|r| r.time)
    };
    let read = round
        .readings
        .iter()
        .map(|id| newest(&|r| r.value(*id).is_some()))
        .collect::<Option<Vec<i64>>>()
        .and_then(|times| times.into_iter().min());
    let event = newest(&|r| r.events.iter().any(|e| round.events.contains(e)));
    let said = newest(&|r| {
        let note = r.note.as_deref().unwrap_or_default();
        done_in(note).any(|id| id == round.id)
    });
    read.into_iter().chain(event).chain(said).max()
}
