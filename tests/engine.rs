//! The engine against a second, naive evaluation of the same rules: every finding, at many moments of many logs. The
//! engine judges only what changed or whose time has come; the naive way judges everything from the ground up.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::path::Path;

use gillside::engine::{Degree, Engine, Limits, prove};
use gillside::history::log::Input;
use gillside::knowledge::{self, FindingId};
use gillside::site::{self, Known};

#[test]
fn only_what_changed_is_enough() {
    let knowledge = knowledge::shipped().unwrap();
    let species: Vec<String> = knowledge.species.iter().map(|s| s.id.clone()).collect();
    let media: Vec<String> = knowledge.media.iter().map(|s| s.id.clone()).collect();
    let known = Known {
        vocabulary: &knowledge.vocabulary,
        species: &species,
        media: &media,
    };
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests");
    let mut folders: Vec<_> = std::fs::read_dir(root.join("cases/open"))
        .unwrap()
        .map(|e| e.unwrap().path())
        .collect();
    folders.sort();
    folders.extend(["farm-03", "farm-07", "farm-20"].map(|f| root.join("healthy").join(f)));
    let mut compared = 0;
    for folder in folders {
        let (site, _) = site::load(&folder.join("site.toml"), &known);
        let input = Input::named(folder.join("log.csv").to_str().unwrap());
        let log =
            gillside::history::log::read(vec![input], &knowledge.vocabulary, &site, None).unwrap();
        let limits = Limits::new(&knowledge, &site);
        let mut engine = Engine::new(&knowledge, &site);
        engine.tell(gillside::history::memory::Memory::keeps_events);
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
