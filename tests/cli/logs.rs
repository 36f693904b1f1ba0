//! Where logs come from, and how a review walks through them.

use super::harness::{demo, demo_review, gillside};

const ROWS: &str = "time,temperature,ph,dissolved-oxygen,total-ammonia,nitrite\n\
                    2026-03-02 07:30,24.0,6.9,6.8,0.2,0.05\n\
                    2026-03-03 07:30,24.1,6.9,6.7,0.2,0.05\n";
const BROKEN: &str = "time,ph\n2026-03-02 07:30,6.9\n2026-03-02 08:30,low\n";

#[test]
fn standard_input_and_json_lines_are_logs() {
    gillside(["review", "-", "--clock", "2026-03-03 08:00"])
        .stdin(ROWS)
        .out_has(["2 of 2 rows read and used"])
        .check();
    let lines = "{\"time\": \"2026-03-02T07:30:00Z\", \"ph\": 6.9}\n{\"time\": \"2026-03-03T07:30:00Z\", \"ph\": 6.8}\n";
    gillside(["review", "-", "--clock", "2026-03-03 08:00"])
        .stdin(lines)
        .out_has(["2 of 2 rows read and used"])
        .check();
    gillside(["review", "-", "-"])
        .status(3)
        .no_out()
        .err_has(["standard input is named twice"])
        .check();
}

#[test]
fn two_logs_are_one_farm() {
    gillside(["review", "a.csv", "b.csv", "--clock", "2026-03-03 08:00"])
        .file("a.csv", ROWS)
        .file("b.csv", "time,alkalinity\n2026-03-02 12:00,40\n")
        .out_has(["3 of 3 rows read and used"])
        .check();
}

#[test]
fn what_can_t_be_read_is_told_and_strict_refuses_it() {
    gillside(["review", "log.csv"])
        .file("log.csv", BROKEN)
        .out_has([
            "1 of 2 rows read and used, 1 refused.",
            "- line 3, column `ph`: `low`",
        ])
        .check();
    gillside(["review", "log.csv", "--strict"])
        .file("log.csv", BROKEN)
        .status(3)
        .no_out()
        .err_has(["error: column `ph`: `low`", "at log.csv:3:18", "fix:"])
        .check();
    gillside(["review", "log.csv", "--strict"])
        .file("log.csv", ROWS)
        .out_has(["2 of 2"])
        .check();
}

#[test]
fn no_row_that_can_be_used_is_status_3() {
    gillside(["review", "log.csv"])
        .file("log.csv", "time,ph\nyesterday,6.9\n")
        .status(3)
        .no_out()
        .err_has(["at log.csv:2:1", "no row of the log can be used"])
        .check();
    gillside(["review", "log.csv", "--as-of", "2020-01-01 00:00"])
        .file("log.csv", ROWS)
        .status(3)
        .no_out()
        .err_has(["no row at or before the time of `--as-of`"])
        .check();
}

#[test]
fn a_site_file_here_is_used_without_being_named() {
    gillside(["review", "--clock", "2026-03-03 08:00"])
        .file("site.toml", "name = \"Here\"\nlog = \"log.csv\"\n")
        .file("log.csv", ROWS)
        .out_has([
            "Here, as of Mar 3 2026, 07:30 (UTC).",
            "site file site.toml",
        ])
        .check();
}

#[test]
fn a_replay_writes_a_line_for_every_change_and_the_last_row() {
    let came = demo_review(["--replay"]).check();
    let lines: Vec<&str> = came.out.lines().collect();
    assert_eq!(
        lines.first(),
        Some(&"2026-02-02 07:30  steady     nothing wrong")
    );
    assert!(
        lines
            .last()
            .is_some_and(|l| l.starts_with("2026-03-04 07:30  act-today  very likely: Cold water"))
    );
    let came = demo_review(["--replay", "--format", "json"]).check();
    let objects: Vec<serde_json::Value> = came
        .out
        .lines()
        .map(|l| serde_json::from_str(l).unwrap())
        .collect();
    assert_eq!(objects.len(), lines.len());
    assert_eq!(objects.last().unwrap()["as_of"], "2026-03-04T07:30:00Z");
    assert_eq!(objects.last().unwrap()["verdict"], "act-today");
}

#[test]
fn a_replay_s_last_row_decides_the_alert() {
    demo_review(["--replay", "--alert-at", "act-today"])
        .status(10)
        .check();
    let healthy = [
        "--replay",
        "--alert-at",
        "act-today",
        "--as-of",
        "2026-03-01 17:00",
    ];
    let came = gillside(["review", "--site", &demo("site.toml")])
        .and(healthy)
        .check();
    assert!(
        came.out
            .lines()
            .all(|l| l.contains("steady") || l.contains("watch")),
        "{}",
        came.out
    );
}

#[test]
fn the_last_row_of_a_replay_is_the_review_of_that_moment() {
    let replay = demo_review(["--replay", "--format", "json"]).check().out;
    let review = demo_review(["--format", "json"]).check().out;
    let last: serde_json::Value = serde_json::from_str(replay.lines().last().unwrap()).unwrap();
    let mut whole: serde_json::Value = serde_json::from_str(&review).unwrap();
    // Fifteen minutes later nothing more is due.
    assert_eq!(last["missing"], whole["missing"]);
    whole["missing"] = last["missing"].clone();
    assert_eq!(last, whole);
}
