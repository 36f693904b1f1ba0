//! Water in balance with calcite (limestone, shell, coral sand): the pH it holds and can't be brought below for long.

use super::constants::Constants;
use super::gas::CO2_PPM;
use super::sample::{ALKALINITY, Sample};
use super::state::{self, CACO3_PER_EQ};
use crate::water::masses;
use crate::water::range::{OutOfRange, Range};
use crate::water::roots;

/// Pure water on calcite under air with this much carbon dioxide.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Equilibrium {
    /// The pH it comes to.
    pub ph: f64,
    /// The alkalinity it comes to, mg/L as CaCO3.
    pub alkalinity: f64,
    /// The calcium it comes to, mg/L.
    pub calcium: f64,
}

/// pH, alkalinity and calcium of pure water on calcite: temperature in C (0-60), `co2_ppm` in the air it is in balance with.
///
/// Source: constants of Plummer & Busenberg 1982 with the Davies equation; within 0.04 pH and 4 % in alkalinity of PHREEQC.
///
/// # Errors
/// [`OutOfRange`].
pub fn equilibrium(temperature: f64, co2_ppm: f64) -> Result<Equilibrium, OutOfRange> {
    let ppm = CO2_PPM.check(co2_ppm)?;
    let mut ions = 0.0;
    let mut found = at_ionic_strength(&Constants::at(temperature, ions)?, ppm);
    // Ionic strength and solubility feed each other; each round is ten times nearer than the last.
    for _ in 0..20 {
        let [ph, hco3, co3, ca] = found;
        ions = 0.5 * (4.0 * ca + hco3 + 4.0 * co3 + 2.0 * 10f64.powf(-ph));
        found = at_ionic_strength(&Constants::at(temperature, ions)?, ppm);
    }
    let [ph, hco3, co3, ca] = found;
    Ok(Equilibrium {
        ph: state::PH_AFTER.check(ph)?,
        alkalinity: (hco3 + 2.0 * co3) * CACO3_PER_EQ,
        calcium: 1000.0 * masses::CA * ca,
    })
}

/// pH, and bicarbonate, carbonate and calcium in mol/L, where charges balance.
fn at_ionic_strength(k: &Constants, ppm: f64) -> [f64; 4] {
    let species = |ph: f64| {
        let h = 10f64.powf(-ph);
        let co2 = k.kh * ppm * 1e-6;
        let hco3 = co2 * k.k1 / h;
        let co3 = hco3 * k.k2 / h;
        [ph, hco3, co3, k.calcite / co3]
    };
    let ph = roots::of_rising(3.0, 11.0, |ph| {
        let [_, hco3, co3, ca] = species(ph);
        hco3 + 2.0 * co3 + state::other_alkalinity(k, ph, 0.0) - 2.0 * ca
    });
    species(ph)
}

/// How far a water is from balance with calcite (log10 of saturation): below zero it dissolves shell and limestone, above
/// zero it lays down scale. Calcium in mg/L.
///
/// Source: the saturation index of Langelier 1936 with the constants of Plummer & Busenberg 1982. Pairs of calcium with
/// bicarbonate are left out: PHREEQC comes out lower by 0.04 in hard water.
///
/// # Errors
/// [`OutOfRange`].
pub fn saturation_index(sample: &Sample, calcium: f64) -> Result<f64, OutOfRange> {
    const CALCIUM: Range = Range::positive("calcium", "mg/L");
    let ca = CALCIUM.check(calcium)? / (1000.0 * masses::CA);
    Range::positive("alkalinity", "mg/L as CaCO3").check(sample.alkalinity)?;
    let k = sample.constants()?;
    let [_, _, share] = state::carbon_shares(&k, sample.ph);
    Ok((ca * sample.carbon()? * share / k.calcite).log10())
}

/// The least ionic strength (mol/L) that water of this alkalinity (mg/L as CaCO3) and calcium (mg/L) can have: what one
/// has more of than the other is balanced by an ion of one charge.
///
/// # Errors
/// [`OutOfRange`].
pub fn least_ionic_strength(alkalinity: f64, calcium: f64) -> Result<f64, OutOfRange> {
    const CALCIUM: Range = Range::not_negative("calcium", "mg/L");
    let ca = CALCIUM.check(calcium)? / (1000.0 * masses::CA);
    let bicarbonate = ALKALINITY.check(alkalinity)? / CACO3_PER_EQ;
    Ok(0.5 * (4.0 * ca + bicarbonate + (2.0 * ca - bicarbonate).abs()))
}
