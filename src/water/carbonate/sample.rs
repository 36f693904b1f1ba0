//! A water as a farm measures it, and what that says of its carbon.

use super::constants::{Constants, pk1};
use super::state::{self, CACO3_PER_EQ, PH};
use crate::water::masses;
use crate::water::range::{OutOfRange, Range};

/// Total alkalinity; beyond it the ionic strength leaves the Davies equation.
pub const ALKALINITY: Range = Range::new("alkalinity", 0.0, 2000.0, "mg/L as CaCO3");
/// Dissolved phosphorus.
pub const PHOSPHORUS: Range = Range::new("phosphorus", 0.0, 1000.0, "mg/L as P");

/// One water: what a probe and a kit say.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sample {
    /// Water temperature, C (0-60).
    pub temperature: f64,
    /// pH (3-11).
    pub ph: f64,
    /// Total alkalinity, mg/L as CaCO3 (0-2000).
    pub alkalinity: f64,
    /// Ionic strength, mol/L (0-0.1).
    pub ionic_strength: f64,
    /// Dissolved phosphorus, mg/L as P: part of a titrated alkalinity.
    pub phosphorus: f64,
}

impl Sample {
    /// A water of which no more is known: its ions are those of its alkalinity, the least there can be.
    pub fn new(temperature: f64, ph: f64, alkalinity: f64) -> Self {
        Self {
            temperature,
            ph,
            alkalinity,
            ionic_strength: (alkalinity / CACO3_PER_EQ).max(0.0),
            phosphorus: 0.0,
        }
    }

    /// The same water at another ionic strength (mol/L).
    #[must_use]
    pub fn with_ionic_strength(self, ionic_strength: f64) -> Self {
        Self {
            ionic_strength,
            ..self
        }
    }

    /// The same water with this much phosphorus (mg/L).
    #[must_use]
    pub fn with_phosphorus(self, phosphorus: f64) -> Self {
        Self { phosphorus, ..self }
    }

    /// Its constants.
    ///
    /// # Errors
    /// [`OutOfRange`].
    pub fn constants(&self) -> Result<Constants, OutOfRange> {
        Constants::at(self.temperature, self.ionic_strength)
    }

    /// Its alkalinity in eq/L.
    ///
    /// # Errors
    /// [`OutOfRange`].
    pub fn equivalents(&self) -> Result<f64, OutOfRange> {
        Ok(ALKALINITY.check(self.alkalinity)? / CACO3_PER_EQ)
    }

    /// Its phosphorus in mol/L.
    ///
    /// # Errors
    /// [`OutOfRange`].
    pub fn phosphorus_moles(&self) -> Result<f64, OutOfRange> {
        Ok(PHOSPHORUS.check(self.phosphorus)? / (1000.0 * masses::P))
    }

    /// Its inorganic carbon: carbon dioxide, bicarbonate and carbonate together, mol/L.
    ///
    /// # Errors
    /// [`OutOfRange`], also when its pH and alkalinity can't go together.
    pub fn carbon(&self) -> Result<f64, OutOfRange> {
        let (alkalinity, phosphorus) = (self.equivalents()?, self.phosphorus_moles()?);
        state::carbon(&self.constants()?, self.ph, alkalinity, phosphorus)
    }

    /// Its carbon dioxide, mg/L.
    ///
    /// # Errors
    /// As [`Sample::carbon`].
    pub fn carbon_dioxide(&self) -> Result<f64, OutOfRange> {
        let carbon = self.carbon()?;
        let [share, ..] = state::carbon_shares(&self.constants()?, self.ph);
        Ok(1000.0 * masses::CO2 * carbon * share)
    }

    /// Its buffer intensity, meq/L per pH, with no gas exchange.
    ///
    /// # Errors
    /// As [`Sample::carbon`].
    pub fn buffer_intensity(&self) -> Result<f64, OutOfRange> {
        let (k, carbon, phosphorus) = (self.constants()?, self.carbon()?, self.phosphorus_moles()?);
        Ok(1000.0 * state::buffer_intensity(&k, self.ph, carbon, phosphorus))
    }
}

/// pH of water of this temperature (C, 0-60), alkalinity (mg/L as CaCO3) and inorganic carbon (mmol/L).
///
/// # Errors
/// [`OutOfRange`].
pub fn ph_from_carbon(
    temperature: f64,
    alkalinity: f64,
    inorganic_carbon: f64,
    ionic_strength: f64,
) -> Result<f64, OutOfRange> {
    const CARBON: Range = Range::not_negative("inorganic_carbon", "mmol/L");
    let k = Constants::at(temperature, ionic_strength)?;
    let equivalents = ALKALINITY.check(alkalinity)? / CACO3_PER_EQ;
    state::ph(
        &k,
        equivalents,
        CARBON.check(inorganic_carbon)? / 1000.0,
        0.0,
    )
}

/// mg/L of carbon dioxide for each mg/L of alkalinity as CaCO3, with no salts and no carbonate: the factor that printed
/// tables give. Temperature in C (0-60), pH (3-11; meant for pH below 8).
///
/// # Errors
/// [`OutOfRange`].
pub fn carbon_dioxide_per_alkalinity(temperature: f64, ph: f64) -> Result<f64, OutOfRange> {
    let power = pk1(temperature)? - PH.check(ph)?;
    Ok(masses::CO2 / masses::CACO3_PER_MEQ * 10f64.powf(power))
}

/// Carbon dioxide (mg/L) by the rule 1.60 x 10^(6 - pH) x bicarbonate (mg/L of HCO3), near 25 C.
///
/// Source: Skougstad et al. 1979, USGS TWRI 5-A1 p. 280; 1 % below the formula above at 25 C.
///
/// # Errors
/// [`OutOfRange`].
pub fn carbon_dioxide_rule(ph: f64, bicarbonate: f64) -> Result<f64, OutOfRange> {
    const BICARBONATE: Range = Range::not_negative("bicarbonate", "mg/L");
    Ok(1.60 * 10f64.powf(6.0 - PH.check(ph)?) * BICARBONATE.check(bicarbonate)?)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ph_and_alkalinity_that_cannot_go_together_are_refused() {
        let error = Sample::new(25.0, 10.5, 1.0).carbon();
        assert!(matches!(error, Err(e) if e.range.quantity == "alkalinity" && e.range.low > 10.0));
    }

    #[test]
    fn phosphate_takes_its_part_of_the_alkalinity() {
        let bare = Sample::new(22.0, 6.4, 40.0).carbon_dioxide();
        let with = Sample::new(22.0, 6.4, 40.0)
            .with_phosphorus(10.0)
            .carbon_dioxide();
        assert!(matches!((bare, with), (Ok(b), Ok(w)) if (0.90..0.97).contains(&(w / b))));
    }
}
