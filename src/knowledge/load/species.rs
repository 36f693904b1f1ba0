//! `species/*.toml`: one species a file.

use std::collections::BTreeMap;

use super::entry::{sources, words};
use super::names::Names;
use super::rest::Made;
use crate::decode::Section;
use crate::knowledge::{LimitLevel, Side, Species};

/// Reads the species of one file, if it is a species file.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    if !root.has("limits") {
        return;
    }
    let id = words(root, "id");
    let name = words(root, "name");
    let warm = root.required("warm").and_then(|n| n.flag());
    let mut limits = BTreeMap::new();
    let mut from = BTreeMap::new();
    if let Some(mut table) = root.section("limits") {
        for reading_id in table.keys() {
            let Some(node) = table.node(&reading_id) else {
                continue;
            };
            let (Some(reading), Some(mut band)) =
                (names.reading(&node, &reading_id), node.section())
            else {
                continue;
            };
            for (level_word, level) in [
                ("comfort", LimitLevel::Comfort),
                ("stress", LimitLevel::Stress),
                ("lethal", LimitLevel::Lethal),
            ] {
                for (side_word, side) in [("low", Side::Low), ("high", Side::High)] {
                    if let Some(value) = band.number(&format!("{level_word}_{side_word}")) {
                        limits.insert((reading, level as u8, side as u8), value);
                    }
                }
            }
            from.insert(reading, sources(&mut band, names));
            in_order(&band, &limits, reading);
            band.finish();
        }
        table.finish();
    }
    let oxygen_use = root.number("oxygen_use_mg_per_kg_h");
    root.has("oxygen_use_source");
    let breathes_air = root.flag("breathes_air").unwrap_or(false);
    root.has("source");
    if let (Some(id), Some(name), Some(warm)) = (id, name, warm) {
        if made.species.iter().any(|s| s.id == id) {
            root.fault_at_key(
                "id",
                "id-twice",
                format!("`{id}` is defined twice"),
                "take one out",
            );
            return;
        }
        made.species.push(Species {
            id,
            name,
            warm,
            limits,
            sources: from,
            oxygen_use,
            breathes_air,
        });
    }
}

/// Limits go outward: lethal low, stress low, comfort low, comfort high, stress high, lethal high.
fn in_order(
    band: &Section<'_>,
    limits: &BTreeMap<(crate::vocabulary::ReadingId, u8, u8), f64>,
    reading: crate::vocabulary::ReadingId,
) {
    let outward = [
        (LimitLevel::Lethal, Side::Low),
        (LimitLevel::Stress, Side::Low),
        (LimitLevel::Comfort, Side::Low),
        (LimitLevel::Comfort, Side::High),
        (LimitLevel::Stress, Side::High),
        (LimitLevel::Lethal, Side::High),
    ];
    let given: Vec<f64> = outward
        .iter()
        .filter_map(|(level, side)| limits.get(&(reading, *level as u8, *side as u8)).copied())
        .collect();
    if given.windows(2).any(|w| matches!(w, [a, b] if a > b)) {
        band.fault(
            "out-of-order",
            format!("the limits of `{}` are not in order", band.name()),
            "lethal low, stress low, comfort low, comfort high, stress high, lethal high must not fall",
        );
    }
}
