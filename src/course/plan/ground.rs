//! What plans are made from: the rule base, the site, the readings and how far they can be trusted.

use super::value::{Kind, Refused, Trouble};
use super::words::{fill, short};
use crate::course::projection::{
    Begin, Chemistry, Exact, Extreme, Farm, Gas, Manner, NewWater, Point, Readings, State, run,
};
use crate::diagnosis::Ranking;
use crate::engine::Limits;
use crate::knowledge::{Knowledge, LimitLevel, PaceLimits, PaceWords, Side};
use crate::site::{Chlorination, Site};
use crate::water::carbonate::state::CACO3_PER_EQ;

/// A likely cause that doubts an instrument.
#[derive(Debug, Clone, PartialEq)]
pub struct Doubt {
    /// The reading it doubts.
    pub reading: String,
    /// The cause's name.
    pub cause: String,
    /// How likely it is.
    pub probability: f64,
}

/// The instruments that a ranking of causes doubts.
pub fn doubts(knowledge: &Knowledge, ranking: &Ranking) -> Vec<Doubt> {
    let least = knowledge.pacing.limits.instrument_doubt.value;
    knowledge
        .pacing
        .doubts
        .iter()
        .filter(|d| ranking.of(d.cause) >= least)
        .flat_map(|d| {
            d.readings.iter().map(|r| Doubt {
                reading: knowledge.vocabulary[*r].id.clone(),
                cause: knowledge[d.cause].name.clone(),
                probability: ranking.of(d.cause),
            })
        })
        .collect()
}

/// What plans are made from.
#[derive(Debug, Clone)]
pub struct Ground<'k> {
    /// The rule base.
    pub knowledge: &'k Knowledge,
    /// The site.
    pub site: &'k Site,
    /// Its limits.
    pub limits: &'k Limits<'k>,
    /// What is known of the water.
    pub readings: Readings<'k>,
    /// Instruments that are in doubt.
    pub doubts: Vec<Doubt>,
    /// A second method has confirmed the starting readings.
    pub confirmed: bool,
    /// Where the water starts.
    pub begin: Begin<'k>,
}

/// One way things may go: how gas passes, and which bacteria there are.
#[derive(Debug, Clone)]
pub struct Way<'k> {
    /// Gas.
    pub gas: Gas,
    /// The farm as it must be with those bacteria.
    pub farm: Farm<'k>,
    /// The water with those bacteria.
    pub state: State,
}

impl<'k> Ground<'k> {
    /// From a site and its readings.
    ///
    /// # Errors
    /// [`Trouble::Lacks`] without a volume.
    pub fn new(
        knowledge: &'k Knowledge,
        site: &'k Site,
        limits: &'k Limits<'k>,
        readings: Readings<'k>,
    ) -> Result<Self, Trouble> {
        let area = crate::course::projection::area(knowledge, site);
        let mut begin = Begin::new(knowledge, site, area, &readings)?;
        // A plan puts the temperature where it wants it, or leaves it; it doesn't guess the weather.
        begin.farm.drift = 0.0; // `farm_with` keeps it
        Ok(Self {
            knowledge,
            site,
            limits,
            readings,
            doubts: Vec::new(),
            confirmed: false,
            begin,
        })
    }

