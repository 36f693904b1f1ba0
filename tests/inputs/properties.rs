//! For any input: no panic; and what is written out reads back the same.

use std::fmt::Write;

use super::words::{read, site, vocabulary};
use gillside::history::log::{self, Input};
use gillside::site::Site;
use proptest::prelude::*;

/// Pieces that logs are made of, so that chance gets past the head of the file.
const PIECES: &[&str] = &[
    "time",
    "ph",
    "temperature (F)",
    "sign",
    "note",
    "corrects",
    "place",
    ",",
    ",",
    ",",
    ";",
    "\t",
    "\n",
    "\n",
    "\r\n",
    "\"",
    "\"\"",
    "2026-03-02 07:30",
    "2026-10-25 01:30",
    "6.9",
    "7,1",
    "<0.05",
    "nan",
    "-1",
    "!fish-gasping",
    "\0",
    "{\"time\":",
    "}",
    "[",
    "null",
    "é",
];

proptest! {
    #![proptest_config(ProptestConfig::with_cases(512))]

    #[test]
    fn any_bytes_are_answered(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        let _ = read(bytes.clone());
        let mut with_head = b"time,ph,sign,note,corrects\n".to_vec();
        with_head.extend(bytes);
        if let Ok(log) = read(with_head) {
            prop_assert_eq!(log.rows_read, log.rows_used + log.rows_refused);
        }
    }

    #[test]
    fn any_pieces_are_answered(picks in prop::collection::vec(prop::sample::select(PIECES), 0..80)) {
        let text: String = picks.concat();
        let _ = read(text.clone());
        let _ = site(&text);
        if let Ok(log) = read(format!("time,ph,temperature (F),sign,note,place\n{text}")) {
            prop_assert_eq!(log.rows_read, log.rows_used + log.rows_refused);
            prop_assert!(log.rows.is_sorted_by_key(|r| r.time));
            prop_assert!(log.rows.iter().all(|r| r.values.iter().all(|(_, v)| v.amount.is_finite())));
        }
    }

    #[test]
    fn any_site_text_is_answered(text in "\\PC{0,200}") {
        let _ = site(&text);
    }
}

#[derive(Debug, Clone)]
struct Wanted {
    gap: i64,
    ph: Option<f64>,
    ammonia: Option<(f64, bool)>,
    place: Option<u8>,
    gasping: Option<bool>,
    note: String,
}

fn wanted() -> impl Strategy<Value = Wanted> {
    (
        0_i64..100_000,
        prop::option::of((250_u32..1100).prop_map(|v| f64::from(v) / 100.0)),
        prop::option::of((any::<bool>(), 1_u32..100_000))
            .prop_map(|v| v.map(|(below, n)| (f64::from(n) / 1000.0, below))),
        prop::option::of(0_u8..4),
        prop::option::of(any::<bool>()),
        "[ -~é\\n]{0,30}",
    )
        .prop_map(|(gap, ph, ammonia, place, gasping, note)| Wanted {
            gap,
            ph,
            ammonia,
            place,
            gasping,
            note,
        })
}

fn quoted(text: &str) -> String {
    format!("\"{}\"", text.replace('"', "\"\""))
}

/// Writes the rows as a table.
fn table(rows: &[Wanted], separator: char, comma: bool) -> String {
    let number = |v: f64| {
        let text = v.to_string();
        if comma { text.replace('.', ",") } else { text }
    };
    let mut text = [
        "time",
        "place",
        "ph",
        "total-ammonia (mg/L as N)",
        "sign",
        "note",
    ]
    .join(&separator.to_string());
    text.push('\n');
    let mut time = 1_700_000_000;
    for row in rows {
        time += row.gap;
        let stamp = jiff::Timestamp::from_second(time).unwrap_or_default();
        let place = row.place.map_or(String::new(), |p| format!("tank {p}"));
        let ammonia = row.ammonia.map_or(String::new(), |(v, below)| {
            if below { "<" } else { "" }.to_owned() + &number(v)
        });
        let sign = row.gasping.map_or("", |seen| {
            if seen {
                "fish-gasping"
            } else {
                "!fish-gasping"
            }
        });
        let ph = row.ph.map_or(String::new(), number);
        let s = separator;
        let _ = writeln!(
            text,
            "{stamp}{s}{place}{s}{ph}{s}{ammonia}{s}{sign}{s}{}",
            quoted(&row.note)
        );
    }
    text
}

/// Writes the rows as JSON lines.
fn lines(rows: &[Wanted]) -> String {
    let mut text = String::new();
    let mut time = 1_700_000_000;
    for row in rows {
        time += row.gap;
        let stamp = jiff::Timestamp::from_second(time)
            .unwrap_or_default()
            .to_string();
        let ammonia = row.ammonia.map(|(v, below)| {
            if below {
                serde_json::json!(format!("<{v}"))
            } else {
                serde_json::json!(v)
            }
        });
        let sign = row.gasping.map(|seen| {
            if seen {
                "fish-gasping"
            } else {
                "!fish-gasping"
            }
        });
        let object = serde_json::json!({
            "time": stamp, "place": row.place.map(|p| format!("tank {p}")), "ph": row.ph,
            "total-ammonia (mg/L as N)": ammonia, "sign": sign, "note": row.note,
        });
        let _ = writeln!(text, "{object}");
    }
    text
}

proptest! {
    #[test]
    fn what_is_written_reads_back(rows in prop::collection::vec(wanted(), 1..30)) {
        let words = vocabulary();
        let all = [table(&rows, ',', false), table(&rows, ';', true), table(&rows, '\t', true), lines(&rows)];
        let logs: Vec<log::Log> = all
            .into_iter()
            .map(|text| log::read(vec![Input::text("log", text)], &words, &Site::default(), None).unwrap_or_default())
            .collect();
        let ph = words.reading("ph").unwrap();
        let ammonia = words.reading("total-ammonia").unwrap();
        for log in &logs {
            prop_assert_eq!(&log.problems, &Vec::new());
            prop_assert_eq!(log.rows.len(), rows.len());
            let mut time = 1_700_000_000;
            for (row, wanted) in log.rows.iter().zip(&rows) {
                time += wanted.gap;
                prop_assert_eq!(row.time, time);
                prop_assert_eq!(row.value(ph).map(|v| v.amount), wanted.ph);
                prop_assert_eq!(row.value(ammonia).map(|v| (v.amount, v.below)), wanted.ammonia);
                let place = row.place.and_then(|p| log.places.get(usize::from(p.0)).cloned());
                prop_assert_eq!(place, wanted.place.map(|p| format!("tank {p}")));
                prop_assert_eq!(row.signs.first().map(|s| s.1), wanted.gasping);
                let note = wanted.note.trim();
                prop_assert_eq!(row.note.as_deref(), (!note.is_empty()).then_some(note));
            }
        }
    }
}
