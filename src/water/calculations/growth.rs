//! Growth of nitrifiers, and how warmth moves a rate.

use super::common::{DISSOLVED_OXYGEN, temperature};
use super::{Calculation, Key, Subject};
use crate::water::kinetics::{self, Step};
use crate::water::range::Range;
use crate::water::units::table as units;

const ARITHMETIC: &str = "closed form";

const LOW: Key = Key::number(
    "temperature_low",
    units::TEMPERATURE,
    kinetics::TEMPERATURE,
    "the lower temperature",
);
const HIGH: Key = Key::number(
    "temperature_high",
    units::TEMPERATURE,
    kinetics::TEMPERATURE,
    "the higher temperature",
);

pub static SUBJECT: Subject = Subject {
    title: "Growth and warmth",
    listed: true,
    calculations: &[
        Calculation {
            name: "nitrifier-growth-rate",
            help: "growth less decay of nitrifiers; below 0 they die back",
            unit: "1/day",
            keys: &[
                Key::word("step", &["ammonia", "nitrite"], "what they live on"),
                temperature(kinetics::TEMPERATURE),
                DISSOLVED_OXYGEN,
                Key::number(
                    "nitrogen",
                    units::NITROGEN,
                    Range::not_negative("nitrogen", "mg/L as N"),
                    "total ammonia or nitrite, as nitrogen",
                ),
            ],
            source: &["Metcalf & Eddy 2014, Wastewater Engineering, Table 8-14 (from memory)"],
            compute: |i| {
                let step = match i.word("step")? {
                    "nitrite" => Step::Nitrite,
                    _ => Step::Ammonia,
                };
                let (t, oxygen) = (i.num("temperature")?, i.num("dissolved_oxygen")?);
                Ok(kinetics::growth_rate(step, t, oxygen, i.num("nitrogen")?)?)
            },
        },
        Calculation {
            name: "doubling-time",
            help: "time to double at a growth rate",
            unit: "h",
            keys: &[Key::number(
                "growth_rate_per_day",
                units::PER_DAY,
                kinetics::GROWTH_RATE,
                "growth rate",
            )],
            source: &[ARITHMETIC],
            compute: |i| Ok(kinetics::doubling_hours(i.num("growth_rate_per_day")?)?),
        },
        Calculation {
            name: "rate-at-temperature",
            help: "what a rate at 20 C becomes at another temperature",
            unit: "as given",
            keys: &[
                Key::number(
                    "rate_at_20",
                    units::ANY,
                    Range::not_negative("rate_at_20", ""),
                    "the rate at 20 C",
                ),
                Key::number(
                    "theta",
                    units::THETA,
                    Range::new("theta", 0.5, 2.0, "1/C"),
                    "factor for each degree",
                ),
                temperature(kinetics::TEMPERATURE),
            ],
            source: &[ARITHMETIC],
            compute: |i| {
                let (rate, theta) = (i.num("rate_at_20")?, i.num("theta")?);
                Ok(kinetics::rate_at(rate, theta, i.num("temperature")?)?)
            },
        },
        Calculation {
            name: "theta-from-rate-ratio",
            help: "factor for each degree, from a cold rate as a share of a warm one",
            unit: "1/C",
            keys: &[
                Key::number(
                    "rate_ratio",
                    units::RATIO,
                    Range::positive("rate_ratio", ""),
                    "cold rate over warm rate",
                ),
                LOW,
                HIGH,
            ],
            source: &[ARITHMETIC],
            compute: |i| {
                let (low, high) = (i.num("temperature_low")?, i.num("temperature_high")?);
                Ok(kinetics::theta(i.num("rate_ratio")?, low, high)?)
            },
        },
        Calculation {
            name: "arrhenius-rate-ratio",
            help: "how many times faster a rate is in warmer water",
            unit: "ratio",
            keys: &[
                Key::number(
                    "activation_kj_per_mol",
                    units::KJ_PER_MOL,
                    Range::new("activation_kj_per_mol", 0.0, 500.0, "kJ/mol"),
                    "activation energy; 68 ammonia, 44 nitrite oxidizers",
                ),
                LOW,
                HIGH,
            ],
            source: &["Arrhenius; energies of Vannecke & Volcke 2015"],
            compute: |i| {
                let (low, high) = (i.num("temperature_low")?, i.num("temperature_high")?);
                let energy = i.num("activation_kj_per_mol")?;
                Ok(kinetics::arrhenius_ratio(energy, low, high)?)
            },
        },
    ],
};
