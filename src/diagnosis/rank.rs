//! Joint ranking: all sets of no cause, one and two causes are scored, and three where two leave an alarming finding
//! unexplained; a cause's probability is the share of the sets that hold it.

use super::evidence::{Table, log_likelihood, shows};
use crate::engine::Degree;
use crate::knowledge::CauseId;

/// A set of causes and its probability.
#[derive(Debug, Clone, PartialEq)]
pub struct Scored {
    /// The causes, by rising number; empty: nothing is wrong.
    pub causes: Vec<CauseId>,
    /// Probability.
    pub probability: f64,
}

/// The outcome of ranking.
#[derive(Debug, Clone)]
pub struct Ranking {
    /// Probability of every cause.
    pub causes: Vec<f64>,
    /// Probability that nothing is wrong.
    pub nothing: f64,
    /// The likeliest sets, best first, down to a thousandth.
    pub sets: Vec<Scored>,
    /// Weights of presence and absence of every item, as used.
    pub weights: Vec<(f64, f64)>,
}

impl Ranking {
    /// The likeliest set that holds a cause.
    pub fn best_with(&self, cause: CauseId) -> Option<&Scored> {
        self.sets.iter().find(|s| s.causes.contains(&cause))
    }

    /// Probability of a cause.
    pub fn of(&self, cause: CauseId) -> f64 {
        self.causes.get(cause.index()).copied().unwrap_or(0.0)
    }

    /// Causes by falling probability.
    pub fn order(&self) -> Vec<CauseId> {
        let mut order: Vec<CauseId> = (0..self.causes.len())
            .filter_map(|i| u16::try_from(i).ok().map(CauseId))
            .collect();
        order.sort_by(|a, b| self.of(*b).total_cmp(&self.of(*a)).then(a.cmp(b)));
        order
    }
}

/// Sets less likely than this share of the best one are dropped from the list (not from the sums).
const KEPT: f64 = 1e-4;
/// A pair this many natural-log units below the best set so far is left out: e^-22 is 3e-10, and with fewer than 3000
/// pairs all that is left out together stays below a millionth (a property test holds it to that).
const NEGLIGIBLE: f64 = 22.0;
/// An alarming item that a set shows less often than this is unexplained.
pub const EXPLAINED: f64 = 0.15;

/// Scores sets. `log_odds` are the prior odds of each cause against nothing; `second` is the factor on each cause after
/// the first; `evidence` the share of the evidence that counts.
pub(super) fn rank(
    table: &Table,
    degrees: &[Degree],
    log_odds: &[f64],
    second: f64,
    evidence: f64,
) -> Ranking {
    let weights: Vec<(f64, f64)> = table
        .weights(degrees)
        .into_iter()
        .map(|(present, absent)| (present * evidence, absent * evidence))
        .collect();
    let alone: Vec<f64> = table
        .items
        .iter()
        .zip(&weights)
        .map(|(item, w)| log_likelihood(*w, shows(item.background, std::iter::empty())))
        .collect();
    let scorer = Scorer {
        table,
        weights: &weights,
        alone: &alone,
        log_odds,
        log_second: second.ln(),
    };
    let count = log_odds.len();
    let singles: Vec<f64> = (0..count).map(|c| scorer.single(c)).collect();
    let mut scores: Vec<(Vec<usize>, f64)> = vec![(Vec::new(), 0.0)];
    scores.extend(singles.iter().enumerate().map(|(c, s)| (vec![c], *s)));
    let mut best = singles.iter().copied().fold(0.0, f64::max);
    for a in 0..count {
        for b in a + 1..count {
            let score = scorer.pair(a, b, singles[a], singles[b]);
            if score > best - NEGLIGIBLE {
                best = best.max(score);
                scores.push((vec![a, b], score));
            }
        }
    }
    triples(&scorer, degrees, &singles, &mut scores);
    finish(&scores, count, weights)
}

struct Scorer<'t> {
    table: &'t Table,
    weights: &'t [(f64, f64)],
    alone: &'t [f64],
    log_odds: &'t [f64],
    log_second: f64,
}

