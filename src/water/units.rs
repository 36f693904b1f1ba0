//! Units: what a number may be given in, and the one unit each reading is kept in.
//!
//! The first unit of every list in [`table`] is the one the data contract keeps. Spelling is tolerant in case and
//! spaces, `ppm` stands for `mg/L` anywhere, and the signs ° µ ³ may be typed or left out; nothing else is guessed.
//!
//! ```
//! use gillside::water::units;
//! assert_eq!(units::to_canonical("temperature", "F", 86.0), Ok(30.0));
//! assert_eq!(units::canonical("nitrite"), Some("mg/L as N"));
//! assert!(units::to_canonical("nitrite", "furlong", 1.0).is_err());
//! ```

pub mod table;

use std::fmt;

/// One unit that a quantity may be given in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    /// How the unit is written.
    pub name: &'static str,
    /// How a value in it becomes a value in the first unit of its list.
    pub kind: UnitKind,
    /// What is taken for granted when only this is written: `as N` behind a bare `mg/L`. `None` when nothing is.
    pub assumes: Option<&'static str>,
}

/// How a value in a unit becomes a value in the kept unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum UnitKind {
    /// `kept = value x scale + offset`.
    Linear {
        /// Kept units in one of this unit.
        scale: f64,
        /// What zero of this unit is in kept units.
        offset: f64,
    },
    /// Percent of oxygen saturation: needs temperature, salinity and pressure or elevation
    /// (see `water::oxygen`).
    NeedsSaturation,
}

/// A unit that a quantity can't be read in.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct UnknownUnit {
    /// The reading or key.
    pub reading: String,
    /// The unit as it was written.
    pub unit: String,
    /// The units that the reading takes; empty when there is no such reading.
    pub takes: Vec<&'static str>,
    /// The unit is known, but needs temperature, salinity and pressure to convert.
    pub needs_saturation: bool,
}

impl fmt::Display for UnknownUnit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Self { reading, unit, .. } = self;
        if self.takes.is_empty() {
            write!(f, "`{reading}` is not a reading, so it has no units")
        } else if self.needs_saturation {
            write!(
                f,
                "`{reading}` in `{unit}` also needs the water's temperature; give it in {}",
                self.takes.join(", ")
            )
        } else {
            write!(
                f,
                "`{unit}` is not a unit of `{reading}`; it takes {}",
                self.takes.join(", ")
            )
        }
    }
}

impl std::error::Error for UnknownUnit {}

/// A unit as it is compared: no spaces, lower case, plain letters for ° µ ³.
fn plain(unit: &str) -> String {
    unit.chars()
        .filter(|c| !c.is_whitespace() && *c != '°')
        .map(|c| match c {
            'µ' | 'μ' => 'u',
            '³' => '3',
            '²' => '2',
            other => other,
        })
        .flat_map(char::to_lowercase)
        .collect()
}

/// The unit of a list that a person wrote, if it is one of them.
pub fn find(units: &'static [Unit], written: &str) -> Option<&'static Unit> {
    let wanted = plain(written);
    let in_water = wanted.strip_prefix("ppm").map(|rest| format!("mg/l{rest}"));
    units.iter().find(|u| {
        let name = plain(u.name);
        name == wanted || in_water.as_ref() == Some(&name)
    })
}

/// The unit that a reading is kept in; `None` when there is no such reading.
pub fn canonical(reading: &str) -> Option<&'static str> {
    table::of_reading(reading)
        .and_then(|units| units.first())
        .map(|u| u.name)
}

/// The units that a reading takes, the kept one first; empty when there is no such reading.
pub fn units_of(reading: &str) -> &'static [Unit] {
    table::of_reading(reading).unwrap_or(&[])
}

/// The unit of a reading that a person wrote.
///
/// # Errors
/// [`UnknownUnit`], with the units that the reading takes.
pub fn unit_of(reading: &str, unit: &str) -> Result<&'static Unit, UnknownUnit> {
    let units = units_of(reading);
    find(units, unit).ok_or_else(|| unknown(reading, unit, units, false))
}

/// A value of a reading, from a unit that a person wrote to the unit it is kept in.
///
/// # Errors
/// [`UnknownUnit`]: not a unit of this reading, or one that [needs more than the value](UnitKind::NeedsSaturation).
pub fn to_canonical(reading_id: &str, unit: &str, value: f64) -> Result<f64, UnknownUnit> {
    let found = unit_of(reading_id, unit)?;
    to_kept(found, value).ok_or_else(|| unknown(reading_id, unit, units_of(reading_id), true))
}

/// A value of a reading, from the unit it is kept in to another.
///
/// # Errors
/// As [`to_canonical`].
pub fn from_canonical(reading_id: &str, unit: &str, value: f64) -> Result<f64, UnknownUnit> {
    let found = unit_of(reading_id, unit)?;
    from_kept(found, value).ok_or_else(|| unknown(reading_id, unit, units_of(reading_id), true))
}

