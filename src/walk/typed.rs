//! What a person types: a number with its unit, an age, the numbers of lines.

use jiff::tz::TimeZone;
use jiff::{Span, SpanRelativeTo, Unit as Of};

use crate::fault::shown;
use crate::history::answers::{self, Happened};
use crate::vocabulary::Reading;
use crate::water::units::{self, Unit, UnitKind};

/// A number as it was typed.
#[derive(Debug, Clone, PartialEq)]
pub enum Typed {
    /// In the unit that the reading is kept in.
    Kept(f64),
    /// Percent of saturation: needs the water's temperature.
    Saturation(f64),
    /// The bare number may be meant in any of these units, the one usually taken for granted first.
    Which(f64, Vec<&'static str>),
}

/// Reads a number for a reading: `72 F`, `0.8 mg/L as NO2`, `6.9`.
///
/// # Errors
/// What is wrong and what to type instead.
pub fn number(reading: &Reading, text: &str) -> Result<Typed, String> {
    let text = text.trim();
    let end = text
        .find(|c: char| !(c.is_ascii_digit() || matches!(c, '.' | '-' | '+')))
        .unwrap_or(text.len());
    let (digits, unit) = text.split_at(end);
    if unit.starts_with(',') {
        return Err("Write the number with a point, such as 6.9.".to_owned());
    }
    let value = digits
        .parse::<f64>()
        .ok()
        .filter(|v| v.is_finite())
        .ok_or_else(|| format!("`{}` is no number. Type one such as 6.9.", shown(text)))?;
    let unit = unit.trim();
    if unit.is_empty() {
        return Ok(bare(reading, value));
    }
    let found = find(reading, unit)?;
    if found.assumes.is_some() && value > 0.0 {
        return Ok(bare(reading, value));
    }
    kept(found, value)
}

/// The unit that was typed; a short form such as `NO2` or `mg/L NO2` is taken where it can only mean one.
fn find(reading: &Reading, unit: &str) -> Result<&'static Unit, String> {
    let all = units::units_of(&reading.id);
    if let Some(found) = units::find(all, unit) {
        return Ok(found);
    }
    let plain = |s: &str| s.to_lowercase().replace(' ', "");
    let wanted = plain(unit).replace("ppm", "mg/l");
    let ends: Vec<&Unit> = all
        .iter()
        .filter(|u| {
            let name = plain(u.name);
            name == wanted.replacen("mg/l", "mg/las", 1)
                || name == format!("mg/las{wanted}")
                || name.split('s').next() == Some(&wanted)
        })
        .collect();
    match ends[..] {
        [one] => Ok(one),
        _ => Err(match units::unit_of(&reading.id, &shown(unit)) {
            Ok(found) => return Ok(found),
            Err(unknown) => format!("{unknown}."),
        }),
    }
}

fn kept(unit: &Unit, value: f64) -> Result<Typed, String> {
    match unit.kind {
        UnitKind::NeedsSaturation => Ok(Typed::Saturation(value)),
        UnitKind::Linear { scale, offset } => Ok(Typed::Kept(value * scale + offset)),
    }
}

/// A number without a unit is in the kept one, unless kits give it as the element and as the ion.
fn bare(reading: &Reading, value: f64) -> Typed {
    let all = units::units_of(&reading.id);
    let meant: Vec<&'static str> = all
        .iter()
        .map(|u| u.name)
        .filter(|n| n.starts_with("mg/L as "))
        .collect();
    let asks = all.iter().any(|u| u.assumes.is_some()) && meant.len() > 1;
    if asks && value > 0.0 {
        Typed::Which(value, meant)
    } else {
        Typed::Kept(value)
    }
}

/// A number in one of the units that [`Typed::Which`] offered.
pub fn in_unit(reading: &Reading, value: f64, unit: &str) -> Option<f64> {
    units::to_canonical(&reading.id, unit, value).ok()
}

/// Whether water can have this value.
///
/// # Errors
/// What is wrong and what to do.
pub fn plausible(reading: &Reading, value: f64) -> Result<f64, String> {
    let (low, high) = reading.plausible;
    if (low..=high).contains(&value) {
        return Ok(value);
    }
    Err(format!(
        "{value:.*} {} is outside what water can have ({low} to {high}). Read it again, or say its unit.",
        reading.decimals, reading.unit
    ))
}

/// Reads when something happened: `2 d`, `5 h`, `today`, `yesterday`, a date, or `n` for "did not".
///
/// # Errors
/// What to type instead.
pub fn happened(text: &str, zone: &TimeZone, now: i64) -> Result<Happened, String> {
    const HOUR: i64 = 3600;
    let text = text.trim().to_lowercase();
    let text = text.strip_suffix(" ago").unwrap_or(&text);
    match text {
        "n" | "no" => return Ok(Happened::Never),
        "now" | "just now" => return Ok(Happened::Ago(0)),
        "today" => return Ok(Happened::Ago(6 * HOUR)),
        "yesterday" => return Ok(Happened::Ago(24 * HOUR)),
        _ => {}
    }
    let spelled = if text.bytes().all(|b| b.is_ascii_digit()) {
        format!("{text} d")
    } else {
        text.to_owned()
    };
    let age = spelled
        .parse::<Span>()
        .ok()
        .and_then(|s| {
            s.total((Of::Second, SpanRelativeTo::days_are_24_hours()))
                .ok()
        })
        .filter(|s| (0.0..1e10).contains(s));
    if let Some(seconds) = age {
        #[allow(clippy::cast_possible_truncation)] // held within bounds just above
        return Ok(Happened::Ago(seconds as i64));
    }
    match answers::parse(text, zone) {
        Some(time) if time > now => Err("That is still to come. Type when it happened.".to_owned()),
        Some(time) => Ok(Happened::At(time)),
        None => Err(
            "Type how long ago, such as `5 h`, `2 d` or `yesterday`, or n if it did not happen."
                .to_owned(),
        ),
    }
}

