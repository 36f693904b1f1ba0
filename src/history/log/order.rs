//! Rows of one file in the order of time, with the odd ones out told apart.
//!
//! Rows come in time order. Where one does not, either it is too early, or the one before it ran ahead (a mistyped
//! year, say, that would cost every row after it). The next row tells which: the latest rows are held back until then.

use std::collections::VecDeque;

use jiff::Timestamp;

use super::desk::{Desk, Spot};
use super::draft::Draft;
use super::limits;
use super::problem::{Effect, Trouble};

/// Holds back the latest rows of a file.
#[derive(Debug, Default)]
pub(super) struct Order {
    /// The last row that was let go: time and line.
    last: Option<(i64, usize)>,
    /// Rows of one time, to be let go when a later one comes.
    held: Vec<Draft>,
    /// Rows of one time, earlier than those held: either these or those are wrong.
    doubt: Vec<Draft>,
    ready: VecDeque<Draft>,
    spare: Vec<Draft>,
    file: u16,
    refused: usize,
}

impl Order {
    pub fn new(file: u16) -> Self {
        Self {
            file,
            ..Self::default()
        }
    }

    /// An empty draft, with the buffers of an old one where there is one.
    pub fn fresh(&mut self) -> Draft {
        self.spare.pop().unwrap_or_default()
    }

    /// Takes a draft back for its buffers.
    pub fn done_with(&mut self, mut draft: Draft) {
        draft.clear();
        if self.spare.len() < 8 {
            self.spare.push(draft);
        }
    }

    /// The time that the next row should not be before.
    pub fn latest(&self) -> Option<i64> {
        time(&self.doubt)
            .or(time(&self.held))
            .or(self.last.map(|(t, _)| t))
    }

    /// The next row whose order is sure.
    pub fn pop(&mut self) -> Option<Draft> {
        self.ready.pop_front()
    }

    /// How many rows were refused for their order.
    pub fn refused(&self) -> usize {
        self.refused
    }

    /// Takes the next row of the file.
    pub fn push(&mut self, draft: Draft, desk: &mut Desk<'_>) {
        let now = draft.row.time;
        let Some(held) = time(&self.held) else {
            self.held.push(draft);
            return;
        };
        if now == held && self.doubt.is_empty() {
            self.held.push(draft);
            if self.held.len() > limits::TOGETHER {
                self.release();
            }
        } else if now >= held {
            self.drop_doubt(desk);
            self.release();
            self.held.push(draft);
        } else {
            self.earlier(draft, now, desk);
        }
    }

    /// A row that is earlier than those held.
    fn earlier(&mut self, draft: Draft, now: i64, desk: &mut Desk<'_>) {
        match time(&self.doubt) {
            Some(doubt) if now == doubt && self.doubt.len() < limits::TOGETHER => {
                self.doubt.push(draft);
            }
            Some(doubt) if now > doubt => {
                let reason = ahead(self.doubt.first().unwrap_or(&draft), desk);
                for wrong in std::mem::take(&mut self.held) {
                    self.refuse(wrong, reason.clone(), desk);
                }
                self.held = std::mem::take(&mut self.doubt);
                self.release();
                self.held.push(draft);
            }
            None if self.last.is_none_or(|(last, _)| now >= last) => self.doubt.push(draft),
            _ => {
                let reason = self.behind(desk);
                self.refuse(draft, reason, desk);
            }
        }
    }

    /// The file has ended: what is still held is let go.
    pub fn finish(&mut self, desk: &mut Desk<'_>) {
        self.drop_doubt(desk);
        self.release();
    }

    fn release(&mut self) {
        for draft in self.held.drain(..) {
            self.last = Some((draft.row.time, draft.row.line));
            self.ready.push_back(draft);
        }
    }

    fn drop_doubt(&mut self, desk: &mut Desk<'_>) {
        if self.doubt.is_empty() {
            return;
        }
        let reason = self.behind(desk);
        for draft in std::mem::take(&mut self.doubt) {
            self.refuse(draft, reason.clone(), desk);
        }
    }

    fn refuse(&mut self, draft: Draft, trouble: Trouble, desk: &mut Desk<'_>) {
        let spot = Spot {
            file: self.file,
            line: draft.row.line,
            at: 1,
        };
        desk.tell(spot, Some("time"), trouble, Effect::RowRefused);
        desk.refused += 1;
        self.refused += 1;
        self.done_with(draft);
    }

    /// Why a row that comes too early is refused.
    fn behind(&self, desk: &Desk<'_>) -> Trouble {
        let before = self
            .held
            .last()
            .map(|d| (d.row.time, d.row.line))
            .or(self.last);
        let (when, line) = before.unwrap_or_default();
        Trouble::new(
            "out-of-order",
            format!(
                "the row is earlier than the one on line {line} ({})",
                shown_time(when, desk)
            ),
            "put rows in the order of time, or correct the time; to change an earlier row, name its time in `corrects`",
        )
    }
}

/// Why a row that ran ahead is refused.
fn ahead(next: &Draft, desk: &Desk<'_>) -> Trouble {
    Trouble::new(
        "out-of-order",
        format!(
            "the row is later than those after it (line {} is {})",
            next.row.line,
            shown_time(next.row.time, desk)
        ),
        "correct the time of this row",
    )
}

fn time(rows: &[Draft]) -> Option<i64> {
    rows.first().map(|d| d.row.time)
}

/// A time as the site's clocks show it.
pub(super) fn shown_time(time: i64, desk: &Desk<'_>) -> String {
    Timestamp::from_second(time).map_or_else(
        |_| time.to_string(),
        |stamp| {
            let local = desk.site.timezone.to_datetime(stamp);
            local.strftime("%Y-%m-%d %H:%M").to_string()
        },
    )
}
