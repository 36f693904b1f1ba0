//! What would tell most: for everything not known, how much knowing it would be expected to say about the causes, in
//! bits (Shannon 1948).

use std::collections::BTreeMap;

use super::evidence::{Table, shows};
use super::rank::Ranking;
use crate::engine::{Degree, Engine};
use crate::history::balance::inputs;
use crate::knowledge::{CauseId, Evidence, Knowledge, Test};

/// Expected information about every cause, by the id of what would be looked at.
#[derive(Debug, Clone, Default)]
pub struct Told {
    by_id: BTreeMap<String, BTreeMap<CauseId, f64>>,
}

impl Told {
    /// What would tell most about one cause, best first.
    pub fn about(&self, cause: CauseId) -> Vec<(String, f64)> {
        let mut list: Vec<(String, f64)> = self
            .by_id
            .iter()
            .filter_map(|(id, causes)| Some((id.clone(), *causes.get(&cause)?)))
            .collect();
        list.sort_by(|a, b| b.1.total_cmp(&a.1).then_with(|| a.0.cmp(&b.0)));
        list
    }

    /// Everything that would tell: id, and the information about all causes, each weighted.
    pub fn all(&self, weight: impl Fn(CauseId) -> f64) -> Vec<(String, f64)> {
        let mut list: Vec<(String, f64)> = self
            .by_id
            .iter()
            .map(|(id, causes)| {
                (
                    id.clone(),
                    causes.iter().map(|(c, bits)| bits * weight(*c)).sum(),
                )
            })
            .collect();
        list.sort_by(|a, b| b.1.total_cmp(&a.1).then_with(|| a.0.cmp(&b.0)));
        list
    }

    fn add(&mut self, id: &str, cause: CauseId, bits: f64) {
        if bits < 1e-4 {
            return;
        }
        let slot = self
            .by_id
            .entry(id.to_owned())
            .or_default()
            .entry(cause)
            .or_insert(0.0);
        *slot = slot.max(bits);
    }
}

/// Works it out over the likeliest sets.
pub(super) fn tell(
    knowledge: &Knowledge,
    engine: &Engine<'_>,
    table: &Table,
    degrees: &[Degree],
    ranking: &Ranking,
) -> Told {
    let mut told = Told::default();
    let asked: Vec<CauseId> = ranking
        .order()
        .into_iter()
        .take_while(|c| ranking.of(*c) > 0.01)
        .take(12)
        .collect();
    for (item, degree) in table.items.iter().zip(degrees) {
        if degree.hi - degree.lo < 0.5 {
            continue;
        }
        let ids = unknown_ids(knowledge, engine, item.evidence);
        if ids.is_empty() {
            continue;
        }
        // Probability of seeing it, overall and together with each cause.
        let mut seen = 0.0;
        let mut with: Vec<f64> = vec![0.0; asked.len()];
        for set in &ranking.sets {
            let shown = shows(
                item.background,
                item.causes
                    .iter()
                    .filter(|(c, _)| set.causes.contains(c))
                    .map(|(_, s)| *s),
            );
            seen += set.probability * shown;
            for (at, cause) in asked.iter().enumerate() {
                if set.causes.contains(cause) {
                    with[at] += set.probability * shown;
                }
            }
        }
        for (cause, joint) in asked.iter().zip(with) {
            let bits = information(ranking.of(*cause), seen, joint);
            for id in &ids {
                // Two things to find out halve what one of them tells.
                #[allow(clippy::cast_precision_loss)]
                told.add(id, *cause, bits / ids.len() as f64);
            }
        }
    }
    events(knowledge, engine, ranking, &asked, &mut told);
    told
}

/// Mutual information of two yes-no things: probability of the first, of the second, of both.
fn information(first: f64, second: f64, both: f64) -> f64 {
    let term = |joint: f64, a: f64, b: f64| {
        if joint <= 0.0 || a <= 0.0 || b <= 0.0 {
            0.0
        } else {
            joint * (joint / (a * b)).log2()
        }
    };
    let (not_first, not_second) = (1.0 - first, 1.0 - second);
    (term(both, first, second)
        + term(first - both, first, not_second)
        + term(second - both, not_first, second)
        + term(1.0 - first - second + both, not_first, not_second))
    .max(0.0)
}

