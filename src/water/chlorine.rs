//! Chlorine and chloramine in tap water: what takes them out, and what they leave.
//!
//! All per mg of residual chlorine as Cl2, pure reagents.

use super::masses::{C, CL, H, H2O, N, NA, O, S};
use super::range::{OutOfRange, Range};

/// Total residual chlorine.
pub const RESIDUAL: Range = Range::not_negative("residual_chlorine", "mg/L");
const CL2: f64 = 2.0 * CL;

/// mg N freed as ammonia for each mg of chlorine that was monochloramine.
pub const AMMONIA_FROM_CHLORAMINE: f64 = N / CL2;

/// pK of hypochlorous acid at 25 C. Source: Morris 1966 (other tables 7.40).
pub const HYPOCHLOROUS_PK: f64 = 7.53;

/// Sodium thiosulfate, dry or with its five waters.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Thiosulfate {
    /// Na2S2O3.
    Anhydrous,
    /// Na2S2O3 with five waters: the usual crystals.
    Pentahydrate,
}

/// What thiosulfate ends as.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Product {
    /// 2 S2O3 + Cl2: the dose of hatcheries and of the laboratory, seven to one.
    Tetrathionate,
    /// S2O3 + 4 HOCl: an eighth of that, but it needs an excess of chlorine and time.
    Sulfate,
    /// What a field guide found at pH 7: between the two.
    FieldMixPh7,
}

/// mg of thiosulfate for each mg of chlorine.
///
/// Sources: arithmetic; at pH 7 in the field 1.9 of the anhydrous salt, AWWA field guide on the disinfection of pipelines
/// and storage facilities, Table 7-2.
pub fn thiosulfate(form: Thiosulfate, product: Product) -> f64 {
    const ANHYDROUS: f64 = 2.0 * NA + 2.0 * S + 3.0 * O;
    let mass = match form {
        Thiosulfate::Anhydrous => ANHYDROUS,
        Thiosulfate::Pentahydrate => ANHYDROUS + 5.0 * H2O,
    };
    match product {
        Product::Tetrathionate => 2.0 * mass / CL2,
        Product::Sulfate => mass / (4.0 * CL2),
        Product::FieldMixPh7 => 1.9 * mass / ANHYDROUS,
    }
}

/// Vitamin C, as acid or sodium salt.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Ascorbate {
    /// Ascorbic acid, which also takes alkalinity.
    Acid,
    /// Sodium ascorbate.
    SodiumSalt,
}

/// mg of ascorbic acid or ascorbate for each mg of chlorine: one mole for a mole.
pub fn ascorbate(form: Ascorbate) -> f64 {
    const ACID: f64 = 6.0 * C + 8.0 * H + 6.0 * O;
    match form {
        Ascorbate::Acid => ACID / CL2,
        Ascorbate::SodiumSalt => (ACID - H + NA) / CL2,
    }
}

/// A sulfite. All strip oxygen from the water.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Sulfite {
    /// NaHSO3.
    Bisulfite,
    /// Na2SO3.
    Sulfite,
    /// Na2S2O5, two sulfites in one.
    Metabisulfite,
}

/// mg of a sulfite for each mg of chlorine: one mole of sulfite for a mole, and a tenth more as the AWWA field guide does
/// (1.61 where arithmetic gives 1.47 for bisulfite).
pub fn sulfite(form: Sulfite) -> f64 {
    let per_mole = match form {
        Sulfite::Bisulfite => NA + H + S + 3.0 * O,
        Sulfite::Sulfite => 2.0 * NA + S + 3.0 * O,
        Sulfite::Metabisulfite => (2.0 * NA + 2.0 * S + 5.0 * O) / 2.0,
    };
    1.10 * per_mole / CL2
}

/// Grams of a reagent (mg for each mg of chlorine) that take this residual (mg/L) out of a volume (L).
///
/// # Errors
/// [`OutOfRange`].
pub fn dose(residual: f64, volume_l: f64, per_chlorine: f64) -> Result<f64, OutOfRange> {
    let volume = Range::positive("volume_l", "L").check(volume_l)?;
    Ok(RESIDUAL.check(residual)? * volume * per_chlorine / 1000.0)
}

/// Total ammonia (mg/L as N) that a chloramine residual (mg/L) leaves once the chlorine is taken out.
///
/// # Errors
/// [`OutOfRange`].
pub fn ammonia_left(residual: f64) -> Result<f64, OutOfRange> {
    Ok(RESIDUAL.check(residual)? * AMMONIA_FROM_CHLORAMINE)
}

/// Share (0-1) of free chlorine that is hypochlorous acid, the stronger part; pH (3-11), near 25 C.
///
/// # Errors
/// [`OutOfRange`].
pub fn hypochlorous_fraction(ph: f64) -> Result<f64, OutOfRange> {
    const PH: Range = Range::new("ph", 3.0, 11.0, "pH");
    Ok(1.0 / (1.0 + 10f64.powf(PH.check(ph)? - HYPOCHLOROUS_PK)))
}
