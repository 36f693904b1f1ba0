//! What a site file can fill in for a calculation.

/// The site's own numbers; what the site does not say stays `None`.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct SiteValues {
    /// Salinity of the system water, g/L.
    pub salinity: Option<f64>,
    /// Height above the sea, m.
    pub elevation_m: Option<f64>,
    /// All the water that circulates, L.
    pub volume_l: Option<f64>,
    /// Fish, kg.
    pub biomass_kg: Option<f64>,
    /// Feed, kg/day.
    pub feed_kg_per_day: Option<f64>,
    /// Protein in the feed, %.
    pub feed_protein_percent: Option<f64>,
    /// Wetted area that bacteria can live on, m2.
    pub biofilter_area_m2: Option<f64>,
    /// Area of plants, m2.
    pub plant_area_m2: Option<f64>,
    /// pH of the makeup water.
    pub makeup_ph: Option<f64>,
    /// Alkalinity of the makeup water, mg/L as CaCO3.
    pub makeup_alkalinity: Option<f64>,
    /// Temperature of the makeup water, C.
    pub makeup_temperature: Option<f64>,
}

/// One of the site's numbers, named for a key that it fills.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SiteKey {
    /// [`SiteValues::salinity`].
    Salinity,
    /// [`SiteValues::elevation_m`].
    Elevation,
    /// [`SiteValues::volume_l`].
    VolumeL,
    /// [`SiteValues::volume_l`] in cubic meters.
    VolumeM3,
    /// [`SiteValues::biomass_kg`].
    Biomass,
    /// [`SiteValues::feed_kg_per_day`].
    Feed,
    /// [`SiteValues::feed_kg_per_day`] in grams.
    FeedGrams,
    /// [`SiteValues::feed_protein_percent`].
    Protein,
    /// [`SiteValues::biofilter_area_m2`].
    BiofilterArea,
    /// [`SiteValues::plant_area_m2`].
    PlantArea,
    /// [`SiteValues::makeup_ph`].
    MakeupPh,
    /// [`SiteValues::makeup_alkalinity`].
    MakeupAlkalinity,
    /// [`SiteValues::makeup_temperature`].
    MakeupTemperature,
}

impl SiteValues {
    /// The site's number, in the unit of the key it fills.
    pub fn get(&self, key: SiteKey) -> Option<f64> {
        match key {
            SiteKey::Salinity => self.salinity,
            SiteKey::Elevation => self.elevation_m,
            SiteKey::VolumeL => self.volume_l,
            SiteKey::VolumeM3 => self.volume_l.map(|l| l / 1000.0),
            SiteKey::Biomass => self.biomass_kg,
            SiteKey::Feed => self.feed_kg_per_day,
            SiteKey::FeedGrams => self.feed_kg_per_day.map(|kg| kg * 1000.0),
            SiteKey::Protein => self.feed_protein_percent,
            SiteKey::BiofilterArea => self.biofilter_area_m2,
            SiteKey::PlantArea => self.plant_area_m2,
            SiteKey::MakeupPh => self.makeup_ph,
            SiteKey::MakeupAlkalinity => self.makeup_alkalinity,
            SiteKey::MakeupTemperature => self.makeup_temperature,
        }
    }
}
