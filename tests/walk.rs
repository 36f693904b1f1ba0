//! Simulated attendants over all cases, who answer only what the case knows.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod common;

use std::path::PathBuf;
use std::time::{Duration, Instant};

use common::{folders, read_site, rule_base};
use gillside::assessment::Assessor;
use gillside::diagnosis::Occasion;
use gillside::engine::Engine;
use gillside::fault::Source;
use gillside::history::answers;
use gillside::knowledge::Knowledge;
use gillside::walk::{Attendant, Stop, Walk, kept};

struct Case {
    id: String,
    folder: PathBuf,
    truth: Vec<String>,
    acceptable: Vec<String>,
    urgency: String,
    negative: bool,
}

fn texts(table: &toml::Table, key: &str) -> Vec<String> {
    table
        .get(key)
        .and_then(|v| v.as_array())
        .map_or_else(Vec::new, |a| {
            a.iter()
                .filter_map(|v| v.as_str().map(str::to_owned))
                .collect()
        })
}

fn cases(half: &str) -> Vec<Case> {
    folders(&format!("cases/{half}"))
        .into_iter()
        .map(|folder| {
            let table: toml::Table = std::fs::read_to_string(folder.join("case.toml"))
                .unwrap()
                .parse()
                .unwrap();
            Case {
                id: table["id"].as_str().unwrap().to_owned(),
                truth: texts(&table, "truth"),
                acceptable: texts(&table, "acceptable"),
                urgency: table["urgency"].as_str().unwrap().to_owned(),
                negative: table
                    .get("negative")
                    .and_then(|v| v.as_bool())
                    .unwrap_or(false),
                folder,
            }
        })
        .collect()
}

/// What came of one walk.
struct Walked {
    asked: usize,
    first: bool,
    three: bool,
    first_with_all: bool,
    three_with_all: bool,
    /// Answers (a screen is one) until first aid was shown.
    aid_after: Option<usize>,
    stop: Stop,
    slowest: Duration,
}

/// Whether the right cause leads, and whether it is among the first three.
fn right(knowledge: &Knowledge, case: &Case, walk: &Walk<'_>) -> (bool, bool) {
    let order = walk.review().ranking.order();
    let ids: Vec<&String> = order.iter().map(|c| &knowledge[*c].id).collect();
    let first = ids
        .first()
        .is_some_and(|id| case.truth.contains(id) || case.acceptable.contains(id));
    let rank = ids
        .iter()
        .position(|id| case.truth.contains(id))
        .unwrap_or(usize::MAX);
    (first, rank < 3 || (first && rank < 4))
}

fn go(knowledge: &Knowledge, case: &Case) -> Walked {
    let site = read_site(knowledge, &case.folder);
    let text = std::fs::read_to_string(case.folder.join("answers.toml")).unwrap();
    let source = Source::new("answers.toml", text);
    let (answers, _) = answers::read(&source, &knowledge.vocabulary, &site.timezone);
    let time = answers.time.unwrap_or(1_700_000_000);
    let attendant = Attendant {
        answers: &answers,
        time,
    };
    let assessor = Assessor::new(knowledge, &site, Occasion::Walk);
    let mut walk = Walk::new(assessor, Engine::new(knowledge, &site), time);
    let (mut aid_after, mut slowest) = (None, Duration::ZERO);
    let stop = loop {
        let start = Instant::now();
        let next = walk.next();
        match attendant.turn(&walk, &next) {
            Ok(turn) => walk.take(turn),
            Err(stop) => break stop,
        }
        slowest = slowest.max(start.elapsed());
        if !walk.first_aid().is_empty() {
            aid_after.get_or_insert(walk.turns().len());
        }
    };
    let asked = walk.given().len();
    let (first, three) = right(knowledge, case, &walk);
    attendant.tell_the_rest(&mut walk);
    let (first_with_all, three_with_all) = right(knowledge, case, &walk);
    Walked {
        asked,
        first,
        three,
        first_with_all,
        three_with_all,
        aid_after,
        stop,
        slowest,
    }
}

