//! What can be asked, and what can be answered.

use crate::history::answers::Happened;
use crate::vocabulary::{EventId, Question, ReadingId, SignId, Vocabulary};

/// One thing to ask for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Ask {
    /// A number.
    Reading(ReadingId),
    /// Seen or not.
    Sign(SignId),
    /// Happened or not, and when.
    Event(EventId),
}

impl Ask {
    /// The thing with this id.
    pub fn find(words: &Vocabulary, id: &str) -> Option<Self> {
        words
            .sign(id)
            .map(Self::Sign)
            .or_else(|| words.reading(id).map(Self::Reading))
            .or_else(|| words.event(id).map(Self::Event))
    }

    /// Its id.
    pub fn id(self, words: &Vocabulary) -> &str {
        match self {
            Self::Reading(id) => &words[id].id,
            Self::Sign(id) => &words[id].id,
            Self::Event(id) => &words[id].id,
        }
    }

    /// What people call it: a name or a clause.
    pub fn name(self, words: &Vocabulary) -> &str {
        match self {
            Self::Reading(id) => &words[id].name,
            Self::Sign(id) => &words[id].name,
            Self::Event(id) => &words[id].name,
        }
    }

    /// How it is asked for.
    pub fn question(self, words: &Vocabulary) -> &Question {
        match self {
            Self::Reading(id) => &words[id].question,
            Self::Sign(id) => &words[id].question,
            Self::Event(id) => &words[id].question,
        }
    }
}

/// What is answered.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Answer {
    /// A number, in the unit that the reading is kept in.
    Number(f64),
    /// Seen or not.
    Seen(bool),
    /// Happened or not.
    Happened(Happened),
    /// Don't know.
    Unknown,
    /// Can't be measured now: nothing else of its screen is asked for either.
    CannotMeasure,
}

/// An answer that was given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Given {
    /// To what.
    pub ask: Ask,
    /// What.
    pub answer: Answer,
    /// When, unix seconds.
    pub time: i64,
}
