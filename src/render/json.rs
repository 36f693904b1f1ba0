//! The JSON of a diagnosis (data contract, section 8). `schema/review.schema.json` describes it.

use serde_json::{Value, json};

use super::Report;
use super::evidence::Words;
use super::when::utc;
use crate::assessment::{Assessment, CauseReport, StepReport};
use crate::diagnosis::Piece;
use crate::history::log::Log;

/// The form of this output; it changes only when a reader would break.
const SCHEMA: u32 = 1;

/// The JSON Schema (draft 2020-12) that the output keeps to.
pub const REVIEW_SCHEMA: &str = include_str!("schema/review.schema.json");

/// One object over many lines.
pub fn page(report: &Report<'_>) -> String {
    format!("{:#}\n", value(report))
}

/// One object on a line.
pub fn line(report: &Report<'_>) -> String {
    format!("{}\n", value(report))
}

/// The object.
pub fn value(report: &Report<'_>) -> Value {
    let a = report.assessment;
    let words = Words::of(report);
    json!({
        "schema": SCHEMA,
        "made_by": {
            "version": env!("CARGO_PKG_VERSION"),
            "knowledge": report.knowledge.digest,
            "house_rules": report.knowledge.house_rules,
        },
        "site": a.site,
        "as_of": utc(a.as_of),
        "last_row": a.last_row.map(utc),
        "verdict": a.verdict.word(),
        "dangers": a.dangers,
        "first_aid": steps(&a.first_aid),
        "minutes_left": a.minutes_left,
        "causes": a.causes.iter().map(|c| cause(c, &words)).collect::<Vec<_>>(),
        "leading_family": a.leading_family.as_ref().map(|f| json!({
            "id": f.id, "name": f.name, "probability": rounded(f.probability, 4), "likely": f.likely,
            "members": f.members, "first_steps": f.first_steps,
        })),
        "best_question": a.best_question.as_ref().map(|(id, text)| json!({"id": id, "text": text})),
        "nothing_wrong": rounded(a.nothing_wrong, 4),
        "steps": steps(&a.steps),
        "avoid": a.avoid.iter().map(|w| json!({
            "id": w.id, "text": w.text, "because": w.because,
        })).collect::<Vec<_>>(),
        "missing": a.missing.iter().map(|m| json!({"id": m.id, "why": m.why})).collect::<Vec<_>>(),
        "derived": derived(a),
        "projections": a.projections.iter().map(|p| json!({
            "limit": p.limit, "earliest": utc(p.earliest), "latest": p.latest.map(utc),
        })).collect::<Vec<_>>(),
        "site_notes": a.site_notes,
        "overrides": a.overrides.iter().map(|o| json!({
            "id": o.id, "from": o.from, "to": o.to, "loosens": o.loosens,
        })).collect::<Vec<_>>(),
        "cautions": a.cautions.iter().map(|(id, text)| json!({"id": id, "text": text})).collect::<Vec<_>>(),
        "log": log(report.log),
    })
}

fn cause(cause: &CauseReport, words: &Words<'_>) -> Value {
    json!({
        "id": cause.id,
        "name": cause.name,
        "family": cause.family,
        "probability": rounded(cause.probability, 4),
        "likely": cause.likely,
        "urgency": cause.urgency.word(),
        "place": cause.place,
        "for": pieces(&cause.evidence_for, words),
        "against": pieces(&cause.evidence_against, words),
        "would_tell": cause.would_tell.iter().map(|t| json!({
            "id": t.id, "bits": rounded(t.bits, 3),
        })).collect::<Vec<_>>(),
        "leaves_unexplained": cause.leaves_unexplained,
    })
}

fn pieces(pieces: &[Piece], words: &Words<'_>) -> Vec<Value> {
    let one = |p: &Piece| {
        json!({
            "evidence": words.piece(p), "weight": rounded(p.weight, 2), "source": p.source,
        })
    };
    pieces.iter().map(one).collect()
}

fn steps(steps: &[StepReport]) -> Vec<Value> {
    let one = |s: &StepReport| {
        json!({
            "id": s.id,
            "text": s.text,
            "detail": s.detail,
            "when": s.when.word(),
            "because": s.because,
            "check_first": s.check_first,
            "verify": s.verify.as_ref().map(|v| json!({
                "id": v.id, "direction": v.direction, "by": utc(v.by),
            })),
            "pace": s.pace,
        })
    };
    steps.iter().map(one).collect()
}

fn derived(assessment: &Assessment) -> Value {
    let pairs = assessment.derived.iter();
    Value::Object(pairs.map(|d| (d.id.clone(), figures(d.value))).collect())
}

fn log(log: &Log) -> Value {
    let problems = log.problems.iter().map(|p| {
        json!({
            "file": p.file, "line": p.line, "column": p.column, "code": p.code,
            "reason": p.reason, "cure": p.cure, "effect": p.effect.word(),
        })
    });
    json!({
        "files": log.files,
        "rows_read": log.rows_read,
        "rows_used": log.rows_used,
        "rows_refused": log.rows_refused,
        "rows_corrected": log.corrected.len(),
        "problem_count": log.problem_count,
        "problems": problems.collect::<Vec<_>>(),
    })
}

/// A number with so many decimals.
fn rounded(number: f64, decimals: i32) -> Value {
    let scale = 10_f64.powi(decimals);
    // Adding zero makes a negative zero an ordinary one.
    json!((number * scale).round() / scale + 0.0)
}

/// A number with four figures.
fn figures(number: f64) -> Value {
    if number == 0.0 {
        return json!(0.0);
    }
    let text = format!("{number:.3e}");
    text.parse::<f64>().map_or(Value::Null, |n| json!(n))
}
