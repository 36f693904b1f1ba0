//! The `sign` and `event` columns: ids separated by `;`, and `!id` for a sign that was looked for and not there.

use super::problem::Trouble;
use super::row::Row;
use crate::fault::{did_you_mean, shown};
use crate::vocabulary::Vocabulary;

/// Adds the signs of a cell to the row; what is not understood is left out and told.
pub(super) fn signs(
    cell: &str,
    vocabulary: &Vocabulary,
    row: &mut Row,
    mut tell: impl FnMut(Trouble),
) {
    for word in cell.split(';').map(str::trim).filter(|w| !w.is_empty()) {
        let (id, seen) = match word.strip_prefix('!') {
            Some(rest) => (rest.trim_start(), false),
            None => (word, true),
        };
        let Some(sign) = vocabulary.sign(id) else {
            tell(unknown_sign(id, vocabulary));
            continue;
        };
        match row.signs.iter().find(|(other, _)| *other == sign) {
            None => row.signs.push((sign, seen)),
            Some((_, before)) if *before == seen => {}
            Some(_) => {
                row.signs.retain(|(other, _)| *other != sign);
                tell(Trouble::new(
                    "contradicting-sign",
                    format!("`{id}` is said to be there and not there in one row"),
                    "leave one of the two, or give them rows with a `place` each",
                ));
            }
        }
    }
}

/// Adds the events of a cell to the row; what is not understood is left out and told.
pub(super) fn events(
    cell: &str,
    vocabulary: &Vocabulary,
    row: &mut Row,
    mut tell: impl FnMut(Trouble),
) {
    for word in cell.split(';').map(str::trim).filter(|w| !w.is_empty()) {
        match vocabulary.event(word) {
            Some(event) if row.events.contains(&event) => {}
            Some(event) => row.events.push(event),
            None => tell(unknown_event(word, vocabulary)),
        }
    }
}

fn unknown_sign(id: &str, vocabulary: &Vocabulary) -> Trouble {
    let cure = if vocabulary.event(id).is_some() {
        format!("`{id}` is an event: put it in the `event` column")
    } else {
        let known = vocabulary.signs.iter().map(|s| s.id.as_str());
        did_you_mean(id, known, "put free words in `note`")
    };
    Trouble::new(
        "unknown-sign",
        format!("no sign is called `{}`", shown(id)),
        cure,
    )
}

fn unknown_event(word: &str, vocabulary: &Vocabulary) -> Trouble {
    let cure = if word.starts_with('!') {
        "`!` is for signs; leave out what did not happen".to_owned()
    } else if vocabulary.sign(word).is_some() {
        format!("`{word}` is a sign: put it in the `sign` column")
    } else {
        let known = vocabulary.events.iter().map(|e| e.id.as_str());
        did_you_mean(word, known, "put free words in `note`")
    };
    Trouble::new(
        "unknown-event",
        format!("no event is called `{}`", shown(word)),
        cure,
    )
}
