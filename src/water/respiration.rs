//! Oxygen that fish use, and how long the water lasts them when the air stops.

use super::activity::ZERO_CELSIUS;
use super::masses::O2;
use super::range::{OutOfRange, Range};

/// Water temperatures of the fish that were measured.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 36.0, "C");
/// Body mass of one fish.
pub const FISH: Range = Range {
    low: 0.1,
    high: 20_000.0,
    ..Range::new("fish_g", 0.0, 0.0, "g")
};

/// A fish of no stated size, g: common practice for a grow-out tank.
pub const USUAL_FISH_G: f64 = 250.0;

/// Use of digesting fish as a multiple of rest. Fu et al. 2005 (southern catfish, 27.5 C) saw peaks of 208-379 mg/kg/h, rising
/// with the meal, from about 175; with it a 250-g fish at 25 C comes to the 300 mg/kg/h used in design (from memory).
const FED: f64 = 2.0;

/// Share of the body mass exponent that mass-specific use falls with: 0.80 - 1.
const MASS_EXPONENT: f64 = -0.20;
/// The body mass the fit is given for, g.
const FIT_MASS_G: f64 = 50.0;

/// Oxygen (mg) that a kg of fish uses in an hour: temperature in C (0-36), body mass in g (0.1-20000), fed within the day or not.
///
/// Source: Clarke & Johnston 1999, J. Anim. Ecol. 68:893, resting use of 69 bony fishes: ln R = 15.7 - 5020/T for 50 g, R in
/// mmol/h, mass exponent 0.80. One species may lie a factor of two off; within a species warmth bites harder (2.4 times
/// per 10 C, not 1.8).
///
/// # Errors
/// [`OutOfRange`].
pub fn oxygen_use(temperature: f64, fish_g: f64, fed: bool) -> Result<f64, OutOfRange> {
    let kelvin = TEMPERATURE.check(temperature)? + ZERO_CELSIUS;
    let mmol_per_hour = (15.7 - 5020.0 / kelvin).exp();
    let mg_per_kg = mmol_per_hour * O2 / (FIT_MASS_G / 1000.0);
    let size = (FISH.check(fish_g)? / FIT_MASS_G).powf(MASS_EXPONENT);
    Ok(mg_per_kg * size * if fed { FED } else { 1.0 })
}

/// Minutes until oxygen falls from one level (mg/L) to another with no air: biomass in kg, volume in L, use in mg/kg/h
/// ([`oxygen_use`]). Fish alone: bacteria of a loaded system may use as much again. Already below the limit is zero.
///
/// # Errors
/// [`OutOfRange`].
pub fn minutes_until(
    dissolved_oxygen: f64,
    limit: f64,
    biomass_kg: f64,
    volume_l: f64,
    oxygen_use: f64,
) -> Result<f64, OutOfRange> {
    let now = Range::not_negative("dissolved_oxygen", "mg/L").check(dissolved_oxygen)?;
    let limit = Range::not_negative("limit", "mg/L").check(limit)?;
    let biomass = Range::positive("biomass_kg", "kg").check(biomass_kg)?;
    let volume = Range::positive("volume_l", "L").check(volume_l)?;
    let rate = Range::positive("oxygen_use", "mg/kg/h").check(oxygen_use)?;
    Ok(60.0 * (now - limit).max(0.0) * volume / (biomass * rate))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_fed_grow_out_fish_uses_what_designers_count_with() {
        assert!(matches!(oxygen_use(25.0, 250.0, true), Ok(u) if (u - 300.0).abs() < 10.0));
    }

    #[test]
    fn twice_the_fish_last_half_as_long() {
        let (one, two) = (
            minutes_until(6.5, 2.5, 10.0, 1000.0, 300.0),
            minutes_until(6.5, 2.5, 20.0, 1000.0, 300.0),
        );
        assert_eq!((one, two), (Ok(80.0), Ok(40.0)));
        assert_eq!(minutes_until(2.0, 2.5, 10.0, 1000.0, 300.0), Ok(0.0));
    }
}
