//! Oxygen given in percent of saturation, turned into mg/L by the temperature and salinity last known and the
//! elevation of the site.

use super::problem::Trouble;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

use super::row::Row;

/// What the conversion needs, as far as it is known at a row.
#[derive(Debug)]
pub(super) struct Saturation {
    temperature: Option<ReadingId>,
    salinity: Option<ReadingId>,
    elevation: Option<f64>,
    /// Time and value of the latest temperature, and how long it counts.
    latest: Option<(i64, f64)>,
    good_for: i64,
    salt: f64,
}

impl Saturation {
    pub fn new(vocabulary: &Vocabulary, site: &Site) -> Self {
        let temperature = vocabulary.reading("temperature");
        Self {
            temperature,
            salinity: vocabulary.reading("salinity"),
            elevation: site.elevation_m,
            latest: None,
            good_for: temperature.map_or(0, |id| vocabulary[id].good_for),
            salt: 0.0,
        }
    }

    /// Takes note of what a row says about temperature and salinity.
    pub fn see(&mut self, row: &Row) {
        for (reading, value) in &row.values {
            if Some(*reading) == self.temperature {
                self.latest = Some((row.time, value.amount));
            } else if Some(*reading) == self.salinity {
                self.salt = value.amount;
            }
        }
    }

    /// mg/L of oxygen at this percentage of saturation. Water whose salinity the log never gave is taken for fresh.
    pub fn mg_per_l(&self, percent: f64, now: i64) -> Result<f64, Trouble> {
        let fresh = self.latest.filter(|(when, _)| now - when <= self.good_for);
        let (Some((_, temperature)), Some(elevation)) = (fresh, self.elevation) else {
            return Err(Trouble::new(
                "needs-temperature",
                "percent of saturation can't be turned into mg/L: no temperature is known in this row or shortly before",
                "log the temperature in the same row, or log mg/L",
            ));
        };
        full(temperature, self.salt, elevation)
            .map(|mg| mg * percent / 100.0)
            .ok_or_else(|| {
                Trouble::new(
                    "out-of-range",
                    format!("percent of saturation can't be turned into mg/L at {temperature} C and {} g/L salt", self.salt),
                    "check the temperature, or log mg/L",
                )
            })
    }
}

/// Oxygen at saturation, mg/L.
fn full(_temperature: f64, _salinity: f64, _elevation: f64) -> Option<f64> {
    None
}
