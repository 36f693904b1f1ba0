//! A step.

use std::collections::BTreeMap;

use super::test::Tests;
use super::{Book, sources};
use crate::assessment::span;
use crate::knowledge::{CauseId, StepId, When};
use crate::render::block::Block;

/// What it does, when it may be taken, what it rests on.
pub(super) fn explain(book: &Book<'_>, id: StepId, page: &mut Vec<Block>) {
    let step = &book.knowledge[id];
    let tests = Tests::of(book);
    page.push(Block::Head(format!("{} ({})", step.text, step.id)));
    let due = match step.when {
        When::Now => "at once",
        When::Hours => "the same day",
        When::Days => "over the next days",
        When::Recovery => "once it gets better",
    };
    let kind = if step.temptation {
        "Something to leave alone: it is never advised.".to_owned()
    } else if step.first_aid {
        format!(
            "A step of first aid, due {due}. About {} minutes of work.",
            step.effort
        )
    } else {
        format!("A step, due {due}. About {} minutes of work.", step.effort)
    };
    page.push(Block::Para(kind));
    Book::para(page, "Why and how", &step.detail);
    if let Some(needs) = &step.needs {
        Book::para(page, "Only where", &tests.clause(needs));
    }
    if let Some(never_if) = &step.never_if {
        Book::para(page, "Never if", &tests.clause(never_if));
    }
    Book::para(
        page,
        "When that is not known, check first",
        &step.check_first,
    );
    if let Some(equipment) = &step.equipment {
        Book::para(
            page,
            "It needs",
            &format!("`equipment.{equipment}` of the site file"),
        );
    }
    if let Some(verify) = &step.verify {
        let shows = format!(
            "{} {} within {}",
            verify.id,
            verify.direction,
            span(verify.by)
        );
        Book::para(page, "It works when", &shows);
    }
    Book::list(page, "Helps under (0 to 1)", amounts(book, &step.helps));
    Book::list(page, "Harms under (0 to 1)", amounts(book, &step.harms));
    Book::para(page, "When it would harm, the page says", &step.avoid_text);
    sources::list(book, step.source.iter().map(String::as_str), page);
}

fn amounts(book: &Book<'_>, amounts: &BTreeMap<CauseId, f64>) -> Vec<String> {
    let mut sorted: Vec<(&CauseId, &f64)> = amounts.iter().collect();
    sorted.sort_by(|a, b| b.1.total_cmp(a.1));
    let line = |(cause, by): (&CauseId, &f64)| format!("{by:.2}  {}", book.knowledge[*cause].id);
    sorted.into_iter().map(line).collect()
}
