//! Oxygen at once: what is asked for, what each source gives, how many minutes there are, and what to do in which order.

use super::check;
use super::ground::Ground;
use super::made::limit_cautions;
use super::value::{Expect, Kind, Plan, Step, Trouble, Wish};
use super::words::{fill, grams, short};
use crate::course::projection::Part;
use crate::knowledge::{LimitLevel, Side};
use crate::water::feed::{self, OxygenFor};
use crate::water::respiration;

/// Plans oxygen. No reading is too old for it: it starts at once, and measuring is its second step.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, _wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let mut plan = Plan::new(Kind::Oxygen);
    let chem = ground
        .chemistry()
        .ok_or_else(|| Trouble::Lacks(vec!["temperature".to_owned()]))?;
    let full = chem.saturation;
    let low = low_oxygen(ground);
    plan.from = ground
        .readings
        .value("dissolved-oxygen")
        .map(|o| vec![("dissolved-oxygen".to_owned(), o)])
        .unwrap_or_default();
    let to = ground
        .target("dissolved-oxygen", Side::Low)
        .unwrap_or(0.7 * full)
        .min(0.9 * full);
    plan.to = vec![("dissolved-oxygen".to_owned(), to)];
    let now = ground.now();
    let pure = ground.site.equipment.pure_oxygen == Some(true);
    let step = |minutes: i64, text: &str| Step {
        at: now + 60 * minutes,
        text: text.to_owned(),
        ..Step::default()
    };
    let mut first = step(0, &words.do_oxygen_first);
    first.feed_kg = ground.begin.usual_feed_kg.map(|_| 0.0);
    plan.steps.push(first);
    if pure {
        let mut bottle = step(2, &words.do_oxygen_pure);
        let limit = &ground.pace().total_gas_pressure;
        bottle.stop_if.push(fill(
            &words.stop_oxygen_pure,
            &[("pressure", short(limit.value))],
        ));
        plan.steps.push(bottle);
        plan.limits
            .push(check::kept(limit, limit.value, limit.value));
    }
    plan.steps.push(step(5, &words.do_oxygen_measure));
    let mut later = step(20, &words.do_oxygen_later);
    later.expect.push(Expect {
        id: "dissolved-oxygen".to_owned(),
        low: low.min(full),
        high: full,
    });
    later
        .go_on_if
        .push(fill(&words.go_on_oxygen, &[("low", short(low))]));
    plan.steps.push(later);
    plan.steps.push(step(120, &words.do_oxygen_hold));
    budget(ground, &mut plan, full, low);
    plan.cautions.push(words.oxygen_people.clone());
    limit_cautions(ground, &mut plan);
    Ok(plan)
}

/// Oxygen that is short for these fish.
pub(super) fn low_oxygen(ground: &Ground<'_>) -> f64 {
    ground
        .species("dissolved-oxygen", LimitLevel::Stress, Side::Low)
        .unwrap_or_else(|| ground.pace().low_oxygen.for_fish(ground.warm()))
}

/// Demand, supply and minutes, as notes.
fn budget(ground: &Ground<'_>, plan: &mut Plan, full: f64, low: f64) {
    let words = ground.words();
    let units = ground.site.units;
    let volume = ground.begin.farm.volume_l;
    let level = Part::Oxygen.of(&ground.begin.state);
    let (less, more) = feed::oxygen_per_feed(OxygenFor::WholeSystem);
    let demand = ground
        .begin
        .usual_feed_kg
        .map(|kg| (1000.0 * less * kg / 24.0, 1000.0 * more * kg / 24.0));
    if let Some((less, more)) = demand {
        plan.notes.push(fill(
            &words.oxygen_demand,
            &[("low", grams(units, less)), ("high", grams(units, more))],
        ));
    }
    let t = Part::Temperature.of(&ground.begin.state).clamp(0.0, 36.0);
    let use_each = respiration::oxygen_use(t, respiration::USUAL_FISH_G, true).ok();
    if let (Some(biomass), Some(each)) = (ground.site.biomass_kg, use_each) {
        let amount = grams(units, biomass * each / 1000.0);
        plan.notes
            .push(fill(&words.oxygen_fish_demand, &[("amount", amount)]));
        if ground.readings.value("dissolved-oxygen").is_some()
            && let Ok(minutes) = respiration::minutes_until(level, low, biomass, volume, each)
        {
            plan.notes.push(fill(
                &words.oxygen_minutes,
                &[
                    ("minutes", short(minutes.floor())),
                    ("now", short(level)),
                    ("low", short(low)),
                ],
            ));
        }
    }
    if let Some(aeration) = ground.site.aeration_kg_o2_per_day {
        // What an aerator gives goes with how far the water is from full (rated at 5 mg/L).
        let gives = 1000.0 * aeration / 24.0 * (full - level).max(0.0) / (full - 5.0).max(0.5);
        plan.notes.push(fill(
            &words.oxygen_supply,
            &[("amount", grams(units, gives)), ("level", short(level))],
        ));
        if demand.is_some_and(|(_, more)| more > 1000.0 * aeration / 24.0) {
            plan.cautions.push(words.oxygen_more_air.clone());
        }
    }
    let once = 0.1 * volume * (full - level).max(0.0) / 1000.0;
    plan.notes.push(fill(
        &words.oxygen_exchange,
        &[("amount", grams(units, once))],
    ));
}
