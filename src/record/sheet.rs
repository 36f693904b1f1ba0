//! The text of a log with rows added: CSV, or JSON lines.

use crate::fault::Fault;
use crate::site::Site;
use crate::site::column::{self, Meaning};
use crate::vocabulary::{ReadingId, Vocabulary};

/// What a cell belongs to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Key {
    Free(&'static str),
    Reading(ReadingId),
}

/// One cell to write: what it belongs to, the heading of its column where there is none yet, and its text.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Filled {
    pub key: Key,
    pub heading: String,
    pub text: String,
    /// A number: JSON writes it bare, and a file with decimal commas gets one.
    pub number: bool,
}

/// A row to write, before the row that begins on this line (from 1); `None`: at the end.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Row {
    pub cells: Vec<Filled>,
    pub before: Option<usize>,
}

/// Adds rows to a log's text. Every other row stays as it is, except that a new column gives it an empty cell.
pub(super) fn with_rows(
    text: &str,
    rows: &[Row],
    site: &Site,
    words: &Vocabulary,
) -> Result<String, Fault> {
    let plain = text.trim_start_matches('\u{feff}');
    if plain.trim_start().starts_with('{') {
        return Ok(json_lines(text, rows));
    }
    let mut sheet = Sheet::new(plain, site, words)?;
    for row in rows {
        for cell in &row.cells {
            if sheet.column(cell.key).is_none() {
                sheet.add_column(cell, site, words);
            }
        }
    }
    for row in rows {
        sheet.add_row(row);
    }
    let bom = text.get(..text.len() - plain.len()).unwrap_or_default();
    Ok(format!("{bom}{}", sheet.records.concat()))
}

/// A table as its records, each with its line end.
struct Sheet {
    separator: char,
    line_end: &'static str,
    decimal_comma: bool,
    /// What each column holds, where it is known.
    columns: Vec<Option<Key>>,
    records: Vec<String>,
    /// The line each record begins on.
    lines: Vec<usize>,
}

impl Sheet {
    fn new(text: &str, site: &Site, words: &Vocabulary) -> Result<Self, Fault> {
        let first = text
            .lines()
            .find(|l| !l.trim().is_empty())
            .unwrap_or_default();
        let named = |separator: char| -> Vec<Option<Key>> {
            cells(first, separator)
                .iter()
                .map(|name| key(name, site, words))
                .collect()
        };
        let separator = [',', ';', '\t']
            .into_iter()
            .filter(|s| named(*s).contains(&Some(Key::Free("time"))))
            .max_by_key(|s| cells(first, *s).len());
        let Some(separator) = separator.or(text.trim().is_empty().then_some(',')) else {
            return Err(Fault::whole(
                "no-time-column",
                "the first line of the log names no `time` column",
                "begin the log with a head such as `time,temperature,ph`",
            ));
        };
        let mut sheet = Self {
            separator,
            line_end: if text.contains("\r\n") { "\r\n" } else { "\n" },
            decimal_comma: separator != ',' && has_decimal_comma(text),
            columns: if text.trim().is_empty() {
                Vec::new()
            } else {
                named(separator)
            },
            records: Vec::new(),
            lines: Vec::new(),
        };
        sheet.split(text);
        Ok(sheet)
    }

    /// Cuts the text into records: a line end between quotes does not end one. A quote opens at the start of a cell.
    fn split(&mut self, text: &str) {
        let (mut start, mut line, mut begun) = (0, 1, 1);
        let (mut quoted, mut at_start) = (false, true);
        for (at, c) in text.char_indices() {
            match c {
                '"' if quoted => quoted = false,
                // A quote right behind a closing one is a quote in the cell, and opens it again.
                '"' if at_start || text.get(..at).is_some_and(|t| t.ends_with('"')) => {
                    quoted = true;
                }
                '\n' => {
                    line += 1;
                    if !quoted {
                        self.push(text.get(start..=at).unwrap_or_default(), begun);
                        start = at + 1;
                        begun = line;
                    }
                }
                _ => {}
            }
            at_start = !quoted && (c == self.separator || c == '\n' || (at_start && c == ' '));
        }
        let rest = text.get(start..).unwrap_or_default();
        if !rest.is_empty() {
            let ended = format!("{rest}{}", self.line_end);
            self.push(&ended, begun);
        }
    }

    fn push(&mut self, record: &str, line: usize) {
        self.records.push(record.to_owned());
        self.lines.push(line);
    }

