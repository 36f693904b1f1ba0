//! The first lines: the verdict, and the first thing to do.

use crate::assessment::{StepReport, span};
use crate::diagnosis::Verdict;
use crate::knowledge::When;
use crate::render::block::Block;
use crate::render::{Report, when};

/// So many first steps are named when there is no first aid.
const FIRST: usize = 5;

/// The verdict in one line, with the age of the last row when that is more than a shift.
pub(super) fn title(report: &Report<'_>) -> Block {
    let a = report.assessment;
    let (word, rest) = match a.verdict {
        Verdict::Steady => ("STEADY", "nothing to do."),
        Verdict::Watch => ("WATCH", "no harm in sight, but measure again."),
        Verdict::ActToday => ("ACT TODAY", "harm is on its way; act within hours."),
        Verdict::ActNow => ("ACT NOW", "fish may die within hours."),
    };
    let age = a
        .last_row_age
        .map_or_else(String::new, |age| format!(" (last row {} old)", span(age)));
    Block::Title(a.verdict, format!("{word}{age}: {rest}"))
}

/// What the first block has said.
pub(super) struct Said {
    /// Ids of the steps that were named.
    pub steps: Vec<String>,
    /// What to measure was said.
    pub missing: bool,
}

/// First aid, the first steps, or what to measure.
pub(super) fn block(report: &Report<'_>, page: &mut Vec<Block>) -> Said {
    let a = report.assessment;
    if a.verdict == Verdict::Steady {
        return Said {
            steps: Vec::new(),
            missing: true,
        };
    }
    let first = match a.first_aid.is_empty() {
        true => first_steps(report),
        false => a.first_aid.iter().collect(),
    };
    // Where nothing is to be done for certain, looking is the first thing to do.
    if a.verdict == Verdict::Watch || first.is_empty() {
        super::reasons::missing(report, page);
        return Said {
            steps: Vec::new(),
            missing: true,
        };
    }
    let heading = match a.first_aid.is_empty() {
        true => "Do first",
        false => "First aid, before anything else",
    };
    page.push(Block::Heading(heading.to_owned()));
    let steps = named(&first, page);
    if let Some(minutes) = a.minutes_left {
        page.push(Block::Para(match minutes {
            0 => "There may be no time left: act before you read on.".to_owned(),
            1 => "You may have 1 minute or less.".to_owned(),
            more => format!("You may have {more} minutes or less."),
        }));
    }
    how(&first, page);
    Said {
        steps,
        missing: false,
    }
}

/// The steps that fit every member of a family that leads as a whole, else the best there are.
fn first_steps<'a>(report: &Report<'a>) -> Vec<&'a StepReport> {
    let a = report.assessment;
    let common: Vec<&StepReport> = a
        .leading_family
        .iter()
        .flat_map(|f| &f.first_steps)
        .filter_map(|id| a.steps.iter().find(|s| s.id == *id))
        .collect();
    if !common.is_empty() {
        return common.into_iter().take(FIRST).collect();
    }
    let now: Vec<&StepReport> = a.steps.iter().filter(|s| s.when == When::Now).collect();
    let best = if now.is_empty() {
        a.steps.iter().collect()
    } else {
        now
    };
    best.into_iter().take(FIRST).collect()
}

/// Why and how, for the steps that were named, by their numbers.
fn how(steps: &[&StepReport], page: &mut Vec<Block>) {
    if steps.iter().all(|s| s.detail.is_empty()) {
        return;
    }
    page.push(Block::Heading("How".to_owned()));
    let details = (1..).zip(steps).filter(|(_, s)| !s.detail.is_empty());
    page.extend(details.map(|(number, step)| Block::Numbered(number, step.detail.clone())));
}

fn named(steps: &[&StepReport], page: &mut Vec<Block>) -> Vec<String> {
    for (number, step) in (1..).zip(steps) {
        page.push(Block::Numbered(number, step.text.clone()));
        page.extend(super::steps::check_first(step));
    }
    steps.iter().map(|s| s.id.clone()).collect()
}

/// Which farm, and as of when.
pub(super) fn about(report: &Report<'_>, page: &mut Vec<Block>) {
    let a = report.assessment;
    let zone = &report.site.timezone;
    let name = a.site.as_deref().unwrap_or("A farm without a site file");
    let mut text = format!("{name}, as of {}", when::long(a.as_of, zone));
    if let Some(name) = zone.iana_name() {
        text.push_str(&format!(" ({name})"));
    }
    text.push('.');
    if let Some((_, question)) = &a.best_question
        && let Some(family) = &a.leading_family
    {
        page.push(Block::Para(format!(
            "{}; which of these it is can't be told yet. This would tell most: {question}",
            family.name
        )));
    }
    page.push(Block::Para(text));
}
