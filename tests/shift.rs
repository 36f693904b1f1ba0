//! A week on a farm: a cold snap found by the early shift, handed over from shift to shift, a step that fails, a paced
//! correction, verified and closed. Every handover names what is due, and every due check is on the right shift's list.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod farm;

use farm::{Farm, SITE, two_weeks};
use serde_json::Value;

/// What the pace command writes (data contract, section 9), cut to what an incident takes in.
const PLAN: &str = r#"{"schema": 1, "kind": "temperature", "from": {"temperature": 17.9}, "to": {"temperature": 24}, "refused": null,
 "steps": [
  {"at": "2026-03-03T15:00:00Z", "text": "Warm by 3 C, half a degree an hour", "amounts": [], "liters": null, "feed_kg": null,
   "expect": {"temperature": [20.4, 21.4]}, "go_on_if": ["fish hold still and breathe calmly"], "stop_if": ["fish gasp or jump"]},
  {"at": "2026-03-04T15:00:00Z", "text": "Warm by 3 C, half a degree an hour", "amounts": [], "liters": null, "feed_kg": null,
   "expect": {"temperature": [23.4, 24.4]}, "go_on_if": ["nitrite is not above 2"], "stop_if": ["fish gasp or jump"]}],
 "total": [], "limits": [], "cautions": []}"#;

/// Temperature of each shift from Monday's early one on.
const TEMPERATURE: [f64; 21] = [
    18.4, 18.2, 18.0, 17.9, 18.6, 19.8, 20.8, 22.0, 23.4, 23.8, 23.9, 23.8, 23.9, 24.1, 23.9, 23.8,
    24.2, 23.9, 23.9, 24.1, 24.0,
];
/// Nitrite and total ammonia of each morning.
const MORNING: [(f64, f64); 7] = [
    (0.6, 0.5),
    (0.9, 0.7),
    (1.3, 0.8),
    (1.1, 0.6),
    (0.7, 0.4),
    (0.35, 0.3),
    (0.12, 0.2),
];
const NAMES: [&str; 3] = ["early", "late", "night"];
const PEOPLE: [&str; 3] = ["Ines", "Rui", "Marta"];

struct Week {
    farm: Farm,
    handovers: usize,
    checked: usize,
}

/// An hour of a shift's day: shift 0 is Monday's early one.
fn clock(shift: usize, hour: usize, minute: usize) -> String {
    let hours = 6 + 8 * shift + hour;
    format!(
        "2026-03-{:02} {:02}:{minute:02}",
        2 + hours / 24,
        hours % 24
    )
}

