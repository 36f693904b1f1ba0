//! The water at one moment as the projection counts it, and what follows from it by equilibrium.

use crate::water::carbonate::constants::Constants;
use crate::water::carbonate::state::{self, CACO3_PER_EQ};
use crate::water::masses;
use crate::water::{ammonia, oxygen};

/// How many numbers a state has.
pub const SIZE: usize = 16;

/// One water: indices of [`Part`] in here.
pub type State = [f64; SIZE];

/// What each number of a state is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[repr(usize)]
pub enum Part {
    /// C.
    Temperature,
    /// Total ammonia, mg/L as N.
    Ammonia,
    /// mg/L as N.
    Nitrite,
    /// mg/L as N.
    Nitrate,
    /// mg/L as CaCO3.
    Alkalinity,
    /// Inorganic carbon, mmol/L.
    Carbon,
    /// mg/L.
    Oxygen,
    /// mg/L.
    Chloride,
    /// mg/L.
    Sodium,
    /// What ammonia oxidizers could turn over at 20 C with nothing short, mg N/L/day.
    AmmoniaOxidizers,
    /// What nitrite oxidizers could, mg N/L/day.
    NitriteOxidizers,
    /// Nitrogen eaten and not yet given off, mg/L as N.
    Gut,
    /// The pH that the bacteria are used to.
    UsedToPh,
    /// Nitrogen that came in since the start (feed, the fish's own), mg/L.
    NitrogenIn,
    /// Nitrogen that left (plants, denitrification), mg/L.
    NitrogenOut,
    /// Inorganic carbon that came from breath and air, less what left, mmol/L.
    CarbonIn,
}

impl Part {
    /// This number of a state.
    pub fn of(self, state: &State) -> f64 {
        state.get(self as usize).copied().unwrap_or(f64::NAN)
    }

    /// Sets it.
    pub fn set(self, state: &mut State, value: f64) {
        if let Some(slot) = state.get_mut(self as usize) {
            *slot = value;
        }
    }

    /// Adds to it.
    pub fn add(self, state: &mut State, value: f64) {
        if let Some(slot) = state.get_mut(self as usize) {
            *slot += value;
        }
    }
}

/// Equilibrium constants at one temperature; good for as long as it moves little.
#[derive(Debug, Clone, Copy)]
pub struct Chemistry {
    /// The temperature they are for, C.
    pub temperature: f64,
    /// Carbonate.
    pub carbonate: Constants,
    /// pKa of ammonium.
    pub ammonium: f64,
    /// Oxygen at saturation, mg/L.
    pub saturation: f64,
    /// Nitrous acid: mg/L as HNO2 for a mg/L of nitrite-N at pH 0 (Anthonisen et al. 1976).
    pub nitrous: f64,
}

/// Temperatures that all the formulas hold for.
pub const TEMPERATURES: (f64, f64) = (0.0, 40.0);

impl Chemistry {
    /// At a temperature (held to 0-40 C), ionic strength (mol/L), salinity (g/L) and pressure (kPa).
    pub fn at(temperature: f64, ionic: f64, salinity: f64, pressure: f64) -> Option<Self> {
        let t = temperature.clamp(TEMPERATURES.0, TEMPERATURES.1);
        Some(Self {
            temperature: t,
            carbonate: Constants::at(t, ionic.clamp(0.0, 0.1)).ok()?,
            ammonium: ammonia::pka_in_salt(t, salinity.clamp(0.0, 35.0)).ok()?,
            saturation: oxygen::solubility(t, salinity.clamp(0.0, 40.0), pressure).ok()?,
            nitrous: 46.0 / 14.0 / (-2300.0 / (273.0 + t)).exp(),
        })
    }

    /// pH of this much alkalinity (mg/L as CaCO3), carbon (mmol/L) and phosphorus (mol/L), from a guess: Newton's method,
    /// halving where that does not settle. Held to 3-11.
    pub fn ph(&self, alkalinity: f64, carbon: f64, phosphorus: f64, guess: f64) -> f64 {
        let wanted = alkalinity / CACO3_PER_EQ;
        let carbon = carbon.max(0.0) / 1000.0;
        let mut ph = guess.clamp(3.0, 11.0);
        for _ in 0..12 {
            let off = wanted - state::alkalinity(&self.carbonate, ph, carbon, phosphorus);
            let slope = state::buffer_intensity(&self.carbonate, ph, carbon, phosphorus);
            let change = (off / slope).clamp(-0.8, 0.8);
            if !change.is_finite() {
                break;
            }
            ph = (ph + change).clamp(2.5, 11.5);
            if change.abs() < 1e-7 {
                return ph.clamp(3.0, 11.0);
            }
        }
        state::ph(&self.carbonate, wanted, carbon, phosphorus).unwrap_or(if wanted > 0.0 {
            11.0
        } else {
            3.0
        })
    }

    /// Carbon (mmol/L) of this pH and alkalinity (mg/L as CaCO3); 0 where the two can't go together.
    pub fn carbon(&self, ph: f64, alkalinity: f64, phosphorus: f64) -> f64 {
        let eq = alkalinity / CACO3_PER_EQ;
        state::carbon(&self.carbonate, ph, eq, phosphorus).map_or(0.0, |c| 1000.0 * c)
    }

    /// Carbon dioxide (mmol/L) in this much carbon (mmol/L).
    pub fn carbon_dioxide(&self, ph: f64, carbon: f64) -> f64 {
        let [share, ..] = state::carbon_shares(&self.carbonate, ph);
        carbon * share
    }

    /// Un-ionized ammonia (mg/L as N) in this much total ammonia.
    pub fn un_ionized(&self, ph: f64, total: f64) -> f64 {
        total / (1.0 + 10f64.powf(self.ammonium - ph))
    }

    /// Free nitrous acid (mg/L as HNO2).
    pub fn nitrous_acid(&self, ph: f64, nitrite: f64) -> f64 {
        self.nitrous * nitrite * 10f64.powf(-ph)
    }
}

/// mg/L of carbon dioxide in a mmol/L.
pub const MG_PER_MMOL_CO2: f64 = masses::CO2;

#[cfg(test)]
mod tests {
    use super::*;
    use crate::water::anthonisen;
    use crate::water::carbonate::Sample;

    #[test]
    fn ph_there_and_back() {
        let chem = Chemistry::at(22.0, 0.004, 0.0, 101.325);
        for ph in [5.2, 6.4, 7.0, 8.3, 9.4] {
            let back = chem.map(|c| c.ph(60.0, c.carbon(ph, 60.0, 0.0), 0.0, 7.0));
            assert!(
                back.is_some_and(|b| (b - ph).abs() < 1e-6),
                "{ph}: {back:?}"
            );
        }
    }

    #[test]
    fn the_water_room_says_the_same() {
        let chem = Chemistry::at(25.0, 0.0012, 0.0, 101.325);
        let sample = Sample::new(25.0, 6.4, 60.0).with_ionic_strength(0.0012);
        let theirs = sample.carbon_dioxide();
        let ours = chem.map(|c| MG_PER_MMOL_CO2 * c.carbon_dioxide(6.4, c.carbon(6.4, 60.0, 0.0)));
        assert!(matches!((theirs, ours), (Ok(a), Some(b)) if (a - b).abs() < 1e-9 * a));
        let acid = anthonisen::free_nitrous_acid(5.0, 6.0, 25.0);
        let ours = chem.map(|c| c.nitrous_acid(6.0, 5.0));
        assert!(matches!((acid, ours), (Ok(a), Some(b)) if (a - b).abs() < 1e-9));
    }
}
