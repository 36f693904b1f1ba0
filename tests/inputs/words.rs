//! A small vocabulary made by hand, and short ways to read a log with it.

use gillside::fault::Fault;
use gillside::history::log::{self, Input, Log};
use gillside::site::{Known, Site};
use gillside::vocabulary::{Event, Question, Reading, ReadingId, Sign, Vocabulary};

/// Readings: id, unit, plausible range.
const READINGS: &[(&str, &str, (f64, f64))] = &[
    ("temperature", "C", (-2.0, 45.0)),
    ("air-temperature", "C", (-40.0, 60.0)),
    ("ph", "pH", (2.5, 11.0)),
    ("dissolved-oxygen", "mg/L", (0.0, 30.0)),
    ("total-ammonia", "mg/L as N", (0.0, 300.0)),
    ("nitrite", "mg/L as N", (0.0, 200.0)),
    ("nitrate", "mg/L as N", (0.0, 3000.0)),
    ("alkalinity", "mg/L as CaCO3", (0.0, 1000.0)),
    ("chloride", "mg/L", (0.0, 25000.0)),
    ("salinity", "g/L", (0.0, 45.0)),
    ("redox", "mV", (-600.0, 1000.0)),
    ("feed", "kg/day", (0.0, 200000.0)),
    ("deaths", "count", (0.0, 1e7)),
    ("makeup-water", "L", (0.0, 1e8)),
];

const SIGNS: &[&str] = &[
    "fish-gasping",
    "fish-off-feed",
    "brown-gills",
    "water-green",
];
const EVENTS: &[&str] = &[
    "base-added",
    "heater-failed",
    "bed-maintenance",
    "power-cut",
];

/// The species and media that site files of the tests may name.
pub const SPECIES: &[&str] = &["nile-tilapia", "rainbow-trout", "channel-catfish"];
const MEDIA: &[&str] = &["pea-gravel", "plastic-carrier"];

fn reading(id: &str, unit: &str, plausible: (f64, f64), derived: bool) -> Reading {
    Reading {
        id: id.to_owned(),
        name: id.replace('-', " "),
        unit: unit.to_owned(),
        also: Vec::new(),
        derived,
        local: id == "dissolved-oxygen" || id == "deaths",
        per_interval: id == "deaths" || id == "makeup-water",
        resolution: 0.1,
        resolution_share: 0.0,
        plausible,
        good_for: 6 * 3600,
        decimals: 1,
        question: Question::default(),
        source: vec!["test".to_owned()],
    }
}

/// The vocabulary.
pub fn vocabulary() -> Vocabulary {
    let mut vocabulary = Vocabulary::default();
    for (id, unit, plausible) in READINGS {
        vocabulary.add_reading(reading(id, unit, *plausible, false));
    }
    vocabulary.add_reading(reading("oxygen-saturation", "%", (0.0, 240.0), true));
    for id in SIGNS {
        vocabulary.add_sign(Sign {
            id: (*id).to_owned(),
            name: id.replace('-', " "),
            background: 0.02,
            group: String::new(),
            alarming: true,
            local: true,
            good_for: 86_400,
            question: Question::default(),
            source: vec!["test".to_owned()],
        });
    }
    for id in EVENTS {
        vocabulary.add_event(Event {
            id: (*id).to_owned(),
            name: id.replace('-', " "),
            window_days: 7.0,
            question: Question::default(),
            source: vec!["test".to_owned()],
        });
    }
    vocabulary
}

/// The number of a reading.
pub fn id(name: &str) -> ReadingId {
    vocabulary().reading(name).unwrap()
}

/// Reads a site file.
pub fn site(text: &str) -> (Site, Vec<Fault>) {
    let vocabulary = vocabulary();
    let owned = |words: &[&str]| words.iter().map(|w| (*w).to_owned()).collect::<Vec<_>>();
    let (species, media) = (owned(SPECIES), owned(MEDIA));
    let known = Known {
        vocabulary: &vocabulary,
        species: &species,
        media: &media,
    };
    let source = gillside::fault::Source::new("site.toml", text);
    gillside::site::read(&source, &known)
}

/// Reads a site file that has no faults.
pub fn good_site(text: &str) -> Site {
    let (site, faults) = site(text);
    assert_eq!(faults, []);
    site
}

/// Reads one log with no site file.
pub fn read(text: impl Into<Vec<u8>>) -> Result<Log, Vec<Fault>> {
    read_at(&Site::default(), text)
}

/// Reads one log of a site.
pub fn read_at(site: &Site, text: impl Into<Vec<u8>>) -> Result<Log, Vec<Fault>> {
    log::read(
        vec![Input::text("log.csv", text)],
        &vocabulary(),
        site,
        None,
    )
}

/// What a reading says in every row: its amount, or `None`.
pub fn series(log: &Log, name: &str) -> Vec<Option<f64>> {
    let id = id(name);
    log.rows
        .iter()
        .map(|row| row.value(id).map(|v| v.amount))
        .collect()
}

/// The problems as `line:at column code`.
pub fn problems(log: &Log) -> Vec<String> {
    let show = |p: &log::Problem| {
        let column = p.column.as_deref().unwrap_or("-");
        format!("{}:{} {column} {}", p.line, p.at, p.code)
    };
    log.problems.iter().map(show).collect()
}

/// Unix seconds of an RFC 3339 time.
pub fn seconds(text: &str) -> i64 {
    text.parse::<jiff::Timestamp>().unwrap().as_second()
}