/// Words on one line, so that where they are wrapped does not matter.
fn flat(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// `2026-03-05T06:40:00Z` as pages show it: `Mar 5, 06:40`.
fn shown(time: &str) -> String {
    format!(
        "Mar {}, {}",
        time[8..10].trim_start_matches('0'),
        &time[11..16]
    )
}

impl Week {
    fn incident(&self) -> Value {
        self.farm.json(&["incident", "show"])
    }

    /// The end of one shift: the note for the next, and its list, both held to what is due.
    fn change_over(&mut self, next: usize) {
        self.farm.at(&clock(next - 1, 7, 45));
        let incident = self.incident();
        let note = flat(&self.farm.does(&["incident", "handover"]));
        let list = self.farm.json(&["shift"]);
        assert_eq!(list["shift"], NAMES[next % 3], "the next shift is meant");
        let end = list["end"].as_str().unwrap();
        let items: Vec<&Value> = list["places"]
            .as_array()
            .unwrap()
            .iter()
            .flat_map(|p| p["items"].as_array().unwrap())
            .collect();
        let on_list = |kind: &str, id: &str, due: &str| {
            items
                .iter()
                .any(|i| i["kind"] == kind && i["id"] == id && i["due"] == due)
        };
        for check in incident["checks"].as_array().unwrap() {
            let state = check["state"].as_str().unwrap();
            let (id, due) = (
                check["id"].as_str().unwrap(),
                check["due"].as_str().unwrap(),
            );
            if state == "met" {
                assert!(
                    !on_list("check", id, due),
                    "{id} is met, and on the list of {}",
                    NAMES[next % 3]
                );
                continue;
            }
            assert!(
                note.contains(&format!("by {}", shown(due))),
                "the note does not say that {id} is due {due}:\n{note}"
            );
            // A check that failed stays until somebody does something about it.
            let wanted = due < end || state == "missed";
            assert_eq!(
                on_list("check", id, due),
                wanted,
                "{id}, {state}, due {due}, on the list to {end}"
            );
            self.checked += usize::from(wanted);
        }
        for (n, step) in (1..).zip(incident["plan"].as_array().unwrap()) {
            let (id, at) = (format!("plan-{n}"), step["at"].as_str().unwrap());
            if step["done"].is_null() {
                assert!(
                    note.contains(&id) && note.contains(&shown(at)),
                    "the note does not name {id}:\n{note}"
                );
            }
            let wanted = step["done"].is_null() && at < end;
            assert_eq!(
                on_list("plan", &id, at),
                wanted,
                "{id} at {at}, on the list to {end}"
            );
            if wanted {
                let item = items.iter().find(|i| i["id"] == *id).unwrap();
                let conditions = item["conditions"].to_string();
                assert!(
                    conditions.contains("go on only if")
                        && conditions.contains("stop if: fish gasp"),
                    "{item}"
                );
            }
        }
        for avoid in incident["avoid"].as_array().unwrap().iter().take(2) {
            let text = flat(avoid["text"].as_str().unwrap());
            assert!(
                note.contains(&text),
                "the note does not say what to leave alone:\n{note}"
            );
        }
        assert!(note.lines().count() <= 60);
        self.handovers += 1;
    }

    /// What is measured in a shift.
    fn measure(&mut self, shift: usize) {
        self.farm.at(&clock(shift, 0, 40));
        let by = format!("by={}", PEOPLE[shift % 3]);
        let temperature = format!("temperature={}", TEMPERATURE[shift]);
        let mut words = vec!["record".to_owned(), temperature, by];
        if shift.is_multiple_of(3) {
            let (nitrite, ammonia) = MORNING[shift / 3];
            words.extend([
                format!("nitrite={nitrite}"),
                format!("total-ammonia={ammonia}"),
                "ph=6.8".to_owned(),
                "dissolved-oxygen=7.4".to_owned(),
                "chloride=45".to_owned(),
                "sign=!fish-gasping".to_owned(),
            ]);
        }
        if shift == 0 {
            words.push("event=cold-snap;heater-failed".to_owned());
            words.push("sign=fish-sluggish;heater-off".to_owned());
        } else if shift == 1 {
            words.push("sign=!heater-off".to_owned());
        }
        let words: Vec<&str> = words.iter().map(String::as_str).collect();
        self.farm.does(&words);
    }

    fn done(&mut self, at: &str, step: &str, by: &str) {
        self.farm.at(at);
        self.farm.does(&["incident", "done", step, "--by", by]);
    }
}

#[test]
fn a_cold_week() {
    let mut week = Week {
        farm: Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]),
        handovers: 0,
        checked: 0,
    };
    // Sunday evening: the list of the early shift, nothing is open.
    week.farm.at("2026-03-02 05:45");
    let list = week.farm.json(&["shift"]);
    assert_eq!(
        (
            list["shift"].as_str(),
            list["incidents"].as_array().map(Vec::len)
        ),
        (Some("early"), Some(0))
    );
    assert!(
        week.farm
            .does(&["incident", "handover"])
            .contains("No incident is open")
    );

    // Monday, early: found and opened; the heat is back on at eight, feed is off.
    week.measure(0);
    week.farm.at(&clock(0, 0, 50));
    let said = week.farm.does(&["incident", "open", "--by", "Ines"]);
    assert!(said.starts_with("Opened 2026-03-02-"), "{said}");
    let opened = week.incident();
    assert_eq!(opened["by"], "Ines");
    assert!(
        opened["ranking"].to_string().contains("water-chilled"),
        "{}",
        opened["ranking"]
    );
    week.done(&clock(0, 1, 0), "feed-off", "Ines");
    week.done(&clock(0, 2, 0), "restore-heat", "Ines");
    week.farm.does(&[
        "incident",
        "note",
        "breaker had tripped; reset once",
        "--by",
        "Ines",
    ]);

    let mut failed = false;
    for shift in 1..21 {
        week.change_over(shift);
        week.measure(shift);
        match shift {
            // Tuesday, early: a day has gone, and the water is no warmer.
            3 => {
                week.farm.at(&clock(3, 2, 0));
                let followed = week.farm.json(&["incident", "follow", "--by", "Ines"]);
                let checks = followed["checks"].as_array().unwrap();
                failed = checks
                    .iter()
                    .any(|c| c["id"] == "temperature" && c["state"] == "missed");
                assert!(failed, "{followed:#}");
                assert!(
                    followed["again"]["next"]["text"].is_string(),
                    "{followed:#}"
                );
                week.farm.write("plan.json", PLAN);
                week.farm
                    .does(&["incident", "plan", "plan.json", "--by", "Ines"]);
            }
            4 => {
                week.done(&clock(4, 1, 0), "plan-1", "Rui");
                week.done(&clock(4, 1, 5), "warm-slowly", "Rui");
            }
            7 => week.done(&clock(7, 1, 0), "plan-2", "Rui"),
            // Thursday, late: it is warm again, and has been seen to be.
            10 => {
                let followed = week.farm.json(&["incident", "follow", "--by", "Rui"]);
                let checks = followed["checks"].as_array().unwrap();
                assert!(
                    checks
                        .iter()
                        .any(|c| c["id"] == "temperature" && c["state"] == "met"),
                    "{followed:#}"
                );
            }
            _ => {}
        }
    }
    assert!(failed);
    assert_eq!(week.handovers, 20);
    assert!(
        week.checked >= 6,
        "only {} due checks were ever looked for",
        week.checked
    );

    // Sunday: over.
    week.farm.at("2026-03-08 20:00");
    week.farm.does(&[
        "incident",
        "close",
        "--cause",
        "biofilter-cold-slowed",
        "--outcome",
        "nitrite took six days",
        "--by",
        "Marta",
    ]);
    let list = week.farm.json(&["shift"]);
    assert_eq!(list["incidents"].as_array().map(Vec::len), Some(0));
    let id = opened["id"].as_str().unwrap();
    let closed = week.farm.json(&["incident", "show", id]);
    assert_eq!(closed["closed"]["cause"], "biofilter-cold-slowed");
    assert_eq!(closed["follow_ups"].as_array().map(Vec::len), Some(2));
    assert!(
        closed["follow_ups"][0]["made_by"]["knowledge"]
            .as_str()
            .is_some_and(|k| k.len() == 64)
    );
    let rows = closed["log"]["rows"].as_array().unwrap();
    assert!(
        rows.iter().all(|r| r["by"].is_string()),
        "who recorded what"
    );
    let stamped = [&closed["notes"], &closed["steps"], &closed["plan"]];
    assert!(
        stamped[2]
            .as_array()
            .unwrap()
            .iter()
            .all(|p| p["by"] == "Rui")
    );
}