/// A value in this unit, in the first unit of its list; `None` where [more is needed](UnitKind::NeedsSaturation).
pub fn to_kept(unit: &Unit, value: f64) -> Option<f64> {
    match unit.kind {
        UnitKind::Linear { scale, offset } => Some(value * scale + offset),
        UnitKind::NeedsSaturation => None,
    }
}

/// The inverse of [`to_kept`].
pub fn from_kept(unit: &Unit, value: f64) -> Option<f64> {
    match unit.kind {
        UnitKind::Linear { scale, offset } => Some((value - offset) / scale),
        UnitKind::NeedsSaturation => None,
    }
}

/// The unit that people on US units see for a reading: another one, or the kept one.
pub fn us(reading: &str) -> Option<&'static str> {
    match reading {
        "temperature" | "air-temperature" => Some("F"),
        "feed" => Some("lb/day"),
        "flow" => Some("gal/min"),
        "makeup-water" => Some("gal"),
        other => canonical(other),
    }
}

/// An [`UnknownUnit`] about this list of units.
pub fn unknown(
    reading: &str,
    unit: &str,
    units: &'static [Unit],
    needs_saturation: bool,
) -> UnknownUnit {
    UnknownUnit {
        reading: reading.to_owned(),
        unit: unit.to_owned(),
        takes: units
            .iter()
            .filter(|u| !needs_saturation || u.kind != UnitKind::NeedsSaturation)
            .map(|u| u.name)
            .collect(),
        needs_saturation,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn close(reading: &str, unit: &str, value: f64, expected: f64) {
        let got = to_canonical(reading, unit, value);
        assert!(
            matches!(got, Ok(x) if (x - expected).abs() <= 1e-4 * expected.abs().max(1e-3)),
            "{value} {unit} of {reading}: {got:?}, not {expected}"
        );
    }

    #[test]
    fn every_unit_of_the_contract_converts() {
        for (reading, unit, value, expected) in [
            ("temperature", "F", 86.0, 30.0),
            ("nitrite", "mg/L as NO2", 3.2845, 1.0),
            ("nitrate", "mg/L as NO3", 44.267, 10.0),
            ("total-ammonia", "mg/L as NH3", 1.2159, 1.0),
            ("total-ammonia", "mg/L as NH4", 1.2878, 1.0),
            ("alkalinity", "dKH", 3.0, 53.544),
            ("alkalinity", "meq/L", 1.0, 50.043),
            ("hardness", "dGH", 10.0, 178.48),
            ("feed", "lb/day", 10.0, 4.5359),
            ("feed", "g/day", 4500.0, 4.5),
            ("makeup-water", "gal", 100.0, 378.541),
            ("flow", "gal/min", 10.0, 37.8541),
            ("flow", "m3/h", 6.0, 100.0),
            ("salinity", "ppt", 2.0, 2.0),
            ("conductivity", "mS/cm", 1.2, 1200.0),
            ("phosphorus", "mg/L as PO4", 3.0662, 1.0),
            ("chloride", "ppm", 20.0, 20.0),
        ] {
            close(reading, unit, value, expected);
        }
    }

    #[test]
    fn spelling_is_tolerant_in_case_spaces_and_ppm_only() {
        close("total-ammonia", " PPM  as nh4 ", 1.2878, 1.0);
        close("conductivity", "µS / cm", 300.0, 300.0);
        close("temperature", "°f", 86.0, 30.0);
        assert!(to_canonical("temperature", "Fahrenheit", 86.0).is_err());
        assert!(to_canonical("total-ammonia", "mg/L NH4", 1.0).is_err());
    }

    #[test]
    fn an_unknown_unit_lists_those_there_are() {
        let text = to_canonical("hardness", "stone", 1.0).map_err(|e| e.to_string());
        assert_eq!(
            text,
            Err("`stone` is not a unit of `hardness`; it takes mg/L as CaCO3, mg/L, dGH, meq/L, mmol/L, gr/gal".into())
        );
    }

    #[test]
    fn percent_saturation_is_a_path_of_its_own() {
        let unit = unit_of("dissolved-oxygen", "% saturation").map(|u| u.kind);
        assert_eq!(unit, Ok(UnitKind::NeedsSaturation));
        let refused = to_canonical("dissolved-oxygen", "% saturation", 90.0);
        assert!(
            matches!(refused, Err(e) if e.needs_saturation && !e.takes.contains(&"% saturation"))
        );
    }

    #[test]
    fn every_unit_goes_there_and_back() {
        for reading in table::READINGS {
            for unit in units_of(reading) {
                if let Some(kept) = to_kept(unit, 7.25) {
                    let back = from_kept(unit, kept);
                    assert!(matches!(back, Some(b) if (b - 7.25).abs() < 1e-9));
                }
            }
        }
    }

    #[test]
    fn no_two_units_of_a_reading_are_spelled_alike() {
        for reading in table::READINGS {
            let units = units_of(reading);
            assert!(!units.is_empty(), "{reading} has no units");
            for unit in units {
                let alike = units.iter().filter(|u| plain(u.name) == plain(unit.name));
                assert_eq!(alike.count(), 1, "{} of {reading}", unit.name);
            }
        }
    }
}
