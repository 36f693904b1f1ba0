//! What makes a cause likelier before any effect is seen: how common it is, and its triggers.

use crate::engine::{Degree, Engine};
use crate::history::memory::DAY;
use crate::knowledge::{CauseId, Knowledge, Test, Trigger};

/// The log of the prior odds of every cause alone, against nothing being wrong.
pub(super) fn log_odds(knowledge: &Knowledge, engine: &Engine<'_>, incident: f64) -> Vec<f64> {
    let all: f64 = knowledge.causes.iter().map(|c| c.usual).sum();
    let base = (incident / (1.0 - incident)).ln();
    knowledge
        .causes
        .iter()
        .enumerate()
        .map(|(number, cause)| {
            let Ok(id) = u16::try_from(number).map(CauseId) else {
                return f64::NEG_INFINITY;
            };
            let pushed: f64 = (0..cause.triggers.len())
                .map(|n| trigger(engine, id, n))
                .sum();
            let capped = pushed.min(knowledge.scales.triggers.ln());
            base + (cause.usual / all).ln() + capped
        })
        .collect()
}

/// The log of what one trigger does to the odds as it stands.
pub(super) fn trigger(engine: &Engine<'_>, cause: CauseId, n: usize) -> f64 {
    let Some(trigger) = engine.knowledge()[cause].triggers.get(n) else {
        return 0.0;
    };
    let degree = engine.trigger(cause, n);
    weigh(trigger, degree, habit(engine, &trigger.when))
}

fn weigh(trigger: &Trigger, degree: Degree, habit: f64) -> f64 {
    let times = if trigger.odds_times > 1.0 {
        1.0 + (trigger.odds_times - 1.0) / (1.0 + habit)
    } else {
        trigger.odds_times
    };
    degree.lo * times.ln() + (1.0 - degree.hi) * trigger.odds_times_if_not.ln()
}

/// How far back a log's habits are looked at.
const HABIT_WINDOW: i64 = 45 * DAY;
/// A log of fewer days has no habits.
const HABIT_LEAST: i64 = 10 * DAY;

/// How many times an event of the test would be noted in its window anyway, by the habit of this log: what is noted
/// every day anyway explains nothing.
fn habit(engine: &Engine<'_>, test: &Test) -> f64 {
    let memory = engine.memory();
    let (now, Some(begun)) = (memory.now(), memory.begun()) else {
        return 0.0;
    };
    let mut most: f64 = 0.0;
    test.visit(&mut |t| {
        if let Test::Event { event, within, .. } = t
            && let Some(track) = memory.event(*event)
        {
            let to = now - within;
            let from = (now - HABIT_WINDOW - within).max(begun - 1);
            if to - from >= HABIT_LEAST && track.between(to, now).next().is_some() {
                #[allow(clippy::cast_precision_loss)] // days and counts are small
                let expected = track.days(from, to) as f64 * *within as f64 / (to - from) as f64;
                most = most.max(expected);
            }
        }
    });
    most
}
