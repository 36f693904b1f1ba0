//! `gillside knowledge`.

use std::path::Path;

use super::harness::{Run, gillside};

/// A run beside a copy of the rule base in `rules`, in which one text of one file is another.
fn changed<const N: usize>(args: [&str; N], file: &str, from: &str, to: &str) -> Run {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("knowledge");
    let mut run = gillside(args);
    let mut changes = 0;
    for path in files(&root) {
        let name = path.strip_prefix(&root).unwrap().display().to_string();
        let mut text = std::fs::read_to_string(&path).unwrap();
        if name == file {
            changes += text.matches(from).count();
            text = text.replacen(from, to, 1);
        }
        run = run.file(&format!("rules/{name}"), text);
    }
    assert!(changes > 0, "{file} has no {from:?}");
    run
}

fn files(folder: &Path) -> Vec<std::path::PathBuf> {
    let mut found = Vec::new();
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            found.extend(files(&path));
        } else if path.extension().is_some_and(|e| e == "toml") {
            found.push(path);
        }
    }
    found
}

#[test]
fn the_shipped_rule_base_has_no_faults() {
    gillside(["knowledge", "check"])
        .out_has(["no faults: 75 causes, "])
        .check();
}

#[test]
fn a_copy_is_checked_and_its_faults_have_places() {
    changed(
        ["knowledge", "check", "rules"],
        "scales.toml",
        "watch = ",
        "watch = ",
    )
    .out_has(["no faults"])
    .check();
    for (file, from, to, told) in [
        (
            "causes/temperature.toml",
            "{ finding = \"water-cold\" }",
            "{ finding = \"water-clod\" }",
            [
                "unknown finding `water-clod`",
                "at rules/causes/temperature.toml:",
                "fix: did you mean `water-cold`?",
            ],
        ),
        (
            "species/nile-tilapia.toml",
            "stress_low = 17",
            "stress_low = 27",
            [
                "the limits of `temperature` are not in order",
                "at rules/species/nile-tilapia.toml:",
                "fix: lethal low",
            ],
        ),
        (
            "scales.toml",
            "id = \"temperature\"",
            "id = \"temperatures\"",
            [
                "no cause is of the family `temperatures`",
                "the family `temperature` has no name",
                "fix:",
            ],
        ),
        (
            "scales.toml",
            "watch = 0.",
            "wacht = 0.",
            [
                "unknown key `wacht`",
                "at rules/scales.toml:",
                "fix: did you mean `watch`?",
            ],
        ),
    ] {
        changed(["knowledge", "check", "rules"], file, from, to)
            .status(4)
            .no_out()
            .err_has(told)
            .check();
    }
}

#[test]
fn a_folder_without_rules_is_a_bad_input() {
    gillside(["knowledge", "check", "nowhere"])
        .status(3)
        .no_out()
        .err_has(["cannot read `nowhere`"])
        .check();
    gillside(["knowledge", "check", "."])
        .status(3)
        .no_out()
        .err_has(["no TOML file"])
        .check();
}

#[test]
fn lists_name_everything_and_sources_say_what_rests_on_them() {
    gillside(["knowledge", "list", "species"])
        .out_has(["SPECIES (12)\n", "- nile-tilapia: Nile tilapia\n"])
        .check();
    gillside(["knowledge", "list", "speices"])
        .status(2)
        .no_out()
        .err_has(["'species'"])
        .check();
    gillside(["knowledge", "sources"])
        .out_has([
            " entries name sources. ",
            "rest on nothing but",
            "from-memory: remembered, not looked up again",
        ])
        .check();
    gillside(["knowledge", "sources", "FAO-bac"])
        .out_has(["   Cause biofilter-cold-slowed\n"])
        .check();
    gillside(["knowledge", "sources", "FAO-bax"])
        .status(2)
        .no_out()
        .err_has([
            "no source is called `FAO-bax`",
            "fix: did you mean `FAO-bac`?",
        ])
        .check();
}
