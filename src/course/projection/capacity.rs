//! What the filter can do at present, reckoned from the log: what must have been turned over, given what was fed and how
//! ammonia and nitrite moved, set against what one unit of bacteria would have done in that water.

use super::farm::Farm;
use super::rates::nitrifying;
use super::readings::Readings;
use super::state::{Chemistry, Part, State};
use crate::history::memory::DAY;

/// A value and how sure it is.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Span {
    /// As low as it may be.
    pub low: f64,
    /// What is likeliest.
    pub middle: f64,
    /// As high as it may be.
    pub high: f64,
}

impl Span {
    /// The same three times a factor.
    #[must_use]
    pub fn times(self, factor: f64) -> Self {
        Self {
            low: self.low * factor,
            middle: self.middle * factor,
            high: self.high * factor,
        }
    }
}

/// The bacteria there are: mg N/L/day at 20 C with nothing short.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Capacity {
    /// Ammonia oxidizers.
    pub ammonia: Span,
    /// Nitrite oxidizers.
    pub nitrite: Span,
    /// Total ammonia at present within the error of its test, mg/L as N: few bacteria go with the high end.
    pub total_ammonia: Span,
    /// Nitrite likewise.
    pub nitrite_level: Span,
}

/// The days of the log that count as "at present".
const WINDOW: i64 = 3 * DAY;
/// Without two readings nothing tells whether ammonia rises or falls: the turnover may be so much off.
const UNSEEN_LOW: f64 = 0.6;
const UNSEEN_HIGH: f64 = 1.6;

/// Where growth and decay balance bacteria work at about a fifth of what they could (decay over growth, Metcalf & Eddy);
/// twice as many are the most that a feed keeps alive for long.
const MOST_PER_LOAD: f64 = 10.0;

/// A turnover (mg N/L/day) as low and as high as it may be.
fn turnover(readings: &Readings<'_>, id: &str, made: Span) -> Span {
    let least_span = DAY / 4;
    let slope = readings
        .shift(id, WINDOW)
        .filter(|s| s.span >= least_span)
        .map(|s| {
            #[allow(clippy::cast_precision_loss)] // windows are days
            let days = s.span as f64 / 86_400.0;
            let rate = s.change / days;
            let unsure = readings.resolution(id, s.early) / days;
            (rate, unsure)
        });
    match slope {
        Some((rate, unsure)) => Span {
            low: (made.low - rate - unsure).max(0.0),
            middle: (made.middle - rate).max(0.0),
            high: (made.high - rate + unsure).max(0.0),
        },
        None => Span {
            low: UNSEEN_LOW * made.low,
            middle: made.middle,
            high: UNSEEN_HIGH * made.high,
        },
    }
}

/// Bacteria that turn over so much where one unit turns over `share`, which a reading's own error may make smaller or
/// larger.
fn bacteria(turned: Span, (small, share, large): (f64, f64, f64)) -> Span {
    let by = |amount: f64, share: f64| amount / share.max(1e-6);
    Span {
        low: by(turned.low, large),
        middle: by(turned.middle, share),
        high: by(turned.high, small),
    }
}

/// The bacteria of a farm, from its log; `None` when nothing tells what was fed. `state` is the water now.
pub fn estimate(
    farm: &Farm<'_>,
    readings: &Readings<'_>,
    state: &State,
    feed: f64,
    ph: f64,
) -> Option<Capacity> {
    if farm.load <= 0.0 {
        return None;
    }
    let starved = farm.kinetics.starved_share.value;
    let made = farm.load * (starved + (1.0 - starved) * feed);
    // What a feed gives is known to a fifth at best; but load and turnover stand or fall together, so that does not count.
    let made = Span {
        low: made,
        middle: made,
        high: made,
    };
    let chem = Chemistry::at(
        Part::Temperature.of(state),
        farm.ionic,
        farm.salinity,
        farm.pressure,
    )?;
    let share_at = |part: Part, value: f64, second: bool| {
        let mut there = *state;
        part.set(&mut there, value.max(0.0));
        let n = nitrifying(farm, &there, &chem, ph);
        if second { n.nitrite.1 } else { n.ammonia.1 }
    };
    let level = |part: Part, id: &str| {
        let middle = part.of(state);
        let off = readings.resolution(id, middle);
        Span {
            low: (middle - off).max(middle / 4.0).max(off / 10.0),
            middle: middle.max(off / 10.0),
            high: middle + off,
        }
    };
    let shares = |part: Part, level: Span, second: bool| {
        let (a, b) = (
            share_at(part, level.low, second),
            share_at(part, level.high, second),
        );
        (a.min(b), share_at(part, level.middle, second), a.max(b))
    };
    let total_ammonia = level(Part::Ammonia, "total-ammonia");
    let nitrite_level = level(Part::Nitrite, "nitrite");
    // No more bacteria than this feed can keep alive, nor, unless the log shows more at the least, than the wetted area
    // can hold.
    let fed = MOST_PER_LOAD * farm.load;
    let bounded = |span: Span| {
        let low = span.low.min(fed);
        let top = farm.ceiling.map_or(fed, |c| fed.min(c.max(low)));
        Span {
            low,
            middle: span.middle.min(top),
            high: span.high.min(top),
        }
    };
    let first = turnover(readings, "total-ammonia", made);
    let ammonia = bounded(bacteria(first, shares(Part::Ammonia, total_ammonia, false)));
    let second = turnover(readings, "nitrite", first);
    let nitrite = bounded(bacteria(second, shares(Part::Nitrite, nitrite_level, true)));
    Some(Capacity {
        ammonia,
        nitrite,
        total_ammonia,
        nitrite_level,
    })
}
