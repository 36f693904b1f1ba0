//! All logs of one call, merged by time, one row at a time: memory stays flat however long they are.

use super::FileColumns;
use super::desk::{Desk, Spot};
use super::draft::Draft;
use super::feed::Feed;
use super::input::Input;
use super::limits;
use super::problem::{Effect, Problem};
use super::row::{Row, Value};
use super::saturation::Saturation;
use crate::fault::Fault;
use crate::site::Site;
use crate::vocabulary::{ReadingId, Vocabulary};

/// Reads logs row by row.
///
/// ```
/// use gillside::history::log::{Input, Row, Stream};
/// use gillside::{site::Site, vocabulary::Vocabulary};
/// let (vocabulary, site) = (Vocabulary::default(), Site::default());
/// let log = Input::text("log.csv", "time,note\n2026-03-02 07:30,all well\n");
/// let mut stream = Stream::open(vec![log], &vocabulary, &site, None).unwrap();
/// let mut row = Row::default();
/// while stream.next_row(&mut row).unwrap() {
///     assert_eq!(row.note.as_deref(), Some("all well"));
/// }
/// assert_eq!(stream.finish().rows_used, 1);
/// ```
pub struct Stream<'a> {
    desk: Desk<'a>,
    feeds: Vec<Feed>,
    /// The next row of every feed; `None` when it has ended.
    heads: Vec<Option<Draft>>,
    started: bool,
    as_of: Option<i64>,
    saturation: Saturation,
}

/// What is known of the logs when all rows are read.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Summary {
    /// The logs, in the order they were named.
    pub files: Vec<String>,
    /// The places; a [`PlaceId`](super::PlaceId) is an index here.
    pub places: Vec<String>,
    /// The problems, at most [`limits::PROBLEMS`], in the order of files and lines. Those that cost a row come first
    /// when there are more.
    pub problems: Vec<Problem>,
    /// How many problems there were in all.
    pub problem_count: usize,
    /// Rows read: used and refused. Rows later than `as_of` are not among them.
    pub rows_read: usize,
    /// Rows used.
    pub rows_used: usize,
    /// Rows refused.
    pub rows_refused: usize,
    /// Which readings each log has, and in which unit.
    pub columns: Vec<FileColumns>,
    /// Readings that are read as N because a column does not say.
    pub assumed_as_n: Vec<ReadingId>,
}

impl<'a> Stream<'a> {
    /// Opens the logs and reads their heads. Rows later than `as_of` (unix seconds) will not be given.
    ///
    /// # Errors
    /// All faults that make a log unusable: it is not there, is empty, or its head can't be understood.
    pub fn open(
        inputs: Vec<Input>,
        vocabulary: &'a Vocabulary,
        site: &'a Site,
        as_of: Option<i64>,
    ) -> Result<Self, Vec<Fault>> {
        let mut faults = Vec::new();
        if inputs.len() > limits::FILES {
            return Err(vec![Fault::whole(
                "too-many-files",
                format!("{} logs are more than {}", inputs.len(), limits::FILES),
                "join some of them",
            )]);
        }
        if inputs.iter().filter(|i| matches!(i, Input::Stdin)).count() > 1 {
            return Err(vec![Fault::whole(
                "stdin-twice",
                "standard input is named twice",
                "name `-` once",
            )]);
        }
        let names = inputs.iter().map(Input::name).collect();
        let mut desk = Desk::new(vocabulary, site, names);
        let mut feeds = Vec::new();
        for (file, input) in (0_u16..).zip(inputs) {
            match Feed::open(file, input, &mut desk) {
                Ok(feed) => feeds.push(feed),
                Err(wrong) => faults.extend(wrong),
            }
        }
        if !faults.is_empty() {
            return Err(faults);
        }
        Ok(Self {
            desk,
            heads: feeds.iter().map(|_| None).collect(),
            feeds,
            started: false,
            as_of,
            saturation: Saturation::new(vocabulary, site),
        })
    }

