//! Puts rows into a log: each cell in the unit of its column, each row where its time belongs, and the whole read again
//! before it takes the old one's place.

use std::path::Path;

use super::cell::{cell, heading, usual_unit};
use super::given::Given;
use super::moment::clock_text;
use super::safe::{NotWritten, edit};
use super::sheet::{Filled, Key, Row, with_rows};
use super::{Telling, done_note};
use crate::fault::{Fault, shown};
use crate::history::log::{self, Effect, Input, Log};
use crate::vocabulary::ReadingId;

/// Where and when rows are written.
#[derive(Debug, Clone, Copy)]
pub struct Target<'a> {
    /// The log; it need not be there yet.
    pub path: &'a Path,
    /// What is taken for now, unix seconds.
    pub now: i64,
}

/// What was written.
#[derive(Debug, Clone)]
pub struct Written {
    /// The log with the new rows.
    pub log: Log,
    /// The new rows, as they are read back: index in the log, or the row that was corrected.
    pub rows: Vec<usize>,
    /// Headings of columns that the log did not have before.
    pub new_columns: Vec<String>,
    /// The log was not there before.
    pub made: bool,
}

/// A row may be so much later than now: clocks differ.
const AHEAD: i64 = 10 * 60;

/// Writes rows.
///
/// # Errors
/// [`NotWritten`]; the log is then as it was.
pub fn write(
    given: &[Given],
    target: Target<'_>,
    telling: &Telling<'_>,
) -> Result<Written, NotWritten> {
    let mut written = None;
    edit(target.path, |before| {
        let (text, made) = added(before, given, target, telling)?;
        written = Some(made);
        Ok(text.into_bytes())
    })?;
    written.ok_or_else(|| {
        Fault::whole(
            "nothing-to-record",
            "there is nothing to record",
            "give at least one reading, sign or event",
        )
        .into()
    })
}

fn read(text: &str, target: Target<'_>, telling: &Telling<'_>) -> Result<Log, NotWritten> {
    let input = Input::text(target.path.display().to_string(), text);
    log::read(
        vec![input],
        &telling.knowledge.vocabulary,
        telling.site,
        None,
    )
    .map_err(NotWritten::Refused)
}

fn added(
    before: Option<&[u8]>,
    given: &[Given],
    target: Target<'_>,
    telling: &Telling<'_>,
) -> Result<(String, Written), NotWritten> {
    let text = match before.map(std::str::from_utf8) {
        None => "",
        Some(Ok(text)) => text,
        Some(Err(_)) => {
            return Err(Fault::whole(
                "not-utf8",
                format!("`{}` is not UTF-8 text", target.path.display()),
                "save it as UTF-8, and record again",
            )
            .into());
        }
    };
    let old = if text.trim().is_empty() {
        Log::default()
    } else {
        read(text, target, telling)?
    };
    let mut faults = Vec::new();
    let mut rows = Vec::new();
    let mut new_columns: Vec<String> = Vec::new();
    for one in given {
        match row(one, &old, target, telling, &mut new_columns) {
            Ok(row) => rows.push(row),
            Err(wrong) => faults.extend(wrong),
        }
    }
    if !faults.is_empty() {
        return Err(NotWritten::Refused(faults));
    }
    let made = with_rows(text, &rows, telling.site, &telling.knowledge.vocabulary)?;
    let log = read(&made, target, telling)?;
    // What was there must read as before, and every new row must read.
    if log.rows_used != old.rows_used + rows.len() || log.rows_refused != old.rows_refused {
        let mut refused = log
            .problems
            .iter()
            .filter(|p| p.effect == Effect::RowRefused);
        let why = refused.next_back().map_or_else(
            || "the log would read otherwise than before".to_owned(),
            |p| p.reason.clone(),
        );
        return Err(Fault::whole(
            "would-not-read",
            format!("the row was not written: {why}"),
            "correct what `gillside review` says about the log first",
        )
        .into());
    }
    let found = given
        .iter()
        .map(|one| found(one, &log, target, telling))
        .collect::<Option<Vec<usize>>>()
        .unwrap_or_default();
    let written = Written {
        rows: found,
        new_columns: if before.is_none() {
            Vec::new()
        } else {
            new_columns
        },
        made: before.is_none(),
        log,
    };
    Ok((made, written))
}

/// The time of a row: what was said, else now to the minute, unless that is before a row that has seconds.
fn time(given: &Given, old: &Log, now: i64) -> i64 {
    given.time.unwrap_or_else(|| {
        let minute = now - now.rem_euclid(60);
        match old.rows.last() {
            Some(last) if last.time > minute && last.time <= now => now,
            _ => minute,
        }
    })
}