impl Scorer<'_> {
    /// Log score of one cause against nothing.
    fn single(&self, cause: usize) -> f64 {
        let gain: f64 = self.table.by_cause[cause]
            .iter()
            .map(|(item, seen)| self.gain(*item, std::iter::once(*seen)))
            .sum();
        self.log_odds[cause] + gain
    }

    fn gain(&self, item: usize, seen: impl Iterator<Item = f64>) -> f64 {
        let weight = self.weights[item];
        if weight == (0.0, 0.0) {
            return 0.0;
        }
        log_likelihood(weight, shows(self.table.items[item].background, seen)) - self.alone[item]
    }

    /// Log score of two: the sum of both, corrected where they share an item.
    fn pair(&self, a: usize, b: usize, single_a: f64, single_b: f64) -> f64 {
        let mut score = single_a + single_b + self.log_second;
        let (left, right) = (&self.table.by_cause[a], &self.table.by_cause[b]);
        let mut j = 0;
        for (item, seen) in left {
            while right.get(j).is_some_and(|r| r.0 < *item) {
                j += 1;
            }
            if let Some((other, also)) = right.get(j)
                && other == item
            {
                score += self.gain(*item, [*seen, *also].into_iter())
                    - self.gain(*item, std::iter::once(*seen))
                    - self.gain(*item, std::iter::once(*also));
            }
        }
        score
    }

    /// Log score of any set.
    fn set(&self, causes: &[usize]) -> f64 {
        let mut items: Vec<usize> = causes
            .iter()
            .flat_map(|c| self.table.by_cause[*c].iter().map(|(item, _)| *item))
            .collect();
        items.sort_unstable();
        items.dedup();
        let gain: f64 = items
            .iter()
            .map(|item| self.gain(*item, self.seen(*item, causes)))
            .sum();
        let odds: f64 = causes.iter().map(|c| self.log_odds[*c]).sum();
        let extra = causes.len().saturating_sub(1);
        #[allow(clippy::cast_precision_loss)] // two or three
        let penalty = extra as f64 * self.log_second;
        odds + gain + penalty
    }

    fn seen<'a>(&'a self, item: usize, causes: &'a [usize]) -> impl Iterator<Item = f64> + 'a {
        self.table.items[item]
            .causes
            .iter()
            .filter(|(c, _)| causes.contains(&c.index()))
            .map(|(_, seen)| *seen)
    }

    fn unexplained(&self, degrees: &[Degree], causes: &[usize]) -> Option<usize> {
        self.table
            .items
            .iter()
            .zip(degrees)
            .position(|(item, degree)| {
                item.alarming
                    && degree.lo >= 0.5
                    && shows(
                        item.background,
                        item.causes
                            .iter()
                            .filter(|(c, _)| causes.contains(&c.index()))
                            .map(|(_, seen)| *seen),
                    ) < EXPLAINED
            })
    }
}

/// Three where the best pairs leave an alarming item unexplained: those causes are tried that show it.
fn triples(
    scorer: &Scorer<'_>,
    degrees: &[Degree],
    singles: &[f64],
    scores: &mut Vec<(Vec<usize>, f64)>,
) {
    const PAIRS_TRIED: usize = 12;
    let mut pairs: Vec<(Vec<usize>, f64)> =
        scores.iter().filter(|s| s.0.len() == 2).cloned().collect();
    pairs.sort_by(|a, b| b.1.total_cmp(&a.1));
    let mut seen: Vec<Vec<usize>> = Vec::new();
    for (pair, _) in pairs.iter().take(PAIRS_TRIED) {
        let Some(item) = scorer.unexplained(degrees, pair) else {
            continue;
        };
        for (cause, shown) in &scorer.table.items[item].causes {
            let third = cause.index();
            if *shown < EXPLAINED || pair.contains(&third) || !singles[third].is_finite() {
                continue;
            }
            let mut set = pair.clone();
            set.push(third);
            set.sort_unstable();
            if !seen.contains(&set) {
                scores.push((set.clone(), scorer.set(&set)));
                seen.push(set);
            }
        }
    }
}

