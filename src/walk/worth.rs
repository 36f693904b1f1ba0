//! What asking is worth: the expected information about the sets of causes (Shannon 1948; Lindley 1956), weighted by
//! how soon they harm.
//!
//! What can be seen under each likely set is what the diagnosis itself goes by; an answer is worth the mean divergence
//! (Kullback & Leibler 1951) between what this set would show and what is expected of all sets together.

use std::collections::BTreeMap;

use super::Ask;
use super::reach::Reach;
use crate::diagnosis::{Doctor, Ranking, shows};
use crate::engine::{Engine, Limits};
use crate::knowledge::{CauseId, Knowledge, Test};
use crate::site::Site;

/// Sets that are considered: the likeliest that make up all but a hundredth or so.
const SETS: usize = 160;

/// How likely each possible outcome of asking is under each set, and what would be learned.
#[derive(Debug, Clone)]
pub struct Prospect {
    /// What would be asked.
    pub ask: Ask,
    /// Expected information, in bits, weighted by urgency.
    pub bits: f64,
    /// Probability of each outcome under each set, by outcome, then set in the order of the ranking.
    pub outcomes: Vec<Vec<f64>>,
}

/// How often each piece of evidence shows under each cause, laid out for quick reading.
#[derive(Debug, Clone)]
pub(super) struct Lens {
    causes: usize,
    seen: Vec<f32>,
}

impl Lens {
    pub fn new(knowledge: &Knowledge, doctor: &Doctor<'_>) -> Self {
        let causes = knowledge.causes.len();
        let items = &doctor.table().items;
        let mut seen = vec![f32::NAN; items.len() * causes];
        for (row, item) in items.iter().enumerate() {
            for (cause, share) in &item.causes {
                if let Some(cell) = seen.get_mut(row * causes + cause.index()) {
                    #[allow(clippy::cast_possible_truncation)] // a share between 0 and 1
                    let share = *share as f32;
                    *cell = share;
                }
            }
        }
        Self { causes, seen }
    }

    fn of(&self, item: usize, cause: CauseId) -> Option<f64> {
        let share = self.seen.get(item * self.causes + cause.index())?;
        (!share.is_nan()).then(|| f64::from(*share))
    }
}

/// What is looked at from.
pub(super) struct View<'a, 'k> {
    pub knowledge: &'k Knowledge,
    pub engine: &'a Engine<'k>,
    pub site: &'a Site,
    pub limits: &'a Limits<'k>,
    pub doctor: &'a Doctor<'k>,
    pub ranking: &'a Ranking,
    pub lens: &'a Lens,
}

/// A way in which one answer shows: its probability under each set, and with how many other answers it takes.
struct Face {
    shares: Vec<f64>,
    with: usize,
}

impl View<'_, '_> {
    /// Everything that can be asked and tells something, in no particular order.
    pub fn prospects(&self) -> Vec<Prospect> {
        let sets = self.ranking.sets.len().min(SETS);
        let total: f64 = self
            .ranking
            .sets
            .iter()
            .take(sets)
            .map(|s| s.probability)
            .sum();
        let weights: Vec<(f64, f64)> =
            self.ranking
                .sets
                .iter()
                .take(sets)
                .map(|s| {
                    let urgent = s.causes.iter().map(|c| {
                        self.knowledge.scales.urgency[self.knowledge[*c].urgency as usize]
                    });
                    (
                        s.probability / total,
                        urgent
                            .reduce(f64::max)
                            .unwrap_or(self.knowledge.scales.urgency[0]),
                    )
                })
                .collect();
        let mut faces: BTreeMap<Ask, Vec<Face>> = BTreeMap::new();
        self.effects(sets, &mut faces);
        self.triggers(sets, &mut faces);
        faces
            .into_iter()
            .filter_map(|(ask, faces)| {
                let alone: Vec<&Face> = faces.iter().filter(|f| f.with == 1).collect();
                let outcomes = if matches!(ask, Ask::Reading(_)) && !alone.is_empty() {
                    partition(&alone, sets)
                } else {
                    let best = alone.iter().max_by(|a, b| {
                        information(&yes_no(a), &weights)
                            .total_cmp(&information(&yes_no(b), &weights))
                    })?;
                    yes_no(best)
                };
                let whole = information(&outcomes, &weights);
                let part = faces
                    .iter()
                    .filter(|f| f.with > 1)
                    .map(|f| {
                        #[allow(clippy::cast_precision_loss)] // a handful
                        let share = f.with as f64;
                        information(&yes_no(f), &weights) / share
                    })
                    .fold(0.0, f64::max);
                Some(Prospect {
                    ask,
                    bits: whole.max(part),
                    outcomes,
                })
            })
            .collect()
    }

