//! The engine against a second, naive evaluation of the same rules: every finding, at many moments of many logs. The
//! engine judges only what changed or whose time has come; the naive way judges everything from the ground up.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

mod common;

use common::{engine, folders, read_log, read_site, rule_base};
use gillside::engine::{Degree, Limits, prove};
use gillside::knowledge::FindingId;

#[test]
fn only_what_changed_is_enough() {
    let knowledge = rule_base();
    let healthy = folders("healthy").into_iter().step_by(9);
    let folders: Vec<_> = folders("cases/open").into_iter().chain(healthy).collect();
    let mut compared = 0;
    for folder in folders {
        let site = read_site(&knowledge, &folder);
        let log = read_log(&knowledge, &folder, &site);
        let limits = Limits::new(&knowledge, &site);
        let mut engine = engine(&knowledge, &site, &log);
        let every = (log.rows.len() / 12).max(1);
        for (at, row) in log.rows.iter().enumerate() {
            engine.observe(row);
            if at % every != 0 && at + 1 != log.rows.len() {
                continue;
            }
            for (index, finding) in knowledge.findings.iter().enumerate() {
                let id = FindingId(u16::try_from(index).unwrap());
                let naive: Degree = prove(&finding.when, &engine, &site, &limits, &|_| 0.0).degree;
                let kept = engine.finding(id);
                assert!(
                    (naive.lo - kept.lo).abs() < 1e-12 && (naive.hi - kept.hi).abs() < 1e-12,
                    "{} line {}: {} is {kept:?}, naively {naive:?}",
                    folder.display(),
                    row.line,
                    finding.id
                );
                compared += 1;
            }
        }
    }
    assert!(compared > 100_000, "{compared}");
}
