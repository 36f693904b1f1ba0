//! The site file: the farm, its water, its fish, its shifts, and the names its logger gives to columns.
//!
//! What the file doesn't say is `None`: unknown, never zero. Only `name` must be there. [`Site::default`] stands for
//! "no site file": times in UTC, metric units, nothing known.

mod area;
pub mod column;
mod load;
mod parts;
mod read;

use std::collections::BTreeMap;
use std::path::PathBuf;

use jiff::civil::Date;
use jiff::tz::TimeZone;

use crate::vocabulary::ReadingId;

pub use area::{Area, AreaFrom};
pub use load::load;
pub use parts::{
    Band, Chlorination, Crop, Equipment, Heading, Makeup, Media, Phone, Place, PlaceKind, Shift,
    Units,
};
pub use read::{Known, read};

/// A farm as its site file tells it. Fields are named as the keys of the file.
#[derive(Debug, Clone, PartialEq)]
pub struct Site {
    /// What the farm is called; `None` without a site file.
    pub name: Option<String>,
    /// The log that commands read by default, inside the site file's folder.
    pub log: Option<PathBuf>,
    /// The folder of incident files, inside the site file's folder.
    pub incidents: Option<PathBuf>,
    /// The zone that local times are read in.
    pub timezone: TimeZone,
    /// What people see.
    pub units: Units,
    /// Species ids; empty when not known.
    pub species: Vec<String>,
    /// What grows; empty when not known.
    pub crops: Vec<Crop>,
    /// The day the system was first fed.
    pub started: Option<Date>,
    /// Meters above the sea, -500 to 5400.
    pub elevation_m: Option<f64>,
    /// Liters of all the water that circulates, above 0.
    pub volume_l: Option<f64>,
    /// Kilograms of fish, 0 or more.
    pub biomass_kg: Option<f64>,
    /// Kilograms of feed a day, 0 or more.
    pub feed_kg_per_day: Option<f64>,
    /// Protein in the feed, 0 to 100 percent of its mass.
    pub feed_protein_percent: Option<f64>,
    /// Square meters of wetted surface that bacteria can live on, above 0. See [`Site::biofilter_area`].
    pub biofilter_area_m2: Option<f64>,
    /// Square meters of plants, 0 or more.
    pub plant_area_m2: Option<f64>,
    /// Kilograms of oxygen a day that the aeration puts into this water at 5 mg/L oxygen, 0 or more.
    pub aeration_kg_o2_per_day: Option<f64>,
    /// Whether the water is heated.
    pub heated: Option<bool>,
    /// Whether the media is covered from light.
    pub covered_media: Option<bool>,
    /// Media volumes that stand in for [`Site::biofilter_area_m2`].
    pub media: Vec<Media>,
    /// The water it is topped up with.
    pub makeup: Makeup,
    /// The site's own comfort bands.
    pub targets: BTreeMap<ReadingId, Band>,
    /// The logger's own column names.
    pub columns: Vec<Heading>,
    /// Shifts, in the order of the file.
    pub shift: Vec<Shift>,
    /// Places, in walking order.
    pub place: Vec<Place>,
    /// Whom to call.
    pub phone: Vec<Phone>,
    /// What there is to work with.
    pub equipment: Equipment,
}

impl Default for Site {
    fn default() -> Self {
        Self {
            name: None,
            log: None,
            incidents: None,
            timezone: TimeZone::UTC,
            units: Units::Metric,
            species: Vec::new(),
            crops: Vec::new(),
            started: None,
            elevation_m: None,
            volume_l: None,
            biomass_kg: None,
            feed_kg_per_day: None,
            feed_protein_percent: None,
            biofilter_area_m2: None,
            plant_area_m2: None,
            aeration_kg_o2_per_day: None,
            heated: None,
            covered_media: None,
            media: Vec::new(),
            makeup: Makeup::default(),
            targets: BTreeMap::new(),
            columns: Vec::new(),
            shift: Vec::new(),
            place: Vec::new(),
            phone: Vec::new(),
            equipment: Equipment::default(),
        }
    }
}
