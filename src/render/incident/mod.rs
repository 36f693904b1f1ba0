//! Incidents: the list, one in full, the follow-up, the handover for the next shift.

mod handover;
mod json;
mod words;

use super::block::Block;
use crate::assessment::span;
use crate::fault::Fault;
use crate::incident::{Again, Check, Incident, Similar, Stored};
use crate::knowledge::Knowledge;
use crate::shift::{Checklist, Kind};
use crate::site::Site;

pub use handover::handover;
pub use json::{follow_json, json, list_json};
use words::Words;

/// What an incident is put into words with.
#[derive(Debug, Clone, Copy)]
pub struct Told<'a> {
    /// The words.
    pub knowledge: &'a Knowledge,
    /// The farm.
    pub site: &'a Site,
    /// What is taken for now, unix seconds.
    pub now: i64,
}

/// An incident with how its checks stand.
#[derive(Debug, Clone)]
pub struct Standing<'a> {
    /// The incident.
    pub incident: &'a Incident,
    /// Its checks, the earliest due first.
    pub checks: Vec<Check>,
}

/// All incidents, a line each, and what is wrong with damaged files.
pub fn list(stored: &Stored, told: &Told<'_>) -> Vec<Block> {
    let words = Words::of(told);
    let mut page = Vec::new();
    for incident in &stored.incidents {
        let state = match &incident.closed {
            None => format!("open for {}", span((told.now - incident.opened).max(0))),
            Some(closed) => format!(
                "closed {}, {}",
                words.at(closed.time),
                closed.cause.as_deref().unwrap_or("cause not known")
            ),
        };
        page.push(Block::Bullet(format!(
            "{}: {}. {}.",
            incident.id, incident.title, state
        )));
    }
    if page.is_empty() && stored.damaged.is_empty() {
        page.push(Block::Para("There are no incidents.".to_owned()));
    }
    page.extend(damaged(&stored.damaged));
    page
}

/// Damaged files are told of and left alone.
pub fn damaged(faults: &[Fault]) -> Vec<Block> {
    let mut page = Vec::new();
    if !faults.is_empty() {
        page.push(Block::Heading("Damaged files, left alone".to_owned()));
        page.extend(faults.iter().map(|f| Block::Bullet(f.to_string())));
    }
    page
}

/// One incident in full.
pub fn show(standing: &Standing<'_>, similar: &[Similar], told: &Told<'_>) -> Vec<Block> {
    let words = Words::of(told);
    let incident = standing.incident;
    let mut page = vec![Block::Head(incident.title.clone())];
    let by = words.by(incident.by.as_deref());
    let state = match &incident.closed {
        None => "open".to_owned(),
        Some(closed) => format!(
            "closed {}{}: {}",
            words.at(closed.time),
            words.by(closed.by.as_deref()),
            closed
                .cause
                .as_deref()
                .map_or_else(|| "cause not known".to_owned(), |c| words.cause(c))
        ),
    };
    page.push(Block::Para(format!(
        "{}, opened {}{by}, {state}. The verdict then: {}.",
        incident.id,
        words.at(incident.opened),
        incident.verdict.replace('-', " ")
    )));
    if let Some(outcome) = incident.closed.as_ref().and_then(|c| c.outcome.as_ref()) {
        page.push(Block::Para(format!("What came of it: {outcome}")));
    }
    section(&mut page, "What was seen", incident.seen.clone());
    let ranking = incident.ranking.iter().take(4);
    section(
        &mut page,
        "What was thought likely then",
        ranking.map(|r| words.ranked(r)).collect(),
    );
    section(
        &mut page,
        "Steps",
        incident.steps.iter().map(|s| words.step(s)).collect(),
    );
    let plan = (1..).zip(&incident.plan);
    section(
        &mut page,
        "Plan",
        plan.map(|(n, p)| words.planned(n, p)).collect(),
    );
    section(
        &mut page,
        "Checks",
        standing.checks.iter().map(|c| words.check(c)).collect(),
    );
    section(
        &mut page,
        "Leave alone",
        incident.avoid.iter().map(|a| a.text.clone()).collect(),
    );
    section(&mut page, "Notes and follow-ups", words.history(incident));
    section(
        &mut page,
        "What it was last time",
        last_time(similar, &words),
    );
    page
}

