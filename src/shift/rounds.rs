//! Routine rounds that are due in a shift.

use super::last::last;
use super::list::Ground;
use super::window::Window;
use crate::knowledge::{Round, Test};
use crate::site::PlaceKind;

/// A round that is due.
#[derive(Debug, Clone, Copy)]
pub(super) struct Due<'k> {
    pub round: &'k Round,
    /// When it was last done, unix seconds.
    pub last: Option<i64>,
    /// It is there because of the weather, the season or what was seen, not by its time.
    pub extra: bool,
}

/// A round may be done earlier than it was the last time by this share of its period: a round of each morning stays one
/// of the morning when it was late once.
const EARLIER: i64 = 10;

/// Rounds that are due before the shift ends.
pub(super) fn due<'k>(ground: &Ground<'_, 'k>, window: &Window) -> Vec<Due<'k>> {
    let all = ground.advice.knowledge.rounds.iter();
    all.filter(|round| has_place(round, ground))
        .filter_map(|round| {
            let extra = round.needs.as_ref().is_some_and(asks_the_log);
            if !holds(round, extra, ground) {
                return None;
            }
            let last = ground.log.and_then(|log| last(round, log));
            let again = last.map(|time| time + round.every - round.every / EARLIER);
            let due = again.is_none_or(|time| time < window.end);
            due.then_some(Due { round, last, extra })
        })
        .collect()
}

/// What the site file settles is left out only when it is known not to be; an extra check must be known to be called for.
fn holds(round: &Round, extra: bool, ground: &Ground<'_, '_>) -> bool {
    match &round.needs {
        None => true,
        Some(test) if extra => ground.advice.holds(test),
        Some(test) => !ground.advice.holds(&Test::Not(Box::new(test.clone()))),
    }
}

fn asks_the_log(test: &Test) -> bool {
    let mut found = false;
    test.visit(&mut |t| {
        found |= !matches!(
            t,
            Test::Site { .. }
                | Test::Cause { .. }
                | Test::Not(_)
                | Test::All(_)
                | Test::Any(_)
                | Test::NOf(..)
        );
    });
    found
}

/// Whether the farm has such a place. Tanks, a sump, a store and a bench every farm has, also where the file lists none.
fn has_place(round: &Round, ground: &Ground<'_, '_>) -> bool {
    let places = &ground.advice.site.place;
    let Some(kind) = PlaceKind::of(&round.place) else {
        return true;
    };
    let everywhere = matches!(kind, PlaceKind::Tank | PlaceKind::Sump | PlaceKind::Store);
    // A place whose kind the file does not say may be any.
    everywhere || places.is_empty() || places.iter().any(|p| p.kind.is_none_or(|k| k == kind))
}
