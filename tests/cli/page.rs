//! The page for a person.

use super::harness::{demo, demo_review, gillside};

/// The lines of the page, and that none is wider than asked.
fn lines(out: &str, columns: usize) -> Vec<&str> {
    let lines: Vec<&str> = out.lines().collect();
    for line in &lines {
        assert!(
            line.chars().count() <= columns,
            "wider than {columns}: {line}"
        );
    }
    lines
}

#[test]
fn the_demo_begins_with_the_verdict_and_the_first_thing_to_do() {
    let came = demo_review([]).check();
    let top = lines(&came.out, 80)[..6].join("\n");
    assert_eq!(
        top,
        "\
ACT TODAY: harm is on its way; act within hours.

DO FIRST
1. Get the heat back: heater, thermostat, breaker, fuel; the room first, then
   the water.
2. Stop feeding."
    );
    for part in [
        "Hillfoot greenhouse 2, as of Mar 4 2026, 07:30 (Europe/Lisbon).",
        "Very likely: Cold water has slowed the biofilter [biofilter-cold-slowed].",
        "\nHOW\n1. ",
        "\nLikely: The water has become too cold [water-chilled].",
        "\nTODAY\n",
        "\nLEAVE ALONE\n- Do not heat the water fast",
        "\nCAUTIONS\n",
        "61 of 61 rows read and used, 0 refused.",
        "no house rules; site file",
    ] {
        assert!(
            came.out.contains(part),
            "{part:?} is missing:\n{}",
            came.out
        );
    }
}

#[test]
fn the_first_thing_to_do_is_within_six_lines_at_any_width() {
    for columns in [30, 40, 60, 80, 100] {
        for clock in ["2026-03-04 07:45", "2027-01-01 00:00"] {
            let came = gillside(["review", "--site", &demo("site.toml"), "--clock", clock])
                .columns(columns)
                .check();
            let lines = lines(&came.out, columns);
            assert!(
                lines[..6].iter().any(|l| l.starts_with("1. ")),
                "{columns}: {:?}",
                &lines[..6]
            );
        }
    }
}

/// The folders of incidents that come with the project.
fn farms() -> Vec<std::path::PathBuf> {
    let root = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/cases/open");
    let folders = std::fs::read_dir(root).unwrap().map(|e| e.unwrap().path());
    folders
        .filter(|p| p.join("log.csv").is_file() && p.join("site.toml").is_file())
        .collect()
}

#[test]
fn every_page_fits_and_begins_with_something_to_do() {
    let farms = farms();
    assert!(farms.len() >= 20, "only {} farms", farms.len());
    for farm in farms {
        let (site, log) = (farm.join("site.toml"), farm.join("log.csv"));
        let came = gillside([
            "review",
            log.to_str().unwrap(),
            "--site",
            site.to_str().unwrap(),
        ])
        .columns(40)
        .check();
        // Paths and other words without spaces may be longer than the page is wide, and break.
        let top = &lines(&came.out, 40)[..6];
        assert!(
            top.iter()
                .any(|l| l.starts_with("1. ") || l.starts_with("- ")),
            "{}: {top:?}",
            farm.display()
        );
    }
}

#[test]
fn the_page_never_shows_a_probability() {
    let out = demo_review([]).check().out;
    let json: serde_json::Value =
        serde_json::from_str(&demo_review(["--format", "json"]).check().out).unwrap();
    for cause in json["causes"].as_array().unwrap() {
        let percent = format!("{:.0}%", cause["probability"].as_f64().unwrap() * 100.0);
        assert!(!out.contains(&percent), "{percent}");
    }
    assert!(!out.contains("probability"));
}

#[test]
fn first_aid_comes_first_when_fish_gasp() {
    let log = "time,temperature,ph,dissolved-oxygen,total-ammonia,nitrite,event,sign\n\
               2026-03-02 07:30,26,7,6.5,0.2,0.05,,\n\
               2026-03-02 19:30,26,7,1.6,0.2,0.05,power-cut,fish-gasping\n";
    let came = gillside(["review", "log.csv", "--clock", "2026-03-02 19:40"])
        .file("log.csv", log)
        .columns(40)
        .check();
    let lines = lines(&came.out, 40);
    assert_eq!(lines[0], "ACT NOW: fish may die within hours.");
    assert_eq!(lines[2], "FIRST AID, BEFORE ANYTHING ELSE");
    assert!(lines[3].starts_with("1. "), "{:?}", &lines[..6]);
    let air = came.out.find("Turn on all the air").unwrap();
    assert!(air < came.out.find("WHY").unwrap());
    assert!(
        !came.out.contains("You may have"),
        "nothing is known of the farm, so no minutes are named"
    );
    assert!(came.out.contains("no site file"));
}

