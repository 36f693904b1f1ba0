//! Farm and water of a projection, from a site, its log and what is given by hand.

use super::capacity::{self, Capacity};
use super::farm::Farm;
use super::rates::{metabolism, nitrifying};
use super::readings::Readings;
use super::state::{Chemistry, Part, SIZE, State};
use crate::history::memory::{DAY, HOUR};
use crate::knowledge::Knowledge;
use crate::site::Site;
use crate::water::activity;
use crate::water::carbonate::gas::OUTDOOR_PPM;
use crate::water::carbonate::state::CACO3_PER_EQ;
use crate::water::masses::{CACO3_PER_MEQ, O2};
use crate::water::nitrification::{self, Basis};
use crate::water::oxygen;

/// Something that has to be known and is not: a key of the site file, or a reading.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Lacks(pub Vec<String>);

/// An end of what the log allows.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Extreme {
    /// As few bacteria as may be.
    Few,
    /// As many.
    Many,
}

/// Where a projection begins.
#[derive(Debug, Clone)]
pub struct Begin<'k> {
    /// The farm.
    pub farm: Farm<'k>,
    /// The water, with the likeliest bacteria.
    pub state: State,
    /// What the filter can do, where the log tells.
    pub capacity: Option<Capacity>,
    /// pH.
    pub ph: f64,
    /// Feed of the last day as a share of the usual feed.
    pub feed: f64,
    /// Kilograms of a usual day's feed.
    pub usual_feed_kg: Option<f64>,
    /// How alkalinity moves in the log, mg/L as CaCO3 a day. Where nothing tells it is taken to be held where it is, by
    /// makeup water and the usual doses of base.
    pub rising: Option<f64>,
    /// Readings that nothing tells and that were taken for granted.
    pub assumed: Vec<&'static str>,
}

/// Gas exchange (1/day) that is reckoned with: slower is a pond, faster settles within the hour anyway.
const EXCHANGE: (f64, f64) = (2.0, 96.0);

/// Values taken for granted where a plan does not rest on them: a middle of what farms have.
fn usual(id: &str) -> f64 {
    match id {
        "temperature" => 22.0,
        "ph" => 7.0,
        "alkalinity" => 60.0,
        _ => 0.0,
    }
}

impl<'k> Begin<'k> {
    /// From a site whose filter has this wetted area (m2), where known.
    ///
    /// # Errors
    /// [`Lacks`] without a volume.
    pub fn new(
        knowledge: &'k Knowledge,
        site: &Site,
        area_m2: Option<f64>,
        readings: &Readings<'_>,
    ) -> Result<Self, Lacks> {
        let kinetics = &knowledge.pacing.kinetics;
        let volume_l = site
            .volume_l
            .ok_or_else(|| Lacks(vec!["volume_l".to_owned()]))?;
        let mut assumed = Vec::new();
        let mut take = |id: &'static str| {
            readings.value(id).unwrap_or_else(|| {
                assumed.push(id);
                usual(id)
            })
        };
        let temperature = take("temperature");
        let ph = take("ph").clamp(3.5, 10.5);
        let alkalinity = take("alkalinity").clamp(0.0, 2000.0);
        let (ammonia, nitrite, nitrate) = (take("total-ammonia"), take("nitrite"), take("nitrate"));
        let (chloride, sodium) = (take("chloride"), take("sodium"));

        let salinity = readings.value("salinity").unwrap_or(0.0).clamp(0.0, 35.0);
        let conductivity = readings.value("conductivity").filter(|c| *c <= 6000.0);
        let ionic = conductivity
            .and_then(|c| activity::from_conductivity(c).ok())
            .unwrap_or(alkalinity / CACO3_PER_EQ + chloride / 35_450.0)
            .clamp(0.0, 0.1);
        let height = site.elevation_m.unwrap_or(0.0);
        let pressure = oxygen::pressure_at(height).unwrap_or(oxygen::SEA_LEVEL_KPA);
        let lacks = || Lacks(vec!["temperature".to_owned()]);
        let chem = Chemistry::at(temperature, ionic, salinity, pressure).ok_or_else(lacks)?;