/// The index of a new row in the log it was written to.
fn found(given: &Given, log: &Log, target: Target<'_>, telling: &Telling<'_>) -> Option<usize> {
    if let Some(corrected) = given.corrects {
        return log.rows.iter().rposition(|r| r.time == corrected);
    }
    let _ = telling;
    let place = |p: &log::PlaceId| log.places.get(usize::from(p.0)).map(String::as_str);
    let minute = target.now - target.now.rem_euclid(60);
    log.rows.iter().rposition(|r| {
        let time = match given.time {
            Some(time) => r.time == time,
            None => r.time == minute || r.time == target.now,
        };
        time && r.place.as_ref().and_then(place) == given.place.as_deref()
    })
}

fn row(
    given: &Given,
    old: &Log,
    target: Target<'_>,
    telling: &Telling<'_>,
    new_columns: &mut Vec<String>,
) -> Result<Row, Vec<Fault>> {
    let words = &telling.knowledge.vocabulary;
    let zone = &telling.site.timezone;
    let when = time(given, old, target.now);
    let mut faults = Vec::new();
    if when > target.now.saturating_add(AHEAD) {
        faults.push(Fault::whole(
            "in-the-future",
            format!("{} is later than now", clock_text(when, zone)),
            "write when it was measured",
        ));
    }
    if let Some(corrected) = given.corrects {
        let exists = old.rows.iter().any(|r| r.time == corrected);
        if !exists || corrected >= when {
            faults.push(Fault::whole(
                "nothing-to-correct",
                format!(
                    "there is no earlier row at {} to correct",
                    clock_text(corrected, zone)
                ),
                "write the time of the wrong row as the log has it",
            ));
        }
    }
    let mut cells = Vec::new();
    let mut free = |name: &'static str, text: Option<String>| {
        if let Some(text) = text {
            cells.push(Filled {
                key: Key::Free(name),
                heading: name.to_owned(),
                text,
                number: false,
            });
        }
    };
    free("time", Some(clock_text(when, zone)));
    free("place", given.place.clone());
    let mut readings = Vec::new();
    for amount in &given.readings {
        let reading = &words[amount.reading];
        let (unit, head) = match column(amount.reading, old) {
            Some((unit, head)) => (unit, head),
            None => {
                let unit = usual_unit(reading, telling.site);
                let head = heading(reading, &unit);
                if !new_columns.contains(&head) {
                    new_columns.push(head.clone());
                }
                (unit, head)
            }
        };
        match cell(amount, &unit, words) {
            Ok(cell) => readings.push(Filled {
                key: Key::Reading(amount.reading),
                heading: head,
                text: cell.text,
                number: true,
            }),
            Err(fault) => faults.push(fault),
        }
    }
    let signs: Vec<String> = given
        .signs
        .iter()
        .map(|(id, seen)| format!("{}{id}", if *seen { "" } else { "!" }))
        .collect();
    free("event", some(given.events.join(";")));
    free("sign", some(signs.join(";")));
    free("by", given.by.clone());
    free("note", done_note(&given.done, given.note.as_deref()));
    free(
        "corrects",
        given.corrects.map(|time| clock_text(time, zone)),
    );
    if let Some(both) = given
        .signs
        .iter()
        .find(|(id, seen)| given.signs.contains(&(id.clone(), !seen)))
    {
        faults.push(Fault::whole(
            "contradicting-sign",
            format!("`{}` is said to be there and not there", shown(&both.0)),
            "leave one of the two",
        ));
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    // Readings stand behind time and place, before the words.
    let at = cells
        .iter()
        .position(|c| !matches!(c.key, Key::Free("time" | "place")))
        .unwrap_or(cells.len());
    cells.splice(at..at, readings);
    let later = old.rows.iter().filter(|r| r.time > when).map(|r| r.line);
    let corrections = old.corrected.iter().filter(|c| c.at > when).map(|c| c.line);
    Ok(Row {
        cells,
        before: later.chain(corrections).min(),
    })
}

fn some(text: String) -> Option<String> {
    (!text.is_empty()).then_some(text)
}

/// Unit and heading of a reading's column in the log.
fn column(reading: ReadingId, log: &Log) -> Option<(String, String)> {
    let columns = log.columns.first()?;
    let found = columns.readings.iter().find(|c| c.reading == reading)?;
    Some((found.unit.clone(), found.heading.clone()))
}
