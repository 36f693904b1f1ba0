//! The table of malformed inputs (`tests/malformed/*.toml`): each must be told with its place, reason and cure, and
//! give the exit status of the data contract.

use std::collections::HashSet;
use std::path::Path;

use serde::Deserialize;

use super::words::{SPECIES, good_site, read_at, site, vocabulary};
use gillside::fault::Fault;
use gillside::history::log::{self, Input, Log, Problem};
use gillside::site::{Known, Site};

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    case: Vec<Case>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Case {
    name: String,
    /// `log` or `site`.
    of: String,
    /// The input as text ...
    input: Option<String>,
    /// ... or as bytes in hexadecimal ...
    hex: Option<String>,
    /// ... or something on the disk: `missing`, `folder` or `large`.
    disk: Option<String>,
    /// Text that is repeated behind the input, and how often.
    repeat: Option<(String, usize)>,
    /// The site file that goes with a log.
    site: Option<String>,
    /// As with `--strict`.
    #[serde(default)]
    strict: bool,
    status: u8,
    code: String,
    line: Option<usize>,
    at: Option<usize>,
    column: Option<String>,
    #[serde(default)]
    reason: Vec<String>,
    #[serde(default)]
    cure: Vec<String>,
    used: Option<usize>,
    refused: Option<usize>,
}

/// What a message says, whoever says it.
#[derive(Debug)]
struct Told {
    code: &'static str,
    line: Option<usize>,
    at: Option<usize>,
    column: Option<String>,
    reason: String,
    cure: String,
    shown: String,
}

impl From<&Fault> for Told {
    fn from(fault: &Fault) -> Self {
        Self {
            code: fault.code,
            line: fault.place.as_ref().map(|p| p.line),
            at: fault.place.as_ref().map(|p| p.column),
            column: None,
            reason: fault.reason.clone(),
            cure: fault.cure.clone(),
            shown: fault.to_string(),
        }
    }
}

impl From<&Problem> for Told {
    fn from(problem: &Problem) -> Self {
        Self {
            code: problem.code,
            line: Some(problem.line),
            at: Some(problem.at),
            column: problem.column.clone(),
            reason: problem.reason.clone(),
            cure: problem.cure.clone(),
            shown: problem.to_string(),
        }
    }
}

impl Case {
    fn bytes(&self) -> Vec<u8> {
        let mut bytes = match (&self.input, &self.hex) {
            (Some(text), _) => text.clone().into_bytes(),
            (None, Some(hex)) => {
                let digits: Vec<char> = hex.chars().filter(|c| !c.is_whitespace()).collect();
                let pair =
                    |p: &[char]| u8::from_str_radix(&p.iter().collect::<String>(), 16).unwrap();
                digits.chunks(2).map(pair).collect()
            }
            (None, None) => Vec::new(),
        };
        if let Some((text, times)) = &self.repeat {
            bytes.extend(text.repeat(*times).into_bytes());
        }
        bytes
    }

    /// Runs the case: exit status, messages, and the log if there is one.
    fn run(&self, folder: &Path) -> (u8, Vec<Told>, Option<Log>) {
        if self.of == "site" {
            let faults = self.site_faults(folder);
            let status = if faults.is_empty() { 0 } else { 3 };
            return (status, faults.iter().map(Told::from).collect(), None);
        }
        let farm = self.site.as_deref().map_or_else(Site::default, good_site);
        let read = match self.disk.as_deref() {
            Some("folder") => from_path(folder, &farm),
            Some(_) => from_path(&folder.join("nothing.csv"), &farm),
            None => read_at(&farm, self.bytes()),
        };
        match read {
            Err(faults) => (3, faults.iter().map(Told::from).collect(), None),
            Ok(log) => {
                let refused = self.strict && log.rows_refused > 0;
                let status = if refused || !log.is_usable() { 3 } else { 0 };
                (
                    status,
                    log.problems.iter().map(Told::from).collect(),
                    Some(log),
                )
            }
        }
    }

