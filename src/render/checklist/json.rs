//! The checklist for a program.

use serde_json::{Value, json};

use super::Sheet;
use super::words::Words;
use crate::render::when::utc;
use crate::shift::{Item, Kind};

/// One object over many lines.
pub fn json(sheet: &Sheet<'_>) -> String {
    let list = sheet.list;
    let words = Words::of(sheet);
    let made = json!({
        "schema": 1,
        "made_by": {
            "version": env!("CARGO_PKG_VERSION"),
            "knowledge": sheet.knowledge.digest,
            "house_rules": sheet.knowledge.house_rules,
        },
        "site": sheet.site.name,
        "shift": list.window.name,
        "start": utc(list.window.start),
        "end": utc(list.window.end),
        "verdict": sheet.assessment.map(|a| a.verdict.word()),
        "incidents": list.open.iter().map(|(id, title)| json!({"id": id, "title": title})).collect::<Vec<_>>(),
        "places": list.stretches.iter().map(|s| json!({
            "place": s.place,
            "items": s.items.iter().map(|i| item(i, sheet, &words)).collect::<Vec<_>>(),
        })).collect::<Vec<_>>(),
        "phone": sheet.site.phone.iter().map(|p| json!({"who": p.who, "number": p.number})).collect::<Vec<_>>(),
    });
    format!("{made:#}\n")
}

fn item(item: &Item, sheet: &Sheet<'_>, words: &Words<'_>) -> Value {
    let (kind, id, incident) = match &item.kind {
        Kind::Check(incident, check) => ("check", check.verify.id.clone(), Some(incident)),
        Kind::Step(incident, step) => ("step", step.id.clone(), Some(incident)),
        Kind::Plan(incident, number, _) => ("plan", format!("plan-{number}"), Some(incident)),
        Kind::Trend(trend) => (
            "trend",
            sheet.knowledge.vocabulary[trend.reading].id.clone(),
            None,
        ),
        Kind::Tell(id, _) => ("tell", id.clone(), None),
        Kind::Extra(id) => ("extra", id.clone(), None),
        Kind::Round(id) => ("round", id.clone(), None),
    };
    json!({
        "kind": kind,
        "id": id,
        "incident": incident,
        "text": words.item(item),
        "why": (!item.why.is_empty()).then_some(&item.why),
        "due": item.due.map(utc),
        "last": item.last.map(utc),
        "every_s": item.every,
        "conditions": words.conditions(item),
        "blanks": item.blanks.iter().map(|b| json!({
            "reading": sheet.knowledge.vocabulary[b.reading].id,
            "unit": b.unit,
            "low": b.low,
            "high": b.high,
            "last": b.last.map(|(time, value)| json!({"time": utc(time), "value": value})),
        })).collect::<Vec<_>>(),
    })
}
