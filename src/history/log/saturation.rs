//! Oxygen against physics: percent of saturation turned into mg/L, and oxygen that no water holds told apart. Both need
//! the temperature and salinity last known, and the elevation of the site.

use super::problem::Trouble;
use super::row::Row;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};
use crate::water::oxygen;

/// What is known at a row.
#[derive(Debug)]
pub(super) struct Saturation {
    temperature: Option<ReadingId>,
    salinity: Option<ReadingId>,
    oxygen: Option<ReadingId>,
    /// Air pressure, where the site says how high it lies.
    kpa: Option<f64>,
    /// Time and value of the latest temperature, and how long it counts.
    latest: Option<(i64, f64)>,
    good_for: i64,
    /// Water whose salinity the log never gave is taken for fresh.
    salt: f64,
    /// The highest percentage that water shows.
    most: f64,
    /// No water holds less at that percentage: up to here nothing need be worked out.
    never_too_much: f64,
}

impl Saturation {
    pub fn new(vocabulary: &Vocabulary, site: &Site) -> Self {
        let temperature = vocabulary.reading("temperature");
        let percent = vocabulary.reading("oxygen-saturation");
        let most = percent.map_or(f64::INFINITY, |id| vocabulary[id].plausible.1);
        let kpa = site.elevation_m.and_then(|m| oxygen::pressure_at(m).ok());
        // Warm and salt water holds least.
        let (warm, salt) = (oxygen::TEMPERATURE.high, oxygen::SALINITY.high);
        let least = oxygen::solubility(warm, salt, kpa.unwrap_or(oxygen::SEA_LEVEL_KPA));
        Self {
            temperature,
            salinity: vocabulary.reading("salinity"),
            oxygen: vocabulary.reading("dissolved-oxygen"),
            kpa,
            latest: None,
            good_for: temperature.map_or(0, |id| vocabulary[id].good_for),
            salt: 0.0,
            most,
            never_too_much: least.map_or(0.0, |mg| mg * most / 100.0),
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

    fn temperature(&self, now: i64) -> Option<f64> {
        let fresh = self.latest.filter(|(when, _)| now - when <= self.good_for);
        fresh.map(|(_, temperature)| temperature)
    }

    /// mg/L of oxygen at this percentage of saturation.
    pub fn mg_per_l(&self, percent: f64, now: i64) -> Result<f64, Trouble> {
        let (Some(temperature), Some(kpa)) = (self.temperature(now), self.kpa) else {
            return Err(Trouble::new(
                "needs-temperature",
                "percent of saturation can't be turned into mg/L: no temperature is known in this row or shortly before",
                "log the temperature in the same row, or log mg/L",
            ));
        };
        match oxygen::solubility(temperature, self.salt, kpa) {
            Ok(full) => Ok(full * percent / 100.0),
            Err(wrong) => Err(Trouble::new(
                "out-of-range",
                format!("percent of saturation can't be turned into mg/L: {wrong}"),
                "check the temperature and the salinity, or log mg/L",
            )),
        }
    }

    /// Why this oxygen, in mg/L, is more than water shows; `None` when it is not, or when nobody can tell. Where the
    /// elevation is not known the sea level stands in, which only ever calls too few values odd.
    pub fn too_much(&self, mg_per_l: f64, now: i64) -> Option<Trouble> {
        if mg_per_l <= self.never_too_much {
            return None;
        }
        let kpa = self.kpa.unwrap_or(oxygen::SEA_LEVEL_KPA);
        let full = oxygen::solubility(self.temperature(now)?, self.salt, kpa).ok()?;
        let percent = 100.0 * mg_per_l / full;
        (percent > self.most).then(|| {
            Trouble::new(
                "implausible",
                format!(
                    "oxygen of {mg_per_l:.1} mg/L would be {percent:.0} % of saturation, more than the {} % that water shows; it is kept as a fact about the instrument",
                    self.most
                ),
                "check and calibrate the oxygen meter, and check the unit of the column",
            )
        })
    }

    /// The reading that these bounds are about.
    pub fn oxygen(&self) -> Option<ReadingId> {
        self.oxygen
    }
}
