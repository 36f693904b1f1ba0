//! What a column of the log holds: `time`, a free column, or a reading with the unit in brackets behind its id.

use std::fmt;

use crate::fault::{did_you_mean, nearest};
use crate::vocabulary::{ReadingId, Vocabulary};
use crate::water::units::{self, Unit, UnitKind};

/// The columns that hold no reading.
pub const FREE: [&str; 7] = ["time", "place", "by", "corrects", "sign", "event", "note"];

/// The cure when no known name is near.
pub const NO_NEAR: &str = "give it the id of a reading such as `ph`, or take it out";

/// What a column holds.
#[derive(Debug, Clone, PartialEq)]
pub enum Meaning {
    /// The time of the row.
    Time,
    /// The place the row is about.
    Place,
    /// Who made the row.
    By,
    /// The time of an earlier row whose values this row replaces.
    Corrects,
    /// Signs.
    Sign,
    /// Events.
    Event,
    /// Anybody's words.
    Note,
    /// A reading.
    Reading(ReadingColumn),
}

/// A reading and the unit its column is in.
#[derive(Debug, Clone, PartialEq)]
pub struct ReadingColumn {
    /// Which reading.
    pub reading: ReadingId,
    /// The unit, as the tables of units spell it.
    pub unit: String,
    /// How a value becomes one in the kept unit.
    pub kind: UnitKind,
    /// What was taken for granted because the column doesn't say: `as N` for a bare `nitrite`.
    pub assumes: Option<&'static str>,
}

/// Why a heading can't be understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NotAColumn {
    /// A stable id of the kind of fault.
    pub code: &'static str,
    /// What is wrong.
    pub reason: String,
    /// What to do.
    pub cure: String,
}

impl fmt::Display for NotAColumn {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}; {}", self.reason, self.cure)
    }
}

impl Meaning {
    /// The id that stands for it at the head of a log, without a unit.
    pub fn id<'v>(&self, vocabulary: &'v Vocabulary) -> &'v str {
        match self {
            Self::Time => "time",
            Self::Place => "place",
            Self::By => "by",
            Self::Corrects => "corrects",
            Self::Sign => "sign",
            Self::Event => "event",
            Self::Note => "note",
            Self::Reading(column) => &vocabulary[column.reading].id,
        }
    }

    fn free(id: &str) -> Option<Self> {
        Some(match id {
            "time" => Self::Time,
            "place" => Self::Place,
            "by" => Self::By,
            "corrects" => Self::Corrects,
            "sign" => Self::Sign,
            "event" => Self::Event,
            "note" => Self::Note,
            _ => return None,
        })
    }
}

/// Splits `nitrite (mg/L as NO2)` into the id and the unit. Brackets that don't close leave all of it an id.
fn split(text: &str) -> (&str, Option<&str>) {
    let text = text.trim();
    let inside = text.strip_suffix(')').and_then(|rest| rest.split_once('('));
    match inside {
        Some((id, unit)) => (id.trim(), Some(unit.trim())),
        None => (text, None),
    }
}

/// What a heading such as `ph` or `nitrite (mg/L as NO2)` means. Capitals don't matter; nothing else is guessed.
///
/// # Errors
/// [`NotAColumn`]: `unknown-column`, `derived-column` (computed, never measured), `unknown-unit`.
pub fn meaning(text: &str, vocabulary: &Vocabulary) -> Result<Meaning, NotAColumn> {
    let (written, unit) = split(text);
    let id = written.to_ascii_lowercase();
    if let Some(free) = Meaning::free(&id) {
        return match unit {
            None => Ok(free),
            Some(unit) => Err(NotAColumn {
                code: "unknown-unit",
                reason: format!("`{id}` takes no unit, but `{unit}` is written behind it"),
                cure: format!("write `{id}` alone"),
            }),
        };
    }
    let Some(reading) = vocabulary.reading(&id) else {
        return Err(unknown(written, &id, vocabulary));
    };
    if vocabulary[reading].derived {
        return Err(NotAColumn {
            code: "derived-column",
            reason: format!("`{id}` is worked out from other readings, never logged"),
            cure: "take the column out, and log what it is worked out from".to_owned(),
        });
    }
    in_unit(reading, &id, unit, vocabulary).map(Meaning::Reading)
}

fn unknown(written: &str, id: &str, vocabulary: &Vocabulary) -> NotAColumn {
    let ids = vocabulary.readings.iter().filter(|r| !r.derived);
    let known = FREE.into_iter().chain(ids.map(|r| r.id.as_str()));
    let reason = format!(
        "no reading or column is called `{}`",
        crate::fault::shown(written)
    );
    let kind = if vocabulary.sign(id).is_some() {
        Some("sign")
    } else {
        vocabulary.event(id).map(|_| "event")
    };
    let cure = match kind {
        Some(kind) => format!("`{id}` is one of the words for the `{kind}` column"),
        None => did_you_mean(id, known, NO_NEAR),
    };
    NotAColumn {
        code: "unknown-column",
        reason,
        cure,
    }
}

fn in_unit(
    reading: ReadingId,
    id: &str,
    unit: Option<&str>,
    vocabulary: &Vocabulary,
) -> Result<ReadingColumn, NotAColumn> {
    let kept = &vocabulary[reading].unit;
    let takes = units::units_of(id);
    let found: Option<&Unit> = match unit {
        None => takes.first(),
        Some(written) => units::find(takes, written),
    };
    if let Some(found) = found {
        // A bare heading is in the kept unit; the table says what that takes for granted.
        let bare = || takes.iter().find_map(|u| u.assumes);
        return Ok(ReadingColumn {
            reading,
            unit: found.name.to_owned(),
            kind: found.kind,
            assumes: unit.map_or_else(bare, |_| found.assumes),
        });
    }
    // A reading that only this farm's rule base knows has the one unit it is kept in.
    if unit.is_none_or(|written| takes.is_empty() && written.eq_ignore_ascii_case(kept)) {
        return Ok(ReadingColumn {
            reading,
            unit: kept.clone(),
            kind: UnitKind::Linear {
                scale: 1.0,
                offset: 0.0,
            },
            assumes: None,
        });
    }
    let mut names: Vec<&str> = takes.iter().map(|u| u.name).collect();
    if names.is_empty() {
        names.push(kept);
    }
    let written = unit.unwrap_or_default();
    let mut cure = format!("it takes {}", names.join(", "));
    if let Some(near) = nearest(written, names) {
        cure = format!("did you mean `{near}`? {cure}");
    }
    Err(NotAColumn {
        code: "unknown-unit",
        reason: format!("`{}` is not a unit of `{id}`", crate::fault::shown(written)),
        cure,
    })
}
