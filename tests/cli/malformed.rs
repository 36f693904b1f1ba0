//! The table of malformed inputs (`tests/malformed/*.toml`) through the whole program: exit status, place, reason, cure.

use std::path::Path;

use serde::Deserialize;
use serde_json::Value;

use super::harness::{Run, gillside};

#[derive(Deserialize)]
struct Table {
    case: Vec<Case>,
}

/// What of a case the whole program can be held to.
#[derive(Deserialize)]
struct Case {
    name: String,
    of: String,
    input: Option<String>,
    hex: Option<String>,
    disk: Option<String>,
    repeat: Option<(String, usize)>,
    site: Option<String>,
    #[serde(default)]
    strict: bool,
    status: i32,
    code: String,
    line: Option<usize>,
    #[serde(default)]
    reason: Vec<String>,
    #[serde(default)]
    cure: Vec<String>,
}

fn bytes(case: &Case) -> Vec<u8> {
    let mut bytes = match (&case.input, &case.hex) {
        (_, Some(hex)) => {
            let digits: Vec<char> = hex.chars().filter(|c| !c.is_whitespace()).collect();
            let byte =
                |pair: &[char]| u8::from_str_radix(&pair.iter().collect::<String>(), 16).unwrap();
            digits.chunks(2).map(byte).collect()
        }
        (Some(text), None) => text.clone().into_bytes(),
        (None, None) => Vec::new(),
    };
    if let Some((text, times)) = &case.repeat {
        bytes.extend(text.repeat(*times).bytes());
    }
    bytes
}

fn prepared(case: &Case) -> Run {
    let log = case.of == "log";
    let missing = case.disk.as_deref() == Some("missing");
    let wrong = match (log, missing) {
        (true, true) => "nothing.csv",
        (true, false) => "log.csv",
        (false, true) => "nothing.toml",
        (false, false) => "site.toml",
    };
    let mut run = gillside([
        "review",
        "--format",
        "json",
        if log { wrong } else { "log.csv" },
    ]);
    if case.strict {
        run = run.and(["--strict"]);
    }
    run = match case.disk.as_deref() {
        None => run.file(wrong, bytes(case)),
        Some("folder") => {
            std::fs::create_dir(run.folder().join(wrong)).unwrap();
            run
        }
        Some("large") => run.file(wrong, "# nothing here\n".repeat(10_000)),
        Some(_) => run,
    };
    match &case.site {
        _ if !log => run
            .and(["--site", wrong])
            .file("log.csv", "time,ph\n2026-03-02 07:30,7\n"),
        Some(site) => run.file("site.toml", site),
        None => run,
    }
}

fn hold(case: &Case) {
    let came = prepared(case).status(case.status).err_has([]).check();
    let name = &case.name;
    let told = if case.status == 0 {
        assert_eq!(came.err, "", "{name}");
        let json: Value = serde_json::from_str(&came.out).unwrap();
        let problems = json["log"]["problems"].as_array().unwrap().clone();
        let found = problems
            .iter()
            .find(|p| p["code"] == case.code.as_str() && case.line.is_none_or(|l| p["line"] == l));
        let found = found.unwrap_or_else(|| panic!("{name}: no {} among {problems:?}", case.code));
        format!(
            "{}\n{}",
            found["reason"].as_str().unwrap(),
            found["cure"].as_str().unwrap()
        )
    } else {
        assert_eq!(came.out, "", "{name}");
        assert!(
            came.err.contains(&format!("[{}]", case.code)),
            "{name}: {}",
            came.err
        );
        if let Some(line) = case.line {
            assert!(
                came.err.contains(&format!(":{line}:")),
                "{name}: no line {line}: {}",
                came.err
            );
        }
        came.err
    };
    for words in case.reason.iter().chain(&case.cure) {
        assert!(
            told.contains(words.as_str()),
            "{name} lacks {words:?}: {told}"
        );
    }
}

#[test]
fn every_malformed_input_is_told_with_its_place_and_cure() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/malformed");
    let mut count = 0;
    for entry in std::fs::read_dir(folder).unwrap() {
        let text = std::fs::read_to_string(entry.unwrap().path()).unwrap();
        let table: Table = toml::from_str(&text).unwrap();
        count += table.case.len();
        table.case.iter().for_each(hold);
    }
    assert!(count >= 40, "only {count} cases");
}
