//! Lists of words and lists of tables: species, crops, media, shifts, places, phones.

use std::collections::HashSet;

use jiff::civil::Time;

use super::{numbers, texts};
use crate::decode::{Node, Section, Value};
use crate::fault::{did_you_mean, shown};
use crate::site::{Media, Phone, Place, PlaceKind, Shift};

/// The items of a list, where one text stands for a list of one.
fn items<'t>(section: &mut Section<'t>, key: &str) -> Vec<Node<'t>> {
    let Some(node) = section.node(key) else {
        return Vec::new();
    };
    match node.value() {
        Value::String(_) => vec![node],
        Value::Array(_) => node.list().unwrap_or_default(),
        _ => {
            node.texts();
            Vec::new()
        }
    }
}

/// Ids that must be known, each once.
pub(super) fn known(section: &mut Section<'_>, key: &str, known: &[String]) -> Vec<String> {
    let mut found: Vec<String> = Vec::new();
    for node in items(section, key) {
        let Some(id) = node.text() else { continue };
        if !known.contains(&id) {
            let all = format!("it takes {}", known.join(", "));
            node.fault(
                "unknown-id",
                format!("no {key} is called `{}`", shown(&id)),
                did_you_mean(&id, known.iter().map(String::as_str), &all),
            );
        } else if found.contains(&id) {
            twice(&node, &id);
        } else {
            found.push(id);
        }
    }
    found
}

/// Words out of a set, each once.
pub(super) fn each_of<T: PartialEq>(
    section: &mut Section<'_>,
    key: &str,
    words: &[&str],
    of: impl Fn(&str) -> Option<T>,
) -> Vec<T> {
    let mut found = Vec::new();
    for node in items(section, key) {
        match texts::word_of(&node, words, &of) {
            Some(value) if found.contains(&value) => twice(&node, &node.text().unwrap_or_default()),
            Some(value) => found.push(value),
            None => {}
        }
    }
    found
}

fn twice(node: &Node<'_>, word: &str) {
    node.fault(
        "named-twice",
        format!("`{}` is in `{}` twice", shown(word), node.name()),
        "take one of them out",
    );
}

/// Volumes of media.
pub(super) fn media(root: &mut Section<'_>, kinds: &[String]) -> Vec<Media> {
    let known: Vec<&str> = kinds.iter().map(String::as_str).collect();
    let mut found = Vec::new();
    for mut table in root.sections("media") {
        let kind = table.required("kind").and_then(|node| {
            texts::word_of(&node, &known, |w| known.contains(&w).then(|| w.to_owned()))
        });
        table.required("volume_l");
        let volume_l = numbers::above_zero(&mut table, "volume_l");
        if let (Some(kind), Some(volume_l)) = (kind, volume_l) {
            found.push(Media { kind, volume_l });
        }
        table.finish();
    }
    found
}

/// Shifts, each with a name of its own.
pub(super) fn shifts(root: &mut Section<'_>) -> Vec<Shift> {
    let mut names = HashSet::new();
    let mut found = Vec::new();
    for mut table in root.sections("shift") {
        let name = unique(&mut table, &mut names);
        let start = time_of_day(&mut table, "start");
        let end = time_of_day(&mut table, "end");
        if let (Some(name), Some(start), Some(end)) = (name, start, end) {
            found.push(Shift { name, start, end });
        }
        table.finish();
    }
    found
}

/// Places, each with a name of its own.
pub(super) fn places(root: &mut Section<'_>) -> Vec<Place> {
    let mut names = HashSet::new();
    let mut found = Vec::new();
    for mut table in root.sections("place") {
        let name = unique(&mut table, &mut names);
        let kind = texts::one_of(&mut table, "kind", PlaceKind::WORDS, PlaceKind::of);
        if let Some(name) = name {
            found.push(Place { name, kind });
        }
        table.finish();
    }
    found
}

/// Whom to call.
pub(super) fn phones(root: &mut Section<'_>) -> Vec<Phone> {
    let mut found = Vec::new();
    for mut table in root.sections("phone") {
        let who = texts::required_words(&mut table, "who");
        let number = texts::required_words(&mut table, "number");
        if let (Some(who), Some(number)) = (who, number) {
            found.push(Phone { who, number });
        }
        table.finish();
    }
    found
}

/// A name that no other table of this list has.
fn unique(table: &mut Section<'_>, names: &mut HashSet<String>) -> Option<String> {
    let name = texts::required_words(table, "name")?;
    if names.insert(name.clone()) {
        return Some(name);
    }
    if let Some(node) = table.node("name") {
        twice(&node, &name);
    }
    None
}

/// A time of day, as a text `06:00` or a TOML time.
fn time_of_day(table: &mut Section<'_>, key: &str) -> Option<Time> {
    let node = table.required(key)?;
    let text = match node.value() {
        Value::Datetime(when) => when.to_string(),
        _ => node.text()?,
    };
    let parsed = clock(&text);
    if parsed.is_none() {
        node.fault(
            "bad-time",
            format!("`{key}` is `{}`, which is not a time of day", shown(&text)),
            "write it as HH:MM, from 00:00 to 23:59",
        );
    }
    parsed
}

/// `HH:MM` or `HH:MM:SS`, and nothing else.
fn clock(text: &str) -> Option<Time> {
    let digits = |part: &str| -> Option<i8> {
        let two = part.len() == 2 && part.bytes().all(|b| b.is_ascii_digit());
        if two { part.parse().ok() } else { None }
    };
    let mut parts = text.split(':');
    let hour = digits(parts.next()?)?;
    let minute = digits(parts.next()?)?;
    let second = parts.next().map_or(Some(0), digits)?;
    if parts.next().is_some() {
        return None;
    }
    Time::new(hour, minute, second, 0).ok()
}
