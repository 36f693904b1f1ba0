//! The pH of two waters mixed: alkalinity and carbon mix, pH does not.

use super::sample::Sample;
use super::state;
use crate::water::range::{OutOfRange, Range};

/// Share of the second water.
pub const FRACTION: Range = Range::new("fraction_b", 0.0, 1.0, "");

/// Two waters as one, before any gas is exchanged; `fraction_b` (0-1) of it is `b`.
///
/// # Errors
/// [`OutOfRange`].
pub fn mix(a: &Sample, b: &Sample, fraction_b: f64) -> Result<Sample, OutOfRange> {
    let share = FRACTION.check(fraction_b)?;
    let blend = |a: f64, b: f64| a + share * (b - a);
    let carbon = blend(a.carbon()?, b.carbon()?);
    let mixed = Sample {
        temperature: blend(a.temperature, b.temperature),
        ph: 7.0,
        alkalinity: blend(a.alkalinity, b.alkalinity),
        ionic_strength: blend(a.ionic_strength, b.ionic_strength),
        phosphorus: blend(a.phosphorus, b.phosphorus),
    };
    let (k, equivalents) = (mixed.constants()?, mixed.equivalents()?);
    let ph = state::ph(&k, equivalents, carbon, mixed.phosphorus_moles()?)?;
    Ok(Sample { ph, ..mixed })
}
