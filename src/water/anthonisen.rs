//! Free ammonia and free nitrous acid, as the literature on inhibited nitrifiers counts them.
//!
//! Source: Anthonisen, Loehr, Prakasam & Srinath 1976, J. Water Pollut. Control Fed. 48:835 (expressions from memory).
//! Its own thresholds were set with its own expressions, so these keep the paper's rounded masses and 273 K.

use super::range::{OutOfRange, Range};

/// Temperatures of use.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 40.0, "C");
/// pH of use.
pub const PH: Range = Range::new("ph", 3.0, 11.0, "pH");

const PAPER_ZERO_CELSIUS: f64 = 273.0;

fn water(temperature: f64, ph: f64) -> Result<(f64, f64), OutOfRange> {
    let kelvin = TEMPERATURE.check(temperature)? + PAPER_ZERO_CELSIUS;
    Ok((kelvin, 10f64.powf(PH.check(ph)?)))
}

/// Free ammonia (mg/L as NH3) in this much total ammonia (mg/L as N): temperature in C (0-40), pH (3-11).
///
/// Agrees with Emerson et al. 1975 within 0.5 %. Nitrite oxidizers are held back from 0.1-1.0 mg/L, ammonia oxidizers from
/// 10-150.
///
/// # Errors
/// [`OutOfRange`].
pub fn free_ammonia(total_ammonia: f64, ph: f64, temperature: f64) -> Result<f64, OutOfRange> {
    let total = Range::not_negative("total_ammonia", "mg/L as N").check(total_ammonia)?;
    let (kelvin, power) = water(temperature, ph)?;
    Ok(17.0 / 14.0 * total * power / ((6344.0 / kelvin).exp() + power))
}

/// Free nitrous acid (mg/L as HNO2) in this much nitrite (mg/L as N): temperature in C (0-40), pH (3-11).
///
/// 26-60 % above what pKa 3.15-3.25 gives: treat it as known to a factor of 1.5. Both groups of nitrifiers are held back
/// from 0.22-2.8 mg/L (from memory; newer work says from a tenth of that).
///
/// # Errors
/// [`OutOfRange`].
pub fn free_nitrous_acid(nitrite: f64, ph: f64, temperature: f64) -> Result<f64, OutOfRange> {
    let nitrite = Range::not_negative("nitrite", "mg/L as N").check(nitrite)?;
    let (kelvin, power) = water(temperature, ph)?;
    Ok(46.0 / 14.0 * nitrite / ((-2300.0 / kelvin).exp() * power))
}

/// Share (0-1) of nitrite that is nitrous acid, by the same constant: temperature in C (0-40), pH (3-11).
///
/// # Errors
/// [`OutOfRange`].
pub fn nitrous_acid_fraction(temperature: f64, ph: f64) -> Result<f64, OutOfRange> {
    let (kelvin, power) = water(temperature, ph)?;
    Ok(1.0 / (1.0 + (-2300.0 / kelvin).exp() * power))
}
