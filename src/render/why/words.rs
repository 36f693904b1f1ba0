//! Readings, signs, events, cautions, rounds, families.

use super::test::Tests;
use super::{Book, cause, limit, sources};
use crate::assessment::span;
use crate::knowledge::{Caution, Evidence, Family, Round, Test};
use crate::render::block::{Block, sentence};
use crate::render::units;
use crate::vocabulary::{EventId, Question, ReadingId, SignId};

fn head(page: &mut Vec<Block>, name: &str, id: &str, about: String) {
    page.push(Block::Head(format!("{} ({id})", sentence(name))));
    page.push(Block::Para(about));
}

fn question(page: &mut Vec<Block>, question: &Question) {
    Book::para(page, "How it is asked", &question.text);
}

/// Findings whose test has a part like this.
fn findings(book: &Book<'_>, page: &mut Vec<Block>, uses: impl Fn(&Test) -> bool) {
    let used = |when: &Test| {
        let mut found = false;
        when.visit(&mut |t| found |= uses(t));
        found
    };
    let list = book.knowledge.findings.iter().filter(|f| used(&f.when));
    Book::list(
        page,
        "Findings that use it",
        list.map(|f| format!("{} [{}]", f.name, f.id)).collect(),
    );
}

/// A reading.
pub(super) fn reading(book: &Book<'_>, id: ReadingId, page: &mut Vec<Block>) {
    let r = &book.knowledge.vocabulary[id];
    let kind = if r.derived {
        "A reading that is computed from others"
    } else {
        "A reading"
    };
    let what = match r.unit.as_str() {
        "" | "pH" | "count" | "ratio" | "degree" => String::new(),
        unit => format!(", in {unit}"),
    };
    let also = if r.also.is_empty() {
        String::new()
    } else {
        format!(" A log may also state {}.", r.also.join(", "))
    };
    let system = book.site.units;
    head(
        page,
        &r.name,
        &r.id,
        format!(
            "{kind}{what}.{also} It counts as present for {}. Two honest readings of the same water may differ by {}. \
         Values outside {} are a fact about the instrument.",
            span(r.good_for),
            units::difference(r, r.resolution, system),
            units::from_to(r, r.plausible.0, r.plausible.1, system),
        ),
    );
    question(page, &r.question);
    limit::of_reading(book, id, page);
    findings(book, page, |t| match t {
        Test::Level { reading, .. }
        | Test::Changed { reading, .. }
        | Test::Unusual { reading, .. }
        | Test::Odd { reading, .. }
        | Test::Stuck { reading, .. }
        | Test::Disagree { reading, .. } => *reading == id,
        _ => false,
    });
    sources::list(book, r.source.iter().map(String::as_str), page);
}

/// A sign.
pub(super) fn sign(book: &Book<'_>, id: SignId, page: &mut Vec<Block>) {
    let s = &book.knowledge.vocabulary[id];
    let alarming = if s.alarming {
        " It is alarming: a cause must explain it."
    } else {
        ""
    };
    head(
        page,
        &s.name,
        &s.id,
        format!(
            "A sign. It is seen on {} of 100 ordinary days, and counts as present for {}.{alarming}",
            cause::percent(s.background),
            span(s.good_for)
        ),
    );
    question(page, &s.question);
    let shows = book.knowledge.causes.iter().filter_map(|c| {
        let effect = c
            .effects
            .iter()
            .find(|e| e.evidence == Evidence::Sign(id))?;
        Some(format!(
            "{}: {} of 100 such incidents",
            c.id,
            cause::percent(effect.seen_in)
        ))
    });
    Book::list(page, "Causes that show it", shows.collect());
    findings(
        book,
        page,
        |t| matches!(t, Test::Sign { sign, .. } if *sign == id),
    );
    sources::list(book, s.source.iter().map(String::as_str), page);
}

/// An event.
pub(super) fn event(book: &Book<'_>, id: EventId, page: &mut Vec<Block>) {
    let e = &book.knowledge.vocabulary[id];
    head(
        page,
        &e.name,
        &e.id,
        format!("An event. It may matter for {} days.", e.window_days),
    );
    question(page, &e.question);
    let tests = Tests::of(book);
    let uses = |when: &Test| {
        let mut found = false;
        when.visit(&mut |t| found |= matches!(t, Test::Event { event, .. } if *event == id));
        found
    };
    let triggers = book.knowledge.causes.iter().flat_map(|c| {
        let fitting = c.triggers.iter().filter(|t| uses(&t.when));
        fitting.map(|t| {
            format!(
                "{}: odds times {} when {}",
                c.id,
                t.odds_times,
                tests.clause(&t.when)
            )
        })
    });
    Book::list(page, "Causes it makes likelier", triggers.collect());
    findings(
        book,
        page,
        |t| matches!(t, Test::Event { event, .. } if *event == id),
    );
    sources::list(book, e.source.iter().map(String::as_str), page);
}

/// A caution.
pub(super) fn caution(book: &Book<'_>, caution: &Caution, page: &mut Vec<Block>) {
    page.push(Block::Head(format!("A caution ({})", caution.id)));
    page.push(Block::Para(caution.text.clone()));
    let when = match &caution.when {
        Some(test) if !caution.always => Tests::of(book).clause(test),
        _ => "always".to_owned(),
    };
    Book::para(page, "It is said", &when);
    sources::list(book, caution.source.iter().map(String::as_str), page);
}

/// A round.
pub(super) fn round(book: &Book<'_>, round: &Round, page: &mut Vec<Block>) {
    page.push(Block::Head(format!("{} ({})", round.text, round.id)));
    page.push(Block::Para(format!(
        "Part of the routine, every {}. {}",
        span(round.every),
        round.why
    )));
    Book::list(page, "It guards against", round.protects.clone());
    sources::list(book, round.source.iter().map(String::as_str), page);
}

/// A family.
pub(super) fn family(book: &Book<'_>, family: &Family, page: &mut Vec<Block>) {
    head(
        page,
        &family.name,
        &family.id,
        "A family of causes that a log often can't tell apart.".to_owned(),
    );
    let members = book
        .knowledge
        .family(&family.id)
        .map(|c| &book.knowledge[c]);
    Book::list(
        page,
        "Its causes",
        members.map(|c| format!("{}: {}", c.id, c.name)).collect(),
    );
}
