//! Steps ranked by expected good less expected harm over the causes' probabilities; what would harm under a cause that
//! can't be excluded; first aid.

use crate::diagnosis::{Decision, Doctor, Ranking, Verdict};
use crate::engine::{Degree, Engine, Limits};
use crate::knowledge::{CauseId, Knowledge, Step, StepId, Test, Urgency, When};
use crate::site::Site;

/// One step and what is to be said of it.
#[derive(Debug, Clone, PartialEq)]
pub struct Advised {
    /// Which.
    pub step: StepId,
    /// Causes it helps under, the one it does most for first.
    pub because: Vec<CauseId>,
    /// Something must be looked at first: what would forbid it, or what it needs, is not known.
    pub check_first: bool,
    /// Expected good less expected harm.
    pub worth: f64,
}

/// One step to leave alone.
#[derive(Debug, Clone, PartialEq)]
pub struct Warned {
    /// Which.
    pub step: StepId,
    /// Causes it would harm under.
    pub because: Vec<CauseId>,
    /// Expected harm.
    pub harm: f64,
}

/// What to do and what not.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Advice {
    /// Before anything is explained, in this order.
    pub first_aid: Vec<Advised>,
    /// Every step worth taking: by time, then by worth.
    pub steps: Vec<Advised>,
    /// What to leave alone, most harmful first.
    pub avoid: Vec<Warned>,
}

/// First aid is short: no more than this many lines.
const FIRST_AID: usize = 5;
/// At most so many things to avoid: who is told of everything remembers nothing.
const AVOID: usize = 7;
/// At most so many steps of each time beside first aid.
const MOST: [(When, usize); 4] = [
    (When::Now, 5),
    (When::Hours, 5),
    (When::Days, 4),
    (When::Recovery, 4),
];
/// A step worth less than this share of the best of its time, or of the best of all, is left out.
const LEAST_OF_ITS_TIME: f64 = 0.2;
const LEAST_OF_ALL: f64 = 0.06;
/// Causes named with a step.
const BECAUSE: usize = 4;
/// A cause this likely may be acted on, and not only looked at, while nothing is urgent; the smaller one where it takes
/// weeks to harm, and a wrong step does little.
const ACT_ON_WATCH: f64 = 0.5;
const ACT_ON_WATCH_WEEKS: f64 = 0.25;
/// What is forbidden but would help is named under avoid with this share of its good as harm.
const TEMPTS: f64 = 0.4;
/// When fish may die within minutes, a cause that kills in minutes counts at least so likely for first aid.
const LEAST_FOR_FIRST_AID: f64 = 0.02;

/// What is advised from.
pub struct Ground<'a, 'k> {
    /// The rule base.
    pub knowledge: &'k Knowledge,
    /// The facts.
    pub engine: &'a Engine<'k>,
    /// The site.
    pub site: &'a Site,
    /// Its limits.
    pub limits: &'a Limits<'k>,
    /// The causes.
    pub ranking: &'a Ranking,
    /// The verdict.
    pub decision: &'a Decision<'k>,
}

/// How a step stands under the facts, before its worth.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Standing {
    Open,
    CheckFirst,
    Forbidden,
    Pointless,
}

impl Ground<'_, '_> {
    fn judge(&self, test: &Test) -> Degree {
        let standing = |causes: &[CauseId]| Doctor::any_of(self.ranking, causes);
        prove_degree(test, self, &standing)
    }

    /// Whether a test holds (rules of thumb for cautions and rounds too).
    pub fn holds(&self, test: &Test) -> bool {
        self.judge(test).lo >= 0.5
    }

