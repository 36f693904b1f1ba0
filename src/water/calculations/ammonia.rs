//! Un-ionized ammonia.

use super::common::{IONIC_STRENGTH, PH, SALINITY, TEMPERATURE, TOTAL_AMMONIA};
use super::{Calculation, Key, Subject};
use crate::water::units::table as units;
use crate::water::{ammonia, anthonisen, masses, range::Range};

const EMERSON: &str = "Emerson, Russo, Lund & Thurston 1975, J. Fish. Res. Board Can. 32:2379-2383";
const SALT: &str = "salinity: fit to Clegg & Whitfield 1995 (PyCO2SYS 1.8.3.4), 0-35 g/kg";
const DAVIES: &str = "activity: Davies 1962 (from memory)";
const ANTHONISEN: &str =
    "Anthonisen et al. 1976, J. Water Pollut. Control Fed. 48:835 (from memory)";

const LIMIT: Key = Key::number(
    "limit",
    units::AMMONIA,
    Range::positive("limit", "mg/L as N"),
    "un-ionized ammonia to stay at",
);
const NITRITE: Key = Key::number(
    "nitrite",
    units::NITRITE,
    Range::not_negative("nitrite", "mg/L as N"),
    "nitrite",
);

pub static SUBJECT: Subject = Subject {
    title: "Ammonia and nitrous acid",
    listed: true,
    calculations: &[
        Calculation {
            name: "un-ionized-ammonia",
            help: "un-ionized ammonia in a measured total ammonia",
            unit: "mg/L as N",
            keys: &[TOTAL_AMMONIA, TEMPERATURE, PH, SALINITY],
            source: &[EMERSON, SALT],
            compute: |i| {
                let (total, t) = (i.num("total_ammonia")?, i.num("temperature")?);
                Ok(ammonia::un_ionized(
                    total,
                    t,
                    i.num("ph")?,
                    i.num("salinity")?,
                )?)
            },
        },
        Calculation {
            name: "un-ionized-ammonia-fraction",
            help: "share of total ammonia that is un-ionized",
            unit: "fraction",
            keys: &[TEMPERATURE, PH, SALINITY],
            source: &[EMERSON, SALT],
            compute: |i| {
                let (t, ph) = (i.num("temperature")?, i.num("ph")?);
                Ok(ammonia::fraction(t, ph, i.num("salinity")?)?)
            },
        },
        Calculation {
            name: "un-ionized-ammonia-fraction-brackish",
            help: "share of total ammonia that is un-ionized, in brackish water",
            unit: "fraction",
            keys: &[TEMPERATURE, PH, SALINITY],
            source: &[EMERSON, SALT],
            compute: |i| {
                let (t, ph) = (i.num("temperature")?, i.num("ph")?);
                Ok(ammonia::fraction(t, ph, i.num("salinity")?)?)
            },
        },
        Calculation {
            name: "un-ionized-ammonia-fraction-activity",
            help: "un-ionized share corrected for ionic strength: 4 to 13 % lower",
            unit: "fraction",
            keys: &[
                TEMPERATURE,
                PH,
                Key {
                    fallback: super::key::Fallback::Required,
                    rivals: &[],
                    help: "ionic strength",
                    ..IONIC_STRENGTH
                },
            ],
            source: &[EMERSON, DAVIES],
            compute: |i| {
                let (t, ph) = (i.num("temperature")?, i.num("ph")?);
                Ok(ammonia::fraction_by_activity(
                    t,
                    ph,
                    i.num("ionic_strength")?,
                )?)
            },
        },
        Calculation {
            name: "total-ammonia-at-limit",
            help: "the most total ammonia that keeps un-ionized ammonia at a limit",
            unit: "mg/L as N",
            keys: &[LIMIT, TEMPERATURE, PH, SALINITY],
            source: &[EMERSON, SALT],
            compute: |i| {
                let (limit, t) = (i.num("limit")?, i.num("temperature")?);
                Ok(ammonia::total_at_limit(
                    limit,
                    t,
                    i.num("ph")?,
                    i.num("salinity")?,
                )?)
            },
        },
        Calculation {
            name: "ph-at-ammonia-limit",
            help: "the highest pH that keeps un-ionized ammonia at a limit",
            unit: "pH",
            keys: &[LIMIT, TOTAL_AMMONIA, TEMPERATURE, SALINITY],
            source: &[EMERSON, SALT],
            compute: |i| {
                let (limit, total) = (i.num("limit")?, i.num("total_ammonia")?);
                let (t, salinity) = (i.num("temperature")?, i.num("salinity")?);
                Ok(ammonia::ph_at_limit(limit, total, t, salinity)?)
            },
        },
        Calculation {
            name: "ammonia-molar-to-mass",
            help: "ammonia in micromoles per liter as mass of nitrogen",
            unit: "mg/L as N",
            keys: &[Key::number(
                "nh3_umol_per_l",
                units::MICROMOLES,
                Range::not_negative("nh3_umol_per_l", "umol/L"),
                "ammonia",
            )],
            source: &["IUPAC atomic weights"],
            compute: |i| Ok(i.num("nh3_umol_per_l")? * masses::N / 1000.0),
        },
        Calculation {
            name: "free-ammonia-anthonisen",
            help: "free ammonia as work on inhibited nitrifiers counts it",
            unit: "mg/L as NH3",
            keys: &[TOTAL_AMMONIA, PH_LAB, TEMPERATURE_LAB],
            source: &[ANTHONISEN],
            compute: |i| {
                let (total, ph) = (i.num("total_ammonia")?, i.num("ph")?);
                Ok(anthonisen::free_ammonia(total, ph, i.num("temperature")?)?)
            },
        },
        Calculation {
            name: "free-nitrous-acid-anthonisen",
            help: "free nitrous acid, known to a factor of 1.5",
            unit: "mg/L as HNO2",
            keys: &[NITRITE, PH_LAB, TEMPERATURE_LAB],
            source: &[ANTHONISEN],
            compute: |i| {
                let (nitrite, ph) = (i.num("nitrite")?, i.num("ph")?);
                Ok(anthonisen::free_nitrous_acid(
                    nitrite,
                    ph,
                    i.num("temperature")?,
                )?)
            },
        },
        Calculation {
            name: "nitrous-acid-fraction",
            help: "share of nitrite that is nitrous acid, known to a factor of 1.5",
            unit: "fraction",
            keys: &[TEMPERATURE_LAB, PH_LAB],
            source: &[ANTHONISEN],
            compute: |i| {
                let (t, ph) = (i.num("temperature")?, i.num("ph")?);
                Ok(anthonisen::nitrous_acid_fraction(t, ph)?)
            },
        },
    ],
};

const TEMPERATURE_LAB: Key = super::common::temperature(anthonisen::TEMPERATURE);
const PH_LAB: Key = Key::number("ph", units::PH, anthonisen::PH, "pH");
