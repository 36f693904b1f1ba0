//! The card for the wall: how long there is when something stops, and the first three things to do.

use crate::engine::Limits;
use crate::history::log::Log;
use crate::knowledge::{CauseId, Knowledge, LimitLevel, Side, Step, When};
use crate::site::Site;
use crate::water::{oxygen, respiration};

/// Something that may stop.
#[derive(Debug, Clone, PartialEq)]
pub struct Stop {
    /// What stops: `air`, `pump`, `heat` or `power`.
    pub what: &'static str,
    /// Minutes until fish are short of oxygen: from the water as it is on a bad day, rounded down. `None`: the site file
    /// does not allow to reckon it, or oxygen is not what decides.
    pub minutes: Option<u32>,
    /// Ids of the steps.
    pub steps: Vec<String>,
    /// What to do first, at most three things.
    pub texts: Vec<String>,
}

/// The card.
#[derive(Debug, Clone, PartialEq)]
pub struct Card {
    /// What may stop.
    pub stops: Vec<Stop>,
    /// The line for people, which comes before everything.
    pub people: Option<String>,
    /// Cautions for people.
    pub cautions: Vec<String>,
    /// What the site file does not say and the minutes need.
    pub lacks: Vec<&'static str>,
    /// The temperature that was reckoned with, C.
    pub temperature: Option<f64>,
}

/// What stops, the causes that it is, whether the oxygen of the water decides how long there is, and the step that goes
/// first whatever it is worth: without power, air that needs none. Of two causes the steps of both count.
const STOPS: [(&str, &[&str], bool, &str); 4] = [
    ("air", &["aeration-failure"], true, ""),
    ("pump", &["circulation-stopped"], false, ""),
    ("heat", &["water-chilled"], false, ""),
    (
        "power",
        &["aeration-failure", "circulation-stopped"],
        true,
        "backup-oxygen",
    ),
];
/// The line for people, where no step is marked as such.
const PEOPLE: &str = "people-first";
/// Things to do.
const FIRST: usize = 3;
/// Cautions about people on the card.
const CAUTIONS: usize = 3;
/// Share of the time the fish alone would take: bacteria breathe too, and the stock is known roughly (the same share as in
/// a diagnosis).
const SHARE: f64 = 0.5;
/// Oxygen that is there when it happens, as a share of saturation: an ordinary hour after feeding (common practice).
const THERE: f64 = 0.7;
/// Oxygen that fish of no known species are short at, mg/L (common practice: warm-water fish).
const SHORT: f64 = 2.5;

/// Makes the card of a site. The log tells how warm the water gets.
pub fn card(knowledge: &Knowledge, site: &Site, limits: &Limits<'_>, log: Option<&Log>) -> Card {
    let temperature = warmest(knowledge, log).or_else(|| {
        let reading = knowledge.vocabulary.reading("temperature")?;
        limits.target(reading, Side::High)
    });
    let mut lacks = Vec::new();
    for (key, known) in [
        ("volume_l", site.volume_l.is_some()),
        ("biomass_kg", site.biomass_kg.is_some()),
        ("species, or a log of temperatures", temperature.is_some()),
    ] {
        if !known {
            lacks.push(key);
        }
    }
    let minutes = minutes(knowledge, site, limits, temperature);
    Card {
        stops: STOPS
            .iter()
            .map(|(what, causes, by_oxygen, opening)| {
                let steps = first_steps(knowledge, site, causes, opening);
                Stop {
                    what,
                    minutes: minutes.filter(|_| *by_oxygen),
                    steps: steps.iter().map(|s| s.id.clone()).collect(),
                    texts: steps.iter().map(|s| s.text.clone()).collect(),
                }
            })
            .collect(),
        people: knowledge
            .steps
            .iter()
            .find(|s| s.people_first || s.id == PEOPLE)
            .map(|s| s.text.clone()),
        cautions: knowledge
            .cautions
            .iter()
            .filter(|c| c.about == "people")
            .take(CAUTIONS)
            .map(|c| c.text.clone())
            .collect(),
        lacks,
        temperature,
    }
}

/// The warmest the log has seen the water: the bad day.
fn warmest(knowledge: &Knowledge, log: Option<&Log>) -> Option<f64> {
    let reading = knowledge.vocabulary.reading("temperature")?;
    let values = log?.rows.iter().filter_map(|r| r.value(reading));
    values.map(|v| v.amount).reduce(f64::max)
}

fn minutes(
    knowledge: &Knowledge,
    site: &Site,
    limits: &Limits<'_>,
    temperature: Option<f64>,
) -> Option<u32> {
    let warm = temperature?;
    let pressure = oxygen::pressure_at(site.elevation_m.unwrap_or(0.0)).ok()?;
    let full = oxygen::solubility(warm.clamp(0.0, 40.0), 0.0, pressure).ok()?;
    let short = knowledge
        .vocabulary
        .reading("dissolved-oxygen")
        .and_then(|r| limits.species(r, LimitLevel::Lethal, Side::Low))
        .map_or(SHORT, |lethal| lethal.max(SHORT));
    let stated = knowledge
        .species
        .iter()
        .filter(|s| site.species.contains(&s.id))
        .filter_map(|s| s.oxygen_use)
        .reduce(f64::max);
    let each =
        stated.or_else(|| respiration::oxygen_use(warm, respiration::USUAL_FISH_G, true).ok())?;
    let fish_alone =
        respiration::minutes_until(THERE * full, short, site.biomass_kg?, site.volume_l?, each)
            .ok()?;
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // clamped
    let whole = (fish_alone * SHARE).floor().clamp(0.0, 24.0 * 60.0) as u32;
    Some(whole)
}

/// What helps most under these causes, of what is done at once and the site has the equipment for.
fn first_steps<'k>(
    knowledge: &'k Knowledge,
    site: &Site,
    causes: &[&str],
    opening: &str,
) -> Vec<&'k Step> {
    let causes: Vec<CauseId> = causes.iter().filter_map(|c| knowledge.cause(c)).collect();
    let has = |step: &Step| match step.equipment.as_deref() {
        Some("solids_filter") => site.equipment.solids_filter != Some(false),
        Some("standby_air") => site.equipment.standby_air != Some(false),
        Some("pure_oxygen") => site.equipment.pure_oxygen == Some(true),
        Some("backup_power") => site.equipment.backup_power != Some(false),
        _ => true,
    };
    let good = |step: &Step| -> f64 {
        let sum = |amounts: &std::collections::BTreeMap<CauseId, f64>| -> f64 {
            causes.iter().filter_map(|c| amounts.get(c)).sum()
        };
        sum(&step.helps) - sum(&step.harms)
    };
    let mut steps: Vec<(&Step, f64)> = knowledge
        .steps
        .iter()
        .filter(|s| {
            s.when == When::Now && !s.people_first && s.id != PEOPLE && !s.temptation && has(s)
        })
        .map(|s| (s, good(s)))
        .filter(|(_, good)| *good > 0.0)
        .collect();
    // Of equal good the one that is done sooner.
    steps.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.effort.total_cmp(&b.0.effort)));
    steps.sort_by_key(|(step, _)| step.id != opening); // stable
    steps.into_iter().take(FIRST).map(|s| s.0).collect()
}