    fn standing(&self, step: &Step) -> Standing {
        if let Some(key) = &step.equipment
            && self.has(key) == Some(false)
        {
            return Standing::Pointless;
        }
        let mut standing = Standing::Open;
        if let Some(needs) = &step.needs {
            let degree = self.judge(needs);
            if degree.hi < 0.5 {
                return Standing::Pointless;
            }
            if degree.lo < 0.5 && !step.check_first.is_empty() {
                standing = Standing::CheckFirst;
            }
        }
        if let Some(never_if) = &step.never_if {
            let degree = self.judge(never_if);
            if degree.lo >= 0.5 {
                return Standing::Forbidden;
            }
            if degree.hi >= 0.5 {
                standing = Standing::CheckFirst;
            }
        }
        standing
    }

    /// The law or a life hangs on it: when what it needs is known to hold it leads its list and is never left out.
    fn pinned(&self, step: StepId) -> bool {
        let step = &self.knowledge[step];
        step.pinned && step.needs.as_ref().is_none_or(|n| self.holds(n))
    }

    /// First aid can't wait for measurements: only what is known to forbid it stops a step. What it needs must be known.
    fn fit_for_first_aid(&self, step: &Step) -> bool {
        let needed = step.needs.as_ref().is_none_or(|n| self.holds(n));
        needed && matches!(self.standing(step), Standing::Open | Standing::CheckFirst)
    }

    fn has(&self, key: &str) -> Option<bool> {
        let equipment = &self.site.equipment;
        match key {
            "solids_filter" => equipment.solids_filter,
            "standby_air" => equipment.standby_air,
            "pure_oxygen" => equipment.pure_oxygen,
            "backup_power" => equipment.backup_power,
            _ => None,
        }
    }

    /// Probability times amount times urgency, by cause, largest first.
    fn expected<'s>(
        &self,
        amounts: impl Iterator<Item = (&'s CauseId, &'s f64)>,
        least: impl Fn(CauseId) -> f64,
    ) -> Vec<(CauseId, f64)> {
        let mut shares: Vec<(CauseId, f64)> = amounts
            .map(|(cause, amount)| {
                let urgency = self.knowledge[*cause].urgency;
                let weight = self.knowledge.scales.urgency[urgency as usize];
                let probability = self.ranking.of(*cause).max(least(*cause));
                (*cause, probability * amount * weight)
            })
            .filter(|(_, share)| *share > 0.0)
            .collect();
        shares.sort_by(|a, b| b.1.total_cmp(&a.1));
        shares
    }
}

fn prove_degree(
    test: &Test,
    ground: &Ground<'_, '_>,
    standing: &impl Fn(&[CauseId]) -> f64,
) -> Degree {
    let fold = |tests: &[Test], start: Degree, join: fn(Degree, Degree) -> Degree| {
        tests
            .iter()
            .map(|t| prove_degree(t, ground, standing))
            .fold(start, join)
    };
    match test {
        Test::All(tests) => fold(tests, Degree::TRUE, Degree::and),
        Test::Any(tests) => fold(tests, Degree::FALSE, Degree::or),
        Test::Not(test) => prove_degree(test, ground, standing).complement(),
        Test::NOf(n, tests) => Degree::nth_largest(
            *n,
            tests
                .iter()
                .map(|t| prove_degree(t, ground, standing))
                .collect::<Vec<_>>()
                .into_iter(),
        ),
        Test::Finding(id) => ground.engine.finding(*id),
        leaf => ground
            .engine
            .judge_test(leaf, ground.site, ground.limits, standing),
    }
}

