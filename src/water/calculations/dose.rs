//! Doses of bases and acids.

use super::common::{
    ALKALINITY, CARBONATE_PH, CARBONATE_TEMPERATURE, CO2_PPM, CONDUCTIVITY, DOSE, IONIC_STRENGTH,
    PHOSPHORUS, PROTEIN, SALINITY_FOR_IONS, SUBSTANCE, VOLUME_L, sample, substance,
};
use super::{Calculation, Key, Subject};
use crate::water::carbonate::{dose, state, substance as substances};
use crate::water::range::Range;
use crate::water::units::table as units;
use crate::water::{feed, nitrification};

const CONSTANTS: &str = "constants: Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011";
const DAVIES: &str = "activity: Davies 1962 (from memory)";
const ARITHMETIC: &str = "molar masses";

const BASE: Key = Key::word("chemical", substances::BASES, "base, pure");
const ACID: Key = Key::word("chemical", substances::ACIDS, "acid, pure");

pub static SUBJECT: Subject = Subject {
    title: "Doses of bases and acids (hours lie between the first pH and the later one)",
    listed: true,
    calculations: &[
        Calculation {
            name: "ph-after-dose-closed",
            help: "pH right after a dose, before any gas moves",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                SUBSTANCE,
                DOSE,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
                PHOSPHORUS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let grams = i.num("dose_mg_per_l")?;
                Ok(dose::ph_after_closed(&sample(i)?, substance(i)?, grams)?)
            },
        },
        Calculation {
            name: "ph-after-dose-open",
            help: "pH after a dose once carbon dioxide is in balance with air",
            unit: "pH",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                SUBSTANCE,
                DOSE,
                CO2_PPM,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
                PHOSPHORUS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let (grams, ppm) = (i.num("dose_mg_per_l")?, i.num("co2_ppm")?);
                Ok(dose::ph_after_open(&sample(i)?, substance(i)?, grams, ppm)?)
            },
        },
        Calculation {
            name: "dose-to-target-ph-closed",
            help: "dose that brings pH to a target before any gas moves",
            unit: "mg/L",
            keys: &[
                CARBONATE_TEMPERATURE,
                CARBONATE_PH,
                ALKALINITY,
                Key::number("target_ph", units::PH, state::PH, "pH to come to"),
                SUBSTANCE,
                IONIC_STRENGTH,
                CONDUCTIVITY,
                SALINITY_FOR_IONS,
                PHOSPHORUS,
            ],
            source: &[CONSTANTS, DAVIES],
            compute: |i| {
                let target = i.num("target_ph")?;
                Ok(dose::to_target_closed(&sample(i)?, substance(i)?, target)?)
            },
        },
        Calculation {
            name: "dose-for-alkalinity",
            help: "grams of a base that lift alkalinity by so much",
            unit: "g",
            keys: &[
                Key::number(
                    "alkalinity_rise",
                    units::ALKALINITY,
                    Range::not_negative("alkalinity_rise", "mg/L as CaCO3"),
                    "how much alkalinity is to rise",
                ),
                VOLUME_L,
                BASE,
            ],
            source: &[ARITHMETIC],
            compute: |i| {
                let caco3 = i.num("alkalinity_rise")? * i.num("volume_l")? / 1000.0;
                Ok(caco3 * substance(i)?.grams_per_caco3())
            },
        },
        Calculation {
            name: "chemical-per-caco3-alkalinity",
            help: "grams of a base with the alkalinity of a gram of CaCO3",
            unit: "g/g",
            keys: &[BASE],
            source: &[ARITHMETIC],
            compute: |i| Ok(substance(i)?.grams_per_caco3()),
        },
        Calculation {
            name: "acid-per-caco3-alkalinity",
            help: "grams of an acid that take a gram of alkalinity as CaCO3",
            unit: "g/g",
            keys: &[ACID],
            source: &[ARITHMETIC],
            compute: |i| Ok(substance(i)?.grams_per_caco3()),
        },
        Calculation {
            name: "bicarbonate-per-kg-feed",
            help: "base that a kg of feed takes when all its ammonia is nitrified",
            unit: "g/kg feed",
            keys: &[PROTEIN, BASE.or_word("NaHCO3")],
            source: &[
                "Timmons & Ebeling, Recirculating Aquaculture (from memory)",
                "Ebeling, Timmons & Bisogni 2006 (from memory)",
            ],
            compute: |i| {
                let nitrogen = feed::ammonia(1.0, i.num("protein_percent")?)?;
                let caco3 = nitrogen * nitrification::ALKALINITY_WITH_CELLS;
                Ok(caco3 * substance(i)?.grams_per_caco3())
            },
        },
    ],
};