    fn column(&self, key: Key) -> Option<usize> {
        self.columns.iter().position(|c| *c == Some(key))
    }

    /// The head gets a name, every row an empty cell.
    fn add_column(&mut self, cell: &Filled, site: &Site, words: &Vocabulary) {
        let head = self.records.iter().position(|r| !r.trim().is_empty());
        let heading = quoted(&cell.heading, self.separator);
        match head {
            None => {
                self.records = vec![format!("{heading}{}", self.line_end)];
                self.lines = vec![1];
            }
            Some(head) => {
                for (at, record) in self.records.iter_mut().enumerate() {
                    if record.trim_matches(['\r', '\n', ' ']).is_empty() {
                        continue;
                    }
                    let end = record.trim_end_matches(['\r', '\n']).len();
                    let added = if at == head {
                        format!("{}{heading}", self.separator)
                    } else {
                        self.separator.to_string()
                    };
                    record.insert_str(end, &added);
                }
            }
        }
        self.columns.push(key(&cell.heading, site, words));
    }

    fn add_row(&mut self, row: &Row) {
        let cells: Vec<String> = self
            .columns
            .iter()
            .map(|column| {
                let filled = row.cells.iter().find(|c| Some(c.key) == *column);
                filled.map_or_else(String::new, |c| {
                    let text = match c.number && self.decimal_comma {
                        true => c.text.replace('.', ","),
                        false => c.text.clone(),
                    };
                    quoted(&text, self.separator)
                })
            })
            .collect();
        let record = format!(
            "{}{}",
            cells.join(&self.separator.to_string()),
            self.line_end
        );
        let at = row
            .before
            .and_then(|line| self.lines.iter().position(|l| *l >= line))
            .unwrap_or(self.records.len());
        let line = self.lines.get(at).copied().unwrap_or(usize::MAX);
        self.records.insert(at, record);
        // Rows that are added before one line keep the order they are added in.
        self.lines.insert(at, line.saturating_sub(1));
    }
}

/// What a heading is for: the site's own names first.
fn key(name: &str, site: &Site, words: &Vocabulary) -> Option<Key> {
    let own = site.columns.iter().find(|h| h.heading == name);
    let meaning = match own {
        Some(own) => own.meaning.clone(),
        None => column::meaning(name, words).ok()?,
    };
    Some(match meaning {
        Meaning::Reading(found) => Key::Reading(found.reading),
        other => Key::Free(match other {
            Meaning::Place => "place",
            Meaning::By => "by",
            Meaning::Corrects => "corrects",
            Meaning::Sign => "sign",
            Meaning::Event => "event",
            Meaning::Note => "note",
            Meaning::Time | Meaning::Reading(_) => "time",
        }),
    })
}

/// The cells of a head line.
fn cells(line: &str, separator: char) -> Vec<String> {
    let mut record = csv::StringRecord::new();
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(u8::try_from(separator).unwrap_or(b','))
        .from_reader(line.as_bytes());
    match reader.read_record(&mut record) {
        Ok(true) => record.iter().map(|c| c.trim().to_owned()).collect(),
        _ => Vec::new(),
    }
}

fn quoted(text: &str, separator: char) -> String {
    if text.contains([separator, '"']) {
        format!("\"{}\"", text.replace('"', "\"\""))
    } else {
        text.to_owned()
    }
}

/// Whether cells hold numbers such as `7,1`.
fn has_decimal_comma(text: &str) -> bool {
    let bytes = text.as_bytes();
    bytes
        .windows(3)
        .any(|w| matches!(w, [a, b',', c] if a.is_ascii_digit() && c.is_ascii_digit()))
}

fn json_lines(text: &str, rows: &[Row]) -> String {
    let mut lines: Vec<String> = text.lines().map(str::to_owned).collect();
    // From the last one up, so that the lines before stay where they are.
    for row in rows.iter().rev() {
        let object: serde_json::Map<String, serde_json::Value> = row
            .cells
            .iter()
            .map(|cell| {
                let number = cell.text.parse::<serde_json::Number>().ok();
                let value = match number.filter(|_| cell.number) {
                    Some(number) => serde_json::Value::Number(number),
                    None => serde_json::Value::String(cell.text.clone()),
                };
                (cell.heading.clone(), value)
            })
            .collect();
        let at = row
            .before
            .map_or(lines.len(), |line| line.saturating_sub(1).min(lines.len()));
        lines.insert(at, serde_json::Value::Object(object).to_string());
    }
    let mut made = lines.join("\n");
    made.push('\n');
    made
}
