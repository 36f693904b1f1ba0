//! Keys that many calculations share, and what they come to.

use super::Failure;
use super::inputs::Inputs;
use super::key::{Also, Key};
use super::site_values::SiteKey;
use crate::water::carbonate::substance::{self, Substance};
use crate::water::carbonate::{Sample, dose, gas, sample, state};
use crate::water::nitrite::{self, Salt};
use crate::water::range::Range;
use crate::water::units::table as units;
use crate::water::{activity, ammonia, feed, oxygen};

/// Yes or no.
pub static YES_NO: &[&str] = &["yes", "no"];

/// Water temperature, for ammonia.
pub const TEMPERATURE: Key = temperature(ammonia::TEMPERATURE);
/// pH, for ammonia.
pub const PH: Key = Key::number("ph", units::PH, ammonia::PH, "pH");
/// Total ammonia.
pub const TOTAL_AMMONIA: Key = Key::number(
    "total_ammonia",
    units::AMMONIA,
    ammonia::TOTAL_AMMONIA,
    "total ammonia",
);
/// Salinity, none unless the site or somebody says so.
pub const SALINITY: Key = Key::number(
    "salinity",
    units::SALINITY,
    ammonia::SALINITY,
    "salinity of the water",
)
.site(SiteKey::Salinity)
.or(0.0);
/// Dissolved oxygen.
pub const DISSOLVED_OXYGEN: Key = Key::number(
    "dissolved_oxygen",
    units::OXYGEN,
    oxygen::DISSOLVED_OXYGEN,
    "dissolved oxygen",
);

/// Water temperature within another range.
pub const fn temperature(range: Range) -> Key {
    Key::number(
        "temperature",
        units::TEMPERATURE,
        range,
        "water temperature",
    )
}

/// Water temperature for the carbonate system.
pub const CARBONATE_TEMPERATURE: Key = temperature(activity::TEMPERATURE);
/// pH for the carbonate system.
pub const CARBONATE_PH: Key = Key::number("ph", units::PH, state::PH, "pH");
/// Total alkalinity.
pub const ALKALINITY: Key = Key::number(
    "alkalinity",
    units::ALKALINITY,
    sample::ALKALINITY,
    "total alkalinity",
);
/// Ionic strength; that of the alkalinity alone unless it is known better.
pub const IONIC_STRENGTH: Key = Key::number(
    "ionic_strength",
    units::IONIC_STRENGTH,
    activity::IONIC_STRENGTH,
    "ionic strength; else from conductivity, salinity or alkalinity",
)
.rivals(&["conductivity", "salinity"])
.optional();
/// Conductivity, for ionic strength.
pub const CONDUCTIVITY: Key = Key::number(
    "conductivity",
    units::CONDUCTIVITY,
    activity::CONDUCTIVITY,
    "conductivity at 25 C",
)
.rivals(&["ionic_strength", "salinity"])
.optional();
/// Salinity, for ionic strength.
pub const SALINITY_FOR_IONS: Key = Key::number(
    "salinity",
    units::SALINITY,
    activity::SALINITY,
    "salinity of the water",
)
.rivals(&["ionic_strength", "conductivity"])
.site(SiteKey::Salinity)
.optional();
/// Phosphorus, part of a titrated alkalinity.
pub const PHOSPHORUS: Key = Key::number(
    "phosphorus",
    units::PHOSPHORUS,
    sample::PHOSPHORUS,
    "dissolved phosphorus",
)
.or(0.0);
/// Carbon dioxide in air, outdoors unless said otherwise.
pub const CO2_PPM: Key = Key::number(
    "co2_ppm",
    units::CO2_IN_AIR,
    gas::CO2_PPM,
    "carbon dioxide in air; 2000-10000 for a stocked tank",
)
.or(gas::OUTDOOR_PPM);
/// A base or an acid.
pub const SUBSTANCE: Key = Key::word("chemical", substance::NAMES, "base or acid, pure");
/// A dose.
pub const DOSE: Key = Key::number(
    "dose_mg_per_l",
    units::MG_PER_L,
    dose::DOSE,
    "dose of the pure substance",
);
/// A salt that brings chloride.
pub const SALT: Key = Key::word("chemical", nitrite::SALT_NAMES, "salt that brings chloride");

