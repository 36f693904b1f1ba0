//! Nitrite and chloride: enough chloride keeps nitrite out at the gills, and what salt that takes.

use super::masses::{CA, CL, H2O, K, MG, NA, NO2_PER_N};
use super::range::{OutOfRange, Range};

/// Share of chloride in sea salt by mass (Millero 2008 reference composition; from memory).
pub const CHLORIDE_IN_SEA_SALT: f64 = 0.55;

/// Nitrite.
pub const NITRITE: Range = Range::not_negative("nitrite", "mg/L as N");
/// Chloride.
pub const CHLORIDE: Range = Range::not_negative("chloride", "mg/L");
/// Chloride wanted for each nitrite ion.
pub const RATIO: Range = Range::new("ratio_cl_to_no2", 0.0, 100.0, "mg Cl per mg NO2");

/// A salt that brings chloride.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Salt {
    /// Its formula.
    pub name: &'static str,
    /// g/mol.
    pub molar_mass: f64,
    /// Chlorides in a mole.
    pub chlorides: f64,
    /// The cation's name.
    pub cation: &'static str,
    /// g/mol of the cation.
    pub cation_mass: f64,
}

impl Salt {
    /// g of chloride in a g of the salt.
    pub fn chloride(&self) -> f64 {
        self.chlorides * CL / self.molar_mass
    }

    /// mg/L of cation that comes with each mg/L of chloride, and stays: nothing removes it but water.
    pub fn cation_per_chloride(&self) -> f64 {
        self.cation_mass / (self.chlorides * CL)
    }
}

const fn salt(
    name: &'static str,
    (cation, cation_mass): (&'static str, f64),
    chlorides: f64,
    waters: f64,
) -> Salt {
    Salt {
        name,
        molar_mass: cation_mass + chlorides * CL + waters * H2O,
        chlorides,
        cation,
        cation_mass,
    }
}

/// Salts that bring chloride. With plants in the loop calcium or potassium is kinder than sodium.
pub static SALTS: &[Salt] = &[
    salt("NaCl", ("sodium", NA), 1.0, 0.0),
    salt("KCl", ("potassium", K), 1.0, 0.0),
    salt("CaCl2", ("calcium", CA), 2.0, 0.0),
    salt("CaCl2*2H2O", ("calcium", CA), 2.0, 2.0),
    salt("MgCl2*6H2O", ("magnesium", MG), 2.0, 6.0),
];

/// Their names.
pub static SALT_NAMES: &[&str] = &["NaCl", "KCl", "CaCl2", "CaCl2*2H2O", "MgCl2*6H2O"];
/// Their cations.
pub static CATIONS: &[&str] = &["sodium", "potassium", "calcium", "magnesium"];

/// The one cation of a salt, as a list.
pub fn cation_of(salt: &Salt) -> &'static [&'static str] {
    CATIONS
        .iter()
        .position(|c| *c == salt.cation)
        .and_then(|at| CATIONS.get(at..=at))
        .unwrap_or(&[])
}

/// The salt of this formula, spelled in any case, with `*`, `.` or `·` before the water.
pub fn salt_named(name: &str) -> Option<&'static Salt> {
    let plain = name.replace(['.', '·'], "*");
    SALTS.iter().find(|s| s.name.eq_ignore_ascii_case(&plain))
}

/// Whom the chloride is to protect.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Use {
    /// Channel catfish: 10 keeps nitrite out. Durborow, Crosby & Brunson 1997, SRAC 462.
    Catfish,
    /// Salmonids, and fish that are already ill: 20 (from memory).
    Sensitive,
    /// The older least figure: 6 (from memory).
    Least,
}

/// mg of chloride to have for each mg of nitrite ion (not nitrogen).
pub fn wanted_ratio(whom: Use) -> f64 {
    match whom {
        Use::Catfish => 10.0,
        Use::Sensitive => 20.0,
        Use::Least => 6.0,
    }
}

/// mg of chloride for each mg of nitrite ion in a water: chloride in mg/L, nitrite in mg/L as N.
///
/// # Errors
/// [`OutOfRange`]; also when there is no nitrite to compare with.
pub fn ratio(chloride: f64, nitrite: f64) -> Result<f64, OutOfRange> {
    Ok(ratio_to_nitrogen(chloride, nitrite)? / NO2_PER_N)
}

/// mg of chloride for each mg of nitrite-N, 3.28 times the other: mixing them up is the classic mistake.
///
/// # Errors
/// [`OutOfRange`]; also when there is no nitrite to compare with.
pub fn ratio_to_nitrogen(chloride: f64, nitrite: f64) -> Result<f64, OutOfRange> {
    let nitrite = Range::positive("nitrite", "mg/L as N").check(nitrite)?;
    Ok(CHLORIDE.check(chloride)? / nitrite)
}

/// Chloride (mg/L) to have at this nitrite (mg/L as N) for a ratio to nitrite ion.
///
/// # Errors
/// [`OutOfRange`].
pub fn chloride_wanted(nitrite: f64, ratio: f64) -> Result<f64, OutOfRange> {
    Ok(RATIO.check(ratio)? * NO2_PER_N * NITRITE.check(nitrite)?)
}

/// Grams of a salt that bring a volume (m3) from its chloride (mg/L) to what this nitrite (mg/L as N) calls for; none
/// when there is enough.
///
/// # Errors
/// [`OutOfRange`].
pub fn salt_needed(
    nitrite: f64,
    chloride: f64,
    ratio: f64,
    volume_m3: f64,
    salt: &Salt,
) -> Result<f64, OutOfRange> {
    let wanted = chloride_wanted(nitrite, ratio)? - CHLORIDE.check(chloride)?;
    salt_for_chloride(wanted.max(0.0), volume_m3, salt)
}

/// Grams of a salt that lift chloride by this much (mg/L) in a volume (m3).
///
/// # Errors
/// [`OutOfRange`].
pub fn salt_for_chloride(chloride: f64, volume_m3: f64, salt: &Salt) -> Result<f64, OutOfRange> {
    let volume = Range::positive("volume_m3", "m3").check(volume_m3)?;
    Ok(CHLORIDE.check(chloride)? * volume / salt.chloride())
}

/// Cubic meters in an acre-foot, and grams in a pound.
const ACRE_FOOT_M3: f64 = 1_233.481_837_547_52;
const POUND_G: f64 = 453.592_37;

/// Pounds of a salt that lift chloride by this much (mg/L) in an acre-foot. Extension sheets round 4.48 lb of NaCl
/// for 1 mg/L to 4.5.
///
/// # Errors
/// [`OutOfRange`].
pub fn pounds_per_acre_foot(chloride: f64, salt: &Salt) -> Result<f64, OutOfRange> {
    Ok(salt_for_chloride(chloride, ACRE_FOOT_M3, salt)? / POUND_G)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_list_of_names_is_the_table() {
        let names: Vec<_> = SALTS.iter().map(|s| s.name).collect();
        assert_eq!(names, SALT_NAMES);
    }

    #[test]
    fn enough_chloride_needs_no_salt() {
        let salt = salt_named("cacl2.2h2o");
        assert_eq!(
            salt.map(|s| salt_needed(0.1, 50.0, 10.0, 12.0, s)),
            Some(Ok(0.0))
        );
    }
}
