//! Molar masses in g/mol, and the ratios of masses that follow from them.
//!
//! Source: IUPAC standard atomic weights 2021 (conventional values); everything else here is arithmetic.

/// Hydrogen.
pub const H: f64 = 1.008;
/// Carbon.
pub const C: f64 = 12.011;
/// Nitrogen.
pub const N: f64 = 14.007;
/// Oxygen (the atom).
pub const O: f64 = 15.999;
/// Sodium.
pub const NA: f64 = 22.990;
/// Magnesium.
pub const MG: f64 = 24.305;
/// Phosphorus.
pub const P: f64 = 30.974;
/// Sulfur.
pub const S: f64 = 32.06;
/// Chlorine (the atom).
pub const CL: f64 = 35.45;
/// Potassium.
pub const K: f64 = 39.098;
/// Calcium.
pub const CA: f64 = 40.078;

/// Water.
pub const H2O: f64 = 2.0 * H + O;
/// Carbon dioxide.
pub const CO2: f64 = C + 2.0 * O;
/// Oxygen gas.
pub const O2: f64 = 2.0 * O;
/// Calcium carbonate.
pub const CACO3: f64 = CA + C + 3.0 * O;
/// Bicarbonate ion.
pub const HCO3: f64 = H + C + 3.0 * O;

/// Grams of ammonia (NH3) that hold one gram of nitrogen.
pub const NH3_PER_N: f64 = (N + 3.0 * H) / N;
/// Grams of ammonium (NH4) that hold one gram of nitrogen.
pub const NH4_PER_N: f64 = (N + 4.0 * H) / N;
/// Grams of nitrite ion (NO2) that hold one gram of nitrogen.
pub const NO2_PER_N: f64 = (N + 2.0 * O) / N;
/// Grams of nitrate ion (NO3) that hold one gram of nitrogen.
pub const NO3_PER_N: f64 = (N + 3.0 * O) / N;
/// Grams of phosphate ion (PO4) that hold one gram of phosphorus.
pub const PO4_PER_P: f64 = (P + 4.0 * O) / P;
/// Grams of hydrogen sulfide (H2S) that hold one gram of sulfur.
pub const H2S_PER_S: f64 = (2.0 * H + S) / S;

/// Milligrams of calcium carbonate in one milliequivalent of alkalinity or hardness.
pub const CACO3_PER_MEQ: f64 = CACO3 / 2.0;
/// mg/L as CaCO3 in one German degree, of carbonate (dKH) or general (dGH) hardness: 10 mg/L of calcium oxide.
pub const CACO3_PER_DEGREE: f64 = 10.0 * CACO3 / (CA + O);
/// Milliequivalents per liter in one German degree.
pub const MEQ_PER_DEGREE: f64 = CACO3_PER_DEGREE / CACO3_PER_MEQ;
/// Grams of bicarbonate ion with the alkalinity of one gram of calcium carbonate.
pub const HCO3_PER_CACO3: f64 = 2.0 * HCO3 / CACO3;
