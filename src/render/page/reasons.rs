//! Why: the leading causes with what speaks for and against them; and what would tell more.

use crate::assessment::{Assessment, CauseReport, Missing};
use crate::fault::shown;
use crate::render::Report;
use crate::render::block::{Block, sentence};
use crate::render::evidence::Words;

/// So many causes are shown, and so many lines for and against each.
const CAUSES: usize = 3;
const LINES: usize = 3;

/// Dangers, then the leading causes.
pub(super) fn block(report: &Report<'_>, page: &mut Vec<Block>) {
    let a = report.assessment;
    page.push(Block::Heading(
        "Why (+ speaks for it, - against it)".to_owned(),
    ));
    if !a.dangers.is_empty() {
        page.push(Block::Para(format!("Danger: {}.", a.dangers.join("; "))));
    }
    if let Some(family) = &a.leading_family {
        page.push(Block::Para(format!(
            "{}: {}. Which of its causes it is can't be told yet:",
            sentence(&family.likely),
            family.name
        )));
    }
    let causes = worth_showing(report);
    let words = Words::of(report);
    for cause in &causes {
        claim(cause, &words, page);
    }
    if causes.is_empty() {
        page.push(Block::Para("Nothing stands out as a cause.".to_owned()));
    } else if let Some(others) = others(a, &causes) {
        page.push(Block::Para(others));
    }
}

/// The likeliest ones, less those that are unlikely.
fn worth_showing<'a>(report: &Report<'a>) -> Vec<&'a CauseReport> {
    let least = report.knowledge.scales.words.last().map(|(_, word)| word);
    let likely = |c: &&CauseReport| Some(&c.likely) != least;
    report
        .assessment
        .causes
        .iter()
        .filter(likely)
        .take(CAUSES)
        .collect()
}

fn claim(cause: &CauseReport, words: &Words<'_>, page: &mut Vec<Block>) {
    let place = cause
        .place
        .as_ref()
        .map_or_else(String::new, |p| format!(" (at {})", shown(p)));
    page.push(Block::Claim(format!(
        "{}: {}{place} [{}].",
        sentence(&cause.likely),
        cause.name,
        cause.id
    )));
    let lines = |pieces: &[crate::diagnosis::Piece]| -> Vec<String> {
        pieces.iter().take(LINES).map(|p| words.piece(p)).collect()
    };
    page.extend(lines(&cause.evidence_for).into_iter().map(Block::For));
    page.extend(
        lines(&cause.evidence_against)
            .into_iter()
            .map(Block::Against),
    );
    if !cause.leaves_unexplained.is_empty() {
        page.push(Block::Under(format!(
            "It does not explain: {}.",
            cause.leaves_unexplained.join("; ")
        )));
    }
}

/// Causes that are not shown but may be read about.
fn others(a: &Assessment, shown: &[&CauseReport]) -> Option<String> {
    let rest: Vec<&str> = a
        .causes
        .iter()
        .filter(|c| !shown.iter().any(|s| s.id == c.id))
        .take(CAUSES)
        .map(|c| c.id.as_str())
        .collect();
    (!rest.is_empty()).then(|| format!("Less likely: {}.", rest.join(", ")))
}

/// What is due or would tell most; things with one reason stand together.
pub(super) fn missing(report: &Report<'_>, page: &mut Vec<Block>) {
    let all = &report.assessment.missing;
    if all.is_empty() {
        return;
    }
    page.push(Block::Heading("Measure or look at next".to_owned()));
    let mut told: Vec<&str> = Vec::new();
    for first in all {
        if told.contains(&first.why.as_str()) {
            continue;
        }
        told.push(&first.why);
        let same = all.iter().filter(|m| m.why == first.why);
        page.extend(same.map(|m| Block::Bullet(asked(m, report))));
        page.push(Block::Under(format!("Why: {}.", first.why)));
    }
}

/// The question for it, or its name.
fn asked(missing: &Missing, report: &Report<'_>) -> String {
    let words = &report.knowledge.vocabulary;
    let id = missing.id.as_str();
    if let Some(reading) = words.reading(id) {
        return format!("{}.", sentence(&words[reading].name));
    }
    let question = words
        .sign(id)
        .map(|s| &words[s].question)
        .or_else(|| words.event(id).map(|e| &words[e].question));
    question.map_or_else(|| id.to_owned(), |q| q.text.clone())
}
