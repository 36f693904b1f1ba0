//! Incidents for a program, and for an auditor: who put down what and when, what the program said then, what was done,
//! what was corrected later.

use serde_json::{Value, json};

use super::{Standing, Told};
use crate::history::log::Log;
use crate::incident::{Again, Check, Incident, Look, MadeBy, Ranked, Similar, Stored};
use crate::render::when::utc;

/// All incidents in short, and damaged files.
pub fn list_json(stored: &Stored) -> String {
    let made = json!({
        "schema": 1,
        "incidents": stored.incidents.iter().map(|i| json!({
            "id": i.id, "title": i.title, "opened": utc(i.opened), "open": i.is_open(),
            "closed": i.closed.as_ref().map(|c| utc(c.time)),
            "cause": i.closed.as_ref().and_then(|c| c.cause.clone()),
        })).collect::<Vec<_>>(),
        "damaged": stored.damaged.iter().map(|f| json!({
            "file": f.place.as_ref().map(|p| &p.file), "line": f.place.as_ref().map(|p| p.line),
            "code": f.code, "reason": f.reason, "cure": f.cure,
        })).collect::<Vec<_>>(),
    });
    format!("{made:#}\n")
}

/// One incident with everything there is: its file, its checks, the rows of the log while it was open with who made them,
/// and the rows that were corrected later, as they stood before.
pub fn json(
    standing: &Standing<'_>,
    similar: &[Similar],
    log: Option<&Log>,
    told: &Told<'_>,
) -> String {
    let i = standing.incident;
    let until = i.closed.as_ref().map_or(told.now, |c| c.time);
    let made = json!({
        "schema": 1,
        "id": i.id,
        "title": i.title,
        "opened": utc(i.opened),
        "by": i.by,
        "made_by": made_by(&i.made_by),
        "verdict": i.verdict,
        "seen": i.seen,
        "findings": i.findings,
        "ranking": ranking(&i.ranking),
        "steps": i.steps.iter().map(|s| json!({
            "id": s.id, "text": s.text, "when": s.when, "because": s.because, "check_first": s.check_first,
            "done": s.done.map(utc), "by": s.by,
            "verify": s.verify.as_ref().map(|v| json!({
                "id": v.id, "direction": v.direction, "due": utc(v.due), "from": v.from,
            })),
        })).collect::<Vec<_>>(),
        "avoid": i.avoid.iter().map(|a| json!({"id": a.id, "text": a.text})).collect::<Vec<_>>(),
        "plan": i.plan.iter().map(|p| json!({
            "at": utc(p.at), "text": p.text, "go_on_if": p.go_on_if, "stop_if": p.stop_if,
            "done": p.done.map(utc), "by": p.by,
        })).collect::<Vec<_>>(),
        "checks": standing.checks.iter().map(check).collect::<Vec<_>>(),
        "notes": i.notes.iter().map(|n| json!({"time": utc(n.time), "by": n.by, "text": n.text})).collect::<Vec<_>>(),
        "follow_ups": i.follows.iter().map(|f| json!({
            "time": utc(f.time), "by": f.by, "verdict": f.verdict, "found": f.found,
            "ranking": ranking(&f.ranking), "made_by": made_by(&f.made_by),
        })).collect::<Vec<_>>(),
        "reopened": i.reopened.iter().map(|r| json!({
            "time": utc(r.time), "by": r.by, "why": r.why,
            "was_closed": utc(r.was_closed), "was_cause": r.was_cause,
        })).collect::<Vec<_>>(),
        "closed": i.closed.as_ref().map(|c| json!({
            "time": utc(c.time), "by": c.by, "cause": c.cause, "outcome": c.outcome,
        })),
        "similar": similar.iter().map(|s| json!({
            "id": s.id, "cause": s.cause, "opened": utc(s.opened), "took_s": s.took,
            "likeness": (s.likeness * 1000.0).round() / 1000.0, "outcome": s.outcome,
        })).collect::<Vec<_>>(),
        "log": log.map(|log| rows(log, i, until, told)),
    });
    format!("{made:#}\n")
}

/// How an incident stands, and what next.
pub fn follow_json(standing: &Standing<'_>, again: Option<&Again>) -> String {
    let made = json!({
        "schema": 1,
        "id": standing.incident.id,
        "checks": standing.checks.iter().map(check).collect::<Vec<_>>(),
        "again": again.map(|a| json!({
            "causes": a.causes.iter().map(|(id, name, before, after)| json!({
                "id": id, "name": name, "before": rounded(*before), "after": rounded(*after),
            })).collect::<Vec<_>>(),
            "next": a.next.as_ref().map(|n| json!({"id": n.id, "text": n.text, "check_first": n.check_first})),
        })),
    });
    format!("{made:#}\n")
}

fn rounded(number: f64) -> f64 {
    (number * 1e4).round() / 1e4
}

fn made_by(made: &MadeBy) -> Value {
    json!({"version": made.version, "knowledge": made.knowledge, "house_rules": made.house_rules})
}

fn ranking(causes: &[Ranked]) -> Vec<Value> {
    let one = |r: &Ranked| json!({"id": r.id, "name": r.name, "probability": r.probability});
    causes.iter().map(one).collect()
}

fn check(check: &Check) -> Value {
    let (state, seen) = match &check.look {
        Look::Waiting(seen, _) => ("waiting", *seen),
        Look::Unread => ("unread", None),
        Look::Met(time, value) => ("met", Some((*time, *value))),
        Look::Missed(time, value) => ("missed", Some((*time, *value))),
    };
    json!({
        "step": check.step,
        "step_done": check.done,
        "id": check.verify.id,
        "direction": check.verify.direction,
        "due": utc(check.verify.due),
        "from": check.verify.from,
        "state": state,
        "seen": seen.map(|(time, value)| json!({"time": utc(time), "value": value})),
    })
}

fn rows(log: &Log, incident: &Incident, until: i64, told: &Told<'_>) -> Value {
    let words = &told.knowledge.vocabulary;
    let row = |row: &crate::history::log::Row| {
        let readings: serde_json::Map<String, Value> = row
            .values
            .iter()
            .map(|(id, v)| {
                let shown = json!({"value": v.amount, "below": v.below, "unit": words[*id].unit});
                (words[*id].id.clone(), shown)
            })
            .collect();
        json!({
            "time": utc(row.time), "line": row.line, "by": row.by, "readings": readings,
            "signs": row.signs.iter().map(|(s, seen)| json!({"id": words[*s].id, "seen": seen})).collect::<Vec<_>>(),
            "events": row.events.iter().map(|e| &words[*e].id).collect::<Vec<_>>(),
            "note": row.note,
        })
    };
    let during = |time: i64| time >= incident.opened && time <= until;
    let kept = log.rows.iter().filter(|r| during(r.time)).map(row);
    let corrected = log.corrected.iter().filter(|c| during(c.original.time));
    json!({
        "rows": kept.collect::<Vec<_>>(),
        "corrected": corrected.map(|c| json!({
            "was": row(&c.original), "at": utc(c.at), "by": c.by, "line": c.line,
        })).collect::<Vec<_>>(),
    })
}
