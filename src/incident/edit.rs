//! One thing put down in an incident's file. What a person wrote in it stays: words, comments, order.

use jiff::Timestamp;
use toml_edit::{Array, ArrayOfTables, DocumentMut, Item, Table, Value, value};

use super::model::{Closed, Followed, Incident, MadeBy, PlanStep, Ranked, Taken};
use crate::fault::{Fault, did_you_mean, shown};

/// Who and when.
#[derive(Debug, Clone, Copy)]
pub struct Mark<'a> {
    /// When, unix seconds.
    pub time: i64,
    /// Who.
    pub by: Option<&'a str>,
}

/// What is put down.
#[derive(Debug, Clone)]
pub enum Edit {
    /// Somebody's words.
    Note(String),
    /// A step was done: its id, and what its reading was then. A step of the plan is `plan-1`, `plan-2` …
    Done(String, Option<f64>),
    /// A paced correction; one that was there before is replaced where it is not done.
    Plan(Vec<PlanStep>),
    /// It was followed up.
    Follow(Followed),
    /// More steps were chosen.
    Steps(Vec<Taken>),
    /// It is over: the cause, and what came of it.
    Close(Option<String>, Option<String>),
    /// It is not over after all.
    Reopen(Option<String>),
}

/// A whole new file.
pub(super) fn whole(incident: &Incident) -> String {
    let mut doc = DocumentMut::new();
    doc.decor_mut().set_prefix(
        "# An incident. Change it by hand as you like; times are in UTC where they end in Z.\n",
    );
    doc["title"] = value(&incident.title);
    doc["opened"] = time(incident.opened);
    by(doc.as_table_mut(), incident.by.as_deref());
    doc["verdict"] = value(&incident.verdict);
    doc["seen"] = lines(&incident.seen);
    doc["findings"] = lines(&incident.findings);
    doc["made_by"] = Item::Table(made_by(&incident.made_by));
    push_all(
        doc.as_table_mut(),
        "ranking",
        incident.ranking.iter().map(ranked),
    );
    push_all(doc.as_table_mut(), "step", incident.steps.iter().map(step));
    let avoid = incident.avoid.iter().map(|a| {
        let mut table = Table::new();
        table["id"] = value(&a.id);
        table["text"] = value(&a.text);
        table
    });
    push_all(doc.as_table_mut(), "avoid", avoid);
    doc.to_string()
}

/// The text of a file with something put down in it. `incident` is what the file holds.
///
/// # Errors
/// A step that is not there or done already, an incident that is closed already or not closed.
pub fn edited(
    text: &str,
    incident: &Incident,
    edit: &Edit,
    mark: Mark<'_>,
) -> Result<String, Fault> {
    let mut doc: DocumentMut = text.parse().map_err(|e: toml_edit::TomlError| {
        Fault::whole(
            "not-toml",
            e.message().to_owned(),
            "correct the file by hand",
        )
    })?;
    let root = doc.as_table_mut();
    let mut marked = Table::new();
    marked["time"] = time(mark.time);
    by(&mut marked, mark.by);
    match edit {
        Edit::Note(words) => {
            marked["text"] = value(words);
            push(root, "note", marked);
        }
        Edit::Done(id, from) => done(root, incident, id, *from, mark)?,
        Edit::Plan(steps) => plan(root, steps),
        Edit::Follow(followed) => push(root, "follow", follow(marked, followed)),
        Edit::Steps(steps) => {
            let new = steps
                .iter()
                .filter(|s| !incident.steps.iter().any(|t| t.id == s.id));
            push_all(root, "step", new.map(step));
        }
        Edit::Close(cause, outcome) => {
            if let Some(closed) = &incident.closed {
                return Err(closed_already(incident, closed));
            }
            if let Some(cause) = cause {
                marked["cause"] = value(cause);
            }
            if let Some(outcome) = outcome {
                marked["outcome"] = value(outcome);
            }
            root["closed"] = Item::Table(marked);
        }
        Edit::Reopen(why) => {
            let Some(closed) = &incident.closed else {
                return Err(Fault::whole(
                    "not-closed",
                    format!("`{}` is open", incident.id),
                    "nothing needs to be done",
                ));
            };
            if let Some(why) = why {
                marked["why"] = value(why);
            }
            marked["was_closed"] = time(closed.time);
            if let Some(cause) = &closed.cause {
                marked["was_cause"] = value(cause);
            }
            root.remove("closed");
            push(root, "reopened", marked);
        }
    }
    Ok(doc.to_string())
}

fn closed_already(incident: &Incident, closed: &Closed) -> Fault {
    let cause = closed.cause.as_deref().unwrap_or("no known cause");
    Fault::whole(
        "closed-already",
        format!("`{}` is closed already ({cause})", incident.id),
        "open it again first: `gillside incident reopen`",
    )
}

