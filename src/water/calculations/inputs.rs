//! From `key=value` words to the values a calculation works with: read, converted, filled in, checked.

use super::Calculation;
use super::failure::Failure;
use super::key::{Fallback, Key, Kind};
use super::site_values::SiteValues;
use crate::fault;
use crate::water::units::{self, Unit};

/// The value of a key.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Value {
    /// In the key's own unit.
    Number(f64),
    /// One of the key's words.
    Word(&'static str),
}

/// Where a value comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Origin {
    /// It was given.
    Given,
    /// The site says so.
    Site,
    /// Nobody said so; it is taken when not given.
    Default,
}

/// One key with its value.
#[derive(Debug, Clone, Copy)]
pub struct Input {
    /// The key.
    pub key: &'static Key,
    /// Its value, in the key's own unit.
    pub value: Value,
    /// Where it comes from.
    pub origin: Origin,
    /// What was taken for granted in its unit, such as `as N` behind a bare `mg/L`.
    pub assumes: Option<&'static str>,
}

/// The values a calculation works with, in the order of its keys.
#[derive(Debug, Clone, Default)]
pub struct Inputs(pub Vec<Input>);

impl Inputs {
    fn find(&self, key: &str) -> Option<Value> {
        self.0.iter().find(|i| i.key.name == key).map(|i| i.value)
    }

    /// The number of a key, if it has one.
    pub fn opt(&self, key: &str) -> Option<f64> {
        match self.find(key) {
            Some(Value::Number(number)) => Some(number),
            _ => None,
        }
    }

    /// The number of a key.
    ///
    /// # Errors
    /// [`Failure::Undeclared`]: the calculation does not declare it as a number that is always there.
    pub fn num(&self, key: &'static str) -> Result<f64, Failure> {
        self.opt(key).ok_or(Failure::Undeclared { key })
    }

