//! Walks at a real terminal, driven through a pseudo-terminal.

#![cfg(unix)]
#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::path::Path;
use std::process::Command;

use rexpect::session::{PtySession, spawn_command};

const SITE: &str = r#"
name = "Hillfoot greenhouse 2"
species = "nile-tilapia"
volume_l = 12000
biomass_kg = 320
"#;

fn farm() -> tempfile::TempDir {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(folder.path().join("site.toml"), SITE).unwrap();
    folder
}

fn walk(folder: &Path, columns: usize, more: &[&str]) -> PtySession {
    let mut command = Command::new(env!("CARGO_BIN_EXE_gillside"));
    command
        .args(["walk", "--clock", "2026-03-04T07:30:00Z"])
        .args(more)
        .current_dir(folder)
        .env("COLUMNS", columns.to_string())
        .env("TERM", "xterm")
        .env("NO_COLOR", "1");
    spawn_command(command, Some(20_000)).unwrap()
}

fn says(session: &mut PtySession, text: &str) -> String {
    session
        .exp_string(text)
        .unwrap_or_else(|e| panic!("waited for `{text}`: {e}"))
}

/// Waits until an answer is waited for, and types one. The pseudo-terminal does not echo.
fn answer(session: &mut PtySession, text: &str) {
    says(session, "Answer: ");
    session.send(&format!("{text}\r")).unwrap();
    session.flush().unwrap();
}

/// The same where the line can be edited: it is written once more when it is done.
fn edit(session: &mut PtySession, text: &str) {
    answer(session, text);
    says(session, &format!("Answer: {text}"));
}

/// How the program ended, as the system tells it: `Exited(Pid(7), 0)`. Its type is not the test's to name.
fn ended(session: &mut PtySession) -> i32 {
    session.exp_eof().unwrap();
    let how = format!("{:?}", session.process().wait().unwrap());
    let status = how
        .strip_prefix("Exited(")
        .and_then(|h| h.trim_end_matches(')').rsplit(' ').next());
    status
        .and_then(|s| s.parse().ok())
        .unwrap_or_else(|| panic!("ended by {how}"))
}

#[test]
fn gasping_fish_bring_first_aid_after_the_first_answer() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &[]);
    says(&mut s, "is any of these so now?");
    edit(&mut s, "3");
    says(&mut s, "FIRST AID, NOW");
    says(&mut s, "told without: dissolved oxygen");
    says(&mut s, "WHAT ELSE HAVE YOU NOTICED");
    edit(&mut s, "temperature 27");
    edit(&mut s, "oxygen 1.6");
    edit(&mut s, "s");
    let page = says(&mut s, "You asked to stop.");
    assert!(page.contains("ACT NOW"), "{page}");
    assert_eq!(ended(&mut s), 0);
    assert!(!farm.path().join(".gillside-walk.toml").exists());
}

#[test]
fn brown_gills_are_told_and_lead_to_nitrite() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &["--plain"]);
    answer(&mut s, "");
    says(&mut s, "2  how fish look close up");
    answer(&mut s, "2");
    let lines = says(&mut s, "Type the numbers");
    let line = lines
        .lines()
        .find(|l| l.contains("brown"))
        .unwrap_or_else(|| panic!("{lines}"));
    answer(&mut s, line.split_whitespace().next().unwrap());
    answer(&mut s, "nitrite 6 NO2");
    answer(&mut s, "chloride 5");
    answer(&mut s, "s");
    let page = says(&mut s, "You asked to stop.");
    assert!(page.contains("low-chloride-nitrite-stress"), "{page}");
    assert_eq!(ended(&mut s), 0);
}

#[test]
fn going_back_undoes_what_followed() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &["--plain"]);
    answer(&mut s, "3");
    says(&mut s, "FIRST AID, NOW");
    says(&mut s, "WHAT ELSE");
    answer(&mut s, "b");
    says(&mut s, "is any of these so now?");
    answer(&mut s, "b");
    says(&mut s, "This is the beginning.");
    answer(&mut s, "");
    let between = says(&mut s, "WHAT ELSE");
    assert!(!between.contains("FIRST AID"), "{between}");
    answer(&mut s, "s");
    let page = says(&mut s, "You asked to stop.");
    assert!(!page.contains("ACT NOW"), "{page}");
    assert_eq!(ended(&mut s), 0);
}

