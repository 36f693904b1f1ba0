//! Several logs of one site, read as one.

use super::words::{seconds, vocabulary};
use gillside::history::log::{self, Input, Row, Stream};
use gillside::site::Site;

fn inputs() -> Vec<Input> {
    vec![
        Input::text(
            "a.csv",
            "time,ph\n2026-03-02 07:30,6.9\n2026-03-04 07:30,7.0\n2026-03-06 07:30,7.1\n",
        ),
        Input::text(
            "b.jsonl",
            "{\"time\":\"2026-03-03 07:30\",\"temperature\":22}\n{\"time\":\"2026-03-04 07:30\",\"temperature\":23}\n",
        ),
    ]
}

#[test]
fn rows_come_in_the_order_of_time() {
    let log = log::read(inputs(), &vocabulary(), &Site::default(), None).unwrap();
    let order: Vec<(u16, usize)> = log.rows.iter().map(|r| (r.file, r.line)).collect();
    assert_eq!(order, [(0, 2), (1, 1), (0, 3), (1, 2), (0, 4)]);
    assert_eq!(log.files, ["a.csv", "b.jsonl"]);
    assert_eq!(log.columns[1].readings.len(), 1);
}

#[test]
fn later_rows_are_left_out() {
    let end = Some(seconds("2026-03-04T07:30:00Z"));
    let log = log::read(inputs(), &vocabulary(), &Site::default(), end).unwrap();
    assert_eq!((log.rows.len(), log.rows_read, log.rows_used), (4, 4, 4));
}

#[test]
fn the_stream_gives_the_same_rows() {
    let (words, site) = (vocabulary(), Site::default());
    let log = log::read(inputs(), &words, &site, None).unwrap();
    let mut stream = Stream::open(inputs(), &words, &site, None).unwrap();
    let mut row = Row::default();
    let mut rows = Vec::new();
    while stream.next_row(&mut row).unwrap() {
        rows.push(row.clone());
    }
    assert_eq!(rows, log.rows);
    assert_eq!(stream.finish().rows_used, 5);
}

#[test]
fn all_unusable_logs_are_told_at_once() {
    let inputs = vec![
        Input::named("/nowhere/log.csv"),
        Input::text("a.csv", ""),
        Input::text("b.csv", "ph\n7\n"),
    ];
    let faults = log::read(inputs, &vocabulary(), &Site::default(), None).unwrap_err();
    let codes: Vec<&str> = faults.iter().map(|f| f.code).collect();
    assert_eq!(codes, ["unreadable", "empty-file", "no-time-column"]);
    let twice = vec![Input::named("-"), Input::named("-")];
    let faults = log::read(twice, &vocabulary(), &Site::default(), None).unwrap_err();
    assert_eq!(faults[0].code, "stdin-twice");
}

#[test]
fn files_are_read_from_the_disk() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("log.csv");
    std::fs::write(&path, "time,ph\n2026-03-02 07:30,6.9\n").unwrap();
    let log = log::read(
        vec![Input::Path(path)],
        &vocabulary(),
        &Site::default(),
        None,
    )
    .unwrap();
    assert_eq!(log.rows_used, 1);
    let faults = log::read(
        vec![Input::Path(folder.path().into())],
        &vocabulary(),
        &Site::default(),
        None,
    )
    .unwrap_err();
    assert!(faults[0].reason.contains("is a folder"), "{faults:?}");
}
