//! Every calculation of `water` against published tables, standards, worked examples and reference libraries.
//!
//! The rows are data (`tests/reference/*.csv`): a calculation, its inputs, the expected value with its unit and an absolute
//! tolerance, the source, and how far it can be trusted. `tests/reference/recompute.py` recomputes the rows that come from
//! a library.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};

use gillside::water::calculations::{self, SiteValues};

#[path = "reference/properties.rs"]
mod properties;

/// The files and the rows each must at least hold: a row that gets lost is noticed.
const FILES: &[(&str, usize)] = &[
    ("ammonia.csv", 146),
    ("carbon-dioxide.csv", 74),
    ("constants.csv", 41),
    ("criteria.csv", 28),
    ("exchange.csv", 16),
    ("feed.csv", 16),
    ("nitrification.csv", 19),
    ("nitrite.csv", 13),
    ("oxygen.csv", 67),
    ("ph-and-doses.csv", 56),
    ("poisons.csv", 18),
    ("units.csv", 8),
    ("worked-examples.csv", 60),
];

/// How far a row can be trusted.
const STATUSES: &[&str] = &["published", "common-practice", "from-memory", "computed"];

/// Begins the note of a row whose printed value is known to be wrong.
const FAULT: &str = "TABLE FAULT";

struct Row {
    place: String,
    quantity: String,
    inputs: Vec<String>,
    expected: f64,
    unit: String,
    tolerance: f64,
    source: String,
    status: String,
    note: String,
}

impl Row {
    /// How far the calculation is from the expected value.
    fn off(&self) -> f64 {
        let answer = calculations::evaluate(&self.quantity, &self.inputs, &SiteValues::default());
        let answer = answer.unwrap_or_else(|e| panic!("{}: {e}", self.place));
        assert_eq!(answer.calculation.unit, self.unit, "{}: unit", self.place);
        (answer.value - self.expected).abs()
    }
}

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference")
}

fn rows_of(file: &str) -> Vec<Row> {
    let mut reader = csv::Reader::from_path(folder().join(file)).unwrap();
    let columns: Vec<String> = reader
        .headers()
        .unwrap()
        .iter()
        .map(str::to_owned)
        .collect();
    let expected_columns = "quantity inputs expected unit tolerance source status note";
    assert_eq!(columns.join(" "), expected_columns, "{file}");
    let records = reader.records().map(|r| r.unwrap());
    records
        .enumerate()
        .map(|(at, record)| {
            let place = format!(
                "{file}, row {}: {}",
                at + 2,
                record.iter().collect::<Vec<_>>().join(" | ")
            );
            let number =
                |column: usize| record[column].parse().unwrap_or_else(|_| panic!("{place}"));
            Row {
                quantity: record[0].to_owned(),
                inputs: record[1]
                    .split(';')
                    .filter(|s| !s.is_empty())
                    .map(str::to_owned)
                    .collect(),
                expected: number(2),
                unit: record[3].to_owned(),
                tolerance: number(4),
                source: record[5].to_owned(),
                status: record[6].to_owned(),
                note: record[7].to_owned(),
                place: place.clone(),
            }
        })
        .collect()
}

fn rows() -> Vec<Row> {
    FILES.iter().flat_map(|(file, _)| rows_of(file)).collect()
}

#[test]
fn every_row_agrees() {
    let wrong: Vec<String> = rows()
        .iter()
        .filter(|row| row.off() > row.tolerance)
        .map(|row| format!("off by {:.4e}: {}", row.off(), row.place))
        .collect();
    assert!(
        wrong.is_empty(),
        "{} rows disagree:\n{}",
        wrong.len(),
        wrong.join("\n")
    );
}

#[test]
fn every_row_says_where_it_comes_from_and_how_far_it_is_trusted() {
    for row in rows() {
        assert!(STATUSES.contains(&row.status.as_str()), "{}", row.place);
        assert!(!row.source.trim().is_empty(), "{}", row.place);
        assert!(row.tolerance > 0.0, "{}", row.place);
    }
}

#[test]
fn every_calculation_has_a_row() {
    let checked: BTreeSet<String> = rows().into_iter().map(|row| row.quantity).collect();
    let bare: Vec<_> = calculations::all()
        .map(|c| c.name)
        .filter(|name| !checked.contains(*name))
        .collect();
    assert!(bare.is_empty(), "no row checks: {}", bare.join(", "));
}

#[test]
fn the_table_of_files_is_the_folder() {
    let named: BTreeSet<String> = FILES.iter().map(|(file, _)| (*file).to_owned()).collect();
    let there: BTreeSet<String> = std::fs::read_dir(folder())
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .filter(|name| name.ends_with(".csv"))
        .collect();
    assert_eq!(named, there);
    for (file, least) in FILES {
        let count = rows_of(file).len();
        assert!(count >= *least, "{file} holds {count} rows, not {least}");
    }
}

/// A widened tolerance must be needed: a row marked as a misprint that agrees at the ordinary tolerance of its table is
/// marked wrongly.
#[test]
fn every_table_fault_is_one() {
    let rows = rows();
    let mut ordinary: BTreeMap<(&str, &str), f64> = BTreeMap::new();
    for row in rows.iter().filter(|r| !r.note.starts_with(FAULT)) {
        let least = ordinary
            .entry((&row.quantity, &row.source))
            .or_insert(f64::INFINITY);
        *least = least.min(row.tolerance);
    }
    let faults: Vec<&Row> = rows.iter().filter(|r| r.note.starts_with(FAULT)).collect();
    assert_eq!(faults.len(), 8);
    for row in faults {
        let tolerance = ordinary[&(row.quantity.as_str(), row.source.as_str())];
        assert!(row.off() > tolerance, "no fault: {}", row.place);
    }
}

/// Names answer in both spellings, and every calculation explains itself.
#[test]
fn every_calculation_explains_itself() {
    let mut seen = BTreeSet::new();
    for c in calculations::all() {
        assert!(seen.insert(c.name), "{} is there twice", c.name);
        assert!(
            !c.help.is_empty() && c.help.len() <= 76,
            "{}: {}",
            c.name,
            c.help
        );
        assert!(!c.source.is_empty(), "{} names no source", c.name);
        assert_eq!(
            calculations::find(&c.name.replace('-', "_")).unwrap().name,
            c.name
        );
        for key in c.keys {
            assert!(!key.help.is_empty(), "{} {}", c.name, key.name);
            for rival in key.rivals {
                assert!(
                    c.keys.iter().any(|k| k.name == *rival),
                    "{} {rival}",
                    c.name
                );
            }
        }
    }
}
