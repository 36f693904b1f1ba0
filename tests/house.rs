//! The rules of the house, as `DEVELOPERS.md` states them: which room may know which, how long a file may be, and how
//! words are spelled.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic)]

use std::path::{Path, PathBuf};

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

fn files(folder: &Path, endings: &[&str]) -> Vec<PathBuf> {
    let mut found = Vec::new();
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            found.extend(files(&path, endings));
        } else if path
            .extension()
            .is_some_and(|e| endings.contains(&e.to_str().unwrap()))
        {
            found.push(path);
        }
    }
    found.sort();
    found
}

/// The rooms from left to right; each may use only those before it (and itself).
const ROOMS: [&str; 18] = [
    "fault",
    "decode",
    "water",
    "vocabulary",
    "site",
    "history",
    "knowledge",
    "engine",
    "diagnosis",
    "course",
    "assessment",
    "record",
    "incident",
    "shift",
    "walk",
    "render",
    "cli",
    "lib",
];

fn rank(room: &str) -> usize {
    ROOMS
        .iter()
        .position(|r| *r == room)
        .unwrap_or_else(|| panic!("{room} is not in the list of rooms"))
}

#[test]
fn data_goes_one_way() {
    for file in files(&root().join("src"), &["rs"]) {
        let inside = file.strip_prefix(root().join("src")).unwrap();
        let room = inside
            .iter()
            .next()
            .unwrap()
            .to_str()
            .unwrap()
            .trim_end_matches(".rs");
        if room == "main" {
            continue;
        }
        let text = std::fs::read_to_string(&file).unwrap();
        // What stands after `#[cfg(test)]` may look anywhere.
        let code = text.split("#[cfg(test)]").next().unwrap();
        for used in code.split("crate::").skip(1) {
            let other: String = used
                .chars()
                .take_while(|c| c.is_ascii_lowercase() || *c == '_')
                .collect();
            if other.is_empty() || !ROOMS.contains(&other.as_str()) {
                continue;
            }
            assert!(
                rank(&other) <= rank(room),
                "{} uses crate::{other}, which stands to its right",
                inside.display()
            );
        }
    }
}

#[test]
fn only_the_front_rooms_print_or_read_a_clock() {
    for file in files(&root().join("src"), &["rs"]) {
        let inside = file.strip_prefix(root().join("src")).unwrap();
        let room = inside
            .iter()
            .next()
            .unwrap()
            .to_str()
            .unwrap()
            .trim_end_matches(".rs");
        if ["cli", "main"].contains(&room) {
            continue;
        }
        let text = std::fs::read_to_string(&file).unwrap();
        let code = text.split("#[cfg(test)]").next().unwrap();
        for word in [
            "println!",
            "eprintln!",
            "print!(",
            "Timestamp::now",
            "SystemTime::now",
        ] {
            assert!(!code.contains(word), "{} has `{word}`", inside.display());
        }
    }
}

#[test]
fn a_file_is_one_idea() {
    let mut lengths: Vec<(usize, PathBuf)> = files(&root().join("src"), &["rs"])
        .into_iter()
        .map(|f| (std::fs::read_to_string(&f).unwrap().lines().count(), f))
        .collect();
    lengths.sort();
    let (longest, file) = lengths.last().unwrap();
    assert!(*longest <= 600, "{} has {longest} lines", file.display());
    assert!(
        lengths[lengths.len() / 2].0 <= 150,
        "the median file has {} lines",
        lengths[lengths.len() / 2].0
    );
}

/// Spellings of other places, which slip in from the literature.
const NOT_AMERICAN: [&str; 23] = [
    "colour",
    "fibre",
    "litre",
    "metre ",
    "sulphide",
    "sulphate",
    "sulphur",
    "aluminium",
    "oxidis",
    "behaviour",
    "neighbour",
    "grey ",
    "mould",
    "ionis",
    "sterilis",
    "acclimatis",
    "haemoglobin",
    "anaem",
    "oesoph",
    "fertilis",
    "recognis",
    "organis",
    "analyse ",
];

#[test]
fn american_spelling_throughout() {
    let mut texts = files(&root().join("knowledge"), &["toml", "md"]);
    texts.extend(files(&root().join("src"), &["rs"]));
    texts.extend(["README.md", "DEVELOPERS.md"].map(|f| root().join(f)));
    let mut found = Vec::new();
    for file in texts {
        // Published titles keep their spelling.
        if file.ends_with("sources.toml") {
            continue;
        }
        let text = std::fs::read_to_string(&file).unwrap().to_lowercase();
        for word in NOT_AMERICAN {
            for (at, _) in text.match_indices(word) {
                let around = &text[text[..at].rfind('\n').map_or(0, |i| i + 1)..];
                let line = around.lines().next().unwrap();
                // Words that only look like it, and a test of what is said to those who spell so.
                if line.contains("organism") || line.contains("un-ionised-ammonia") {
                    continue;
                }
                found.push(format!("{}: `{word}` in: {line}", file.display()));
            }
        }
    }
    assert!(found.is_empty(), "{found:#?}");
}
