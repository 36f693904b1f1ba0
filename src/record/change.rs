//! How far a reading has moved since it was last read.

use crate::history::log::{Log, Row, Value};
use crate::vocabulary::{ReadingId, Vocabulary};

/// One recorded reading and the one before it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Change {
    /// Which reading.
    pub reading: ReadingId,
    /// What was recorded, in the kept unit.
    pub now: Value,
    /// When it was read before, unix seconds, and what it was then.
    pub before: Option<(i64, Value)>,
}

/// Every reading of a row with the newest value before it, at the same place where the reading belongs to its place.
pub fn changes(log: &Log, row: &Row, words: &Vocabulary) -> Vec<Change> {
    let before = |id: ReadingId| {
        log.rows
            .iter()
            .rev()
            .filter(|r| r.time < row.time && (!words[id].local || r.place == row.place))
            .find_map(|r| r.value(id).map(|value| (r.time, value)))
    };
    row.values
        .iter()
        .map(|(reading, now)| Change {
            reading: *reading,
            now: *now,
            before: before(*reading),
        })
        .collect()
}
