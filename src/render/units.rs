//! Numbers with their units, as the farm's people read them. The one place where a value becomes words.

use crate::site::Units;
use crate::vocabulary::Reading;
use crate::water::units;

/// A value of a reading with its unit, in the units of the site: `22.1 C`, `0.05 mg/L as N`, `6.9`.
pub fn amount(reading: &Reading, value: f64, system: Units) -> String {
    let (number, unit) = converted(reading, value, system);
    with_unit(&number_of(reading, number), unit)
}

/// Two values of a reading with one unit: `24.0 to 17.0 C`.
pub fn from_to(reading: &Reading, from: f64, to: f64, system: Units) -> String {
    let (from, _) = converted(reading, from, system);
    let (to, unit) = converted(reading, to, system);
    let from = number_of(reading, from);
    with_unit(&format!("{from} to {}", number_of(reading, to)), unit)
}

/// A difference of a reading with its unit: half a degree is half a degree, not a temperature.
pub fn difference(reading: &Reading, by: f64, system: Units) -> String {
    let (from, _) = converted(reading, 0.0, system);
    let (to, unit) = converted(reading, by, system);
    with_unit(&number_of(reading, to - from), unit)
}

/// A number of a reading alone, as many decimals as it has and no zeros at the end: `0.5`, `22`.
pub(super) fn plain_number(reading: &Reading, value: f64) -> String {
    let text = number_of(reading, value);
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

fn converted(reading: &Reading, value: f64, system: Units) -> (f64, &str) {
    if system == Units::Us
        && let Some(unit) = units::us(&reading.id)
        && let Ok(value) = units::from_canonical(&reading.id, unit, value)
    {
        return (value, unit);
    }
    if reading.unit == "share" {
        return (value * 100.0, "%");
    }
    (value, &reading.unit)
}

/// As many decimals as the reading has; a small number that would round to nothing keeps two figures.
fn number_of(reading: &Reading, value: f64) -> String {
    let decimals = if reading.unit == "share" {
        0
    } else {
        reading.decimals
    };
    let text = format!("{value:.decimals$}");
    let nothing = text
        .trim_start_matches('-')
        .chars()
        .all(|c| matches!(c, '0' | '.'));
    if nothing && value != 0.0 {
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // clamped
        let decimals = (1.0 - value.abs().log10().floor()).clamp(0.0, 9.0) as usize;
        return format!("{value:.decimals$}");
    }
    if nothing {
        text.trim_start_matches('-').to_owned()
    } else {
        text
    }
}

fn with_unit(number: &str, unit: &str) -> String {
    match unit {
        "" | "pH" | "count" | "ratio" | "degree" => number.to_owned(),
        "%" | "%/day" => format!("{number}{unit}"),
        unit => format!("{number} {unit}"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::vocabulary::Question;

    fn reading(id: &str, unit: &str, decimals: usize) -> Reading {
        Reading {
            id: id.to_owned(),
            name: id.to_owned(),
            unit: unit.to_owned(),
            also: Vec::new(),
            derived: false,
            local: false,
            per_interval: false,
            resolution: 0.1,
            resolution_share: 0.0,
            plausible: (0.0, 100.0),
            good_for: 3600,
            decimals,
            question: Question::default(),
            source: Vec::new(),
        }
    }

    #[test]
    fn a_temperature_and_a_difference_of_temperatures_convert_differently() {
        let t = reading("temperature", "C", 1);
        assert_eq!(amount(&t, 20.0, Units::Metric), "20.0 C");
        assert_eq!(amount(&t, 20.0, Units::Us), "68.0 F");
        assert_eq!(difference(&t, 2.0, Units::Us), "3.6 F");
        assert_eq!(from_to(&t, 24.0, 17.0, Units::Us), "75.2 to 62.6 F");
    }

    #[test]
    fn small_numbers_keep_two_figures_and_zero_is_zero() {
        let free = reading("un-ionized-ammonia", "mg/L as N", 2);
        assert_eq!(amount(&free, 0.00123, Units::Metric), "0.0012 mg/L as N");
        assert_eq!(amount(&free, 0.0, Units::Metric), "0.00 mg/L as N");
        assert_eq!(amount(&free, -0.0, Units::Metric), "0.00 mg/L as N");
    }

    #[test]
    fn numbers_without_a_unit_have_none() {
        assert_eq!(amount(&reading("ph", "pH", 2), 6.9, Units::Us), "6.90");
        assert_eq!(amount(&reading("deaths", "count", 0), 3.0, Units::Us), "3");
        assert_eq!(
            amount(&reading("fall", "share", 2), 0.384, Units::Us),
            "38%"
        );
    }
}
