//! Farms and waters for the tests of plans.

#![allow(dead_code)] // each test file uses its part

use gillside::course::plan::{Ground, Plan, Trouble, Wish, plan};
use gillside::course::projection::Readings;
use gillside::engine::Limits;
use gillside::knowledge::{self, Knowledge};
use gillside::site::{Chlorination, Crop, Makeup, Shift, Site};

/// 2026-03-04 08:00 UTC.
pub const NOW: i64 = 1_772_611_200;

pub fn rule_base() -> Knowledge {
    knowledge::load(&knowledge::embedded(), &[]).unwrap_or_else(|f| {
        panic!(
            "{}",
            f.iter()
                .map(ToString::to_string)
                .collect::<Vec<_>>()
                .join("\n")
        )
    })
}

pub fn shift(name: &str, start: i8, end: i8) -> Shift {
    Shift {
        name: name.to_owned(),
        start: jiff::civil::time(start, 0, 0, 0),
        end: jiff::civil::time(end, 0, 0, 0),
    }
}

/// An invented greenhouse with tilapia and lettuce.
pub fn greenhouse() -> Site {
    Site {
        name: Some("Hillfoot greenhouse 2".to_owned()),
        species: vec!["nile-tilapia".to_owned()],
        crops: vec![Crop::LeafyGreens],
        volume_l: Some(12_000.0),
        biomass_kg: Some(320.0),
        feed_kg_per_day: Some(4.5),
        feed_protein_percent: Some(32.0),
        biofilter_area_m2: Some(2600.0),
        plant_area_m2: Some(90.0),
        aeration_kg_o2_per_day: Some(9.0),
        makeup: Makeup {
            chlorination: Some(Chlorination::None),
            ph: Some(7.2),
            alkalinity: Some(60.0),
            chloride: Some(20.0),
            temperature: Some(22.0),
        },
        shift: vec![shift("early", 6, 14), shift("late", 14, 22)],
        ..Site::default()
    }
}

pub const WATER: [(&str, f64); 10] = [
    ("temperature", 24.0),
    ("ph", 6.6),
    ("alkalinity", 40.0),
    ("total-ammonia", 0.4),
    ("nitrite", 0.1),
    ("nitrate", 40.0),
    ("chloride", 20.0),
    ("sodium", 12.0),
    ("dissolved-oxygen", 6.5),
    ("feed", 4.5),
];

pub fn given(changes: &[(&str, f64)]) -> Vec<(String, f64)> {
    let mut all: Vec<(String, f64)> = WATER.iter().map(|(i, v)| ((*i).to_owned(), *v)).collect();
    all.extend(changes.iter().map(|(i, v)| ((*i).to_owned(), *v)));
    all
}

/// Plans on a ground and looks at the result with it.
pub fn on<T>(
    k: &Knowledge,
    site: &Site,
    water: &[(&str, f64)],
    wish: &Wish,
    look: impl FnOnce(&Ground<'_>, Result<Plan, Trouble>) -> T,
) -> T {
    let limits = Limits::new(k, site);
    let readings = Readings::new(&k.vocabulary, None, NOW).with(given(water));
    let ground = Ground::new(k, site, &limits, readings).unwrap();
    let made = plan(&ground, wish);
    look(&ground, made)
}

pub fn made(k: &Knowledge, site: &Site, water: &[(&str, f64)], wish: &Wish) -> Plan {
    on(k, site, water, wish, |_, p| {
        p.unwrap_or_else(|t| panic!("{t}"))
    })
}
