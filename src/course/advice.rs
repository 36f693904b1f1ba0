//! Steps ranked by expected good less expected harm over the causes' probabilities; what would harm under a cause that
//! can't be excluded; first aid.

use crate::diagnosis::{Decision, Doctor, Ranking, Verdict};
use crate::engine::{Degree, Engine, Limits};
use crate::knowledge::{CauseId, Knowledge, Step, StepId, Test, Urgency};
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
    let floor = ground.knowledge.scales.step_floor;
    for (number, step) in ground.knowledge.steps.iter().enumerate() {
        let Ok(id) = u16::try_from(number).map(StepId) else {
            continue;
        };
        let standing = ground.standing(step);
        let good = ground.expected(step.helps.iter(), |_| 0.0);
        let harm = ground.expected(step.harms.iter(), |_| 0.0);
        let sum = |shares: &[(CauseId, f64)]| shares.iter().map(|s| s.1).sum::<f64>();
        let worth = sum(&good) - sum(&harm);
        let likely = good.iter().any(|(c, _)| ground.ranking.of(*c) >= floor);
        let advised = !step.temptation
            && worth > floor / 4.0
            && likely
            && matches!(standing, Standing::Open | Standing::CheckFirst)
            && ground.decision.verdict > Verdict::Steady;
        if advised {
            advice.steps.push(Advised {
                step: id,
                because: good.iter().map(|s| s.0).take(4).collect(),
                check_first: standing == Standing::CheckFirst,
                worth,
            });
        } else if !step.avoid_text.is_empty() && ground.decision.verdict > Verdict::Steady {
            let forbidden = standing == Standing::Forbidden && likely;
            let expected = sum(&harm);
            if forbidden
                || (standing != Standing::Pointless
                    && expected >= ground.knowledge.scales.avoid_floor
                    && worth < 0.0)
            {
                advice.avoid.push(Warned {
                    step: id,
                    because: harm.iter().map(|s| s.0).take(4).collect(),
                    harm: expected.max(if forbidden { sum(&good) } else { 0.0 }),
                });
            }
        }
    }
    let when = |a: &Advised| ground.knowledge[a.step].when;
    advice
        .steps
        .sort_by(|a, b| when(a).cmp(&when(b)).then(b.worth.total_cmp(&a.worth)));
    advice.avoid.sort_by(|a, b| b.harm.total_cmp(&a.harm));
    advice.avoid.truncate(AVOID);
    if ground.decision.first_aid {
        advice.first_aid = first_aid(ground);
        let aid: Vec<StepId> = advice.first_aid.iter().map(|a| a.step).collect();
        advice.avoid.retain(|w| !aid.contains(&w.step));
    }
    advice
}

/// First aid: the line for people, then what does most good if any of the causes that kill in minutes is there. Only a
/// `never_if` known to hold stops it.
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
        .filter(|(_, step)| step.first_aid && !step.temptation)
        .filter(|(_, step)| matches!(ground.standing(step), Standing::Open | Standing::CheckFirst))
        .filter_map(|(number, step)| {
            let id = u16::try_from(number).ok().map(StepId)?;
            let good = ground.expected(step.helps.iter(), least);
            let harm = ground.expected(step.harms.iter(), |_| 0.0);
            let worth =
                good.iter().map(|s| s.1).sum::<f64>() - harm.iter().map(|s| s.1).sum::<f64>();
            (worth > 0.0).then(|| Advised {
                step: id,
                because: good.iter().map(|s| s.0).take(4).collect(),
                check_first: false,
                worth,
            })
        })
        .collect();
    aid.sort_by(|a, b| b.worth.total_cmp(&a.worth));
    // The line for people opens first aid, whatever it is worth to the fish.
    let people = |a: &Advised| ground.knowledge[a.step].people_first;
    let opening = aid.iter().position(people).map(|at| aid.remove(at));
    aid.truncate(FIRST_AID - usize::from(opening.is_some()));
    opening.into_iter().chain(aid).collect()
}