    /// The word of a key.
    ///
    /// # Errors
    /// [`Failure::Undeclared`]: the calculation does not declare it as a word that is always there.
    pub fn word(&self, key: &'static str) -> Result<&'static str, Failure> {
        match self.find(key) {
            Some(Value::Word(word)) => Ok(word),
            _ => Err(Failure::Undeclared { key }),
        }
    }

    /// Whether the word of a key is "yes".
    ///
    /// # Errors
    /// As [`Inputs::word`].
    pub fn yes(&self, key: &'static str) -> Result<bool, Failure> {
        Ok(self.word(key)? == "yes")
    }
}

/// Reads `key=value` words, converts them to the keys' own units, and fills in what is not given: from the site, then
/// from what the calculation takes for granted.
///
/// # Errors
/// [`Failure`], the first that is met.
pub fn read(
    calculation: &'static Calculation,
    given: &[String],
    site: &SiteValues,
) -> Result<Inputs, Failure> {
    let mut read: Vec<Input> = Vec::new();
    for text in given {
        let (name, value) = text
            .split_once('=')
            .ok_or_else(|| Failure::NotAnInput { text: text.clone() })?;
        let input = read_one(calculation, name, value.trim())?;
        if read.iter().any(|i| i.key.name == input.key.name) {
            return Err(Failure::Twice {
                key: input.key.name,
            });
        }
        if let Some(rival) = read.iter().find(|i| i.key.rivals.contains(&input.key.name)) {
            return Err(Failure::Rivals {
                one: rival.key.name,
                other: input.key.name,
            });
        }
        read.push(input);
    }
    fill(calculation, read, site)
}

/// Puts inputs in the order of the keys, and fills those that were not given.
fn fill(
    calculation: &'static Calculation,
    given: Vec<Input>,
    site: &SiteValues,
) -> Result<Inputs, Failure> {
    let mut all: Vec<Input> = Vec::new();
    let mut missing = Vec::new();
    for key in calculation.keys {
        let by_name = |name: &str| given.iter().find(|i| i.key.name == name);
        if let Some(input) = by_name(key.name) {
            all.push(*input);
            continue;
        }
        // One of two rivals is enough, and the first that is filled speaks for both.
        let spoken_for = key
            .rivals
            .iter()
            .any(|r| by_name(r).is_some() || all.iter().any(|i| i.key.name == *r));
        if spoken_for {
            continue;
        }
        let input = |value, origin| Input {
            key,
            value,
            origin,
            assumes: None,
        };
        if let Some(number) = key.site.and_then(|k| site.get(k)) {
            all.push(input(Value::Number(number), Origin::Site));
            continue;
        }
        match key.fallback {
            Fallback::Required => missing.push(key),
            Fallback::Without => {}
            Fallback::Number(number) => all.push(input(Value::Number(number), Origin::Default)),
            Fallback::Word(word) => all.push(input(Value::Word(word), Origin::Default)),
        }
    }
    if !missing.is_empty() {
        return Err(Failure::Missing {
            name: calculation.name,
            keys: missing,
        });
    }
    for input in &all {
        if let (Kind::Number { range, .. }, Value::Number(number)) = (input.key.kind, input.value) {
            range.check(number)?;
        }
    }
    Ok(Inputs(all))
}

/// One `key=value`.
fn read_one(calculation: &'static Calculation, name: &str, text: &str) -> Result<Input, Failure> {
    let wanted = underscored(name);
    let key = calculation
        .keys
        .iter()
        .find(|k| k.answers_to(&wanted))
        .ok_or_else(|| unknown_key(calculation, name, &wanted))?;
    let (value, assumes) = match key.kind {
        Kind::Word(words) => (read_word(key, words, text)?, None),
        Kind::Number { units, .. } => {
            let also = key.also.iter().find(|a| a.name == wanted);
            let (units, scale) = also.map_or((units, 1.0), |a| (a.units, a.scale));
            let (number, assumes) = read_number(key, units, text)?;
            (Value::Number(number * scale), assumes)
        }
    };
    Ok(Input {
        key,
        value,
        origin: Origin::Given,
        assumes,
    })
}

/// A name as keys are spelled: lower case, underscores.
pub fn underscored(name: &str) -> String {
    name.trim().to_lowercase().replace('-', "_")
}

fn unknown_key(calculation: &'static Calculation, key: &str, wanted: &str) -> Failure {
    let takes: Vec<_> = calculation.keys.iter().map(|k| k.name).collect();
    Failure::UnknownKey {
        name: calculation.name,
        key: key.to_owned(),
        nearest: fault::nearest(wanted, takes.iter().copied()),
        takes,
    }
}

/// A word, spelled in any case, `-` and `_` alike; a formula's water may stand behind `*`, `.` or `·`.
fn read_word(
    key: &'static Key,
    words: &'static [&'static str],
    text: &str,
) -> Result<Value, Failure> {
    let plain = |word: &str| {
        word.to_lowercase()
            .replace('_', "-")
            .replace(['.', '·'], "*")
    };
    let wanted = match plain(text).as_str() {
        "true" => "yes".to_owned(),
        "false" => "no".to_owned(),
        other => other.to_owned(),
    };
    words
        .iter()
        .find(|w| plain(w) == wanted)
        .map(|w| Value::Word(w))
        .ok_or_else(|| Failure::NotAWord {
            key: key.name,
            text: text.to_owned(),
            takes: words,
        })
}

/// A number with or without a unit behind it, in the first of the units.
fn read_number(
    key: &'static Key,
    list: &'static [Unit],
    text: &str,
) -> Result<(f64, Option<&'static str>), Failure> {
    let not_a_number = || Failure::NotANumber {
        key: key.name,
        text: text.to_owned(),
    };
    let (number, rest) = leading_number(text).ok_or_else(not_a_number)?;
    if rest.is_empty() {
        return Ok((number, None));
    }
    // "7,1" is a decimal comma, not a unit.
    if rest.starts_with(',') {
        return Err(not_a_number());
    }
    let unit =
        units::find(list, rest).ok_or_else(|| units::unknown(key.name, rest, list, false))?;
    let kept =
        units::to_kept(unit, number).ok_or_else(|| units::unknown(key.name, rest, list, true))?;
    Ok((kept, unit.assumes))
}

/// The longest number a text begins with, and what follows it.
fn leading_number(text: &str) -> Option<(f64, &str)> {
    let end = text
        .find(|c: char| !(c.is_ascii_digit() || "+-.eE".contains(c)))
        .unwrap_or(text.len());
    (1..=end).rev().find_map(|at| {
        let (number, rest) = text.split_at_checked(at)?;
        Some((number.parse().ok()?, rest.trim()))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_number_may_carry_its_unit() {
        assert_eq!(leading_number("86F"), Some((86.0, "F")));
        assert_eq!(leading_number("-1.5e-3 mol/L"), Some((-1.5e-3, "mol/L")));
        assert_eq!(leading_number("3 eggs"), Some((3.0, "eggs")));
        assert_eq!(leading_number("3eggs"), Some((3.0, "eggs")));
        for text in ["", "F", "nan", "inf", "-", "é5"] {
            assert_eq!(leading_number(text), None, "{text}");
        }
    }
}
