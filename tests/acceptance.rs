//! What the program must say of a handful of logs, through the command as a user runs it.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::path::{Path, PathBuf};
use std::process::Command;

use serde_json::Value;

fn folder(case: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/cases/open")
        .join(case)
}

fn last_time(case: &str) -> String {
    let log = std::fs::read_to_string(folder(case).join("log.csv")).unwrap();
    log.trim_end()
        .lines()
        .last()
        .unwrap()
        .split(',')
        .next()
        .unwrap()
        .to_owned()
}

fn run(case: &str, clock: &str, more: &[&str]) -> String {
    let folder = folder(case);
    let output = Command::new(env!("CARGO_BIN_EXE_gillside"))
        .arg("review")
        .arg(folder.join("log.csv"))
        .arg("--site")
        .arg(folder.join("site.toml"))
        .args(["--clock", clock])
        .args(more)
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    String::from_utf8(output.stdout).unwrap()
}

fn review(case: &str) -> Value {
    serde_json::from_str(&run(case, &last_time(case), &["--format", "json"])).unwrap()
}

fn first(review: &Value) -> &str {
    review["causes"][0]["id"].as_str().unwrap()
}

fn ids<'v>(review: &'v Value, list: &str) -> Vec<&'v str> {
    review[list]
        .as_array()
        .unwrap()
        .iter()
        .map(|s| s["id"].as_str().unwrap())
        .collect()
}

#[test]
fn a_bed_stirred_in_the_sun() {
    assert_eq!(
        first(&review("accept-stirred-in-sun")),
        "biofilter-light-exposed"
    );
}

#[test]
fn the_same_work_with_black_media_and_rising_alkalinity() {
    assert_eq!(
        first(&review("accept-stirred-black-media")),
        "nitrate-denitrified"
    );
}

#[test]
fn chloride_falls_with_nitrate() {
    assert_eq!(first(&review("accept-diluted")), "nitrate-diluted");
}

#[test]
fn gasping_at_dawn_in_green_water() {
    let review = review("accept-dawn-gasping");
    assert_eq!(first(&review), "night-oxygen-sag");
    assert_eq!(review["verdict"], "act-now");
    // One line for people may stand before it; then air comes before anything else.
    let aid = ids(&review, "first_aid");
    let air = aid.iter().position(|id| *id == "air-on-full").unwrap();
    assert!(air <= 1, "{aid:?}");
}

#[test]
fn gasping_with_good_oxygen_and_brown_gills() {
    let review = review("accept-brown-gills");
    assert_eq!(first(&review), "low-chloride-nitrite-stress");
    assert!(
        ids(&review, "first_aid").contains(&"chloride-dose")
            || ids(&review, "steps").contains(&"chloride-dose")
    );
    let text = run("accept-brown-gills", &last_time("accept-brown-gills"), &[]);
    assert!(text.contains("sodium"), "the salt's plant limits: {text}");
}

#[test]
fn an_acid_slide() {
    let review = review("accept-acid-slide");
    assert_eq!(first(&review), "alkalinity-exhausted");
    assert!(
        ids(&review, "avoid").contains(&"ph-up-fast"),
        "{:?}",
        ids(&review, "avoid")
    );
}

#[test]
fn one_odd_reading_in_a_healthy_log() {
    let case = "accept-healthy-odd-reading";
    let mild = |review: &Value| matches!(review["verdict"].as_str(), Some("steady" | "watch"));
    assert!(mild(&review(case)));
    let replay = run(case, &last_time(case), &["--format", "json", "--replay"]);
    let moments: Vec<Value> = replay
        .lines()
        .map(|l| serde_json::from_str(l).unwrap())
        .collect();
    assert!(!moments.is_empty());
    for moment in &moments {
        assert!(mild(moment), "{}", moment["as_of"]);
    }
}

#[test]
fn a_healthy_log_that_ended_four_days_ago() {
    let case = "accept-healthy-odd-reading";
    let (date, _) = last_time(case)
        .split_once(' ')
        .map(|(d, t)| (d.to_owned(), t.to_owned()))
        .unwrap();
    let later: jiff::civil::Date = date.parse().unwrap();
    let clock = format!(
        "{} 08:00",
        later.checked_add(jiff::Span::new().days(4)).unwrap()
    );
    let text = run(case, &clock, &["--format", "json"]);
    let review: Value = serde_json::from_str(&text).unwrap();
    assert_ne!(review["verdict"], "steady");
    let due = ids(&review, "missing");
    for id in [
        "temperature",
        "ph",
        "dissolved-oxygen",
        "total-ammonia",
        "nitrite",
    ] {
        assert!(due.contains(&id), "{id} of {due:?}");
    }
}

/// Nothing is said of a healthy log that would make a tired person do something.
#[test]
fn a_steady_page_has_no_steps() {
    let review = review("accept-healthy-odd-reading");
    assert_eq!(review["verdict"], "steady");
    assert!(ids(&review, "steps").is_empty());
}