#[test]
fn what_is_due_follows_the_log_and_the_site() {
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    farm.at("2026-03-02 05:45");
    let list = farm.does(&["shift"]);
    for (part, there) in [
        ("Weigh the feed", true),
        ("Calibrate the pH probe", true),
        // No solids filter, no such line; nor a biofilter among the places.
        ("Screens, drum and pump intakes", false),
        ("The biofilter: covered", false),
        ("oxygen store", false),
        ("fish vet: +000 000 000", true),
        ("Sign-off", false),
        ("SIGN-OFF", true),
    ] {
        assert_eq!(flat(&list).contains(part), there, "{part} in\n{list}");
    }
    let places: Vec<&str> = list
        .lines()
        .filter(|l| ["RAFT BEDS", "TANK 1", "SUMP", "BENCH"].contains(l))
        .collect();
    assert_eq!(
        places,
        ["RAFT BEDS", "TANK 1", "SUMP", "BENCH"],
        "in walking order"
    );
    // What was done in the morning is not due in the afternoon; an event says it as well as `done`.
    farm.at("2026-03-02 07:30");
    farm.does(&[
        "record",
        "feed=4.5",
        "event=probe-calibrated",
        "done=plant-look",
    ]);
    farm.at("2026-03-02 13:45");
    let late = flat(&farm.does(&["shift"]));
    for part in ["Weigh the feed", "Calibrate the pH probe", "One new leaf"] {
        assert!(!late.contains(part), "{part} in\n{late}");
    }
    assert!(late.contains("Sound of the blower"));
    // Weather calls for more.
    farm.does(&["record", "event=cold-snap"]);
    assert!(flat(&farm.does(&["shift"])).contains("heaters fail on the night they are needed"));
    let on = farm.json(&["shift", "--shift", "night", "--on", "2026-03-05"]);
    assert_eq!(
        (on["start"].as_str(), on["end"].as_str()),
        (Some("2026-03-05T22:00:00Z"), Some("2026-03-06T06:00:00Z"))
    );
    for (args, status, part) in [
        (
            &["shift", "--shift", "noon"][..],
            2,
            "no shift called `noon`",
        ),
        (&["shift", "--on", "tomorrow"], 2, "is not a date"),
        (
            &["shift", "--form", "--format", "json"],
            2,
            "can't be written as json",
        ),
        (&["shift", "--log", "nowhere.csv"], 3, "can't be opened"),
    ] {
        let came = farm.run(args);
        assert!(came.status == status && came.err.contains(part), "{came:?}");
    }
}

