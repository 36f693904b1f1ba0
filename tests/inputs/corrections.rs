//! Rows that correct earlier rows.

use super::words::{problems, read, seconds, series};
use gillside::history::log;

const LOG: &str = "time,place,corrects,ph,temperature,by,note\n\
    2026-03-02 07:30,,,6.9,22,Ana,\n\
    2026-03-02 07:30,tank 1,,71,23,Ana,first look\n\
    2026-03-03 07:30,tank 1,,7.0,22,Ana,\n\
    2026-03-03 09:00,tank 1,2026-03-02 07:30,7.1,,Rui,decimal point\n";

#[test]
fn a_correction_replaces_what_it_gives_and_keeps_the_original() {
    let log = read(LOG).unwrap();
    assert_eq!(problems(&log), ["3:26 ph implausible"]);
    assert_eq!((log.rows_used, log.rows_refused, log.rows.len()), (4, 0, 3));
    assert_eq!(series(&log, "ph"), [Some(6.9), Some(7.1), Some(7.0)]);
    assert_eq!(
        series(&log, "temperature"),
        [Some(22.0), Some(23.0), Some(22.0)]
    );
    assert!(log.rows[1].odd.is_empty());
    assert_eq!(log.rows[1].note.as_deref(), Some("decimal point"));
    let corrected = &log.corrected[0];
    assert_eq!(corrected.original.note.as_deref(), Some("first look"));
    assert_eq!(corrected.original.odd.len(), 1);
    assert_eq!(corrected.at, seconds("2026-03-03T09:00:00Z"));
    assert_eq!((corrected.by.as_deref(), corrected.line), (Some("Rui"), 5));
}

#[test]
fn before_it_was_made_the_original_stands() {
    let input = vec![log::Input::text("log.csv", LOG)];
    let end = seconds("2026-03-03T08:00:00Z");
    let log = log::read(
        input,
        &super::words::vocabulary(),
        &Default::default(),
        Some(end),
    )
    .unwrap();
    assert_eq!(series(&log, "ph"), [Some(6.9), None, Some(7.0)]);
    assert_eq!((log.rows_read, log.rows_used), (3, 3));
    assert!(log.corrected.is_empty());
}

#[test]
fn a_correction_can_be_corrected() {
    let more = LOG.to_owned()
        + "2026-03-03 10:00,tank 1,2026-03-03 09:00,7.2,,Rui,\n2026-03-03 11:00,tank 1,2026-03-02 07:30,7.3,,Rui,\n";
    let log = read(more).unwrap();
    assert_eq!(series(&log, "ph"), [Some(6.9), Some(7.3), Some(7.0)]);
    assert_eq!(log.corrected.len(), 3);
}

#[test]
fn nothing_to_correct_and_correcting_the_future() {
    let more = LOG.to_owned()
        + "2026-03-03 10:00,tank 2,2026-03-02 07:30,7.2,,,\n2026-03-03 11:00,,2026-03-03 11:00,7.3,,,\n";
    let log = read(more).unwrap();
    assert_eq!(
        problems(&log),
        [
            "3:26 ph implausible",
            "6:1 corrects nothing-to-correct",
            "7:1 corrects corrects-later"
        ]
    );
    assert_eq!((log.rows_read, log.rows_used, log.rows_refused), (6, 4, 2));
}
