//! How the answer was made: versions, rules, site file.

use crate::render::block::Block;
use crate::render::{Report, when};

/// Characters of the rule base's digest that tell it from others.
const DIGEST: usize = 12;

/// Version, rule base, site file, and how sure all this is.
pub(super) fn block(report: &Report<'_>, page: &mut Vec<Block>) {
    let digest: String = report.knowledge.digest.chars().take(DIGEST).collect();
    let house = report.knowledge.house_rules.as_ref().map_or_else(
        || "no house rules".to_owned(),
        |folder| format!("with the house rules in {folder}"),
    );
    let site = report.site_file.map_or_else(
        || "no site file, so nothing is known of the farm itself".to_owned(),
        |file| format!("site file {}", file.display()),
    );
    page.push(Block::Heading("How this was made".to_owned()));
    page.push(Block::Para(format!(
        "gillside {}, rule base {digest}, {house}; {site}. Likelihoods are calibrated on the project's own cases, which \
         are not field data. `gillside why ID` explains whatever has an id in brackets here, and any reading, sign or source.",
        env!("CARGO_PKG_VERSION")
    )));
}

/// When limits will be passed.
pub(super) fn projections(report: &Report<'_>) -> Vec<String> {
    let zone = &report.site.timezone;
    let at = |p: &crate::assessment::Projection| {
        let earliest = when::short(p.earliest, zone);
        let latest = p.latest.map_or_else(String::new, |l| {
            format!(", by {} at the latest", when::short(l, zone))
        });
        format!("{}: from {earliest} at the earliest{latest}", p.limit)
    };
    report.assessment.projections.iter().map(at).collect()
}

/// What the farm has changed.
pub(super) fn overrides(report: &Report<'_>) -> Vec<String> {
    let told = |o: &crate::assessment::Override| {
        let how = if o.loosens {
            " (less careful than shipped)"
        } else {
            ""
        };
        format!("{}: {} instead of {}{how}", o.id, o.to, o.from)
    };
    report.assessment.overrides.iter().map(told).collect()
}
