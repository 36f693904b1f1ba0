//! What corrections and projections reckon with: limits of pace, words, rates, substances (`pace.toml`,
//! `pace-words.toml`, `kinetics.toml`, `substances.toml`).

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

use super::CauseId;
use crate::vocabulary::ReadingId;

/// Declares a struct with one entry for every id that must be in the rule base, so that no id can be missing or mistyped.
macro_rules! named {
    ($(#[$doc:meta])* $name:ident of $kind:ty { $($field:ident = $id:literal),+ $(,)? }) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Serialize, Deserialize)]
        pub struct $name { $(#[doc = concat!("`", $id, "`")] pub $field: $kind),+ }

        impl $name {
            /// The ids there must be.
            pub const IDS: &'static [&'static str] = &[$($id),+];

            /// All entries; `None` when one is missing.
            pub(super) fn gather(mut take: impl FnMut(&str) -> Option<$kind>) -> Option<Self> {
                $(let $field = take($id);)+
                Some(Self { $($field: $field?),+ })
            }
        }
    };
}

pub(super) use named;

/// A limit that corrections keep to.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct PaceLimit {
    /// Kebab-case id.
    pub id: String,
    /// A clause for people.
    pub name: String,
    /// The unit of the value.
    pub unit: String,
    /// The limit.
    pub value: f64,
    /// The limit for cold-water fish, where it is another.
    pub cold: Option<f64>,
    /// What to do when it can't be kept.
    pub instead: String,
    /// What other sources say; empty where they agree.
    pub contested: String,
    /// Keys of sources.
    pub source: Vec<String>,
}

impl PaceLimit {
    /// The value for fish of warm or cold water; the stricter (`cold`) where that is not known.
    pub fn for_fish(&self, warm: Option<bool>) -> f64 {
        match (self.cold, warm) {
            (Some(cold), Some(false) | None) => cold,
            _ => self.value,
        }
    }

    /// Whether no publication stands behind it.
    pub fn is_unpublished(&self) -> bool {
        let plain = ["common-practice", "from-memory", "derived", "measured"];
        self.source.iter().all(|s| plain.contains(&s.as_str()))
    }
}

named! {
    /// The limits of pace.
    PaceLimits of PaceLimit {
        ph_rise_per_dose = "ph-rise-per-dose",
        ph_rise_per_day = "ph-rise-per-day",
        ph_fall_per_day = "ph-fall-per-day",
        un_ionized_ammonia = "un-ionized-ammonia",
        alkalinity_rise_per_day = "alkalinity-rise-per-day",
        alkalinity_left_by_acid = "alkalinity-left-by-acid",
        carbon_dioxide = "carbon-dioxide",
        temperature_rise_per_hour = "temperature-rise-per-hour",
        temperature_rise_per_day = "temperature-rise-per-day",
        temperature_fall_per_hour = "temperature-fall-per-hour",
        temperature_fall_per_day = "temperature-fall-per-day",
        exchange_per_batch = "exchange-per-batch",
        exchange_per_batch_unlike = "exchange-per-batch-unlike",
        exchange_per_day = "exchange-per-day",
        makeup_temperature_gap = "makeup-temperature-gap",
        makeup_ph_gap = "makeup-ph-gap",
        residual_chlorine = "residual-chlorine",
        salinity_rise_per_day = "salinity-rise-per-day",
        sodium_with_plants = "sodium-with-plants",
        chloride_with_plants = "chloride-with-plants",
        potassium = "potassium",
        calcium = "calcium",
        magnesium = "magnesium",
        nutrient_rise_per_day = "nutrient-rise-per-day",
        iron_per_dose = "iron-per-dose",
        iron = "iron",
        feed_step = "feed-step",
        feed_step_days = "feed-step-days",
        feed_ammonia = "feed-ammonia",
        feed_nitrite = "feed-nitrite",
        days_without_feed = "days-without-feed",
        cycling_ammonia = "cycling-ammonia",
        cycling_dose = "cycling-dose",
        total_gas_pressure = "total-gas-pressure",
        low_oxygen = "low-oxygen",
        first_dose = "first-dose",
        wait_between_doses = "wait-between-doses",
        longest_plan = "longest-plan",
        instrument_doubt = "instrument-doubt",
        dechlorinator_margin = "dechlorinator-margin",
    }
}

/// A rate or constant, with the span that sources give.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Kinetic {
    /// What is reckoned with.
    pub value: f64,
    /// Low end of what sources give.
    pub low: f64,
    /// High end.
    pub high: f64,
    /// Its unit.
    pub unit: String,
    /// Keys of sources.
    pub source: Vec<String>,
}

