//! Limits: `species.READING.LEVEL-SIDE` and `target.READING.SIDE`.

use super::test::{level_word, side_word};
use super::{Book, sources};
use crate::knowledge::{Knowledge, LimitLevel, Side, Species};
use crate::render::block::Block;
use crate::render::units;
use crate::vocabulary::ReadingId;

const LEVELS: [LimitLevel; 3] = [LimitLevel::Lethal, LimitLevel::Stress, LimitLevel::Comfort];
const SIDES: [Side; 2] = [Side::Low, Side::High];

/// Every limit's id.
pub(super) fn ids(knowledge: &Knowledge) -> Vec<String> {
    let mut ids = Vec::new();
    for reading in &knowledge.vocabulary.readings {
        for side in SIDES {
            ids.push(format!("target.{}.{}", reading.id, side_word(side)));
            for level in LEVELS {
                ids.push(format!(
                    "species.{}.{}-{}",
                    reading.id,
                    level_word(level),
                    side_word(side)
                ));
            }
        }
    }
    ids
}

/// Explains a limit, if this is one.
pub(super) fn explain(book: &Book<'_>, id: &str, page: &mut Vec<Block>) {
    let words = &book.knowledge.vocabulary;
    let parts: Vec<&str> = id.split('.').collect();
    let [kind, reading, end] = parts[..] else {
        return;
    };
    let Some(reading) = words.reading(reading) else {
        return;
    };
    for side in SIDES {
        if kind == "target" && end == side_word(side) {
            target(book, id, reading, side, page);
        }
        for level in LEVELS {
            if kind == "species" && end == format!("{}-{}", level_word(level), side_word(side)) {
                of_species(book, id, reading, (level, side), page);
            }
        }
    }
}

fn amount(book: &Book<'_>, reading: ReadingId, value: Option<f64>) -> String {
    let about = &book.knowledge.vocabulary[reading];
    value.map_or_else(
        || "none".to_owned(),
        |v| units::amount(about, v, book.site.units),
    )
}

fn target(book: &Book<'_>, id: &str, reading: ReadingId, side: Side, page: &mut Vec<Block>) {
    page.push(Block::Head(format!("A comfort limit ({id})")));
    page.push(Block::Para(format!(
        "The {} end of the comfort band of {}: what `[targets]` of the site file says, else the comfort limit of the \
         species, else that of the rule base. Here: {}.",
        side_word(side),
        book.knowledge.vocabulary[reading].name,
        amount(book, reading, book.limits.target(reading, side))
    )));
    let reading = &book.knowledge.vocabulary[reading];
    sources::list(book, reading.source.iter().map(String::as_str), page);
}

fn of_species(
    book: &Book<'_>,
    id: &str,
    reading: ReadingId,
    (level, side): (LimitLevel, Side),
    page: &mut Vec<Block>,
) {
    let means = match level {
        LimitLevel::Comfort => "on the right side of it all is well for good",
        LimitLevel::Stress => "past it harm begins",
        LimitLevel::Lethal => "past it fish die within hours to a day or two",
    };
    page.push(Block::Head(format!("A limit of the species ({id})")));
    page.push(Block::Para(format!(
        "The {} {} limit of {}: {means}. Only the species files set it. Here: {}.",
        level_word(level),
        side_word(side),
        book.knowledge.vocabulary[reading].name,
        amount(book, reading, book.limits.species(reading, level, side))
    )));
    let with = |s: &&Species| s.limit(reading, level, side).is_some();
    let species: Vec<&Species> = book.knowledge.species.iter().filter(with).collect();
    let line = |s: &&Species| {
        let sources = s
            .sources
            .get(&reading)
            .map_or_else(String::new, |s| s.join(", "));
        format!(
            "{}: {} [{sources}]",
            s.name,
            amount(book, reading, s.limit(reading, level, side))
        )
    };
    Book::list(page, "By species", species.iter().map(line).collect());
    let keys = species
        .iter()
        .filter_map(|s| s.sources.get(&reading))
        .flatten();
    sources::list(book, keys.map(String::as_str), page);
}

/// What limits a reading has at this site.
pub(super) fn of_reading(book: &Book<'_>, reading: ReadingId, page: &mut Vec<Block>) {
    let name = &book.knowledge.vocabulary[reading].id;
    let mut lines = Vec::new();
    for side in SIDES {
        if let Some(value) = book.limits.target(reading, side) {
            lines.push(format!(
                "target.{name}.{}: {}",
                side_word(side),
                amount(book, reading, Some(value))
            ));
        }
        for level in LEVELS {
            if let Some(value) = book.limits.species(reading, level, side) {
                lines.push(format!(
                    "species.{name}.{}-{}: {}",
                    level_word(level),
                    side_word(side),
                    amount(book, reading, Some(value))
                ));
            }
        }
    }
    Book::list(page, "Limits here", lines);
}

/// A species and its limits.
pub(super) fn species(book: &Book<'_>, species: &Species, page: &mut Vec<Block>) {
    page.push(Block::Head(format!("{} ({})", species.name, species.id)));
    let kind = if species.warm {
        "A fish of warm water."
    } else {
        "A fish of cold or temperate water."
    };
    page.push(Block::Para(kind.to_owned()));
    let mut lines = Vec::new();
    for (reading, keys) in &species.sources {
        let mut parts = Vec::new();
        for (level, side) in outward() {
            if let Some(value) = species.limit(*reading, level, side) {
                parts.push(format!(
                    "{} {} {}",
                    level_word(level),
                    side_word(side),
                    amount(book, *reading, Some(value))
                ));
            }
        }
        let name = &book.knowledge.vocabulary[*reading].name;
        lines.push(format!(
            "{name}: {} [{}]",
            parts.join(", "),
            keys.join(", ")
        ));
    }
    Book::list(page, "Limits", lines);
    sources::list(
        book,
        species.sources.values().flatten().map(String::as_str),
        page,
    );
}

fn outward() -> impl Iterator<Item = (LimitLevel, Side)> {
    let low = LEVELS.into_iter().map(|l| (l, Side::Low));
    low.chain(LEVELS.into_iter().rev().map(|l| (l, Side::High)))
}
