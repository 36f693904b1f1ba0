//! Oxygen in water, and how long it lasts the fish.

use super::common::{
    DISSOLVED_OXYGEN, ELEVATION, PRESSURE, VOLUME_L, YES_NO, pressure, temperature,
};
use super::site_values::SiteKey;
use super::{Calculation, Key, Subject};
use crate::water::range::Range;
use crate::water::units::table as units;
use crate::water::{oxygen, respiration};

const BENSON_KRAUSE: &str =
    "Benson & Krause 1984, Limnol. Oceanogr. 29:620; Standard Methods 4500-O";
const ATMOSPHERE: &str = "elevation: U.S. Standard Atmosphere 1976";
const CLARKE: &str = "Clarke & Johnston 1999, J. Anim. Ecol. 68:893 (resting fish)";
const FED: &str = "fed fish twice that: common practice, Fu et al. 2005";

const TEMPERATURE: Key = temperature(oxygen::TEMPERATURE);
const SALINITY: Key = Key::number(
    "salinity",
    units::SALINITY,
    oxygen::SALINITY,
    "salinity of the water",
)
.site(SiteKey::Salinity)
.or(0.0);
const FISH_TEMPERATURE: Key = temperature(respiration::TEMPERATURE);
const FISH_G: Key = Key::number(
    "fish_g",
    units::GRAMS,
    respiration::FISH,
    "body mass of one fish",
)
.or(respiration::USUAL_FISH_G);
const FED_KEY: Key = Key::word("fed", YES_NO, "fed within the day").or_word("yes");

pub static SUBJECT: Subject = Subject {
    title: "Oxygen",
    listed: true,
    calculations: &[
        Calculation {
            name: "oxygen-solubility",
            help: "oxygen in water saturated with air",
            unit: "mg/L",
            keys: &[TEMPERATURE, SALINITY, PRESSURE, ELEVATION],
            source: &[BENSON_KRAUSE, ATMOSPHERE],
            compute: |i| {
                let (t, salinity) = (i.num("temperature")?, i.num("salinity")?);
                Ok(oxygen::solubility(t, salinity, pressure(i)?)?)
            },
        },
        Calculation {
            name: "oxygen-saturation",
            help: "percent of saturation of a measured oxygen",
            unit: "%",
            keys: &[DISSOLVED_OXYGEN, TEMPERATURE, SALINITY, PRESSURE, ELEVATION],
            source: &[BENSON_KRAUSE, ATMOSPHERE],
            compute: |i| {
                let (measured, t) = (i.num("dissolved_oxygen")?, i.num("temperature")?);
                Ok(oxygen::to_saturation(
                    measured,
                    t,
                    i.num("salinity")?,
                    pressure(i)?,
                )?)
            },
        },
        Calculation {
            name: "oxygen-from-saturation",
            help: "oxygen at a percent of saturation",
            unit: "mg/L",
            keys: &[
                Key::number(
                    "oxygen_saturation",
                    units::PERCENT,
                    oxygen::SATURATION,
                    "percent of saturation",
                ),
                TEMPERATURE,
                SALINITY,
                PRESSURE,
                ELEVATION,
            ],
            source: &[BENSON_KRAUSE, ATMOSPHERE],
            compute: |i| {
                let (percent, t) = (i.num("oxygen_saturation")?, i.num("temperature")?);
                Ok(oxygen::from_saturation(
                    percent,
                    t,
                    i.num("salinity")?,
                    pressure(i)?,
                )?)
            },
        },
        Calculation {
            name: "oxygen-solubility-molal",
            help: "oxygen in saturated water at one atmosphere, per kg of water",
            unit: "umol/kg",
            keys: &[TEMPERATURE, SALINITY],
            source: &[
                BENSON_KRAUSE,
                "density: Millero & Poisson 1981 (from memory)",
            ],
            compute: |i| {
                let (t, salinity) = (i.num("temperature")?, i.num("salinity")?);
                Ok(oxygen::solubility_molal(t, salinity)?)
            },
        },
        Calculation {
            name: "pressure-at-altitude",
            help: "air pressure at a height above the sea",
            unit: "kPa",
            keys: &[Key {
                rivals: &[],
                fallback: super::key::Fallback::Required,
                ..ELEVATION
            }],
            source: &["U.S. Standard Atmosphere 1976"],
            compute: |i| Ok(oxygen::pressure_at(i.num("elevation_m")?)?),
        },
        Calculation {
            name: "water-density",
            help: "density of the water at one atmosphere",
            unit: "kg/m3",
            keys: &[TEMPERATURE, SALINITY],
            source: &["Millero & Poisson 1981, Deep-Sea Res. 28:625 (from memory)"],
            compute: |i| Ok(oxygen::density(i.num("temperature")?, i.num("salinity")?)?),
        },
        Calculation {
            name: "fish-oxygen-use",
            help: "oxygen that a kg of fish uses, to a factor of two",
            unit: "mg/kg/h",
            keys: &[FISH_TEMPERATURE, FISH_G, FED_KEY],
            source: &[CLARKE, FED],
            compute: |i| {
                let (t, fish) = (i.num("temperature")?, i.num("fish_g")?);
                Ok(respiration::oxygen_use(t, fish, i.yes("fed")?)?)
            },
        },
        Calculation {
            name: "minutes-of-oxygen",
            help: "minutes until oxygen falls to a limit with no air, fish alone",
            unit: "min",
            keys: &[
                DISSOLVED_OXYGEN,
                Key::number(
                    "limit",
                    units::OXYGEN,
                    oxygen::DISSOLVED_OXYGEN,
                    "oxygen to fall to",
                )
                .or(2.5),
                Key::number(
                    "biomass_kg",
                    units::KILOGRAMS,
                    Range::positive("biomass_kg", "kg"),
                    "fish in that water",
                )
                .site(SiteKey::Biomass),
                VOLUME_L,
                FISH_TEMPERATURE,
                FISH_G,
                FED_KEY,
            ],
            source: &[CLARKE, FED, "limit of 2.5 mg/L: common practice"],
            compute: |i| {
                let (t, fish) = (i.num("temperature")?, i.num("fish_g")?);
                let rate = respiration::oxygen_use(t, fish, i.yes("fed")?)?;
                let (now, limit) = (i.num("dissolved_oxygen")?, i.num("limit")?);
                let (fish, volume) = (i.num("biomass_kg")?, i.num("volume_l")?);
                Ok(respiration::minutes_until(now, limit, fish, volume, rate)?)
            },
        },
    ],
};
