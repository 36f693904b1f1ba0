//! A blank to fill in: what is measured, in which unit, and the band to compare it with.

use crate::engine::Limits;
use crate::history::log::Log;
use crate::knowledge::Side;
use crate::record::usual_unit;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};
use crate::water::units;

/// A blank.
#[derive(Debug, Clone, PartialEq)]
pub struct Blank {
    /// The reading.
    pub reading: ReadingId,
    /// The unit to write it in: that of the log's column, else what the site's people read.
    pub unit: String,
    /// Lower end of the comfort band, in that unit.
    pub low: Option<f64>,
    /// Upper end.
    pub high: Option<f64>,
    /// The last value in that unit, and when it was read (unix seconds).
    pub last: Option<(i64, f64)>,
}

impl Blank {
    /// The blank of a reading.
    pub fn of(
        reading: ReadingId,
        log: Option<&Log>,
        site: &Site,
        limits: &Limits<'_>,
        words: &Vocabulary,
    ) -> Self {
        let about = &words[reading];
        let column = log.and_then(|log| {
            let columns = log.columns.iter().flat_map(|c| &c.readings);
            columns
                .filter(|c| c.reading == reading)
                .map(|c| c.unit.clone())
                .next_back()
        });
        let unit = column.unwrap_or_else(|| usual_unit(about, site));
        let into = |value: f64| -> Option<f64> {
            if unit == about.unit {
                return Some(value);
            }
            units::from_canonical(&about.id, &unit, value).ok()
        };
        let target = |side| limits.target(reading, side).and_then(into);
        let newest = log.and_then(|log| {
            let mut rows = log.rows.iter().rev();
            rows.find_map(|row| row.value(reading).map(|v| (row.time, v.amount)))
        });
        Self {
            reading,
            low: target(Side::Low),
            high: target(Side::High),
            last: newest.and_then(|(time, value)| Some((time, into(value)?))),
            unit,
        }
    }
}
