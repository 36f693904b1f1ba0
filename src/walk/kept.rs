//! The file that an interrupted walk is taken up from: readable, and whole at every moment.

use jiff::Timestamp;
use serde::{Deserialize, Serialize};

use super::{Answer, Ask, Given, Stage, Turn};
use crate::history::answers::Happened;
use crate::vocabulary::Vocabulary;

/// A walk on file.
#[derive(Debug, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct Kept {
    started: String,
    #[serde(default)]
    turn: Vec<KeptTurn>,
}

#[derive(Debug, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct KeptTurn {
    stage: KeptStage,
    #[serde(default)]
    answer: Vec<KeptAnswer>,
}

#[derive(Debug, Clone, Copy, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
enum KeptStage {
    Vital,
    Told,
    Asked,
}

/// One answer; what was said is in exactly one of the last five keys, none for "don't know".
#[derive(Debug, Default, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct KeptAnswer {
    id: String,
    time: String,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    number: Option<f64>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    seen: Option<bool>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    happened: Option<String>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    happened_at_all: Option<bool>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    can_be_measured: Option<bool>,
}

fn stamp(time: i64) -> String {
    Timestamp::from_second(time).map_or_else(|_| time.to_string(), |t| t.to_string())
}

fn unstamp(text: &str) -> Option<i64> {
    text.parse::<Timestamp>().ok().map(Timestamp::as_second)
}

/// The text of the file.
///
/// # Errors
/// What could not be written down.
pub fn write(words: &Vocabulary, started: i64, turns: &[Turn]) -> Result<String, String> {
    let kept = Kept {
        started: stamp(started),
        turn: turns
            .iter()
            .map(|t| KeptTurn {
                stage: match t.stage {
                    Stage::Vital => KeptStage::Vital,
                    Stage::Told => KeptStage::Told,
                    Stage::Asked => KeptStage::Asked,
                },
                answer: t.given.iter().map(|g| answer(words, g)).collect(),
            })
            .collect(),
    };
    let text = toml::to_string(&kept).map_err(|e| e.to_string())?;
    Ok(format!(
        "# A walk that is not finished. `gillside walk` offers to go on with it; delete this file to forget it.\n{text}"
    ))
}

fn answer(words: &Vocabulary, given: &Given) -> KeptAnswer {
    let mut kept = KeptAnswer {
        id: given.ask.id(words).to_owned(),
        time: stamp(given.time),
        ..KeptAnswer::default()
    };
    match given.answer {
        Answer::Number(number) => kept.number = Some(number),
        Answer::Seen(seen) => kept.seen = Some(seen),
        Answer::Happened(Happened::At(time)) => kept.happened = Some(stamp(time)),
        Answer::Happened(Happened::Ago(age)) => {
            kept.happened = Some(stamp(given.time.saturating_sub(age)))
        }
        Answer::Happened(Happened::Never) => kept.happened_at_all = Some(false),
        Answer::CannotMeasure => kept.can_be_measured = Some(false),
        Answer::Unknown => {}
    }
    kept
}

/// Reads the file: when the walk started, and what was answered.
///
/// # Errors
/// Why it can't be used.
pub fn read(words: &Vocabulary, text: &str) -> Result<(i64, Vec<Turn>), String> {
    let kept: Kept = toml::from_str(text).map_err(|e| e.message().to_owned())?;
    let started = unstamp(&kept.started)
        .ok_or_else(|| format!("`started` is no time: `{}`", kept.started))?;
    let mut turns = Vec::new();
    for turn in kept.turn {
        let mut given = Vec::new();
        for answer in turn.answer {
            given.push(said(words, &answer)?);
        }
        let stage = match turn.stage {
            KeptStage::Vital => Stage::Vital,
            KeptStage::Told => Stage::Told,
            KeptStage::Asked => Stage::Asked,
        };
        turns.push(Turn { stage, given });
    }
    Ok((started, turns))
}

fn said(words: &Vocabulary, kept: &KeptAnswer) -> Result<Given, String> {
    let wrong = || {
        format!(
            "the answer to `{}` can't be read",
            crate::fault::shown(&kept.id)
        )
    };
    let ask = Ask::find(words, &kept.id).ok_or_else(wrong)?;
    let time = unstamp(&kept.time).ok_or_else(wrong)?;
    let answer = match (ask, kept) {
        (
            _,
            KeptAnswer {
                can_be_measured: Some(false),
                ..
            },
        ) => Answer::CannotMeasure,
        (
            Ask::Reading(id),
            KeptAnswer {
                number: Some(number),
                ..
            },
        ) => {
            let (low, high) = words[id].plausible;
            let sound = (low..=high).contains(number);
            Answer::Number(Some(*number).filter(|_| sound).ok_or_else(wrong)?)
        }
        (
            Ask::Sign(_),
            KeptAnswer {
                seen: Some(seen), ..
            },
        ) => Answer::Seen(*seen),
        (
            Ask::Event(_),
            KeptAnswer {
                happened: Some(at), ..
            },
        ) => Answer::Happened(Happened::At(unstamp(at).ok_or_else(wrong)?)),
        (
            Ask::Event(_),
            KeptAnswer {
                happened_at_all: Some(false),
                ..
            },
        ) => Answer::Happened(Happened::Never),
        (
            _,
            KeptAnswer {
                number: None,
                seen: None,
                happened: None,
                happened_at_all: None,
                ..
            },
        ) => Answer::Unknown,
        _ => return Err(wrong()),
    };
    Ok(Given { ask, answer, time })
}