    fn effects(&self, sets: usize, faces: &mut BTreeMap<Ask, Vec<Face>>) {
        let reach = Reach {
            engine: self.engine,
            site: self.site,
            limits: self.limits,
        };
        let items = &self.doctor.table().items;
        for (row, (item, degree)) in items
            .iter()
            .zip(self.doctor.degrees(self.engine))
            .enumerate()
        {
            if degree.hi - degree.lo < 0.5 {
                continue;
            }
            let Some(asks) = reach.evidence(item.evidence).filter(|a| !a.is_empty()) else {
                continue;
            };
            let shares: Vec<f64> = self
                .ranking
                .sets
                .iter()
                .take(sets)
                .map(|set| {
                    shows(
                        item.background,
                        set.causes.iter().filter_map(|c| self.lens.of(row, *c)),
                    )
                })
                .collect();
            for ask in &asks {
                faces.entry(*ask).or_default().push(Face {
                    shares: shares.clone(),
                    with: asks.len(),
                });
            }
        }
    }

    /// What makes causes likelier beforehand: the rates with and without the cause that give the odds of its trigger.
    fn triggers(&self, sets: usize, faces: &mut BTreeMap<Ask, Vec<Face>>) {
        /// When a trigger says nothing of its absence, an answer "no" is taken to weigh so much.
        const USUAL_IF_NOT: f64 = 0.7;
        let reach = Reach {
            engine: self.engine,
            site: self.site,
            limits: self.limits,
        };
        /// What is asked and how it may be answered; under each cause, how often so and how often not.
        type Rates = BTreeMap<(Ask, usize), Vec<(CauseId, f64, f64)>>;
        let mut rates = Rates::new();
        for (number, cause) in self.knowledge.causes.iter().enumerate() {
            let Ok(id) = u16::try_from(number).map(CauseId) else {
                continue;
            };
            if self.ranking.of(id) < 0.002 {
                continue;
            }
            for (n, trigger) in cause.triggers.iter().enumerate() {
                let degree = self.engine.trigger(id, n);
                if degree.hi - degree.lo < 0.5 || trigger.odds_times <= 1.0 {
                    continue;
                }
                let Some(mut asks) = reach.test(&trigger.when, 0) else {
                    continue;
                };
                asks.sort();
                asks.dedup();
                let any = matches!(trigger.when, Test::Any(_));
                let if_not = if trigger.odds_times_if_not < 1.0 {
                    trigger.odds_times_if_not
                } else {
                    USUAL_IF_NOT
                };
                let without = (1.0 - if_not) / (trigger.odds_times - if_not);
                let with = (trigger.odds_times * without).min(0.95);
                for ask in &asks {
                    let count = if any { 1 } else { asks.len() };
                    #[allow(clippy::cast_precision_loss)] // a handful
                    let share = if any { asks.len() as f64 } else { 1.0 };
                    rates.entry((*ask, count)).or_default().push((
                        id,
                        with / share,
                        without / share,
                    ));
                }
            }
        }
        for ((ask, with), rates) in rates {
            let base = rates
                .iter()
                .map(|r| r.2)
                .fold(f64::INFINITY, f64::min)
                .min(0.5);
            let shares = self
                .ranking
                .sets
                .iter()
                .take(sets)
                .map(|set| {
                    let seen = rates
                        .iter()
                        .filter(|r| set.causes.contains(&r.0))
                        .map(|r| r.1);
                    shows(base, seen.filter(|s| *s >= base))
                })
                .collect();
            faces.entry(ask).or_default().push(Face { shares, with });
        }
    }
}

fn yes_no(face: &Face) -> Vec<Vec<f64>> {
    vec![
        face.shares.clone(),
        face.shares.iter().map(|s| 1.0 - s).collect(),
    ]
}

/// A number falls into one of several bands at most: findings about it are taken as bands, with what is left as one more.
fn partition(faces: &[&Face], sets: usize) -> Vec<Vec<f64>> {
    let mut outcomes: Vec<Vec<f64>> = faces.iter().map(|f| f.shares.clone()).collect();
    let mut rest = vec![0.0; sets];
    for (set, left) in rest.iter_mut().enumerate() {
        let sum: f64 = outcomes.iter().filter_map(|o| o.get(set)).sum();
        let scale = if sum > 0.98 { 0.98 / sum } else { 1.0 };
        for outcome in &mut outcomes {
            if let Some(share) = outcome.get_mut(set) {
                *share *= scale;
            }
        }
        *left = 1.0 - sum * scale;
    }
    outcomes.push(rest);
    outcomes
}

/// Mean divergence of what each set shows from what all show, in bits; each set has its probability and its weight.
fn information(outcomes: &[Vec<f64>], sets: &[(f64, f64)]) -> f64 {
    let mut bits = 0.0;
    for outcome in outcomes {
        let mean: f64 = outcome.iter().zip(sets).map(|(q, (p, _))| p * q).sum();
        if mean <= 0.0 {
            continue;
        }
        for (q, (p, weight)) in outcome.iter().zip(sets) {
            if *q > 0.0 {
                bits += p * weight * q * (q / mean).log2();
            }
        }
    }
    bits.max(0.0)
}
