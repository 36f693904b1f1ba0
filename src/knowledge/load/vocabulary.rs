//! `readings.toml`, `signs.toml`, `events.toml`.

use super::entry::{id, seconds, sources, within, words};
use super::names::Names;
use crate::decode::Section;
use crate::knowledge::Side;
use crate::vocabulary::{Event, Question, Reading, Sign};

/// Reads the words of one file into `names`.
pub(super) fn read(root: &mut Section<'_>, names: &mut Names) {
    for section in root.sections("reading") {
        reading(section, names);
    }
    for section in root.sections("sign") {
        sign(section, names);
    }
    for section in root.sections("event") {
        event(section, names);
    }
}

/// Marks the keys read in the first pass as known.
pub(super) fn skip(root: &mut Section<'_>) {
    for key in ["reading", "sign", "event"] {
        root.has(key);
    }
}

fn reading(mut section: Section<'_>, names: &mut Names) {
    let vocabulary = &names.vocabulary;
    let made = (|| {
        let id = id(&mut section, |id| vocabulary.reading(id).is_some())?;
        let derived = section.flag("derived").unwrap_or(false);
        let plausible = range(&mut section);
        Some(Reading {
            id,
            name: words(&mut section, "name")?,
            unit: section.text("unit").unwrap_or_default(),
            also: section.texts("also"),
            derived,
            local: section.flag("local").unwrap_or(false),
            per_interval: section.flag("per_interval").unwrap_or(false),
            resolution: number(&mut section, "resolution", 0.0, 1e6),
            resolution_share: number(&mut section, "resolution_share", 0.0, 1.0),
            plausible: plausible?,
            good_for: section.required("good_for").and_then(|n| seconds(&n))?,
            decimals: decimals(&mut section),
            question: question(&mut section, !derived)?,
            source: sources(&mut section, names),
        })
    })();
    let comfort = comfort(&mut section);
    section.finish();
    if let Some(reading) = made {
        let id = names.vocabulary.add_reading(reading);
        for (side, bound) in comfort {
            names.comfort.insert((id, side as u8), bound);
        }
    }
}

fn comfort(section: &mut Section<'_>) -> Vec<(Side, f64)> {
    let Some(mut band) = section.section("comfort") else {
        return Vec::new();
    };
    let mut bounds = Vec::new();
    for (key, side) in [("low", Side::Low), ("high", Side::High)] {
        if let Some(value) = band.number(key) {
            bounds.push((side, value));
        }
    }
    band.texts("source");
    band.finish();
    bounds
}

fn range(section: &mut Section<'_>) -> Option<(f64, f64)> {
    let node = section.required("plausible")?;
    let bounds: Vec<f64> = node.list()?.iter().filter_map(|n| n.number()).collect();
    if let [low, high] = bounds[..]
        && low < high
    {
        return Some((low, high));
    }
    node.fault(
        "out-of-order",
        "`plausible` is not a low and a high number",
        "write `plausible = [low, high]`",
    );
    None
}

fn number(section: &mut Section<'_>, key: &str, low: f64, high: f64) -> f64 {
    section
        .node(key)
        .and_then(|n| within(&n, low, high))
        .unwrap_or(0.0)
}

fn decimals(section: &mut Section<'_>) -> usize {
    let shown = number(section, "decimals", 0.0, 6.0);
    // Checked to be 0 to 6 just above.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
    let whole = shown as usize;
    whole
}

fn question(section: &mut Section<'_>, required: bool) -> Option<Question> {
    if !required {
        for key in ["question", "effort", "screen"] {
            section.has(key);
        }
        return Some(Question::default());
    }
    Some(Question {
        text: words(section, "question")?,
        effort: section
            .required("effort")
            .and_then(|n| within(&n, 0.05, 2000.0))?,
        screen: words(section, "screen")?,
    })
}

fn sign(mut section: Section<'_>, names: &mut Names) {
    let vocabulary = &names.vocabulary;
    let made = (|| {
        Some(Sign {
            id: id(&mut section, |id| vocabulary.sign(id).is_some())?,
            name: words(&mut section, "name")?,
            background: super::entry::share(&mut section, "background")?,
            group: section.text("group").unwrap_or_default(),
            alarming: section.flag("alarming").unwrap_or(false),
            local: section.flag("local").unwrap_or(false),
            good_for: section.required("good_for").and_then(|n| seconds(&n))?,
            question: question(&mut section, true)?,
            source: sources(&mut section, names),
        })
    })();
    section.finish();
    if let Some(sign) = made {
        names.vocabulary.add_sign(sign);
    }
}

fn event(mut section: Section<'_>, names: &mut Names) {
    let vocabulary = &names.vocabulary;
    let made = (|| {
        #[allow(clippy::cast_precision_loss)]
        let window = section.required("window").and_then(|n| seconds(&n))? as f64;
        Some(Event {
            id: id(&mut section, |id| vocabulary.event(id).is_some())?,
            name: words(&mut section, "name")?,
            window_days: window / 86_400.0,
            question: question(&mut section, true)?,
            source: sources(&mut section, names),
        })
    })();
    section.finish();
    if let Some(event) = made {
        names.vocabulary.add_event(event);
    }
}
