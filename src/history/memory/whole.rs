//! Everything that is remembered, and what a new row changed in it.

use std::collections::VecDeque;

use super::series::Series;
use super::tracks::{EventTrack, SignTrack};
use crate::history::log::{Row, Value};
use crate::vocabulary::{EventId, ReadingId, SignId, Vocabulary};

/// Instruments that read within so many seconds of each other read the same water.
const TOGETHER: i64 = 15 * 60;
const ODD_KEPT: usize = 16;
/// The present of a memory that has seen nothing: long before any log, and far from overflow when windows are taken off.
const BEFORE_EVERYTHING: i64 = i64::MIN / 4;

/// What is remembered of one reading.
#[derive(Debug, Clone, Default)]
pub struct ReadingTrack {
    /// By place number (0: the whole loop). A reading of shared water has one series, under 0.
    series: Vec<(u16, Series)>,
    odd: VecDeque<(i64, f64)>,
    instruments: Vec<(u32, i64, f64)>,
    disagreements: VecDeque<(i64, f64)>,
}

impl ReadingTrack {
    /// The series of every place, with the place's number.
    pub fn places(&self) -> impl Iterator<Item = (u16, &Series)> {
        self.series.iter().map(|(place, series)| (*place, series))
    }

    /// The series with the newest value.
    pub fn newest(&self) -> Option<&Series> {
        self.series
            .iter()
            .map(|(_, s)| s)
            .max_by_key(|s| s.last().map(|l| l.0))
    }

    /// Values that water cannot have, from `from` on.
    pub fn odd_since(&self, from: i64) -> impl DoubleEndedIterator<Item = &(i64, f64)> {
        self.odd.iter().filter(move |o| o.0 >= from)
    }

    /// Differences between two instruments or places that read at the same time, from `from` on.
    pub fn disagreements_since(&self, from: i64) -> impl DoubleEndedIterator<Item = &(i64, f64)> {
        self.disagreements.iter().filter(move |o| o.0 >= from)
    }

    fn series(&mut self, place: u16) -> Option<&mut Series> {
        let at = match self.series.iter().position(|(p, _)| *p == place) {
            Some(at) => at,
            None => {
                self.series.push((place, Series::default()));
                self.series.len() - 1
            }
        };
        self.series.get_mut(at).map(|(_, s)| s)
    }

    fn compare(&mut self, instrument: u32, time: i64, value: f64) {
        for (other, when, theirs) in &self.instruments {
            if *other != instrument && time - when <= TOGETHER {
                if self.disagreements.len() == ODD_KEPT {
                    self.disagreements.pop_front();
                }
                self.disagreements.push_back((time, value - theirs));
            }
        }
        match self.instruments.iter_mut().find(|(i, ..)| *i == instrument) {
            Some(known) => *known = (instrument, time, value),
            None => self.instruments.push((instrument, time, value)),
        }
    }
}

/// What the last row changed.
#[derive(Debug, Clone, Default)]
pub struct Changes {
    /// Readings with a new value, measured or derived.
    pub readings: Vec<ReadingId>,
    /// Signs looked for.
    pub signs: Vec<SignId>,
    /// Events noted.
    pub events: Vec<EventId>,
}

impl Changes {
    fn clear(&mut self) {
        self.readings.clear();
        self.signs.clear();
        self.events.clear();
    }
}

/// Everything that is remembered of one farm.
#[derive(Debug, Clone)]
pub struct Memory {
    now: i64,
    begun: Option<i64>,
    readings: Vec<ReadingTrack>,
    local: Vec<bool>,
    signs: Vec<SignTrack>,
    events: Vec<EventTrack>,
    keeps_events: bool,
    changes: Changes,
    doubtful: Vec<bool>,
}

impl Memory {
    /// An empty memory for these words.
    pub fn new(vocabulary: &Vocabulary) -> Self {
        Self {
            now: BEFORE_EVERYTHING,
            begun: None,
            readings: vec![ReadingTrack::default(); vocabulary.readings.len()],
            local: vocabulary.readings.iter().map(|r| r.local).collect(),
            signs: vec![SignTrack::default(); vocabulary.signs.len()],
            events: vec![EventTrack::default(); vocabulary.events.len()],
            keeps_events: false,
            changes: Changes::default(),
            doubtful: vec![false; vocabulary.readings.len()],
        }
    }

    /// Whether the last value of a reading stands alone: far from what is usual here, not borne out by the value before
    /// it, by any other reading of the time, or by anything seen or done. Such a value is to be read again before it is believed.
    pub fn is_doubtful(&self, id: ReadingId) -> bool {
        self.doubtful
            .get(usize::from(id.0))
            .copied()
            .unwrap_or(false)
    }

    /// Marks a value computed from a doubtful one.
    pub fn doubt(&mut self, id: ReadingId, doubtful: bool) {
        if let Some(mark) = self.doubtful.get_mut(usize::from(id.0))
            && *mark != doubtful
        {
            *mark = doubtful;
            self.changes.readings.push(id);
        }
    }

    /// The time up to which everything is known, in unix seconds.
    pub fn now(&self) -> i64 {
        self.now
    }

