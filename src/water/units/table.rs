//! The units there are: one list a quantity, the kept unit first.
//!
//! Exact by definition: degrees Fahrenheit, the US gallon (231 cubic inches), the avoirdupois pound, the foot, the
//! standard atmosphere. Ratios of masses: [`crate::water::masses`]. A practical salinity or a part per thousand is read
//! as one g/L, which is common practice and up to 3 % low in sea water.

use super::{Unit, UnitKind};
use crate::water::masses;

const LITERS_PER_GALLON: f64 = 3.785_411_784;
const KG_PER_POUND: f64 = 0.453_592_37;
const METERS_PER_FOOT: f64 = 0.3048;
const KPA_PER_ATM: f64 = 101.325;

const fn unit(name: &'static str, scale: f64) -> Unit {
    Unit {
        name,
        kind: UnitKind::Linear { scale, offset: 0.0 },
        assumes: None,
    }
}

const fn assuming(name: &'static str, what: &'static str) -> Unit {
    Unit {
        name,
        kind: UnitKind::Linear {
            scale: 1.0,
            offset: 0.0,
        },
        assumes: Some(what),
    }
}

const fn shifted(name: &'static str, scale: f64, offset: f64) -> Unit {
    Unit {
        name,
        kind: UnitKind::Linear { scale, offset },
        assumes: None,
    }
}

const fn saturation(name: &'static str) -> Unit {
    Unit {
        name,
        kind: UnitKind::NeedsSaturation,
        assumes: None,
    }
}

