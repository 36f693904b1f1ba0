//! Lines joined to rows: a cell in quotes may hold separators and line ends. A row without quotes, which is nearly
//! every row, is the line itself and costs no copy.

use std::io::Result;

use super::limits;
use super::lines::{Line, Lines};
use super::problem::Trouble;
use crate::fault::shown;

/// The next row of a file.
pub(super) enum Record<'r> {
    /// A row: the line it begins on, its text, and whether cells of it may be in quotes.
    Row {
        line: usize,
        text: &'r str,
        quoted: bool,
    },
    /// A row that can't be read: line, place in it, reason.
    Bad(usize, usize, Trouble),
    /// The file has ended.
    End,
}

/// Reads row after row.
pub(super) struct Records {
    lines: Lines,
    separator: Option<u8>,
    joined: Vec<u8>,
}

impl Records {
    pub fn new(lines: Lines) -> Self {
        Self {
            lines,
            separator: None,
            joined: Vec::new(),
        }
    }

    /// From now on quotes mean something, and this separates cells. Until then a row is a line.
    pub fn quotes(&mut self, separator: u8) {
        self.separator = Some(separator);
    }

    /// Has the line last read, read again.
    pub fn again(&mut self) {
        let line = (Line::Here, self.lines.bytes().to_vec());
        self.lines.reread(vec![line]);
    }

    /// Reads the next row that is not blank.
    pub fn next(&mut self) -> Result<Record<'_>> {
        loop {
            match self.lines.next()? {
                Line::End => return Ok(Record::End),
                Line::TooLong => {
                    return Ok(Record::Bad(
                        self.lines.number(),
                        1,
                        too_long(self.lines.bytes()),
                    ));
                }
                Line::Here => {}
            }
            if !self.lines.bytes().trim_ascii().is_empty() {
                break;
            }
        }
        let line = self.lines.number();
        let separator = self
            .separator
            .filter(|_| self.lines.bytes().contains(&b'"'));
        let Some(separator) = separator else {
            return Ok(checked(line, self.lines.bytes(), false));
        };
        if self.join(separator)? {
            Ok(checked(line, &self.joined, true))
        } else {
            Ok(Record::Bad(line, 1, unclosed()))
        }
    }

    /// Joins lines until every quote is closed. When that doesn't happen, the lines behind the first are read again,
    /// so that one stray quote costs one row and not the rest of the file.
    fn join(&mut self, separator: u8) -> Result<bool> {
        self.joined.clear();
        self.joined.extend_from_slice(self.lines.bytes());
        let mut quotes = Quotes::default();
        quotes.pass(&self.joined, separator, |_| {});
        let mut taken: Vec<(Line, Vec<u8>)> = Vec::new();
        while quotes.open() {
            let line = self.lines.next()?;
            if line == Line::End {
                self.lines.reread(taken);
                return Ok(false);
            }
            taken.push((line, self.lines.bytes().to_vec()));
            let fits = self.joined.len() + self.lines.bytes().len() < limits::ROW;
            if line == Line::TooLong || !fits {
                self.lines.reread(taken);
                return Ok(false);
            }
            self.joined.push(b'\n');
            self.joined.extend_from_slice(self.lines.bytes());
            quotes.pass(self.lines.bytes(), separator, |_| {});
        }
        Ok(true)
    }
}

/// Where quotes stand while a row is passed byte by byte.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub(super) enum Quotes {
    /// A cell begins here.
    #[default]
    Start,
    /// In a cell without quotes, or behind the closing quote of one.
    Plain,
    /// Between quotes.
    Inside,
    /// At a quote between quotes: the closing one, or the first of two that stand for one.
    Maybe,
}

impl Quotes {
    /// Passes bytes; tells where cells begin behind a separator.
    pub fn pass(&mut self, bytes: &[u8], separator: u8, mut begins: impl FnMut(usize)) {
        for (at, byte) in bytes.iter().enumerate() {
            *self = match (*self, *byte) {
                (Self::Start | Self::Maybe, b'"') => Self::Inside,
                (Self::Inside, b'"') => Self::Maybe,
                (Self::Inside, _) => Self::Inside,
                (_, b) if b == separator => {
                    begins(at + 1);
                    Self::Start
                }
                _ => Self::Plain,
            };
        }
    }

    fn open(self) -> bool {
        self == Self::Inside
    }
}

fn checked(line: usize, bytes: &[u8], quoted: bool) -> Record<'_> {
    match std::str::from_utf8(bytes) {
        Ok(text) => match text.find('\0') {
            None => Record::Row { line, text, quoted },
            Some(at) => Record::Bad(line, characters(text, at), nul()),
        },
        Err(_)
            if line == 1 && (bytes.starts_with(b"\xff\xfe") || bytes.starts_with(b"\xfe\xff")) =>
        {
            Record::Bad(line, 1, utf16())
        }
        Err(error) => {
            let good = bytes.get(..error.valid_up_to()).unwrap_or_default();
            let at = String::from_utf8_lossy(good).chars().count() + 1;
            Record::Bad(line, at, not_utf8())
        }
    }
}

/// The place of a byte in characters, from 1.
pub(super) fn characters(text: &str, byte: usize) -> usize {
    text.char_indices().take_while(|(at, _)| *at < byte).count() + 1
}

fn nul() -> Trouble {
    Trouble::new(
        "nul-byte",
        "there is a NUL byte here, which no text has",
        "the file may be damaged, or not a text; save it again as UTF-8 text",
    )
}

fn not_utf8() -> Trouble {
    Trouble::new(
        "not-utf8",
        "the text is not UTF-8 here",
        "save the file as UTF-8",
    )
}

fn utf16() -> Trouble {
    Trouble::new(
        "not-utf8",
        "the file is UTF-16 text",
        "save the file as UTF-8",
    )
}

fn too_long(beginning: &[u8]) -> Trouble {
    let start: String = String::from_utf8_lossy(beginning)
        .chars()
        .take(20)
        .collect();
    Trouble::new(
        "row-too-long",
        format!(
            "the row that begins `{}` has more than {} bytes",
            shown(&start),
            limits::ROW
        ),
        "check that line ends are not lost; shorten the row",
    )
}

fn unclosed() -> Trouble {
    Trouble::new(
        "open-quote",
        "a quote opens here and never closes",
        "close the quote, or write two of them for one that is meant",
    )
}
