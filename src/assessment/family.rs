//! The family that leads as a whole: several of its members are likely, none stands out.

use super::LeadingFamily;
use crate::course::Advice;
use crate::diagnosis::Ranking;
use crate::knowledge::{CauseId, Knowledge};

/// A member that holds this share of its family stands out.
const STANDS_OUT: f64 = 0.7;
/// A family this likely leads.
const LEADS: f64 = 0.4;
/// A member with less than this share of its family does not count.
const COUNTS: f64 = 0.08;
/// So many common first steps are named.
const FIRST_STEPS: usize = 5;

/// The leading family, if there is one. `whole` gives the probability that any cause of a family is there.
pub(super) fn leading(
    knowledge: &Knowledge,
    ranking: &Ranking,
    advice: &Advice,
    whole: impl Fn(&str) -> f64,
    likely: impl Fn(f64) -> String,
) -> Option<LeadingFamily> {
    let first = ranking.order().into_iter().next()?;
    let id = &knowledge[first].family;
    let probability = whole(id);
    let members: Vec<CauseId> = ranking
        .order()
        .into_iter()
        .filter(|c| knowledge[*c].family == *id && ranking.of(*c) > COUNTS * probability)
        .collect();
    let leads =
        probability >= LEADS && members.len() >= 2 && ranking.of(first) < STANDS_OUT * probability;
    leads.then(|| LeadingFamily {
        name: knowledge
            .families
            .iter()
            .find(|f| f.id == *id)
            .map_or_else(|| id.clone(), |f| f.name.clone()),
        id: id.clone(),
        probability,
        likely: likely(probability),
        first_steps: advice
            .steps
            .iter()
            .map(|a| &knowledge[a.step])
            .filter(|step| members.iter().all(|c| step.helps.contains_key(c)))
            .take(FIRST_STEPS)
            .map(|step| step.id.clone())
            .collect(),
        members: members.iter().map(|c| knowledge[*c].id.clone()).collect(),
    })
}