/// Degrees Celsius.
pub static TEMPERATURE: &[Unit] = &[
    unit("C", 1.0),
    shifted("F", 5.0 / 9.0, -160.0 / 9.0),
    shifted("K", 1.0, -273.15),
];
/// A difference of temperature: no shift of zero.
pub static TEMPERATURE_STEP: &[Unit] = &[unit("C", 1.0), unit("F", 5.0 / 9.0), unit("K", 1.0)];
/// pH.
pub static PH: &[Unit] = &[unit("pH", 1.0)];
/// Dissolved oxygen.
pub static OXYGEN: &[Unit] = &[
    unit("mg/L", 1.0),
    unit("mL/L", 1.429_05),
    saturation("% saturation"),
    saturation("%"),
];
/// Total ammonia.
pub static AMMONIA: &[Unit] = &[
    unit("mg/L as N", 1.0),
    assuming("mg/L", "as N"),
    unit("mg/L as NH3", 1.0 / masses::NH3_PER_N),
    unit("mg/L as NH4", 1.0 / masses::NH4_PER_N),
];
/// Nitrite.
pub static NITRITE: &[Unit] = &[
    unit("mg/L as N", 1.0),
    assuming("mg/L", "as N"),
    unit("mg/L as NO2", 1.0 / masses::NO2_PER_N),
];
/// Nitrate.
pub static NITRATE: &[Unit] = &[
    unit("mg/L as N", 1.0),
    assuming("mg/L", "as N"),
    unit("mg/L as NO3", 1.0 / masses::NO3_PER_N),
];
/// Total alkalinity.
pub static ALKALINITY: &[Unit] = &[
    unit("mg/L as CaCO3", 1.0),
    assuming("mg/L", "as CaCO3"),
    unit("dKH", masses::CACO3_PER_DEGREE),
    unit("meq/L", masses::CACO3_PER_MEQ),
    unit("mg/L as HCO3", 1.0 / masses::HCO3_PER_CACO3),
];
/// Total hardness; a grain per US gallon is 64.799 mg in 3.7854 L.
pub static HARDNESS: &[Unit] = &[
    unit("mg/L as CaCO3", 1.0),
    assuming("mg/L", "as CaCO3"),
    unit("dGH", masses::CACO3_PER_DEGREE),
    unit("meq/L", masses::CACO3_PER_MEQ),
    unit("mmol/L", masses::CACO3),
    unit("gr/gal", 64.798_91 / LITERS_PER_GALLON),
];
/// A plain concentration.
pub static MG_PER_L: &[Unit] = &[
    unit("mg/L", 1.0),
    unit("ug/L", 1e-3),
    unit("ppb", 1e-3),
    unit("g/L", 1e3),
];
/// Salinity.
pub static SALINITY: &[Unit] = &[
    unit("g/L", 1.0),
    unit("ppt", 1.0),
    unit("psu", 1.0),
    unit("g/kg", 1.0),
    unit("mg/L", 1e-3),
];
/// Electrical conductivity at 25 C.
pub static CONDUCTIVITY: &[Unit] = &[
    unit("uS/cm", 1.0),
    unit("mS/cm", 1e3),
    unit("dS/m", 1e3),
    unit("S/m", 1e4),
];
/// Total sulfide.
pub static SULFIDE: &[Unit] = &[
    unit("mg/L as S", 1.0),
    assuming("mg/L", "as S"),
    unit("ug/L as S", 1e-3),
    unit("mg/L as H2S", 1.0 / masses::H2S_PER_S),
];
/// Dissolved phosphorus.
pub static PHOSPHORUS: &[Unit] = &[
    unit("mg/L as P", 1.0),
    assuming("mg/L", "as P"),
    unit("mg/L as PO4", 1.0 / masses::PO4_PER_P),
];
/// Oxidation-reduction potential.
pub static REDOX: &[Unit] = &[unit("mV", 1.0), unit("V", 1e3)];
/// Percent.
pub static PERCENT: &[Unit] = &[unit("%", 1.0)];
/// A share between 0 and 1.
pub static FRACTION: &[Unit] = &[unit("fraction", 1.0), unit("%", 0.01)];
/// A bare number.
pub static COUNT: &[Unit] = &[unit("count", 1.0)];
/// A ratio of like things.
pub static RATIO: &[Unit] = &[unit("ratio", 1.0)];
/// Feed a day.
pub static FEED: &[Unit] = &[
    unit("kg/day", 1.0),
    unit("g/day", 1e-3),
    unit("lb/day", KG_PER_POUND),
];
/// Feed a day, small systems.
pub static FEED_G: &[Unit] = &[
    unit("g/day", 1.0),
    unit("kg/day", 1e3),
    unit("lb/day", 1e3 * KG_PER_POUND),
];
/// Circulation.
pub static FLOW: &[Unit] = &[
    unit("L/min", 1.0),
    unit("L/h", 1.0 / 60.0),
    unit("L/s", 60.0),
    unit("m3/h", 1e3 / 60.0),
    unit("gal/min", LITERS_PER_GALLON),
    unit("gal/h", LITERS_PER_GALLON / 60.0),
];
/// A volume of water in liters.
pub static LITERS: &[Unit] = &[
    unit("L", 1.0),
    unit("m3", 1e3),
    unit("gal", LITERS_PER_GALLON),
];
/// A volume in cubic meters.
pub static CUBIC_METERS: &[Unit] = &[
    unit("m3", 1.0),
    unit("L", 1e-3),
    unit("gal", 1e-3 * LITERS_PER_GALLON),
];
/// An area.
pub static AREA: &[Unit] = &[
    unit("m2", 1.0),
    unit("ft2", METERS_PER_FOOT * METERS_PER_FOOT),
];
/// Height above the sea.
pub static ELEVATION: &[Unit] = &[unit("m", 1.0), unit("ft", METERS_PER_FOOT)];
/// Air pressure at the place itself, not reduced to sea level.
pub static PRESSURE: &[Unit] = &[
    unit("kPa", 1.0),
    unit("hPa", 0.1),
    unit("mbar", 0.1),
    unit("atm", KPA_PER_ATM),
    unit("mmHg", KPA_PER_ATM / 760.0),
    unit("inHg", 25.4 * KPA_PER_ATM / 760.0),
];
/// A mass of fish.
pub static KILOGRAMS: &[Unit] = &[unit("kg", 1.0), unit("g", 1e-3), unit("lb", KG_PER_POUND)];
/// A mass of one fish.
pub static GRAMS: &[Unit] = &[
    unit("g", 1.0),
    unit("kg", 1e3),
    unit("lb", 1e3 * KG_PER_POUND),
];
/// A mass of something dissolved.
pub static GRAMS_PER_LITER: &[Unit] = &[unit("g/L", 1.0), unit("mg/L", 1e-3)];
/// A length of grain.
pub static MILLIMETERS: &[Unit] = &[unit("mm", 1.0), unit("cm", 10.0), unit("in", 25.4)];
/// Nitrogen in any form.
pub static NITROGEN: &[Unit] = &[unit("mg/L as N", 1.0), assuming("mg/L", "as N")];
/// Amount of substance, small.
pub static MICROMOLES: &[Unit] = &[unit("umol/L", 1.0), unit("mmol/L", 1e3)];
/// Amount of substance.
pub static MILLIMOLES: &[Unit] = &[unit("mmol/L", 1.0), unit("umol/L", 1e-3)];
/// Exchange of water.
pub static LITERS_PER_DAY: &[Unit] = &[
    unit("L/day", 1.0),
    unit("m3/day", 1e3),
    unit("gal/day", LITERS_PER_GALLON),
];
/// A rate of growth.
pub static PER_DAY: &[Unit] = &[unit("1/day", 1.0), unit("1/h", 24.0)];
/// A factor for each degree.
pub static THETA: &[Unit] = &[unit("1/C", 1.0)];
/// An activation energy.
pub static KJ_PER_MOL: &[Unit] = &[unit("kJ/mol", 1.0), unit("J/mol", 1e-3)];
/// Moles for moles.
pub static MOLAR_RATIO: &[Unit] = &[unit("mol/mol", 1.0)];
/// Chloride for nitrite ion.
pub static CHLORIDE_PER_NITRITE: &[Unit] = &[unit("mg Cl per mg NO2", 1.0)];
/// Feed for an area of plants.
pub static FEED_RATE: &[Unit] = &[unit("g/m2/day", 1.0)];
/// Tank volumes.
pub static VOLUMES: &[Unit] = &[unit("volumes", 1.0)];
/// Whatever unit the rest is in.
pub static ANY: &[Unit] = &[];
/// Carbon dioxide in air.
pub static CO2_IN_AIR: &[Unit] = &[unit("ppm", 1.0)];
/// Ionic strength.
pub static IONIC_STRENGTH: &[Unit] = &[unit("mol/L", 1.0), unit("mmol/L", 1e-3)];