/// Reads the numbers of lines, such as `3 5` or `3,5`; each from 1 to `lines`.
///
/// # Errors
/// What to type instead.
pub fn picks(text: &str, lines: usize) -> Result<Vec<usize>, String> {
    let mut picked = Vec::new();
    for word in text
        .split(|c: char| c.is_whitespace() || matches!(c, ',' | ';' | '.'))
        .filter(|w| !w.is_empty())
    {
        match word.parse::<usize>() {
            Ok(n) if (1..=lines).contains(&n) => picked.push(n - 1),
            _ => {
                return Err(format!(
                    "`{}` is no line here. Type numbers from 1 to {lines}.",
                    shown(word)
                ));
            }
        }
    }
    picked.dedup();
    Ok(picked)
}

/// The reading that somebody means: its id, its name, or a part of either that only one has.
///
/// # Errors
/// What it may be instead.
pub fn reading<'r>(
    all: impl Iterator<Item = &'r Reading> + Clone,
    word: &str,
) -> Result<&'r Reading, String> {
    let wanted = word.trim().to_lowercase();
    let spelled = |r: &Reading| [r.id.clone(), r.id.replace('-', " "), r.name.to_lowercase()];
    if let Some(found) = all.clone().find(|r| spelled(r).contains(&wanted)) {
        return Ok(found);
    }
    let near: Vec<&Reading> = all
        .clone()
        .filter(|r| spelled(r).iter().any(|s| s.contains(&wanted)))
        .collect();
    match near[..] {
        [one] => Ok(one),
        [] => Err(crate::fault::did_you_mean(
            &wanted,
            all.map(|r| r.id.as_str()),
            "Start with what was measured, such as `ph 6.9`.",
        )),
        _ => Err(format!(
            "Which one: {}?",
            near.iter()
                .map(|r| r.name.as_str())
                .collect::<Vec<_>>()
                .join(", ")
        )),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(id: &str) -> Reading {
        Reading {
            id: id.to_owned(),
            name: id.to_owned(),
            unit: String::new(),
            also: Vec::new(),
            derived: false,
            local: false,
            per_interval: false,
            resolution: 0.1,
            resolution_share: 0.0,
            plausible: (0.0, 40.0),
            good_for: 3600,
            decimals: 1,
            question: crate::vocabulary::Question::default(),
            source: Vec::new(),
        }
    }

    fn kept(id: &str, text: &str) -> Option<f64> {
        match number(&of(id), text) {
            Ok(Typed::Kept(value)) => Some((value * 1000.0).round() / 1000.0),
            _ => None,
        }
    }

    #[test]
    fn units_come_with_the_number() {
        assert_eq!(kept("temperature", "86 F"), Some(30.0));
        assert_eq!(kept("temperature", "86F"), Some(30.0));
        assert_eq!(kept("temperature", "22"), Some(22.0));
        assert_eq!(kept("nitrite", "3.2845 mg/L NO2"), Some(1.0));
        assert_eq!(kept("nitrite", "3.2845 NO2"), Some(1.0));
        assert_eq!(kept("nitrite", "1 mg/L as N"), Some(1.0));
        assert!(matches!(
            number(&of("dissolved-oxygen"), "85 %"),
            Ok(Typed::Saturation(_))
        ));
        assert!(number(&of("nitrite"), "3 stones").is_err_and(|e| e.contains("it takes")));
        assert!(number(&of("ph"), "6,9").is_err());
        assert!(number(&of("ph"), "NaN").is_err());
    }

    #[test]
    fn a_bare_number_asks_where_it_matters() {
        assert!(
            matches!(number(&of("nitrite"), "2"), Ok(Typed::Which(_, units)) if units.len() > 1)
        );
        assert!(matches!(
            number(&of("nitrite"), "2 ppm"),
            Ok(Typed::Which(..))
        ));
        assert_eq!(number(&of("nitrite"), "0"), Ok(Typed::Kept(0.0)));
    }

    #[test]
    fn ages_are_plain_words() {
        let at = |text: &str| happened(text, &TimeZone::UTC, 2_000_000_000);
        assert_eq!(at("2 d"), Ok(Happened::Ago(172_800)));
        assert_eq!(at("3"), Ok(Happened::Ago(259_200)));
        assert_eq!(at("5 h ago"), Ok(Happened::Ago(18_000)));
        assert_eq!(at("Yesterday"), Ok(Happened::Ago(86_400)));
        assert_eq!(at("n"), Ok(Happened::Never));
        assert!(at("2040-01-01").is_err());
        assert!(at("when it rained").is_err());
    }

    #[test]
    fn lines_are_picked_by_number() {
        assert_eq!(picks("3 5", 7), Ok(vec![2, 4]));
        assert_eq!(picks("3,5", 7), Ok(vec![2, 4]));
        assert!(picks("8", 7).is_err());
        assert!(picks("0", 7).is_err());
    }
}
