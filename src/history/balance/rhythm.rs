//! Day against night: what oxygen and pH are in the afternoon less what they were at dawn.

use jiff::Timestamp;
use jiff::tz::TimeZone;

use super::{Pending, Water, put};
use crate::history::memory::DAY;
use crate::vocabulary::ReadingId;

/// Local hours counted as dawn and as afternoon: gas from algae is lowest before and about sunrise, highest from
/// early afternoon on (Wurts & Durborow 1992, SRAC 464).
const DAWN: std::ops::Range<i64> = 3..9;
const AFTERNOON: std::ops::Range<i64> = 12..19;

/// The newest dawn and afternoon values.
#[derive(Debug, Clone)]
pub(super) struct Rhythm {
    zone: TimeZone,
    /// Seconds to add for local time, and from when to when that holds.
    offset: (i64, i64, i64),
    oxygen: Pairs,
    ph: Pairs,
}

/// Dawn and afternoon by place: time and value.
#[derive(Debug, Clone, Default)]
struct Pairs(Vec<(u16, Extreme, Extreme)>);

/// The time and value of the furthest reading of one dawn or afternoon.
type Extreme = Option<(i64, f64)>;

impl Rhythm {
    pub fn new(zone: TimeZone) -> Self {
        Self {
            zone,
            offset: (0, i64::MAX, i64::MIN),
            oxygen: Pairs::default(),
            ph: Pairs::default(),
        }
    }

    pub fn update(&mut self, water: &Water<'_>, pending: &mut Pending) {
        let ids = water.ids;
        if !water.changed(&[ids.oxygen, ids.ph]) {
            return;
        }
        let now = water.memory.now();
        let hour = self.local(now).rem_euclid(DAY) / 3600;
        let local_now = self.local(now);
        self.oxygen.update(
            water,
            ids.oxygen,
            ids.day_swing_oxygen,
            hour,
            local_now,
            pending,
        );
        self.ph
            .update(water, ids.ph, ids.day_swing_ph, hour, local_now, pending);
    }

    /// Local seconds; the zone is asked again only after its next change.
    fn local(&mut self, now: i64) -> i64 {
        let (offset, from, to) = self.offset;
        if (from..to).contains(&now) {
            return now + offset;
        }
        let Ok(stamp) = Timestamp::from_second(now) else {
            return now;
        };
        let offset = i64::from(self.zone.to_offset(stamp).seconds());
        let to = self
            .zone
            .following(stamp)
            .next()
            .map_or(i64::MAX, |t| t.timestamp().as_second());
        self.offset = (offset, now, to);
        now + offset
    }
}

impl Pairs {
    fn update(
        &mut self,
        water: &Water<'_>,
        id: Option<ReadingId>,
        swing: Option<ReadingId>,
        hour: i64,
        local: i64,
        pending: &mut Pending,
    ) {
        let Some(track) = id.and_then(|id| water.memory.reading(id)) else {
            return;
        };
        let now = water.memory.now();
        for (place, series) in track.places() {
            let Some((time, value)) = series.last() else {
                continue;
            };
            if time != now {
                continue;
            }
            let at = match self.0.iter().position(|p| p.0 == place) {
                Some(at) => at,
                None => {
                    self.0.push((place, None, None));
                    self.0.len() - 1
                }
            };
            let Some((_, dawn, afternoon)) = self.0.get_mut(at) else {
                continue;
            };
            if DAWN.contains(&hour) {
                keep(dawn, local, value, f64::min);
            } else if AFTERNOON.contains(&hour) {
                keep(afternoon, local, value, f64::max);
            } else {
                continue;
            }
            if let (Some((d, low)), Some((a, high))) = (*dawn, *afternoon)
                && (d - a).abs() <= 30 * 3600
            {
                put(pending, swing, place, Some(high - low));
            }
        }
    }
}

/// Keeps the furthest value of the same day, or begins a new day.
fn keep(held: &mut Extreme, local: i64, value: f64, further: impl Fn(f64, f64) -> f64) {
    *held = match *held {
        Some((time, before)) if time.div_euclid(DAY) == local.div_euclid(DAY) => {
            Some((local, further(before, value)))
        }
        _ => Some((local, value)),
    };
}