const AS_M3: &[Also] = &[Also {
    name: "volume_m3",
    units: units::CUBIC_METERS,
    scale: 1000.0,
}];
/// All the water, in liters.
pub const VOLUME_L: Key = Key::number(
    "volume_l",
    units::LITERS,
    Range::positive("volume_l", "L"),
    "volume of the water",
)
.also(AS_M3)
.site(SiteKey::VolumeL);

const AS_LITERS: &[Also] = &[Also {
    name: "volume_l",
    units: units::LITERS,
    scale: 1e-3,
}];
/// All the water, in cubic meters.
pub const VOLUME_M3: Key = Key::number(
    "volume_m3",
    units::CUBIC_METERS,
    Range::positive("volume_m3", "m3"),
    "volume of the water",
)
.also(AS_LITERS)
.site(SiteKey::VolumeM3);

const AS_FEED: &[Also] = &[
    Also {
        name: "feed",
        units: units::FEED,
        scale: 1.0,
    },
    Also {
        name: "feed_g_per_day",
        units: units::FEED_G,
        scale: 1e-3,
    },
];
/// Feed in kilograms.
pub const FEED: Key = Key::number("feed_kg_per_day", units::FEED, feed::FEED, "feed in a day")
    .also(AS_FEED)
    .site(SiteKey::Feed);

const AS_PROTEIN: &[Also] = &[
    Also {
        name: "feed_protein_percent",
        units: units::PERCENT,
        scale: 1.0,
    },
    Also {
        name: "protein",
        units: units::PERCENT,
        scale: 1.0,
    },
];
/// Protein in the feed.
pub const PROTEIN: Key = Key::number(
    "protein_percent",
    units::PERCENT,
    feed::PROTEIN,
    "protein in the feed",
)
.also(AS_PROTEIN)
.site(SiteKey::Protein);

/// Air pressure, in place of elevation.
pub const PRESSURE: Key = Key::number(
    "pressure_kpa",
    units::PRESSURE,
    oxygen::PRESSURE,
    "air pressure at the place, not reduced to sea level",
)
.rivals(&["elevation_m"])
.optional();

const AS_ELEVATION: &[Also] = &[Also {
    name: "elevation",
    units: units::ELEVATION,
    scale: 1.0,
}];
/// Elevation, sea level unless the site or somebody says so.
pub const ELEVATION: Key = Key::number(
    "elevation_m",
    units::ELEVATION,
    oxygen::ELEVATION,
    "height above the sea",
)
.also(AS_ELEVATION)
.rivals(&["pressure_kpa"])
.site(SiteKey::Elevation)
.or(0.0);

/// Air pressure, kPa: as given, or of the elevation.
pub fn pressure(inputs: &Inputs) -> Result<f64, Failure> {
    match inputs.opt("pressure_kpa") {
        Some(pressure) => Ok(pressure),
        None => Ok(oxygen::pressure_at(inputs.num("elevation_m")?)?),
    }
}

/// Ionic strength, mol/L: as given, or of conductivity or salinity, or of the alkalinity's own ions.
pub fn ionic_strength(inputs: &Inputs, alkalinity: f64) -> Result<f64, Failure> {
    let own = alkalinity / state::CACO3_PER_EQ;
    if let Some(given) = inputs.opt("ionic_strength") {
        return Ok(given);
    }
    if let Some(conductivity) = inputs.opt("conductivity") {
        return Ok(activity::from_conductivity(conductivity)?);
    }
    match inputs.opt("salinity") {
        Some(salinity) => Ok(own.max(activity::from_salinity(salinity)?)),
        None => Ok(own),
    }
}

/// The water that temperature, pH, alkalinity and what else is known describe.
pub fn sample(inputs: &Inputs) -> Result<Sample, Failure> {
    let alkalinity = inputs.num("alkalinity")?;
    let bare = Sample::new(inputs.num("temperature")?, inputs.num("ph")?, alkalinity);
    Ok(bare
        .with_ionic_strength(ionic_strength(inputs, alkalinity)?)
        .with_phosphorus(inputs.opt("phosphorus").unwrap_or(0.0)))
}

/// The base or acid that was named.
pub fn substance(inputs: &Inputs) -> Result<&'static Substance, Failure> {
    substance::substance(inputs.word("chemical")?).ok_or(Failure::Undeclared { key: "chemical" })
}

/// The salt that was named.
pub fn salt(inputs: &Inputs) -> Result<&'static Salt, Failure> {
    nitrite::salt_named(inputs.word("chemical")?).ok_or(Failure::Undeclared { key: "chemical" })
}
