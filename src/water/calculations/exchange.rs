//! Water exchange and mixing.

use super::site_values::SiteKey;
use super::{Calculation, Key, Subject};
use crate::water::exchange;
use crate::water::range::Range;
use crate::water::units::table as units;

const MASS: &[&str] = &["mass balance"];
const ANY: Range = Range::not_negative("value", "");
const WATER: Range = Range::new("temperature", -2.0, 60.0, "C");

const NOW: Key = Key::number("now", units::ANY, ANY, "what there is now");
const MAKEUP: Key = Key::number("makeup", units::ANY, ANY, "what the makeup water has");
const TARGET: Key = Key::number("target", units::ANY, ANY, "what to come to");

const VOLUME_A: Key = Key::number(
    "volume_a",
    units::LITERS,
    Range::positive("volume_a", "L"),
    "volume of the first water",
);
const VOLUME_B: Key = Key::number(
    "volume_b",
    units::LITERS,
    Range::not_negative("volume_b", "L"),
    "volume of the second water",
);

const fn warmth(name: &'static str, help: &'static str) -> Key {
    Key::number(name, units::TEMPERATURE, WATER, help)
}

pub static SUBJECT: Subject = Subject {
    title: "Water exchange and mixing",
    listed: true,
    calculations: &[
        Calculation {
            name: "fraction-left-after-batch-exchange",
            help: "share left after changing a share so many times",
            unit: "fraction",
            keys: &[
                Key::number(
                    "exchange_fraction",
                    units::FRACTION,
                    exchange::FRACTION,
                    "share changed each time",
                ),
                Key::number(
                    "times",
                    units::COUNT,
                    Range::not_negative("times", ""),
                    "how many times",
                )
                .or(1.0),
            ],
            source: MASS,
            compute: |i| {
                let (share, times) = (i.num("exchange_fraction")?, i.num("times")?);
                Ok(exchange::left_after_batches(share, times)?)
            },
        },
        Calculation {
            name: "fraction-left-after-continuous-exchange",
            help: "share left in a well-mixed tank after a flow through it",
            unit: "fraction",
            keys: &[Key::number(
                "volumes_through",
                units::VOLUMES,
                exchange::VOLUMES,
                "tank volumes that have flowed through",
            )],
            source: MASS,
            compute: |i| Ok(exchange::left_after_flow(i.num("volumes_through")?)?),
        },
        Calculation {
            name: "batch-fraction-to-reach",
            help: "share to change at once to reach a target",
            unit: "fraction",
            keys: &[NOW, MAKEUP, TARGET],
            source: MASS,
            compute: |i| {
                let (now, makeup) = (i.num("now")?, i.num("makeup")?);
                Ok(exchange::batch_to_reach(now, makeup, i.num("target")?)?)
            },
        },
        Calculation {
            name: "continuous-volumes-to-reach",
            help: "tank volumes to run through to reach a target",
            unit: "volumes",
            keys: &[NOW, MAKEUP, TARGET],
            source: MASS,
            compute: |i| {
                let (now, makeup) = (i.num("now")?, i.num("makeup")?);
                Ok(exchange::flow_to_reach(now, makeup, i.num("target")?)?)
            },
        },
        Calculation {
            name: "mixed-temperature",
            help: "temperature of two waters mixed",
            unit: "C",
            keys: &[
                VOLUME_A,
                warmth("temperature_a", "temperature of the first water"),
                VOLUME_B,
                warmth(
                    "temperature_b",
                    "temperature of the second water, the makeup",
                )
                .site(SiteKey::MakeupTemperature),
            ],
            source: &["heat balance"],
            compute: |i| {
                let a = (i.num("volume_a")?, i.num("temperature_a")?);
                let b = (i.num("volume_b")?, i.num("temperature_b")?);
                Ok(exchange::mixed(a.0, a.1, b.0, b.1)?)
            },
        },
        Calculation {
            name: "mixed-concentration",
            help: "a concentration or alkalinity of two waters mixed (never pH)",
            unit: "as given",
            keys: &[
                VOLUME_A,
                Key::number("value_a", units::ANY, ANY, "what the first water has"),
                VOLUME_B,
                Key::number("value_b", units::ANY, ANY, "what the second water has"),
            ],
            source: MASS,
            compute: |i| {
                let a = (i.num("volume_a")?, i.num("value_a")?);
                let b = (i.num("volume_b")?, i.num("value_b")?);
                Ok(exchange::mixed(a.0, a.1, b.0, b.1)?)
            },
        },
        Calculation {
            name: "max-exchange-for-temperature-step",
            help: "largest share to change at once for a step in temperature",
            unit: "fraction",
            keys: &[
                warmth("temperature", "water temperature"),
                warmth("makeup_temperature", "temperature of the makeup water")
                    .site(SiteKey::MakeupTemperature),
                Key::number(
                    "max_drop",
                    units::TEMPERATURE_STEP,
                    Range::positive("max_drop", "C"),
                    "largest step allowed, either way",
                ),
            ],
            source: &["heat balance"],
            compute: |i| {
                let (t, makeup) = (i.num("temperature")?, i.num("makeup_temperature")?);
                Ok(exchange::largest_for_temperature(
                    t,
                    makeup,
                    i.num("max_drop")?,
                )?)
            },
        },
        Calculation {
            name: "steady-concentration",
            help: "where a steady source settles with a steady exchange",
            unit: "mg/L",
            keys: &[
                MAKEUP.or(0.0),
                Key::number(
                    "source_g_per_day",
                    units::FEED_G,
                    Range::not_negative("source_g_per_day", "g/day"),
                    "what comes in",
                ),
                Key::number(
                    "exchange_l_per_day",
                    units::LITERS_PER_DAY,
                    Range::positive("exchange_l_per_day", "L/day"),
                    "water exchanged",
                ),
            ],
            source: MASS,
            compute: |i| {
                let (makeup, source) = (i.num("makeup")?, i.num("source_g_per_day")?);
                Ok(exchange::steady(
                    makeup,
                    source,
                    i.num("exchange_l_per_day")?,
                )?)
            },
        },
    ],
};
