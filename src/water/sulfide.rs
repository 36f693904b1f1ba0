//! Hydrogen sulfide: the share of total sulfide that poisons. Any that can be measured is too much.

use super::activity::ZERO_CELSIUS;
use super::range::{OutOfRange, Range};

/// Temperatures of use.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 40.0, "C");
/// pH of use.
pub const PH: Range = Range::new("ph", 3.0, 11.0, "pH");
/// Total sulfide.
pub const SULFIDE: Range = Range::not_negative("hydrogen_sulfide", "mg/L as S");

/// pK1 of hydrogen sulfide in fresh water; temperature in C (0-40). 6.98 at 25 C; other sources 6.94-7.05.
///
/// Source: Hershey, Plese & Millero 1988, Geochim. Cosmochim. Acta 52:2047 (from memory; PyCO2SYS has the same).
///
/// # Errors
/// [`OutOfRange`].
pub fn pk1(temperature: f64) -> Result<f64, OutOfRange> {
    let t = TEMPERATURE.check(temperature)? + ZERO_CELSIUS;
    Ok(-98.080 + 5765.4 / t + 15.0455 * t.ln())
}

/// Share (0-1) of total sulfide that is hydrogen sulfide: temperature in C (0-40), pH (3-11). Known to 0.035 at pH 7.
///
/// # Errors
/// [`OutOfRange`].
pub fn fraction(temperature: f64, ph: f64) -> Result<f64, OutOfRange> {
    Ok(1.0 / (1.0 + 10f64.powf(PH.check(ph)? - pk1(temperature)?)))
}

/// Hydrogen sulfide (mg/L as S) in this much total sulfide (mg/L as S).
///
/// # Errors
/// [`OutOfRange`].
pub fn un_ionized(sulfide: f64, temperature: f64, ph: f64) -> Result<f64, OutOfRange> {
    Ok(SULFIDE.check(sulfide)? * fraction(temperature, ph)?)
}
