//! A number in the unit of its column, held to what water can show.

use super::given::Amount;
use crate::fault::Fault;
use crate::site::{Site, Units};
use crate::vocabulary::{Reading, Vocabulary};
use crate::water::units::{self, Unit};

/// A number ready to be written.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Cell {
    /// With `<` in front where it is a limit of detection.
    pub text: String,
    /// The column's unit.
    pub unit: String,
}

/// The unit of a bare number where the log has no such column yet: what the site's people read.
pub fn usual_unit(reading: &Reading, site: &Site) -> String {
    let us = match site.units {
        Units::Us => units::us(&reading.id),
        Units::Metric => None,
    };
    us.unwrap_or(&reading.unit).to_owned()
}

/// The heading of a new column. The unit stands behind it where it is not the kept one, and where a kit may mean the ion.
pub(super) fn heading(reading: &Reading, unit: &str) -> String {
    let mixed_up = units::units_of(&reading.id)
        .iter()
        .any(|u| u.assumes == Some("as N"));
    if unit == reading.unit && !mixed_up {
        reading.id.clone()
    } else {
        format!("{} ({unit})", reading.id)
    }
}

/// Brings an amount into a column's unit.
///
/// # Errors
/// A unit that can't be brought there, and a number that no water shows.
pub(super) fn cell(amount: &Amount, unit: &str, words: &Vocabulary) -> Result<Cell, Fault> {
    let reading = &words[amount.reading];
    let said = amount.unit.unwrap_or(unit);
    let from = units::unit_of(&reading.id, said).ok();
    let into = units::unit_of(&reading.id, unit).ok();
    let kept = match from {
        Some(from) => units::to_kept(from, amount.number),
        None => Some(amount.number),
    };
    plausible(amount, reading, said, kept)?;
    let number = if said == unit {
        amount.text.clone()
    } else {
        converted(kept, into)
            .map(written)
            .ok_or_else(|| unconverted(amount, reading, said, unit))?
    };
    Ok(Cell {
        text: format!("{}{number}", if amount.below { "<" } else { "" }),
        unit: unit.to_owned(),
    })
}

fn converted(kept: Option<f64>, into: Option<&Unit>) -> Option<f64> {
    units::from_kept(into?, kept?)
}

fn unconverted(amount: &Amount, reading: &Reading, said: &str, unit: &str) -> Fault {
    Fault::whole(
        "unit-needs-more",
        format!(
            "{} is logged in {unit}, and {said} can't be brought there without the temperature",
            reading.name
        ),
        format!(
            "read it off in {unit} and write `{}={}{unit}`",
            reading.id,
            if amount.below { "<…" } else { "…" }
        ),
    )
}

/// Six figures, without zeros at the end.
fn written(number: f64) -> String {
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // clamped
    let decimals = if number == 0.0 {
        0
    } else {
        (5.0 - number.abs().log10().floor()).clamp(0.0, 8.0) as usize
    };
    let text = format!("{number:.decimals$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

fn plausible(
    amount: &Amount,
    reading: &Reading,
    unit: &str,
    kept: Option<f64>,
) -> Result<(), Fault> {
    let unit_word = if unit == "pH" { "" } else { unit };
    let said = format!("{} {} {unit_word}", reading.name, amount.text);
    let said = said.trim_end();
    let (low, high) = reading.plausible;
    match kept {
        Some(kept) if kept < low || kept > high => {
            let mut cure = "check the instrument and the decimal point; what an instrument shows all the same goes in `note=`".to_owned();
            let fits: Vec<&str> = units::units_of(&reading.id)
                .iter()
                .filter(|u| u.name != unit && u.assumes.is_none())
                .filter(|u| units::to_kept(u, amount.number).is_some_and(|k| k >= low && k <= high))
                .map(|u| u.name)
                .collect();
            if let Some(other) = fits.first().filter(|_| amount.unit.is_none()) {
                cure = format!(
                    "if it is in {other}, write `{}={}{other}`; else {cure}",
                    reading.id, amount.text
                );
            }
            Err(Fault::whole(
                "implausible",
                format!(
                    "{said} is outside of what water shows ({low} to {high} {})",
                    reading.unit
                ),
                cure,
            ))
        }
        None if amount.number < 0.0 => Err(Fault::whole(
            "implausible",
            format!("{said} is below zero, which this reading never is"),
            "correct the number",
        )),
        _ => Ok(()),
    }
}

#[cfg(test)]
mod tests {
    use super::written;

    #[test]
    fn numbers_are_written_short() {
        for (number, text) in [
            (0.0, "0"),
            (6.4, "6.4"),
            (0.985_2, "0.9852"),
            (22.222_222_22, "22.2222"),
            (1234.5, "1234.5"),
            (-1.5, "-1.5"),
            (0.000_123_4, "0.0001234"),
        ] {
            assert_eq!(written(number), text);
        }
    }
}
