//! `gillside record`: nothing is lost and nothing half-written, whatever happens.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod farm;

use std::collections::BTreeSet;
use std::io::Write;
use std::process::{Command, Stdio};
use std::thread::sleep;
use std::time::Instant;

use farm::{Came, Farm, HEAD, SITE, came, two_weeks};

fn farm() -> Farm {
    let mut farm = Farm::with(&[("site.toml", SITE), ("log.csv", &two_weeks())]);
    farm.at("2026-03-02 07:30");
    farm
}

/// The cells of the last row under their headings, empty ones left out.
fn last_row(farm: &Farm) -> Vec<(String, String)> {
    let log = farm.read("log.csv");
    let mut reader = csv::Reader::from_reader(log.as_bytes());
    let head = reader.headers().unwrap().clone();
    let last = reader.records().last().unwrap().unwrap();
    let cells = head.iter().zip(last.iter());
    cells
        .filter(|(_, cell)| !cell.is_empty())
        .map(|(h, c)| (h.to_owned(), c.to_owned()))
        .collect()
}

fn cells(pairs: &[(&str, &str)]) -> Vec<(String, String)> {
    pairs
        .iter()
        .map(|(h, c)| ((*h).to_owned(), (*c).to_owned()))
        .collect()
}

fn refused(came: &Came, status: i32, part: &str) {
    assert_eq!(came.status, status, "{came:?}");
    assert_eq!(came.out, "", "{came:?}");
    assert!(came.err.contains(part), "{part} is not in {}", came.err);
}

#[test]
fn a_row_goes_into_the_columns_that_there_are() {
    let farm = farm();
    let before = farm.read("log.csv");
    let said = farm.does(&[
        "record",
        "ph=6.4",
        "nitrite=0.99mg/L as NO2",
        "temperature=70F",
        "sign=fish-off-feed;!fish-gasping",
        "event=feed-stopped",
        "note=two, \"fat\" ones jumped",
        "by=Ines",
        "done=air-round",
    ]);
    assert_eq!(
        last_row(&farm),
        cells(&[
            ("time", "2026-03-02 07:30"),
            ("temperature", "21.1111"),
            ("ph", "6.4"),
            // 0.99 x 14.007 / 46.005, the masses of N and NO2
            ("nitrite (mg/L as N)", "0.301422"),
            ("event", "feed-stopped"),
            ("sign", "fish-off-feed;!fish-gasping"),
            ("by", "Ines"),
            ("note", "done: air-round; two, \"fat\" ones jumped"),
        ])
    );
    assert!(
        farm.read("log.csv").starts_with(&before),
        "older rows are untouched"
    );
    assert!(
        said.contains("pH 6.40: down by 0.42 from 6.82 on Mar 1, 17:00"),
        "{said}"
    );
}

#[test]
fn a_new_reading_gets_a_column_and_every_row_an_empty_cell() {
    let farm = farm();
    farm.does(&["record", "iron=1.2", "makeup-water=10gal"]);
    let log = farm.read("log.csv");
    assert!(
        log.lines()
            .next()
            .unwrap()
            .ends_with("note,iron,makeup-water")
    );
    let commas: BTreeSet<usize> = log.lines().map(|l| l.matches(',').count()).collect();
    assert_eq!(
        commas,
        BTreeSet::from([15]),
        "one number of cells in all rows"
    );
    let review = farm.json(&["review"]);
    assert_eq!(
        (
            review["log"]["rows_used"].as_u64(),
            review["log"]["rows_refused"].as_u64()
        ),
        (Some(29), Some(0))
    );
    assert_eq!(
        last_row(&farm)[2],
        ("makeup-water".to_owned(), "37.8541".to_owned())
    );
}

