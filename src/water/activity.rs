//! Ionic strength and activity: how much salts in the water hold ions back.

use super::range::{OutOfRange, Range};

/// uS/cm of each mg/L nitrate-N with its counter-ion, near 25 C: nitrate 71.4 S cm2/mol (CRC Handbook; from memory) and
/// about as much for potassium or calcium beside it.
pub const CONDUCTIVITY_OF_NITRATE: f64 = 9.0;

/// Kelvin at 0 C.
pub const ZERO_CELSIUS: f64 = 273.15;

/// Ionic strengths for which the Davies equation holds.
pub const IONIC_STRENGTH: Range = Range::new("ionic_strength", 0.0, 0.1, "mol/L");
/// Water temperatures for which the dielectric constant is fitted and pKw holds.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 60.0, "C");
/// Electrical conductivity that stays within the Davies equation.
pub const CONDUCTIVITY: Range = Range::new("conductivity", 0.0, 6000.0, "uS/cm");
/// Salinity that stays within the Davies equation.
pub const SALINITY: Range = Range::new("salinity", 0.0, 5.0, "g/L");

/// Moles per liter of ionic strength in one uS/cm of conductivity at 25 C.
/// Source: Snoeyink & Jenkins 1980, Water Chemistry (from memory). A water of potassium, calcium and nitrate gives 1.2e-5
/// by PHREEQC, so the result is known to a quarter.
const PER_CONDUCTIVITY: f64 = 1.6e-5;

/// The Debye-Hueckel slope A at a temperature (C): 0.510 at 25 C, between the 0.509 (per kg) and 0.512 (per L) of handbooks.
/// Source: A = 1.82e6 (e T)^-1.5 with the dielectric constant of water of Malmberg & Maryott 1956 (from memory).
fn slope(temperature: f64) -> f64 {
    let t = temperature;
    let dielectric = 87.740 - 0.400_08 * t + 9.398e-4 * t * t - 1.410e-6 * t * t * t;
    1.82e6 * (dielectric * (t + ZERO_CELSIUS)).powf(-1.5)
}

/// log10 of the activity coefficient of an ion of this charge, by the Davies equation.
///
/// Temperature in C (0-60), ionic strength in mol/L (0-0.1). Source: Davies 1962, Ion Association (from memory);
/// within 4 % of PHREEQC at the upper end.
///
/// # Errors
/// [`OutOfRange`].
pub fn log_gamma(charge: f64, temperature: f64, ionic_strength: f64) -> Result<f64, OutOfRange> {
    TEMPERATURE.check(temperature)?;
    let root = IONIC_STRENGTH.check(ionic_strength)?.sqrt();
    Ok(-slope(temperature) * charge * charge * (root / (1.0 + root) - 0.3 * ionic_strength))
}

/// Ionic strength (mol/L) of fresh water from its conductivity at 25 C (uS/cm, 0-6000), to about a quarter.
///
/// # Errors
/// [`OutOfRange`].
pub fn from_conductivity(conductivity: f64) -> Result<f64, OutOfRange> {
    Ok(CONDUCTIVITY.check(conductivity)? * PER_CONDUCTIVITY)
}

/// Ionic strength (mol/kg) of diluted sea water from its salinity (g/L read as g/kg, 0-5).
///
/// Source: I = 19.924 S / (1000 - 1.005 S), Dickson & Goyet 1994.
///
/// # Errors
/// [`OutOfRange`].
pub fn from_salinity(salinity: f64) -> Result<f64, OutOfRange> {
    let s = SALINITY.check(salinity)?;
    Ok(19.924 * s / (1000.0 - 1.005 * s))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_slope_is_that_of_the_handbooks() {
        assert!((0.509..=0.512).contains(&slope(25.0)));
    }

    #[test]
    fn salts_hold_ions_back_and_none_leave_them_free() {
        assert_eq!(log_gamma(1.0, 25.0, 0.0), Ok(0.0));
        assert!(matches!(log_gamma(2.0, 25.0, 0.01), Ok(g) if g < -0.15));
    }
}
