//! Water that trades carbon dioxide with air: then only alkalinity decides the pH.

use super::constants::Constants;
use super::sample::{ALKALINITY, Sample};
use super::state::{self, CACO3_PER_EQ};
use crate::water::masses;
use crate::water::range::{OutOfRange, Range};
use crate::water::roots;

/// Carbon dioxide in air, or in the air a water is in balance with: ppm is millionths of an atmosphere.
pub const CO2_PPM: Range = Range {
    high: 200_000.0,
    ..Range::positive("co2_ppm", "ppm")
};

/// Carbon dioxide in outdoor air, ppm. Source: NOAA global mean of 2023, rounded. A stocked tank sits at 2,000 to 10,000.
pub const OUTDOOR_PPM: f64 = 420.0;

/// Carbon dioxide (mg/L) in water in balance with air: temperature in C (0-60), `co2_ppm` in air.
///
/// # Errors
/// [`OutOfRange`].
pub fn carbon_dioxide(temperature: f64, co2_ppm: f64) -> Result<f64, OutOfRange> {
    let k = Constants::at(temperature, 0.0)?;
    Ok(1000.0 * masses::CO2 * k.kh * CO2_PPM.check(co2_ppm)? * 1e-6)
}

/// The air (ppm) that water with this much carbon dioxide (mg/L) is in balance with; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn as_air(temperature: f64, carbon_dioxide: f64) -> Result<f64, OutOfRange> {
    const DISSOLVED: Range = Range::not_negative("carbon_dioxide", "mg/L");
    let k = Constants::at(temperature, 0.0)?;
    Ok(1e6 * DISSOLVED.check(carbon_dioxide)? / (1000.0 * masses::CO2 * k.kh))
}

/// pH of water that holds carbon dioxide at this concentration (mol/L), with alkalinity in eq/L and phosphorus in mol/L.
pub(super) fn ph_at_co2(
    k: &Constants,
    equivalents: f64,
    co2: f64,
    phosphorus: f64,
) -> Result<f64, OutOfRange> {
    let ph = roots::of_rising(0.0, 14.0, |ph| {
        let h = 10f64.powf(-ph);
        let carbonate = co2 * (k.k1 / h + 2.0 * k.k1 * k.k2 / (h * h));
        carbonate + state::other_alkalinity(k, ph, phosphorus) - equivalents
    });
    state::PH_AFTER.check(ph)
}

/// pH of water of this alkalinity in balance with air that holds this much carbon dioxide (ppm).
///
/// The sample's own pH has no say.
///
/// # Errors
/// [`OutOfRange`].
pub fn ph_in_air(sample: &Sample, co2_ppm: f64) -> Result<f64, OutOfRange> {
    let k = sample.constants()?;
    let co2 = k.kh * CO2_PPM.check(co2_ppm)? * 1e-6;
    ph_at_co2(&k, sample.equivalents()?, co2, sample.phosphorus_moles()?)
}

/// pH that water of this temperature (C, 0-60), alkalinity (mg/L as CaCO3) and carbon dioxide (mg/L) must have: a check on
/// a probe.
///
/// # Errors
/// [`OutOfRange`].
pub fn ph_from_carbon_dioxide(
    temperature: f64,
    alkalinity: f64,
    carbon_dioxide: f64,
    ionic_strength: f64,
) -> Result<f64, OutOfRange> {
    const DISSOLVED: Range = Range::positive("carbon_dioxide", "mg/L");
    let k = Constants::at(temperature, ionic_strength)?;
    let co2 = DISSOLVED.check(carbon_dioxide)? / (1000.0 * masses::CO2);
    ph_at_co2(&k, ALKALINITY.check(alkalinity)? / CACO3_PER_EQ, co2, 0.0)
}