#[test]
fn a_log_is_begun_where_there_is_none() {
    let mut farm = Farm::with(&[(
        "site.toml",
        "name = \"New\"\nlog = \"log.csv\"\nunits = \"us\"\n",
    )]);
    farm.at("2026-03-02 07:30");
    let said = farm.does(&["record", "temperature=75", "nitrite=0.1", "by=Rui"]);
    assert_eq!(
        farm.read("log.csv"),
        "time,temperature (F),nitrite (mg/L as N),by\n2026-03-02 07:30,75,0.1,Rui\n"
    );
    assert!(said.contains("a new log"), "{said}");
}

#[test]
fn other_logs_keep_their_ways() {
    for (log, args, made) in [
        (
            "time;ph;note\r\n2026-03-01 07:00;6,8;\r\n",
            ["ph=6.45", "note=a;b"],
            "time;ph;note\r\n2026-03-01 07:00;6,8;\r\n2026-03-02 07:30;6,45;\"a;b\"\r\n",
        ),
        (
            "\u{feff}time\tph\n2026-03-01 07:00\t6.8",
            ["ph=6.4", "by=Ines"],
            "\u{feff}time\tph\tby\n2026-03-01 07:00\t6.8\t\n2026-03-02 07:30\t6.4\tInes\n",
        ),
        (
            "time,note,ph\n2026-03-01 07:00,\"two\nlines, \"\"so\"\"\",6.8\n",
            ["ph=6.4", "by=Ines"],
            "time,note,ph,by\n2026-03-01 07:00,\"two\nlines, \"\"so\"\"\",6.8,\n2026-03-02 07:30,,6.4,Ines\n",
        ),
        (
            "{\"time\":\"2026-03-01 07:00\",\"ph\":6.8}\n",
            ["ph=6.4", "by=Ines"],
            "{\"time\":\"2026-03-01 07:00\",\"ph\":6.8}\n{\"time\":\"2026-03-02 07:30\",\"ph\":6.4,\"by\":\"Ines\"}\n",
        ),
    ] {
        let farm = farm();
        farm.write("log.csv", log);
        farm.does(&["record", args[0], args[1]]);
        assert_eq!(farm.read("log.csv"), made);
    }
}

#[test]
fn a_row_of_an_earlier_hour_goes_where_its_time_belongs() {
    let farm = farm();
    farm.does(&["record", "time=2026-03-01 12:00", "ph=6.7"]);
    let log = farm.read("log.csv");
    let times: Vec<&str> = log.lines().skip(1).map(|l| &l[..16]).collect();
    assert!(times.is_sorted(), "{times:?}");
    assert_eq!(farm.json(&["review"])["log"]["rows_refused"], 0);
}

#[test]
fn a_correction_names_the_wrong_row() {
    let farm = farm();
    farm.does(&["record", "corrects=2026-03-01 17:00", "ph=6.9", "by=Ines"]);
    assert!(last_row(&farm).contains(&("corrects".to_owned(), "2026-03-01 17:00".to_owned())));
    let review = farm.json(&["review"]);
    assert_eq!(
        review["last_row"], "2026-03-01T17:00:00Z",
        "a correction is no new row"
    );
    let came = farm.run(&["record", "corrects=2026-03-01 17:01", "ph=6.9"]);
    refused(&came, 3, "no earlier row at 2026-03-01 17:01");
}

