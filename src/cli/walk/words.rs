//! What the walk says by itself.

use crate::history::answers::Happened;
use crate::knowledge::Knowledge;
use crate::render::amount;
use crate::site::Site;
use crate::walk::{Answer, Ask, Given, Stop, Walk};

/// What can be typed at any question.
pub(super) const KEYS: &str = "At any question: Enter  don't know, c  can't measure or look now, b  back, w  why this question, s  stop and tell me what you think.";

/// Why asking stops.
pub(super) fn stopped(knowledge: &Knowledge, stop: Stop) -> String {
    match stop {
        Stop::StandsOut(cause) => format!(
            "I stop asking: one cause stands out. {}.",
            knowledge[cause].name
        ),
        Stop::NothingWorthAsking => {
            "I stop asking: no question left is worth its effort.".to_owned()
        }
        Stop::SameSteps => {
            "I stop asking: the first steps would be the same whatever you answer.".to_owned()
        }
        Stop::EnoughAsked => {
            "I stop asking: enough was asked for now. What would still tell most is on the page."
                .to_owned()
        }
    }
}

/// First aid, as far as it is known now.
pub(super) fn first_aid(walk: &Walk<'_>) -> Option<String> {
    let steps = walk.first_aid();
    if steps.is_empty() {
        return None;
    }
    let mut text = "FIRST AID, NOW\n".to_owned();
    for (n, step) in steps.iter().enumerate() {
        text.push_str(&format!("{}  {}\n", n + 1, walk.knowledge()[*step].text));
    }
    text.push_str(&match walk.assess(&[], None).minutes_left {
        Some(0) => "There may be no minute left.".to_owned(),
        Some(minutes) => format!("There are {minutes} minutes at the least."),
        None => match lacking(walk) {
            lacks if lacks.is_empty() => String::new(),
            lacks => format!(
                "How many minutes there are can't be told without: {}.",
                lacks.join(", ")
            ),
        },
    });
    text.push_str("\nDo this first. Then go on answering.");
    Some(text)
}

/// What the minutes can't be reckoned without.
fn lacking(walk: &Walk<'_>) -> Vec<String> {
    let site = walk.assessor().site();
    let words = &walk.knowledge().vocabulary;
    let read = |id: &str| {
        let reading = words.reading(id)?;
        let unread = walk
            .engine()
            .memory()
            .reading(reading)
            .and_then(|t| t.newest())
            .is_none();
        unread.then(|| words[reading].name.clone())
    };
    let key = |missing: bool, key: &str| missing.then(|| format!("`{key}` in the site file"));
    [
        key(site.biomass_kg.is_none(), "biomass_kg"),
        key(site.volume_l.is_none(), "volume_l"),
        read("dissolved-oxygen"),
        read("temperature"),
    ]
    .into_iter()
    .flatten()
    .collect()
}

/// Why a question is asked.
pub(super) fn why(walk: &Walk<'_>, ask: Ask) -> String {
    let knowledge = walk.knowledge();
    let causes = walk.separates(ask);
    if causes.is_empty() {
        return "It tells little about any one cause, and something about many.".to_owned();
    }
    let mut text = "It would tell these apart:".to_owned();
    for cause in causes {
        let likely = walk.assessor().likely(walk.review().ranking.of(cause));
        text.push_str(&format!("\n-  {} ({likely} so far)", knowledge[cause].name));
    }
    text
}

/// What was answered, a line each.
pub(super) fn answered(knowledge: &Knowledge, site: &Site, given: &[Given]) -> String {
    let words = &knowledge.vocabulary;
    let line = |g: &Given| {
        let name = g.ask.name(words);
        let said = match (g.ask, g.answer) {
            (Ask::Reading(id), Answer::Number(value)) => amount(&words[id], value, site.units),
            (_, Answer::Seen(true)) => "yes".to_owned(),
            (_, Answer::Seen(false)) => "no".to_owned(),
            (_, Answer::Happened(Happened::Never)) => "did not happen".to_owned(),
            (_, Answer::Happened(Happened::Ago(age))) => {
                format!("{} ago", crate::assessment::span(age))
            }
            (_, Answer::Happened(Happened::At(time))) => {
                format!("{} ago", crate::assessment::span((g.time - time).max(0)))
            }
            (_, Answer::CannotMeasure) => "can't be measured now".to_owned(),
            _ => "don't know".to_owned(),
        };
        format!("-  {name}: {said}")
    };
    let lines: Vec<String> = given.iter().map(line).collect();
    format!("WHAT YOU ANSWERED\n{}", lines.join("\n"))
}
