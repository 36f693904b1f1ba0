//! Answers from a file (data contract, section 7): what a person would say at the tank, for tests and scripts.

use jiff::{Span, SpanRelativeTo, Unit, civil, tz::TimeZone};

use crate::decode::{self, Node, Section};
use crate::fault::{Fault, Source, did_you_mean};
use crate::vocabulary::{EventId, ReadingId, SignId, Vocabulary};

/// What is said of an event.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Happened {
    /// So many seconds ago.
    Ago(i64),
    /// At this time, unix seconds.
    At(i64),
    /// It did not happen.
    Never,
}

/// A set of answers; what is not in it is answered "don't know".
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Answers {
    /// When they were given, unix seconds.
    pub time: Option<i64>,
    /// Numbers, in the units of the contract.
    pub readings: Vec<(ReadingId, f64)>,
    /// Seen or not.
    pub signs: Vec<(SignId, bool)>,
    /// Happened or not.
    pub events: Vec<(EventId, Happened)>,
}

/// Reads answers; civil times are in `zone`.
pub fn read(source: &Source, vocabulary: &Vocabulary, zone: &TimeZone) -> (Answers, Vec<Fault>) {
    decode::read(source, |root| Answers {
        time: root.node("time").and_then(|n| moment(&n, zone)),
        readings: table(
            root,
            "readings",
            "reading",
            |id| vocabulary.reading(id),
            &vocabulary
                .readings
                .iter()
                .map(|r| r.id.as_str())
                .collect::<Vec<_>>(),
        )
        .into_iter()
        .filter_map(|(id, node)| Some((id, plausible(&node, id, vocabulary)?)))
        .collect(),
        signs: table(
            root,
            "signs",
            "sign",
            |id| vocabulary.sign(id),
            &vocabulary
                .signs
                .iter()
                .map(|r| r.id.as_str())
                .collect::<Vec<_>>(),
        )
        .into_iter()
        .filter_map(|(id, node)| Some((id, node.flag()?)))
        .collect(),
        events: table(
            root,
            "events",
            "event",
            |id| vocabulary.event(id),
            &vocabulary
                .events
                .iter()
                .map(|r| r.id.as_str())
                .collect::<Vec<_>>(),
        )
        .into_iter()
        .filter_map(|(id, node)| Some((id, happened(&node, zone)?)))
        .collect(),
    })
}

fn table<'t, T>(
    root: &mut Section<'t>,
    key: &str,
    what: &str,
    find: impl Fn(&str) -> Option<T>,
    known: &[&str],
) -> Vec<(T, Node<'t>)> {
    let Some(mut section) = root.section(key) else {
        return Vec::new();
    };
    let mut found = Vec::new();
    for id in section.keys() {
        let Some(node) = section.node(&id) else {
            continue;
        };
        match find(&id) {
            Some(number) => found.push((number, node)),
            None => section.fault_at_key(
                &id,
                "unknown-id",
                format!("unknown {what} `{id}`"),
                did_you_mean(&id, known.iter().copied(), "use an id of the vocabulary"),
            ),
        }
    }
    section.finish();
    found
}

fn plausible(node: &Node<'_>, id: ReadingId, vocabulary: &Vocabulary) -> Option<f64> {
    let value = node.number()?;
    let (low, high) = vocabulary[id].plausible;
    if (low..=high).contains(&value) {
        return Some(value);
    }
    node.fault(
        "implausible",
        format!("`{}` is {value}, which water cannot have", node.name()),
        format!("give a value from {low} to {high} {}", vocabulary[id].unit),
    );
    None
}

fn moment(node: &Node<'_>, zone: &TimeZone) -> Option<i64> {
    let text = match node.value() {
        decode::Value::Datetime(_) => node.date()?,
        _ => node.text()?,
    };
    let read = parse(&text, zone);
    if read.is_none() {
        node.fault(
            "not-a-time",
            format!("`{text}` is not a time"),
            "write `2026-03-01 09:00`, or a time with its zone such as 2026-03-01T09:00:00Z",
        );
    }
    read
}

/// Unix seconds of an RFC 3339 time, or of a civil time in a zone.
pub fn parse(text: &str, zone: &TimeZone) -> Option<i64> {
    if let Ok(stamp) = text.parse::<jiff::Timestamp>() {
        return Some(stamp.as_second());
    }
    let civil = text
        .parse::<civil::DateTime>()
        .ok()
        .or_else(|| text.parse::<civil::Date>().ok().map(|d| d.at(0, 0, 0, 0)))?;
    let zoned = zone.to_ambiguous_timestamp(civil).compatible().ok()?;
    Some(zoned.as_second())
}

fn happened(node: &Node<'_>, zone: &TimeZone) -> Option<Happened> {
    match node.value() {
        decode::Value::Boolean(false) => return Some(Happened::Never),
        decode::Value::Boolean(true) => {
            node.fault(
                "no-age",
                format!("`{}` happened, but when?", node.name()),
                "write an age such as \"2 d\", a time, or false",
            );
            return None;
        }
        _ => {}
    }
    let text = match node.value() {
        decode::Value::Datetime(_) => node.date()?,
        _ => node.text()?,
    };
    if let Some(time) = parse(&text, zone) {
        return Some(Happened::At(time));
    }
    let age = text
        .parse::<Span>()
        .ok()
        .and_then(|s| {
            s.total((Unit::Second, SpanRelativeTo::days_are_24_hours()))
                .ok()
        })
        .filter(|s| (0.0..1e10).contains(s));
    match age {
        #[allow(clippy::cast_possible_truncation)] // checked just above
        Some(seconds) => Some(Happened::Ago(seconds as i64)),
        None => {
            node.fault(
                "not-an-age",
                format!("`{text}` is neither a time nor an age"),
                "write `2026-03-01 09:00`, an age such as `2 d`, or false",
            );
            None
        }
    }
}
