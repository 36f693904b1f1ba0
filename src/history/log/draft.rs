//! A row in the making: cells come in one by one, and what is wrong with them is collected.

use std::fmt::Display;

use super::columns::{Column, Holds, Measure};
use super::desk::Desk;
use super::limits;
use super::moment::{Clock, Moment};
use super::number::{self, Decimals};
use super::problem::{Effect, Trouble};
use super::row::{Row, Value};
use super::words;
use crate::fault::shown;
use crate::vocabulary::ReadingId;
use crate::water::units::UnitKind;

/// A value in percent of saturation: it needs the temperature that is known when its turn comes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Percent {
    pub reading: ReadingId,
    pub value: Value,
    /// Index of its column.
    pub column: usize,
}

/// A row and what is not settled about it.
#[derive(Debug, Default)]
pub(super) struct Draft {
    pub row: Row,
    pub percents: Vec<Percent>,
    pub moment: Option<Moment>,
    /// What is wrong with the cell last put in.
    pub troubles: Vec<(Trouble, Effect)>,
}

/// What reading a cell needs besides the cell.
pub(super) struct Means<'f, 'a> {
    pub clock: &'f mut Clock,
    pub decimals: &'f mut Decimals,
    pub desk: &'f mut Desk<'a>,
}

impl Draft {
    pub fn clear(&mut self) {
        self.row.clear();
        self.percents.clear();
        self.moment = None;
        self.troubles.clear();
    }

    fn refuse(&mut self, trouble: Trouble) {
        self.troubles.push((trouble, Effect::RowRefused));
    }

    /// Puts in a cell that is not empty.
    pub fn cell(&mut self, index: usize, column: &Column, text: &str, means: &mut Means<'_, '_>) {
        if text.len() > limits::CELL {
            self.refuse(Trouble::new(
                "cell-too-long",
                format!(
                    "the cell has {} bytes, more than {}",
                    text.len(),
                    limits::CELL
                ),
                "shorten it",
            ));
            return;
        }
        match &column.holds {
            Holds::Nothing => {}
            Holds::Reading(measure) => match number::value(text, means.decimals) {
                Ok(value) => self.measured(index, measure, value, &text),
                Err(trouble) => self.refuse(trouble),
            },
            Holds::Time => match means.clock.read(text) {
                Ok(moment) => self.moment = Some(moment),
                Err(trouble) => self.refuse(trouble),
            },
            Holds::Corrects => match means.clock.read(text) {
                Ok(moment) => self.row.corrects = Some(moment.not_before(None)),
                Err(trouble) => self.refuse(trouble),
            },
            Holds::Place => match means.desk.places.id(text) {
                Some((place, unlisted)) => {
                    self.row.place = Some(place);
                    if let Some(trouble) = unlisted {
                        self.troubles.push((trouble, Effect::Noted));
                    }
                }
                None => self.refuse(Trouble::new(
                    "too-many-places",
                    format!(
                        "`{}` would be one more than {} different places",
                        shown(text),
                        limits::PLACES
                    ),
                    "put free words in `note`, and keep `place` for the places of the farm",
                )),
            },
            Holds::By => self.row.by = Some(text.to_owned()),
            Holds::Note => self.row.note = Some(text.to_owned()),
            Holds::Sign => {
                let troubles = &mut self.troubles;
                words::signs(text, means.desk.vocabulary, &mut self.row, |t| {
                    troubles.push((t, Effect::CellSkipped));
                });
            }
            Holds::Event => {
                let troubles = &mut self.troubles;
                words::events(text, means.desk.vocabulary, &mut self.row, |t| {
                    troubles.push((t, Effect::CellSkipped));
                });
            }
        }
    }

    /// Puts in a number that needs no reading of text.
    pub fn measured(&mut self, index: usize, measure: &Measure, value: Value, text: &dyn Display) {
        let reading = measure.reading;
        let UnitKind::Linear { scale, offset } = measure.kind else {
            if value.amount < 0.0 {
                self.refuse(negative(text));
            } else {
                self.percents.push(Percent {
                    reading,
                    value,
                    column: index,
                });
            }
            return;
        };
        let amount = value.amount * scale + offset;
        if amount < measure.least {
            let trouble = if measure.least == 0.0 {
                negative(text)
            } else {
                Trouble::new(
                    "too-cold",
                    format!(
                        "`{}` is colder than anything can be",
                        shown(&text.to_string())
                    ),
                    "correct the number or the unit of the column",
                )
            };
            self.refuse(trouble);
            return;
        }
        let value = Value { amount, ..value };
        let (low, high) = measure.plausible;
        if amount >= low && amount <= high {
            self.row.values.push((reading, value));
            return;
        }
        self.row.odd.push((reading, amount));
        let trouble = Trouble::new(
            "implausible",
            format!(
                "`{}` is outside of what water shows ({low} to {high} {}); it is kept as a fact about the instrument",
                shown(&text.to_string()),
                measure.kept
            ),
            "check the instrument, the decimal point, and the unit of the column",
        );
        self.troubles.push((trouble, Effect::KeptAsOdd));
    }

    /// The last look, when all cells are in: a row needs a time, and corrects only what was before it. Gives the column
    /// and what is wrong.
    pub fn lacks(&self) -> Option<(&'static str, Trouble)> {
        let Some(moment) = self.moment else {
            let trouble = Trouble::new(
                "no-time",
                "the row has no time",
                "write when it was, such as `2026-03-02 07:30`",
            );
            return Some(("time", trouble));
        };
        let corrected = self.row.corrects?;
        (corrected >= moment.not_before(Some(corrected))).then(|| {
            let trouble = Trouble::new(
                "corrects-later",
                "a row can only correct an earlier one",
                "write the time of the wrong row in `corrects`, and when it was corrected in `time`",
            );
            ("corrects", trouble)
        })
    }
}

fn negative(text: &dyn Display) -> Trouble {
    Trouble::new(
        "negative",
        format!(
            "`{}` is below zero, which this reading never is",
            shown(&text.to_string())
        ),
        "correct the number; leave the cell empty when nothing was measured, or write `<0.05` for below detection",
    )
}
