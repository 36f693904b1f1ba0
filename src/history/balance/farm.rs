//! The numbers of a site that balances reckon with.

use crate::site::Site;
use crate::water::usual;

/// What the knowledge base says of a site's media and fish; `None` is unknown.
#[derive(Debug, Clone, Copy, Default)]
pub struct Known {
    /// Wetted area of the biofilter, m2.
    pub area_m2: Option<f64>,
    /// mg of oxygen per kg of fish and hour, fed.
    pub oxygen_use: Option<f64>,
    /// Oxygen at which the fish are short of it, mg/L.
    pub short_of_oxygen: Option<f64>,
}

/// What the site file says in numbers; what it does not say is unknown.
#[derive(Debug, Clone)]
pub struct Farm {
    /// Liters of circulating water.
    pub volume_l: Option<f64>,
    /// Kilograms of fish.
    pub biomass_kg: Option<f64>,
    /// Kilograms of feed a day, where the log does not say.
    pub feed_kg_per_day: Option<f64>,
    /// Percent of protein in the feed.
    pub protein_percent: Option<f64>,
    /// Wetted area of the biofilter, m2.
    pub area_m2: Option<f64>,
    /// Planted area, m2.
    pub plant_area_m2: Option<f64>,
    /// Kilograms of oxygen the aeration gives a day at 5 mg/L.
    pub aeration_kg_per_day: Option<f64>,
    /// Meters above the sea; sea level where unknown (the error is 1 % of saturation per 100 m).
    pub elevation_m: f64,
    /// Unix seconds of the day the system was first fed.
    pub started: Option<i64>,
    /// mg of oxygen per kg of fish and hour, fed, where the species says.
    pub oxygen_use: Option<f64>,
    /// Oxygen at which these fish are short of it, mg/L.
    pub short_of_oxygen: f64,
}

impl Farm {
    /// The numbers of a site, with what the knowledge base says of its media and fish.
    pub fn new(site: &Site, known: &Known) -> Self {
        Self {
            volume_l: site.volume_l,
            biomass_kg: site.biomass_kg,
            feed_kg_per_day: site.feed_kg_per_day,
            protein_percent: site.feed_protein_percent,
            area_m2: known.area_m2,
            plant_area_m2: site.plant_area_m2,
            aeration_kg_per_day: site.aeration_kg_o2_per_day,
            elevation_m: site.elevation_m.unwrap_or(0.0),
            started: site
                .started
                .and_then(|d| d.to_zoned_datetime(site.timezone.clone()).ok())
                .map(|z| z.timestamp().as_second()),
            oxygen_use: known.oxygen_use,
            short_of_oxygen: known.short_of_oxygen.unwrap_or(usual::SHORT_OF_OXYGEN),
        }
    }
}
