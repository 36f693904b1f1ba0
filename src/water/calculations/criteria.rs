//! The U.S. EPA's ammonia criteria.

use super::common::{YES_NO, temperature};
use super::{Calculation, Key, Subject};
use crate::water::ammonia_criteria as epa;
use crate::water::units::table as units;

const SOURCE_2013: &str =
    "U.S. EPA 2013, 822-R-13-001 (formulas from memory; values at pH 7 and 20 C confirmed)";
const SOURCE_1999: &str = "U.S. EPA 1999 update, EPA-822-R-99-014";

const PH: Key = Key::number("ph", units::PH, epa::PH, "pH");
const TEMPERATURE: Key = temperature(epa::TEMPERATURE);
const TROUT: Key = Key::word("trout", YES_NO, "trout or salmon live there").or_word("yes");
const EARLY_LIFE: Key =
    Key::word("early_life", YES_NO, "eggs or fry of fish live there").or_word("yes");

pub static SUBJECT: Subject = Subject {
    title: "Ammonia criteria for wild waters (a floor for alarm, not a lethal level)",
    listed: true,
    calculations: &[
        Calculation {
            name: "ammonia-criterion-acute-2013",
            help: "total ammonia not to pass as a 1-hour mean",
            unit: "mg/L as N",
            keys: &[PH, TEMPERATURE, TROUT],
            source: &[SOURCE_2013],
            compute: |i| {
                let (ph, t) = (i.num("ph")?, i.num("temperature")?);
                Ok(epa::acute_2013(ph, t, i.yes("trout")?)?)
            },
        },
        Calculation {
            name: "ammonia-criterion-chronic-2013",
            help: "total ammonia not to pass as a 30-day mean",
            unit: "mg/L as N",
            keys: &[PH, TEMPERATURE],
            source: &[SOURCE_2013],
            compute: |i| Ok(epa::chronic_2013(i.num("ph")?, i.num("temperature")?)?),
        },
        Calculation {
            name: "ammonia-criterion-chronic-4-day-2013",
            help: "total ammonia not to pass as a 4-day mean",
            unit: "mg/L as N",
            keys: &[PH, TEMPERATURE],
            source: &[SOURCE_2013],
            compute: |i| {
                Ok(epa::chronic_four_day_2013(
                    i.num("ph")?,
                    i.num("temperature")?,
                )?)
            },
        },
        Calculation {
            name: "ammonia-criterion-acute-1999",
            help: "total ammonia not to pass as a 1-hour mean, older criterion",
            unit: "mg/L as N",
            keys: &[PH, TROUT],
            source: &[SOURCE_1999],
            compute: |i| Ok(epa::acute_1999(i.num("ph")?, i.yes("trout")?)?),
        },
        Calculation {
            name: "ammonia-criterion-chronic-1999",
            help: "total ammonia not to pass as a 30-day mean, older criterion",
            unit: "mg/L as N",
            keys: &[PH, TEMPERATURE, EARLY_LIFE],
            source: &[SOURCE_1999],
            compute: |i| {
                let (ph, t) = (i.num("ph")?, i.num("temperature")?);
                Ok(epa::chronic_1999(ph, t, i.yes("early_life")?)?)
            },
        },
    ],
};