/// Events nobody told of yet: how much their answer would move the causes they trigger.
fn events(
    knowledge: &Knowledge,
    engine: &Engine<'_>,
    ranking: &Ranking,
    asked: &[CauseId],
    told: &mut Told,
) {
    /// When a trigger says nothing of its absence, an answer "no" is taken to weigh so much.
    const USUAL_IF_NOT: f64 = 0.7;
    for cause in asked {
        let probability = ranking.of(*cause);
        for (n, trigger) in knowledge[*cause].triggers.iter().enumerate() {
            let degree = engine.trigger(*cause, n);
            if degree.hi - degree.lo < 0.5 || trigger.odds_times <= 1.0 {
                continue;
            }
            let if_not = if trigger.odds_times_if_not < 1.0 {
                trigger.odds_times_if_not
            } else {
                USUAL_IF_NOT
            };
            // The rates with and without the cause that give these two odds.
            let without = (1.0 - if_not) / (trigger.odds_times - if_not);
            let with = (trigger.odds_times * without).min(0.999);
            let seen = probability * with + (1.0 - probability) * without;
            let bits = information(probability, seen, probability * with);
            trigger.when.visit(&mut |test| match test {
                Test::Event { event, .. } => {
                    told.add(&knowledge.vocabulary[*event].id, *cause, bits)
                }
                Test::Sign { sign, .. } => told.add(&knowledge.vocabulary[*sign].id, *cause, bits),
                _ => {}
            });
        }
    }
}

/// The ids of readings and signs that have to be looked at for a piece of evidence and are not known now.
fn unknown_ids(knowledge: &Knowledge, engine: &Engine<'_>, evidence: Evidence) -> Vec<String> {
    let mut ids = Vec::new();
    match evidence {
        Evidence::Sign(id) => ids.push(knowledge.vocabulary[id].id.clone()),
        Evidence::Finding(id) => collect(knowledge, engine, &knowledge[id].when, &mut ids, 0),
    }
    ids.sort();
    ids.dedup();
    ids
}

fn collect(
    knowledge: &Knowledge,
    engine: &Engine<'_>,
    test: &Test,
    ids: &mut Vec<String>,
    depth: usize,
) {
    /// Findings that rest on findings that rest on findings are too far away to ask for.
    const DEEPEST: usize = 3;
    if depth > DEEPEST {
        return;
    }
    let words = &knowledge.vocabulary;
    match test {
        Test::Level { reading, .. } => {
            let now = engine.memory().now();
            let fresh = |id: crate::vocabulary::ReadingId| {
                engine
                    .memory()
                    .reading(id)
                    .and_then(|t| t.newest())
                    .and_then(|s| s.last())
                    .is_some_and(|(time, _)| now - time <= words[id].good_for.max(86_400))
            };
            if words[*reading].derived {
                for input in inputs(&words[*reading].id) {
                    if let Some(id) = words.reading(input)
                        && !fresh(id)
                    {
                        ids.push((*input).to_owned());
                    }
                }
            } else if !fresh(*reading) {
                ids.push(words[*reading].id.clone());
            }
        }
        Test::Sign { sign, .. } if engine.evidence(Evidence::Sign(*sign)).is_unknown() => {
            ids.push(words[*sign].id.clone());
        }
        Test::Event { event, .. } => ids.push(words[*event].id.clone()),
        Test::Finding(id) => {
            let degree = engine.finding(*id);
            if degree.hi - degree.lo >= 0.5 {
                collect(knowledge, engine, &knowledge[*id].when, ids, depth + 1);
            }
        }
        Test::All(parts) | Test::Any(parts) | Test::NOf(_, parts) => {
            for part in parts {
                collect(knowledge, engine, part, ids, depth);
            }
        }
        Test::Not(part) => collect(knowledge, engine, part, ids, depth),
        _ => {}
    }
}

#[cfg(test)]
mod tests {
    use super::information;

    #[test]
    fn independent_things_tell_nothing_and_equal_things_all() {
        assert!(information(0.3, 0.5, 0.15) < 1e-12);
        assert!((information(0.5, 0.5, 0.5) - 1.0).abs() < 1e-12);
    }
}
