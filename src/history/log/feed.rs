//! One log, row after row in the order of time.

use std::io;

use super::columns::{Column, Holds};
use super::desk::{Desk, Spot};
use super::draft::{Draft, Means};
use super::head;
use super::input::Input;
use super::lines::Lines;
use super::moment::Clock;
use super::number::Decimals;
use super::objects::Objects;
use super::order::Order;
use super::problem::{Effect, Trouble};
use super::records::{Record, Records};
use super::table::{Table, Written};
use crate::fault::{Fault, plain_io};
use crate::vocabulary::ReadingId;

enum Form {
    Table(Table),
    Objects(Objects),
}

/// One log being read.
pub(super) struct Feed {
    file: u16,
    form: Form,
    records: Records,
    columns: Vec<Column>,
    clock: Clock,
    decimals: Decimals,
    order: Order,
    good: usize,
    ended: bool,
}

impl Feed {
    /// Opens a log and reads its head.
    pub fn open(file: u16, input: Input, desk: &mut Desk<'_>) -> Result<Self, Vec<Fault>> {
        let name = input.name();
        let mut records = Records::new(Lines::new(input.open().map_err(|f| vec![*f])?));
        let (form, columns) = Self::head(file, &name, &mut records, desk)?;
        let comma_allowed = matches!(&form, Form::Table(table) if table.separator != b',');
        Ok(Self {
            file,
            form,
            records,
            columns,
            clock: Clock::new(desk.site.timezone.clone()),
            decimals: Decimals {
                comma_allowed,
                comma_seen: false,
            },
            order: Order::new(file),
            good: 0,
            ended: false,
        })
    }

    fn head(
        file: u16,
        name: &str,
        records: &mut Records,
        desk: &mut Desk<'_>,
    ) -> Result<(Form, Vec<Column>), Vec<Fault>> {
        let at_line =
            |line, text: &str, at, trouble| vec![head::fault(name, line, text, at, 1, trouble)];
        let unreadable = |e: io::Error| vec![*read_failed(name, &e)];
        let separator = match records.next().map_err(unreadable)? {
            Record::End => {
                let trouble = Trouble::new(
                    "empty-file",
                    "the log is empty",
                    "begin it with a head such as `time,temperature,ph`, and write a row for each look at the water",
                );
                return Err(at_line(1, "", 1, trouble));
            }
            Record::Bad(line, at, trouble) => return Err(at_line(line, "", at, trouble)),
            Record::Row { line, text, .. } => match text.trim_start().chars().next() {
                Some('{') => None,
                Some('[') => {
                    let trouble = Trouble::new(
                        "json-list",
                        "the log is a JSON list",
                        "write JSON lines: one object a line, no list around them",
                    );
                    return Err(at_line(line, text, 1, trouble));
                }
                _ => Some(head::separator(text, desk)),
            },
        };
        records.again();
        let Some(separator) = separator else {
            return Ok((Form::Objects(Objects::default()), Vec::new()));
        };
        records.quotes(separator);
        let mut table = Table::new(separator);
        match records.next().map_err(unreadable)? {
            Record::Row { line, text, quoted } => {
                let columns = head::columns(file, line, text, quoted, &mut table, desk)?;
                Ok((Form::Table(table), columns))
            }
            Record::Bad(line, at, trouble) => Err(at_line(line, "", at, trouble)),
            Record::End => Ok((Form::Table(table), Vec::new())),
        }
    }

    /// The name of a column.
    pub fn column(&self, index: usize) -> Option<&Column> {
        self.columns.get(index)
    }

    /// The name of the column that has a reading.
    pub fn name_of(&self, reading: ReadingId) -> Option<&str> {
        let mut columns = self.columns.iter();
        let found = columns.find(|c| matches!(&c.holds, Holds::Reading(m) if m.reading == reading));
        found.map(|c| c.name.as_str())
    }

    /// Takes a row back for its buffers.
    pub fn done_with(&mut self, draft: Draft) {
        self.order.done_with(draft);
    }

    /// The next row, later than or as late as the one before; `None` at the end.
    pub fn next(&mut self, desk: &mut Desk<'_>) -> Result<Option<Draft>, Box<Fault>> {
        loop {
            if let Some(draft) = self.order.pop() {
                return Ok(Some(draft));
            }
            if self.ended {
                return Ok(None);
            }
            self.read_one(desk)?;
        }
    }

    fn read_one(&mut self, desk: &mut Desk<'_>) -> Result<(), Box<Fault>> {
        let record = match self.records.next() {
            Ok(record) => record,
            Err(error) => {
                self.ended = true;
                return Err(read_failed(desk.file(self.file), &error));
            }
        };
        let written = match record {
            Record::End => {
                self.ended = true;
                self.order.finish(desk);
                self.tell_backward(desk);
                return Ok(());
            }
            Record::Bad(line, at, trouble) => {
                let spot = Spot {
                    file: self.file,
                    line,
                    at,
                };
                desk.tell(spot, None, trouble, Effect::RowRefused);
                desk.refused += 1;
                return Ok(());
            }
            Record::Row { line, text, quoted } => Written {
                file: self.file,
                line,
                text,
                quoted,
            },
        };
        if matches!(&self.form, Form::Table(table) if nothing_in(written.text, table.separator)) {
            return Ok(());
        }
        let mut draft = self.order.fresh();
        let mut means = Means {
            clock: &mut self.clock,
            decimals: &mut self.decimals,
            desk,
        };
        let mut good = match &mut self.form {
            Form::Table(table) => table.row(written, &self.columns, &mut draft, &mut means),
            Form::Objects(objects) => {
                objects.row(written, &mut self.columns, &mut draft, &mut means)
            }
        };
        if good && let Some((column, trouble)) = draft.lacks() {
            good = false;
            let spot = Spot {
                file: self.file,
                line: written.line,
                at: 1,
            };
            desk.tell(spot, Some(column), trouble, Effect::RowRefused);
        }
        match draft.moment {
            Some(moment) if good => {
                draft.row.time = moment.not_before(self.order.latest());
                draft.row.line = written.line;
                draft.row.file = self.file;
                self.good += 1;
                self.order.push(draft, desk);
            }
            _ => {
                desk.refused += 1;
                self.order.done_with(draft);
            }
        }
        Ok(())
    }

    /// When most rows were refused for their order, the file runs from new to old: say so in one place.
    fn tell_backward(&self, desk: &mut Desk<'_>) {
        if self.order.refused() < 2 || self.order.refused() * 2 < self.good {
            return;
        }
        let spot = Spot {
            file: self.file,
            line: 1,
            at: 1,
        };
        let trouble = Trouble::new(
            "runs-backward",
            "most rows are earlier than the one before them",
            "sort the file so that the oldest row comes first",
        );
        desk.tell(spot, Some("time"), trouble, Effect::Noted);
    }
}

/// A row of separators and nothing else, as spreadsheets add them at the end.
fn nothing_in(text: &str, separator: u8) -> bool {
    text.bytes()
        .all(|b| b == separator || b.is_ascii_whitespace())
}

fn read_failed(name: &str, error: &io::Error) -> Box<Fault> {
    Box::new(Fault::whole(
        "read-failed",
        format!("`{name}` can't be read further: {}", plain_io(error)),
        "check the disk or the connection, and try again",
    ))
}
