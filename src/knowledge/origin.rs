//! Which files the rule base is made of: those embedded in the program, and those of a farm's house rules.

use std::path::Path;

use include_dir::{Dir, DirEntry, include_dir};

use super::{Knowledge, load};
use crate::fault::{Fault, Source};

static KNOWLEDGE: Dir<'_> = include_dir!("$CARGO_MANIFEST_DIR/knowledge");

/// The shipped rule base as the build left it; `None` when it had faults then, and has to be loaded to show them.
static BUILT: &[u8] = include_bytes!(concat!(env!("OUT_DIR"), "/knowledge.bin"));

/// The shipped rule base.
///
/// # Errors
/// All faults of all files.
pub fn shipped() -> Result<Knowledge, Vec<Fault>> {
    match postcard::from_bytes(BUILT) {
        Ok(base) => Ok(base),
        Err(_) => load(&embedded(), &[]),
    }
}

/// The embedded rule base, file by file in the order of their names; each is named `knowledge/…`.
pub fn embedded() -> Vec<Source> {
    let mut sources = Vec::new();
    collect(&KNOWLEDGE, &mut sources);
    sources.sort_by(|a, b| a.name.cmp(&b.name));
    sources
}

/// The text of one embedded file, such as `demo/site.toml`.
pub fn embedded_text(path: &str) -> Option<&'static str> {
    KNOWLEDGE.get_file(path)?.contents_utf8()
}

fn collect(dir: &Dir<'_>, sources: &mut Vec<Source>) {
    for entry in dir.entries() {
        match entry {
            DirEntry::Dir(inner) if inner.path() == Path::new("demo") => {}
            DirEntry::Dir(inner) => collect(inner, sources),
            DirEntry::File(file) => {
                let path = file.path();
                if path.extension().is_some_and(|e| e == "toml")
                    && let Some(text) = file.contents_utf8()
                {
                    sources.push(Source::new(format!("knowledge/{}", path.display()), text));
                }
            }
        }
    }
}

/// The TOML files of a folder of house rules, in the order of their names.
///
/// # Errors
/// A fault when the folder or a file in it can't be read.
pub fn folder(dir: &Path) -> Result<Vec<Source>, Fault> {
    let mut sources = Vec::new();
    walk(dir, 0, &mut sources)?;
    sources.sort_by(|a, b| a.name.cmp(&b.name));
    Ok(sources)
}

/// House rules are a folder of files and at most a few folders in it; deeper is a mistake (or a loop of links).
const DEEPEST: usize = 4;

fn walk(dir: &Path, depth: usize, sources: &mut Vec<Source>) -> Result<(), Fault> {
    let cannot = |path: &Path, error: &std::io::Error| {
        Fault::whole(
            "house-rules-unreadable",
            format!("cannot read `{}`: {error}", path.display()),
            "check the folder given with --house-rules and its permissions",
        )
    };
    if depth > DEEPEST {
        return Ok(());
    }
    let entries = std::fs::read_dir(dir).map_err(|e| cannot(dir, &e))?;
    for entry in entries {
        let path = entry.map_err(|e| cannot(dir, &e))?.path();
        if path.is_dir() {
            walk(&path, depth + 1, sources)?;
        } else if path.extension().is_some_and(|e| e == "toml") {
            let text = std::fs::read_to_string(&path).map_err(|e| cannot(&path, &e))?;
            sources.push(Source::new(path.display().to_string(), text));
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_was_built_is_what_is_loaded() {
        let loaded = load(&embedded(), &[]);
        let built = shipped();
        assert!(!BUILT.is_empty());
        assert_eq!(
            format!("{:?}", built.map(|k| k.causes)),
            format!("{:?}", loaded.map(|k| k.causes))
        );
    }
}
