//! The words: readings, signs and events. Which words there are is knowledge (`knowledge/readings.toml`, `signs.toml`,
//! `events.toml`); this room gives them numbers and looks them up.

use serde::{Deserialize, Serialize};
use std::collections::HashMap;

/// Index of a reading in [`Vocabulary::readings`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct ReadingId(pub u16);

/// Index of a sign in [`Vocabulary::signs`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct SignId(pub u16);

/// Index of an event in [`Vocabulary::events`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
pub struct EventId(pub u16);

/// How a thing is asked for at the tank.
#[derive(Debug, Clone, Default, Serialize, Deserialize)]
pub struct Question {
    /// The question in plain words, with what to look for and where.
    pub text: String,
    /// Minutes of work it takes to answer.
    pub effort: f64,
    /// The screen it belongs to: things looked at in the same place are asked together.
    pub screen: String,
}

/// A number that a person or a probe gives, or that is computed from such.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Reading {
    /// Contract id, such as `total-ammonia`.
    pub id: String,
    /// What people call it, such as "total ammonia".
    pub name: String,
    /// The unit it is kept in, as the contract writes it.
    pub unit: String,
    /// Other units a column may state (spelled as `water::units` knows them).
    pub also: Vec<String>,
    /// Computed from other readings, never measured.
    pub derived: bool,
    /// Belongs to its place (oxygen, deaths); otherwise it is the water of the whole loop.
    pub local: bool,
    /// A sum or count over the time since the row before (makeup water, deaths), not a level.
    pub per_interval: bool,
    /// Smallest honest difference: absolute part, in its unit.
    pub resolution: f64,
    /// Smallest honest difference: share of the value.
    pub resolution_share: f64,
    /// Values outside are a fact about the instrument, not about the water.
    pub plausible: (f64, f64),
    /// Seconds a value may count as present.
    pub good_for: i64,
    /// Decimals to print.
    pub decimals: usize,
    /// How it is asked for.
    pub question: Question,
    /// Where the numbers come from.
    pub source: Vec<String>,
}

/// A thing a person sees or not.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Sign {
    /// Contract id, such as `brown-gills`.
    pub id: String,
    /// A clause for people, such as "the gills are brown".
    pub name: String,
    /// How often it is seen on ordinary days.
    pub background: f64,
    /// Signs of one group tell the same thing and share their weight; empty for none.
    pub group: String,
    /// Must be explained by a cause.
    pub alarming: bool,
    /// Stays with its place.
    pub local: bool,
    /// Seconds it may count as present.
    pub good_for: i64,
    /// How it is asked for.
    pub question: Question,
    /// Where the numbers come from.
    pub source: Vec<String>,
}

/// A thing that happened.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Event {
    /// Contract id, such as `filter-cleaned`.
    pub id: String,
    /// A clause for people, such as "a filter was cleaned".
    pub name: String,
    /// Days it may still matter.
    pub window_days: f64,
    /// How it is asked for.
    pub question: Question,
    /// Where the numbers come from.
    pub source: Vec<String>,
}

/// All the words, with their numbers.
#[derive(Debug, Clone, Default, Serialize, Deserialize)]
pub struct Vocabulary {
    /// Readings, measured and derived.
    pub readings: Vec<Reading>,
    /// Signs.
    pub signs: Vec<Sign>,
    /// Events.
    pub events: Vec<Event>,
    reading_ids: HashMap<String, ReadingId>,
    sign_ids: HashMap<String, SignId>,
    event_ids: HashMap<String, EventId>,
}

fn number(items: usize) -> u16 {
    u16::try_from(items).unwrap_or(u16::MAX)
}

impl Vocabulary {
    /// Adds a reading; the last of two with one id wins (the loader has reported it).
    pub fn add_reading(&mut self, reading: Reading) -> ReadingId {
        let id = ReadingId(number(self.readings.len()));
        self.reading_ids.insert(reading.id.clone(), id);
        self.readings.push(reading);
        id
    }

    /// Adds a sign.
    pub fn add_sign(&mut self, sign: Sign) -> SignId {
        let id = SignId(number(self.signs.len()));
        self.sign_ids.insert(sign.id.clone(), id);
        self.signs.push(sign);
        id
    }

    /// Adds an event.
    pub fn add_event(&mut self, event: Event) -> EventId {
        let id = EventId(number(self.events.len()));
        self.event_ids.insert(event.id.clone(), id);
        self.events.push(event);
        id
    }

    /// The reading with this id.
    pub fn reading(&self, id: &str) -> Option<ReadingId> {
        self.reading_ids.get(id).copied()
    }

    /// The sign with this id.
    pub fn sign(&self, id: &str) -> Option<SignId> {
        self.sign_ids.get(id).copied()
    }

    /// The event with this id.
    pub fn event(&self, id: &str) -> Option<EventId> {
        self.event_ids.get(id).copied()
    }
}

impl std::ops::Index<ReadingId> for Vocabulary {
    type Output = Reading;
    fn index(&self, id: ReadingId) -> &Reading {
        &self.readings[usize::from(id.0)]
    }
}

impl std::ops::Index<SignId> for Vocabulary {
    type Output = Sign;
    fn index(&self, id: SignId) -> &Sign {
        &self.signs[usize::from(id.0)]
    }
}

impl std::ops::Index<EventId> for Vocabulary {
    type Output = Event;
    fn index(&self, id: EventId) -> &Event {
        &self.events[usize::from(id.0)]
    }
}
