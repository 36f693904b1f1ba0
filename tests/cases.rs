//! Incidents with a known cause, as files: `tests/cases/open` is what the rules are tuned on, `tests/cases/frozen` was
//! written from the sources by people who had not read the rules and is only ever counted. The two halves are reported
//! apart, and only the frozen half is evidence.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::fmt::Write as _;
use std::path::{Path, PathBuf};

use gillside::assessment::Assessor;
use gillside::diagnosis::{Occasion, Verdict};
use gillside::engine::Engine;
use gillside::fault::Source;
use gillside::history::answers::{self, Happened};
use gillside::history::log::{Input, Row, Value};
use gillside::knowledge::{self, Knowledge};
use gillside::site::{self, Known, Site};

fn rule_base() -> Knowledge {
    let mut k = rule_base0();
    for kv in std::env::var("TUNE")
        .unwrap_or_default()
        .split(',')
        .filter(|s| !s.is_empty())
    {
        let (key, v) = kv.split_once('=').unwrap();
        let v: f64 = v.parse().unwrap();
        match key {
            "evidence" => k.scales.evidence = v,
            "second" => k.scales.second_cause = v,
            "triggers" => k.scales.triggers = v,
            "review" => k.scales.incident_review = v,
            "walk" => k.scales.incident_walk = v,
            "event" => k.scales.event_not_noted = v,
            "seen" => {
                for c in &mut k.causes {
                    for e in &mut c.effects {
                        e.seen_in = e.seen_in.clamp(v, 1.0 - v);
                    }
                }
            }
            "bg" => {
                for f in &mut k.findings {
                    f.background = f.background.clamp(v, 1.0 - v);
                }
            }
            _ => panic!(),
        }
    }
    k
}

fn rule_base0() -> Knowledge {
    let faults = |f: Vec<gillside::fault::Fault>| {
        f.iter()
            .map(ToString::to_string)
            .collect::<Vec<_>>()
            .join("\n")
    };
    knowledge::load(&knowledge::embedded(), &[]).unwrap_or_else(|f| panic!("{}", faults(f)))
}

struct Case {
    id: String,
    folder: PathBuf,
    truth: Vec<String>,
    acceptable: Vec<String>,
    urgency: String,
    verdicts_ok: Vec<String>,
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
    let root = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/cases")
        .join(half);
    let mut folders: Vec<PathBuf> = std::fs::read_dir(root)
        .unwrap()
        .map(|e| e.unwrap().path())
        .collect();
    folders.sort();
    folders
        .into_iter()
        .map(|folder| {
            let text = std::fs::read_to_string(folder.join("case.toml")).unwrap();
            let table: toml::Table = text.parse().unwrap();
            Case {
                id: table["id"].as_str().unwrap().to_owned(),
                truth: texts(&table, "truth"),
                acceptable: texts(&table, "acceptable"),
                urgency: table["urgency"].as_str().unwrap().to_owned(),
                verdicts_ok: texts(&table, "verdicts_ok"),
                negative: table
                    .get("negative")
                    .and_then(|v| v.as_bool())
                    .unwrap_or(false),
                folder,
            }
        })
        .collect()
}

fn read_site(knowledge: &Knowledge, folder: &Path) -> Site {
    let species: Vec<String> = knowledge.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = knowledge.media.iter().map(|s| s.id.clone()).collect();
    let known = Known {
        vocabulary: &knowledge.vocabulary,
        species: &species,
        media: &media,
    };
    let (site, faults) = site::load(&folder.join("site.toml"), &known);
    assert!(faults.is_empty(), "{}: {faults:?}", folder.display());
    site
}

/// What the program says of one case.
struct Outcome {
    causes: Vec<(String, f64)>,
    nothing: f64,
    verdict: Verdict,
    detail: String,
}

