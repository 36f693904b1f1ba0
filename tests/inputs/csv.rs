//! CSV as farms write it: separators, quotes, byte order marks, units, own column names.

use super::words::{good_site, id, problems, read, read_at, seconds, series};
use gillside::history::log::{PlaceId, Value};

#[test]
fn the_log_of_the_contract() {
    let log = read(
        "time,temperature,ph,dissolved-oxygen,total-ammonia,nitrite,nitrate,alkalinity,event,sign,note\n\
         2026-03-02 07:30,22.1,6.9,6.8,0.2,<0.05,42,45,base-added,,\n\
         2026-03-04 07:30,17.0,6.9,7.9,0.6,1.2,42,44,base-added;heater-failed,fish-off-feed;!fish-gasping,heater tripped overnight\n",
    )
    .unwrap();
    assert_eq!((log.rows_read, log.rows_used, log.rows_refused), (2, 2, 0));
    assert_eq!(log.rows[0].time, seconds("2026-03-02T07:30:00Z"));
    assert_eq!(log.rows[0].place, None);
    let limit = Value {
        amount: 0.05,
        below: true,
    };
    assert_eq!(log.rows[0].value(id("nitrite")), Some(limit));
    let vocabulary = super::words::vocabulary();
    let sign = |name: &str| vocabulary.sign(name).unwrap();
    let expected = [(sign("fish-off-feed"), true), (sign("fish-gasping"), false)];
    assert_eq!(log.rows[1].signs, expected);
    let event = |name: &str| vocabulary.event(name).unwrap();
    assert_eq!(
        log.rows[1].events,
        [event("base-added"), event("heater-failed")]
    );
    assert_eq!(
        log.rows[1].note.as_deref(),
        Some("heater tripped overnight")
    );
    assert_eq!(log.rows[1].line, 3);
    // Nobody said in which form the three are: that is told, and nothing else.
    assert_eq!(
        problems(&log),
        [
            "1:38 total-ammonia assumed-as-n",
            "1:52 nitrite assumed-as-n",
            "1:60 nitrate assumed-as-n",
        ]
    );
    assert_eq!(
        log.assumed_as_n,
        [id("total-ammonia"), id("nitrite"), id("nitrate")]
    );
    let units: Vec<&str> = log.columns[0]
        .readings
        .iter()
        .map(|r| r.unit.as_str())
        .collect();
    let expected = [
        "C",
        "pH",
        "mg/L",
        "mg/L as N",
        "mg/L as N",
        "mg/L as N",
        "mg/L as CaCO3",
    ];
    assert_eq!(units, expected);
}

#[test]
fn separators_marks_and_line_ends() {
    for text in [
        "time,ph,note\n2026-03-02 07:30,6.9,\"a, b\"\n",
        "\u{feff}time,ph,note\r\n2026-03-02 07:30,6.9,\"a, b\"\r\n",
        "time;ph;note\n2026-03-02 07:30;6,9;a, b",
        "time\tph\tnote\n2026-03-02 07:30\t6,9\ta, b\n\n",
        "\n\ntime , ph , note\n 2026-03-02 07:30 , 6.9 ,\"a, b\"\n,,\n",
        "\"time\",\"ph\",\"note\"\n\"2026-03-02 07:30\",\"6.9\",\"a, b\"\n",
    ] {
        let log = read(text).unwrap();
        assert_eq!(problems(&log), Vec::<String>::new(), "{text}");
        assert_eq!(series(&log, "ph"), [Some(6.9)], "{text}");
        assert_eq!(log.rows[0].note.as_deref(), Some("a, b"), "{text}");
    }
}

#[test]
fn a_note_may_have_quotes_and_lines() {
    let log = read(
        "time,note,ph\n2026-03-02 07:30,\"said \"\"low\"\"\nand left\",6.9\n2026-03-02 08:30,5\" pipe,7.0\n2026-03-02 09:30,x,7,1\n",
    )
    .unwrap();
    assert_eq!(log.rows[0].note.as_deref(), Some("said \"low\"\nand left"));
    assert_eq!(log.rows[1].note.as_deref(), Some("5\" pipe"));
    assert_eq!((log.rows[0].line, log.rows[1].line), (2, 4));
    assert_eq!(problems(&log), ["5:22 - wrong-cell-count"]);
}

#[test]
fn a_stray_quote_costs_one_row() {
    let log = read("time,note,ph\n2026-03-02 07:30,\"oops,6.9\n2026-03-02 08:30,x,7.0\n2026-03-02 09:30,y,7.1\n").unwrap();
    assert_eq!(problems(&log), ["2:1 - open-quote"]);
    assert_eq!(series(&log, "ph"), [Some(7.0), Some(7.1)]);
    assert_eq!((log.rows_read, log.rows_used), (3, 2));
}

#[test]
fn units_in_brackets() {
    let log = read(
        "time,temperature (F),nitrite (mg/L as NO2),feed (g/day),nitrate (ppm),makeup-water (gal)\n\
         2026-03-02 07:30,86,3.2845,4500,42,<1\n",
    )
    .unwrap();
    let close = |name: &str, expected: f64| {
        let found = series(&log, name)[0].unwrap();
        assert!((found - expected).abs() < 1e-3, "{name}: {found}");
    };
    close("temperature", 30.0);
    close("nitrite", 1.0);
    close("feed", 4.5);
    close("nitrate", 42.0);
    close("makeup-water", 3.785);
    assert_eq!(log.assumed_as_n, [id("nitrate")]);
}

