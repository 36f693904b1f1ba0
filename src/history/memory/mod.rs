//! What a farm's history still says at a moment: a little of everything, so that memory stays flat however long the log.

mod bins;
mod series;
mod tracks;
mod trend;
mod whole;

pub use series::{Series, Usual};
pub use tracks::{EventTrack, SignTrack};
pub use trend::{Shift, median, shift};
pub use whole::{Changes, Memory, ReadingTrack};

/// Seconds of an hour.
pub const HOUR: i64 = 3600;
/// Seconds of a day.
pub const DAY: i64 = 86_400;