fn outcome(assessor: &Assessor<'_>, engine: &Engine<'_>, last: i64) -> Outcome {
    // Ties the engine's lifetime to the assessor's knowledge, which it was made from.
    let assessment = assessor.assess(engine, &[], Some(last));
    let mut detail = String::new();
    if std::env::var_os("CASE").is_some() {
        for c in assessment.causes.iter().take(5) {
            let _ = writeln!(detail, "  {:.3} {}", c.probability, c.id);
            for p in c.evidence_for.iter().take(9) {
                let _ = writeln!(
                    detail,
                    "      {:+.2} {}{} {:?}",
                    p.weight,
                    if p.absent { "NOT " } else { "" },
                    p.clause,
                    p.saw
                );
            }
            for p in c.evidence_against.iter().take(9) {
                let _ = writeln!(
                    detail,
                    "      {:+.2} {}{} {:?}",
                    p.weight,
                    if p.absent { "NOT " } else { "" },
                    p.clause,
                    p.saw
                );
            }
        }
        for s in &assessment.first_aid {
            let _ = writeln!(detail, "  FIRST AID {}", s.id);
        }
        for s in &assessment.steps {
            let _ = writeln!(
                detail,
                "  step {:?} {} {:.2} {:?}",
                s.when, s.id, s.worth, s.check_first
            );
        }
        for s in &assessment.avoid {
            let _ = writeln!(detail, "  avoid {} {:.2}", s.id, s.harm);
        }
        for s in &assessment.derived {
            let _ = writeln!(detail, "  derived {} {:.3}", s.id, s.value);
        }
        let _ = writeln!(
            detail,
            "  dangers {:?} family {:?}",
            assessment.dangers, assessment.leading_family
        );
    }
    Outcome {
        causes: assessment
            .causes
            .iter()
            .map(|c| (c.id.clone(), c.probability))
            .collect(),
        nothing: assessment.nothing_wrong,
        verdict: assessment.verdict,
        detail,
    }
}

fn from_log(knowledge: &Knowledge, case: &Case) -> Outcome {
    let site = read_site(knowledge, &case.folder);
    let path = case.folder.join("log.csv");
    let input = Input::named(path.to_str().unwrap());
    let log = gillside::history::log::read(vec![input], &knowledge.vocabulary, &site, None)
        .unwrap_or_else(|f| panic!("{}: {f:?}", case.id));
    for problem in &log.problems {
        if problem.effect != gillside::history::log::Effect::Noted {
            eprintln!("{}: {problem}", case.id);
        }
    }
    let mut engine = Engine::new(knowledge, &site);
    if log.rows.iter().any(|r| !r.events.is_empty()) {
        engine.tell(gillside::history::memory::Memory::keeps_events);
    }
    for row in &log.rows {
        engine.observe(row);
    }
    let assessor = Assessor::new(knowledge, &site, Occasion::Review);
    let last = log.rows.last().map_or(0, |r| r.time);
    outcome(&assessor, &engine, last)
}

fn from_answers(knowledge: &Knowledge, case: &Case) -> Outcome {
    let site = read_site(knowledge, &case.folder);
    let text = std::fs::read_to_string(case.folder.join("answers.toml")).unwrap();
    let source = Source::new(format!("{}/answers.toml", case.id), text);
    let (answers, faults) = answers::read(&source, &knowledge.vocabulary, &site.timezone);
    for fault in faults {
        eprintln!("{fault}");
    }
    let now = answers.time.unwrap_or(1_700_000_000);
    let mut row = Row {
        time: now,
        ..Row::default()
    };
    row.values = answers
        .readings
        .iter()
        .map(|(id, amount)| {
            (
                *id,
                Value {
                    amount: *amount,
                    below: false,
                },
            )
        })
        .collect();
    row.signs = answers.signs;
    let mut engine = Engine::new(knowledge, &site);
    engine.observe(&row);
    engine.tell(|memory| {
        let mut events: Vec<_> = answers
            .events
            .iter()
            .map(|(id, happened)| match happened {
                Happened::Ago(age) => (Some(now - age), *id),
                Happened::At(time) => (Some(*time), *id),
                Happened::Never => (None, *id),
            })
            .collect();
        events.sort();
        for (time, id) in events {
            match time {
                Some(time) => memory.happened(id, time),
                None => memory.did_not_happen(id, i64::MIN / 2),
            }
        }
    });
    let assessor = Assessor::new(knowledge, &site, Occasion::Walk);
    outcome(&assessor, &engine, now)
}

#[derive(Default)]
struct Score {
    incidents: usize,
    top1: usize,
    top3: usize,
    verdicts: usize,
    all: usize,
    urgent_missed: Vec<String>,
    false_alarms: Vec<String>,
    bins: Vec<(f64, bool)>,
}