/// Advises.
pub fn advise(ground: &Ground<'_, '_>) -> Advice {
    let mut advice = Advice::default();
    if ground.decision.verdict == Verdict::Steady {
        return advice;
    }
    if ground.decision.first_aid {
        advice.first_aid = first_aid(ground);
    }
    let aid: Vec<StepId> = advice.first_aid.iter().map(|a| a.step).collect();
    for (number, step) in ground.knowledge.steps.iter().enumerate() {
        let Ok(id) = u16::try_from(number).map(StepId) else {
            continue;
        };
        let weighed = weigh(ground, step);
        if weighed.advised(ground, step) {
            advice.steps.push(Advised {
                step: id,
                because: weighed.good.iter().map(|s| s.0).take(BECAUSE).collect(),
                check_first: weighed.standing == Standing::CheckFirst,
                worth: weighed.worth(),
            });
        } else if let Some(harm) = weighed.warned(ground, step)
            && !aid.contains(&id)
        {
            advice.avoid.push(Warned {
                step: id,
                because: weighed.harm.iter().map(|s| s.0).take(BECAUSE).collect(),
                harm,
            });
        }
    }
    let pinned = |w: &Warned| ground.pinned(w.step);
    advice
        .avoid
        .sort_by(|a, b| pinned(b).cmp(&pinned(a)).then(b.harm.total_cmp(&a.harm)));
    one_of_each_choice(&mut advice.avoid, |w| choice(ground, w.step));
    advice.avoid.truncate(AVOID);
    shorten(ground, &mut advice.steps, &aid);
    advice
}

/// What one step is worth under the facts.
struct Weighed {
    standing: Standing,
    good: Vec<(CauseId, f64)>,
    harm: Vec<(CauseId, f64)>,
    /// How likely the likeliest cause is that it helps under.
    likeliest: f64,
    /// One of those causes is likely enough to act on while nothing is urgent.
    on_watch: bool,
}

fn sum(shares: &[(CauseId, f64)]) -> f64 {
    shares.iter().map(|s| s.1).sum()
}

fn weigh(ground: &Ground<'_, '_>, step: &Step) -> Weighed {
    let good = ground.expected(step.helps.iter(), |_| 0.0);
    Weighed {
        standing: ground.standing(step),
        harm: ground.expected(step.harms.iter(), |_| 0.0),
        likeliest: good
            .iter()
            .map(|(c, _)| ground.ranking.of(*c))
            .fold(0.0, f64::max),
        on_watch: good.iter().any(|(c, _)| {
            let least = match ground.knowledge[*c].urgency {
                Urgency::Weeks => ACT_ON_WATCH_WEEKS,
                _ => ACT_ON_WATCH,
            };
            ground.ranking.of(*c) >= least
        }),
        good,
    }
}

impl Weighed {
    fn worth(&self) -> f64 {
        sum(&self.good) - sum(&self.harm)
    }

    fn likely(&self, ground: &Ground<'_, '_>) -> bool {
        self.likeliest >= ground.knowledge.scales.step_floor
    }

    fn advised(&self, ground: &Ground<'_, '_>, step: &Step) -> bool {
        // Nothing urgent: to look costs little; to act takes a likely cause, and hardly any harm under another.
        let fits = step.looks
            || ground.decision.verdict > Verdict::Watch
            || (self.on_watch && sum(&self.harm) < sum(&self.good) / 4.0);
        !step.temptation
            && fits
            && self.worth() > ground.knowledge.scales.step_floor / 4.0
            && self.likely(ground)
            && matches!(self.standing, Standing::Open | Standing::CheckFirst)
    }

    /// The harm that is worth a warning.
    fn warned(&self, ground: &Ground<'_, '_>, step: &Step) -> Option<f64> {
        if step.avoid_text.is_empty() || self.standing == Standing::Pointless {
            return None;
        }
        let expected = sum(&self.harm);
        if self.standing == Standing::Forbidden && self.likely(ground) {
            // What would help but for what forbids it tempts most.
            return Some(expected.max(sum(&self.good) * TEMPTS));
        }
        (expected >= ground.knowledge.scales.avoid_floor && self.worth() < 0.0).then_some(expected)
    }
}

fn choice<'g>(ground: &'g Ground<'_, '_>, step: StepId) -> &'g str {
    &ground.knowledge[step].choice
}

/// Of steps that stand for one another (half the feed, or none) the first of the list is kept.
fn one_of_each_choice<'g, T>(list: &mut Vec<T>, choice: impl Fn(&T) -> &'g str) {
    let mut taken: Vec<&str> = Vec::new();
    list.retain(|item| {
        let choice = choice(item);
        let first = choice.is_empty() || !taken.contains(&choice);
        if first && !choice.is_empty() {
            taken.push(choice);
        }
        first
    });
}

