//! Which routine readings are overdue: "steady" may only be said when none of those it rests on is.

use super::Missing;
use crate::course::{Ground, span};
use crate::vocabulary::ReadingId;

/// The readings that "steady" rests on (data contract, section 8).
const STEADY_NEEDS: [&str; 5] = [
    "temperature",
    "ph",
    "dissolved-oxygen",
    "total-ammonia",
    "nitrite",
];

/// An overdue reading.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Overdue {
    pub reading: ReadingId,
    /// Seconds since it was last read; `None`: never.
    pub age: Option<i64>,
    /// Seconds within which the routine rounds ask for it.
    pub every: i64,
}

/// The readings among those that "steady" rests on that are overdue at `present`, unix seconds.
pub(super) fn overdue(
    knowledge: &crate::knowledge::Knowledge,
    memory: &crate::history::memory::Memory,
    present: i64,
) -> Vec<Overdue> {
    STEADY_NEEDS
        .iter()
        .filter_map(|id| {
            let reading = knowledge.vocabulary.reading(id)?;
            let every = knowledge
                .rounds
                .iter()
                .filter(|r| r.readings.contains(&reading))
                .map(|r| r.every)
                .min()?;
            let last = memory.reading(reading)?.newest().and_then(|s| s.last());
            let age = last.map(|(time, _)| present - time);
            age.is_none_or(|age| age > every).then_some(Overdue {
                reading,
                age,
                every,
            })
        })
        .collect()
}

/// Overdue readings as things that are missing.
pub(super) fn missing(ground: &Ground<'_, '_>, overdue: &[Overdue]) -> Vec<Missing> {
    overdue
        .iter()
        .map(|o| Missing {
            id: ground.knowledge.vocabulary[o.reading].id.clone(),
            why: match o.age {
                Some(age) => format!("last read {} ago, due every {}", span(age), span(o.every)),
                None => format!("never read, due every {}", span(o.every)),
            },
        })
        .collect()
}
