//! Where numbers come from.

use super::Book;
use crate::knowledge::{Knowledge, Reference};
use crate::render::block::Block;

/// The citations of these keys, each once.
pub(super) fn list<'s>(
    book: &Book<'_>,
    keys: impl Iterator<Item = &'s str>,
    page: &mut Vec<Block>,
) {
    let mut known: Vec<&str> = keys.collect();
    known.sort_unstable();
    known.dedup();
    Book::list(
        page,
        "Sources",
        known
            .into_iter()
            .map(|key| citation(book.knowledge, key))
            .collect(),
    );
}

/// One source in a line.
pub fn citation(knowledge: &Knowledge, key: &str) -> String {
    let plain = match key {
        "common-practice" => Some("what growers do and teach, no single publication"),
        "from-memory" => Some("remembered, not looked up again"),
        "derived" => Some("arithmetic on numbers that have sources"),
        "measured" => Some("measured on the project's own logs and cases"),
        _ => None,
    };
    if let Some(plain) = plain {
        return format!("{key}: {plain}");
    }
    knowledge
        .references
        .iter()
        .find(|r| r.key == key)
        .map_or_else(
            || key.to_owned(),
            |r| {
                let parts = [&r.author, &r.year, &r.title, &r.location];
                let parts: Vec<&str> = parts
                    .into_iter()
                    .map(String::as_str)
                    .filter(|p| !p.is_empty())
                    .collect();
                let seen = if r.seen.is_empty() {
                    String::new()
                } else {
                    format!(" (seen: {})", r.seen)
                };
                format!("{key}: {}{seen}", parts.join(", "))
            },
        )
}

/// A source, and what rests on it.
pub(super) fn explain(book: &Book<'_>, reference: &Reference, page: &mut Vec<Block>) {
    page.push(Block::Head(format!("A source ({})", reference.key)));
    page.push(Block::Para(citation(book.knowledge, &reference.key)));
    let all = crate::knowledge::sourced(book.knowledge);
    let resting = all.iter().filter(|s| s.source.contains(&reference.key));
    Book::list(
        page,
        "What rests on it",
        resting.map(|s| format!("{} {}", s.kind, s.id)).collect(),
    );
}