    fn site_faults(&self, folder: &Path) -> Vec<Fault> {
        if let Some(text) = &self.input {
            return site(text).1;
        }
        let vocabulary = vocabulary();
        let species: Vec<String> = SPECIES.iter().map(|s| (*s).to_owned()).collect();
        let known = Known {
            vocabulary: &vocabulary,
            species: &species,
            media: &[],
        };
        let path = match self.disk.as_deref() {
            Some("folder") => folder.to_owned(),
            Some("large") => {
                let path = folder.join("large.toml");
                std::fs::write(&path, "# nothing here\n".repeat(10_000)).unwrap();
                path
            }
            Some(_) => folder.join("nothing.toml"),
            None => {
                let path = folder.join("site.toml");
                std::fs::write(&path, self.bytes()).unwrap();
                path
            }
        };
        gillside::site::load(&path, &known).1
    }

    /// What differs from what is expected.
    fn differences(&self, folder: &Path) -> Vec<String> {
        let (status, told, log) = self.run(folder);
        let mut wrong = Vec::new();
        if status != self.status {
            wrong.push(format!("status {status}, not {}", self.status));
        }
        let fits = |t: &&Told| {
            t.code == self.code
                && t.line == self.line
                && (self.at.is_none() || t.at == self.at)
                && (self.column.is_none() || t.column == self.column)
                && self.reason.iter().all(|w| t.reason.contains(w.as_str()))
                && self.cure.iter().all(|w| t.cure.contains(w.as_str()))
        };
        if !told.iter().any(|t| fits(&t)) {
            wrong.push(format!("no message fits; there are {told:#?}"));
        }
        for message in &told {
            if message.shown.chars().any(char::is_control) || message.reason.ends_with('.') {
                wrong.push(format!("a message that is not fit to print: {message:?}"));
            }
        }
        if let Some(log) = log {
            if self.used.is_some_and(|n| n != log.rows_used) {
                wrong.push(format!("{} rows used", log.rows_used));
            }
            if self.refused.is_some_and(|n| n != log.rows_refused) {
                wrong.push(format!("{} rows refused", log.rows_refused));
            }
            if log.rows_read != log.rows_used + log.rows_refused {
                wrong.push("the counts don't add up".to_owned());
            }
        } else if self.used.is_some() || self.refused.is_some() {
            wrong.push("there is no log to count rows of".to_owned());
        }
        wrong
    }
}

fn from_path(path: &Path, farm: &Site) -> Result<Log, Vec<Fault>> {
    log::read(
        vec![Input::Path(path.to_owned())],
        &vocabulary(),
        farm,
        None,
    )
}

fn cases() -> Vec<Case> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/malformed");
    let mut cases = Vec::new();
    for file in std::fs::read_dir(folder).unwrap() {
        let path = file.unwrap().path();
        let text = std::fs::read_to_string(&path).unwrap();
        let table: Table =
            toml::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
        cases.extend(table.case);
    }
    cases
}

#[test]
fn every_malformed_input_is_told() {
    let folder = tempfile::tempdir().unwrap();
    let mut report = String::new();
    for case in cases() {
        for wrong in case.differences(folder.path()) {
            report.push_str(&format!("{}: {wrong}\n", case.name));
        }
    }
    assert!(report.is_empty(), "{report}");
}

#[test]
fn the_table_is_large_and_says_what_it_expects() {
    let cases = cases();
    assert!(cases.len() >= 40, "{} cases", cases.len());
    let names: HashSet<&str> = cases.iter().map(|c| c.name.as_str()).collect();
    assert_eq!(names.len(), cases.len(), "two cases have one name");
    for case in &cases {
        assert!(
            !case.reason.is_empty() && !case.cure.is_empty(),
            "{}",
            case.name
        );
        assert!(case.line.is_some() == case.disk.is_none(), "{}", case.name);
        assert!(case.line.is_none() || case.at.is_some(), "{}", case.name);
        assert!(["log", "site"].contains(&case.of.as_str()), "{}", case.name);
    }
}
