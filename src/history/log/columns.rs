//! The columns of a log: which reading each holds, in which unit, and what a value of it may be.

use super::problem::Trouble;
use crate::site::Site;
use crate::site::column::{self, Meaning, NotAColumn};
use crate::vocabulary::{ReadingId, Vocabulary};
use crate::water::units::UnitKind;

/// A column, ready to read cells by.
#[derive(Debug)]
pub(super) struct Column {
    /// As it stands at the head of the file.
    pub name: String,
    /// What its cells are.
    pub holds: Holds,
}

/// What the cells of a column are.
#[derive(Debug)]
pub(super) enum Holds {
    /// Nothing that is used; the file was told so.
    Nothing,
    Time,
    Place,
    By,
    Corrects,
    Sign,
    Event,
    Note,
    Reading(Measure),
}

/// A reading in a unit.
#[derive(Debug)]
pub(super) struct Measure {
    pub reading: ReadingId,
    /// The unit of the column.
    pub unit: String,
    pub kind: UnitKind,
    /// The unit that the reading is kept in.
    pub kept: String,
    /// `as N`, where the column doesn't say.
    pub assumes: Option<&'static str>,
    /// In the kept unit.
    pub plausible: (f64, f64),
    /// Smallest value that is a number of this kind at all; below it a cell is refused.
    pub least: f64,
}

/// The coldest there is, in C.
const ABSOLUTE_ZERO: f64 = -273.15;

impl Column {
    /// A column that is not used.
    pub fn unused(name: &str) -> Self {
        Self {
            name: name.to_owned(),
            holds: Holds::Nothing,
        }
    }

    /// The column of a heading: the site's own names first, then the contract's.
    pub fn of(name: &str, site: &Site, vocabulary: &Vocabulary) -> Result<Self, NotAColumn> {
        let own = site.columns.iter().find(|h| h.heading == name);
        let meaning = match own {
            Some(own) => own.meaning.clone(),
            None => column::meaning(name, vocabulary)?,
        };
        let holds = match meaning {
            Meaning::Time => Holds::Time,
            Meaning::Place => Holds::Place,
            Meaning::By => Holds::By,
            Meaning::Corrects => Holds::Corrects,
            Meaning::Sign => Holds::Sign,
            Meaning::Event => Holds::Event,
            Meaning::Note => Holds::Note,
            Meaning::Reading(found) => {
                let reading = &vocabulary[found.reading];
                Holds::Reading(Measure {
                    reading: found.reading,
                    unit: found.unit,
                    kind: found.kind,
                    kept: reading.unit.clone(),
                    assumes: found.assumes,
                    plausible: reading.plausible,
                    // Only a temperature and a voltage have a zero that is not "none".
                    least: match reading.unit.as_str() {
                        "C" => ABSOLUTE_ZERO,
                        "mV" => f64::MIN,
                        _ => 0.0,
                    },
                })
            }
        };
        Ok(Self {
            name: name.to_owned(),
            holds,
        })
    }

    /// What two columns of one file must not both be.
    pub fn same_as(&self, other: &Self) -> bool {
        match (&self.holds, &other.holds) {
            (Holds::Nothing, _) => false,
            (Holds::Reading(a), Holds::Reading(b)) => a.reading == b.reading,
            (a, b) => std::mem::discriminant(a) == std::mem::discriminant(b),
        }
    }

    /// What is taken for granted about the unit and can be wrong by a factor: the note that says so.
    pub fn assumption(&self, vocabulary: &Vocabulary) -> Option<(ReadingId, Trouble)> {
        let Holds::Reading(measure) = &self.holds else {
            return None;
        };
        let assumed = measure.assumes.filter(|a| *a == "as N")?;
        let id = &vocabulary[measure.reading].id;
        let others: Vec<String> = crate::water::units::units_of(id)
            .iter()
            .filter(|u| u.name.starts_with("mg/L as") && !u.name.ends_with(assumed))
            .map(|u| format!("`{id} ({})`", u.name))
            .collect();
        let trouble = Trouble::new(
            "assumed-as-n",
            format!("`{id}` is read as mg/L {assumed}, because the column does not say"),
            format!(
                "name the column `{id} (mg/L {assumed})`, or {} if that is what the kit shows",
                others.join(" or ")
            ),
        );
        Some((measure.reading, trouble))
    }

    /// Why a column can't be converted at this site at all.
    pub fn obstacle(&self, site: &Site) -> Option<Trouble> {
        let Holds::Reading(measure) = &self.holds else {
            return None;
        };
        (measure.kind == UnitKind::NeedsSaturation && site.elevation_m.is_none()).then(|| {
            Trouble::new(
                "needs-elevation",
                "percent of saturation can't be turned into mg/L without the elevation of the site",
                "add `elevation_m = …` to the site file, or log mg/L",
            )
        })
    }
}
