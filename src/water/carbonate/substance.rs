//! The bases and acids that are dosed: what one mole of each brings.

use crate::water::masses::{C, CA, CACO3, CACO3_PER_MEQ, CL, H, HCO3, K, MG, N, NA, O, P, S};

/// A base or an acid, pure and dry.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Substance {
    /// Its formula.
    pub name: &'static str,
    /// g/mol.
    pub molar_mass: f64,
    /// Equivalents of alkalinity that a mole adds; below zero for an acid.
    pub equivalents: f64,
    /// Moles of inorganic carbon in a mole.
    pub carbon: f64,
    /// Moles of phosphorus in a mole.
    pub phosphorus: f64,
    /// What a mole adds to ionic strength (mol/L) once its base has become bicarbonate.
    pub ions: f64,
}

impl Substance {
    /// Grams that add (a base) or take (an acid) as much alkalinity as one gram of calcium carbonate has.
    pub fn grams_per_caco3(&self) -> f64 {
        self.molar_mass / (self.equivalents.abs() * CACO3_PER_MEQ)
    }

    /// Whether it lifts alkalinity.
    pub fn is_base(&self) -> bool {
        self.equivalents > 0.0
    }
}

const fn base(
    name: &'static str,
    molar_mass: f64,
    equivalents: f64,
    carbon: f64,
    ions: f64,
) -> Substance {
    Substance {
        name,
        molar_mass,
        equivalents,
        carbon,
        phosphorus: 0.0,
        ions,
    }
}

/// Bases and acids. A cation of two charges with two bicarbonates adds three to ionic strength, one of one charge adds
/// one; a strong acid of one proton swaps bicarbonate for its anion and adds none. Phosphoric acid counts with its first
/// proton; its second comes and goes with pH and is worked out there.
pub static SUBSTANCES: &[Substance] = &[
    base("NaHCO3", NA + HCO3, 1.0, 1.0, 1.0),
    base("KHCO3", K + HCO3, 1.0, 1.0, 1.0),
    base("Na2CO3", 2.0 * NA + C + 3.0 * O, 2.0, 1.0, 2.0),
    base("K2CO3", 2.0 * K + C + 3.0 * O, 2.0, 1.0, 2.0),
    base("NaOH", NA + O + H, 1.0, 0.0, 1.0),
    base("KOH", K + O + H, 1.0, 0.0, 1.0),
    base("Ca(OH)2", CA + 2.0 * (O + H), 2.0, 0.0, 3.0),
    base("CaCO3", CACO3, 2.0, 1.0, 3.0),
    base("MgO", MG + O, 2.0, 0.0, 3.0),
    base("MgCO3", MG + C + 3.0 * O, 2.0, 1.0, 3.0),
    base("HCl", H + CL, -1.0, 0.0, 0.0),
    base("HNO3", H + N + 3.0 * O, -1.0, 0.0, 0.0),
    base("H2SO4", 2.0 * H + S + 4.0 * O, -2.0, 0.0, 1.0),
    Substance {
        phosphorus: 1.0,
        ..base("H3PO4", 3.0 * H + P + 4.0 * O, -1.0, 0.0, 0.0)
    },
];

/// Names of all.
pub static NAMES: &[&str] = &[
    "NaHCO3", "KHCO3", "Na2CO3", "K2CO3", "NaOH", "KOH", "Ca(OH)2", "CaCO3", "MgO", "MgCO3", "HCl",
    "HNO3", "H2SO4", "H3PO4",
];
/// Names of the bases.
pub static BASES: &[&str] = &[
    "NaHCO3", "KHCO3", "Na2CO3", "K2CO3", "NaOH", "KOH", "Ca(OH)2", "CaCO3", "MgO", "MgCO3",
];
/// Names of the acids.
pub static ACIDS: &[&str] = &["HCl", "HNO3", "H2SO4", "H3PO4"];

/// The base or acid of this formula, spelled in any case.
pub fn substance(name: &str) -> Option<&'static Substance> {
    SUBSTANCES
        .iter()
        .find(|s| s.name.eq_ignore_ascii_case(name))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_lists_of_names_are_the_table() {
        let named = |bases: bool| -> Vec<_> {
            let chosen = SUBSTANCES.iter().filter(|s| s.is_base() == bases);
            chosen.map(|s| s.name).collect()
        };
        assert_eq!([named(true), named(false)].concat(), NAMES);
        assert_eq!(named(true), BASES);
        assert_eq!(named(false), ACIDS);
    }
}
