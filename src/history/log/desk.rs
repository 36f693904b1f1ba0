//! What all files of one call share: the words, the site, the places, the problems and the counts.

use super::FileColumns;
use super::places::Places;
use super::problem::{Effect, Problem, Problems, Trouble};
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

/// A place in a file.
#[derive(Debug, Clone, Copy)]
pub(super) struct Spot {
    pub file: u16,
    pub line: usize,
    /// In characters, from 1.
    pub at: usize,
}

/// Shared by all files.
#[derive(Debug)]
pub(super) struct Desk<'a> {
    pub vocabulary: &'a Vocabulary,
    pub site: &'a Site,
    pub files: Vec<String>,
    pub places: Places,
    pub problems: Problems,
    pub used: usize,
    pub refused: usize,
    pub columns: Vec<FileColumns>,
    pub assumed_as_n: Vec<ReadingId>,
}

impl<'a> Desk<'a> {
    pub fn new(vocabulary: &'a Vocabulary, site: &'a Site, files: Vec<String>) -> Self {
        Self {
            vocabulary,
            site,
            columns: files.iter().map(|f| FileColumns::of(f)).collect(),
            files,
            places: Places::new(site),
            problems: Problems::default(),
            used: 0,
            refused: 0,
            assumed_as_n: Vec::new(),
        }
    }

    /// The name of a file.
    pub fn file(&self, file: u16) -> &str {
        self.files.get(usize::from(file)).map_or("", String::as_str)
    }

    /// Notes a problem. Refusing a row is counted apart: several cells of one row may be at fault.
    pub fn tell(&mut self, spot: Spot, column: Option<&str>, trouble: Trouble, effect: Effect) {
        let problem = Problem {
            file: self.file(spot.file).to_owned(),
            line: spot.line,
            at: spot.at,
            column: column.map(crate::fault::shown),
            code: trouble.code,
            reason: trouble.reason,
            cure: trouble.cure,
            effect,
        };
        self.problems.add(problem);
    }

    /// Notes what a column is and what it takes for granted.
    pub fn column(&mut self, spot: Spot, column: &super::columns::Column) {
        if let super::columns::Holds::Reading(measure) = &column.holds
            && let Some(file) = self.columns.get_mut(usize::from(spot.file))
        {
            file.readings.push(super::ReadingIn {
                reading: measure.reading,
                unit: measure.unit.clone(),
                heading: column.name.clone(),
            });
        }
        if let Some((reading, trouble)) = column.assumption(self.vocabulary) {
            if !self.assumed_as_n.contains(&reading) {
                self.assumed_as_n.push(reading);
            }
            self.tell(spot, Some(&column.name), trouble, Effect::Noted);
        }
    }
}
