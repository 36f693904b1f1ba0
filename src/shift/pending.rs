//! What open incidents call for in a shift: readings that verify a step, steps not done, the next step of the plan.

use super::list::Ground;
use super::window::Window;
use crate::incident::{Book, Check, Incident, Look, PlanStep, Taken, checks};

/// One thing an incident calls for.
#[derive(Debug, Clone)]
pub(super) enum Pending {
    /// Something to read or look at.
    Check(Check),
    /// A step that was chosen and not done.
    Step(Taken),
    /// The next step of the plan: its number, and the step.
    Plan(usize, PlanStep),
}

/// So many steps of an incident are named on one list: who is told of everything does nothing.
const STEPS: usize = 3;

/// What one incident calls for before the shift ends.
pub(super) fn pending(
    incident: &Incident,
    ground: &Ground<'_, '_>,
    window: &Window,
) -> Vec<Pending> {
    let checks = checks(
        incident,
        &Book {
            knowledge: ground.advice.knowledge,
            log: ground.log,
            memory: Some(ground.advice.engine.memory()),
            now: ground.now,
        },
    );
    let mut found: Vec<Pending> = checks
        .into_iter()
        .filter(|c| match c.look {
            Look::Missed(..) => true,
            Look::Met(..) => false,
            Look::Waiting(..) | Look::Unread => c.verify.due < window.end,
        })
        .map(Pending::Check)
        .collect();
    let next = incident
        .plan
        .iter()
        .enumerate()
        .filter(|(_, p)| p.done.is_none() && p.at < window.end);
    found.extend(next.map(|(at, p)| Pending::Plan(at + 1, p.clone())).take(2));
    let steps = incident
        .steps
        .iter()
        .filter(|s| s.done.is_none() && s.when != "recovery");
    found.extend(steps.take(STEPS).cloned().map(Pending::Step));
    found
}
