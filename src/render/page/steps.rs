//! The steps by time, how it shows that they work, and whom to call.

use crate::assessment::{StepReport, VerifyReport};
use crate::knowledge::When;
use crate::render::block::Block;
use crate::render::{Report, when};

/// So many steps of each time are shown beyond the first ones; who is told of everything does nothing.
const SHOWN: [(When, &str, usize); 4] = [
    (When::Now, "Then, still now", 4),
    (When::Hours, "Today", 4),
    (When::Days, "The next days", 3),
    (When::Recovery, "Once it gets better", 3),
];
/// So many signs of success.
const VERIFY: usize = 4;

/// All steps but those that were named before.
pub(super) fn block(report: &Report<'_>, named: &[String], page: &mut Vec<Block>) {
    let a = report.assessment;
    let mut shown: Vec<&StepReport> = a
        .first_aid
        .iter()
        .chain(&a.steps)
        .filter(|s| named.contains(&s.id))
        .collect();
    let mut left = 0;
    for (time, heading, most) in SHOWN {
        let steps: Vec<&StepReport> = a
            .steps
            .iter()
            .filter(|s| s.when == time && !named.contains(&s.id))
            .collect();
        if steps.is_empty() {
            continue;
        }
        let heading = if time == When::Now && named.is_empty() {
            "Now"
        } else {
            heading
        };
        page.push(Block::Heading(heading.to_owned()));
        for step in steps.iter().take(most) {
            page.push(Block::Bullet(format!("{} [{}]", step.text, step.id)));
            page.extend(check_first(step));
        }
        left += steps.len().saturating_sub(most);
        shown.extend(steps.into_iter().take(most));
    }
    if left > 0 {
        let (s, are) = if left == 1 { ("", "is") } else { ("s", "are") };
        page.push(Block::Para(format!(
            "{left} step{s} of less worth {are} left out here; --format json has all."
        )));
    }
    verified(report, &shown, page);
}

/// What to look at before the step.
pub(super) fn check_first(step: &StepReport) -> impl Iterator<Item = Block> {
    step.check_first
        .iter()
        .map(|c| Block::Under(format!("Check first: {c}")))
}

/// How it shows that the steps work, each sign once.
fn verified(report: &Report<'_>, steps: &[&StepReport], page: &mut Vec<Block>) {
    let mut told: Vec<(&str, &str)> = Vec::new();
    let mut lines = Vec::new();
    for verify in steps.iter().filter_map(|s| s.verify.as_ref()) {
        let key = (verify.id.as_str(), verify.direction.as_str());
        if !told.contains(&key) && told.len() < VERIFY {
            told.push(key);
            lines.push(success(report, verify));
        }
    }
    super::list(page, "It works when", lines);
}

fn success(report: &Report<'_>, verify: &VerifyReport) -> String {
    let words = &report.knowledge.vocabulary;
    let by = when::short(verify.by, &report.site.timezone);
    let id = verify.id.as_str();
    if let Some(sign) = words.sign(id) {
        return format!("over by {by}: {}", words[sign].name);
    }
    let name = words.reading(id).map_or(id, |r| words[r].name.as_str());
    let direction = if verify.direction == "gone" {
        "no longer read"
    } else {
        &verify.direction
    };
    format!("{name} is {direction} by {by}")
}

/// When to call whom, from the leading cause, and the farm's numbers.
pub(super) fn calls(report: &Report<'_>, page: &mut Vec<Block>) {
    let Some(first) = report.assessment.causes.first() else {
        return;
    };
    page.push(Block::Heading("When to call".to_owned()));
    page.push(Block::Para(report.knowledge[first.cause].call.clone()));
    for phone in &report.site.phone {
        page.push(Block::Bullet(format!("{}: {}", phone.who, phone.number)));
    }
}