    /// Fills `row` with the next row; `false` when there is none. The row's buffers are used again.
    ///
    /// # Errors
    /// A log can't be read further (a broken disk, say).
    pub fn next_row(&mut self, row: &mut Row) -> Result<bool, Box<Fault>> {
        if !self.started {
            self.started = true;
            for index in 0..self.feeds.len() {
                self.advance(index)?;
            }
        }
        let times = self.heads.iter().enumerate();
        let first = times
            .filter_map(|(index, head)| head.as_ref().map(|draft| (draft.row.time, index)))
            .min();
        let Some((_, index)) = first else {
            row.clear();
            return Ok(false);
        };
        let Some(mut draft) = self.heads.get_mut(index).and_then(Option::take) else {
            return Ok(false);
        };
        self.settle(index, &mut draft);
        std::mem::swap(row, &mut draft.row);
        self.desk.used += 1;
        if let Some(feed) = self.feeds.get_mut(index) {
            feed.done_with(draft);
        }
        self.advance(index)?;
        Ok(true)
    }

    /// Gets the next row of a feed; one that is later than `as_of` ends it.
    fn advance(&mut self, index: usize) -> Result<(), Box<Fault>> {
        let Some(feed) = self.feeds.get_mut(index) else {
            return Ok(());
        };
        let next = feed.next(&mut self.desk)?;
        let in_time = next.filter(|draft| self.as_of.is_none_or(|end| draft.row.time <= end));
        if let Some(head) = self.heads.get_mut(index) {
            *head = in_time;
        }
        Ok(())
    }

    /// Turns percent of saturation into mg/L, now that the order of rows is settled, and tells oxygen apart that no
    /// water holds.
    fn settle(&mut self, index: usize, draft: &mut Draft) {
        self.saturation.see(&draft.row);
        let Some(feed) = self.feeds.get(index) else {
            return;
        };
        let now = draft.row.time;
        let spot = Spot {
            file: draft.row.file,
            line: draft.row.line,
            at: 1,
        };
        for percent in std::mem::take(&mut draft.percents) {
            match self.saturation.mg_per_l(percent.value.amount, now) {
                Ok(amount) => {
                    let below = percent.value.below;
                    draft
                        .row
                        .values
                        .push((percent.reading, Value { amount, below }));
                }
                Err(trouble) => {
                    let name = feed.column(percent.column).map(|c| c.name.as_str());
                    self.desk.tell(spot, name, trouble, Effect::CellSkipped);
                }
            }
        }
        let oxygen = self.saturation.oxygen();
        let found = draft
            .row
            .values
            .iter()
            .position(|(id, _)| Some(*id) == oxygen);
        let Some((at, value)) = found.and_then(|at| draft.row.values.get(at).map(|v| (at, v.1)))
        else {
            return;
        };
        if let Some(trouble) = self.saturation.too_much(value.amount, now) {
            let (reading, value) = draft.row.values.remove(at);
            draft.row.odd.push((reading, value.amount));
            let name = feed.name_of(reading);
            self.desk.tell(spot, name, trouble, Effect::KeptAsOdd);
        }
    }

    /// What is known of the logs when all rows are read.
    pub fn finish(self) -> Summary {
        let desk = self.desk;
        let (problems, problem_count) = desk.problems.finish(&desk.files);
        Summary {
            files: desk.files,
            places: desk.places.into_names(),
            problems,
            problem_count,
            rows_read: desk.used + desk.refused,
            rows_used: desk.used,
            rows_refused: desk.refused,
            columns: desk.columns,
            assumed_as_n: desk.assumed_as_n,
        }
    }

    /// Counts a row that was given, but could not be used after all.
    pub(super) fn refuse_given(&mut self, row: &Row, trouble: super::problem::Trouble) {
        let spot = Spot {
            file: row.file,
            line: row.line,
            at: 1,
        };
        self.desk
            .tell(spot, Some("corrects"), trouble, Effect::RowRefused);
        self.desk.used -= 1;
        self.desk.refused += 1;
    }

    pub(super) fn shown_time(&self, time: i64) -> String {
        super::order::shown_time(time, &self.desk)
    }
}
