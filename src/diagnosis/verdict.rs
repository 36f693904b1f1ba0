//! The verdict is a decision of its own: it acts on the summed probability of causes that are urgent, and on direct
//! danger whatever the cause. How likely is enough is data.

use super::rank::Ranking;
use crate::engine::Engine;
use crate::knowledge::{CauseId, Finding, Knowledge, Urgency};

/// What the whole asks for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Verdict {
    /// Nothing to do.
    Steady,
    /// Measure again.
    Watch,
    /// Act today.
    ActToday,
    /// Fish may die within hours.
    ActNow,
}

impl Verdict {
    /// The word of the contract.
    pub fn word(self) -> &'static str {
        match self {
            Verdict::Steady => "steady",
            Verdict::Watch => "watch",
            Verdict::ActToday => "act-today",
            Verdict::ActNow => "act-now",
        }
    }

    /// Every verdict, mildest first.
    pub const ALL: [Self; 4] = [Self::Steady, Self::Watch, Self::ActToday, Self::ActNow];

    /// From the word of the contract.
    pub fn from_word(word: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|v| v.word() == word)
    }
}

/// What decides.
#[derive(Debug, Clone)]
pub struct Decision<'k> {
    /// What the whole asks for.
    pub verdict: Verdict,
    /// Findings of direct danger that hold.
    pub dangers: Vec<&'k Finding>,
    /// Fish may die within minutes: first aid comes before anything else.
    pub first_aid: bool,
}

/// Decides. `watch` is the summed probability of any cause that is worth watching; `due` says that routine readings are overdue, so that "steady" can't be said.
pub(super) fn decide<'k>(
    knowledge: &'k Knowledge,
    engine: &Engine<'k>,
    ranking: &Ranking,
    watch: f64,
    due: bool,
) -> Decision<'k> {
    let scales = &knowledge.scales;
    let holding = |f: &&(usize, &'k Finding)| {
        u16::try_from(f.0)
            .is_ok_and(|i| engine.finding(crate::knowledge::FindingId(i)).lo >= scales.danger)
    };
    let alarms: Vec<(usize, &Finding)> = knowledge
        .findings
        .iter()
        .enumerate()
        .filter(|(_, f)| f.danger.is_some() || f.distress)
        .collect();
    let dangers: Vec<&Finding> = alarms.iter().filter(holding).map(|(_, f)| *f).collect();
    let distress = dangers.iter().any(|f| f.distress);
    let at = |urgency: Urgency| dangers.iter().any(|f| f.danger == Some(urgency));
    // Many causes that are each unlikely are no reason to act: what is too unlikely to advise anything for counts for
    // nothing here. What kills in minutes always counts.
    let counts = |c: CauseId, least: Urgency| {
        knowledge[c].urgency >= least
            && (knowledge[c].urgency == Urgency::Minutes || ranking.of(c) >= scales.step_floor)
    };
    let summed = |least: Urgency| -> f64 {
        let sum: f64 = ranking
            .sets
            .iter()
            .filter(|set| set.causes.iter().any(|c| counts(*c, least)))
            .map(|set| set.probability)
            .sum();
        sum.min(1.0)
    };
    let minutes = summed(Urgency::Minutes) >= scales.act_minutes;
    let hours = summed(Urgency::Hours) >= scales.act_hours;
    let days = summed(Urgency::Days) >= scales.act_days;
    let verdict = if at(Urgency::Minutes) || minutes || (distress && hours) {
        Verdict::ActNow
    } else if at(Urgency::Hours) || hours || days {
        Verdict::ActToday
    } else if due || 1.0 - ranking.nothing >= watch {
        Verdict::Watch
    } else {
        Verdict::Steady
    };
    Decision {
        verdict,
        first_aid: verdict == Verdict::ActNow,
        dangers,
    }
}

/// The probability that a cause of this family is there.
pub(super) fn family(knowledge: &Knowledge, ranking: &Ranking, family: &str) -> f64 {
    ranking
        .sets
        .iter()
        .filter(|set| set.causes.iter().any(|c| knowledge[*c].family == family))
        .map(|set| set.probability)
        .sum()
}

/// The probability that one of these causes is there.
pub(super) fn any_of(ranking: &Ranking, causes: &[CauseId]) -> f64 {
    ranking
        .sets
        .iter()
        .filter(|set| set.causes.iter().any(|c| causes.contains(c)))
        .map(|set| set.probability)
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::diagnosis::Scored;
    use crate::site::Site;

    /// The verdict when the first `count` causes of an urgency are each so likely, alone, and nothing has been read.
    fn with(urgency: Urgency, count: usize, each: f64) -> Option<Verdict> {
        let knowledge = crate::knowledge::shipped().ok()?;
        let engine = Engine::new(&knowledge, &Site::default());
        let chosen: Vec<CauseId> = (0..knowledge.causes.len())
            .filter_map(|i| u16::try_from(i).ok().map(CauseId))
            .filter(|c| knowledge[*c].urgency == urgency)
            .take(count)
            .collect();
        let mut causes = vec![0.0; knowledge.causes.len()];
        for cause in &chosen {
            *causes.get_mut(cause.index())? = each;
        }
        let ranking = Ranking {
            causes,
            nothing: 1.0 - each * f64::from(u32::try_from(chosen.len()).ok()?),
            sets: chosen
                .into_iter()
                .map(|cause| Scored {
                    causes: vec![cause],
                    probability: each,
                })
                .collect(),
            weights: Vec::new(),
        };
        let decision = decide(&knowledge, &engine, &ranking, knowledge.scales.watch, false);
        Some(decision.verdict)
    }

    #[test]
    fn many_unlikely_causes_are_no_reason_to_act_unless_they_kill_in_minutes() {
        assert_eq!(with(Urgency::Hours, 5, 0.04), Some(Verdict::Watch));
        assert_eq!(with(Urgency::Minutes, 5, 0.04), Some(Verdict::ActNow));
    }

    #[test]
    fn one_likely_cause_decides_by_its_urgency() {
        assert_eq!(with(Urgency::Minutes, 1, 0.3), Some(Verdict::ActNow));
        assert_eq!(with(Urgency::Hours, 1, 0.3), Some(Verdict::ActToday));
        assert_eq!(with(Urgency::Days, 1, 0.3), Some(Verdict::Watch));
        assert_eq!(with(Urgency::Days, 1, 0.6), Some(Verdict::ActToday));
        assert_eq!(with(Urgency::Weeks, 1, 0.05), Some(Verdict::Steady));
    }
}
