//! Rows of separated cells.

use super::columns::Column;
use super::desk::Spot;
use super::draft::{Draft, Means};
use super::problem::{Effect, Trouble};
use super::records::{Quotes, characters};

/// What a table needs to be read row by row.
#[derive(Debug)]
pub(super) struct Table {
    pub separator: u8,
    starts: Vec<usize>,
    record: csv::StringRecord,
}

/// A row as it stands in the file.
#[derive(Clone, Copy)]
pub(super) struct Written<'t> {
    pub file: u16,
    pub line: usize,
    pub text: &'t str,
    pub quoted: bool,
}

impl Table {
    pub fn new(separator: u8) -> Self {
        Self {
            separator,
            starts: Vec::new(),
            record: csv::StringRecord::new(),
        }
    }

    /// Splits a row that may have quotes: cells to `record`, where they begin to `starts`.
    fn split(&mut self, text: &str) {
        let starts = &mut self.starts;
        starts.clear();
        starts.push(0);
        Quotes::default().pass(text.as_bytes(), self.separator, |at| starts.push(at));
        self.record.clear();
        // The row is one record already: a line end in it can only stand between quotes.
        let read = csv::ReaderBuilder::new()
            .has_headers(false)
            .flexible(true)
            .delimiter(self.separator)
            .terminator(csv::Terminator::Any(b'\n'))
            .buffer_capacity(text.len().max(16))
            .from_reader(text.as_bytes())
            .read_record(&mut self.record);
        if !matches!(read, Ok(true)) {
            self.record.clear();
        }
    }

    /// The cells of a row, trimmed.
    pub fn cells(&mut self, text: &str, quoted: bool) -> Vec<String> {
        if quoted {
            self.split(text);
            return self.record.iter().map(|c| c.trim().to_owned()).collect();
        }
        let separator = char::from(self.separator);
        text.split(separator).map(|c| c.trim().to_owned()).collect()
    }

    /// Reads a row into the draft; `false` when it is refused.
    pub fn row(
        &mut self,
        written: Written<'_>,
        columns: &[Column],
        draft: &mut Draft,
        means: &mut Means<'_, '_>,
    ) -> bool {
        let text = written.text;
        let count = if written.quoted {
            self.split(text);
            self.record.len()
        } else {
            text.bytes().filter(|b| *b == self.separator).count() + 1
        };
        if count != columns.len() {
            let (at, trouble) = self.wrong_count(written, count, columns.len());
            let spot = Spot {
                file: written.file,
                line: written.line,
                at,
            };
            means.desk.tell(spot, None, trouble, Effect::RowRefused);
            return false;
        }
        let mut good = true;
        if written.quoted {
            for (index, column) in columns.iter().enumerate() {
                let cell = self.record.get(index).unwrap_or_default().trim();
                let start = self.starts.get(index).copied().unwrap_or_default();
                good &= put(index, column, cell, start, written, draft, means);
            }
        } else {
            let mut rest = text;
            let mut start = 0;
            for (index, column) in columns.iter().enumerate() {
                let end = rest
                    .bytes()
                    .position(|b| b == self.separator)
                    .unwrap_or(rest.len());
                let cell = rest.get(..end).unwrap_or_default();
                rest = rest.get(end + 1..).unwrap_or_default();
                good &= put(index, column, cell.trim(), start, written, draft, means);
                start += end + 1;
            }
        }
        good
    }

    fn wrong_count(&self, written: Written<'_>, count: usize, wanted: usize) -> (usize, Trouble) {
        let separator = match self.separator {
            b'\t' => "tab",
            b';' => "semicolon",
            _ => "comma",
        };
        let reason = format!("the row has {count} cells, but the head of the file has {wanted}");
        if count < wanted {
            let cure = format!("write a {separator} for every column, also behind empty cells");
            let at = written
                .text
                .lines()
                .next()
                .unwrap_or_default()
                .chars()
                .count()
                .max(1);
            return (at, Trouble::new("wrong-cell-count", reason, cure));
        }
        let first_extra = if written.quoted {
            self.starts.get(wanted).copied()
        } else {
            let mut ends = written
                .text
                .bytes()
                .enumerate()
                .filter(|(_, b)| *b == self.separator);
            ends.nth(wanted.saturating_sub(1)).map(|(at, _)| at + 1)
        };
        let at = characters(written.text, first_extra.unwrap_or(0));
        let cure = if self.separator == b',' {
            "write decimals with a point (a decimal comma such as 7,1 makes two cells), and put quotes around a note with commas".to_owned()
        } else {
            format!("put quotes around a cell with a {separator} in it, such as two signs")
        };
        (at, Trouble::new("wrong-cell-count", reason, cure))
    }
}

/// Puts one cell into the draft, and tells what is wrong with it; `false` when that costs the row.
fn put(
    index: usize,
    column: &Column,
    cell: &str,
    start: usize,
    written: Written<'_>,
    draft: &mut Draft,
    means: &mut Means<'_, '_>,
) -> bool {
    if cell.is_empty() {
        return true;
    }
    draft.cell(index, column, cell, means);
    if draft.troubles.is_empty() {
        return true;
    }
    let before = written.text.get(..start).unwrap_or_default();
    let spot = Spot {
        file: written.file,
        line: written.line + before.matches('\n').count(),
        at: characters(before, start) - before.rfind('\n').map_or(0, |at| characters(before, at)),
    };
    let mut good = true;
    for (trouble, effect) in draft.troubles.drain(..) {
        good &= effect != Effect::RowRefused;
        means.desk.tell(spot, Some(&column.name), trouble, effect);
    }
    good
}