#[test]
fn what_can_not_be_is_refused_with_its_reason() {
    let farm = farm();
    let before = farm.read("log.csv");
    for (args, part) in [
        (&["ph=64"][..], "pH 64 is outside of what water shows ("),
        (
            &["temperature=72"],
            "if it is in F, write `temperature=72F`",
        ),
        (&["nitrite=-1"], "outside of what water shows"),
        (&["nitrite=0,3"], "write a decimal point"),
        (&["nitrit=0.3"], "did you mean `nitrite`?"),
        (&["brown-gills=yes"], "write it as `sign=brown-gills`"),
        (
            &["un-ionized-ammonia=0.1"],
            "worked out from other readings",
        ),
        (&["nitrite=0.3 furlong"], "it takes mg/L as N"),
        (&["nitrite=nan"], "is not a number"),
        (&["ph"], "is not key=value"),
        (&["ph=6.4", "ph=6.5"], "given twice"),
        (&["ph="], "nothing stands behind"),
        (&["time=2026-03-03 07:30", "ph=6.4"], "later than now"),
        (&["place=tank 9", "ph=6.4"], "did you mean `tank 1`?"),
        (&["sign=!brown-gills;brown-gills"], "there and not there"),
        (&["done=air"], "no round is called `air`"),
    ] {
        let all: Vec<&str> = ["record"].iter().chain(args).copied().collect();
        refused(&farm.run(&all), 3, part);
    }
    refused(&farm.run(&["record"]), 2, "there is no terminal to ask at");
    assert_eq!(farm.read("log.csv"), before);
}

#[test]
fn a_value_that_needs_action_is_warned_of_at_once() {
    let farm = farm();
    farm.does(&[
        "record",
        "dissolved-oxygen=2.0",
        "temperature=24",
        "sign=fish-gasping;fish-at-inflow;weak-aeration",
    ]);
    let said = farm.does(&[
        "record",
        "dissolved-oxygen=1.8",
        "sign=fish-gasping;weak-aeration",
    ]);
    assert!(said.contains("ACT NOW"), "{said}");
    assert!(said.contains("FIRST AID, BEFORE ANYTHING ELSE"), "{said}");
    let told = farm.json(&["record", "dissolved-oxygen=1.7"]);
    assert_eq!(told["verdict"], "act-now");
    let first: Vec<&str> = told["first"]
        .as_array()
        .unwrap()
        .iter()
        .map(|s| s["id"].as_str().unwrap())
        .collect();
    assert!(first.contains(&"air-on-full"), "{first:?}");
}

#[test]
fn a_form_is_made_filled_in_and_taken_back() {
    let mut farm = farm();
    // Four days after the last row: everything that is read every few days is due.
    farm.at("2026-03-05 07:30");
    let form = farm.does(&["shift", "--shift", "early", "--form"]);
    let mut filled = String::new();
    for line in form.lines() {
        let value = match line.split(',').next().unwrap() {
            "by" => "Ines",
            "ph" => "6.75",
            "total-ammonia" => "0.25",
            "dissolved-oxygen" => "6.6",
            "round:air-round" | "round:quiet-look" => "x",
            "note" => "all quiet",
            _ => "",
        };
        filled.push_str(&format!("{line}{value}\n"));
    }
    assert_ne!(form, filled);
    farm.write("form.csv", &filled);
    farm.does(&["record", "--form", "form.csv"]);
    let log = farm.read("log.csv");
    let new: Vec<&str> = log
        .lines()
        .filter(|l| l.starts_with("2026-03-05 07:30"))
        .collect();
    assert_eq!(new.len(), 2, "oxygen has a place of its own: {new:?}");
    assert!(
        log.contains("done: quiet-look air-round; all quiet"),
        "{log}"
    );
    let list = farm.does(&["shift", "--shift", "early"]);
    assert!(
        !list.contains("Sound of the blower"),
        "what was done is not due again"
    );
    refused(
        &farm.run(&["record", "--form", "site.toml"]),
        3,
        "no columns `item` and `value`",
    );
    farm.write("form.csv", &filled.replace("6.75", "67.5"));
    refused(
        &farm.run(&["record", "--form", "form.csv"]),
        3,
        "outside of what water shows",
    );
    assert_eq!(farm.read("log.csv"), log);
}

