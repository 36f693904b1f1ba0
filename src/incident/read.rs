//! A file to an incident. A fault anywhere makes it damaged: it is then told of and left alone.

use jiff::tz::TimeZone;

use super::model::{
    Avoided, Checked, Closed, Followed, Incident, MadeBy, Note, PlanStep, Ranked, Reopened, Taken,
};
use crate::decode::{self, Node, Section};
use crate::fault::{Fault, Source};
use crate::history::log::read_time;

/// Reads the incident with this id. Times without an offset are the site's.
///
/// # Errors
/// All faults of the file, with their places.
pub fn read(id: &str, source: &Source, zone: &TimeZone) -> Result<Incident, Vec<Fault>> {
    let (made, faults) = decode::read(source, |root| incident(id, root, zone));
    match made {
        Some(made) if faults.is_empty() => Ok(made),
        _ if faults.is_empty() => Err(vec![Fault::whole(
            "not-an-incident",
            format!("`{}` is no incident", source.name),
            "correct it by hand, or take it out of the folder",
        )]),
        _ => Err(faults),
    }
}

fn incident(id: &str, root: &mut Section<'_>, zone: &TimeZone) -> Option<Incident> {
    let title = root.required_text("title");
    let opened = root.required("opened").and_then(|n| time(&n, zone));
    let made = Incident {
        id: id.to_owned(),
        title: title.clone().unwrap_or_default(),
        opened: opened.unwrap_or_default(),
        by: root.text("by"),
        verdict: root.text("verdict").unwrap_or_default(),
        seen: root.texts("seen"),
        findings: root.texts("findings"),
        made_by: made_by(root),
        ranking: ranking(root),
        steps: each(root, "step", |s| step(s, zone)),
        avoid: each(root, "avoid", |s| {
            Some(Avoided {
                id: s.required_text("id")?,
                text: s.required_text("text")?,
            })
        }),
        plan: each(root, "plan", |s| plan(s, zone)),
        notes: each(root, "note", |s| {
            Some(Note {
                time: at(s, "time", zone)?,
                by: s.text("by"),
                text: s.required_text("text")?,
            })
        }),
        follows: each(root, "follow", |s| {
            Some(Followed {
                time: at(s, "time", zone)?,
                by: s.text("by"),
                verdict: s.text("verdict").unwrap_or_default(),
                found: s.texts("found"),
                ranking: ranking(s),
                made_by: made_by(s),
            })
        }),
        reopened: each(root, "reopened", |s| {
            Some(Reopened {
                time: at(s, "time", zone)?,
                by: s.text("by"),
                why: s.text("why"),
                was_closed: at(s, "was_closed", zone)?,
                was_cause: s.text("was_cause"),
            })
        }),
        closed: root.section("closed").and_then(|mut s| {
            let made = at(&mut s, "time", zone).map(|time| Closed {
                time,
                by: s.text("by"),
                cause: s.text("cause"),
                outcome: s.text("outcome"),
            });
            s.finish();
            made
        }),
    };
    (title.is_some() && opened.is_some()).then_some(made)
}

fn each<T>(
    root: &mut Section<'_>,
    key: &str,
    mut one: impl FnMut(&mut Section<'_>) -> Option<T>,
) -> Vec<T> {
    root.sections(key)
        .into_iter()
        .filter_map(|mut section| {
            let made = one(&mut section);
            section.finish();
            made
        })
        .collect()
}

/// A time, as a TOML date-time or as text.
fn time(node: &Node<'_>, zone: &TimeZone) -> Option<i64> {
    let text = match node.value() {
        decode::Value::String(s) => s.to_string(),
        _ => node.date()?,
    };
    match read_time(&text, zone) {
        Ok(time) => Some(time),
        Err(fault) => {
            node.fault(fault.code, fault.reason, fault.cure);
            None
        }
    }
}

fn at(section: &mut Section<'_>, key: &str, zone: &TimeZone) -> Option<i64> {
    section.required(key).and_then(|n| time(&n, zone))
}

fn maybe_at(section: &mut Section<'_>, key: &str, zone: &TimeZone) -> Option<i64> {
    section.node(key).and_then(|n| time(&n, zone))
}

fn made_by(root: &mut Section<'_>) -> MadeBy {
    let Some(mut section) = root.section("made_by") else {
        return MadeBy::default();
    };
    let made = MadeBy {
        version: section.text("version").unwrap_or_default(),
        knowledge: section.text("knowledge").unwrap_or_default(),
        house_rules: section.text("house_rules"),
    };
    section.finish();
    made
}

fn ranking(root: &mut Section<'_>) -> Vec<Ranked> {
    each(root, "ranking", |s| {
        Some(Ranked {
            id: s.required_text("id")?,
            name: s.text("name").unwrap_or_default(),
            probability: s.required_number("probability")?,
        })
    })
}

fn step(section: &mut Section<'_>, zone: &TimeZone) -> Option<Taken> {
    let verify = section.section("verify").and_then(|mut s| {
        let made = checked(&mut s, zone);
        s.finish();
        made
    });
    Some(Taken {
        text: section.text("text").unwrap_or_default(),
        when: section.text("when").unwrap_or_default(),
        because: section.texts("because"),
        check_first: section.texts("check_first"),
        verify,
        done: maybe_at(section, "done", zone),
        by: section.text("by"),
        id: section.required_text("id")?,
    })
}

fn checked(section: &mut Section<'_>, zone: &TimeZone) -> Option<Checked> {
    let direction = section.required("direction")?;
    let word = direction.text()?;
    if !["rising", "falling", "steady", "gone"].contains(&word.as_str()) {
        direction.fault(
            "unknown-word",
            format!("`{word}` is no direction"),
            "it is one of rising, falling, steady, gone",
        );
        return None;
    }
    Some(Checked {
        id: section.required_text("id")?,
        direction: word,
        due: at(section, "due", zone)?,
        from: section.number("from"),
    })
}

fn plan(section: &mut Section<'_>, zone: &TimeZone) -> Option<PlanStep> {
    Some(PlanStep {
        at: at(section, "at", zone)?,
        text: section.required_text("text")?,
        go_on_if: section.texts("go_on_if"),
        stop_if: section.texts("stop_if"),
        done: maybe_at(section, "done", zone),
        by: section.text("by"),
    })
}
