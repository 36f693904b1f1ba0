//! What a day's feed does, and plants for it.

use super::common::{FEED, PROTEIN, VOLUME_L};
use super::key::Also;
use super::site_values::SiteKey;
use super::{Calculation, Failure, Inputs, Key, Subject};
use crate::water::feed::{self, OxygenFor};
use crate::water::plants::{self, Growing};
use crate::water::range::Range;
use crate::water::units::table as units;

const TIMMONS: &str = "Timmons & Ebeling, Recirculating Aquaculture (from memory)";
const EBELING: &str = "Ebeling, Timmons & Bisogni 2006, Aquaculture 257:346 (from memory)";
const RAKOCY: &str = "Rakocy 2007, Ten guidelines for aquaponic systems";
const FAO: &str = "Somerville et al. 2014, FAO Technical Paper 589 ch. 8";

const BOUND: Key = Key::word("bound", &["low", "high"], "end of the range");
const OXYGEN_FOR: Key = Key::word(
    "kind",
    &["fish", "whole-system", "complete-oxidation"],
    "where it is counted",
);
const RATIO: Key = Key::number(
    "feed_rate_ratio",
    units::FEED_RATE,
    plants::RATIO,
    "feed for each square meter of plants and day",
);

const AS_KILOGRAMS: &[Also] = &[Also {
    name: "feed_kg_per_day",
    units: units::FEED,
    scale: 1000.0,
}];
const FEED_G: Key = Key::number(
    "feed_g_per_day",
    units::FEED_G,
    plants::FEED,
    "feed in a day",
)
.also(AS_KILOGRAMS)
.site(SiteKey::FeedGrams);

fn end(inputs: &Inputs, (low, high): (f64, f64)) -> Result<f64, Failure> {
    Ok(if inputs.word("bound")? == "low" {
        low
    } else {
        high
    })
}

fn oxygen_per_feed(i: &Inputs) -> Result<f64, Failure> {
    let what = match i.word("kind")? {
        "fish" => OxygenFor::Fish,
        "whole-system" => OxygenFor::WholeSystem,
        _ => OxygenFor::CompleteOxidation,
    };
    end(i, feed::oxygen_per_feed(what))
}