#[test]
fn a_new_farm_has_a_checklist_too() {
    let farm = Farm::with(&[("site.toml", "name = \"New\"\nlog = \"log.csv\"\n")]);
    let list = farm.does(&["shift"]);
    assert!(
        list.contains("Before you make a noise") && list.contains("No numbers yet"),
        "{list}"
    );
    let bare = Farm::with(&[]);
    assert!(bare.does(&["shift"]).contains("A farm without a site file"));
    let card = bare.does(&["shift", "--emergency-card"]);
    assert!(card.contains("lacks volume_l, biomass_kg"), "{card}");
    assert!(card.contains("THE POWER STOPS"), "{card}");
}

#[test]
fn the_card_says_how_long_there_is_on_this_farm() {
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    farm.at("2026-03-02 05:45");
    let minutes = |farm: &Farm| {
        farm.json(&["shift", "--emergency-card"])["stops"][0]["minutes"]
            .as_u64()
            .unwrap()
    };
    let here = minutes(&farm);
    assert!((5..40).contains(&here), "{here}");
    farm.write(
        "site.toml",
        &SITE.replace("biomass_kg = 320", "biomass_kg = 80"),
    );
    let fewer = minutes(&farm);
    assert!(
        fewer >= here * 3,
        "a quarter of the fish has longer: {here}, {fewer}"
    );
    let card = farm.json(&["shift", "--emergency-card"]);
    for stop in card["stops"].as_array().unwrap() {
        assert_eq!(stop["steps"].as_array().map(Vec::len), Some(3), "{stop}");
    }
}

/// Pages that a printed PDF has.
fn pages(pdf: &[u8]) -> usize {
    let text = String::from_utf8_lossy(pdf);
    text.matches("/Type /Page\n").count()
        + text.matches("/Type /Page/").count()
        + text.matches("/Type /Page ").count()
}

/// Prints to A4 and Letter with a browser: `GILLSIDE_CHROMIUM=chromium cargo test --test shift -- --ignored`.
#[test]
#[ignore = "needs a headless Chromium, named by GILLSIDE_CHROMIUM"]
fn each_page_prints_on_one_sheet() {
    let browser = std::env::var("GILLSIDE_CHROMIUM").expect("GILLSIDE_CHROMIUM names the browser");
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    // The longest list there is: nothing was ever noted, an incident is open, there is a plan.
    farm.at("2026-03-02 06:40");
    farm.does(&[
        "record",
        "temperature=18.4",
        "nitrite=1.6",
        "total-ammonia=0.9",
        "event=cold-snap;heater-failed",
        "sign=fish-sluggish",
    ]);
    farm.does(&["incident", "open"]);
    farm.write("plan.json", PLAN);
    farm.does(&["incident", "plan", "plan.json"]);
    for (name, args) in [
        (
            "list",
            &[
                "shift",
                "--shift",
                "late",
                "--on",
                "2026-03-03",
                "--format",
                "html",
            ][..],
        ),
        ("card", &["shift", "--emergency-card", "--format", "html"]),
    ] {
        let html = farm.does(args);
        assert!(!html.contains("http"), "nothing from the network");
        for paper in ["A4", "Letter"] {
            let page = html.replace("@page {", &format!("@page {{ size: {paper};"));
            farm.write("page.html", &page);
            let pdf = farm.path(&format!("{name}-{paper}.pdf"));
            let status = std::process::Command::new(&browser)
                .args([
                    "--headless",
                    "--no-sandbox",
                    "--disable-gpu",
                    "--no-pdf-header-footer",
                ])
                .arg(format!("--print-to-pdf={}", pdf.display()))
                .arg(farm.path("page.html"))
                .stderr(std::process::Stdio::null())
                .status()
                .unwrap();
            assert!(status.success());
            assert_eq!(pages(&std::fs::read(&pdf).unwrap()), 1, "{name} on {paper}");
        }
    }
}
