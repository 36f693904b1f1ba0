//! The tables of a site file: makeup water, targets, column names, equipment.

use std::collections::BTreeMap;

use super::{numbers, texts};
use crate::decode::Section;
use crate::fault::{did_you_mean, shown};
use crate::site::column;
use crate::site::{Band, Chlorination, Equipment, Heading, Makeup};
use crate::vocabulary::{ReadingId, Vocabulary};

/// `[makeup]`.
pub(super) fn makeup(root: &mut Section<'_>, vocabulary: &Vocabulary) -> Makeup {
    let Some(mut table) = root.section("makeup") else {
        return Makeup::default();
    };
    let mut reading = |id: &str| {
        // The bounds are those of the reading itself: what no instrument could show in water.
        let (low, high) = vocabulary
            .reading(id)
            .map_or((f64::MIN, f64::MAX), |r| vocabulary[r].plausible);
        numbers::within(&mut table, id, low, high)
    };
    let (ph, alkalinity) = (reading("ph"), reading("alkalinity"));
    let (chloride, temperature) = (reading("chloride"), reading("temperature"));
    let made = Makeup {
        chlorination: texts::one_of(
            &mut table,
            "chlorination",
            Chlorination::WORDS,
            Chlorination::of,
        ),
        ph,
        alkalinity,
        chloride,
        temperature,
    };
    table.finish();
    made
}

/// `[targets]`.
pub(super) fn targets(
    root: &mut Section<'_>,
    vocabulary: &Vocabulary,
) -> BTreeMap<ReadingId, Band> {
    let mut found = BTreeMap::new();
    let Some(mut table) = root.section("targets") else {
        return found;
    };
    for id in table.keys() {
        let Some(reading) = vocabulary.reading(&id) else {
            let known = vocabulary.readings.iter().map(|r| r.id.as_str());
            table.fault_at_key(
                &id,
                "unknown-id",
                format!("no reading is called `{}`", shown(&id)),
                did_you_mean(&id, known, "take it out"),
            );
            continue;
        };
        let Some(mut band) = table.section(&id) else {
            continue;
        };
        let low = band.number("low");
        let high = band.number("high");
        match (low, high) {
            (None, None) if !band.has("low") && !band.has("high") => band.fault(
                "empty-band",
                format!("the target of `{id}` has neither end"),
                "write `low`, `high`, or both",
            ),
            (Some(l), Some(h)) if l > h => band.fault(
                "band-upside-down",
                format!("the target of `{id}` runs from {l} down to {h}"),
                "write the smaller number as `low`",
            ),
            (None, None) => {}
            (low, high) => {
                found.insert(reading, Band { low, high });
            }
        }
        band.finish();
    }
    found
}

/// `[columns]`. Two headings may mean the same reading (a farm may have had two loggers); a log that has both says so.
pub(super) fn columns(root: &mut Section<'_>, vocabulary: &Vocabulary) -> Vec<Heading> {
    let mut found: Vec<Heading> = Vec::new();
    let Some(mut table) = root.section("columns") else {
        return found;
    };
    for heading in table.keys() {
        let Some(node) = table.node(&heading) else {
            continue;
        };
        let Some(text) = node.text() else { continue };
        match column::meaning(&text, vocabulary) {
            Err(wrong) => node.fault(wrong.code, wrong.reason, wrong.cure),
            Ok(meaning) => {
                let name = heading.trim().to_owned();
                if found.iter().any(|h| h.heading == name) {
                    table.fault_at_key(
                        &heading,
                        "named-twice",
                        format!("`{}` is named twice", shown(&name)),
                        "take one of them out",
                    );
                } else {
                    found.push(Heading {
                        heading: name,
                        meaning,
                    });
                }
            }
        }
    }
    found
}

/// `[equipment]`.
pub(super) fn equipment(root: &mut Section<'_>) -> Equipment {
    let Some(mut table) = root.section("equipment") else {
        return Equipment::default();
    };
    let substances = table
        .node("substances")
        .and_then(|node| match node.value() {
            crate::decode::Value::Array(_) => Some(
                node.list()?
                    .iter()
                    .filter_map(texts::words_of)
                    .collect::<Vec<_>>(),
            ),
            _ => texts::words_of(&node).map(|one| vec![one]),
        });
    let made = Equipment {
        solids_filter: table.flag("solids_filter"),
        standby_air: table.flag("standby_air"),
        pure_oxygen: table.flag("pure_oxygen"),
        backup_power: table.flag("backup_power"),
        substances,
    };
    table.finish();
    made
}
