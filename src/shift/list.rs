//! The checklist of one shift, in the order of a walk.

use super::blank::Blank;
use super::pending::{Pending, pending};
use super::rounds::due;
use super::trend::{Trend, trends};
use super::window::Window;
use crate::assessment::Assessment;
use crate::course;
use crate::history::balance::inputs;
use crate::history::log::Log;
use crate::incident::{Check, Incident, PlanStep, Taken};
use crate::site::PlaceKind;
use crate::vocabulary::ReadingId;

/// What a checklist is made from.
#[derive(Clone, Copy)]
pub struct Ground<'a, 'k> {
    /// Rule base, facts, site, limits, ranking.
    pub advice: &'a course::Ground<'a, 'k>,
    /// The log; `None` where there is none yet.
    pub log: Option<&'a Log>,
    /// The diagnosis of now; `None` without a log.
    pub assessment: Option<&'a Assessment>,
    /// The farm's incidents.
    pub incidents: &'a [Incident],
    /// What is taken for now, unix seconds.
    pub now: i64,
}

/// What an item is, with what its words are made of.
#[derive(Debug, Clone, PartialEq)]
pub enum Kind {
    /// An incident's reading or sign to check: the incident's id.
    Check(String, Check),
    /// An incident's step that is not done.
    Step(String, Taken),
    /// The next step of an incident's plan, with its number.
    Plan(String, usize, PlanStep),
    /// A reading that is out of its band or on the way out.
    Trend(Trend),
    /// What would tell between likely causes: id and why.
    Tell(String, String),
    /// A round that weather, season or what was seen calls for.
    Extra(String),
    /// A routine round.
    Round(String),
}

/// One thing to look at, measure or do.
#[derive(Debug, Clone, PartialEq)]
pub struct Item {
    /// What it is.
    pub kind: Kind,
    /// What to do, a sentence or less.
    pub text: String,
    /// Why, where it is worth a word.
    pub why: String,
    /// By when, unix seconds, where it has an hour.
    pub due: Option<i64>,
    /// When it was last done.
    pub last: Option<i64>,
    /// How often it is done, seconds.
    pub every: Option<i64>,
    /// What to fill in.
    pub blanks: Vec<Blank>,
    /// How little urgent it is: the largest is the first to go where there is no room.
    pub rank: u32,
}

/// What is done in one place.
#[derive(Debug, Clone, PartialEq)]
pub struct Stretch {
    /// The places, in words: `tank 1, tank 2`.
    pub place: String,
    /// The items, most urgent first.
    pub items: Vec<Item>,
}

/// The checklist.
#[derive(Debug, Clone, PartialEq)]
pub struct Checklist {
    /// Which shift.
    pub window: Window,
    /// Incidents that are open: id and title.
    pub open: Vec<(String, String)>,
    /// The places in walking order, with what is done there.
    pub stretches: Vec<Stretch>,
}

impl Checklist {
    /// All items.
    pub fn items(&self) -> impl Iterator<Item = &Item> {
        self.stretches.iter().flat_map(|s| &s.items)
    }
}

/// So much of what would tell more is asked for.
const TELL: usize = 4;
/// What is done without walking is done here.
const BENCH: &str = "bench";

/// Makes the checklist of a shift.
pub fn checklist(ground: &Ground<'_, '_>, window: Window) -> Checklist {
    let mut found: Vec<(String, Item)> = Vec::new();
    for incident in ground.incidents.iter().filter(|i| i.is_open()) {
        for pending in pending(incident, ground, &window) {
            found.push(of_incident(&incident.id, pending, ground));
        }
    }
    // What an incident asks for is not asked for twice.
    let asked = |found: &[(String, Item)], id: ReadingId| {
        found
            .iter()
            .any(|(_, item)| item.blanks.iter().any(|b| b.reading == id))
    };
    for trend in trends(ground) {
        if !asked(&found, trend.reading) {
            found.push(of_trend(trend, ground, &window));
        }
    }
    for missing in ground
        .assessment
        .map_or(&[][..], |a| &a.missing)
        .iter()
        .take(TELL)
    {
        let words = &ground.advice.knowledge.vocabulary;
        let reading = words.reading(&missing.id);
        if reading.is_none_or(|id| !asked(&found, id) && !words[id].derived) {
            found.push(of_missing(&missing.id, &missing.why, ground));
        }
    }
    for due in due(ground, &window) {
        let round = due.round;
        let blanks: Vec<Blank> = round
            .readings
            .iter()
            .filter(|id| !asked(&found, **id))
            .map(|id| blank(*id, ground))
            .collect();
        if blanks.is_empty() && !round.readings.is_empty() {
            continue;
        }
        let item = Item {
            kind: if due.extra {
                Kind::Extra(round.id.clone())
            } else {
                Kind::Round(round.id.clone())
            },
            text: round.text.clone(),
            why: if due.extra {
                round.why.clone()
            } else {
                String::new()
            },
            due: None,
            last: due.last,
            every: Some(round.every),
            blanks,
            rank: if due.extra { 15 } else { rank(round.every) },
        };
        found.push((round.place.clone(), item));
    }
    Checklist {
        stretches: walked(found, ground),
        open: ground
            .incidents
            .iter()
            .filter(|i| i.is_open())
            .map(|i| (i.id.clone(), i.title.clone()))
            .collect(),
        window,
    }
}

/// What is done often is urgent; what is done once a year can wait a day.
fn rank(every: i64) -> u32 {
    const HOUR: i64 = 3600;
    match every / HOUR {
        0..=12 => 20,
        13..=36 => 30,
        37..=100 => 35,
        101..=200 => 40,
        201..=1000 => 50,
        1001..=3000 => 60,
        _ => 70,
    }
}

