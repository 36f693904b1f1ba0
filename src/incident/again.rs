//! The causes once more, with what failed steps tell: a step that should have helped under a cause and did not speaks
//! against that cause.

use super::follow::Check;
use super::model::Incident;
use crate::assessment::{Assessment, StepReport};
use crate::knowledge::Knowledge;

/// However much a step helps under a cause, it may have been done badly: its failure takes no more than nine tenths of the
/// cause away (from memory).
const LEAST: f64 = 0.1;

/// The causes once more.
#[derive(Debug, Clone, PartialEq)]
pub struct Again {
    /// Cause id, name, probability before and after the failed steps were counted; likeliest after first.
    pub causes: Vec<(String, String, f64, f64)>,
    /// The best step that was not tried yet.
    pub next: Option<StepReport>,
}

/// Counts failed steps against the causes they should have helped under. `assessment` is the diagnosis of now.
pub fn again(
    knowledge: &Knowledge,
    assessment: &Assessment,
    incident: &Incident,
    failed: &[&Check],
) -> Again {
    let chance = |cause: crate::knowledge::CauseId| -> f64 {
        failed
            .iter()
            .filter(|c| c.done)
            .filter_map(|c| knowledge.step(&c.step))
            .filter_map(|step| knowledge[step].helps.get(&cause))
            .map(|good| (1.0 - good).max(LEAST))
            .product()
    };
    let mut causes: Vec<(String, String, f64, f64)> = assessment
        .causes
        .iter()
        .map(|c| {
            let after = c.probability * chance(c.cause);
            (c.id.clone(), c.name.clone(), c.probability, after)
        })
        .collect();
    // What one cause loses the others gain, in proportion.
    let before: f64 = causes.iter().map(|c| c.2).sum();
    let after: f64 = causes.iter().map(|c| c.3).sum();
    if after > 0.0 {
        for cause in &mut causes {
            cause.3 = (cause.3 * before / after).min(1.0);
        }
    }
    causes.sort_by(|a, b| b.3.total_cmp(&a.3));
    let tried = |s: &&StepReport| {
        let done = incident
            .steps
            .iter()
            .any(|t| t.id == s.id && t.done.is_some());
        !done && !failed.iter().any(|c| c.step == s.id)
    };
    let best = causes.first().map(|c| c.0.clone()).unwrap_or_default();
    let open = || {
        assessment
            .first_aid
            .iter()
            .chain(&assessment.steps)
            .filter(tried)
    };
    let next = open()
        .find(|s| s.because.contains(&best))
        .or_else(|| open().next())
        .cloned();
    Again { causes, next }
}