fn last_time(similar: &[Similar], words: &Words<'_>) -> Vec<String> {
    similar
        .iter()
        .map(|s| {
            let outcome = s
                .outcome
                .as_ref()
                .map_or_else(String::new, |o| format!(" {o}"));
            format!(
                "{} in {}; it took {} ({}).{outcome}",
                s.name,
                words.month(s.opened),
                span(s.took),
                s.id
            )
        })
        .collect()
}

/// What it was last time, for a page of a diagnosis: closed incidents of this farm that resembled this.
pub fn resembling(similar: &[Similar], told: &Told<'_>) -> Vec<Block> {
    let mut page = Vec::new();
    section(
        &mut page,
        "What it was last time (this moves no likelihood)",
        last_time(similar, &Words::of(told)),
    );
    page
}

/// How an incident stands, and what next.
pub fn follow(standing: &Standing<'_>, again: Option<&Again>, told: &Told<'_>) -> Vec<Block> {
    let words = Words::of(told);
    let incident = standing.incident;
    let mut page = vec![Block::Head(format!("{} ({})", incident.title, incident.id))];
    section(
        &mut page,
        "Checks",
        standing.checks.iter().map(|c| words.check(c)).collect(),
    );
    if standing.checks.is_empty() {
        page.push(Block::Para(
            "Nothing of it can be checked by a reading.".to_owned(),
        ));
    }
    let Some(again) = again else {
        let met = standing.checks.iter().all(|c| !c.is_open());
        let waiting = incident.plan.iter().any(|p| p.done.is_none());
        page.push(Block::Para(if met && !waiting && !standing.checks.is_empty() {
            format!(
                "All moves as it should. When it is over: `gillside incident close {} --cause ID`.",
                incident.id
            )
        } else {
            "Nothing has failed so far; go on as planned.".to_owned()
        }));
        return page;
    };
    page.push(Block::Heading("What the failed step tells".to_owned()));
    for (id, name, before, after) in again.causes.iter().take(4) {
        let way = match after - before {
            d if d > 0.02 => "likelier now",
            d if d < -0.02 => "less likely now",
            _ => "as likely as before",
        };
        page.push(Block::Bullet(format!("{name} ({id}): {way}.")));
    }
    if let Some(next) = &again.next {
        page.push(Block::Heading("Do next".to_owned()));
        page.push(Block::Numbered(1, next.text.clone()));
        let first = next.check_first.iter();
        page.extend(first.map(|c| Block::Under(format!("Check first: {c}"))));
    }
    page
}

/// What was found, a sentence each, to be put down.
pub fn found(standing: &Standing<'_>, told: &Told<'_>) -> Vec<String> {
    let words = Words::of(told);
    standing.checks.iter().map(|c| words.check(c)).collect()
}

/// What else the next shift has to do, in a line.
pub fn next_shift(list: &Checklist, told: &Told<'_>) -> String {
    let words = Words::of(told);
    let extra = list
        .items()
        .filter(|i| matches!(i.kind, Kind::Trend(_) | Kind::Tell(..) | Kind::Extra(_)))
        .count();
    let rounds = list
        .items()
        .filter(|i| matches!(i.kind, Kind::Round(_)))
        .count();
    let name = list
        .window
        .name
        .as_deref()
        .map_or_else(|| "The day".to_owned(), |name| format!("The {name} shift"));
    format!(
        "{name} from {}: {rounds} rounds and {extra} extra checks besides; `gillside shift` has the list.",
        words.at(list.window.start)
    )
}

/// A heading with bullets, where there are any.
fn section(page: &mut Vec<Block>, heading: &str, items: Vec<String>) {
    if !items.is_empty() {
        page.push(Block::Heading(heading.to_owned()));
        page.extend(items.into_iter().map(Block::Bullet));
    }
}
