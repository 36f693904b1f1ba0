//! Walks a site file: every key, every fault with its place.

mod lists;
mod numbers;
mod tables;
mod texts;

use std::path::PathBuf;

use jiff::civil::Date;
use jiff::tz::TimeZone;

use super::{Crop, Site, Units};
use crate::decode::{self, Section};
use crate::fault::{Fault, Source, did_you_mean, shown};
use crate::vocabulary::Vocabulary;
use crate::water::oxygen::ELEVATION;

/// The words that a site file may use, as the rule base has them.
#[derive(Debug, Clone, Copy)]
pub struct Known<'k> {
    /// Readings, for `[targets]`, `[columns]` and `[makeup]`.
    pub vocabulary: &'k Vocabulary,
    /// Species ids.
    pub species: &'k [String],
    /// Kinds of media.
    pub media: &'k [String],
}

/// Reads a site file. The site holds what was understood; it is only to be used when there are no faults.
pub fn read(source: &Source, known: &Known<'_>) -> (Site, Vec<Fault>) {
    decode::read(source, |root| walk(root, known))
}

fn walk(root: &mut Section<'_>, known: &Known<'_>) -> Site {
    root.required("name");
    Site {
        name: texts::words(root, "name"),
        log: inside(root, "log"),
        incidents: inside(root, "incidents"),
        timezone: timezone(root).unwrap_or(TimeZone::UTC),
        units: texts::one_of(root, "units", Units::WORDS, Units::of).unwrap_or(Units::Metric),
        species: lists::known(root, "species", known.species),
        crops: lists::each_of(root, "crops", Crop::WORDS, Crop::of),
        started: started(root),
        elevation_m: numbers::within(root, "elevation_m", ELEVATION.low, ELEVATION.high),
        volume_l: numbers::above_zero(root, "volume_l"),
        biomass_kg: numbers::not_negative(root, "biomass_kg"),
        feed_kg_per_day: numbers::not_negative(root, "feed_kg_per_day"),
        feed_protein_percent: numbers::within(root, "feed_protein_percent", 0.0, 100.0),
        biofilter_area_m2: numbers::above_zero(root, "biofilter_area_m2"),
        plant_area_m2: numbers::not_negative(root, "plant_area_m2"),
        aeration_kg_o2_per_day: numbers::not_negative(root, "aeration_kg_o2_per_day"),
        heated: root.flag("heated"),
        covered_media: root.flag("covered_media"),
        media: lists::media(root, known.media),
        makeup: tables::makeup(root, known.vocabulary),
        targets: tables::targets(root, known.vocabulary),
        columns: tables::columns(root, known.vocabulary),
        shift: lists::shifts(root),
        place: lists::places(root),
        phone: lists::phones(root),
        equipment: tables::equipment(root),
    }
}

/// A path that stays inside the folder of the site file.
fn inside(root: &mut Section<'_>, key: &str) -> Option<PathBuf> {
    let node = root.node(key)?;
    let text = node.text()?;
    match inside_path(&text) {
        Some(path) => Some(path),
        None => {
            node.fault(
                "path-outside",
                format!(
                    "`{key}` is `{}`, which is not a path inside the site file's folder",
                    shown(&text)
                ),
                "write a relative path without `..`, such as `log.csv`",
            );
            None
        }
    }
}

/// The path, when it is relative, not empty, and never leaves its folder on any system.
pub(super) fn inside_path(text: &str) -> Option<PathBuf> {
    let drive = text.as_bytes().get(1) == Some(&b':');
    let rooted = text.starts_with(['/', '\\']);
    let climbs = text.split(['/', '\\']).any(|part| part.trim() == "..");
    let named = text
        .split(['/', '\\'])
        .any(|p| !p.trim().is_empty() && p != ".");
    let plain = !text.chars().any(char::is_control);
    (named && plain && !drive && !rooted && !climbs).then(|| PathBuf::from(text))
}

fn timezone(root: &mut Section<'_>) -> Option<TimeZone> {
    let node = root.node("timezone")?;
    let name = node.text()?;
    if let Ok(zone) = TimeZone::get(&name)
        && !zone.is_unknown()
    {
        return Some(zone);
    }
    let names: Vec<String> = jiff::tz::db().available().map(|n| n.to_string()).collect();
    node.fault(
        "unknown-timezone",
        format!("no time zone is called `{}`", shown(&name)),
        did_you_mean(
            &name,
            names.iter().map(String::as_str),
            "write an IANA name such as `Europe/Lisbon`",
        ),
    );
    None
}

fn started(root: &mut Section<'_>) -> Option<Date> {
    let node = root.node("started")?;
    let text = match node.value() {
        decode::Value::String(s) => s.to_string(),
        _ => node.date()?,
    };
    let day = text.get(..10).unwrap_or(&text);
    match day.parse::<Date>() {
        Ok(date) if text.len() == 10 => Some(date),
        _ => {
            node.fault(
                "bad-date",
                format!("`started` is `{}`, which is not a date", shown(&text)),
                "write the day as YYYY-MM-DD, such as 2025-03-01",
            );
            None
        }
    }
}
