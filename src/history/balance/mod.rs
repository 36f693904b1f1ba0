//! Derived readings: what follows from measured ones by chemistry and arithmetic, kept as readings of their own.
//!
//! `chemistry` is about one water at one moment, `loads` sets feed against filter, air and plants, `tracers` tells
//! dilution from consumption, `rhythm` tells day from night, `slips` holds a test against itself. Each value is computed
//! when one of its inputs was read, from inputs that are still good; what lacks an input is not computed.

mod chemistry;
mod farm;
mod loads;
mod rhythm;
mod slips;
mod tracers;

use super::memory::{DAY, Memory};
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

pub use farm::{Farm, Known};

/// The derived readings of one site.
#[derive(Debug, Clone)]
pub struct Balance {
    ids: Ids,
    farm: Farm,
    rhythm: rhythm::Rhythm,
    pending: Vec<(ReadingId, u16, f64)>,
}

impl Balance {
    /// Balances for a site, with what the knowledge base says of its media and fish.
    pub fn new(vocabulary: &Vocabulary, site: &Site, known: &Known) -> Self {
        Self {
            ids: Ids::new(vocabulary),
            farm: Farm::new(site, known),
            rhythm: rhythm::Rhythm::new(site.timezone.clone()),
            pending: Vec::new(),
        }
    }

    /// The site's numbers.
    pub fn farm(&self) -> &Farm {
        &self.farm
    }

    /// Computes what the last row's readings change.
    pub fn update(&mut self, memory: &mut Memory) {
        self.pending.clear();
        let water = Water {
            ids: &self.ids,
            memory,
        };
        chemistry::update(&water, &self.farm, &mut self.pending);
        loads::update(&water, &self.farm, &mut self.pending);
        tracers::update(&water, &self.farm, &mut self.pending);
        slips::update(&water, &mut self.pending);
        self.rhythm.update(&water, &mut self.pending);
        for (id, place, value) in self.pending.drain(..) {
            memory.derived(id, place, value);
        }
    }
}

/// Declares the readings that balances use, by the ids of the contract.
macro_rules! ids {
    ($($field:ident = $id:literal),+ $(,)?) => {
        /// Numbers of the readings that balances use; `None` where the knowledge base has no such reading.
        #[derive(Debug, Clone)]
        struct Ids { $($field: Option<ReadingId>),+ }

        impl Ids {
            fn new(vocabulary: &Vocabulary) -> Self {
                Self { $($field: vocabulary.reading($id)),+ }
            }
        }
    };
}

ids! {
    temperature = "temperature",
    ph = "ph",
    oxygen = "dissolved-oxygen",
    ammonia = "total-ammonia",
    nitrite = "nitrite",
    nitrate = "nitrate",
    alkalinity = "alkalinity",
    chloride = "chloride",
    sodium = "sodium",
    salinity = "salinity",
    conductivity = "conductivity",
    feed = "feed",
    deaths = "deaths",
    makeup = "makeup-water",
    un_ionized_ammonia = "un-ionized-ammonia",
    oxygen_saturation = "oxygen-saturation",
    carbon_dioxide_from_ph = "carbon-dioxide-from-ph",
    chloride_to_nitrite = "chloride-to-nitrite",
    free_nitrous_acid = "free-nitrous-acid",
    nitrite_to_ammonia = "nitrite-to-ammonia",
    feed_per_plant_area = "feed-per-plant-area",
    ammonia_load = "ammonia-load",
    nitrification_margin = "nitrification-margin",
    oxygen_margin = "oxygen-margin",
    oxygen_minutes = "oxygen-minutes",
    alkalinity_days = "alkalinity-days",
    ammonia_per_load = "ammonia-per-load",
    nitrite_per_load = "nitrite-per-load",
    stocking = "stocking",
    system_age = "system-age",
    makeup_share = "makeup-share",
    dead_share = "dead-share",
    nitrogen_unaccounted = "nitrogen-unaccounted",
    nitrate_fall_share = "nitrate-fall-share",
    tracer_fall_share = "tracer-fall-share",
    alkalinity_use_ratio = "alkalinity-use-ratio",
    day_swing_oxygen = "day-swing-oxygen",
    day_swing_ph = "day-swing-ph",
    unit_factor_jump = "unit-factor-jump",
    one_off_spike = "one-off-spike",
}

/// The memory, asked in the words of balances.
struct Water<'m> {
    ids: &'m Ids,
    memory: &'m Memory,
}

type Pending = Vec<(ReadingId, u16, f64)>;

impl Water<'_> {
    /// Whether one of these was read in the last row.
    fn changed(&self, ids: &[Option<ReadingId>]) -> bool {
        let changes = &self.memory.changes().readings;
        ids.iter().flatten().any(|id| changes.contains(id))
    }

    /// The newest value, if it is not older than so many seconds.
    fn fresh(&self, id: Option<ReadingId>, oldest: i64) -> Option<f64> {
        let (time, value) = self.memory.reading(id?)?.newest()?.last()?;
        (self.memory.now() - time <= oldest).then_some(value)
    }

    /// The newest value of the last day.
    fn today(&self, id: Option<ReadingId>) -> Option<f64> {
        self.fresh(id, DAY)
    }

    /// Whether it was read in the last row.
    fn just_read(&self, id: Option<ReadingId>) -> bool {
        self.changed(&[id])
    }
}

fn put(pending: &mut Pending, id: Option<ReadingId>, place: u16, value: Option<f64>) {
    if let (Some(id), Some(value)) = (id, value.filter(|v| v.is_finite())) {
        pending.push((id, place, value));
    }
}

/// The measured readings a derived one is computed from; empty for what the site file alone tells.
pub fn inputs(derived: &str) -> &'static [&'static str] {
    match derived {
        "un-ionized-ammonia" => &["total-ammonia", "ph", "temperature"],
        "oxygen-saturation" => &["dissolved-oxygen", "temperature"],
        "carbon-dioxide-from-ph" => &["alkalinity", "ph", "temperature"],
        "chloride-to-nitrite" => &["chloride", "nitrite"],
        "free-nitrous-acid" => &["nitrite", "ph", "temperature"],
        "nitrite-to-ammonia" => &["nitrite", "total-ammonia"],
        "alkalinity-days" | "alkalinity-use-ratio" => &["alkalinity"],
        "ammonia-per-load" => &["total-ammonia"],
        "nitrite-per-load" => &["nitrite"],
        "makeup-share" => &["makeup-water"],
        "dead-share" => &["deaths"],
        "nitrate-fall-share" | "nitrogen-unaccounted" => &["nitrate"],
        "tracer-fall-share" => &["chloride"],
        "day-swing-oxygen" => &["dissolved-oxygen"],
        "day-swing-ph" => &["ph"],
        _ => &[],
    }
}
