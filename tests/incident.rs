//! Incident files: written and edited by hand and by the program, damaged ones left alone; an auditor's questions.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod farm;

use farm::{Farm, SITE, two_weeks};

/// A farm with an open incident, and its id.
fn farm() -> (Farm, String) {
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    farm.at("2026-03-02 06:40");
    farm.does(&[
        "record",
        "temperature=18.0",
        "nitrite=1.5",
        "total-ammonia=0.9",
        "event=cold-snap;heater-failed",
        "sign=fish-sluggish",
        "by=Ines",
    ]);
    farm.does(&["incident", "open", "--by", "Ines"]);
    let id = farm.json(&["incident", "show"])["id"]
        .as_str()
        .unwrap()
        .to_owned();
    (farm, id)
}

fn file(id: &str) -> String {
    format!("incidents/{id}.toml")
}

#[test]
fn what_a_person_writes_in_the_file_stays() {
    let (mut farm, id) = farm();
    let text = farm.read(&file(&id));
    let by_hand = text
        .replace(
            "title = \"",
            "# we call it the February tank\ntitle = \"Cold tank: ",
        )
        .replace("\n[made_by]", "\n# from the program\n[made_by]")
        + "\n[[note]]\ntime = 2026-03-02 06:45:00 # local\ntext = \"by hand\"\n";
    farm.write(&file(&id), &by_hand);
    farm.at("2026-03-02 09:00");
    farm.does(&["incident", "note", "by the program", "--by", "Rui"]);
    farm.does(&["incident", "done", "feed-off", "--by", "Rui"]);
    let after = farm.read(&file(&id));
    for part in [
        "# we call it the February tank",
        "# from the program",
        "# local",
        "text = \"by hand\"",
        "text = \"by the program\"",
    ] {
        assert!(after.contains(part), "{part} is not in\n{after}");
    }
    let shown = farm.json(&["incident", "show"]);
    assert!(shown["title"].as_str().unwrap().starts_with("Cold tank: "));
    assert_eq!(shown["notes"].as_array().map(Vec::len), Some(2));
    assert_eq!(shown["notes"][0]["time"], "2026-03-02T06:45:00Z");
    let step = shown["steps"]
        .as_array()
        .unwrap()
        .iter()
        .find(|s| s["id"] == "feed-off")
        .unwrap();
    assert_eq!(
        (step["by"].as_str(), step["done"].as_str()),
        (Some("Rui"), Some("2026-03-02T09:00:00Z"))
    );
    // As long after it was done as it was after the opening, from what the reading was then.
    let was = text.parse::<toml::Table>().unwrap();
    let opened = was["opened"].to_string();
    assert_eq!(opened, "2026-03-02T06:40:00Z");
    assert_eq!(step["verify"]["from"], 1.5);
}

#[test]
fn a_damaged_file_is_told_of_and_left_alone() {
    let (farm, id) = farm();
    let good = farm.read(&file(&id));
    for (name, text, part) in [
        ("broken.toml", "title = \"x\nopened =", "broken.toml:1"),
        (
            "typo.toml",
            "title = \"x\"\nopend = 2026-03-02T06:40:00Z\n",
            "did you mean `opened`?",
        ),
        ("empty.toml", "", "`title` is missing"),
        (
            "when.toml",
            "title = \"x\"\nopened = \"soon\"\n",
            "`soon` is not a time",
        ),
        (
            "way.toml",
            "title = \"x\"\nopened = 2026-03-02T06:40:00Z\n[[step]]\nid = \"a\"\nverify = { id = \"ph\", direction = \"up\", due = 2026-03-03T06:40:00Z }\n",
            "`up` is no direction",
        ),
    ] {
        farm.write(&format!("incidents/{name}"), text);
        let list = farm.does(&["incident", "list"]);
        assert!(
            list.split_whitespace()
                .collect::<Vec<_>>()
                .join(" ")
                .contains(part),
            "{part} is not in\n{list}"
        );
        let came = farm.run(&["incident", "note", "still works", "--by", "Rui"]);
        assert_eq!(came.status, 0, "{came:?}");
        assert!(came.err.starts_with("warning: "), "{came:?}");
        assert_eq!(farm.run(&["shift"]).status, 0);
        assert_eq!(farm.read(&format!("incidents/{name}")), text, "left alone");
        let json: serde_json::Value =
            serde_json::from_str(&farm.run(&["incident", "list", "--format", "json"]).out).unwrap();
        assert!(json["damaged"][0]["code"].is_string());
        std::fs::remove_file(farm.path(&format!("incidents/{name}"))).unwrap();
    }
    // Named and damaged: nothing is put down in it.
    farm.write(&file(&id), &good.replace("opened =", "opend ="));
    let came = farm.run(&["incident", "note", "x"]);
    assert_eq!(came.status, 2, "{came:?}");
    assert_eq!(farm.read(&file(&id)), good.replace("opened =", "opend ="));
}

