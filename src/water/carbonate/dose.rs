//! What a base or an acid does to the pH: at once, before any gas moves, and later, when carbon dioxide has settled.
//!
//! Plan on the later pH and dose on the first: hours lie between them.

use super::constants::Constants;
use super::gas;
use super::sample::Sample;
use super::state::{self, PH_AFTER};
use super::substance::Substance;
use crate::water::activity::IONIC_STRENGTH;
use crate::water::range::{OutOfRange, Range};
use crate::water::roots;

/// Pure substance in the water.
pub const DOSE: Range = Range::not_negative("dose_mg_per_l", "mg/L");

/// The most that the search for a dose tries, mol/L: far past anything a farm would do.
const SEARCH_END: f64 = 0.1;

/// A water with a dose in it: eq/L of alkalinity, mol/L of carbon and phosphorus, and its constants.
struct Dosed {
    constants: Constants,
    equivalents: f64,
    carbon: f64,
    phosphorus: f64,
}

/// What `moles` (mol/L) of a substance make of a water that had `carbon` (mol/L).
fn dosed(
    sample: &Sample,
    carbon: f64,
    substance: &Substance,
    moles: f64,
) -> Result<Dosed, OutOfRange> {
    let ions = sample.ionic_strength + substance.ions * moles;
    Ok(Dosed {
        constants: Constants::at(sample.temperature, IONIC_STRENGTH.check(ions)?)?,
        equivalents: sample.equivalents()? + substance.equivalents * moles,
        carbon: carbon + substance.carbon * moles,
        phosphorus: sample.phosphorus_moles()? + substance.phosphorus * moles,
    })
}

impl Dosed {
    fn ph_anywhere(&self) -> f64 {
        state::ph_anywhere(
            &self.constants,
            self.equivalents,
            self.carbon,
            self.phosphorus,
        )
    }
}

fn moles(substance: &Substance, dose_mg_per_l: f64) -> Result<f64, OutOfRange> {
    Ok(DOSE.check(dose_mg_per_l)? / (1000.0 * substance.molar_mass))
}

/// pH right after a dose (mg/L of the pure substance), before any gas is exchanged. Within 0.05 of PHREEQC.
///
/// # Errors
/// [`OutOfRange`], also when the dose drives pH out of 3-11.
pub fn ph_after_closed(
    sample: &Sample,
    substance: &Substance,
    dose_mg_per_l: f64,
) -> Result<f64, OutOfRange> {
    let after = dosed(
        sample,
        sample.carbon()?,
        substance,
        moles(substance, dose_mg_per_l)?,
    )?;
    PH_AFTER.check(after.ph_anywhere())
}

/// pH after a dose once carbon dioxide is back in balance with air (ppm): hours later, and the same for every base.
///
/// # Errors
/// [`OutOfRange`], also when the dose takes more alkalinity than there is.
pub fn ph_after_open(
    sample: &Sample,
    substance: &Substance,
    dose_mg_per_l: f64,
    co2_ppm: f64,
) -> Result<f64, OutOfRange> {
    let after = dosed(sample, 0.0, substance, moles(substance, dose_mg_per_l)?)?;
    let co2 = after.constants.kh * gas::CO2_PPM.check(co2_ppm)? * 1e-6;
    gas::ph_at_co2(&after.constants, after.equivalents, co2, after.phosphorus)
}

/// The dose (mg/L of the pure substance) that brings pH to a target before any gas is exchanged.
///
/// # Errors
/// [`OutOfRange`] of `target_ph` when the substance moves pH the other way or can't move it that far: bicarbonate never
/// lifts pH past about 8.3.
pub fn to_target_closed(
    sample: &Sample,
    substance: &Substance,
    target_ph: f64,
) -> Result<f64, OutOfRange> {
    let carbon = sample.carbon()?;
    let up = substance.is_base();
    // Rising with the dose, whichever way the pH goes.
    let beyond = |moles: f64| -> Result<f64, OutOfRange> {
        let ph = dosed(sample, carbon, substance, moles)?.ph_anywhere();
        Ok(if up { ph - target_ph } else { target_ph - ph })
    };
    let mut reach = 0.0;
    let mut enough = 1e-5;
    loop {
        match beyond(enough) {
            Ok(past) if past >= 0.0 => break,
            Ok(_) if enough < SEARCH_END => {
                reach = enough;
                enough *= 2.0;
            }
            _ => {
                return Err(unreachable_target(
                    sample, carbon, substance, target_ph, reach,
                ));
            }
        }
    }
    let from = dosed(sample, carbon, substance, 0.0)?.ph_anywhere();
    let wanted = Range::new("target_ph", PH_AFTER.low, PH_AFTER.high, "pH").check(target_ph)?;
    if (up && wanted < from) || (!up && wanted > from) {
        return Err(unreachable_target(
            sample, carbon, substance, target_ph, SEARCH_END,
        ));
    }
    let found = roots::of_rising(0.0, enough, |m| beyond(m).unwrap_or(f64::INFINITY));
    Ok(1000.0 * substance.molar_mass * found)
}

/// The target as out of the range that this substance can reach with a dose of up to `reach` mol/L.
fn unreachable_target(
    sample: &Sample,
    carbon: f64,
    substance: &Substance,
    target_ph: f64,
    reach: f64,
) -> OutOfRange {
    let farthest = (0..20)
        .map(|halvings| reach / f64::from(1 << halvings))
        .find_map(|moles| dosed(sample, carbon, substance, moles).ok())
        .map_or(sample.ph, |after| after.ph_anywhere())
        .clamp(PH_AFTER.low, PH_AFTER.high);
    let rounded = |ph: f64| (ph * 100.0).round() / 100.0;
    let (a, b) = (rounded(sample.ph), rounded(farthest));
    OutOfRange {
        value: target_ph,
        range: Range::new("target_ph", a.min(b), a.max(b), "with this chemical"),
    }
}

#[cfg(test)]
mod tests {
    use super::super::substance::substance;
    use super::*;

    fn dose_to(name: &str, target: f64) -> Option<Result<f64, OutOfRange>> {
        let soft = Sample::new(25.0, 6.5, 50.0);
        Some(to_target_closed(&soft, substance(name)?, target))
    }

    #[test]
    fn the_dose_brings_the_ph_it_was_asked_for() {
        let soft = Sample::new(25.0, 6.5, 50.0);
        for (name, target) in [("KOH", 7.4), ("NaHCO3", 7.0), ("HCl", 6.0), ("H3PO4", 5.5)] {
            let back = substance(name).map(|s| {
                to_target_closed(&soft, s, target).and_then(|dose| ph_after_closed(&soft, s, dose))
            });
            assert!(
                matches!(back, Some(Ok(ph)) if (ph - target).abs() < 1e-9),
                "{name}: {back:?}"
            );
        }
    }

    #[test]
    fn a_target_it_cannot_reach_is_refused_with_what_it_can() {
        for (name, target) in [
            ("NaHCO3", 9.0),
            ("KOH", 6.0),
            ("HCl", 7.0),
            ("KOH", f64::NAN),
        ] {
            let refused = dose_to(name, target);
            assert!(
                matches!(refused, Some(Err(e)) if e.range.quantity == "target_ph"),
                "{name} to {target}: {refused:?}"
            );
        }
    }
}
