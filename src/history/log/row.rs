//! One row of a log, in kept units and unix seconds.

use crate::vocabulary::{EventId, ReadingId, SignId};

/// Index of a place in the log's list of places.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct PlaceId(pub u16);

/// A measured value, in the unit that its reading is kept in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Value {
    /// The value; finite. Where `below`, the limit of detection.
    pub amount: f64,
    /// Written as `<0.05`: less than the amount, how much less is not known.
    pub below: bool,
}

/// One row.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Row {
    /// Unix seconds.
    pub time: i64,
    /// Where; `None` is the whole loop.
    pub place: Option<PlaceId>,
    /// What was measured, each reading at most once, in the order of the columns.
    pub values: Vec<(ReadingId, Value)>,
    /// Values that no water has: facts about the instrument, never used as water.
    pub odd: Vec<(ReadingId, f64)>,
    /// Signs looked for: `true` seen, `false` not there.
    pub signs: Vec<(SignId, bool)>,
    /// What happened.
    pub events: Vec<EventId>,
    /// Anybody's words.
    pub note: Option<String>,
    /// Who made the row.
    pub by: Option<String>,
    /// The time of the earlier row whose values this one replaces.
    pub corrects: Option<i64>,
    /// The line it begins on, from 1.
    pub line: usize,
    /// Which of the files, from 0.
    pub file: u16,
}

impl Row {
    /// The value of a reading.
    pub fn value(&self, reading: ReadingId) -> Option<Value> {
        self.values
            .iter()
            .find(|(id, _)| *id == reading)
            .map(|(_, value)| *value)
    }

    /// Empties the row, keeping its buffers.
    pub(super) fn clear(&mut self) {
        self.time = 0;
        self.place = None;
        self.values.clear();
        self.odd.clear();
        self.signs.clear();
        self.events.clear();
        self.note = None;
        self.by = None;
        self.corrects = None;
        self.line = 0;
        self.file = 0;
    }
}