fn judge(case: &Case, outcome: &Outcome, score: &mut Score, verbose: bool) {
    score.all += 1;
    let rank = outcome
        .causes
        .iter()
        .position(|(id, _)| case.truth.contains(id));
    let first_ok = |id: &String| case.truth.contains(id) || case.acceptable.contains(id);
    let verdict_ok = case.verdicts_ok.iter().any(|v| v == outcome.verdict.word());
    score.verdicts += usize::from(verdict_ok);
    if case.negative {
        if outcome.verdict > Verdict::Watch {
            score.false_alarms.push(case.id.clone());
        }
    } else {
        score.incidents += 1;
        let led = outcome.causes.first().is_some_and(|(id, _)| first_ok(id));
        score.top1 += usize::from(led);
        score.top3 +=
            usize::from(rank.is_some_and(|r| r < 3) || (led && rank.is_some_and(|r| r < 4)));
        let least = match case.urgency.as_str() {
            "minutes" => Verdict::ActNow,
            "hours" => Verdict::ActToday,
            _ => Verdict::Steady,
        };
        if outcome.verdict < least {
            score.urgent_missed.push(case.id.clone());
        }
    }
    for (id, probability) in &outcome.causes {
        score.bins.push((
            *probability,
            case.truth.contains(id)
                || (case.acceptable.contains(id)
                    && outcome.causes.first().is_some_and(|f| f.0 == *id)),
        ));
    }
    let wrong = if case.negative {
        outcome.verdict > Verdict::Watch
    } else {
        rank != Some(0)
    };
    if verbose && (wrong || !verdict_ok || std::env::var_os("CASE").is_some()) {
        let shown: Vec<String> = outcome
            .causes
            .iter()
            .take(4)
            .map(|(id, p)| format!("{id} {p:.2}"))
            .collect();
        println!(
            "{:<50} truth {:?} rank {:?} {} (ok {:?}) | none {:.2} | {}",
            case.id,
            case.truth,
            rank.map(|r| r + 1),
            outcome.verdict.word(),
            case.verdicts_ok,
            outcome.nothing,
            shown.join(", ")
        );
        print!("{}", outcome.detail);
    }
}

#[allow(clippy::cast_precision_loss)]
fn report(name: &str, score: &Score) -> (f64, f64) {
    let share = |n: usize, of: usize| {
        if of == 0 {
            0.0
        } else {
            100.0 * n as f64 / of as f64
        }
    };
    let (top1, top3) = (
        share(score.top1, score.incidents),
        share(score.top3, score.incidents),
    );
    println!(
        "{name}: {} cases, {} incidents; top-1 {top1:.1} %, top-3 {top3:.1} %, verdict in the accepted list {:.1} %",
        score.all,
        score.incidents,
        share(score.verdicts, score.all)
    );
    println!(
        "  urgent ones below their verdict: {:?}",
        score.urgent_missed
    );
    println!("  false alarms: {:?}", score.false_alarms);
    (top1, top3)
}

/// Expected calibration error over ten bins, and the table.
#[allow(
    clippy::cast_precision_loss,
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss
)]
fn reliability(bins: &[(f64, bool)]) -> f64 {
    let mut table = [(0usize, 0.0f64, 0usize); 10];
    for (p, hit) in bins {
        let bin = ((p * 10.0) as usize).min(9);
        table[bin].0 += 1;
        table[bin].1 += p;
        table[bin].2 += usize::from(*hit);
    }
    println!("  stated      n   mean  right");
    let mut error = 0.0;
    for (i, (n, sum, hits)) in table.iter().enumerate() {
        if *n == 0 {
            continue;
        }
        let (mean, right) = (sum / *n as f64, *hits as f64 / *n as f64);
        println!(
            "  {:.1}-{:.1} {n:>7}  {mean:.2}   {right:.2}",
            i as f64 / 10.0,
            (i + 1) as f64 / 10.0
        );
        error += (mean - right).abs() * *n as f64 / bins.len() as f64;
    }
    println!("  expected calibration error {error:.3}");
    error
}

#[test]
fn cases_lead_to_their_causes() {
    let knowledge = rule_base();
    let only = std::env::var("CASE").ok();
    for half in ["open", "frozen"] {
        let verbose = half == "open" || std::env::var_os("SHOW_FROZEN").is_some();
        for (how, run) in [
            ("review", from_log as fn(&Knowledge, &Case) -> Outcome),
            ("answers", from_answers),
        ] {
            let mut score = Score::default();
            for case in cases(half) {
                if only.as_ref().is_some_and(|o| !case.id.contains(o.as_str())) {
                    continue;
                }
                if only.is_none() && std::env::var("HOW").is_ok_and(|h| h != how) {
                    continue;
                }
                let outcome = run(&knowledge, &case);
                judge(&case, &outcome, &mut score, verbose);
            }
            report(&format!("{half} half, {how}"), &score);
            reliability(&score.bins);
        }
    }
}
