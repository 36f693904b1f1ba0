//! What a person says: `ph=6.4 nitrite=0.3 sign=fish-off-feed note="..." by=Ines`.

use crate::fault::{Fault, did_you_mean, shown};
use crate::history::log::read_time;
use crate::knowledge::Knowledge;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};
use crate::water::units;

/// A number for one reading, as it was said.
#[derive(Debug, Clone, PartialEq)]
pub struct Amount {
    /// Which reading.
    pub reading: ReadingId,
    /// The number, in `unit` if there is one.
    pub number: f64,
    /// As it was typed, without `<` and unit.
    pub text: String,
    /// Below this limit of detection.
    pub below: bool,
    /// The unit that was said; `None`: the unit of the log's column.
    pub unit: Option<&'static str>,
}

/// One row to record.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Given {
    /// Unix seconds; `None` is now.
    pub time: Option<i64>,
    /// The place; `None` is the whole loop.
    pub place: Option<String>,
    /// Who made it.
    pub by: Option<String>,
    /// The time of the earlier row that it corrects.
    pub corrects: Option<i64>,
    /// Numbers.
    pub readings: Vec<Amount>,
    /// Signs, seen or looked for and not there.
    pub signs: Vec<(String, bool)>,
    /// Events.
    pub events: Vec<String>,
    /// Rounds that were done.
    pub done: Vec<String>,
    /// Anybody's words.
    pub note: Option<String>,
}

/// What words are understood with.
#[derive(Debug, Clone, Copy)]
pub struct Telling<'a> {
    /// The words there are.
    pub knowledge: &'a Knowledge,
    /// The farm, for its zone and places.
    pub site: &'a Site,
}

impl Given {
    /// Nothing was said that is worth a row.
    pub fn is_empty(&self) -> bool {
        self.readings.is_empty()
            && self.signs.is_empty()
            && self.events.is_empty()
            && self.done.is_empty()
            && self.note.is_none()
    }
}

/// The keys that hold no reading.
const KEYS: [&str; 8] = [
    "time", "place", "by", "corrects", "sign", "event", "done", "note",
];

/// Reads `key=value` words.
///
/// # Errors
/// All faults at once: a word without `=`, a key or id that is not known, what is no number, a unit the reading doesn't take.
pub fn given<S: AsRef<str>>(words: &[S], telling: &Telling<'_>) -> Result<Given, Vec<Fault>> {
    let mut made = Given::default();
    let mut faults = Vec::new();
    let mut seen: Vec<String> = Vec::new();
    for word in words {
        let word = word.as_ref();
        let Some((key, value)) = word.split_once('=') else {
            faults.push(Fault::whole(
                "not-key-value",
                format!("`{}` is not key=value", shown(word)),
                "write it like `ph=6.4`; words with spaces go between quotes, such as `note=\"two fish jumped\"`",
            ));
            continue;
        };
        let key = key.trim().to_ascii_lowercase().replace('_', "-");
        let value = clean(value);
        if value.is_empty() {
            faults.push(Fault::whole(
                "empty-value",
                format!("nothing stands behind `{}=`", shown(&key)),
                "leave out what was not measured",
            ));
            continue;
        }
        if seen.contains(&key) && !["sign", "event", "done"].contains(&key.as_str()) {
            faults.push(Fault::whole(
                "given-twice",
                format!("`{}` is given twice", shown(&key)),
                "give it once, or record two places one after the other",
            ));
            continue;
        }
        if let Err(fault) = made.take(&key, &value, telling) {
            faults.extend(fault);
        }
        seen.push(key);
    }
    if faults.is_empty() {
        Ok(made)
    } else {
        Err(faults)
    }
}

/// On one line, without what moves a cursor.
fn clean(text: &str) -> String {
    let spaced = text.replace(['\n', '\r', '\t'], " ");
    let plain: String = spaced.chars().filter(|c| !c.is_control()).collect();
    plain.trim().to_owned()
}

impl Given {
    /// Takes one key.
    pub(super) fn take(
        &mut self,
        key: &str,
        value: &str,
        telling: &Telling<'_>,
    ) -> Result<(), Vec<Fault>> {
        let words = &telling.knowledge.vocabulary;
        let one = |fault: Fault| vec![fault];
        match key {
            "time" => self.time = Some(time(key, value, telling).map_err(one)?),
            "corrects" => self.corrects = Some(time(key, value, telling).map_err(one)?),
            "place" => self.place = Some(place(value, telling.site).map_err(one)?),
            "by" => self.by = Some(value.to_owned()),
            "note" => self.note = Some(value.to_owned()),
            "sign" => {
                for (id, seen) in ids(value).map(|w| match w.strip_prefix('!') {
                    Some(rest) => (rest.trim_start(), false),
                    None => (w, true),
                }) {
                    known(id, "sign", words.sign(id).is_some(), words).map_err(one)?;
                    self.signs.push((id.to_owned(), seen));
                }
            }
            "event" => {
                for id in ids(value) {
                    known(id, "event", words.event(id).is_some(), words).map_err(one)?;
                    self.events.push(id.to_owned());
                }
            }
            "done" => {
                let rounds = || telling.knowledge.rounds.iter().map(|r| r.id.as_str());
                for id in ids(value) {
                    if !rounds().any(|r| r == id) {
                        let cure = did_you_mean(id, rounds(), "`gillside shift` lists what is due");
                        let reason = format!("no round is called `{}`", shown(id));
                        return Err(one(Fault::whole("unknown-round", reason, cure)));
                    }
                    self.done.push(id.to_owned());
                }
            }
            id => self.readings.push(amount(id, value, words).map_err(one)?),
        }
        Ok(())
    }
}

