//! Un-ionized ammonia: the share of total ammonia that goes through gills and poisons.

use super::activity::{self, ZERO_CELSIUS};
use super::range::{OutOfRange, Range};

/// Temperatures of the measurements the fit rests on.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 50.0, "C");
/// pH for which the balance of ammonia and ammonium is the whole story.
pub const PH: Range = Range::new("ph", 3.0, 12.0, "pH");
/// Salinities of the linear fit.
pub const SALINITY: Range = Range::new("salinity", 0.0, 35.0, "g/L");
/// Total ammonia.
pub const TOTAL_AMMONIA: Range = Range::not_negative("total_ammonia", "mg/L as N");

/// Rise of pKa with each g/kg of salt. Source: a fit, good to 0.005 in pK for 0-35 g/kg, to Clegg & Whitfield 1995
/// as PyCO2SYS 1.8.3.4 computes it.
const PK_PER_SALINITY: f64 = 0.0031;

/// pKa of ammonium in water without salts, at a temperature in C (0-50).
///
/// Source: Emerson, Russo, Lund & Thurston 1975, J. Fish. Res. Board Can. 32:2379-2383. Published toxicity limits were
/// nearly all worked out with it, so limits are compared with it as it is.
///
/// # Errors
/// [`OutOfRange`].
pub fn pka(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(0.090_18 + 2729.92 / (TEMPERATURE.check(temperature)? + ZERO_CELSIUS))
}

/// pKa of ammonium in water of this salinity (g/L, 0-35).
///
/// # Errors
/// [`OutOfRange`].
pub fn pka_in_salt(temperature: f64, salinity: f64) -> Result<f64, OutOfRange> {
    Ok(pka(temperature)? + PK_PER_SALINITY * SALINITY.check(salinity)?)
}

/// pKa of ammonium as a pH probe sees it that was set in standard buffers, at an ionic strength in mol/L (0-0.1).
///
/// Source: Emerson et al. 1975 with the Davies equation; within 1 % of PHREEQC in the fraction. The fraction
/// falls by 4 % at 0.002 mol/L, 7 % at 0.005, 13 % at 0.02.
///
/// # Errors
/// [`OutOfRange`].
pub fn pka_by_activity(temperature: f64, ionic_strength: f64) -> Result<f64, OutOfRange> {
    Ok(pka(temperature)? - activity::log_gamma(1.0, temperature, ionic_strength)?)
}

/// The share (0-1) of total ammonia that is un-ionized at this pH.
fn share(pka: f64, ph: f64) -> Result<f64, OutOfRange> {
    Ok(1.0 / (1.0 + 10f64.powf(pka - PH.check(ph)?)))
}

/// Un-ionized share (0-1) of total ammonia: temperature in C (0-50), pH (3-12), salinity in g/L (0-35).
///
/// # Errors
/// [`OutOfRange`].
pub fn fraction(temperature: f64, ph: f64, salinity: f64) -> Result<f64, OutOfRange> {
    share(pka_in_salt(temperature, salinity)?, ph)
}

/// Un-ionized share (0-1) corrected for ionic strength (mol/L, 0-0.1); see [`pka_by_activity`].
///
/// # Errors
/// [`OutOfRange`].
pub fn fraction_by_activity(
    temperature: f64,
    ph: f64,
    ionic_strength: f64,
) -> Result<f64, OutOfRange> {
    share(pka_by_activity(temperature, ionic_strength)?, ph)
}

/// Un-ionized ammonia (mg/L as N) in this much total ammonia (mg/L as N).
///
/// # Errors
/// [`OutOfRange`].
pub fn un_ionized(
    total_ammonia: f64,
    temperature: f64,
    ph: f64,
    salinity: f64,
) -> Result<f64, OutOfRange> {
    Ok(TOTAL_AMMONIA.check(total_ammonia)? * fraction(temperature, ph, salinity)?)
}

/// The most total ammonia (mg/L as N) that keeps un-ionized ammonia at or below a limit (mg/L as N).
///
/// # Errors
/// [`OutOfRange`].
pub fn total_at_limit(
    limit: f64,
    temperature: f64,
    ph: f64,
    salinity: f64,
) -> Result<f64, OutOfRange> {
    const LIMIT: Range = Range::positive("limit", "mg/L as N");
    Ok(LIMIT.check(limit)? / fraction(temperature, ph, salinity)?)
}

/// The highest pH at which un-ionized ammonia stays at a limit (mg/L as N), for this much total ammonia (mg/L as N).
///
/// # Errors
/// [`OutOfRange`]; also when the limit is not below the total ammonia, for then no pH reaches it.
pub fn ph_at_limit(
    limit: f64,
    total_ammonia: f64,
    temperature: f64,
    salinity: f64,
) -> Result<f64, OutOfRange> {
    let total = Range::positive("total_ammonia", "mg/L as N").check(total_ammonia)?;
    let below_total = Range {
        high: total * (1.0 - 1e-9),
        ..Range::positive("limit", "mg/L as N")
    };
    let share = below_total.check(limit)? / total;
    Ok(pka_in_salt(temperature, salinity)? + (share / (1.0 - share)).log10())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_limit_ph_is_where_the_limit_is_reached() {
        let ph = ph_at_limit(0.05, 2.0, 26.0, 1.0);
        let back = ph.and_then(|ph| un_ionized(2.0, 26.0, ph, 1.0));
        assert!(matches!(back, Ok(u) if (u - 0.05).abs() < 1e-12));
        assert!(ph_at_limit(2.0, 2.0, 26.0, 0.0).is_err());
    }

    #[test]
    fn ten_times_as_much_for_each_unit_of_ph() {
        let low = fraction(25.0, 6.0, 0.0);
        let high = fraction(25.0, 7.0, 0.0);
        assert!(matches!((low, high), (Ok(l), Ok(h)) if (h / l - 10.0).abs() < 0.1));
    }
}
