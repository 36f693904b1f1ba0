//! `gillside why`.

use super::harness::{demo, gillside};

#[test]
fn a_cause_is_explained_with_its_sources() {
    gillside(["why", "biofilter-cold-slowed"])
        .out_has([
            "Cold water has slowed the biofilter (biofilter-cold-slowed)\nA cause. It harms within hours.",
            "\nHOW IT WORKS\n",
            "\nLIKELIER BEFOREHAND WHEN\n- a heater failed (within 8 days)",
            "\nWHAT IT SHOWS, AND HOW OFTEN\n",
            "\nIF NOTHING IS DONE\n",
            "\nSTEPS THAT HELP, BEST FIRST\n",
            "\nWHAT WOULD HARM, WORST FIRST\n",
            "\nSOURCES\n",
            "- from-memory: remembered, not looked up again",
        ])
        .check();
}

#[test]
fn everything_that_is_listed_can_be_explained() {
    let came = gillside(["knowledge", "list", "--format", "json"]).check();
    let all: serde_json::Value = serde_json::from_str(&came.out).unwrap();
    for (kind, items) in all.as_object().unwrap() {
        let Some(items) = items.as_array() else {
            continue;
        };
        // One of each kind through the whole program; the rest is the same code.
        for id in items.first().into_iter().chain(items.last()) {
            let id = id["id"].as_str().unwrap();
            if kind == "media" {
                continue;
            }
            gillside(["why", id]).out_has([id]).check();
        }
    }
}

#[test]
fn limits_are_explained_for_the_farm() {
    gillside([
        "why",
        "species.temperature.stress-low",
        "--site",
        &demo("site.toml"),
    ])
    .out_has(["Here: 17.0 C.", "- Nile tilapia: 17.0 C ["])
    .check();
    gillside(["why", "target.ph.low", "--site", &demo("site.toml")])
        .out_has(["A comfort limit (target.ph.low)"])
        .check();
}

#[test]
fn what_is_not_known_has_a_neighbor() {
    gillside(["why", "biofilter-cold-slow"])
        .status(2)
        .no_out()
        .err("error: nothing is called `biofilter-cold-slow` [unknown-id]\n  fix: did you mean `biofilter-cold-slowed`?\n")
        .check();
    gillside(["why", "zzz"])
        .status(2)
        .no_out()
        .err_has(["`gillside knowledge list` names all there is"])
        .check();
}

#[test]
fn a_log_proves_a_cause_from_the_readings_up() {
    let (site, log) = (demo("site.toml"), demo("log.csv"));
    gillside([
        "why",
        "biofilter-cold-slowed",
        "--site",
        &site,
        "--log",
        &log,
    ])
    .columns(100)
    .out_has([
        "Cold water has slowed the biofilter: very likely, probability 0.",
        "\nLIKELIER BEFOREHAND\n",
        "    1.00  a heater failed (within 8 days): Mar 3, 07:30",
        "[nitrite-raised]\n  1.00  any of\n",
        "    1.00  nitrite is above 0.35 mg/L as N (surely above 0.80 mg/L as N): 1.50 mg/L as N",
    ])
    .check();
    gillside(["why", "nitrite-raised", "--site", &site, "--log", &log])
        .out_has(["nitrite is raised: 1.00 (nitrite-raised)\n1.00  any of\n"])
        .check();
    gillside([
        "why",
        "nitrite-raised",
        "--site",
        &site,
        "--log",
        &log,
        "--as-of",
        "2026-02-27 08:00",
    ])
    .out_has(["nitrite is raised: 0.00 (nitrite-raised)"])
    .check();
    gillside(["why", "nitrite", "--site", &site, "--log", &log])
        .status(2)
        .no_out()
        .err_has(["`nitrite` is neither a cause nor a finding"])
        .check();
}