fn ids(value: &str) -> impl Iterator<Item = &str> {
    value
        .split([';', ','])
        .map(str::trim)
        .filter(|w| !w.is_empty())
}

fn time(key: &str, value: &str, telling: &Telling<'_>) -> Result<i64, Fault> {
    read_time(value, &telling.site.timezone).map_err(|fault| Fault {
        reason: format!("`{key}`: {}", fault.reason),
        ..fault
    })
}

/// A place of the site, where the site lists places.
fn place(value: &str, site: &Site) -> Result<String, Fault> {
    if site.place.is_empty() {
        return Ok(value.to_owned());
    }
    let found = site
        .place
        .iter()
        .find(|p| p.name.eq_ignore_ascii_case(value));
    found.map(|p| p.name.clone()).ok_or_else(|| {
        let names = site.place.iter().map(|p| p.name.as_str());
        Fault::whole(
            "unknown-place",
            format!("the site file has no place called `{}`", shown(value)),
            did_you_mean(value, names, "add it as a `[[place]]` to the site file"),
        )
    })
}

fn known(id: &str, kind: &str, found: bool, words: &Vocabulary) -> Result<(), Fault> {
    if found {
        return Ok(());
    }
    let other = match kind {
        "sign" if words.event(id).is_some() => Some("event"),
        "event" if words.sign(id).is_some() => Some("sign"),
        _ => None,
    };
    let cure = match other {
        Some(other) => format!("`{id}` is for `{other}=`"),
        None if kind == "sign" => {
            let all = words.signs.iter().map(|s| s.id.as_str());
            did_you_mean(id, all, "put free words in `note=`")
        }
        None => {
            let all = words.events.iter().map(|e| e.id.as_str());
            did_you_mean(id, all, "put free words in `note=`")
        }
    };
    Err(Fault::whole(
        "unknown-word",
        format!("no {kind} is called `{}`", shown(id)),
        cure,
    ))
}

/// A number for a reading, with or without its unit.
fn amount(id: &str, value: &str, words: &Vocabulary) -> Result<Amount, Fault> {
    let Some(reading) = words.reading(id) else {
        let kind = match (words.sign(id), words.event(id)) {
            (Some(_), _) => Some("sign"),
            (_, Some(_)) => Some("event"),
            _ => None,
        };
        let all = words.readings.iter().filter(|r| !r.derived);
        let all = KEYS.into_iter().chain(all.map(|r| r.id.as_str()));
        return Err(Fault::whole(
            "unknown-key",
            format!("no reading is called `{}`", shown(id)),
            kind.map_or_else(
                || did_you_mean(id, all, "put free words in `note=`"),
                |kind| format!("write it as `{kind}={id}`"),
            ),
        ));
    };
    if words[reading].derived {
        return Err(Fault::whole(
            "derived",
            format!("`{id}` is worked out from other readings, never recorded"),
            "record what it is worked out from",
        ));
    }
    let (rest, below) = match value.strip_prefix('<') {
        Some(rest) => (rest.trim_start(), true),
        None => (value, false),
    };
    let end = rest
        .find(|c: char| !(c.is_ascii_digit() || c == '.' || c == '-' || c == '+'))
        .unwrap_or(rest.len());
    let (text, unit) = rest.split_at_checked(end).unwrap_or((rest, ""));
    let number: Option<f64> = text.parse().ok().filter(|n: &f64| n.is_finite());
    let Some(number) = number.filter(|_| !unit.starts_with(',')) else {
        return Err(Fault::whole(
            "not-a-number",
            format!("`{id}={}` is not a number", shown(value)),
            "write a decimal point, such as 6.4; leave out what was not measured; words go in `note=`",
        ));
    };
    if below && number <= 0.0 {
        return Err(Fault::whole(
            "not-a-number",
            format!(
                "`{id}={}` can't be: nothing is less than none",
                shown(value)
            ),
            "write the kit's limit of detection behind `<`, such as `<0.05`",
        ));
    }
    let unit = unit.trim();
    let unit = match unit {
        "" => None,
        // A reading that only this farm's rule base knows has the one unit it is kept in.
        own if units::units_of(id).is_empty() && own.eq_ignore_ascii_case(&words[reading].unit) => {
            None
        }
        unit => Some(
            units::unit_of(id, unit)
                .map_err(|e| {
                    Fault::whole("unknown-unit", e.to_string(), "write one of these, or none")
                })?
                .name,
        ),
    };
    Ok(Amount {
        reading,
        number,
        text: text.trim_start_matches('+').to_owned(),
        below,
        unit,
    })
}