#[test]
fn minutes_are_named_where_the_site_allows_it() {
    let site = std::fs::read_to_string(demo("site.toml")).unwrap();
    // Until oxygen is down to the limit of the site's species; at the limit nothing is promised.
    for (oxygen, said) in [
        ("4.8", " minutes or less."),
        ("3.0", "There may be no time left: act before you read on."),
    ] {
        let log = format!(
            "time,temperature,ph,dissolved-oxygen,total-ammonia,nitrite,event,sign\n\
             2026-03-02 07:30,26,7,6.5,0.2,0.05,,\n\
             2026-03-02 19:30,26,7,{oxygen},0.2,0.05,power-cut;air-stopped,fish-gasping\n"
        );
        gillside(["review", "--clock", "2026-03-02 19:40"])
            .file("site.toml", site.clone())
            .file("log.csv", log)
            .out_has(["ACT NOW: fish may die within hours.", said])
            .check();
    }
}

#[test]
fn an_old_log_says_so_in_its_first_line() {
    let came = gillside([
        "review",
        "--site",
        &demo("site.toml"),
        "--clock",
        "2026-03-08 07:30",
    ])
    .check();
    assert_eq!(
        came.out.lines().next(),
        Some("ACT TODAY (last row 4 days old): harm is on its way; act within hours.")
    );
    // Within a shift nothing is said.
    let came = gillside([
        "review",
        "--site",
        &demo("site.toml"),
        "--clock",
        "2026-03-04 15:30",
    ])
    .check();
    assert_eq!(
        came.out.lines().next(),
        Some("ACT TODAY: harm is on its way; act within hours.")
    );
}

#[test]
fn a_healthy_log_that_ended_four_days_ago_is_watched_and_what_is_due_is_named() {
    let healthy = ["--as-of", "2026-03-01 17:00"];
    let fresh = gillside(["review", "--site", &demo("site.toml")])
        .and(healthy)
        .check();
    assert_eq!(fresh.out.lines().next(), Some("STEADY: nothing to do."));
    let old = gillside([
        "review",
        "--site",
        &demo("site.toml"),
        "--clock",
        "2026-03-05 17:00",
    ])
    .and(healthy)
    .check();
    assert_eq!(
        old.out.lines().take(6).collect::<Vec<_>>(),
        [
            "WATCH (last row 4 days old): no harm in sight, but measure again.",
            "",
            "MEASURE OR LOOK AT NEXT",
            "- Water temperature.",
            "- Dissolved oxygen.",
            "   Why: last read 4 days ago, due every 24 hours.",
        ]
    );
}

#[test]
fn us_units_are_for_people_and_json_keeps_its_own() {
    let site = std::fs::read_to_string(demo("site.toml"))
        .unwrap()
        .replace("\"metric\"", "\"us\"");
    let log = std::fs::read_to_string(demo("log.csv")).unwrap();
    let run = gillside(["review", "--clock", "2026-03-04 07:45"])
        .file("site.toml", &site)
        .file("log.csv", &log);
    let out = run.check().out;
    assert!(out.contains("63.0 F"), "17.2 C is 63.0 F:\n{out}");
    assert!(!out.contains("17.2 C"));
}

#[test]
fn words_from_a_log_can_t_move_the_cursor() {
    let log = "time,place,dissolved-oxygen,sign\n\
               2026-03-02 07:30,tank \u{1b}[2J1,1.2,fish-gasping;\u{1b}]0;x\n";
    let came = gillside(["review", "log.csv"]).file("log.csv", log).check();
    assert!(!came.out.contains('\u{1b}'), "{}", came.out);
}

#[test]
fn markdown_has_the_same_parts() {
    demo_review(["--format", "markdown"])
        .out_has([
            "# ACT TODAY: ",
            "## Do first\n\n1. Get the heat back",
            "## Leave alone\n\n- Do not heat",
        ])
        .check();
}

#[test]
fn a_farm_s_own_targets_are_told() {
    let site = "name = \"x\"\n[targets]\nph = { low = 5.0, high = 7.0 }\n";
    gillside(["review", "log.csv", "--clock", "2026-03-02 08:00"])
        .file("site.toml", site)
        .file("log.csv", "time,ph\n2026-03-02 07:30,6.4\n")
        .out_has([
            "CHANGED FOR THIS FARM",
            "target.ph.low: 5 pH instead of 6.2 pH (less careful than shipped)",
        ])
        .check();
}

#[test]
fn an_area_that_the_media_do_not_bear_out_is_told() {
    let site =
        "name = \"x\"\nbiofilter_area_m2 = 10\n[[media]]\nkind = \"pea-gravel\"\nvolume_l = 3000\n";
    gillside(["review", "log.csv", "--clock", "2026-03-02 08:00"])
        .file("site.toml", site)
        .file("log.csv", "time,ph\n2026-03-02 07:30,6.4\n")
        .out_has([
            "ABOUT THE SITE FILE\n- The biofilter area is given as 10 m2, but the media would have",
        ])
        .check();
}
