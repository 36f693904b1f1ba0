//! `walk.toml`: what a walk asks first, and when it stops asking.

use super::entry::within;
use super::names::Names;
use super::rest::Made;
use crate::decode::Section;
use crate::knowledge::{WalkGroup, WalkRules};

/// Reads the rules of the walk, if this is the file that holds them.
pub(super) fn read(root: &mut Section<'_>, names: &Names, made: &mut Made) {
    let Some(mut table) = root.section("walk") else {
        return;
    };
    let vital = signs(&mut table, "vital", names);
    let mut number =
        |key: &str, low: f64, high: f64| table.required(key).and_then(|n| within(&n, low, high));
    let rules = (|| {
        #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // held within bounds
        Some(WalkRules {
            vital,
            groups: Vec::new(),
            told: number("told", 0.0, 100.0)? as usize,
            asking: number("asking", 0.01, 60.0)?,
            stands_out: number("stands_out", 0.1, 1.0)?,
            least_bits: number("least_bits", 0.0, 10.0)?,
            together: number("together", 0.0, 1.0)?,
            lines: number("lines", 1.0, 20.0)? as usize,
            same_steps: number("same_steps", 0.0, 1.1)?,
            most: number("most", 1.0, 1000.0)? as usize,
        })
    })();
    let groups = table
        .sections("group")
        .into_iter()
        .filter_map(|mut s| {
            let name = s.required_text("name");
            let group = WalkGroup {
                signs: s.texts("signs"),
                events: s.texts("events"),
                name: name?,
            };
            s.finish();
            Some(group)
        })
        .collect();
    table.texts("source");
    table.finish();
    made.walk = rules.map(|r| WalkRules { groups, ..r });
}

fn signs(table: &mut Section<'_>, key: &str, names: &Names) -> Vec<crate::vocabulary::SignId> {
    let Some(node) = table.required(key) else {
        return Vec::new();
    };
    let ids = node.texts().unwrap_or_default();
    ids.iter().filter_map(|id| names.sign(&node, id)).collect()
}