/// The readings of the data contract.
pub static READINGS: &[&str] = &[
    "temperature",
    "air-temperature",
    "ph",
    "dissolved-oxygen",
    "total-ammonia",
    "nitrite",
    "nitrate",
    "alkalinity",
    "hardness",
    "carbon-dioxide",
    "chloride",
    "sodium",
    "salinity",
    "conductivity",
    "suspended-solids",
    "residual-chlorine",
    "hydrogen-sulfide",
    "total-gas-pressure",
    "redox",
    "iron",
    "potassium",
    "calcium",
    "magnesium",
    "copper",
    "zinc",
    "phosphorus",
    "feed",
    "deaths",
    "flow",
    "water-level",
    "makeup-water",
];

/// The units of a reading, the kept one first.
pub fn of_reading(reading: &str) -> Option<&'static [Unit]> {
    Some(match reading {
        "temperature" | "air-temperature" => TEMPERATURE,
        "ph" => PH,
        "dissolved-oxygen" => OXYGEN,
        "total-ammonia" => AMMONIA,
        "nitrite" => NITRITE,
        "nitrate" => NITRATE,
        "alkalinity" => ALKALINITY,
        "hardness" => HARDNESS,
        "carbon-dioxide" | "chloride" | "sodium" | "suspended-solids" | "residual-chlorine"
        | "iron" | "potassium" | "calcium" | "magnesium" | "copper" | "zinc" => MG_PER_L,
        "salinity" => SALINITY,
        "conductivity" => CONDUCTIVITY,
        "hydrogen-sulfide" => SULFIDE,
        "total-gas-pressure" | "water-level" => PERCENT,
        "redox" => REDOX,
        "phosphorus" => PHOSPHORUS,
        "feed" => FEED,
        "deaths" => COUNT,
        "flow" => FLOW,
        "makeup-water" => LITERS,
        _ => return None,
    })
}
