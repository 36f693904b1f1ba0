//! What a log said that could not be used, or not as it stood.

use std::fmt;

use super::limits;

/// What became of the thing that a problem is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Effect {
    /// The row is not used.
    RowRefused,
    /// The cell, or one word of it, is not used; the rest of the row is.
    CellSkipped,
    /// The column is not used; the rest of the file is.
    ColumnSkipped,
    /// The value is kept as a fact about the instrument, and not used as water.
    KeptAsOdd,
    /// All is used; this says how it was understood.
    Noted,
}

impl Effect {
    /// In a word, for programs.
    pub fn word(self) -> &'static str {
        match self {
            Self::RowRefused => "row-refused",
            Self::CellSkipped => "cell-skipped",
            Self::ColumnSkipped => "column-skipped",
            Self::KeptAsOdd => "kept-as-odd",
            Self::Noted => "noted",
        }
    }
}

/// One problem in a log.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Problem {
    /// The name of the log.
    pub file: String,
    /// Line, from 1.
    pub line: usize,
    /// Where in the line, in characters from 1.
    pub at: usize,
    /// The column's name, where one is meant.
    pub column: Option<String>,
    /// A stable id of the kind of problem, such as `decimal-comma`.
    pub code: &'static str,
    /// What is wrong: lower case, names in backticks, no full stop.
    pub reason: String,
    /// What to do about it.
    pub cure: String,
    /// What became of it.
    pub effect: Effect,
}

impl fmt::Display for Problem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}:{}: ", self.file, self.line, self.at)?;
        if let Some(column) = &self.column {
            write!(f, "column `{column}`: ")?;
        }
        write!(f, "{}; {}", self.reason, self.cure)
    }
}

/// A reason and a cure that have no place yet.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Trouble {
    pub code: &'static str,
    pub reason: String,
    pub cure: String,
}

impl Trouble {
    pub fn new(code: &'static str, reason: impl Into<String>, cure: impl Into<String>) -> Self {
        Self {
            code,
            reason: reason.into(),
            cure: cure.into(),
        }
    }
}

/// Collects problems. Those that cost a row are kept before those that don't.
#[derive(Debug, Default)]
pub(super) struct Problems {
    refusals: Vec<Problem>,
    others: Vec<Problem>,
    count: usize,
}

impl Problems {
    pub fn add(&mut self, problem: Problem) {
        self.count += 1;
        let list = match problem.effect {
            Effect::RowRefused => &mut self.refusals,
            _ => &mut self.others,
        };
        if list.len() < limits::PROBLEMS {
            list.push(problem);
        }
    }

    /// The problems kept, in the order of files and lines, and how many there were.
    pub fn finish(self, files: &[String]) -> (Vec<Problem>, usize) {
        let mut kept = self.refusals;
        let room = limits::PROBLEMS.saturating_sub(kept.len());
        kept.extend(self.others.into_iter().take(room));
        kept.sort_by_key(|p| (files.iter().position(|f| *f == p.file), p.line, p.at));
        (kept, self.count)
    }
}
