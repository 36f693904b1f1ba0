//! What nitrification takes and makes for each gram of nitrogen.
//!
//! The sources differ by 9 % in oxygen and 2 % in alkalinity. Use [`OXYGEN_FOR_AERATION`] to size air (the safe side) and
//! [`ALKALINITY_WITH_CELLS`] for alkalinity.

use super::masses::{C, CACO3_PER_MEQ, H, N, O, O2};

/// How the nitrogen is counted: what the energy reaction alone takes, or what is left once cells have grown.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Basis {
    /// NH4 + 2 O2 -> NO3 + 2 H + H2O; arithmetic.
    Energy,
    /// Its first step, to nitrite.
    EnergyFirstStep,
    /// Its second step, nitrite to nitrate.
    EnergySecondStep,
    /// Measured first step with cells: Gujer & Jenkins 1974.
    NetFirstStep,
    /// Measured second step with cells: Gujer & Jenkins 1974.
    NetSecondStep,
    /// Both steps with cells: Gujer & Jenkins 1974.
    NetBothSteps,
    /// NH4 + 1.83 O2 + 1.97 HCO3 -> 0.0244 C5H7O2N + 0.976 NO3 + 2.90 H2O + 1.86 CO2: Ebeling, Timmons & Bisogni 2006,
    /// Aquaculture 257:346 (coefficients from memory).
    WithCells,
}

/// g O2 per g N, energy reaction: for sizing aeration. Source: EPA 1975; arithmetic.
pub const OXYGEN_FOR_AERATION: f64 = 2.0 * O2 / N;

/// g CaCO3 per g N, as Ebeling et al. 2006 print it (from memory; their coefficients give 7.04; EPA manuals 7.1-7.2).
pub const ALKALINITY_WITH_CELLS: f64 = 7.05;

/// g CO2 per g N in the bicarbonate form. Source: Ebeling et al. 2006 (from memory).
pub const CARBON_DIOXIDE: f64 = 5.85;

/// g CaCO3 that denitrification gives back per g of nitrate-N: one equivalent a mole.
/// Plants that take nitrate give back about the same (from memory).
pub const DENITRIFICATION_ALKALINITY: f64 = CACO3_PER_MEQ / N;

/// A cell, C5H7O2N.
const CELLS: f64 = 5.0 * C + 7.0 * H + 2.0 * O + N;

/// Oxygen taken, g per g N.
pub fn oxygen(basis: Basis) -> f64 {
    match basis {
        Basis::Energy => OXYGEN_FOR_AERATION,
        Basis::EnergyFirstStep => 1.5 * O2 / N,
        Basis::EnergySecondStep => 0.5 * O2 / N,
        Basis::NetFirstStep => 3.22,
        Basis::NetSecondStep => 1.11,
        Basis::NetBothSteps => 4.33,
        Basis::WithCells => 1.83 * O2 / N,
    }
}

/// Alkalinity taken, g CaCO3 per g N. The first step makes all the acid.
pub fn alkalinity(basis: Basis) -> f64 {
    match basis {
        Basis::Energy | Basis::EnergyFirstStep => 2.0 * CACO3_PER_MEQ / N,
        Basis::EnergySecondStep | Basis::NetSecondStep => 0.0,
        // Gujer & Jenkins 1974 (from memory).
        Basis::NetFirstStep | Basis::NetBothSteps => 7.1,
        Basis::WithCells => ALKALINITY_WITH_CELLS,
    }
}

/// Cells grown, g of volatile solids per g N; none is counted in the energy reactions.
pub fn cells(basis: Basis) -> f64 {
    match basis {
        Basis::Energy | Basis::EnergyFirstStep | Basis::EnergySecondStep => 0.0,
        // Gujer & Jenkins 1974 give 0.17 for both steps; the split follows the yields of 0.15 and 0.05 of Metcalf & Eddy.
        Basis::NetFirstStep => 0.17 * 0.75,
        Basis::NetSecondStep => 0.17 * 0.25,
        Basis::NetBothSteps => 0.17,
        Basis::WithCells => 0.0244 * CELLS / N,
    }
}
