//! Reads the rule base once, when the program is built, and leaves it in a form that is read in a millisecond.
//!
//! The loader is the program's own (the modules below are its files): there is one loader, and what it finds wrong here
//! it finds wrong again when the program starts, with the places shown. A rule base with faults is left out, so that the
//! program still builds and can say what they are.

#![allow(dead_code, missing_docs)]

#[path = "src/decode/mod.rs"]
mod decode;
#[path = "src/fault.rs"]
mod fault;
mod knowledge {
    #[path = "../src/knowledge/ids.rs"]
    mod ids;
    #[path = "../src/knowledge/load/mod.rs"]
    mod load;
    #[path = "../src/knowledge/pace.rs"]
    mod pace;
    #[path = "../src/knowledge/pace_words.rs"]
    mod pace_words;
    #[path = "../src/knowledge/schema.rs"]
    mod schema;
    #[path = "../src/knowledge/test.rs"]
    mod test;

    pub use ids::{CauseId, FindingId, StepId};
    pub use load::load;
    pub use pace::{
        Dosable, InstrumentDoubt, Kinetic, Kinetics, PaceLimit, PaceLimits, Pacing, Use,
    };
    pub use pace_words::PaceWords;
    pub use schema::*;
    pub use test::{Bound, Change, Limit, LimitLevel, Over, Ramp, Side, SiteTest, Test};
}
#[path = "src/vocabulary/mod.rs"]
mod vocabulary;

use std::path::{Path, PathBuf};

use fault::Source;

fn main() -> std::io::Result<()> {
    println!("cargo::rerun-if-changed=knowledge");
    for room in ["decode", "fault.rs", "knowledge", "vocabulary"] {
        println!("cargo::rerun-if-changed=src/{room}");
    }
    let mut sources = Vec::new();
    collect(Path::new("knowledge"), &mut sources)?;
    sources.sort_by(|a, b| a.name.cmp(&b.name));
    let bytes = match knowledge::load(&sources, &[]) {
        Ok(base) => postcard::to_allocvec(&base).unwrap_or_default(),
        Err(faults) => {
            for fault in faults.iter().take(20) {
                println!("cargo::warning={fault}");
            }
            Vec::new()
        }
    };
    let out = std::env::var_os("OUT_DIR")
        .map(PathBuf::from)
        .unwrap_or_default();
    std::fs::write(out.join("knowledge.bin"), bytes)
}

/// The TOML files of the rule base; the demo farm is none of its rules.
fn collect(dir: &Path, sources: &mut Vec<Source>) -> std::io::Result<()> {
    for entry in std::fs::read_dir(dir)? {
        let path = entry?.path();
        if path.is_dir() && path != Path::new("knowledge/demo") {
            collect(&path, sources)?;
        } else if path.extension().is_some_and(|e| e == "toml") {
            let text = std::fs::read_to_string(&path)?;
            sources.push(Source::new(
                path.display().to_string().replace('\\', "/"),
                text,
            ));
        }
    }
    Ok(())
}
