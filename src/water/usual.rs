//! What a farm is taken to be where neither its site file nor its log says.

/// Protein in the feed, percent: grow-out feeds lie at 28 to 40 (common practice).
pub const PROTEIN_PERCENT: f64 = 32.0;
/// Body mass of a fish, g (common practice: mid grow-out).
pub const FISH_G: f64 = 250.0;
/// Share of the water that is replaced in a day: 1 to 3 % (Somerville et al. 2014, FAO Technical Paper 589).
pub const MAKEUP_SHARE: f64 = 0.02;
/// Nitrogen that a leafy crop takes up, g N/m2/day: 0.5 to 2 (common practice); the middle.
pub const CROP_UPTAKE: f64 = 1.2;
/// Total ammonia at which a filter's capacity is reckoned, mg/L as N: what a farm would still call well (common practice).
pub const TOTAL_AMMONIA: f64 = 1.0;
/// Oxygen at which fish are short of it where no species tells, mg/L (common practice: warm-water fish).
pub const SHORT_OF_OXYGEN: f64 = 2.5;
/// Alkalinity at which nitrification begins to stall, mg/L as CaCO3 (common practice).
pub const ALKALINITY_FLOOR: f64 = 10.0;