/// Puts the steps in order and leaves out what is worth least. What first aid says stays and is not counted.
fn shorten(ground: &Ground<'_, '_>, steps: &mut Vec<Advised>, aid: &[StepId]) {
    let when = |a: &Advised| ground.knowledge[a.step].when;
    let in_aid = |a: &Advised| aid.contains(&a.step);
    steps.sort_by(|a, b| in_aid(b).cmp(&in_aid(a)).then(b.worth.total_cmp(&a.worth)));
    one_of_each_choice(steps, |a| choice(ground, a.step));
    let pinned = |a: &Advised| ground.pinned(a.step);
    steps.sort_by(|a, b| {
        when(a)
            .cmp(&when(b))
            .then(pinned(b).cmp(&pinned(a)))
            .then(b.worth.total_cmp(&a.worth))
    });
    let best = |of: Option<When>| {
        steps
            .iter()
            .filter(|a| of.is_none_or(|w| when(a) == w))
            .map(|a| a.worth)
            .fold(0.0, f64::max)
    };
    let overall = best(None) * LEAST_OF_ALL;
    let least: Vec<(When, f64, usize)> = MOST
        .iter()
        .map(|(w, most)| (*w, overall.max(best(Some(*w)) * LEAST_OF_ITS_TIME), *most))
        .collect();
    let mut counted = [0usize; MOST.len()];
    steps.retain(|a| {
        if in_aid(a) {
            return true;
        }
        let Some(at) = least.iter().position(|(w, _, _)| *w == when(a)) else {
            return true;
        };
        let (Some((_, least, most)), Some(count)) = (least.get(at), counted.get_mut(at)) else {
            return true;
        };
        let kept = (a.worth >= *least || pinned(a)) && *count < *most;
        *count += usize::from(kept);
        kept
    });
}

/// First aid: the line for people, then what does most good if any of the causes that kill in minutes is there. Only a
/// `never_if` known to hold stops it; what `needs` something waits until that is known.
fn first_aid(ground: &Ground<'_, '_>) -> Vec<Advised> {
    let least = |cause: CauseId| {
        if ground.knowledge[cause].urgency == Urgency::Minutes {
            LEAST_FOR_FIRST_AID
        } else {
            0.0
        }
    };
    let mut aid: Vec<Advised> = ground
        .knowledge
        .steps
        .iter()
        .enumerate()
        .filter(|(_, step)| step.people_first || (step.first_aid && !step.temptation))
        .filter(|(_, step)| step.people_first || ground.fit_for_first_aid(step))
        .filter_map(|(number, step)| {
            let id = u16::try_from(number).ok().map(StepId)?;
            let good = ground.expected(step.helps.iter(), least);
            let harm = ground.expected(step.harms.iter(), |_| 0.0);
            let worth = sum(&good) - sum(&harm);
            (worth > 0.0 || step.people_first || ground.pinned(id)).then(|| Advised {
                step: id,
                because: good.iter().map(|s| s.0).take(BECAUSE).collect(),
                check_first: false,
                worth,
            })
        })
        .collect();
    aid.sort_by(|a, b| b.worth.total_cmp(&a.worth));
    one_of_each_choice(&mut aid, |a| choice(ground, a.step));
    // The line for people opens first aid, whatever it is worth to the fish.
    let people = |a: &Advised| ground.knowledge[a.step].people_first;
    let opening = aid.iter().position(people).map(|at| aid.remove(at));
    let most = FIRST_AID - usize::from(opening.is_some());
    while aid.len() > most {
        let least = aid.iter().rposition(|a| !ground.pinned(a.step));
        aid.remove(least.unwrap_or(most));
    }
    opening.into_iter().chain(aid).collect()
}