#[test]
fn two_at_once_are_both_written() {
    let farm = farm();
    let many: Vec<_> = (0..12)
        .map(|n| {
            // Half of them bring a column of their own.
            let more = if n % 2 == 0 { "iron=1" } else { "potassium=30" };
            farm.command(&["record", &format!("note=row-{n}"), more])
                .spawn()
                .unwrap()
        })
        .collect();
    for child in many {
        let came = came(child.wait_with_output().unwrap());
        assert_eq!(came.status, 0, "{came:?}");
    }
    let log = farm.read("log.csv");
    for n in 0..12 {
        assert_eq!(
            log.matches(&format!("row-{n},")).count(),
            1,
            "row-{n} in\n{log}"
        );
    }
    let review = farm.json(&["review"]);
    assert_eq!(
        (
            review["log"]["rows_used"].as_u64(),
            review["log"]["rows_refused"].as_u64()
        ),
        (Some(40), Some(0))
    );
}

/// Killed at random points: after each the log is as it was, or has the whole new row. `GILLSIDE_KILLS` sets how often.
#[test]
fn killed_at_any_point_nothing_is_lost_or_half_written() {
    let kills: u32 = std::env::var("GILLSIDE_KILLS")
        .ok()
        .and_then(|n| n.parse().ok())
        .unwrap_or(220);
    let farm = farm();
    let begun = Instant::now();
    farm.does(&["record", "note=how long it takes"]);
    let mut usual = begun.elapsed();
    let mut random: u64 = 0x9e37_79b9_7f4a_7c15;
    let (mut whole, mut none) = (0, 0);
    for n in 0..kills {
        let before = farm.read("log.csv");
        // Every eighth brings a column that is new, so that the head is written anew as well.
        let column =
            ["iron", "copper", "zinc", "hardness", "sodium", "redox"][(n as usize / 8) % 6];
        let more = format!("{column}=1");
        let note = format!("note=kill-{n}");
        let args: &[&str] = if n % 8 == 0 {
            &["record", &note, &more]
        } else {
            &["record", &note]
        };
        let mut child = farm
            .command(args)
            .stdout(Stdio::null())
            .stderr(Stdio::null())
            .spawn()
            .unwrap();
        random = random
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        let share = u32::try_from(random >> 40).unwrap() % 1300;
        let begun = Instant::now();
        sleep(usual * share / 1000);
        child.kill().unwrap();
        if child.wait().unwrap().success() {
            usual = (usual * 9 + begun.elapsed()) / 10;
        }
        let after = farm.read("log.csv");
        if after == before {
            none += 1;
            continue;
        }
        whole += 1;
        let mark = format!("kill-{n}");
        let last = after.lines().last().unwrap();
        assert!(after.ends_with('\n') && last.contains(&mark), "{last}");
        let (old, new): (Vec<&str>, Vec<&str>) =
            (before.lines().collect(), after.lines().collect());
        assert_eq!(new.len(), old.len() + 1);
        for (was, is) in old.iter().zip(&new) {
            assert!(is.starts_with(was), "{was} became {is}");
        }
        let counts: BTreeSet<usize> = new.iter().map(|l| l.matches(',').count()).collect();
        assert_eq!(counts.len(), 1, "all rows have as many cells as the head");
    }
    assert!(
        whole > 0 && none > 0,
        "killed too early or too late to tell: {none} without, {whole} with the row"
    );
    farm.does(&["record", "note=goes on"]);
    let review = farm.json(&["review"]);
    assert_eq!(review["log"]["rows_refused"], 0);
    let hidden: Vec<_> = std::fs::read_dir(farm.path("."))
        .unwrap()
        .map(|e| e.unwrap().file_name())
        .collect();
    assert!(
        !hidden.iter().any(|n| n.to_string_lossy().ends_with(".new")),
        "no litter: {hidden:?}"
    );
}

