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
}

/// The days of the log that count as "at present".
const WINDOW: i64 = 3 * DAY;
/// Feed, protein and digestion are known to about so much.
const LOAD_SHARE: f64 = 0.2;
/// Without two readings nothing tells whether ammonia rises or falls: the turnover may be so much off.
const UNSEEN_LOW: f64 = 0.3;
const UNSEEN_HIGH: f64 = 1.6;

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
    let made = Span {
        low: made * (1.0 - LOAD_SHARE),
        middle: made,
        high: made * (1.0 + LOAD_SHARE),
    };
    let chem = Chemistry::at(Part::Temperature.of(state), farm.ionic, farm.salinity, farm.pressure)?;
    let share_at = |part: Part, value: f64, second: bool| {
        let mut there = *state;
        part.set(&mut there, value.max(0.0));
        let n = nitrifying(farm, &there, &chem, ph);
        if second { n.nitrite.1 } else { n.ammonia.1 }
    };
    let shares = |part: Part, id: &str, second: bool| {
        let level = readings.middle(id, DAY).unwrap_or(part.of(state));
        let off = readings.resolution(id, level);
        let small = (level - off).max(level / 4.0).max(off / 10.0);
        let (a, b) = (share_at(part, small, second), share_at(part, level + off, second));
        (a.min(b), share_at(part, level.max(small), second), a.max(b))
    };
    // What a clean wetted area can hold bounds what is believed, unless the log shows more at the least.
    let bounded = |span: Span| match farm.ceiling {
        Some(ceiling) => {
            let top = ceiling.max(span.low);
            Span {
                low: span.low,
                middle: span.middle.min(top),
                high: span.high.min(top),
            }
        }
        None => span,
    };
    let first = turnover(readings, "total-ammonia", made);
    let ammonia = bounded(bacteria(first, shares(Part::Ammonia, "total-ammonia", false)));
    let second = turnover(readings, "nitrite", first);
    let nitrite = bounded(bacteria(second, shares(Part::Nitrite, "nitrite", true)));
    Some(Capacity { ammonia, nitrite })
}
