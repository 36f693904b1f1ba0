//! Dissolved oxygen: how much the water can hold, and percent of saturation.

use super::activity::ZERO_CELSIUS;
use super::masses;
use super::range::{OutOfRange, Range};

/// Temperatures of the measurements.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 40.0, "C");
/// Salinities of the measurements.
pub const SALINITY: Range = Range::new("salinity", 0.0, 40.0, "g/L");
/// Air pressures of the measurements: half an atmosphere to 1.1.
pub const PRESSURE: Range = Range::new("pressure_kpa", 50.66, 111.46, "kPa");
/// Heights above the sea that stay within those pressures.
pub const ELEVATION: Range = Range::new("elevation_m", -500.0, 5400.0, "m");
/// Dissolved oxygen.
pub const DISSOLVED_OXYGEN: Range = Range::not_negative("dissolved_oxygen", "mg/L");
/// Percent of saturation.
pub const SATURATION: Range = Range::not_negative("oxygen_saturation", "%");

/// Air pressure at sea level in the standard atmosphere, kPa.
pub const SEA_LEVEL_KPA: f64 = 101.325;

/// Milligrams in a milliliter of oxygen gas at 0 C and one atmosphere.
/// Source: USGS Office of Water Quality Technical Memorandum 2011.03 (it replaces 1.4276, which was 0.10 % low).
pub const MG_PER_ML: f64 = 1.429_05;

/// Air pressure (kPa) at a height above the sea (m, -500 to 5400).
///
/// Source: U.S. Standard Atmosphere 1976, layer below 11 km. A weather report's pressure is reduced to sea level and must
/// never be used together with this.
///
/// # Errors
/// [`OutOfRange`].
pub fn pressure_at(elevation_m: f64) -> Result<f64, OutOfRange> {
    let height = ELEVATION.check(elevation_m)?;
    Ok(SEA_LEVEL_KPA * (1.0 - 2.255_77e-5 * height).powf(5.255_88))
}

/// Oxygen (mg/L) that water holds under moist air at one atmosphere.
/// Source: Benson & Krause 1984, Limnol. Oceanogr. 29:620, eq. 32; Standard Methods 4500-O.
fn at_one_atmosphere(temperature: f64, salinity: f64) -> f64 {
    let t = temperature + ZERO_CELSIUS;
    let fresh = -139.344_11 + 1.575_701e5 / t - 6.642_308e7 / t.powi(2) + 1.243_800e10 / t.powi(3)
        - 8.621_949e11 / t.powi(4);
    let salt = salinity * (1.7674e-2 - 1.0754e1 / t + 2.1407e3 / t.powi(2));
    (fresh - salt).exp()
}

/// Pressure of water vapor (atm) over water. Source: Standard Methods 4500-O (from memory).
fn vapor_pressure(temperature: f64) -> f64 {
    let t = temperature + ZERO_CELSIUS;
    (11.8571 - 3840.70 / t - 216_961.0 / t.powi(2)).exp()
}

/// Oxygen (mg/L) in water saturated with moist air.
///
/// Temperature in C (0-40), salinity in g/L read as g/kg (0-40), air pressure at the place in kPa (50.66-111.46).
/// Source: Benson & Krause 1984, eqs 24 and 32; within 0.0013 mg/L of the TEOS-10 library gsw.
///
/// # Errors
/// [`OutOfRange`].
pub fn solubility(temperature: f64, salinity: f64, pressure_kpa: f64) -> Result<f64, OutOfRange> {
    let t = TEMPERATURE.check(temperature)?;
    let at_one = at_one_atmosphere(t, SALINITY.check(salinity)?);
    let p = PRESSURE.check(pressure_kpa)? / SEA_LEVEL_KPA;
    let z = 9.75e-4 - 1.426e-5 * t + 6.436e-8 * t * t;
    let u = vapor_pressure(t);
    Ok(at_one * p * ((1.0 - u / p) * (1.0 - z * p)) / ((1.0 - u) * (1.0 - z)))
}

/// Percent of saturation of a dissolved oxygen in mg/L; the rest as in [`solubility`].
///
/// # Errors
/// [`OutOfRange`].
pub fn to_saturation(
    dissolved_oxygen: f64,
    temperature: f64,
    salinity: f64,
    pressure_kpa: f64,
) -> Result<f64, OutOfRange> {
    let full = solubility(temperature, salinity, pressure_kpa)?;
    Ok(100.0 * DISSOLVED_OXYGEN.check(dissolved_oxygen)? / full)
}

/// Dissolved oxygen (mg/L) at a percent of saturation; the rest as in [`solubility`].
///
/// # Errors
/// [`OutOfRange`].
pub fn from_saturation(
    percent: f64,
    temperature: f64,
    salinity: f64,
    pressure_kpa: f64,
) -> Result<f64, OutOfRange> {
    let full = solubility(temperature, salinity, pressure_kpa)?;
    Ok(SATURATION.check(percent)? / 100.0 * full)
}

/// Oxygen (umol/kg) in water saturated with moist air at one atmosphere, as oceanographers print it.
///
/// # Errors
/// [`OutOfRange`].
pub fn solubility_molal(temperature: f64, salinity: f64) -> Result<f64, OutOfRange> {
    let mg_per_l = solubility(temperature, salinity, SEA_LEVEL_KPA)?;
    let kg_per_l = density(temperature, salinity)? / 1000.0;
    Ok(1000.0 * mg_per_l / masses::O2 / kg_per_l)
}

/// Density of water (kg/m3) at one atmosphere: temperature in C (0-40), salinity in g/kg (0-40).
///
/// Source: Millero & Poisson 1981, Deep-Sea Res. 28:625 (the UNESCO equation of state at the surface; from memory).
///
/// # Errors
/// [`OutOfRange`].
pub fn density(temperature: f64, salinity: f64) -> Result<f64, OutOfRange> {
    let t = TEMPERATURE.check(temperature)?;
    let s = SALINITY.check(salinity)?;
    let series = |terms: &[f64]| terms.iter().rev().fold(0.0, |sum, term| sum * t + term);
    let fresh = series(&[
        999.842_594,
        6.793_952e-2,
        -9.095_290e-3,
        1.001_685e-4,
        -1.120_083e-6,
        6.536_332e-9,
    ]);
    let first = series(&[8.244_93e-1, -4.0899e-3, 7.6438e-5, -8.2467e-7, 5.3875e-9]);
    let second = series(&[-5.724_66e-3, 1.0227e-4, -1.6546e-6]);
    Ok(fresh + first * s + second * s.powf(1.5) + 4.8314e-4 * s * s)
}
