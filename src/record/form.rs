//! A filled-in form: the checklist's blanks as CSV, with a value behind each that was measured.

use super::given::{Given, Telling};
use crate::fault::{Fault, Place, shown};

/// Rows to record, one for each place that the form has values for.
///
/// # Errors
/// All faults with their lines: no `item` and `value` columns, and whatever [`given`](super::given()) finds wrong.
pub fn form(name: &str, text: &str, telling: &Telling<'_>) -> Result<Vec<Given>, Vec<Fault>> {
    let text = text.trim_start_matches('\u{feff}');
    let head = text.lines().next().unwrap_or_default();
    let separator = [',', ';', '\t']
        .into_iter()
        .max_by_key(|s| head.matches(*s).count())
        .map_or(b',', |s| u8::try_from(s).unwrap_or(b','));
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(separator)
        .flexible(true)
        .trim(csv::Trim::All)
        .from_reader(text.as_bytes());
    let place_in = |line: usize| Place {
        file: name.to_owned(),
        line,
        column: 1,
        excerpt: text
            .lines()
            .nth(line.saturating_sub(1))
            .unwrap_or_default()
            .to_owned(),
        width: 1,
    };
    let whole = |reason: String| {
        vec![Fault {
            place: Some(place_in(1)),
            ..Fault::whole(
                "not-a-form",
                reason,
                "make a form with `gillside shift --form`, and fill in its `value` column",
            )
        }]
    };
    let head = reader.headers().map_err(|e| whole(e.to_string()))?.clone();
    let column = |wanted: &str| head.iter().position(|h| h.eq_ignore_ascii_case(wanted));
    let (Some(item), Some(value)) = (column("item"), column("value")) else {
        return Err(whole(
            "the file has no columns `item` and `value`".to_owned(),
        ));
    };
    let (place, unit) = (column("place"), column("unit"));
    let mut common = Given::default();
    let mut rows: Vec<Given> = Vec::new();
    let mut faults = Vec::new();
    for record in reader.records() {
        let record = match record {
            Ok(record) => record,
            Err(e) => return Err(whole(e.to_string())),
        };
        let line = record
            .position()
            .and_then(|p| usize::try_from(p.line()).ok())
            .unwrap_or(1);
        let cell = |at: Option<usize>| at.and_then(|at| record.get(at)).unwrap_or_default();
        let (key, mut said) = (cell(Some(item)).to_owned(), cell(Some(value)).to_owned());
        if key.is_empty() || said.is_empty() {
            continue;
        }
        let mut take = |given: &mut Given, key: &str, said: &str| {
            if let Err(wrong) = given.take(key, said, telling) {
                faults.extend(wrong.into_iter().map(|fault| Fault {
                    place: Some(place_in(line)),
                    ..fault
                }));
            }
        };
        if let Some(round) = key.strip_prefix("round:") {
            if !["no", "-", "0"].contains(&said.to_ascii_lowercase().as_str()) {
                take(&mut common, "done", round);
            }
            continue;
        }
        if ["time", "by", "note", "event"].contains(&key.as_str()) {
            take(&mut common, &key, &said);
            continue;
        }
        // A bare number is in the unit that stands beside it.
        if said.chars().last().is_some_and(|c| c.is_ascii_digit()) && key != "sign" {
            said.push_str(cell(unit));
        }
        let wanted = Some(cell(place)).filter(|p| !p.is_empty());
        let at = match rows.iter().position(|r| r.place.as_deref() == wanted) {
            Some(at) => at,
            None => {
                rows.push(Given::default());
                rows.len() - 1
            }
        };
        let Some(row) = rows.get_mut(at) else {
            continue;
        };
        if let Some(wanted) = wanted {
            take(row, "place", wanted);
        }
        let words = &telling.knowledge.vocabulary;
        let twice = words
            .reading(&key)
            .is_some_and(|id| row.readings.iter().any(|a| a.reading == id));
        if twice {
            faults.push(Fault {
                place: Some(place_in(line)),
                ..Fault::whole(
                    "given-twice",
                    format!("`{}` is filled in twice for one place", shown(&key)),
                    "write the place of each beside it",
                )
            });
            continue;
        }
        take(row, &key, &said);
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(joined(common, rows))
}

/// What is said once goes with every row: time and name; rounds, events and note with the first row of no place.
fn joined(common: Given, mut rows: Vec<Given>) -> Vec<Given> {
    if !common.is_empty() {
        match rows.iter_mut().find(|r| r.place.is_none()) {
            Some(row) => {
                row.done.clone_from(&common.done);
                row.events.clone_from(&common.events);
                row.note.clone_from(&common.note);
            }
            None => rows.insert(0, common.clone()),
        }
    }
    for row in &mut rows {
        row.time = common.time;
        row.by.clone_from(&common.by);
    }
    rows
}
