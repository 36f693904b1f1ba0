//! Reads logs: CSV or JSON lines, from files or standard input.
//!
//! Every row is used or reported with its line, column and reason. A row with a cell that can't be read is refused
//! whole, because such a cell often means that cells have moved; a sign or event that is not known costs only itself.
//! A file whose head can't be understood (no `time`, a unit that is not known, two columns that are the same) can't be
//! used at all.
//!
//! [`Stream`] gives one row at a time in flat memory; [`read`] gives all of them, with corrections carried out.

mod columns;
mod desk;
mod draft;
mod feed;
mod head;
mod input;
pub mod limits;
mod lines;
mod moment;
mod number;
mod objects;
mod order;
mod places;
mod problem;
mod records;
mod row;
mod saturation;
mod stream;
mod table;
mod whole;
mod words;

pub use input::Input;
pub use moment::read_time;
pub use problem::{Effect, Problem};
pub use row::{PlaceId, Row, Value};
pub use stream::{Stream, Summary};
pub use whole::{Corrected, Log, read};

use crate::vocabulary::ReadingId;

/// The readings that a log has.
#[derive(Debug, Clone, PartialEq)]
pub struct FileColumns {
    /// The log.
    pub file: String,
    /// Its readings, in the order of the columns.
    pub readings: Vec<ReadingIn>,
}

impl FileColumns {
    fn of(file: &str) -> Self {
        Self {
            file: file.to_owned(),
            readings: Vec::new(),
        }
    }
}

/// A reading and how its column gives it.
#[derive(Debug, Clone, PartialEq)]
pub struct ReadingIn {
    /// Which reading.
    pub reading: ReadingId,
    /// The unit that its cells are in.
    pub unit: String,
    /// The column as it stands at the head.
    pub heading: String,
}
