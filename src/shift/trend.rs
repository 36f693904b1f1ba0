//! Extra checks that the readings call for: out of the comfort band, or on the way out of it.

use super::list::Ground;
use crate::knowledge::Side;
use crate::vocabulary::ReadingId;

/// Why a reading is to be read again.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Trend {
    /// Which.
    pub reading: ReadingId,
    /// The last value, in the kept unit, and when it was read (unix seconds).
    pub value: f64,
    /// When it was read.
    pub time: i64,
    /// The end of the band that is passed or neared.
    pub limit: f64,
    /// That is the upper end.
    pub high: bool,
    /// It is passed already.
    pub outside: bool,
    /// Which way it moves: above 0 rising, below 0 falling, 0 neither.
    pub way: i8,
}

/// How far back a trend is looked for.
const WINDOW: i64 = 3 * 86_400;
/// A value that would pass the limit within so long at its present pace is on the way out.
const AHEAD: f64 = 2.0 * 86_400.0;
/// A value older than this says nothing about today.
const STALE: i64 = 7 * 86_400;

/// What the readings call for, those out of their band first.
pub(super) fn trends(ground: &Ground<'_, '_>) -> Vec<Trend> {
    let words = &ground.advice.knowledge.vocabulary;
    let mut found: Vec<Trend> = (0..words.readings.len())
        .filter_map(|i| u16::try_from(i).ok().map(ReadingId))
        .filter(|id| !words[*id].derived && !words[*id].per_interval)
        .filter_map(|id| trend(id, ground))
        .collect();
    found.sort_by_key(|t| !t.outside);
    found
}

fn trend(id: ReadingId, ground: &Ground<'_, '_>) -> Option<Trend> {
    let memory = ground.advice.engine.memory();
    let reading = &ground.advice.knowledge.vocabulary[id];
    let series = memory.reading(id)?.newest()?;
    let (time, value) = series.last()?;
    if ground.now - time > STALE || series.last_is_below() {
        return None;
    }
    let least = reading
        .resolution
        .max(reading.resolution_share * value.abs());
    let shift = series.shift(WINDOW);
    let change = shift.map_or(0.0, |s| s.change);
    let way = match change {
        c if c >= 2.0 * least => 1,
        c if c <= -2.0 * least => -1,
        _ => 0,
    };
    #[allow(clippy::cast_precision_loss)] // windows are far below 2^53 seconds
    let pace = shift.map_or(0.0, |s| change / (s.span.max(1) as f64));
    let limit = |side| ground.advice.limits.target(id, side);
    let one = |limit: f64, high: bool| {
        let beyond = if high { value - limit } else { limit - value };
        let outside = beyond > 0.0;
        let toward = if high { pace } else { -pace };
        let nears = way != 0 && toward > 0.0 && -beyond < toward * AHEAD;
        // What lies outside and stays there is no news: it is read again in half the time of its round.
        let news = way != 0 || ground.now - time >= usual(id, ground) / 2;
        ((outside && news) || nears).then_some(Trend {
            reading: id,
            value,
            time,
            limit,
            high,
            outside,
            way,
        })
    };
    let high = limit(Side::High).and_then(|l| one(l, true));
    high.or_else(|| limit(Side::Low).and_then(|l| one(l, false)))
}

/// How often a reading is read anyway, seconds; a day where no round asks for it.
fn usual(id: ReadingId, ground: &Ground<'_, '_>) -> i64 {
    let rounds = ground.advice.knowledge.rounds.iter();
    rounds
        .filter(|r| r.readings.contains(&id))
        .map(|r| r.every)
        .min()
        .unwrap_or(86_400)
}