    /// Limits of pace.
    pub fn pace(&self) -> &'k PaceLimits {
        &self.knowledge.pacing.limits
    }

    /// Words of plans.
    pub fn words(&self) -> &'k PaceWords {
        &self.knowledge.pacing.words
    }

    /// Unix seconds.
    pub fn now(&self) -> i64 {
        self.readings.now()
    }

    /// Whether the fish are of warm water; `None` when no species is known.
    pub fn warm(&self) -> Option<bool> {
        let mut known = self
            .knowledge
            .species
            .iter()
            .filter(|s| self.site.species.contains(&s.id))
            .map(|s| s.warm)
            .peekable();
        known.peek()?;
        Some(known.all(|warm| warm))
    }

    /// Whether plants grow in the water.
    pub fn has_plants(&self) -> bool {
        self.site.plant_area_m2.is_some_and(|a| a > 0.0) || !self.site.crops.is_empty()
    }

    /// A species' limit of a reading.
    pub fn species(&self, id: &str, level: LimitLevel, side: Side) -> Option<f64> {
        let reading = self.knowledge.vocabulary.reading(id)?;
        self.limits.species(reading, level, side)
    }

    /// The comfort band of a reading.
    pub fn target(&self, id: &str, side: Side) -> Option<f64> {
        let reading = self.knowledge.vocabulary.reading(id)?;
        self.limits.target(reading, side)
    }

    /// Un-ionized ammonia that no plan may pass: the limit of pace, or the species' comfort limit where that is lower.
    pub fn un_ionized_limit(&self) -> f64 {
        let general = self.pace().un_ionized_ammonia.for_fish(self.warm());
        let own = if self.warm().is_some() {
            self.species("un-ionized-ammonia", LimitLevel::Comfort, Side::High)
        } else {
            None
        };
        own.map_or(general, |o| o.min(general))
    }

    /// Checks that readings are there, and whether a plan may start from them: not stale, and their instruments not in
    /// doubt, unless confirmed.
    ///
    /// # Errors
    /// [`Trouble::Lacks`] with all that are missing.
    pub fn trust(&self, ids: &[&str]) -> Result<Option<Refused>, Trouble> {
        let missing: Vec<String> = ids
            .iter()
            .filter(|id| self.readings.get(id).is_none())
            .map(|id| (*id).to_owned())
            .collect();
        if !missing.is_empty() {
            return Err(Trouble::Lacks(missing));
        }
        if self.confirmed {
            return Ok(None);
        }
        let (words, limits) = (self.words(), self.pace());
        let name = |id: &str| {
            let vocabulary = &self.knowledge.vocabulary;
            vocabulary
                .reading(id)
                .map_or(id.to_owned(), |r| vocabulary[r].name.clone())
        };
        for id in ids {
            let Some(known) = self.readings.get(id) else {
                continue;
            };
            if self.readings.is_stale(id, known) {
                let age = crate::course::span(self.now() - known.time);
                return Ok(Some(Refused {
                    limit: "stale-reading".to_owned(),
                    reason: fill(&words.stale, &[("reading", name(id)), ("age", age)]),
                    instead: words.stale_instead.clone(),
                }));
            }
            let least = limits.instrument_doubt.value;
            let doubt = self
                .doubts
                .iter()
                .filter(|d| d.reading == **id && d.probability >= least)
                .max_by(|a, b| a.probability.total_cmp(&b.probability));
            if let Some(doubt) = doubt {
                return Ok(Some(Refused {
                    limit: limits.instrument_doubt.id.clone(),
                    reason: fill(
                        &words.doubted,
                        &[("reading", name(id)), ("cause", doubt.cause.clone())],
                    ),
                    instead: limits.instrument_doubt.instead.clone(),
                }));
            }
        }
        Ok(None)
    }

    /// The ways things may go that a plan has to keep its limits in: gas slow and at once, bacteria few and many. What a dose does before any
    /// gas moves shows in every way, at the dose itself.
    pub fn ways(&self, kind: Kind) -> Vec<Way<'k>> {
        let begin = &self.begin;
        let few = begin.extreme(Extreme::Few, Extreme::Few);
        let many = begin.extreme(Extreme::Many, Extreme::Many);
        let way = |gas, state: State| self.way(kind, gas, &state);
        // What breaks limits most often comes first: whoever tries stops at the first that does.
        let mut ways = vec![
            way(Gas::Open, few),
            way(Gas::Usual, self.begin.state),
            way(Gas::Slow, few),
        ];
        if begin.capacity.is_some() {
            // The first step may do much and the second little: then nitrite is what comes.
            let uneven = begin.extreme(Extreme::Many, Extreme::Few);
            ways.push(way(Gas::Slow, many));
            ways.push(way(Gas::Usual, uneven));
        }
        ways
    }

    /// One way, from a state.
    pub fn way(&self, kind: Kind, gas: Gas, state: &State) -> Way<'k> {
        Way {
            gas,
            farm: super::replay::farm(self, kind, state),
            state: *state,
        }
    }

    /// Runs one way.
    pub fn course(
        &self,
        way: &Way<'_>,
        actions: &[crate::course::projection::Action],
        days: f64,
        exact: Exact,
    ) -> Option<Vec<Point>> {
        let manner = Manner {
            gas: way.gas,
            exact,
            feed: self.begin.feed,
        };
        run(&way.farm, &way.state, actions, days, &manner).ok()
    }

    /// Equilibrium constants of the water now.
    pub fn chemistry(&self) -> Option<Chemistry> {
        let farm = &self.begin.farm;
        let t = crate::course::projection::Part::Temperature.of(&self.begin.state);
        Chemistry::at(t, farm.ionic, farm.salinity, farm.pressure)
    }

    /// The makeup water, where the site tells its temperature, pH and alkalinity.
    ///
    /// # Errors
    /// [`Trouble::Lacks`] with what it does not tell.
    pub fn makeup(&self) -> Result<NewWater, Trouble> {
        let makeup = &self.site.makeup;
        let mut missing = Vec::new();
        for (key, value) in [
            ("makeup.temperature", makeup.temperature),
            ("makeup.ph", makeup.ph),
            ("makeup.alkalinity", makeup.alkalinity),
        ] {
            if value.is_none() {
                missing.push(key.to_owned());
            }
        }
        let (Some(temperature), Some(ph), Some(alkalinity)) =
            (makeup.temperature, makeup.ph, makeup.alkalinity)
        else {
            return Err(Trouble::Lacks(missing));
        };
        let ionic = alkalinity / CACO3_PER_EQ;
        let farm = &self.begin.farm;
        let chem = Chemistry::at(temperature, ionic, 0.0, farm.pressure)
            .ok_or_else(|| Trouble::Lacks(vec!["makeup.temperature".to_owned()]))?;
        Ok(NewWater {
            temperature,
            alkalinity,
            carbon: chem.carbon(ph, alkalinity, 0.0),
            ammonia: 0.0,
            nitrite: 0.0,
            nitrate: 0.0,
            chloride: makeup.chloride.unwrap_or(0.0),
            sodium: 0.0,
            oxygen: 0.9 * chem.saturation,
        })
    }

    /// Whether the makeup water is known to hold no chlorine.
    pub fn makeup_is_clean(&self, dechlorinated: bool) -> bool {
        dechlorinated || self.site.makeup.chlorination == Some(Chlorination::None)
    }

    /// A reading as people say it: value, unit.
    pub fn shown(&self, id: &str, value: f64) -> String {
        let vocabulary = &self.knowledge.vocabulary;
        match vocabulary.reading(id).map(|r| vocabulary[r].unit.as_str()) {
            Some("C") => super::words::degrees(self.site.units, value),
            Some("pH") => format!("{value:.2}"),
            Some(unit) => format!("{} {unit}", short(value)),
            None => short(value),
        }
    }

    /// The name of a reading, for the middle of a sentence.
    pub fn name(&self, id: &str) -> String {
        let vocabulary = &self.knowledge.vocabulary;
        vocabulary
            .reading(id)
            .map_or(id.to_owned(), |r| vocabulary[r].name.clone())
    }
}