#[test]
fn closed_opened_again_and_closed_otherwise() {
    let (mut farm, id) = farm();
    farm.at("2026-03-05 12:00");
    for (args, part) in [
        (
            &["incident", "close", "--cause", "biofilter-cold"][..],
            "did you mean `biofilter-cold-slowed`?",
        ),
        (&["incident", "done", "feed-of"], "did you mean `feed-off`?"),
        (&["incident", "done", "plan-1"], "has no step `plan-1`"),
        (
            &["incident", "show", "2025"],
            "no incident is called `2025`",
        ),
        (&["incident", "reopen", &id], "is open"),
        (&["incident", "plan", "nowhere.json"], "can't be read"),
        (
            &["incident", "list", "--format", "html"],
            "can't be written as html",
        ),
    ] {
        let came = farm.run(args);
        assert!(
            [2, 3].contains(&came.status) && came.err.contains(part),
            "{part}: {came:?}"
        );
    }
    farm.does(&[
        "incident",
        "close",
        "--cause",
        "water-chilled",
        "--outcome",
        "warm again",
        "--by",
        "Rui",
    ]);
    let came = farm.run(&["incident", "close", &id, "--cause", "water-chilled"]);
    assert!(
        came.status == 3 && came.err.contains("closed already"),
        "{came:?}"
    );
    let came = farm.run(&["incident", "note", "x"]);
    assert!(
        came.status == 2 && came.err.contains("no incident is open"),
        "{came:?}"
    );
    farm.at("2026-03-06 12:00");
    farm.does(&[
        "incident",
        "reopen",
        "2026-03-02",
        "--why",
        "nitrite is up again",
        "--by",
        "Ines",
    ]);
    farm.does(&["incident", "done", "feed-off", "--by", "Ines"]);
    let came = farm.run(&["incident", "done", "feed-off"]);
    assert!(
        came.status == 3 && came.err.contains("done already"),
        "{came:?}"
    );
    farm.does(&[
        "incident",
        "close",
        "--cause",
        "biofilter-cold-slowed",
        "--by",
        "Ines",
    ]);
    let shown = farm.json(&["incident", "show", &id]);
    assert_eq!(shown["reopened"][0]["was_cause"], "water-chilled");
    assert_eq!(shown["reopened"][0]["why"], "nitrite is up again");
    assert_eq!(shown["closed"]["cause"], "biofilter-cold-slowed");
}

#[test]
fn an_auditor_finds_who_what_when_and_what_was_corrected() {
    let (mut farm, _) = farm();
    farm.at("2026-03-02 08:00");
    farm.does(&["record", "ph=6.1", "by=Rui"]);
    farm.at("2026-03-02 09:00");
    farm.does(&[
        "record",
        "corrects=2026-03-02 08:00",
        "ph=6.7",
        "by=Ines",
        "note=misread",
    ]);
    let shown = farm.json(&["incident", "show"]);
    assert_eq!(shown["made_by"]["version"], env!("CARGO_PKG_VERSION"));
    assert_eq!(
        shown["made_by"]["knowledge"].as_str().map(str::len),
        Some(64)
    );
    assert!(shown["ranking"][0]["probability"].as_f64().unwrap() > 0.1);
    let rows = shown["log"]["rows"].as_array().unwrap();
    let row = rows
        .iter()
        .find(|r| r["time"] == "2026-03-02T08:00:00Z")
        .unwrap();
    assert_eq!(row["readings"]["ph"]["value"], 6.7);
    let was = &shown["log"]["corrected"][0];
    assert_eq!(was["was"]["readings"]["ph"]["value"], 6.1);
    assert_eq!(
        (was["was"]["by"].as_str(), was["by"].as_str()),
        (Some("Rui"), Some("Ines"))
    );
    assert_eq!(was["at"], "2026-03-02T09:00:00Z");
}

#[test]
fn last_time_is_shown_beside_and_moves_nothing() {
    let (mut farm, id) = farm();
    let before = farm.json(&["review"])["causes"].clone();
    farm.at("2026-03-09 12:00");
    farm.does(&[
        "incident",
        "close",
        "--cause",
        "water-chilled",
        "--outcome",
        "a heater; nitrite took 6 days",
    ]);
    farm.at("2026-03-02 06:40");
    assert_eq!(farm.json(&["review"])["causes"], before);
    farm.does(&["incident", "open"]);
    let second = format!("{id}-2");
    let shown = farm.json(&["incident", "show", &second]);
    assert_eq!(shown["similar"][0]["cause"], "water-chilled");
    let page = farm.does(&["incident", "show", &second]);
    let page = page.split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(page.contains("in March 2026; it took 7 days"), "{page}");
    assert!(page.contains("a heater; nitrite took 6 days"), "{page}");
}

#[test]
fn nothing_is_opened_when_nothing_is_wrong() {
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    farm.at("2026-03-01 18:00");
    assert!(
        farm.does(&["incident", "open"])
            .contains("Nothing is wrong enough")
    );
    assert!(
        farm.does(&["incident", "list"])
            .contains("There are no incidents")
    );
    assert!(!farm.path("incidents").exists());
    let bare = Farm::with(&[]);
    let came = bare.run(&["incident", "open"]);
    assert!(came.status == 2 && came.err.contains("no log"), "{came:?}");
}