#[test]
fn who_knows_nothing_is_not_asked_for_ever() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &["--plain"]);
    for _ in 0..40 {
        let (before, found) = s
            .exp_any(vec![
                rexpect::ReadUntil::String("Answer: ".to_owned()),
                rexpect::ReadUntil::String("I stop asking".to_owned()),
            ])
            .unwrap();
        assert!(!before.contains("panicked"));
        if found.starts_with("I stop") {
            assert_eq!(ended(&mut s), 0);
            return;
        }
        s.send("\r").unwrap();
        s.flush().unwrap();
    }
    panic!("it asks for ever");
}

#[test]
fn ctrl_c_keeps_the_answers_and_the_walk_is_offered_again() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &[]);
    edit(&mut s, "3");
    says(&mut s, "WHAT ELSE");
    says(&mut s, "Answer");
    s.send_control('c').unwrap();
    assert_eq!(ended(&mut s), 130);
    let kept = std::fs::read_to_string(farm.path().join(".gillside-walk.toml")).unwrap();
    assert!(kept.contains("fish-gasping"), "{kept}");

    let mut s = walk(farm.path(), 80, &["--plain"]);
    says(&mut s, "was not finished; 1 answer is kept");
    answer(&mut s, "y");
    says(&mut s, "FIRST AID, NOW");
    answer(&mut s, "s");
    says(&mut s, "fish gasp at the surface or breathe hard: yes");
    assert_eq!(ended(&mut s), 0);
}

#[test]
fn a_wrong_number_and_a_wrong_unit_are_asked_again() {
    let farm = farm();
    let mut s = walk(farm.path(), 80, &["--plain"]);
    answer(&mut s, "");
    answer(&mut s, "ph 69");
    says(&mut s, "outside what water can have");
    answer(&mut s, "temperature 72 furlongs");
    says(&mut s, "it takes");
    answer(&mut s, "temperature 72 F");
    answer(&mut s, "nitrite 2");
    says(&mut s, "1  2 mg/L as N");
    answer(&mut s, "2");
    answer(&mut s, "oxygen 19");
    says(&mut s, "of what this water holds");
    answer(&mut s, "");
    answer(&mut s, "s");
    let page = says(&mut s, "nitrite: 0.61 mg/L as N");
    assert!(page.contains("water temperature: 22.2 C"), "{page}");
    assert!(!page.contains("dissolved oxygen: 19"), "{page}");
    assert_eq!(ended(&mut s), 0);
}

#[test]
fn forty_columns_are_enough() {
    let farm = farm();
    for columns in [40, 80] {
        let mut s = walk(farm.path(), columns, &["--plain"]);
        answer(&mut s, "3");
        answer(&mut s, "s");
        let all = says(&mut s, "fish gasp at the surface");
        let wide = all
            .lines()
            .map(|l| l.trim_end().chars().count())
            .max()
            .unwrap();
        assert!(wide <= columns, "{wide} columns: {all}");
        let page: Vec<&str> = all
            .lines()
            .skip_while(|l| !l.contains("ACT NOW"))
            .take(6)
            .collect();
        assert!(page.iter().any(|l| l.starts_with("1.")), "{page:?}");
        assert_eq!(ended(&mut s), 0);
    }
}

#[test]
fn without_a_terminal_it_says_so() {
    let farm = farm();
    let output = Command::new(env!("CARGO_BIN_EXE_gillside"))
        .arg("walk")
        .current_dir(farm.path())
        .stdin(std::process::Stdio::null())
        .output()
        .unwrap();
    assert_eq!(output.status.code(), Some(2));
    assert!(output.stdout.is_empty());
    assert!(String::from_utf8_lossy(&output.stderr).contains("--answers FILE"));
}
