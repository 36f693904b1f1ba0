//! Half a page for the next shift: what happened, what was done, what is due when, what to watch, what not to do.

use super::words::Words;
use super::{Standing, Told, section};
use crate::incident::Look;
use crate::render::block::Block;

/// So many lines of each kind: what is more is counted, except what is due, which is always there in full.
const SEEN: usize = 3;
const DONE: usize = 5;
const NOTES: usize = 2;
const AVOID: usize = 3;
const UNDONE: usize = 3;

/// The note for all open incidents; `rounds` are what else the next shift has to do, in a line.
pub fn handover(standings: &[Standing<'_>], next: Option<&str>, told: &Told<'_>) -> Vec<Block> {
    let words = Words::of(told);
    let farm = told.site.name.as_deref().unwrap_or("The farm");
    let mut page = vec![Block::Head(format!(
        "Handover, {farm}, {}",
        words.at(told.now)
    ))];
    if standings.is_empty() {
        page.push(Block::Para("No incident is open.".to_owned()));
    }
    for standing in standings {
        one(standing, &words, &mut page);
    }
    page.extend(next.map(|next| Block::Para(next.to_owned())));
    page
}

fn one(standing: &Standing<'_>, words: &Words<'_>, page: &mut Vec<Block>) {
    let incident = standing.incident;
    page.push(Block::Heading(incident.title.clone()));
    let seen = some(&incident.seen, SEEN);
    page.push(Block::Para(format!(
        "{}. Since {}{}. {seen}",
        incident.id,
        words.at(incident.opened),
        incident
            .by
            .as_ref()
            .map_or_else(String::new, |by| format!(", found by {by}"))
    )));
    let mut done: Vec<(i64, String)> = incident
        .steps
        .iter()
        .filter_map(|s| {
            let time = s.done?;
            let by = words.by(s.by.as_deref());
            Some((time, format!("{} ({}{by})", s.text, words.at(time))))
        })
        .collect();
    done.extend(incident.plan.iter().filter_map(|p| {
        let time = p.done?;
        let by = words.by(p.by.as_deref());
        Some((time, format!("{} ({}{by})", p.text, words.at(time))))
    }));
    done.sort();
    let older = done.len().saturating_sub(DONE);
    let mut lines: Vec<String> = done.into_iter().skip(older).map(|d| d.1).collect();
    if older > 0 {
        lines.insert(0, format!("{older} earlier, see `gillside incident show`"));
    }
    section(page, "Done", lines);
    let mut due: Vec<(i64, String)> = standing
        .checks
        .iter()
        .filter(|c| c.is_open() || matches!(c.look, Look::Missed(..)))
        .map(|c| (c.verify.due, words.check(c)))
        .collect();
    let plan = (1..).zip(&incident.plan).filter(|(_, p)| p.done.is_none());
    due.extend(plan.map(|(n, p)| (p.at, words.planned(n, p))));
    due.sort();
    section(page, "Due", due.into_iter().map(|d| d.1).collect());
    let undone = incident
        .steps
        .iter()
        .filter(|s| s.done.is_none() && ["now", "hours"].contains(&s.when.as_str()));
    let undone: Vec<String> = undone.map(|s| format!("{} [{}]", s.text, s.id)).collect();
    section(page, "Not done yet", shortened(undone, UNDONE));
    let avoid: Vec<String> = incident.avoid.iter().map(|a| a.text.clone()).collect();
    section(page, "Leave alone", shortened(avoid, AVOID));
    let history = words.history(incident);
    let older = history.len().saturating_sub(NOTES);
    let last = history.into_iter().skip(older).collect();
    section(page, "Last notes", last);
}

fn shortened(mut lines: Vec<String>, most: usize) -> Vec<String> {
    let left = lines.len().saturating_sub(most);
    lines.truncate(most);
    if left > 0 {
        lines.push(format!("{left} more, see `gillside incident show`"));
    }
    lines
}

fn some(clauses: &[String], most: usize) -> String {
    let left = clauses.len().saturating_sub(most);
    let shown: Vec<&str> = clauses.iter().take(most).map(String::as_str).collect();
    let more = if left > 0 {
        format!("; and {left} more")
    } else {
        String::new()
    };
    if shown.is_empty() {
        String::new()
    } else {
        format!("Seen: {}{more}.", shown.join("; "))
    }
}
