//! Constants of the carbonate system by temperature, and their correction for ionic strength.
//!
//! Source of pK1, pK2, KH and calcite: Plummer & Busenberg 1982, Geochim. Cosmochim. Acta 46:1011 (0-90 C), as
//! PHREEQC's database has them (pKH from memory, within 0.001 of that database). pKw: Harned & Hamer 1933 (from memory).

use crate::water::activity::{self, TEMPERATURE, ZERO_CELSIUS};
use crate::water::range::OutOfRange;

/// First and second pK of carbonic acid, Henry's constant and calcite share this form:
/// a + b T + c/T + d log10 T + e/T^2, with T in kelvin.
fn plummer_busenberg(kelvin: f64, [a, b, c, d, e]: [f64; 5]) -> f64 {
    a + b * kelvin + c / kelvin + d * kelvin.log10() + e / kelvin.powi(2)
}

fn kelvin(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(TEMPERATURE.check(temperature)? + ZERO_CELSIUS)
}

/// pK1 of carbonic acid (CO2 and H2CO3 together) at zero ionic strength; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn pk1(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(plummer_busenberg(
        kelvin(temperature)?,
        [356.3094, 0.060_919_64, -21_834.37, -126.8339, 1_684_915.0],
    ))
}

/// pK2 of carbonic acid at zero ionic strength; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn pk2(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(plummer_busenberg(
        kelvin(temperature)?,
        [107.8871, 0.032_528_49, -5151.79, -38.925_61, 563_713.9],
    ))
}

/// -log10 of Henry's constant of carbon dioxide in mol/kg/atm; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn pkh(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(-plummer_busenberg(
        kelvin(temperature)?,
        [108.3865, 0.019_850_76, -6919.53, -40.451_54, 669_365.0],
    ))
}

/// -log10 of the solubility product of calcite; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn pks_calcite(temperature: f64) -> Result<f64, OutOfRange> {
    Ok(-plummer_busenberg(
        kelvin(temperature)?,
        [-171.9065, -0.077_993, 2839.319, 71.595, 0.0],
    ))
}

/// pK of water; temperature in C (0-60).
///
/// # Errors
/// [`OutOfRange`].
pub fn pkw(temperature: f64) -> Result<f64, OutOfRange> {
    let t = kelvin(temperature)?;
    Ok(4471.0 / t + 0.017_06 * t - 6.0875)
}

/// The pKs of phosphoric acid at 25 C and zero ionic strength; they move by less than 0.1 from 5 to 35 C.
/// Source: Fromm, ionization constants of polyprotic acids.
pub const PHOSPHORIC: [f64; 3] = [2.148, 7.206, 12.342];

/// All constants of one water, ready for use: hydrogen ion as activity, everything else as concentration.
#[derive(Debug, Clone, Copy)]
pub struct Constants {
    /// First dissociation of carbonic acid.
    pub k1: f64,
    /// Second dissociation of carbonic acid.
    pub k2: f64,
    /// Henry's constant, mol/L/atm.
    pub kh: f64,
    /// Ion product of water, both as activities.
    pub kw: f64,
    /// Dissociations of phosphoric acid.
    pub phosphoric: [f64; 3],
    /// Solubility product of calcite.
    pub calcite: f64,
    /// Activity coefficient of an ion with one charge.
    pub gamma: f64,
}

impl Constants {
    /// Of water at a temperature in C (0-60) and an ionic strength in mol/L (0-0.1), by the Davies equation: within
    /// 0.3 % of PHREEQC in carbon dioxide to 0.004 mol/L, 1.4 % at 0.036, 4 % at 0.09.
    ///
    /// # Errors
    /// [`OutOfRange`].
    pub fn at(temperature: f64, ionic_strength: f64) -> Result<Self, OutOfRange> {
        let one = activity::log_gamma(1.0, temperature, ionic_strength)?;
        // Davies goes with the square of the charge.
        let (two, three) = (4.0 * one, 9.0 * one);
        let k = |pk: f64| 10f64.powf(-pk);
        let [p1, p2, p3] = PHOSPHORIC;
        Ok(Self {
            k1: k(pk1(temperature)? + one),
            k2: k(pk2(temperature)? + two - one),
            kh: k(pkh(temperature)?),
            kw: k(pkw(temperature)?),
            phosphoric: [k(p1 + one), k(p2 + two - one), k(p3 + three - two)],
            calcite: k(pks_calcite(temperature)? + 2.0 * two),
            gamma: 10f64.powf(one),
        })
    }
}
