//! What was recorded, how far it has moved, and what is to be done first.

use std::path::Path;

use serde_json::{Value, json};

use super::block::{Block, sentence};
use super::{Report, units, when};
use crate::assessment::{StepReport, span};
use crate::engine::Limits;
use crate::fault::shown;
use crate::knowledge::{Side, When};
use crate::record::Change;

/// What is told after recording.
#[derive(Debug)]
pub struct Recorded<'a> {
    /// How the farm stands now.
    pub report: Report<'a>,
    /// The farm's limits.
    pub limits: &'a Limits<'a>,
    /// The log.
    pub path: &'a Path,
    /// Time (unix seconds) and line of every new row.
    pub times: Vec<(i64, usize)>,
    /// What was recorded.
    pub changes: Vec<Change>,
    /// Headings of new columns.
    pub new_columns: Vec<String>,
    /// The log was not there before.
    pub made: bool,
}

/// For a person.
pub fn page(recorded: &Recorded<'_>) -> Vec<Block> {
    let report = &recorded.report;
    let zone = &report.site.timezone;
    let when = recorded
        .times
        .first()
        .map_or_else(String::new, |(time, _)| {
            format!(" for {}", when::long(*time, zone))
        });
    let log = shown(&recorded.path.display().to_string());
    let made = if recorded.made { "a new log, " } else { "" };
    let mut page = vec![Block::Para(format!("Recorded{when} in {made}{log}."))];
    if !recorded.new_columns.is_empty() {
        page.push(Block::Para(format!(
            "New in this log: {}.",
            recorded.new_columns.join(", ")
        )));
    }
    page.extend(
        recorded
            .changes
            .iter()
            .map(|c| Block::Bullet(moved(c, recorded))),
    );
    page.extend(super::page::first_lines(report));
    page
}

/// One reading: its value, how far it has moved, and where it lies.
fn moved(change: &Change, recorded: &Recorded<'_>) -> String {
    let report = &recorded.report;
    let reading = &report.knowledge.vocabulary[change.reading];
    let system = report.site.units;
    let below = |v: crate::history::log::Value| if v.below { "<" } else { "" };
    let now = change.now;
    let mut text = format!(
        "{} {}{}",
        sentence(&reading.name),
        below(now),
        units::amount(reading, now.amount, system)
    );
    if let Some((time, before)) = change.before
        && !reading.per_interval
    {
        let by = now.amount - before.amount;
        let then = when::short(time, &report.site.timezone);
        let was = format!(
            "{}{}",
            below(before),
            units::amount(reading, before.amount, system)
        );
        let least = reading
            .resolution
            .max(reading.resolution_share * before.amount.abs());
        text.push_str(&if now.below || before.below || by.abs() < least {
            format!(": {was} on {then}")
        } else {
            let way = if by > 0.0 { "up" } else { "down" };
            let by = units::difference(reading, by.abs(), system);
            format!(": {way} by {by} from {was} on {then}")
        });
    }
    if let Some(lies) = outside(change, recorded) {
        text.push_str(&lies);
    }
    text.push('.');
    text
}

/// Above or below the comfort band.
fn outside(change: &Change, recorded: &Recorded<'_>) -> Option<String> {
    let report = &recorded.report;
    let reading = &report.knowledge.vocabulary[change.reading];
    let amount = |v: f64| units::amount(reading, v, report.site.units);
    let target = |side| recorded.limits.target(change.reading, side);
    let value = change.now.amount;
    match (target(Side::Low), target(Side::High)) {
        (Some(low), _) if value < low => Some(format!("; below {}, where it is well", amount(low))),
        (_, Some(high)) if value > high && !change.now.below => {
            Some(format!("; above {}, where it is well", amount(high)))
        }
        _ => None,
    }
}

/// For a program.
pub fn json(recorded: &Recorded<'_>) -> String {
    let report = &recorded.report;
    let a = report.assessment;
    let value = |v: crate::history::log::Value| json!({"value": v.amount, "below": v.below});
    let first: Vec<Value> = first_steps(report)
        .into_iter()
        .map(|s| json!({"id": s.id, "text": s.text, "check_first": s.check_first}))
        .collect();
    let made = json!({
        "schema": 1,
        "log": recorded.path.display().to_string(),
        "made": recorded.made,
        "new_columns": recorded.new_columns,
        "rows": recorded.times.iter().map(|(time, line)| json!({
            "time": when::utc(*time), "line": line,
        })).collect::<Vec<_>>(),
        "readings": recorded.changes.iter().map(|c| {
            let reading = &report.knowledge.vocabulary[c.reading];
            json!({
                "id": reading.id, "unit": reading.unit, "now": value(c.now),
                "before": c.before.map(|(time, v)| json!({
                    "time": when::utc(time), "value": v.amount, "below": v.below,
                    "age": span(recorded.times.first().map_or(0, |(t, _)| t - time)),
                })),
            })
        }).collect::<Vec<_>>(),
        "verdict": a.verdict.word(),
        "first": first,
    });
    format!("{made:#}\n")
}

/// First aid, or the best step that is due now.
fn first_steps<'a>(report: &Report<'a>) -> Vec<&'a StepReport> {
    let a = report.assessment;
    if !a.first_aid.is_empty() {
        return a.first_aid.iter().collect();
    }
    let now = a.steps.iter().find(|s| s.when == When::Now);
    now.or(a.steps.first()).into_iter().collect()
}