/// Marks a step as done, and moves what it is verified by to as long after that as it was after the opening.
fn done(
    root: &mut Table,
    incident: &Incident,
    id: &str,
    from: Option<f64>,
    mark: Mark<'_>,
) -> Result<(), Fault> {
    let planned = id
        .strip_prefix("plan-")
        .and_then(|n| n.parse::<usize>().ok())
        .and_then(|n| n.checked_sub(1));
    let (list, at, before) = match planned {
        Some(at) => ("plan", at, incident.plan.get(at).map(|p| p.done)),
        None => {
            let at = incident.steps.iter().position(|s| s.id == id);
            let step = at.and_then(|at| incident.steps.get(at));
            ("step", at.unwrap_or(usize::MAX), step.map(|s| s.done))
        }
    };
    let table = root
        .get_mut(list)
        .and_then(Item::as_array_of_tables_mut)
        .and_then(|tables| tables.get_mut(at));
    let (Some(before), Some(table)) = (before, table) else {
        let plans: Vec<String> = (1..=incident.plan.len())
            .map(|n| format!("plan-{n}"))
            .collect();
        let known = incident
            .steps
            .iter()
            .map(|s| s.id.as_str())
            .chain(plans.iter().map(String::as_str));
        let all: Vec<&str> = known.clone().collect();
        return Err(Fault::whole(
            "unknown-step",
            format!("`{}` has no step `{}`", incident.id, shown(id)),
            did_you_mean(id, known, &format!("it has {}", all.join(", "))),
        ));
    };
    if before.is_some() {
        return Err(Fault::whole(
            "done-already",
            format!("`{}` was done already", shown(id)),
            "put down what was done again with `gillside incident note`",
        ));
    }
    table["done"] = time(mark.time);
    by(table, mark.by);
    let verify = incident
        .steps
        .get(at)
        .filter(|_| planned.is_none())
        .and_then(|s| s.verify.as_ref());
    if let Some(verify) = verify
        && let Some(written) = table.get_mut("verify").and_then(Item::as_table_like_mut)
    {
        let after = (verify.due - incident.opened).max(0);
        written.insert("due", time(mark.time + after));
        if let Some(from) = from {
            written.insert("from", value(from));
        }
    }
    Ok(())
}

fn plan(root: &mut Table, steps: &[PlanStep]) {
    if let Some(old) = root.get_mut("plan").and_then(Item::as_array_of_tables_mut) {
        old.retain(|t| t.contains_key("done"));
    }
    let tables = steps.iter().map(|step| {
        let mut table = Table::new();
        table["at"] = time(step.at);
        table["text"] = value(&step.text);
        table["go_on_if"] = lines(&step.go_on_if);
        table["stop_if"] = lines(&step.stop_if);
        table
    });
    push_all(root, "plan", tables);
}

fn follow(mut table: Table, followed: &Followed) -> Table {
    table["verdict"] = value(&followed.verdict);
    table["found"] = lines(&followed.found);
    table["made_by"] = Item::Table(made_by(&followed.made_by));
    push_all(&mut table, "ranking", followed.ranking.iter().map(ranked));
    table
}

fn made_by(made: &MadeBy) -> Table {
    let mut table = Table::new();
    table["version"] = value(&made.version);
    table["knowledge"] = value(&made.knowledge);
    if let Some(rules) = &made.house_rules {
        table["house_rules"] = value(rules);
    }
    table
}

fn ranked(ranked: &Ranked) -> Table {
    let mut table = Table::new();
    table["id"] = value(&ranked.id);
    table["name"] = value(&ranked.name);
    table["probability"] = value(ranked.probability);
    table
}

fn step(step: &Taken) -> Table {
    let mut table = Table::new();
    table["id"] = value(&step.id);
    table["text"] = value(&step.text);
    table["when"] = value(&step.when);
    table["because"] = lines(&step.because);
    if !step.check_first.is_empty() {
        table["check_first"] = lines(&step.check_first);
    }
    if let Some(verify) = &step.verify {
        let mut inner = toml_edit::InlineTable::new();
        inner.insert("id", verify.id.as_str().into());
        inner.insert("direction", verify.direction.as_str().into());
        if let Ok(due) = time(verify.due).into_value() {
            inner.insert("due", due);
        }
        if let Some(from) = verify.from {
            inner.insert("from", from.into());
        }
        table["verify"] = value(inner);
    }
    table
}

fn by(table: &mut Table, who: Option<&str>) {
    if let Some(who) = who {
        table["by"] = value(who);
    }
}

/// A TOML date-time in UTC; the text of it where there is no such date.
fn time(time: i64) -> Item {
    let text = Timestamp::from_second(time).map_or_else(|_| time.to_string(), |t| t.to_string());
    match text.parse::<toml_edit::Datetime>() {
        Ok(date) => value(date),
        Err(_) => value(text),
    }
}

/// A list of texts, each on its own line where they are long.
fn lines(texts: &[String]) -> Item {
    let mut array: Array = texts.iter().map(String::as_str).collect();
    if texts.iter().map(String::len).sum::<usize>() > 80 {
        for item in array.iter_mut() {
            item.decor_mut().set_prefix("\n  ");
        }
        array.set_trailing("\n");
        array.set_trailing_comma(true);
    }
    value(Value::Array(array))
}

fn push(root: &mut Table, key: &str, table: Table) {
    let item = root
        .entry(key)
        .or_insert_with(|| Item::ArrayOfTables(ArrayOfTables::new()));
    if let Some(list) = item.as_array_of_tables_mut() {
        list.push(table);
    }
}

fn push_all(root: &mut Table, key: &str, tables: impl Iterator<Item = Table>) {
    for table in tables {
        push(root, key, table);
    }
}