pub static SUBJECT: Subject = Subject {
    title: "Feed and plants",
    listed: true,
    calculations: &[
        Calculation {
            name: "feed-nitrogen",
            help: "nitrogen in a kg of feed",
            unit: "g N/kg feed",
            keys: &[PROTEIN],
            source: &["Kjeldahl factor 6.25"],
            compute: |i| Ok(feed::nitrogen(i.num("protein_percent")?)?),
        },
        Calculation {
            name: "tan-production",
            help: "total ammonia that a day's feed becomes",
            unit: "g N/day",
            keys: &[FEED, PROTEIN],
            source: &[TIMMONS],
            compute: |i| {
                Ok(feed::ammonia(
                    i.num("feed_kg_per_day")?,
                    i.num("protein_percent")?,
                )?)
            },
        },
        Calculation {
            name: "alkalinity-use",
            help: "alkalinity that nitrifying all of a day's feed takes: the upper bound",
            unit: "g CaCO3/day",
            keys: &[FEED, PROTEIN],
            source: &[TIMMONS, EBELING],
            compute: |i| {
                Ok(feed::alkalinity_use(
                    i.num("feed_kg_per_day")?,
                    i.num("protein_percent")?,
                )?)
            },
        },
        Calculation {
            name: "days-of-alkalinity-left",
            help: "days until alkalinity falls to a floor, nothing added: the lower bound",
            unit: "days",
            keys: &[
                VOLUME_L,
                Key::number(
                    "alkalinity",
                    units::ALKALINITY,
                    Range::not_negative("alkalinity", "mg/L as CaCO3"),
                    "total alkalinity now",
                ),
                Key::number(
                    "floor",
                    units::ALKALINITY,
                    Range::not_negative("floor", "mg/L as CaCO3"),
                    "alkalinity not to fall below",
                ),
                FEED,
                PROTEIN,
            ],
            source: &[TIMMONS, EBELING],
            compute: |i| {
                let (volume, now) = (i.num("volume_l")?, i.num("alkalinity")?);
                let (feed, protein) = (i.num("feed_kg_per_day")?, i.num("protein_percent")?);
                Ok(feed::days_of_alkalinity(
                    volume,
                    now,
                    i.num("floor")?,
                    feed,
                    protein,
                )?)
            },
        },
        Calculation {
            name: "solids-production",
            help: "suspended solids that a day's feed becomes (0.2-0.4 of it)",
            unit: "kg/day",
            keys: &[FEED],
            source: &[TIMMONS],
            compute: |i| Ok(feed::solids(i.num("feed_kg_per_day")?)?),
        },
        Calculation {
            name: "oxygen-demand-of-feed",
            help: "oxygen that a kg of feed takes",
            unit: "kg/kg",
            keys: &[OXYGEN_FOR, BOUND.or_word("high")],
            source: &[
                TIMMONS,
                "complete oxidation: Boyd, Oxygen demand of aquaculture feed",
            ],
            compute: oxygen_per_feed,
        },
        Calculation {
            name: "oxygen-for-feed",
            help: "oxygen that a day's feed takes",
            unit: "kg/day",
            keys: &[
                FEED,
                OXYGEN_FOR.or_word("whole-system"),
                BOUND.or_word("high"),
            ],
            source: &[
                TIMMONS,
                "complete oxidation: Boyd, Oxygen demand of aquaculture feed",
            ],
            compute: |i| Ok(i.num("feed_kg_per_day")? * oxygen_per_feed(i)?),
        },
        Calculation {
            name: "carbon-dioxide-per-oxygen",
            help: "carbon dioxide breathed out for each gram of oxygen",
            unit: "g/g",
            keys: &[Key::number(
                "rq",
                units::MOLAR_RATIO,
                Range::new("rq", 0.5, 1.5, "mol/mol"),
                "respiratory quotient",
            )
            .or(1.0)],
            source: &["molar masses"],
            compute: |i| Ok(feed::carbon_dioxide_per_oxygen(i.num("rq")?)?),
        },
        Calculation {
            name: "feed-rate-ratio",
            help: "feed for each square meter of plants, by how they are grown",
            unit: "g/m2/day",
            keys: &[
                Key::word(
                    "kind",
                    &["raft-uvi", "nft-uvi", "leafy-fao", "fruiting-fao"],
                    "how and what is grown",
                ),
                BOUND,
            ],
            source: &[RAKOCY, FAO],
            compute: |i| {
                let growing = match i.word("kind")? {
                    "raft-uvi" => Growing::RaftUvi,
                    "nft-uvi" => Growing::NutrientFilmUvi,
                    "leafy-fao" => Growing::LeafyFao,
                    _ => Growing::FruitingFao,
                };
                end(i, plants::feed_rate_ratio(growing))
            },
        },
        Calculation {
            name: "plant-area-for-feed",
            help: "area of plants that goes with a day's feed",
            unit: "m2",
            keys: &[FEED_G, RATIO],
            source: &[RAKOCY],
            compute: |i| {
                let (feed, ratio) = (i.num("feed_g_per_day")?, i.num("feed_rate_ratio")?);
                Ok(plants::area_for_feed(feed, ratio)?)
            },
        },
        Calculation {
            name: "feed-for-plant-area",
            help: "feed a day that goes with an area of plants",
            unit: "g/day",
            keys: &[
                Key::number("plant_area_m2", units::AREA, plants::AREA, "area of plants")
                    .site(SiteKey::PlantArea),
                RATIO,
            ],
            source: &[RAKOCY],
            compute: |i| {
                let (area, ratio) = (i.num("plant_area_m2")?, i.num("feed_rate_ratio")?);
                Ok(plants::feed_for_area(area, ratio)?)
            },
        },
    ],
};
