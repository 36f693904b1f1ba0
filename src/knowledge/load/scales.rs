//! `scales.toml`: priors, thresholds of the verdict, words, names of families.

use super::entry::{id, place, within, words};
use super::rest::Made;
use crate::decode::Section;
use crate::knowledge::{Family, Scales};

/// Reads the scales and the names of families, if this is a file that holds them.
pub(super) fn read(root: &mut Section<'_>, made: &mut Made) {
    for mut section in root.sections("family") {
        let id = id(&mut section, |id| made.families.iter().any(|f| f.id == id));
        let name = words(&mut section, "name");
        let place = place(&section);
        section.finish();
        if let (Some(id), Some(name)) = (id, name) {
            made.families.push(Family { id, name, place });
        }
    }
    let Some(mut table) = root.section("scales") else {
        return;
    };
    let mut number =
        |key: &str, low: f64, high: f64| table.required(key).and_then(|n| within(&n, low, high));
    let scales = (|| {
        Some(Scales {
            incident_review: number("incident_review", 0.0001, 0.9)?,
            incident_walk: number("incident_walk", 0.0001, 0.99)?,
            event_not_noted: number("event_not_noted", 0.0, 1.0)?,
            sign_not_noted: number("sign_not_noted", 0.0, 1.0)?,
            evidence: number("evidence", 0.1, 2.0)?,
            least_background: number("least_background", 0.00001, 0.5)?,
            triggers: number("triggers", 1.0, 1e6)?,
            second_cause: number("second_cause", 0.0, 1.0)?,
            act_minutes: number("act_minutes", 0.001, 1.0)?,
            act_hours: number("act_hours", 0.001, 1.0)?,
            act_days: number("act_days", 0.001, 1.0)?,
            watch: number("watch", 0.001, 1.0)?,
            watch_walk: number("watch_walk", 0.0001, 1.0)?,
            danger: number("danger", 0.01, 1.0)?,
            step_floor: number("step_floor", 0.0, 1.0)?,
            avoid_floor: number("avoid_floor", 0.0, 1.0)?,
            urgency: [
                number("urgency_weeks", 0.0, 100.0)?,
                number("urgency_days", 0.0, 100.0)?,
                number("urgency_hours", 0.0, 100.0)?,
                number("urgency_minutes", 0.0, 100.0)?,
            ],
            words: Vec::new(),
        })
    })();
    let words = table
        .sections("word")
        .into_iter()
        .filter_map(|mut s| {
            let from = s.required_number("from");
            let word = s.required_text("word");
            s.finish();
            Some((from?, word?))
        })
        .collect();
    table.texts("source");
    table.finish();
    made.scales = scales.map(|s| Scales { words, ..s });
}