fn blank(reading: ReadingId, ground: &Ground<'_, '_>) -> Blank {
    let advice = ground.advice;
    let words = &advice.knowledge.vocabulary;
    Blank::of(reading, ground.log, advice.site, advice.limits, words)
}

/// Where a reading is taken: where its round is.
fn place_of(id: &str, ground: &Ground<'_, '_>) -> String {
    let knowledge = ground.advice.knowledge;
    let Some(reading) = knowledge.vocabulary.reading(id) else {
        return PlaceKind::Tank.word().to_owned(); // signs are looked for where the fish are
    };
    let mut rounds = knowledge.rounds.iter();
    rounds
        .find(|r| r.readings.contains(&reading))
        .map_or_else(|| BENCH.to_owned(), |r| r.place.clone())
}

/// The blanks of a reading: its own, or those it is worked out from.
fn measured(id: &str, ground: &Ground<'_, '_>) -> Vec<Blank> {
    let words = &ground.advice.knowledge.vocabulary;
    let of = |id: &str| words.reading(id).map(|r| blank(r, ground));
    match words.reading(id) {
        Some(reading) if words[reading].derived => {
            inputs(id).iter().filter_map(|id| of(id)).collect()
        }
        _ => of(id).into_iter().collect(),
    }
}

fn of_incident(id: &str, pending: Pending, ground: &Ground<'_, '_>) -> (String, Item) {
    let words = &ground.advice.knowledge.vocabulary;
    match pending {
        Pending::Check(check) => {
            let what = check.verify.id.clone();
            let reading = words.reading(&what);
            let text = match (reading, words.sign(&what)) {
                (Some(reading), _) => words[reading].name.clone(),
                (None, Some(sign)) => words[sign].question.text.clone(),
                (None, None) => what.clone(),
            };
            let item = Item {
                text,
                why: String::new(),
                due: Some(check.verify.due),
                last: None,
                every: None,
                blanks: measured(&what, ground),
                rank: 1,
                kind: Kind::Check(id.to_owned(), check),
            };
            (place_of(&what, ground), item)
        }
        Pending::Step(step) => {
            let item = Item {
                text: step.text.clone(),
                why: String::new(),
                due: None,
                last: None,
                every: None,
                blanks: Vec::new(),
                rank: 2,
                kind: Kind::Step(id.to_owned(), step),
            };
            (BENCH.to_owned(), item)
        }
        Pending::Plan(number, step) => {
            let item = Item {
                text: step.text.clone(),
                why: String::new(),
                due: Some(step.at),
                last: None,
                every: None,
                blanks: Vec::new(),
                rank: 0,
                kind: Kind::Plan(id.to_owned(), number, step),
            };
            (BENCH.to_owned(), item)
        }
    }
}

fn of_trend(trend: Trend, ground: &Ground<'_, '_>, window: &Window) -> (String, Item) {
    let reading = &ground.advice.knowledge.vocabulary[trend.reading];
    let item = Item {
        text: reading.name.clone(),
        why: String::new(),
        due: Some(window.start.max(ground.now)),
        last: Some(trend.time),
        every: None,
        blanks: vec![blank(trend.reading, ground)],
        rank: if trend.outside { 10 } else { 12 },
        kind: Kind::Trend(trend),
    };
    (place_of(&reading.id, ground), item)
}

fn of_missing(id: &str, why: &str, ground: &Ground<'_, '_>) -> (String, Item) {
    let words = &ground.advice.knowledge.vocabulary;
    let reading = words.reading(id);
    let question = words
        .sign(id)
        .map(|s| &words[s].question)
        .or_else(|| words.event(id).map(|e| &words[e].question));
    let text = match (reading, question) {
        (Some(reading), _) => words[reading].name.clone(),
        (None, Some(question)) => question.text.clone(),
        (None, None) => id.to_owned(),
    };
    let item = Item {
        kind: Kind::Tell(id.to_owned(), why.to_owned()),
        text,
        why: why.to_owned(),
        due: None,
        last: None,
        every: None,
        blanks: reading.map(|id| blank(id, ground)).into_iter().collect(),
        rank: 14,
    };
    (place_of(id, ground), item)
}

/// Puts items in walking order: the site's, the bench last. Kinds the site does not list come before the bench.
fn walked(found: Vec<(String, Item)>, ground: &Ground<'_, '_>) -> Vec<Stretch> {
    let places = &ground.advice.site.place;
    let mut kinds: Vec<String> = Vec::new();
    let listed = places
        .iter()
        .filter_map(|p| p.kind)
        .map(|k| k.word().to_owned());
    let usual = PlaceKind::WORDS.iter().map(|w| (*w).to_owned());
    for kind in listed.chain(usual).chain([BENCH.to_owned()]) {
        if !kinds.contains(&kind) {
            kinds.push(kind);
        }
    }
    let mut stretches = Vec::new();
    for kind in &kinds {
        let here = |place: &String| place == kind || (kind == BENCH && !kinds.contains(place));
        let mut items: Vec<Item> = found
            .iter()
            .filter(|(place, _)| here(place))
            .map(|(_, item)| item.clone())
            .collect();
        if items.is_empty() {
            continue;
        }
        items.sort_by_key(|i| (i.rank, i.due));
        let names: Vec<&str> = places
            .iter()
            .filter(|p| p.kind.is_some_and(|k| k.word() == kind))
            .map(|p| p.name.as_str())
            .collect();
        stretches.push(Stretch {
            place: if names.is_empty() {
                kind.replace('-', " ")
            } else {
                names.join(", ")
            },
            items,
        });
    }
    stretches
}
