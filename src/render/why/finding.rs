//! A finding.

use super::test::Tests;
use super::{Book, cause, sources};
use crate::knowledge::{Evidence, FindingId, Test};
use crate::render::block::Block;

/// What it follows from, and what it is good for.
pub(super) fn explain(book: &Book<'_>, id: FindingId, page: &mut Vec<Block>) {
    let k = book.knowledge;
    let finding = &k[id];
    page.push(Block::Head(format!("{} ({})", finding.name, finding.id)));
    let mut about = format!(
        "A finding. It holds on {} of 100 ordinary days.",
        cause::percent(finding.background)
    );
    if finding.alarming {
        about.push_str(" It is alarming: a cause must explain it.");
    }
    if let Some(urgency) = finding.danger {
        about.push_str(&format!(
            " It is a danger by itself, within {}.",
            urgency.word()
        ));
    }
    if finding.distress {
        about.push_str(" It is a sign of distress.");
    }
    page.push(Block::Para(about));
    page.push(Block::Heading("It holds when".to_owned()));
    tree(&Tests::of(book), &finding.when, 0, page);
    let shows: Vec<String> = k
        .causes
        .iter()
        .filter_map(|c| {
            let effect = c
                .effects
                .iter()
                .find(|e| e.evidence == Evidence::Finding(id))?;
            Some(format!(
                "{}: {} of 100 such incidents",
                c.id,
                cause::percent(effect.seen_in)
            ))
        })
        .collect();
    Book::list(page, "Causes that show it", shows);
    let others = k
        .findings
        .iter()
        .filter(|f| f.when.findings().contains(&id));
    Book::list(
        page,
        "Findings that rest on it",
        others.map(|f| f.id.clone()).collect(),
    );
    sources::list(book, finding.source.iter().map(String::as_str), page);
}

/// A test, part by part.
pub(super) fn tree(tests: &Tests<'_>, test: &Test, depth: usize, page: &mut Vec<Block>) {
    page.push(Block::Branch(depth, tests.head(test)));
    match test {
        Test::All(parts) | Test::Any(parts) | Test::NOf(_, parts) => {
            for part in parts {
                tree(tests, part, depth + 1, page);
            }
        }
        Test::Not(part) => tree(tests, part, depth + 1, page),
        _ => {}
    }
}