        let logged = readings.fresh("feed");
        let usual_feed_kg = site
            .feed_kg_per_day
            .or_else(|| readings.middle("feed", 10 * DAY))
            .or(logged)
            .filter(|f| *f > 0.0);
        let feed = match (logged, usual_feed_kg) {
            (Some(now), Some(usual)) => (now / usual).clamp(0.0, 3.0),
            _ => 1.0,
        };
        let protein = site.feed_protein_percent.unwrap_or(kinetics.protein.value) / 100.0;
        let per_liter = |grams: f64| 1000.0 * grams / volume_l;
        let load = usual_feed_kg.map_or(0.0, |kg| {
            per_liter(1000.0 * kg * protein * kinetics.ammonia_per_protein.value)
        });

        let phosphorus = readings.value("phosphorus").unwrap_or(0.0) / 30_974.0;
        let carbon = chem.carbon(ph, alkalinity, phosphorus);
        let held = chem.carbonate.kh * OUTDOOR_PPM * 1e-6 * 1000.0;
        let mut farm = Farm {
            kinetics,
            volume_l,
            load,
            plants: per_liter(site.plant_area_m2.unwrap_or(0.0) * kinetics.plant_nitrogen.value),
            oxygen_exchange: 24.0 * kinetics.oxygen_transfer.value,
            respiration: 0.0,
            carbon_exchange: 24.0 * kinetics.oxygen_transfer.value * kinetics.gas_ratio.value,
            above_air: 0.0,
            freed: 0.0,
            metabolism: 1.0,
            ceiling: area_m2.map(|a| per_liter(a * kinetics.film_per_area.value)),
            pressure,
            salinity,
            ionic,
            phosphorus,
            air_carbon_dioxide: held,
            supply: 0.0,
            held: None,
            drift: drift(readings),
        };

        let measured = readings.fresh("dissolved-oxygen");
        let asked = usual_feed_kg
            .map(|kg| per_liter(1000.0 * kg * kinetics.oxygen_per_feed.value) * metabolism(feed));
        let given = site.aeration_kg_o2_per_day.map(|kg| per_liter(1000.0 * kg));
        farm.oxygen_exchange = match (given, measured, asked) {
            (Some(given), ..) => given / (chem.saturation - 5.0).max(0.5),
            (None, Some(oxygen), Some(asked)) => asked / (chem.saturation - oxygen).max(0.3),
            _ => farm.oxygen_exchange,
        }
        .clamp(EXCHANGE.0, EXCHANGE.1);
        let level = measured
            .or_else(|| asked.map(|a| chem.saturation - a / farm.oxygen_exchange))
            .unwrap_or(0.9 * chem.saturation)
            .clamp(0.5, 2.0 * chem.saturation);
        if measured.is_none() {
            assumed.push("dissolved-oxygen");
        }

        let mut state = [0.0; SIZE];
        for (part, value) in [
            (Part::Temperature, temperature),
            (Part::Ammonia, ammonia),
            (Part::Nitrite, nitrite),
            (Part::Nitrate, nitrate),
            (Part::Alkalinity, alkalinity),
            (Part::Carbon, carbon),
            (Part::Oxygen, level),
            (Part::Chloride, chloride),
            (Part::Sodium, sodium),
            (
                Part::UsedToPh,
                readings.middle("ph", 30 * DAY).unwrap_or(ph).min(9.0),
            ),
        ] {
            part.set(&mut state, value);
        }
        let starved = kinetics.starved_share.value;
        let gut = load * (1.0 - starved) * feed * kinetics.excretion_hours.value / 24.0;
        Part::Gut.set(&mut state, gut);

