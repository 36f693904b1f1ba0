//! The table of evidence: every finding or sign that is an effect of some cause, how often it shows on ordinary days,
//! and how often under each cause.

use std::collections::HashMap;

use crate::engine::{Degree, Engine};
use crate::knowledge::{CauseId, Evidence, Knowledge};

/// One piece of evidence there may be.
#[derive(Debug, Clone)]
pub struct Item {
    /// The finding or sign.
    pub evidence: Evidence,
    /// How often it shows with nothing wrong.
    pub background: f64,
    /// Index of its group; items of one group tell the same thing.
    pub group: usize,
    /// A cause must explain it.
    pub alarming: bool,
    /// It is usual: there on most ordinary days, so that it tells by being absent.
    pub usual: bool,
    /// How often what tells (its presence, or the absence of what is usual) shows under the cause that shows it most.
    pub expected: f64,
    /// How often it shows under the causes that it is an effect of.
    pub causes: Vec<(CauseId, f64)>,
}

/// All items, and the items of every cause.
#[derive(Debug, Clone)]
pub struct Table {
    /// The items.
    pub items: Vec<Item>,
    /// By cause: item index and how often it shows, by rising index.
    pub by_cause: Vec<Vec<(usize, f64)>>,
    pub(super) groups: usize,
}

impl Table {
    /// The table of a rule base.
    pub fn new(knowledge: &Knowledge) -> Self {
        let mut items: Vec<Item> = Vec::new();
        let mut index: HashMap<Evidence, usize> = HashMap::new();
        let mut groups: HashMap<String, usize> = HashMap::new();
        let mut by_cause = vec![Vec::new(); knowledge.causes.len()];
        for (number, cause) in knowledge.causes.iter().enumerate() {
            let Ok(id) = u16::try_from(number).map(CauseId) else {
                continue;
            };
            for effect in &cause.effects {
                let at = *index.entry(effect.evidence).or_insert_with(|| {
                    items.push(item(knowledge, effect.evidence, &mut groups));
                    items.len() - 1
                });
                items[at].causes.push((id, effect.seen_in));
                let telling = if items[at].usual {
                    1.0 - effect.seen_in
                } else {
                    effect.seen_in
                };
                items[at].expected = items[at].expected.max(telling);
                by_cause[number].push((at, effect.seen_in));
            }
            by_cause[number].sort_unstable_by_key(|(at, _)| *at);
        }
        Self {
            items,
            by_cause,
            groups: groups.len(),
        }
    }

    /// How true every item is.
    pub fn degrees(&self, engine: &Engine<'_>) -> Vec<Degree> {
        self.items
            .iter()
            .map(|i| engine.evidence(i.evidence))
            .collect()
    }

    /// What each item's presence and absence weighs: members of a group that tell the same thing are added and divided
    /// by the root of their number. What is usual tells by its absence, so that "ammonia is low" not being so and
    /// "ammonia is raised" share one weight. What tells nothing counts as a member as far as some cause would have shown
    /// it: what hardly ever shows does not dilute the absence of what nearly always does.
    pub fn weights(&self, degrees: &[Degree]) -> Vec<(f64, f64)> {
        let mut telling = vec![0.0; self.groups];
        let mut silent = vec![0.0; self.groups];
        for (item, degree) in self.items.iter().zip(degrees) {
            let (tells, not) = item.sides(*degree);
            telling[item.group] += tells;
            silent[item.group] += not * item.expected;
        }
        self.items
            .iter()
            .zip(degrees)
            .map(|(item, degree)| {
                let shared = |count: f64| 1.0 / count.max(1.0).sqrt();
                let (tells, not) = item.sides(*degree);
                let (tells, not) = (
                    tells * shared(telling[item.group]),
                    not * shared(silent[item.group]),
                );
                if item.usual {
                    (not, tells)
                } else {
                    (tells, not)
                }
            })
            .collect()
    }
}

impl Item {
    /// How much of what tells was seen, and how much of its opposite.
    fn sides(&self, degree: Degree) -> (f64, f64) {
        let (present, absent) = (degree.lo, 1.0 - degree.hi);
        if self.usual {
            (absent, present)
        } else {
            (present, absent)
        }
    }
}

fn item(knowledge: &Knowledge, evidence: Evidence, groups: &mut HashMap<String, usize>) -> Item {
    let (background, group, alarming, own) = match evidence {
        Evidence::Finding(id) => {
            let f = &knowledge[id];
            (
                f.background,
                &f.group,
                f.alarming,
                format!("finding {}", f.id),
            )
        }
        Evidence::Sign(id) => {
            let s = &knowledge.vocabulary[id];
            (s.background, &s.group, s.alarming, format!("sign {}", s.id))
        }
    };
    let key = if group.is_empty() { own } else { group.clone() };
    let next = groups.len();
    Item {
        evidence,
        background: background.max(knowledge.scales.least_background),
        group: *groups.entry(key).or_insert(next),
        alarming,
        usual: background > 0.5,
        expected: 0.0,
        causes: Vec::new(),
    }
}

/// How often an item shows under a set of causes, by noisy-OR (Pearl 1988; Shwe et al. 1991): it is absent only if the
/// background and every cause each fail to show it. A cause that shows it less often than the background hides it: the
/// whole is scaled down by that cause's share of the background.
pub fn shows(background: f64, seen: impl Iterator<Item = f64>) -> f64 {
    let mut fails = 1.0 - background;
    let mut hidden = 1.0;
    for s in seen {
        if s >= background {
            fails *= 1.0 - s;
        } else {
            hidden *= s / background;
        }
    }
    ((1.0 - fails) * hidden).clamp(1e-9, 1.0 - 1e-9)
}

/// The log-likelihood of what is known of an item when it shows so often.
pub fn log_likelihood((present, absent): (f64, f64), shows: f64) -> f64 {
    let mut sum = 0.0;
    if present > 0.0 {
        sum += present * shows.ln();
    }
    if absent > 0.0 {
        sum += absent * (1.0 - shows).ln();
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::knowledge::FindingId;

    fn item(at: u16, usual: bool, expected: f64) -> Item {
        Item {
            evidence: Evidence::Finding(FindingId(at)),
            background: if usual { 0.9 } else { 0.05 },
            group: 0,
            alarming: false,
            usual,
            expected,
            causes: Vec::new(),
        }
    }

    fn weights(items: Vec<Item>, degrees: &[Degree]) -> Vec<(f64, f64)> {
        let table = Table {
            items,
            by_cause: Vec::new(),
            groups: 1,
        };
        table.weights(degrees)
    }

    #[test]
    fn what_is_raised_and_what_is_not_low_share_one_weight() {
        let items = vec![item(0, false, 0.9), item(1, true, 0.9)];
        let half = 1.0 / 2.0_f64.sqrt();
        let both = weights(items, &[Degree::TRUE, Degree::FALSE]);
        assert_eq!(both, [(half, 0.0), (0.0, half)]);
    }

    #[test]
    fn what_hardly_ever_shows_does_not_dilute_an_absence() {
        let items = vec![item(0, false, 0.9), item(1, false, 0.02)];
        let both = weights(items, &[Degree::FALSE, Degree::FALSE]);
        assert_eq!(both[0], (0.0, 1.0));
    }

    #[test]
    fn what_is_unknown_weighs_nothing() {
        let items = vec![item(0, false, 0.9), item(1, true, 0.9)];
        let both = weights(items, &[Degree::UNKNOWN, Degree::UNKNOWN]);
        assert_eq!(both, [(0.0, 0.0), (0.0, 0.0)]);
    }
}
