//! What a site settles before anything is read: named limits, and tests of the site file itself.

use super::Degree;
use crate::knowledge::{Bound, Knowledge, Limit, LimitLevel, Side, SiteTest, Species};
use crate::site::Site;
use crate::vocabulary::ReadingId;

/// The limits that hold at one site.
#[derive(Debug, Clone)]
pub struct Limits<'k> {
    knowledge: &'k Knowledge,
    species: Vec<&'k Species>,
    /// No species is known: the strictest limits of all hold, except for temperature.
    cautious: bool,
    targets: Vec<(ReadingId, Option<f64>, Option<f64>)>,
}

impl<'k> Limits<'k> {
    /// The limits of the site's species, or the strictest there are when none is known.
    pub fn new(knowledge: &'k Knowledge, site: &Site) -> Self {
        let species: Vec<&Species> = knowledge
            .species
            .iter()
            .filter(|s| site.species.contains(&s.id))
            .collect();
        let cautious = species.is_empty();
        Self {
            knowledge,
            species: if cautious {
                knowledge.species.iter().collect()
            } else {
                species
            },
            cautious,
            targets: site
                .targets
                .iter()
                .map(|(r, band)| (*r, band.low, band.high))
                .collect(),
        }
    }

    /// Readings for which an unknown species takes the strictest limit; others then have none.
    const CAUTIOUS: [&'static str; 4] = [
        "dissolved-oxygen",
        "un-ionized-ammonia",
        "nitrite",
        "carbon-dioxide",
    ];

    /// The species' limit: the strictest of the site's species.
    pub fn species(&self, reading: ReadingId, level: LimitLevel, side: Side) -> Option<f64> {
        let id = &self.knowledge.vocabulary[reading].id;
        if self.cautious && !Self::CAUTIOUS.contains(&id.as_str()) {
            return None;
        }
        let all = self
            .species
            .iter()
            .filter_map(|s| s.limit(reading, level, side));
        match side {
            Side::Low => all.reduce(f64::max),
            Side::High => all.reduce(f64::min),
        }
    }

    /// The comfort band: the site's, else the species', else the knowledge base's.
    pub fn target(&self, reading: ReadingId, side: Side) -> Option<f64> {
        let own =
            self.targets.iter().find(|(r, ..)| *r == reading).and_then(
                |(_, low, high)| match side {
                    Side::Low => *low,
                    Side::High => *high,
                },
            );
        own.or_else(|| self.species(reading, LimitLevel::Comfort, side))
            .or_else(|| self.knowledge.comfort.get(&(reading, side as u8)).copied())
    }

    /// The number a bound stands for here, if it has one.
    pub fn resolve(&self, bound: Bound) -> Option<f64> {
        match bound {
            Bound::Number(value) => Some(value),
            Bound::Named(Limit::Species(reading, level, side)) => {
                self.species(reading, level, side)
            }
            Bound::Named(Limit::Target(reading, side)) => self.target(reading, side),
        }
    }
}

/// Settles a test of the site file.
pub(super) fn settle(site: &Site, key: &str, asks: &SiteTest, knowledge: &Knowledge) -> Degree {
    match asks {
        SiteTest::Is(wanted) => match flag(site, key, knowledge) {
            Some(found) => Degree::of(found == *wanted),
            None => Degree::UNKNOWN,
        },
        SiteTest::Word(wanted) => match word(site, key) {
            Some(found) => Degree::of(found == wanted),
            None => Degree::UNKNOWN,
        },
        SiteTest::Has(wanted) => match list(site, key) {
            Some(found) => Degree::of(found.iter().any(|w| w == wanted)),
            None => Degree::UNKNOWN,
        },
        SiteTest::Below(start, full) => ramp(number(site, key), *start, *full, false),
        SiteTest::Above(start, full) => ramp(number(site, key), *start, *full, true),
    }
}

fn ramp(value: Option<f64>, start: f64, full: f64, rising: bool) -> Degree {
    let Some(value) = value else {
        return Degree::UNKNOWN;
    };
    if (full - start).abs() < f64::EPSILON {
        return Degree::of(if rising { value > start } else { value < start });
    }
    Degree::known((value - start) / (full - start))
}

fn flag(site: &Site, key: &str, knowledge: &Knowledge) -> Option<bool> {
    match key {
        "heated" => site.heated,
        "covered_media" => site.covered_media,
        "equipment.solids_filter" => site.equipment.solids_filter,
        "equipment.standby_air" => site.equipment.standby_air,
        "equipment.pure_oxygen" => site.equipment.pure_oxygen,
        "equipment.backup_power" => site.equipment.backup_power,
        "warm" => {
            let mut known = knowledge
                .species
                .iter()
                .filter(|s| site.species.contains(&s.id))
                .map(|s| s.warm)
                .peekable();
            known.peek()?;
            Some(known.all(|warm| warm))
        }
        _ => None,
    }
}

fn word<'s>(site: &'s Site, key: &str) -> Option<&'s str> {
    match key {
        "makeup.chlorination" => site.makeup.chlorination.map(|c| c.word()),
        "units" => Some(site.units.word()),
        _ => None,
    }
}

fn list(site: &Site, key: &str) -> Option<Vec<String>> {
    let words: Vec<String> = match key {
        "species" => site.species.clone(),
        "crops" => site.crops.iter().map(|c| c.word().to_owned()).collect(),
        "equipment.substances" => return site.equipment.substances.clone(),
        _ => return None,
    };
    (!words.is_empty()).then_some(words)
}

fn number(site: &Site, key: &str) -> Option<f64> {
    match key {
        "elevation_m" => site.elevation_m,
        "volume_l" => site.volume_l,
        "biomass_kg" => site.biomass_kg,
        "feed_kg_per_day" => site.feed_kg_per_day,
        "feed_protein_percent" => site.feed_protein_percent,
        "biofilter_area_m2" => site.biofilter_area_m2,
        "plant_area_m2" => site.plant_area_m2,
        "aeration_kg_o2_per_day" => site.aeration_kg_o2_per_day,
        "makeup.ph" => site.makeup.ph,
        "makeup.alkalinity" => site.makeup.alkalinity,
        "makeup.chloride" => site.makeup.chloride,
        "makeup.temperature" => site.makeup.temperature,
        _ => None,
    }
}
