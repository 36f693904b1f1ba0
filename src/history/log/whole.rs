//! A whole log in memory, with corrections carried out.

use super::FileColumns;
use super::input::Input;
use super::problem::{Problem, Trouble};
use super::row::{PlaceId, Row};
use super::stream::{Stream, Summary};
use crate::fault::Fault;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

/// All rows of the logs of one call, in the order of time.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Log {
    /// The rows, corrected where a later row corrects them.
    pub rows: Vec<Row>,
    /// What was corrected, as it stood before.
    pub corrected: Vec<Corrected>,
    /// The logs, in the order they were named.
    pub files: Vec<String>,
    /// The places; a [`PlaceId`] is an index here.
    pub places: Vec<String>,
    /// The problems, at most [`limits::PROBLEMS`](super::limits::PROBLEMS).
    pub problems: Vec<Problem>,
    /// How many problems there were in all.
    pub problem_count: usize,
    /// Rows read: used and refused.
    pub rows_read: usize,
    /// Rows used, corrections among them.
    pub rows_used: usize,
    /// Rows refused.
    pub rows_refused: usize,
    /// Which readings each log has, and in which unit.
    pub columns: Vec<FileColumns>,
    /// Readings that are read as N because a column does not say.
    pub assumed_as_n: Vec<ReadingId>,
}

/// A row as it stood before it was corrected.
#[derive(Debug, Clone, PartialEq)]
pub struct Corrected {
    /// The row as it stood.
    pub original: Row,
    /// When it was corrected: until then the original was what was known.
    pub at: i64,
    /// Who corrected it.
    pub by: Option<String>,
    /// The line of the correcting row.
    pub line: usize,
    /// The file of the correcting row.
    pub file: u16,
}

/// Reads logs whole. Rows later than `as_of` (unix seconds) are left out.
///
/// # Errors
/// As [`Stream::open`] and [`Stream::next_row`].
pub fn read(
    inputs: Vec<Input>,
    vocabulary: &Vocabulary,
    site: &Site,
    as_of: Option<i64>,
) -> Result<Log, Vec<Fault>> {
    let mut stream = Stream::open(inputs, vocabulary, site, as_of)?;
    let mut log = Log::default();
    let mut corrections = Corrections::default();
    loop {
        let mut row = Row::default();
        if !stream.next_row(&mut row).map_err(|fault| vec![*fault])? {
            break;
        }
        let Some(time) = row.corrects else {
            log.rows.push(row);
            continue;
        };
        match corrections.target(time, row.place, &log) {
            Some(index) => corrections.apply(index, row, &mut log),
            None => {
                let trouble = Trouble::new(
                    "nothing-to-correct",
                    format!("there is no row at {} to correct", stream.shown_time(time)),
                    match row.place {
                        None => "write the time of the wrong row, and its `place` if it has one",
                        Some(_) => "write the time and the `place` of the wrong row",
                    },
                );
                stream.refuse_given(&row, trouble);
            }
        }
    }
    Ok(log.with(stream.finish()))
}

impl Log {
    /// Whether there is any row to go by.
    pub fn is_usable(&self) -> bool {
        self.rows_used > 0
    }

    fn with(self, summary: Summary) -> Self {
        Self {
            rows: self.rows,
            corrected: self.corrected,
            files: summary.files,
            places: summary.places,
            problems: summary.problems,
            problem_count: summary.problem_count,
            rows_read: summary.rows_read,
            rows_used: summary.rows_used,
            rows_refused: summary.rows_refused,
            columns: summary.columns,
            assumed_as_n: summary.assumed_as_n,
        }
    }
}

/// Rows that correct others, so that they can be corrected themselves.
#[derive(Debug, Default)]
struct Corrections {
    /// Time and place of a correcting row, and the index of the row it corrected.
    made: Vec<(i64, Option<PlaceId>, usize)>,
}

impl Corrections {
    /// The row at that time and place, the latest such row if there are several; or the row that was corrected then.
    fn target(&self, time: i64, place: Option<PlaceId>, log: &Log) -> Option<usize> {
        let end = log.rows.partition_point(|row| row.time <= time);
        let at_that_time = log.rows.iter().enumerate().take(end).rev();
        let direct = at_that_time
            .take_while(|(_, row)| row.time == time)
            .find(|(_, row)| row.place == place)
            .map(|(index, _)| index);
        let through = || {
            let mut made = self.made.iter().rev();
            made.find(|(at, where_, _)| *at == time && *where_ == place)
                .map(|(_, _, index)| *index)
        };
        direct.or_else(through)
    }

    fn apply(&mut self, index: usize, correction: Row, log: &mut Log) {
        let Some(row) = log.rows.get_mut(index) else {
            return;
        };
        log.corrected.push(Corrected {
            original: row.clone(),
            at: correction.time,
            by: correction.by.clone(),
            line: correction.line,
            file: correction.file,
        });
        self.made.push((correction.time, correction.place, index));
        replace(row, correction);
    }
}

/// What the correction gives replaces what the row has; a cell that the correction leaves empty stays as it was.
fn replace(row: &mut Row, correction: Row) {
    let given = |id: ReadingId| {
        correction.values.iter().any(|(r, _)| *r == id)
            || correction.odd.iter().any(|(r, _)| *r == id)
    };
    row.values.retain(|(id, _)| !given(*id));
    row.odd.retain(|(id, _)| !given(*id));
    row.signs
        .retain(|(id, _)| !correction.signs.iter().any(|(s, _)| s == id));
    row.values.extend(correction.values);
    row.odd.extend(correction.odd);
    row.signs.extend(correction.signs);
    if !correction.events.is_empty() {
        row.events = correction.events;
    }
    row.note = correction.note.or(row.note.take());
    row.by = correction.by.or(row.by.take());
}
