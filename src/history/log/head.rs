//! The head of a table: the separator and the columns. What makes a file unusable is found here.

use super::columns::{Column, Holds};
use super::desk::{Desk, Spot};
use super::limits;
use super::problem::{Effect, Trouble};
use super::records::{Quotes, characters};
use super::table::Table;
use crate::fault::{Fault, Place, shown};
use crate::site::column::{NO_NEAR, NotAColumn};

impl From<NotAColumn> for Trouble {
    fn from(wrong: NotAColumn) -> Self {
        let cure = if wrong.cure == NO_NEAR {
            format!("{NO_NEAR}, or say what it is under `[columns]` in the site file")
        } else {
            wrong.cure
        };
        Self {
            code: wrong.code,
            reason: wrong.reason,
            cure,
        }
    }
}

/// A fault in a line of a log.
pub(super) fn fault(
    file: &str,
    line: usize,
    text: &str,
    at: usize,
    width: usize,
    trouble: Trouble,
) -> Fault {
    let excerpt: String = text.chars().take(400).collect();
    Fault {
        place: Some(Place {
            file: file.to_owned(),
            line,
            column: at,
            excerpt: excerpt.lines().next().unwrap_or_default().to_owned(),
            width: width.max(1),
        }),
        code: trouble.code,
        reason: trouble.reason,
        cure: trouble.cure,
    }
}

/// The separator of a head line: the one that makes a `time` column, else the most frequent outside of quotes.
pub(super) fn separator(line: &str, desk: &Desk<'_>) -> u8 {
    let mut counted: Vec<(usize, u8)> = [b',', b';', b'\t']
        .into_iter()
        .map(|separator| {
            let mut count = 0;
            Quotes::default().pass(line.as_bytes(), separator, |_| count += 1);
            (count, separator)
        })
        .collect();
    // Stable: a comma wins a draw.
    counted.sort_by_key(|(count, _)| std::cmp::Reverse(*count));
    let has_time = |separator: u8| {
        let cells = Table::new(separator).cells(line, line.contains('"'));
        cells.iter().any(|name| {
            matches!(Column::of(name, desk.site, desk.vocabulary), Ok(column) if matches!(column.holds, Holds::Time))
        })
    };
    let found = counted.iter().find(|(_, separator)| has_time(*separator));
    found
        .or(counted.first())
        .map_or(b',', |(_, separator)| *separator)
}

/// Reads the head of a table.
pub(super) fn columns(
    file: u16,
    line: usize,
    text: &str,
    quoted: bool,
    table: &mut Table,
    desk: &mut Desk<'_>,
) -> Result<Vec<Column>, Vec<Fault>> {
    let name_of_file = desk.file(file).to_owned();
    let names = table.cells(text, quoted);
    let mut faults = Vec::new();
    let mut wrong = |at: usize, width: usize, trouble: Trouble| {
        faults.push(fault(&name_of_file, line, text, at, width, trouble));
    };
    if text.contains('\r') {
        let trouble = Trouble::new(
            "bare-carriage-returns",
            "the lines of the file end in bare carriage returns",
            "save the file with ordinary line ends",
        );
        wrong(1, 1, trouble);
        return Err(faults);
    }
    if names.len() > limits::COLUMNS {
        let reason = format!(
            "the head has {} columns, more than {}",
            names.len(),
            limits::COLUMNS
        );
        wrong(
            1,
            1,
            Trouble::new(
                "too-many-columns",
                reason,
                "take out the columns that are not needed",
            ),
        );
        return Err(faults);
    }
    let mut starts = vec![0];
    Quotes::default().pass(text.as_bytes(), table.separator, |at| starts.push(at));
    let mut columns: Vec<Column> = Vec::new();
    for (name, start) in names.iter().zip(starts) {
        let at = characters(text, start);
        let width = name.chars().count();
        let spot = Spot { file, line, at };
        if name.is_empty() {
            let trouble = Trouble::new(
                "unnamed-column",
                "the column has no name, so it is not used",
                "name it, or take it out",
            );
            desk.tell(spot, None, trouble, Effect::ColumnSkipped);
            columns.push(Column::unused(name));
            continue;
        }
        let column = match Column::of(name, desk.site, desk.vocabulary) {
            Ok(column) => column,
            Err(not) if not.code == "unknown-unit" => {
                let mut trouble = Trouble::from(not);
                trouble.reason = format!("column `{}`: {}", shown(name), trouble.reason);
                wrong(at, width, trouble);
                Column::unused(name)
            }
            Err(not) => {
                desk.tell(spot, Some(name), not.into(), Effect::ColumnSkipped);
                Column::unused(name)
            }
        };
        if let Some(before) = columns.iter().find(|c| column.same_as(c)) {
            let reason = format!(
                "the columns `{}` and `{}` are the same",
                shown(&before.name),
                shown(name)
            );
            wrong(
                at,
                width,
                Trouble::new(
                    "duplicate-column",
                    reason,
                    "take one of them out, or log two probes as two places",
                ),
            );
            columns.push(Column::unused(name));
            continue;
        }
        match column.obstacle(desk.site) {
            Some(trouble) => {
                desk.tell(spot, Some(name), trouble, Effect::ColumnSkipped);
                columns.push(Column::unused(name));
            }
            None => {
                desk.column(spot, &column);
                columns.push(column);
            }
        }
    }
    if !columns.iter().any(|c| matches!(c.holds, Holds::Time)) {
        let trouble = Trouble::new(
            "no-time-column",
            "the first line names no `time` column",
            "begin the file with a head such as `time,temperature,ph`",
        );
        wrong(1, 1, trouble);
    }
    if faults.is_empty() {
        Ok(columns)
    } else {
        Err(faults)
    }
}
