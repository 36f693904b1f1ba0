//! What is known of the water now: the log's newest values, and what somebody gives by hand.

use std::collections::BTreeMap;

use crate::history::memory::{Memory, Series, Shift};
use crate::vocabulary::Vocabulary;

/// One value as it is known.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Known {
    /// In the unit the reading is kept in.
    pub value: f64,
    /// Unix seconds when it was read.
    pub time: i64,
    /// Given by hand, not from the log.
    pub given: bool,
}

/// The readings at one moment.
#[derive(Debug, Clone)]
pub struct Readings<'a> {
    vocabulary: &'a Vocabulary,
    memory: Option<&'a Memory>,
    given: BTreeMap<String, f64>,
    now: i64,
}

impl<'a> Readings<'a> {
    /// Of a log (where there is one) at a moment (unix seconds).
    pub fn new(vocabulary: &'a Vocabulary, memory: Option<&'a Memory>, now: i64) -> Self {
        Self {
            vocabulary,
            memory,
            given: BTreeMap::new(),
            now,
        }
    }

    /// The same with values given by hand, which count as read now; in kept units, finite.
    #[must_use]
    pub fn with(mut self, given: impl IntoIterator<Item = (String, f64)>) -> Self {
        self.given
            .extend(given.into_iter().filter(|(_, v)| v.is_finite()));
        self
    }

    /// The moment, in unix seconds.
    pub fn now(&self) -> i64 {
        self.now
    }

    /// The newest value of a reading.
    pub fn get(&self, id: &str) -> Option<Known> {
        if let Some(value) = self.given.get(id) {
            return Some(Known {
                value: *value,
                time: self.now,
                given: true,
            });
        }
        let (time, value) = self.series(id)?.last()?;
        Some(Known {
            value,
            time,
            given: false,
        })
    }

    /// The newest value, however old.
    pub fn value(&self, id: &str) -> Option<f64> {
        self.get(id).map(|k| k.value)
    }

    /// The newest value, when it still counts as present.
    pub fn fresh(&self, id: &str) -> Option<f64> {
        let known = self.get(id)?;
        (!self.is_stale(id, known)).then_some(known.value)
    }

    /// Whether a value is older than readings of its kind count as present.
    pub fn is_stale(&self, id: &str, known: Known) -> bool {
        let good_for = self
            .vocabulary
            .reading(id)
            .map_or(i64::MAX, |r| self.vocabulary[r].good_for);
        self.now - known.time > good_for
    }

    /// The smallest honest difference of a reading near a value.
    pub fn resolution(&self, id: &str, value: f64) -> f64 {
        self.vocabulary.reading(id).map_or(0.0, |r| {
            let reading = &self.vocabulary[r];
            reading
                .resolution
                .max(reading.resolution_share * value.abs())
        })
    }

    /// How a reading moved in the log over so many seconds.
    pub fn shift(&self, id: &str, window: i64) -> Option<Shift> {
        self.series(id)?.shift(window)
    }

    /// The log's median of a reading over so many seconds before its last value.
    pub fn middle(&self, id: &str, window: i64) -> Option<f64> {
        self.series(id)?.middle(window)
    }

    fn series(&self, id: &str) -> Option<&Series> {
        self.memory?.reading(self.vocabulary.reading(id)?)?.newest()
    }
}
