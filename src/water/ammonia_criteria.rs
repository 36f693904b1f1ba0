//! Total ammonia limits of the U.S. EPA for wild waters: a floor for alarm, not a lethal level for farmed fish.
//!
//! Sources: EPA 822-R-13-001 (2013), formulas from memory, 17 and 1.9 mg/L at pH 7 and 20 C confirmed;
//! EPA-822-R-99-014 (1999 update), formulas confirmed.

use super::range::{OutOfRange, Range};

/// pH of the published tables.
pub const PH: Range = Range::new("ph", 6.5, 9.0, "pH");
/// Temperatures of the published tables.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 30.0, "C");

/// The two-sided curve all these criteria are built of: `acid` above the turning pH, `base` below it.
fn curve(ph: f64, turn: f64, acid: f64, base: f64) -> f64 {
    acid / (1.0 + 10f64.powf(turn - ph)) + base / (1.0 + 10f64.powf(ph - turn))
}

/// Acute criterion of 2013 (mg/L as N): a one-hour mean not to be passed more than once in three years.
/// pH 6.5-9, temperature in C (0-30); `trout` where trout or salmon live.
///
/// # Errors
/// [`OutOfRange`].
pub fn acute_2013(ph: f64, temperature: f64, trout: bool) -> Result<f64, OutOfRange> {
    let ph = PH.check(ph)?;
    let t = TEMPERATURE.check(temperature)?;
    let shape = 0.7249 * curve(ph, 7.204, 0.0114, 1.6181);
    let mussels = 23.12 * 10f64.powf(0.036 * (20.0 - t));
    Ok(if trout {
        (shape * mussels).min(curve(ph, 7.204, 0.275, 39.0))
    } else {
        shape * mussels.min(51.93)
    })
}

/// Chronic criterion of 2013 (mg/L as N): a 30-day mean. pH 6.5-9, temperature in C (0-30).
///
/// # Errors
/// [`OutOfRange`].
pub fn chronic_2013(ph: f64, temperature: f64) -> Result<f64, OutOfRange> {
    let warm = TEMPERATURE.check(temperature)?.max(7.0);
    let shape = 0.8876 * curve(PH.check(ph)?, 7.688, 0.0278, 1.1994);
    Ok(shape * 2.126 * 10f64.powf(0.028 * (20.0 - warm)))
}

/// The highest four-day mean of 2013 (mg/L as N): two and a half times the chronic criterion.
///
/// # Errors
/// [`OutOfRange`].
pub fn chronic_four_day_2013(ph: f64, temperature: f64) -> Result<f64, OutOfRange> {
    Ok(2.5 * chronic_2013(ph, temperature)?)
}

/// Acute criterion of 1999 (mg/L as N); pH 6.5-9.
///
/// # Errors
/// [`OutOfRange`].
pub fn acute_1999(ph: f64, trout: bool) -> Result<f64, OutOfRange> {
    let ph = PH.check(ph)?;
    Ok(if trout {
        curve(ph, 7.204, 0.275, 39.0)
    } else {
        curve(ph, 7.204, 0.411, 58.4)
    })
}

/// Chronic criterion of 1999 (mg/L as N), with or without early life stages of fish; pH 6.5-9, temperature in C (0-30).
///
/// # Errors
/// [`OutOfRange`].
pub fn chronic_1999(ph: f64, temperature: f64, early_life: bool) -> Result<f64, OutOfRange> {
    let t = TEMPERATURE.check(temperature)?;
    let warmth = if early_life {
        (1.45 * 10f64.powf(0.028 * (25.0 - t))).min(2.85)
    } else {
        1.45 * 10f64.powf(0.028 * (25.0 - t.max(7.0)))
    };
    Ok(warmth * curve(PH.check(ph)?, 7.688, 0.0577, 2.487))
}
