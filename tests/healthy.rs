//! Whole logs of farms with nothing wrong (simulated, not field data), replayed row by row: never more than `watch`, and
//! the backgrounds of the rule base are what these logs show.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod common;

use std::collections::BTreeMap;

use common::{engine, folders, read_log, read_site, rule_base};
use gillside::assessment::Assessor;
use gillside::diagnosis::{Occasion, Verdict};
use gillside::engine::{Measured, measure};

#[test]
fn no_alarm_at_any_row() {
    let knowledge = rule_base();
    let mut alarms = 0;
    let mut rows = 0;
    let mut steady = 0;
    let mut by_cause: BTreeMap<String, usize> = BTreeMap::new();
    for folder in folders("healthy") {
        let site = read_site(&knowledge, &folder);
        let log = read_log(&knowledge, &folder, &site);
        let mut engine = engine(&knowledge, &site, &log);
        let assessor = Assessor::new(&knowledge, &site, Occasion::Review);
        let mut version = u64::MAX;
        let mut verdict = Verdict::Steady;
        let mut farm_alarms = 0;
        for row in &log.rows {
            engine.observe(row);
            rows += 1;
            if engine.version() != version {
                version = engine.version();
                let review = assessor.review(&engine);
                verdict = review.decision.verdict;
                if verdict > Verdict::Watch {
                    let first = review.ranking.order()[0];
                    let what = review.decision.dangers.first().map_or_else(
                        || format!("cause {}", knowledge[first].id),
                        |f| format!("danger {}", f.id),
                    );
                    *by_cause.entry(what.clone()).or_default() += 1;
                    if std::env::var_os("ALARMS").is_some() {
                        println!(
                            "{} line {} {} {what} {:.2} none {:.2}",
                            folder.file_name().unwrap().display(),
                            row.line,
                            verdict.word(),
                            review.ranking.of(first),
                            review.ranking.nothing
                        );
                    }
                }
            }
            if verdict > Verdict::Watch {
                farm_alarms += 1;
            }
            steady += usize::from(verdict == Verdict::Steady);
        }
        if farm_alarms > 0 {
            println!(
                "{}: {farm_alarms} of {} rows above watch",
                folder.display(),
                log.rows.len()
            );
        }
        alarms += farm_alarms;
    }
    println!("{alarms} of {rows} rows above watch, {steady} steady; {by_cause:?}");
    // Two rows in 52,792 when this was written. Lower the bar when it is passed, never raise it.
    assert!(alarms <= 2, "{alarms} of {rows} rows");
    assert!(
        steady * 2 > rows,
        "a healthy farm is steady most of the time: {steady} of {rows}"
    );
}

#[test]
fn backgrounds_are_what_healthy_logs_show() {
    let knowledge = rule_base();
    let mut counts = vec![Measured::default(); knowledge.findings.len()];
    for folder in folders("healthy") {
        let site = read_site(&knowledge, &folder);
        let log = read_log(&knowledge, &folder, &site);
        let mut engine = engine(&knowledge, &site, &log);
        measure(&mut engine, &log.rows, &mut counts);
    }
    let mut off = Vec::new();
    for (finding, count) in knowledge.findings.iter().zip(&counts) {
        let share = count.share().unwrap_or(f64::NAN);
        println!(
            "{:<45} stated {:.4} measured {share:.4} of {:.0} days",
            finding.id, finding.background, count.known
        );
        // Days of one farm follow each other, so a few hundred of them are worth a few dozen. Real farms are rougher than
        // simulated ones: a stated background may be larger than measured, up to five times, never much smaller.
        if count.known >= 400.0 && finding.background < share / 2.0 - 0.01 {
            off.push(format!(
                "{}: stated {}, measured {share:.4}",
                finding.id, finding.background
            ));
        }
    }
    assert!(off.is_empty(), "{off:#?}");
}
