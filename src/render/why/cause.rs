//! A cause.

use super::test::Tests;
use super::{Book, sources};
use crate::assessment::span;
use crate::knowledge::{CauseId, Effect, Evidence, Step};
use crate::render::block::Block;

/// Everything the rule base says of it.
pub(super) fn explain(book: &Book<'_>, id: CauseId, page: &mut Vec<Block>) {
    let k = book.knowledge;
    let cause = &k[id];
    let family = k.families.iter().find(|f| f.id == cause.family);
    page.push(Block::Head(format!("{} ({})", cause.name, cause.id)));
    page.push(Block::Para(format!(
        "A cause. It harms within {}. Of incidents of which nothing else is known about {} in a thousand are this. \
         Family: {} ({}).",
        cause.urgency.word(),
        (cause.usual * 1000.0).round(),
        cause.family,
        family.map_or("", |f| f.name.as_str()),
    )));
    Book::para(page, "How it works", &cause.mechanism);
    Book::list(page, "Likelier beforehand when", triggers(book, id));
    Book::list(
        page,
        "What it shows, and how often",
        cause.effects.iter().map(|e| effect(book, e)).collect(),
    );
    let lookalikes = cause.lookalikes.iter();
    Book::list(
        page,
        "Taken for",
        lookalikes
            .map(|l| format!("{}: {}", k[l.cause].id, l.tell))
            .collect(),
    );
    Book::para(page, "If nothing is done", &cause.outlook);
    Book::para(page, "It gets better when", &cause.better);
    if let Some(verify) = &cause.verify {
        page.push(Block::Bullet(format!(
            "{} {} within {}",
            verify.id,
            verify.direction,
            span(verify.by)
        )));
    }
    Book::para(page, "When to call", &cause.call);
    Book::list(
        page,
        "Steps that help, best first",
        steps(book, |s| s.helps.get(&id).copied(), |s| &s.text),
    );
    Book::list(
        page,
        "What would harm, worst first",
        steps(
            book,
            |s| s.harms.get(&id).copied(),
            |s| {
                if s.avoid_text.is_empty() {
                    &s.text
                } else {
                    &s.avoid_text
                }
            },
        ),
    );
    sources::list(book, sources_of(book, id).iter().map(String::as_str), page);
}

fn triggers(book: &Book<'_>, id: CauseId) -> Vec<String> {
    let tests = Tests::of(book);
    let line = |t: &crate::knowledge::Trigger| {
        let not = if (t.odds_times_if_not - 1.0).abs() < f64::EPSILON {
            String::new()
        } else {
            format!(", known not so: odds times {}", t.odds_times_if_not)
        };
        format!(
            "{}: odds times {}{not} [{}]",
            tests.clause(&t.when),
            t.odds_times,
            t.source.join(", ")
        )
    };
    book.knowledge[id].triggers.iter().map(line).collect()
}

fn effect(book: &Book<'_>, effect: &Effect) -> String {
    let k = book.knowledge;
    let (name, id, background) = match effect.evidence {
        Evidence::Finding(id) => (&k[id].name, &k[id].id, k[id].background),
        Evidence::Sign(id) => {
            let sign = &k.vocabulary[id];
            (&sign.name, &sign.id, sign.background)
        }
    };
    let delay = if effect.delay.is_empty() {
        String::new()
    } else {
        format!(", after {}", effect.delay)
    };
    let rarer = if effect.seen_in < background {
        ", rarer than on ordinary days"
    } else {
        ""
    };
    format!(
        "{name} [{id}]: {} of 100 such incidents, {} of 100 ordinary days{delay}{rarer} [{}]",
        percent(effect.seen_in),
        percent(background),
        effect.source.join(", ")
    )
}

/// A share of a hundred with as many figures as it needs.
pub(super) fn percent(share: f64) -> String {
    let percent = share * 100.0;
    if percent >= 1.0 {
        format!("{percent:.0}")
    } else {
        format!("{percent:.2}").trim_end_matches('0').to_owned()
    }
}

fn steps<'k>(
    book: &Book<'k>,
    amount: impl Fn(&Step) -> Option<f64>,
    text: impl Fn(&'k Step) -> &'k String,
) -> Vec<String> {
    let steps = book.knowledge.steps.iter();
    let mut found: Vec<(f64, &Step)> = steps.filter_map(|s| Some((amount(s)?, s))).collect();
    found.sort_by(|a, b| b.0.total_cmp(&a.0));
    found
        .into_iter()
        .map(|(by, step)| format!("{by:.2}  {} [{}]", text(step), step.id))
        .collect()
}

fn sources_of(book: &Book<'_>, id: CauseId) -> Vec<String> {
    let cause = &book.knowledge[id];
    let triggers = cause.triggers.iter().flat_map(|t| &t.source);
    let effects = cause.effects.iter().flat_map(|e| &e.source);
    cause
        .source
        .iter()
        .chain(triggers)
        .chain(effects)
        .cloned()
        .collect()
}