#[test]
#[allow(clippy::cast_precision_loss)] // a few hundred cases
fn attendants_are_led_to_the_cause() {
    let knowledge = rule_base();
    for half in ["open", "frozen"] {
        let cases = cases(half);
        let walks: Vec<Walked> = cases.iter().map(|c| go(&knowledge, c)).collect();
        let incidents: Vec<&Walked> = cases
            .iter()
            .zip(&walks)
            .filter(|(c, _)| !c.negative)
            .map(|(_, w)| w)
            .collect();
        let share = |right: fn(&Walked) -> bool| {
            100.0 * incidents.iter().filter(|w| right(w)).count() as f64 / incidents.len() as f64
        };
        let mut asked: Vec<usize> = walks.iter().map(|w| w.asked).collect();
        asked.sort_unstable();
        let (median, most) = (asked[asked.len() / 2], *asked.last().unwrap());
        let mut to_right: Vec<usize> = incidents
            .iter()
            .filter(|w| w.first)
            .map(|w| w.asked)
            .collect();
        to_right.sort_unstable();
        let stops = |which: fn(Stop) -> bool| walks.iter().filter(|w| which(w.stop)).count();
        let (three, three_with_all) = (share(|w| w.three), share(|w| w.three_with_all));
        println!(
            "{half}: {} walks, {} incidents; questions: median {median}, most {most} (median {} where the right cause leads)\n  \
             at the stop top-1 {:.1} %, top-3 {three:.1} %; with every answer top-1 {:.1} %, top-3 {three_with_all:.1} %\n  \
             stops: stands out {}, same steps {}, nothing worth asking {}, enough asked {}; slowest question {:?}",
            walks.len(),
            incidents.len(),
            to_right[to_right.len() / 2],
            share(|w| w.first),
            share(|w| w.first_with_all),
            stops(|s| matches!(s, Stop::StandsOut(_))),
            stops(|s| s == Stop::SameSteps),
            stops(|s| s == Stop::NothingWorthAsking),
            stops(|s| s == Stop::EnoughAsked),
            walks.iter().map(|w| w.slowest).max().unwrap(),
        );
        let late = cases
            .iter()
            .zip(&walks)
            .filter(|(c, _)| c.urgency == "minutes");
        let late = late
            .filter(|(_, w)| w.aid_after.is_none_or(|after| after > 2))
            .count();
        assert!(median <= 7, "{half}: the median walk asks {median}");
        assert!(most <= 15, "{half}: the longest walk asks {most}");
        assert_eq!(late, 0, "{half}: first aid comes late");
        if half == "open" {
            assert!(
                three >= three_with_all - 2.0,
                "top-3 {three:.1} % at the stop, {three_with_all:.1} % with every answer"
            );
        }
    }
}

#[test]
fn going_back_leaves_nothing_behind() {
    let knowledge = rule_base();
    for case in cases("open").iter().take(12) {
        let site = read_site(&knowledge, &case.folder);
        let text = std::fs::read_to_string(case.folder.join("answers.toml")).unwrap();
        let (answers, _) = answers::read(
            &Source::new("a", text),
            &knowledge.vocabulary,
            &site.timezone,
        );
        let attendant = Attendant {
            answers: &answers,
            time: 1_700_000_000,
        };
        let assessor = Assessor::new(&knowledge, &site, Occasion::Walk);
        let mut walk = Walk::new(assessor, Engine::new(&knowledge, &site), 1_700_000_000);
        let mut seen = vec![walk.review().ranking.causes.clone()];
        while let Ok(turn) = attendant.turn(&walk, &walk.next()) {
            walk.take(turn);
            seen.push(walk.review().ranking.causes.clone());
        }
        assert!(seen.len() > 2);
        seen.pop();
        while let Some(before) = seen.pop() {
            walk.back().unwrap();
            assert_eq!(walk.review().ranking.causes, before, "{}", case.id);
        }
        assert!(walk.back().is_none());
    }
}

#[test]
fn a_walk_on_file_comes_back_as_it_was() {
    let knowledge = rule_base();
    for case in cases("open").iter().take(12) {
        let site = read_site(&knowledge, &case.folder);
        let text = std::fs::read_to_string(case.folder.join("answers.toml")).unwrap();
        let (answers, _) = answers::read(
            &Source::new("a", text),
            &knowledge.vocabulary,
            &site.timezone,
        );
        let attendant = Attendant {
            answers: &answers,
            time: 1_700_000_000,
        };
        let make = || {
            Walk::new(
                Assessor::new(&knowledge, &site, Occasion::Walk),
                Engine::new(&knowledge, &site),
                1_700_000_000,
            )
        };
        let mut walk = make();
        attendant.walk(&mut walk);
        attendant.tell_the_rest(&mut walk);
        let text = kept::write(&knowledge.vocabulary, 1_700_000_000, walk.turns()).unwrap();
        let (started, turns) = kept::read(&knowledge.vocabulary, &text)
            .unwrap_or_else(|e| panic!("{}: {e}\n{text}", case.id));
        assert_eq!(started, 1_700_000_000);
        let mut again = make();
        again.take_all(turns);
        assert_eq!(
            again.review().ranking.causes,
            walk.review().ranking.causes,
            "{}",
            case.id
        );
    }
    assert!(kept::read(&knowledge.vocabulary, "started = 3").is_err());
    assert!(
        kept::read(
            &knowledge.vocabulary,
            "started = \"2026-03-01T00:00:00Z\"\nlater = 1"
        )
        .is_err()
    );
}
