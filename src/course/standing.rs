//! How long there is: what a farm has in hand before anything breaks. Every figure says what it rests on, or what it lacks.

use crate::course::plan::Ground;
use crate::course::projection::{Action, Deed, Gas, ORDINARY, Part, Point};
use crate::knowledge::{LimitLevel, Side};
use crate::water::biofilter::{self, Conditions};
use crate::water::{feed, oxygen, respiration};

/// One figure: how long, or how much.
#[derive(Debug, Clone, PartialEq)]
pub struct Standing {
    /// Kebab-case id.
    pub id: &'static str,
    /// At the least and at the most; `None` where inputs lack.
    pub value: Option<(f64, f64)>,
    /// Unit.
    pub unit: &'static str,
    /// Where the formula comes from: keys of sources, or the function of the water room that holds them.
    pub source: Vec<&'static str>,
    /// Keys of the site file and readings that it lacks.
    pub lacks: Vec<&'static str>,
}

impl Standing {
    fn new(id: &'static str, unit: &'static str, source: &[&'static str]) -> Self {
        Self {
            id,
            value: None,
            unit,
            source: source.to_vec(),
            lacks: Vec::new(),
        }
    }

    /// The figure from inputs that may lack, each with its name.
    fn from<const N: usize>(
        mut self,
        inputs: [(&'static str, Option<f64>); N],
        reckon: impl FnOnce([f64; N]) -> Option<(f64, f64)>,
    ) -> Self {
        self.lacks = inputs
            .iter()
            .filter(|(_, v)| v.is_none())
            .map(|(n, _)| *n)
            .collect();
        if self.lacks.is_empty() {
            self.value = reckon(inputs.map(|(_, v)| v.unwrap_or(f64::NAN)))
                .filter(|(a, b)| a.is_finite() && b.is_finite());
        }
        self
    }
}

/// The bounds of a year that margins are judged at, C: the coldest and the hottest the water gets.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Year {
    /// Coldest month.
    pub coldest: Option<f64>,
    /// Hottest day.
    pub hottest: Option<f64>,
}

/// Longest that is looked ahead when a filter dies, days.
const AHEAD: f64 = 14.0;
/// Bacteria of a loaded system may breathe as much again as the fish (see `water::respiration`).
const BACTERIA_TOO: f64 = 2.0;
/// Loss of heat of an unheated hall, share of the difference to the air in an hour: low and high, from memory.
const COOLING: (f64, f64) = (0.02, 0.08);

/// Everything that can be said of a farm.
pub fn standing(ground: &Ground<'_>, year: Year) -> Vec<Standing> {
    let mut all = vec![
        air_stops(ground, false),
        air_stops(ground, true),
        pump_stops(ground),
    ];
    all.push(heater_stops(ground));
    all.push(filter_dies(ground));
    all.push(alkalinity_days(ground));
    all.push(nitrification_margin(ground, year));
    all.push(aeration_margin(ground, year));
    all.push(feed_per_area(ground));
    all
}

fn level(ground: &Ground<'_>, id: &str, side: Side) -> Option<f64> {
    ground.species(id, LimitLevel::Stress, side)
}

fn low_oxygen(ground: &Ground<'_>) -> Option<f64> {
    let general = ground.pace().low_oxygen.for_fish(ground.warm());
    Some(level(ground, "dissolved-oxygen", Side::Low).unwrap_or(general))
}

/// Minutes until oxygen is short without air, before or after feeding.
fn air_stops(ground: &Ground<'_>, fed: bool) -> Standing {
    let id = if fed {
        "minutes-without-air-fed"
    } else {
        "minutes-without-air"
    };
    let t = ground.readings.value("temperature");
    Standing::new(id, "min", &["water::respiration"]).from(
        [
            (
                "dissolved-oxygen",
                ground.readings.value("dissolved-oxygen"),
            ),
            ("temperature", t),
            ("biomass_kg", ground.site.biomass_kg.filter(|b| *b > 0.0)),
            ("volume_l", ground.site.volume_l),
            ("low-oxygen", low_oxygen(ground)),
        ],
        |[now, t, biomass, volume, low]| {
            let each =
                respiration::oxygen_use(t.clamp(0.0, 36.0), respiration::USUAL_FISH_G, fed).ok()?;
            let most = respiration::minutes_until(now, low, biomass, volume, each).ok()?;
            Some((most / BACTERIA_TOO, most))
        },
    )
}

/// Minutes until oxygen is short in the tanks when the pump stops and the tanks' own air goes on or not: the fish have the
/// tanks' water alone. Reckoned for the whole water, so the tank that is fullest has less.
fn pump_stops(ground: &Ground<'_>) -> Standing {
    let t = ground.readings.value("temperature");
    Standing::new(
        "minutes-without-flow",
        "min",
        &["water::respiration", "common-practice"],
    )
    .from(
        [
            (
                "dissolved-oxygen",
                ground.readings.value("dissolved-oxygen"),
            ),
            ("temperature", t),
            ("biomass_kg", ground.site.biomass_kg.filter(|b| *b > 0.0)),
            ("volume_l", ground.site.volume_l),
            ("low-oxygen", low_oxygen(ground)),
        ],
        |[now, t, biomass, volume, low]| {
            /// Share of a loop's water that stands in its fish tanks.
            const IN_TANKS: (f64, f64) = (0.3, 0.7);
            let each = respiration::oxygen_use(t.clamp(0.0, 36.0), respiration::USUAL_FISH_G, true)
                .ok()?;
            let in_share = |share: f64| {
                respiration::minutes_until(now, low, biomass, share * volume, each).ok()
            };
            Some((in_share(IN_TANKS.0)?, in_share(IN_TANKS.1)?))
        },
    )
}

/// Hours until the water is at a stress temperature when the heating stops: Newton's law of cooling toward the air.
fn heater_stops(ground: &Ground<'_>) -> Standing {
    Standing::new("hours-without-heat", "h", &["from-memory"]).from(
        [
            ("temperature", ground.readings.value("temperature")),
            ("air-temperature", ground.readings.value("air-temperature")),
            ("species", level(ground, "temperature", Side::Low)),
        ],
        |[now, air, low]| {
            if air >= low || now <= low {
                return (now <= low).then_some((0.0, 0.0));
            }
            let way = ((now - air) / (low - air)).ln();
            Some((way / COOLING.1, way / COOLING.0))
        },
    )
}

fn first_day(points: &[Point], passed: impl Fn(&Point) -> bool) -> f64 {
    points.iter().find(|p| passed(p)).map_or(AHEAD, |p| p.t)
}

/// Days to harmful un-ionized ammonia when the filter is dead and feeding goes on.
fn filter_dies(ground: &Ground<'_>) -> Standing {
    let harmful = level(ground, "un-ionized-ammonia", Side::High);
    let fed = ground.begin.usual_feed_kg;
    Standing::new("days-without-filter", "days", &["TIMMONS", "EMER75"]).from(
        [
            ("feed_kg_per_day", fed),
            ("ph", ground.readings.value("ph")),
            ("temperature", ground.readings.value("temperature")),
            ("total-ammonia", ground.readings.value("total-ammonia")),
            ("species", harmful),
        ],
        |[_, _, _, _, harmful]| {
            let dead = ground.begin.with_bacteria(0.0, 0.0);
            let days = |share: f64| -> Option<f64> {
                let way = ground.way(crate::course::plan::Kind::Feed, Gas::Usual, &dead);
                let actions = [Action {
                    at: 0.0,
                    deed: Deed::Feed(share),
                }];
                let points = ground.course(&way, &actions, AHEAD, ORDINARY)?;
                Some(first_day(&points, |p| p.un_ionized > harmful))
            };
            let k = &ground.knowledge.pacing.kinetics.ammonia_per_protein;
            Some((days(k.high / k.value)?, days(k.low / k.value)?))
        },
    )
}

/// Days until alkalinity is down to where nitrification slows by half, when no base is given: with nothing given back, and
/// with half of it.
fn alkalinity_days(ground: &Ground<'_>) -> Standing {
    let protein = ground.site.feed_protein_percent;
    Standing::new("days-of-alkalinity", "days", &["EBEL06", "SRAC454r"]).from(
        [
            ("alkalinity", ground.readings.value("alkalinity")),
            ("volume_l", ground.site.volume_l),
            ("feed_kg_per_day", ground.begin.usual_feed_kg),
            ("feed_protein_percent", protein),
        ],
        |[alkalinity, volume, kg, protein]| {
            let floor = ground.knowledge.pacing.kinetics.alkalinity_half.value;
            let least = feed::days_of_alkalinity(volume, alkalinity, floor, kg, protein).ok()?;
            Some((least, 2.0 * least))
        },
    )
}

/// What the filter could turn over in the coldest month, as a multiple of what the feed gives.
fn nitrification_margin(ground: &Ground<'_>, year: Year) -> Standing {
    let area = crate::course::projection::area(ground.knowledge, ground.site);
    let protein = ground.site.feed_protein_percent;
    Standing::new(
        "nitrification-margin-coldest",
        "times",
        &["water::biofilter"],
    )
    .from(
        [
            ("biofilter_area_m2", area),
            ("coldest month", year.coldest),
            ("feed_kg_per_day", ground.begin.usual_feed_kg),
            ("feed_protein_percent", protein),
        ],
        |[area, t, kg, protein]| {
            let conditions = Conditions {
                temperature: t.clamp(0.0, 36.0),
                ph: ground.begin.ph.clamp(5.0, 9.0),
                dissolved_oxygen: Part::Oxygen.of(&ground.begin.state),
                total_ammonia: ground.pace().feed_ammonia.value,
                alkalinity: None,
                adapted: true,
            };
            let margin =
                biofilter::capacity(area, &conditions).ok()? / feed::ammonia(kg, protein).ok()?;
            // The formula is good to about a factor of two.
            Some((margin / 2.0, margin * 2.0))
        },
    )
}

/// What the aeration gives on the hottest day, as a multiple of what is asked.
fn aeration_margin(ground: &Ground<'_>, year: Year) -> Standing {
    Standing::new("aeration-margin-hottest", "times", &["BENSON84", "TIMMONS"]).from(
        [
            ("aeration_kg_o2_per_day", ground.site.aeration_kg_o2_per_day),
            ("hottest day", year.hottest),
            ("feed_kg_per_day", ground.begin.usual_feed_kg),
            ("low-oxygen", ground.target("dissolved-oxygen", Side::Low)),
        ],
        |[rated, t, kg, wanted]| {
            let now = Part::Temperature.of(&ground.begin.state);
            let full = |t: f64| {
                oxygen::solubility(t.clamp(0.0, 40.0), 0.0, ground.begin.farm.pressure).ok()
            };
            // Rated at 5 mg/L in water as it is now; the pull goes with the distance to saturation.
            let pull = (full(t)? - wanted).max(0.0) / (full(now)? - 5.0).max(0.5);
            let (less, more) = feed::oxygen_per_feed(feed::OxygenFor::WholeSystem);
            Some((rated * pull / (more * kg), rated * pull / (less * kg)))
        },
    )
}

/// Grams of feed for each square meter of plants, as shares of the usual range: below 1 at the low end is little feed.
fn feed_per_area(ground: &Ground<'_>) -> Standing {
    Standing::new("feed-per-plant-area", "g/m2/day", &["FAO-bal", "RAK07"]).from(
        [
            ("feed_kg_per_day", ground.begin.usual_feed_kg),
            (
                "plant_area_m2",
                ground.site.plant_area_m2.filter(|a| *a > 0.0),
            ),
        ],
        |[kg, area]| Some((1000.0 * kg / area, 1000.0 * kg / area)),
    )
}