        let capacity = capacity::estimate(&farm, readings, &state, feed, ph);
        if let Some(capacity) = capacity {
            Part::AmmoniaOxidizers.set(&mut state, capacity.ammonia.middle);
            Part::NitriteOxidizers.set(&mut state, capacity.nitrite.middle);
        }
        let rising = rising(readings);
        calibrate(&mut farm, &state, feed, ph, rising.unwrap_or(0.0)).ok_or_else(lacks)?;
        Ok(Self {
            farm,
            state,
            capacity,
            ph,
            feed,
            usual_feed_kg,
            rising,
            assumed,
        })
    }

    /// The farm as it must be for the water to be as it is, with the bacteria of this state: what is measured to be steady
    /// is steady however many there are.
    pub fn farm_with(&self, state: &State) -> Farm<'k> {
        let mut farm = self.farm.clone();
        let rising = self.rising.unwrap_or(0.0);
        if calibrate(&mut farm, state, self.feed, self.ph, rising).is_none() {
            return self.farm.clone();
        }
        farm
    }

    /// The water with as few (or as many) bacteria as the log allows, and with the ammonia and nitrite that go with that:
    /// a test that reads low hides a filter that does less.
    pub fn extreme(&self, ammonia: Extreme, nitrite: Extreme) -> State {
        let Some(c) = self.capacity else {
            return self.state;
        };
        let pick = |span: super::Span, end| match end {
            Extreme::Few => span.low,
            Extreme::Many => span.high,
        };
        let mut state = self.with_bacteria(pick(c.ammonia, ammonia), pick(c.nitrite, nitrite));
        for (part, level, end) in [
            (Part::Ammonia, c.total_ammonia, ammonia),
            (Part::Nitrite, c.nitrite_level, nitrite),
        ] {
            let value = match end {
                Extreme::Few => level.high,
                Extreme::Many => level.low,
            };
            part.set(&mut state, value);
        }
        state
    }

    /// The water with other bacteria.
    pub fn with_bacteria(&self, ammonia: f64, nitrite: f64) -> State {
        let mut state = self.state;
        Part::AmmoniaOxidizers.set(&mut state, ammonia);
        Part::NitriteOxidizers.set(&mut state, nitrite);
        state
    }
}

/// Sets what keeps the water where it is: breathing and breath that hold oxygen and carbon dioxide, and the alkalinity that
/// comes in (mg/L as CaCO3 a day) for it to rise by so much while the filter takes its part.
fn calibrate(farm: &mut Farm<'_>, state: &State, feed: f64, ph: f64, rising: f64) -> Option<()> {
    let chem = Chemistry::at(
        Part::Temperature.of(state),
        farm.ionic,
        farm.salinity,
        farm.pressure,
    )?;
    let n = nitrifying(farm, state, &chem, ph);
    let filter = nitrification::oxygen(Basis::EnergyFirstStep) * n.ammonia.0
        + nitrification::oxygen(Basis::EnergySecondStep) * n.nitrite.0;
    let total = farm.oxygen_exchange * (chem.saturation - Part::Oxygen.of(state));
    farm.respiration = (total - filter).max(0.0) / metabolism(feed);

    let nitrate = Part::Nitrate.of(state).max(0.0);
    let plants = farm.plants * nitrate / (farm.kinetics.plant_half.value + nitrate);
    let lost = farm.kinetics.denitrification.value * nitrate;
    let net = nitrification::ALKALINITY_WITH_CELLS * n.ammonia.0
        - nitrification::DENITRIFICATION_ALKALINITY * (plants + lost);
    farm.supply = (rising + net).max(0.0);

    // Exchange that takes out what breathing (one for one with oxygen) and nitrification make; the rest counts as breath.
    let freed = net / CACO3_PER_MEQ;
    let above_air = chem.carbon_dioxide(ph, Part::Carbon.of(state)) - farm.air_carbon_dioxide;
    let made = farm.respiration * metabolism(feed) / O2 + freed;
    farm.carbon_exchange = if above_air > 0.2 * farm.air_carbon_dioxide && made > 0.0 {
        (made / above_air).clamp(EXCHANGE.0, EXCHANGE.1)
    } else {
        farm.oxygen_exchange * farm.kinetics.gas_ratio.value
    };
    farm.above_air = above_air;
    farm.freed = freed;
    farm.metabolism = metabolism(feed);
    Some(())
}

/// How alkalinity moved in the log's last week, mg/L as CaCO3 a day; `None` where too little tells.
fn rising(readings: &Readings<'_>) -> Option<f64> {
    let shift = readings
        .shift("alkalinity", 7 * DAY)
        .filter(|s| s.span >= DAY / 2)?;
    #[allow(clippy::cast_precision_loss)] // windows are days
    let days = shift.span as f64 / 86_400.0;
    Some(shift.change / days)
}

/// A change of temperature that is under way, C/day: what the last half day of the log shows, where it is more than the
/// day's own swing.
fn drift(readings: &Readings<'_>) -> f64 {
    const WORTH_IT: f64 = 0.8;
    readings
        .shift("temperature", 12 * HOUR)
        .filter(|s| s.change.abs() >= WORTH_IT && s.span >= HOUR)
        .map_or(0.0, |s| {
            #[allow(clippy::cast_precision_loss)] // windows are hours
            let days = s.span as f64 / 86_400.0;
            (s.change / days).clamp(-24.0, 24.0)
        })
}
