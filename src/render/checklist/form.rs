//! The checklist as a form: CSV with a `value` column to fill in, which `gillside record --form` takes back.

use super::Sheet;
use super::words::{Words, unit};
use crate::shift::{Item, Kind};

/// The form: columns item, place, what, unit, compare, value.
pub fn form(sheet: &Sheet<'_>) -> String {
    let words = Words::of(sheet);
    let mut out = csv::WriterBuilder::new().from_writer(Vec::new());
    let mut row = |cells: [&str; 6]| {
        // Writing into memory can't fail.
        let _ = out.write_record(cells.map(plain));
    };
    row(["item", "place", "what", "unit", "compare", "value"]);
    row([
        "time",
        "",
        "when it was measured, such as 2026-03-04 07:30 (empty: now)",
        "",
        "",
        "",
    ]);
    row(["by", "", "your name", "", "", ""]);
    for stretch in &sheet.list.stretches {
        // One place of the kind is the place; of several the person says which.
        let place = if sheet.site.place.iter().any(|p| p.name == stretch.place) {
            stretch.place.as_str()
        } else {
            ""
        };
        for item in &stretch.items {
            let what = words.item(item);
            for blank in &item.blanks {
                let reading = &sheet.knowledge.vocabulary[blank.reading];
                let here = if reading.local { place } else { "" };
                let compare = words.compare(blank);
                row([&reading.id, here, &reading.name, unit(blank), &compare, ""]);
            }
            match &item.kind {
                Kind::Round(id) | Kind::Extra(id) if item.blanks.is_empty() => {
                    row([
                        &format!("round:{id}"),
                        &stretch.place,
                        &what,
                        "",
                        "x when done",
                        "",
                    ]);
                }
                _ => {
                    if let Some(sign) = sign(item, sheet) {
                        let answer = format!("{sign} if so, !{sign} if not");
                        row(["sign", "", &what, "", &answer, ""]);
                    }
                }
            }
        }
    }
    row(["sign", "", "anything else seen (ids between ;)", "", "", ""]);
    row([
        "event",
        "",
        "anything that happened (ids between ;)",
        "",
        "",
        "",
    ]);
    row(["note", "", "in your own words", "", "", ""]);
    let bytes = out.into_inner().unwrap_or_default();
    String::from_utf8(bytes).unwrap_or_default()
}

/// The sign an item asks for.
fn sign<'a>(item: &'a Item, sheet: &Sheet<'_>) -> Option<&'a str> {
    let id = match &item.kind {
        Kind::Check(_, check) => &check.verify.id,
        Kind::Tell(id, _) => id,
        _ => return None,
    };
    sheet.knowledge.vocabulary.sign(id)?;
    Some(id)
}

/// A cell that a spreadsheet does not take for a formula.
fn plain(text: &str) -> String {
    match text.chars().next() {
        Some('=' | '+' | '-' | '@') => format!("'{text}"),
        _ => text.to_owned(),
    }
}