    /// The time of the first row.
    pub fn begun(&self) -> Option<i64> {
        self.begun
    }

    /// Moves the present forward without a new row.
    pub fn advance(&mut self, now: i64) {
        self.now = self.now.max(now);
        self.changes.clear();
    }

    /// Says that this log notes events, so that one not noted probably did not happen.
    pub fn keeps_events(&mut self) {
        self.keeps_events = true;
    }

    /// Whether events not noted probably did not happen.
    pub fn does_keep_events(&self) -> bool {
        self.keeps_events
    }

    /// Takes in a row. Rows come in the order of time.
    pub fn observe(&mut self, row: &Row) {
        self.changes.clear();
        self.now = self.now.max(row.time);
        self.begun.get_or_insert(row.time);
        let place = row.place.map_or(0, |p| p.0 + 1);
        let instrument = (u32::from(row.file) << 16) | u32::from(place);
        for (reading, value) in &row.values {
            self.measured(*reading, row.time, place, instrument, *value);
        }
        for (reading, value) in &row.odd {
            if let Some(track) = self.readings.get_mut(usize::from(reading.0)) {
                if track.odd.len() == ODD_KEPT {
                    track.odd.pop_front();
                }
                track.odd.push_back((row.time, *value));
                self.changes.readings.push(*reading);
            }
        }
        for (sign, seen) in &row.signs {
            if let Some(track) = self.signs.get_mut(usize::from(sign.0)) {
                track.push(row.time, place, *seen);
                self.changes.signs.push(*sign);
            }
        }
        for event in &row.events {
            self.happened(*event, row.time);
        }
        self.doubt_lonely(row);
    }

    /// Whether something out of the ordinary was noted in the days before: an event that this log does not note anyway.
    fn something_happened(&self, now: i64) -> bool {
        const RECENT: i64 = 5 * super::DAY;
        const HABIT: i64 = 45 * super::DAY;
        self.events.iter().any(|track| {
            track.last(now).is_some_and(|time| now - time <= RECENT)
                && track.days(now - HABIT, now - RECENT) == 0
        })
    }

    /// Looks for values of this row that stand alone.
    fn doubt_lonely(&mut self, row: &Row) {
        let seen_something = row.signs.iter().any(|(_, seen)| *seen)
            || !row.odd.is_empty()
            || self.something_happened(row.time);
        let mut outliers: Vec<(ReadingId, bool)> = Vec::new();
        for (id, _) in &row.values {
            let index = usize::from(id.0);
            let per_place = self.local.get(index).copied().unwrap_or(true);
            let judged = (!per_place)
                .then(|| self.readings.get(index)?.newest())
                .flatten()
                .and_then(Series::outlier);
            match judged {
                Some(outlier) => outliers.push((*id, outlier)),
                None => self.doubt(*id, false),
            }
        }
        let lonely =
            outliers.iter().filter(|(_, outlier)| *outlier).count() == 1 && !seen_something;
        for (id, outlier) in outliers {
            self.doubt(id, outlier && lonely);
        }
    }

    fn measured(&mut self, id: ReadingId, time: i64, place: u16, instrument: u32, value: Value) {
        let index = usize::from(id.0);
        let local = self.local.get(index).copied().unwrap_or(false);
        let Some(track) = self.readings.get_mut(index) else {
            return;
        };
        if !local {
            track.compare(instrument, time, value.amount);
        }
        if let Some(series) = track.series(if local { place } else { 0 }) {
            series.push(time, value.amount, value.below);
        }
        self.changes.readings.push(id);
    }

    /// Adds a value that was computed from others.
    pub fn derived(&mut self, id: ReadingId, place: u16, value: f64) {
        let now = self.now;
        if let Some(series) = self
            .readings
            .get_mut(usize::from(id.0))
            .and_then(|t| t.series(place))
            && value.is_finite()
        {
            series.push(now, value, false);
            self.changes.readings.push(id);
        }
    }

    /// Notes an event, also one that is told later than the last row.
    pub fn happened(&mut self, event: EventId, time: i64) {
        if let Some(track) = self.events.get_mut(usize::from(event.0)) {
            track.push(time);
            self.changes.events.push(event);
        }
    }

    /// Notes that an event surely has not happened since `from`.
    pub fn did_not_happen(&mut self, event: EventId, from: i64) {
        if let Some(track) = self.events.get_mut(usize::from(event.0)) {
            track.deny(from);
            self.changes.events.push(event);
        }
    }

    /// What the last row changed.
    pub fn changes(&self) -> &Changes {
        &self.changes
    }

    /// What is remembered of a reading.
    pub fn reading(&self, id: ReadingId) -> Option<&ReadingTrack> {
        self.readings.get(usize::from(id.0))
    }

    /// What is remembered of a sign.
    pub fn sign(&self, id: SignId) -> Option<&SignTrack> {
        self.signs.get(usize::from(id.0))
    }

    /// What is remembered of an event.
    pub fn event(&self, id: EventId) -> Option<&EventTrack> {
        self.events.get(usize::from(id.0))
    }
}