/// A file may not grow beyond so many blocks: what a full disk does to a write, without being root.
#[cfg(unix)]
#[test]
fn a_full_disk_leaves_the_log_as_it_was() {
    let farm = farm();
    let mut log = two_weeks();
    // Larger than the limit below, so that the new file does not fit.
    log.insert_str(
        HEAD.len(),
        &format!("2026-02-01 07:30,,,,,,,,,,,,,{}\n", "x".repeat(9_000)),
    );
    for n in 0..8 {
        log.insert_str(
            HEAD.len(),
            &format!(
                "2026-01-0{} 07:30,,,,,,,,,,,,,{}\n",
                8 - n,
                "x".repeat(9_000)
            ),
        );
    }
    farm.write("log.csv", &log);
    let limited = |signal: &str| {
        let program = env!("CARGO_BIN_EXE_gillside");
        let script = format!(
            "{signal} ulimit -f 16; exec {program} record ph=6.4 --clock '2026-03-02 07:30'"
        );
        came(
            Command::new("sh")
                .args(["-c", &script])
                .current_dir(farm.path("."))
                .output()
                .unwrap(),
        )
    };
    let told = limited("trap '' XFSZ;");
    refused(&told, 1, "was left as it was");
    assert!(told.err.contains("make room on the disk"), "{}", told.err);
    assert_eq!(farm.read("log.csv"), log);
    assert!(!farm.path(".log.csv.new").exists(), "no litter");
    // Where the system kills the writer instead, the log is as it was, too, and the next writer goes on.
    let killed = limited("");
    assert_ne!(killed.status, 0);
    assert_eq!(farm.read("log.csv"), log);
    farm.does(&["record", "ph=6.4"]);
    assert!(farm.read("log.csv").starts_with(&log));
}

/// Standard output that is full: the row is in the log, and the failure is told.
#[cfg(target_os = "linux")]
#[test]
fn an_answer_that_can_not_be_written_is_told() {
    let farm = farm();
    let full = std::fs::OpenOptions::new()
        .write(true)
        .open("/dev/full")
        .unwrap();
    let output = farm
        .command(&["record", "ph=6.4"])
        .stdout(full)
        .output()
        .unwrap();
    assert_eq!(output.status.code(), Some(1));
    assert!(farm.read("log.csv").contains("2026-03-02 07:30,,6.4"));
}

#[cfg(unix)]
#[test]
fn where_nothing_may_be_written_it_is_said() {
    use std::os::unix::fs::PermissionsExt;
    let farm = farm();
    let set = |name: &str, mode| {
        std::fs::set_permissions(farm.path(name), std::fs::Permissions::from_mode(mode)).unwrap()
    };
    set("log.csv", 0o444);
    refused(&farm.run(&["record", "ph=6.4"]), 1, "write-protected");
    set("log.csv", 0o644);
    // The superuser may write in any folder of a disk, but not in the system's own tables.
    let mut folder = farm.path(".");
    set(".", 0o555);
    if std::fs::File::create(farm.path("probe")).is_ok() {
        folder = "/proc/self".into();
    }
    let log = folder.join("log.csv").display().to_string();
    let came = farm.run(&["record", "ph=6.4", "--log", &log]);
    set(".", 0o755);
    refused(&came, 1, "was left as it was");
    refused(
        &farm.run(&["record", "ph=6.4", "--log", "nowhere/log.csv"]),
        1,
        "make the folder first",
    );
    refused(
        &farm.run(&["record", "ph=6.4", "--log", "."]),
        3,
        "no ordinary file",
    );
}

#[test]
fn a_log_that_can_not_be_read_is_not_added_to() {
    for (log, part) in [
        ("ph,temperature\n6.8,22\n", "no `time` column"),
        ("time,nitrite (furlong)\n", "furlong"),
    ] {
        let farm = farm();
        farm.write("log.csv", log);
        refused(&farm.run(&["record", "ph=6.4"]), 3, part);
        assert_eq!(farm.read("log.csv"), log);
    }
    let farm = farm();
    std::fs::File::create(farm.path("log.csv"))
        .unwrap()
        .write_all(b"time,ph\n\xff\xfe\n")
        .unwrap();
    refused(&farm.run(&["record", "ph=6.4"]), 3, "not UTF-8");
}
