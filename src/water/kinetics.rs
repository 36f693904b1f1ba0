//! How fast nitrifiers grow, and how warmth moves a rate.

use super::activity::ZERO_CELSIUS;
use super::range::{OutOfRange, Range};

/// Water temperatures of the growth rates.
pub const TEMPERATURE: Range = Range::new("temperature", 0.0, 40.0, "C");
/// Growth rate.
pub const GROWTH_RATE: Range = Range::positive("growth_rate_per_day", "1/day");

/// Gas constant, kJ/mol/K.
const GAS_CONSTANT: f64 = 8.314_462_618e-3;

/// One of the two groups of nitrifiers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Step {
    /// Ammonia to nitrite.
    Ammonia,
    /// Nitrite to nitrate.
    Nitrite,
}

/// Growth of one group: largest rate (1/day at 20 C), its theta, half-saturations (mg/L), decay (1/day at 20 C), its theta.
struct Growth {
    largest: f64,
    theta: f64,
    half_nitrogen: f64,
    half_oxygen: f64,
    decay: f64,
    decay_theta: f64,
}

impl Step {
    /// Source: Metcalf & Eddy 2014, Wastewater Engineering, 5th ed., Table 8-14 (from memory). Other sets put the largest
    /// rate at 0.3-1.2, and the half-saturation in oxygen at 0.2-1.3 (ammonia) and 0.5-2 (nitrite).
    const fn growth(self) -> Growth {
        match self {
            Self::Ammonia => Growth {
                largest: 0.90,
                theta: 1.072,
                half_nitrogen: 0.50,
                half_oxygen: 0.50,
                decay: 0.17,
                decay_theta: 1.029,
            },
            Self::Nitrite => Growth {
                largest: 1.0,
                theta: 1.063,
                half_nitrogen: 0.20,
                half_oxygen: 0.90,
                decay: 0.17,
                decay_theta: 1.029,
            },
        }
    }
}

/// Growth less decay (1/day) of one group of nitrifiers; below zero it dies back.
///
/// Temperature in C (0-40), dissolved oxygen in mg/L, its nitrogen (total ammonia or nitrite) in mg/L as N.
///
/// # Errors
/// [`OutOfRange`].
pub fn growth_rate(
    step: Step,
    temperature: f64,
    dissolved_oxygen: f64,
    nitrogen: f64,
) -> Result<f64, OutOfRange> {
    let warmer = TEMPERATURE.check(temperature)? - 20.0;
    let oxygen = Range::not_negative("dissolved_oxygen", "mg/L").check(dissolved_oxygen)?;
    let nitrogen = Range::not_negative("nitrogen", "mg/L as N").check(nitrogen)?;
    let g = step.growth();
    let growth = g.largest
        * g.theta.powf(warmer)
        * (nitrogen / (g.half_nitrogen + nitrogen))
        * (oxygen / (g.half_oxygen + oxygen));
    Ok(growth - g.decay * g.decay_theta.powf(warmer))
}

/// Hours to double at a growth rate (1/day).
///
/// # Errors
/// [`OutOfRange`].
pub fn doubling_hours(growth_rate_per_day: f64) -> Result<f64, OutOfRange> {
    Ok(24.0 * std::f64::consts::LN_2 / GROWTH_RATE.check(growth_rate_per_day)?)
}

/// What a rate at 20 C becomes at another temperature (C, 0-40): rate x theta^(t - 20).
///
/// # Errors
/// [`OutOfRange`].
pub fn rate_at(rate_at_20: f64, theta: f64, temperature: f64) -> Result<f64, OutOfRange> {
    const RATE: Range = Range::not_negative("rate_at_20", "");
    const THETA: Range = Range::new("theta", 0.5, 2.0, "1/C");
    Ok(RATE.check(rate_at_20)?
        * THETA
            .check(theta)?
            .powf(TEMPERATURE.check(temperature)? - 20.0))
}

/// Two temperatures, the first below the second.
fn rising(low: f64, high: f64) -> Result<(f64, f64), OutOfRange> {
    let low = TEMPERATURE.named("temperature_low").check(low)?;
    let above = Range {
        low,
        above: true,
        ..TEMPERATURE.named("temperature_high")
    };
    Ok((low, above.check(high)?))
}

/// Theta from the rate at a low temperature as a share of the rate at a higher one (both C, 0-40).
///
/// # Errors
/// [`OutOfRange`].
pub fn theta(rate_ratio: f64, low: f64, high: f64) -> Result<f64, OutOfRange> {
    let (low, high) = rising(low, high)?;
    let ratio = Range::positive("rate_ratio", "").check(rate_ratio)?;
    Ok(ratio.powf(-1.0 / (high - low)))
}

/// How many times faster a rate is at a higher temperature (both C, 0-40), by its activation energy (kJ/mol).
///
/// Vannecke & Volcke 2015 use 68 for ammonia oxidizers and 44 for nitrite oxidizers.
///
/// # Errors
/// [`OutOfRange`].
pub fn arrhenius_ratio(activation: f64, low: f64, high: f64) -> Result<f64, OutOfRange> {
    const ENERGY: Range = Range::new("activation_kj_per_mol", 0.0, 500.0, "kJ/mol");
    let (low, high) = rising(low, high)?;
    let (cold, warm) = (low + ZERO_CELSIUS, high + ZERO_CELSIUS);
    Ok((ENERGY.check(activation)? / GAS_CONSTANT * (1.0 / cold - 1.0 / warm)).exp())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn low_oxygen_holds_nitrite_oxidizers_back_more() {
        let slowed = |step| {
            let (low, high) = (
                growth_rate(step, 25.0, 1.0, 1.0),
                growth_rate(step, 25.0, 7.0, 1.0),
            );
            low.and_then(|low| high.map(|high| low / high))
        };
        let (ammonia, nitrite) = (slowed(Step::Ammonia), slowed(Step::Nitrite));
        assert!(matches!((ammonia, nitrite), (Ok(a), Ok(n)) if n < a));
    }

    #[test]
    fn with_nothing_to_eat_they_die_back() {
        assert!(matches!(growth_rate(Step::Nitrite, 20.0, 7.0, 0.0), Ok(r) if r == -0.17));
    }
}