#[test]
fn the_loggers_own_names() {
    let site = good_site(
        "name = \"x\"\n[columns]\n\"Probe 1 pH\" = \"ph\"\n\"Amm (ppm NH4)\" = \"total-ammonia (mg/L as NH4)\"\n\"When\" = \"time\"\n",
    );
    let log = read_at(
        &site,
        "When;Probe 1 pH;Amm (ppm NH4);Salinity\n2026-03-02 07:30;6,9;1,2878;0\n",
    )
    .unwrap();
    assert_eq!(problems(&log), Vec::<String>::new());
    assert_eq!(series(&log, "ph"), [Some(6.9)]);
    assert!((series(&log, "total-ammonia")[0].unwrap() - 1.0).abs() < 1e-3);
    assert_eq!(log.columns[0].readings[1].heading, "Amm (ppm NH4)");
}

#[test]
fn odd_values_are_kept_apart() {
    let log =
        read("time,ph,temperature\n2026-03-02 07:30,71,22\n2026-03-02 08:30,6.9,-2.5\n").unwrap();
    assert_eq!(log.rows[0].odd, [(id("ph"), 71.0)]);
    assert_eq!(series(&log, "ph"), [None, Some(6.9)]);
    assert_eq!(series(&log, "temperature"), [Some(22.0), None]);
    assert_eq!(
        problems(&log),
        ["2:18 ph implausible", "3:22 temperature implausible"]
    );
    assert_eq!(log.rows_refused, 0);
}

#[test]
fn oxygen_that_no_water_holds() {
    // 8.26 mg/L is saturation at 25 C and sea level (Benson & Krause 1984).
    let log =
        read("time,temperature,dissolved-oxygen\n2026-03-02 07:30,25,18\n2026-03-02 08:30,,21\n")
            .unwrap();
    assert_eq!(series(&log, "dissolved-oxygen"), [Some(18.0), None]);
    assert_eq!(log.rows[1].odd, [(id("dissolved-oxygen"), 21.0)]);
    assert_eq!(problems(&log), ["3:1 dissolved-oxygen implausible"]);
}

#[test]
fn percent_of_saturation() {
    let text = "time,temperature,dissolved-oxygen (% saturation)\n\
                2026-03-02 07:30,,90\n2026-03-02 08:30,25,100\n2026-03-02 09:30,,50\n2026-03-03 09:30,,50\n";
    let log = read_at(&good_site("name = \"x\"\nelevation_m = 0\n"), text).unwrap();
    let found = series(&log, "dissolved-oxygen");
    assert_eq!((found[0], found[3]), (None, None));
    assert!((found[1].unwrap() - 8.26).abs() < 0.01, "{found:?}");
    assert!((found[2].unwrap() - 4.13).abs() < 0.01, "{found:?}");
    let column = "dissolved-oxygen (% saturation) needs-temperature";
    assert_eq!(
        problems(&log),
        [format!("2:1 {column}"), format!("5:1 {column}")]
    );
    assert_eq!(log.rows_used, 4);
    let log = read(text).unwrap();
    assert_eq!(
        problems(&log),
        ["1:18 dissolved-oxygen (% saturation) needs-elevation"]
    );
    assert_eq!(log.rows_used, 4);
}

#[test]
fn below_zero_only_where_there_is_such_a_thing() {
    let log = read("time,temperature,redox,air-temperature (F)\n2026-03-02 07:30,-1.5,-200,-4\n")
        .unwrap();
    assert_eq!(series(&log, "temperature"), [Some(-1.5)]);
    assert_eq!(series(&log, "redox"), [Some(-200.0)]);
    assert!((series(&log, "air-temperature")[0].unwrap() + 20.0).abs() < 1e-9);
}

#[test]
fn places_and_people() {
    let site =
        good_site("name = \"x\"\n[[place]]\nname = \"tank 1\"\n[[place]]\nname = \"tank 2\"\n");
    let log = read_at(
        &site,
        "time,place,by,ph\n2026-03-02 07:30,tank 2,Ana,6.9\n2026-03-02 07:30,tnak 1,,7\n2026-03-02 07:31,tnak 1,,7\n2026-03-02 07:32,,,7\n",
    )
    .unwrap();
    assert_eq!(log.places, ["tank 1", "tank 2", "tnak 1"]);
    let found: Vec<Option<PlaceId>> = log.rows.iter().map(|r| r.place).collect();
    assert_eq!(
        found,
        [Some(PlaceId(1)), Some(PlaceId(2)), Some(PlaceId(2)), None]
    );
    assert_eq!(log.rows[0].by.as_deref(), Some("Ana"));
    assert_eq!(problems(&log), ["3:18 place unlisted-place"]);
    assert!(log.problems[0].cure.contains("`tank 1`"));
}

#[test]
fn a_hundred_problems_are_kept_and_all_are_counted() {
    let mut text = "time,ph\n".to_owned();
    for minute in 0..60 {
        text.push_str(&format!(
            "2026-03-02 07:{minute:02},71\n2026-03-02 07:{minute:02},x\n"
        ));
    }
    let mut more = text.clone();
    for _ in 0..60 {
        more.push_str("2026-03-02 09:00,y\n");
    }
    let log = read(text).unwrap();
    assert_eq!((log.problems.len(), log.problem_count), (100, 120));
    assert_eq!((log.rows_used, log.rows_refused), (60, 60));
    // Those that cost a row are all among those kept.
    assert_eq!(
        log.problems
            .iter()
            .filter(|p| p.code == "not-a-number")
            .count(),
        60
    );
    let log = read(more).unwrap();
    assert_eq!((log.problems.len(), log.problem_count), (100, 180));
    assert!(log.problems.iter().all(|p| p.code == "not-a-number"));
}
