//! What tests over whole logs share: the rule base, a site file, a log run through the engine.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic, dead_code)]

use std::path::{Path, PathBuf};

use gillside::engine::Engine;
use gillside::history::log::{Input, Log};
use gillside::history::memory::Memory;
use gillside::knowledge::{self, Knowledge};
use gillside::site::{self, Known, Site};

/// The shipped rule base.
pub fn rule_base() -> Knowledge {
    knowledge::shipped().unwrap_or_else(|faults| {
        let lines: Vec<String> = faults.iter().map(ToString::to_string).collect();
        panic!("{}", lines.join("\n"))
    })
}

/// The folders in a folder under `tests/`, by name.
pub fn folders(inside: &str) -> Vec<PathBuf> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests")
        .join(inside);
    let mut folders: Vec<PathBuf> = std::fs::read_dir(root)
        .unwrap()
        .map(|e| e.unwrap().path())
        .collect();
    folders.sort();
    folders
}

/// The site file of a folder, which must have no faults.
pub fn read_site(knowledge: &Knowledge, folder: &Path) -> Site {
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

/// The log of a folder.
pub fn read_log(knowledge: &Knowledge, folder: &Path, site: &Site) -> Log {
    let input = Input::named(folder.join("log.csv").to_str().unwrap());
    gillside::history::log::read(vec![input], &knowledge.vocabulary, site, None)
        .unwrap_or_else(|f| panic!("{}: {f:?}", folder.display()))
}

/// An engine for a site whose log notes events, if it does.
pub fn engine<'k>(knowledge: &'k Knowledge, site: &Site, log: &Log) -> Engine<'k> {
    let mut engine = Engine::new(knowledge, site);
    if log.rows.iter().any(|r| !r.events.is_empty()) {
        engine.tell(Memory::keeps_events);
    }
    engine
}
