//! Feed and plant area: how many grams of feed a day a square meter of plants goes with.

use super::range::{OutOfRange, Range};

/// Feed given in a day, in grams.
pub const FEED: Range = Range::not_negative("feed_g_per_day", "g/day");
/// Feed for each square meter of plants.
pub const RATIO: Range = Range::positive("feed_rate_ratio", "g/m2/day");
/// Area of plants.
pub const AREA: Range = Range::not_negative("plant_area_m2", "m2");

/// How and what is grown.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Growing {
    /// Rafts, solids taken out, little exchange. Rakocy 2007, Ten guidelines for aquaponic systems.
    RaftUvi,
    /// Nutrient film: about a quarter of rafts. Rakocy 2007.
    NutrientFilmUvi,
    /// Leafy greens at 32 % protein. Somerville et al. 2014, FAO Technical Paper 589 ch. 8.
    LeafyFao,
    /// Fruiting vegetables at 32 % protein. Somerville et al. 2014, FAO Technical Paper 589 ch. 8.
    FruitingFao,
}

/// g of feed for each m2 of plants and day: low and high. The sources differ because they waste and exchange differently;
/// a farm may sit at half of the figure for rafts and be fine.
pub fn feed_rate_ratio(growing: Growing) -> (f64, f64) {
    match growing {
        Growing::RaftUvi => (60.0, 100.0),
        Growing::NutrientFilmUvi => (15.0, 25.0),
        Growing::LeafyFao => (40.0, 50.0),
        Growing::FruitingFao => (50.0, 80.0),
    }
}

/// Area (m2) of plants for this feed (g/day) at a ratio (g/m2/day).
///
/// # Errors
/// [`OutOfRange`].
pub fn area_for_feed(feed_g_per_day: f64, ratio: f64) -> Result<f64, OutOfRange> {
    Ok(FEED.check(feed_g_per_day)? / RATIO.check(ratio)?)
}

/// Feed (g/day) for this area (m2) of plants at a ratio (g/m2/day).
///
/// # Errors
/// [`OutOfRange`].
pub fn feed_for_area(plant_area_m2: f64, ratio: f64) -> Result<f64, OutOfRange> {
    Ok(AREA.check(plant_area_m2)? * RATIO.check(ratio)?)
}