named! {
    /// What projections reckon with.
    Kinetics of Kinetic {
        ammonia_growth = "ammonia-growth",
        nitrite_growth = "nitrite-growth",
        decay = "decay",
        ammonia_growth_theta = "ammonia-growth-theta",
        nitrite_growth_theta = "nitrite-growth-theta",
        decay_theta = "decay-theta",
        ammonia_half = "ammonia-half",
        nitrite_half = "nitrite-half",
        ammonia_oxygen_half = "ammonia-oxygen-half",
        nitrite_oxygen_half = "nitrite-oxygen-half",
        alkalinity_half = "alkalinity-half",
        ph_best = "ph-best",
        ph_slope = "ph-slope",
        ph_shock_slope = "ph-shock-slope",
        ph_adaptation = "ph-adaptation",
        ph_floor = "ph-floor",
        nitrite_free_ammonia = "nitrite-free-ammonia",
        ammonia_free_ammonia = "ammonia-free-ammonia",
        nitrite_free_nitrous_acid = "nitrite-free-nitrous-acid",
        ammonia_free_nitrous_acid = "ammonia-free-nitrous-acid",
        ammonia_per_protein = "ammonia-per-protein",
        protein = "protein",
        excretion_hours = "excretion-hours",
        starved_share = "starved-share",
        plant_nitrogen = "plant-nitrogen",
        plant_half = "plant-half",
        denitrification = "denitrification",
        gas_ratio = "gas-ratio",
        oxygen_transfer = "oxygen-transfer",
        oxygen_per_feed = "oxygen-per-feed",
        film_per_area = "film-per-area",
        temperature_drift = "temperature-drift",
        seed = "seed",
    }
}

/// What a substance is dosed for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Use {
    /// Lifts alkalinity.
    Base,
    /// Takes alkalinity.
    Acid,
    /// Brings chloride.
    Salt,
    /// Feeds plants.
    Nutrient,
    /// Brings iron.
    Iron,
    /// Takes chlorine out.
    Reducer,
    /// Feeds a new filter.
    Ammonia,
}

impl Use {
    /// The words of the file.
    pub const WORDS: [(&'static str, Self); 7] = [
        ("base", Self::Base),
        ("acid", Self::Acid),
        ("salt", Self::Salt),
        ("nutrient", Self::Nutrient),
        ("iron", Self::Iron),
        ("reducer", Self::Reducer),
        ("ammonia", Self::Ammonia),
    ];
}

/// A substance a farm doses.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Dosable {
    /// Its formula.
    pub id: String,
    /// What people call it.
    pub name: String,
    /// What for.
    pub used_as: Use,
    /// A hydroxide or a strong acid.
    pub strong: bool,
    /// How a liquid is usually sold: percent by mass and g/mL.
    pub liquid: Option<(f64, f64)>,
    /// pH up to which it holds iron.
    pub good_to_ph: Option<f64>,
    /// Grams for a gram of chlorine.
    pub per_chlorine: Option<f64>,
    /// g in a g, by what it gives; `carbon` in mmol in a g.
    pub gives: BTreeMap<String, f64>,
    /// Keys of sources.
    pub source: Vec<String>,
}

impl Dosable {
    /// What a gram gives of something (g; `carbon` in mmol); 0 where it gives none.
    pub fn gives(&self, what: &str) -> f64 {
        self.gives.get(what).copied().unwrap_or(0.0)
    }

    /// Whether a person means this substance: its formula in any case, with `*`, `.` or `·` before the water, or its name.
    pub fn is_called(&self, name: &str) -> bool {
        let plain = name.replace(['.', '·'], "*");
        self.id.eq_ignore_ascii_case(&plain) || self.name.eq_ignore_ascii_case(name)
    }
}

/// A cause that doubts instruments.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct InstrumentDoubt {
    /// The cause.
    pub cause: CauseId,
    /// The readings it doubts.
    pub readings: Vec<ReadingId>,
}

/// All of it.
#[derive(Debug, Clone, Serialize, Deserialize)]
pub struct Pacing {
    /// Limits.
    pub limits: PaceLimits,
    /// Words of plans, by id.
    pub words: super::PaceWords,
    /// Rates.
    pub kinetics: Kinetics,
    /// Substances.
    pub substances: Vec<Dosable>,
    /// Causes that doubt instruments.
    pub doubts: Vec<InstrumentDoubt>,
}

impl Pacing {
    /// The substance a person means.
    pub fn substance(&self, name: &str) -> Option<&Dosable> {
        self.substances.iter().find(|s| s.is_called(name))
    }
}
