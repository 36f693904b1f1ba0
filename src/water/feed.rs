//! What a day's feed does to the water.

use super::masses;
use super::nitrification;
use super::range::{OutOfRange, Range};

/// Feed given in a day.
pub const FEED: Range = Range::not_negative("feed_kg_per_day", "kg/day");
/// Protein in the feed.
pub const PROTEIN: Range = Range::new("protein_percent", 0.0, 80.0, "%");

/// g of nitrogen in a g of protein (Kjeldahl factor 6.25).
pub const NITROGEN_IN_PROTEIN: f64 = 0.16;

/// g of total ammonia-N that a g of protein fed becomes: 0.16 nitrogen x 0.80 assimilated x 0.80 excreted x 0.90 as total
/// ammonia. Source: Timmons & Ebeling, Recirculating Aquaculture (from memory). Where solids rot in the system allow
/// up to 0.11.
pub const AMMONIA_PER_PROTEIN: f64 = 0.092;

/// kg of suspended solids for each kg of feed. Source: Timmons & Ebeling (from memory; 0.2-0.4).
pub const SOLIDS_PER_FEED: f64 = 0.25;

/// Nitrogen (g) in a kg of feed of this protein (percent, 0-80).
///
/// # Errors
/// [`OutOfRange`].
pub fn nitrogen(protein_percent: f64) -> Result<f64, OutOfRange> {
    Ok(1000.0 * NITROGEN_IN_PROTEIN * PROTEIN.check(protein_percent)? / 100.0)
}

/// Total ammonia (g N/day) that this feed (kg/day) of this protein (percent, 0-80) becomes.
///
/// # Errors
/// [`OutOfRange`].
pub fn ammonia(feed_kg_per_day: f64, protein_percent: f64) -> Result<f64, OutOfRange> {
    let protein = PROTEIN.check(protein_percent)? / 100.0;
    Ok(1000.0 * FEED.check(feed_kg_per_day)? * protein * AMMONIA_PER_PROTEIN)
}

/// Alkalinity (g CaCO3/day) that nitrifying all of that takes: the pessimistic bound, for plants and denitrification
/// give part of it back.
///
/// # Errors
/// [`OutOfRange`].
pub fn alkalinity_use(feed_kg_per_day: f64, protein_percent: f64) -> Result<f64, OutOfRange> {
    Ok(ammonia(feed_kg_per_day, protein_percent)? * nitrification::ALKALINITY_WITH_CELLS)
}

/// Suspended solids (kg/day) that this feed (kg/day) becomes.
///
/// # Errors
/// [`OutOfRange`].
pub fn solids(feed_kg_per_day: f64) -> Result<f64, OutOfRange> {
    Ok(FEED.check(feed_kg_per_day)? * SOLIDS_PER_FEED)
}

/// Carbon dioxide (g) breathed out for each g of oxygen, at a respiratory quotient (moles out for moles in; about 1).
///
/// # Errors
/// [`OutOfRange`].
pub fn carbon_dioxide_per_oxygen(quotient: f64) -> Result<f64, OutOfRange> {
    const QUOTIENT: Range = Range::new("rq", 0.5, 1.5, "mol/mol");
    Ok(QUOTIENT.check(quotient)? * masses::CO2 / masses::O2)
}

/// Where the oxygen that feed takes is counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum OxygenFor {
    /// The fish alone.
    Fish,
    /// Fish, filter and all that rots in the system.
    WholeSystem,
    /// Everything, uneaten feed and nitrification too, to the end.
    CompleteOxidation,
}

/// Oxygen (kg) that a kg of feed takes: low and high.
///
/// Sources: fish 0.2-0.5 and whole system 0.5-1.0, Timmons & Ebeling (from memory); complete oxidation 1.25, Boyd.
pub fn oxygen_per_feed(what: OxygenFor) -> (f64, f64) {
    match what {
        OxygenFor::Fish => (0.2, 0.5),
        OxygenFor::WholeSystem => (0.5, 1.0),
        OxygenFor::CompleteOxidation => (1.25, 1.25),
    }
}

/// Days until alkalinity (mg/L as CaCO3) falls to a floor in this volume (L) when all ammonia of the feed is
/// nitrified, no base is added, and nothing gives alkalinity back: the pessimistic bound.
///
/// # Errors
/// [`OutOfRange`].
pub fn days_of_alkalinity(
    volume_l: f64,
    alkalinity: f64,
    floor: f64,
    feed_kg_per_day: f64,
    protein_percent: f64,
) -> Result<f64, OutOfRange> {
    let volume = Range::positive("volume_l", "L").check(volume_l)?;
    let alkalinity = Range::not_negative("alkalinity", "mg/L as CaCO3").check(alkalinity)?;
    let floor = Range::not_negative("floor", "mg/L as CaCO3").check(floor)?;
    Range::positive("feed_kg_per_day", "kg/day").check(feed_kg_per_day)?;
    Range::positive("protein_percent", "%").check(protein_percent)?;
    let grams = (alkalinity - floor).max(0.0) * volume / 1000.0;
    Ok(grams / alkalinity_use(feed_kg_per_day, protein_percent)?)
}
