//! Signs and events over time.

use std::collections::VecDeque;

use super::DAY;

const OBSERVATIONS_KEPT: usize = 64;
const EVENTS_KEPT: usize = 256;

/// Looks at one sign, at any place.
#[derive(Debug, Clone, Default)]
pub struct SignTrack {
    /// Time, place number (0: the whole loop), seen or not; oldest first.
    looks: VecDeque<(i64, u16, bool)>,
}

impl SignTrack {
    /// Notes a look; a second one at the same time and place replaces the first.
    pub fn push(&mut self, time: i64, place: u16, seen: bool) {
        if let Some(last) = self.looks.iter_mut().find(|l| l.0 == time && l.1 == place) {
            last.2 = seen;
            return;
        }
        if self.looks.len() == OBSERVATIONS_KEPT {
            self.looks.pop_front();
        }
        self.looks.push_back((time, place, seen));
    }

    /// Looks from `from` on, oldest first.
    pub fn since(&self, from: i64) -> impl DoubleEndedIterator<Item = &(i64, u16, bool)> {
        let first = self.looks.partition_point(|l| l.0 < from);
        self.looks.range(first..)
    }
}

/// Times at which one event was noted.
#[derive(Debug, Clone, Default)]
pub struct EventTrack {
    times: VecDeque<i64>,
    /// Since when it is known that it did not happen.
    denied_from: Option<i64>,
}

impl EventTrack {
    /// Notes the event.
    pub fn push(&mut self, time: i64) {
        if self.times.back() == Some(&time) {
            return;
        }
        if self.times.len() == EVENTS_KEPT {
            self.times.pop_front();
        }
        // A person may tell later of something that happened before what the log ends with.
        let at = self.times.partition_point(|t| *t < time);
        if self.times.get(at) != Some(&time) {
            self.times.insert(at, time);
        }
    }

    /// Notes that the event surely has not happened since `from`.
    pub fn deny(&mut self, from: i64) {
        self.denied_from = Some(from);
    }

    /// Times in `(after, upto]`, oldest first.
    pub fn between(&self, after: i64, upto: i64) -> impl DoubleEndedIterator<Item = &i64> {
        let first = self.times.partition_point(|t| *t <= after);
        let last = self.times.partition_point(|t| *t <= upto).max(first);
        self.times.range(first..last)
    }

    /// Whether it is known not to have happened from `from` on.
    pub fn denied_since(&self, from: i64) -> bool {
        self.denied_from.is_some_and(|since| since <= from)
    }

    /// The last time at or before `upto`.
    pub fn last(&self, upto: i64) -> Option<i64> {
        let end = self.times.partition_point(|t| *t <= upto);
        end.checked_sub(1).and_then(|i| self.times.get(i)).copied()
    }

    /// On how many days it was noted in `(after, upto]`.
    pub fn days(&self, after: i64, upto: i64) -> usize {
        let mut count = 0;
        let mut day = i64::MIN;
        for time in self.between(after, upto) {
            let this = time.div_euclid(DAY);
            if this != day {
                count += 1;
                day = this;
            }
        }
        count
    }
}
