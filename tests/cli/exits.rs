//! Exit statuses and complaints.

use std::io::Read;

use super::harness::{demo, demo_review, gillside};

const LOG: &str = "time,temperature\n2026-03-02 07:30,22.1\n";

#[test]
fn a_missing_log_is_a_bad_input() {
    gillside(["review", "nowhere.csv"])
        .status(3)
        .no_out()
        .err(
            "error: the log `nowhere.csv` can't be opened: there is no such file [unreadable]\n  fix: check the path\n",
        )
        .check();
}

#[test]
fn a_site_file_that_can_t_be_understood_is_shown_where() {
    gillside(["review", "log.csv"])
        .file("site.toml", "name = \"x\"\nspecies = \"nile-tilapai\"\n")
        .file("log.csv", LOG)
        .status(3)
        .no_out()
        .err(
            "\
error: no species is called `nile-tilapai` [unknown-id]
  at site.toml:2:11
  2 | species = \"nile-tilapai\"
    |           ^^^^^^^^^^^^^^
  fix: did you mean `nile-tilapia`?
",
        )
        .check();
}

#[test]
fn no_log_at_all_is_wrong_usage() {
    gillside(["review"])
        .status(2)
        .no_out()
        .err_has([
            "error: no log is named [no-log]",
            "fix: name one, such as `gillside review log.csv`",
        ])
        .check();
}

#[test]
fn an_option_that_is_mistyped_is_wrong_usage_with_the_right_one() {
    gillside(["review", "log.csv", "--strct"])
        .status(2)
        .no_out()
        .err_has(["unexpected argument '--strct'", "'--strict'"])
        .check();
    gillside([])
        .status(2)
        .no_out()
        .err_has(["Usage: gillside"])
        .check();
    gillside(["reviwe"])
        .status(2)
        .no_out()
        .err_has(["'review'"])
        .check();
    gillside(["review", "log.csv", "--clock", "noon"])
        .file("log.csv", LOG)
        .status(2)
        .no_out()
        .err_has([
            "error: `--clock`: `noon` is not a time [bad-time]",
            "fix: write `YYYY-MM-DD HH:MM`",
        ])
        .check();
    gillside(["review", "log.csv", "--as-of", "2026-02-30 07:00"])
        .file("log.csv", LOG)
        .status(2)
        .no_out()
        .err_has(["`--as-of`: `2026-02-30 07:00` is no time that there is"])
        .check();
    demo_review(["--format", "html"])
        .status(2)
        .no_out()
        .err_has([
            "`review` can't be written as html",
            "fix: use --format text or json or markdown",
        ])
        .check();
}

#[test]
fn help_and_version_are_answers() {
    gillside(["--help"])
        .out_has(["review", "Exit status: 0 done"])
        .check();
    gillside(["--version"])
        .out(concat!("gillside ", env!("CARGO_PKG_VERSION"), "\n"))
        .check();
}

#[test]
fn an_alert_is_status_10_and_the_page_is_still_there() {
    demo_review(["--alert-at", "act-today"])
        .status(10)
        .out_has(["ACT TODAY"])
        .check();
    demo_review(["--alert-at", "watch", "--format", "json"])
        .status(10)
        .out_has(["\"act-today\""])
        .check();
    demo_review(["--alert-at", "act-now"])
        .out_has(["ACT TODAY"])
        .check();
}

#[test]
fn house_rules_that_can_t_be_used_are_status_4() {
    demo_review(["--house-rules", "rules"])
        .file("rules/mine.toml", "[[cause]]\nid = \"mine\"\n")
        .status(4)
        .no_out()
        .err_has(["rules/mine.toml:1:1", "fix:"])
        .check();
    demo_review(["--house-rules", "nowhere"])
        .status(4)
        .no_out()
        .err_has(["cannot read `nowhere`", "fix: check the folder"])
        .check();
}

#[test]
fn a_closed_pipe_is_success() {
    let log = format!("time,temperature\n{}", replayed());
    let run = gillside(["review", "log.csv", "--replay", "--format", "json"]).file("log.csv", log);
    let mut child = run.command().spawn().unwrap();
    drop(child.stdin.take());
    let mut out = child.stdout.take().unwrap();
    let mut first = [0; 10];
    out.read_exact(&mut first).unwrap();
    drop(out);
    let mut err = String::new();
    child
        .stderr
        .take()
        .unwrap()
        .read_to_string(&mut err)
        .unwrap();
    assert_eq!((child.wait().unwrap().code(), err.as_str()), (Some(0), ""));
}

/// Rows whose verdict changes often enough to fill a pipe.
fn replayed() -> String {
    let mut rows = String::new();
    for day in 0..28 {
        for hour in 0..24 {
            let cold = if hour < 12 { 25 } else { 10 };
            rows.push_str(&format!("2026-02-{:02} {hour:02}:00,{cold}\n", day + 1));
        }
    }
    rows
}

#[test]
fn color_is_asked_for_or_not_there() {
    let plain = demo_review([]).check().out;
    assert!(!plain.contains('\u{1b}'));
    let colored = demo_review(["--color", "always"]).check().out;
    assert!(colored.contains('\u{1b}'));
    assert_eq!(
        console::strip_ansi_codes(&colored),
        plain,
        "color adds nothing but color"
    );
    demo_review(["--color", "always"])
        .env("NO_COLOR", "1")
        .out(&colored)
        .check();
    gillside(["review", &demo("nothing.csv"), "--color", "always"])
        .status(3)
        .err_has(["\u{1b}[31m"])
        .check();
}