fn finish(scores: &[(Vec<usize>, f64)], count: usize, weights: Vec<(f64, f64)>) -> Ranking {
    let top = scores.iter().map(|s| s.1).fold(f64::NEG_INFINITY, f64::max);
    let total: f64 = scores.iter().map(|s| (s.1 - top).exp()).sum();
    let mut causes = vec![0.0; count];
    let mut nothing = 0.0;
    let mut sets = Vec::new();
    for (set, score) in scores {
        let probability = (score - top).exp() / total;
        if set.is_empty() {
            nothing = probability;
        }
        for cause in set {
            causes[*cause] += probability;
        }
        if probability > KEPT {
            sets.push(Scored {
                causes: set
                    .iter()
                    .filter_map(|c| u16::try_from(*c).ok().map(CauseId))
                    .collect(),
                probability,
            });
        }
    }
    sets.sort_by(|a, b| b.probability.total_cmp(&a.probability));
    Ranking {
        causes,
        nothing,
        sets,
        weights,
    }
}

/// Full enumeration of all sets up to `largest` causes, the slow way, to hold the fast way against.
#[cfg(test)]
pub(super) fn enumerate(
    table: &Table,
    degrees: &[Degree],
    log_odds: &[f64],
    second: f64,
    evidence: f64,
    largest: usize,
) -> Vec<f64> {
    let weights: Vec<(f64, f64)> = table
        .weights(degrees)
        .into_iter()
        .map(|(p, a)| (p * evidence, a * evidence))
        .collect();
    let count = log_odds.len();
    let mut probabilities = vec![0.0; count];
    let mut total = 0.0;
    for set in 0_u32..(1 << count) {
        let members: Vec<usize> = (0..count).filter(|c| set & (1 << c) != 0).collect();
        if members.len() > largest {
            continue;
        }
        let mut score: f64 = members.iter().map(|c| log_odds[*c]).sum();
        score +=
            second.ln() * f64::from(u32::try_from(members.len().saturating_sub(1)).unwrap_or(0));
        for (item, weight) in table.items.iter().zip(&weights) {
            let seen = item
                .causes
                .iter()
                .filter(|(c, _)| members.contains(&c.index()))
                .map(|(_, s)| *s);
            score += log_likelihood(*weight, shows(item.background, seen));
        }
        let share = score.exp();
        total += share;
        for c in members {
            probabilities[c] += share;
        }
    }
    probabilities.iter().map(|p| p / total).collect()
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::super::evidence::Item;
    use super::*;
    use crate::knowledge::{Evidence, FindingId};

    const CAUSES: usize = 6;
    const ITEMS: usize = 9;

    /// A random small rule base: backgrounds, groups and how often each cause shows each item.
    fn table(numbers: &[(f64, usize, Vec<Option<f64>>)]) -> Table {
        let mut by_cause = vec![Vec::new(); CAUSES];
        let items = numbers
            .iter()
            .enumerate()
            .map(|(at, (background, group, seen))| {
                let causes: Vec<(CauseId, f64)> = seen
                    .iter()
                    .enumerate()
                    .filter_map(|(c, s)| Some((CauseId(u16::try_from(c).ok()?), (*s)?)))
                    .collect();
                for (c, s) in &causes {
                    by_cause[c.index()].push((at, *s));
                }
                Item {
                    evidence: Evidence::Finding(FindingId(u16::try_from(at).unwrap_or(0))),
                    background: *background,
                    group: *group,
                    alarming: false,
                    usual: false,
                    expected: causes.iter().map(|c| c.1).fold(0.0, f64::max),
                    causes,
                }
            })
            .collect();
        Table {
            items,
            by_cause,
            groups: ITEMS,
        }
    }

    proptest! {
        #[test]
        fn pruning_stays_within_a_millionth_of_full_enumeration(
            numbers in prop::collection::vec(
                (0.005..0.9_f64, 0..ITEMS, prop::collection::vec(prop::option::of(0.01..0.99_f64), CAUSES)),
                ITEMS,
            ),
            known in prop::collection::vec((0.0..=1.0_f64, 0.0..=1.0_f64), ITEMS),
            log_odds in prop::collection::vec(-9.0..4.0_f64, CAUSES),
            second in 0.05..1.0_f64,
        ) {
            let table = table(&numbers);
            let degrees: Vec<Degree> = known.iter().map(|(a, b)| Degree::between(*a, *b)).collect();
            let quick = rank(&table, &degrees, &log_odds, second, 0.7);
            let full = enumerate(&table, &degrees, &log_odds, second, 0.7, 2);
            for (a, b) in quick.causes.iter().zip(full) {
                prop_assert!((a - b).abs() < 1e-6, "{a} {b}");
            }
        }
    }
}
