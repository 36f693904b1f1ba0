//! Reads the rule base from its files. Two passes: first every id, so that entries may refer to each other in any order
//! and across files; then every entry, with all faults of all files collected.

mod causes;
mod entry;
mod findings;
mod names;
mod pace;
mod rest;
mod scales;
mod species;
mod steps;
mod tests;
mod vocabulary;
mod walk;

use sha2::{Digest, Sha256};

use super::Knowledge;
use crate::decode::Reader;
use crate::fault::{Fault, Source};
use names::Names;

/// Reads the shipped files and then, over them, a farm's house rules.
///
/// # Errors
/// All faults of all files, in the order of the files and their lines.
pub fn load(shipped: &[Source], house: &[Source]) -> Result<Knowledge, Vec<Fault>> {
    let sources: Vec<&Source> = shipped.iter().chain(house).collect();
    let readers: Vec<Reader<'_>> = sources.iter().map(|s| Reader::new(s)).collect();
    let tables: Vec<_> = readers.iter().map(Reader::parse).collect();

    let mut names = Names::default();
    for table in &tables {
        names.collect(table.get_ref());
    }
    for (reader, table) in readers.iter().zip(&tables) {
        vocabulary::read(&mut reader.root(table), &mut names);
    }

    let mut made = rest::empty(digest(shipped));
    for (reader, table) in readers.iter().zip(&tables) {
        let mut root = reader.root(table);
        vocabulary::skip(&mut root);
        findings::read(&mut root, &names, &mut made);
        causes::read(&mut root, &names, &mut made);
        steps::read(&mut root, &names, &mut made);
        rest::read(&mut root, &names, &mut made);
        species::read(&mut root, &names, &mut made);
        scales::read(&mut root, &mut made);
        walk::read(&mut root, &names, &mut made);
        pace::read(&mut root, &names, &mut made);
        root.finish();
    }
    steps::join(&mut made);
    let comfort = std::mem::take(&mut names.comfort);
    drop(tables);
    let mut faults: Vec<Fault> = readers.into_iter().flat_map(Reader::into_faults).collect();
    let knowledge = made.finish(names.vocabulary, comfort, &mut faults);
    match knowledge {
        Some(knowledge) if faults.is_empty() => Ok(knowledge),
        _ => Err(faults),
    }
}

fn digest(shipped: &[Source]) -> String {
    let mut hash = Sha256::new();
    for source in shipped {
        hash.update(source.name.as_bytes());
        hash.update([0]);
        hash.update(source.text.as_bytes());
        hash.update([0]);
    }
    hash.finalize().iter().map(|b| format!("{b:02x}")).collect()
}
