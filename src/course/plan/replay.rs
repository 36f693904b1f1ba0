//! A plan's steps as actions on the water. This is the only way from a plan to a course, for the planner that makes it as
//! for the test that holds it to its limits: what is simulated is what the page says.

use super::ground::Ground;
use super::value::{Kind, Step};
use crate::course::projection::{Action, Deed, Farm, Part, State};
use crate::knowledge::Dosable;

/// The numbers of the water that a gram of a substance moves, with how much it gives (mg; carbon mmol).
fn moved(substance: &Dosable) -> impl Iterator<Item = (Part, f64)> {
    [
        ("alkalinity", Part::Alkalinity, 1000.0),
        ("carbon", Part::Carbon, 1.0),
        ("chloride", Part::Chloride, 1000.0),
        ("sodium", Part::Sodium, 1000.0),
        ("total-ammonia", Part::Ammonia, 1000.0),
        ("nitrate", Part::Nitrate, 1000.0),
    ]
    .into_iter()
    .filter_map(|(what, part, milli)| {
        let gives = milli * substance.gives(what);
        (gives != 0.0).then_some((part, gives))
    })
}

/// What a pure gram in the whole water adds, by part.
pub fn deeds(substance: &Dosable, pure_grams: f64, volume_l: f64) -> Vec<Deed> {
    moved(substance)
        .map(|(part, gives)| Deed::Add(part, gives * pure_grams / volume_l))
        .collect()
}

/// The actions of a list of steps, in days from now.
pub fn actions(ground: &Ground<'_>, steps: &[Step]) -> Vec<Action> {
    let volume = ground.begin.farm.volume_l;
    let days = |seconds: i64| {
        #[allow(clippy::cast_precision_loss)] // plans are weeks
        let s = (seconds - ground.now()) as f64;
        (s / 86_400.0).max(0.0)
    };
    let mut all = Vec::new();
    for step in steps {
        let at = days(step.at);
        let mut put = |at: f64, deed: Deed| all.push(Action { at, deed });
        for amount in &step.amounts {
            if let Some(substance) = ground.knowledge.pacing.substance(&amount.substance) {
                for deed in deeds(substance, amount.pure, volume) {
                    put(at, deed);
                }
            }
        }
        if let (Some(liters), Ok(makeup)) = (step.liters, ground.makeup()) {
            put(
                at,
                Deed::Exchange((liters / volume).clamp(0.0, 1.0), makeup),
            );
        }
        if let (Some(kg), Some(usual)) = (step.feed_kg, ground.begin.usual_feed_kg) {
            put(at, Deed::Feed(kg / usual));
        }
        if let Some(warmth) = step.warmth {
            put(at, Deed::Heat(24.0 * warmth.per_hour * warmth.by.signum()));
            put(
                at + warmth.by.abs() / warmth.per_hour / 24.0,
                Deed::Heat(0.0),
            );
        }
    }
    all.sort_by(|a, b| a.at.total_cmp(&b.at));
    all
}

/// The farm that a kind of plan is run on, with the bacteria of a state. The usual doses of base go on, as all plans say;
/// plans of feed ask that alkalinity is kept up meanwhile.
pub fn farm<'k>(ground: &Ground<'k>, kind: Kind, state: &State) -> Farm<'k> {
    let mut farm = ground.begin.farm_with(state);
    let rising = ground.begin.rising.unwrap_or(0.0);
    farm.held = Some(if kind == Kind::Feed {
        rising.max(0.0)
    } else {
        rising.min(0.0)
    });
    farm
}
