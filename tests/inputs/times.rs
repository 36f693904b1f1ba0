//! Time zones, clocks that change, and the order of rows.

use super::words::{good_site, problems, read, read_at, seconds, series};

fn log_of(times: &[&str]) -> String {
    let rows = times
        .iter()
        .enumerate()
        .map(|(i, time)| format!("{time},{}\n", 6.0 + 0.01 * i as f64));
    "time,ph\n".to_owned() + &rows.collect::<String>()
}

fn times(log: &gillside::history::log::Log) -> Vec<i64> {
    log.rows.iter().map(|r| r.time).collect()
}

#[test]
fn local_time_of_the_site() {
    let site = good_site("name = \"x\"\ntimezone = \"Europe/Lisbon\"\n");
    let log = read_at(
        &site,
        log_of(&[
            "2026-01-02 07:30",
            "2026-07-02 07:30",
            "2026-07-02T07:30:00Z",
        ]),
    )
    .unwrap();
    let expected = [
        "2026-01-02T07:30:00Z",
        "2026-07-02T06:30:00Z",
        "2026-07-02T07:30:00Z",
    ];
    assert_eq!(times(&log), expected.map(seconds));
}

#[test]
fn a_repeated_hour_keeps_rows_in_order() {
    let site = good_site("name = \"x\"\ntimezone = \"Europe/Lisbon\"\n");
    let shown = [
        "00:30", "01:00", "01:30", "01:30", "01:00", "01:30", "02:00",
    ]
    .map(|t| format!("2026-10-25 {t}"));
    let shown: Vec<&str> = shown.iter().map(String::as_str).collect();
    let log = read_at(&site, log_of(&shown)).unwrap();
    let expected = [
        "2026-10-24T23:30:00Z",
        "2026-10-25T00:00:00Z",
        "2026-10-25T00:30:00Z",
        "2026-10-25T00:30:00Z",
        "2026-10-25T01:00:00Z",
        "2026-10-25T01:30:00Z",
        "2026-10-25T02:00:00Z",
    ];
    assert_eq!(times(&log), expected.map(seconds));
    assert_eq!(problems(&log), Vec::<String>::new());
}

#[test]
fn a_skipped_hour_is_refused() {
    let site = good_site("name = \"x\"\ntimezone = \"Europe/Lisbon\"\n");
    let log = read_at(
        &site,
        log_of(&["2026-03-29 00:59", "2026-03-29 01:30", "2026-03-29 02:00"]),
    )
    .unwrap();
    assert_eq!(problems(&log), ["3:1 time skipped-hour"]);
    assert_eq!(
        times(&log),
        ["2026-03-29T00:59:00Z", "2026-03-29T01:00:00Z"].map(seconds)
    );
}

#[test]
fn a_row_that_comes_too_early_is_refused() {
    let log = read(log_of(&[
        "2026-03-02 07:30",
        "2026-03-04 07:30",
        "2026-03-03 07:30",
        "2026-03-05 07:30",
    ]))
    .unwrap();
    assert_eq!(problems(&log), ["4:1 time out-of-order"]);
    assert_eq!(series(&log, "ph"), [Some(6.0), Some(6.01), Some(6.03)]);
    // At the end of a file, too.
    let log = read(log_of(&[
        "2026-03-02 07:30",
        "2026-03-04 07:30",
        "2026-03-03 07:30",
    ]))
    .unwrap();
    assert_eq!(problems(&log), ["4:1 time out-of-order"]);
}

#[test]
fn a_row_that_ran_ahead_costs_only_itself() {
    let log = read(log_of(&[
        "2026-03-02 07:30",
        "2062-03-03 07:30",
        "2026-03-04 07:30",
        "2026-03-05 07:30",
    ]))
    .unwrap();
    assert_eq!(problems(&log), ["3:1 time out-of-order"]);
    assert_eq!(series(&log, "ph"), [Some(6.0), Some(6.02), Some(6.03)]);
    // Three tanks, all with the same wrong month.
    let log = read(log_of(&[
        "2026-03-02 07:30",
        "2026-12-03 07:30",
        "2026-12-03 07:30",
        "2026-03-04 07:30",
        "2026-03-04 07:30",
        "2026-03-05 07:30",
    ]))
    .unwrap();
    assert_eq!(
        problems(&log),
        ["3:1 time out-of-order", "4:1 time out-of-order"]
    );
    assert_eq!(log.rows_used, 4);
    assert_eq!(log.rows_read, 6);
}

#[test]
fn a_file_from_new_to_old_says_so() {
    let log = read(log_of(&[
        "2026-03-05 07:30",
        "2026-03-04 07:30",
        "2026-03-03 07:30",
        "2026-03-02 07:30",
    ]))
    .unwrap();
    assert_eq!(log.rows_used, 1);
    assert!(
        log.problems
            .iter()
            .any(|p| p.code == "runs-backward" && p.cure.contains("oldest"))
    );
}
