//! A new or dead filter brought to life, without fish on ammonium chloride or with fish on little feed.

use super::check;
use super::clock;
use super::feed;
use super::ground::{Ground, Way};
use super::made::{PLANNING, amount, amount_words, days_from, limit_cautions, mark_the_pace};
use super::value::{Expect, Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::{fill, short};
use crate::course::projection::{Gas, Part};
use crate::knowledge::{Dosable, Use};
use crate::water::nitrification::ALKALINITY_WITH_CELLS;

/// The longest start that is planned, days.
const LONGEST: i64 = 70;
/// Total ammonia below which the next dose is given, mg/L as N; nitrite below which a filter is done with one.
const NEXT: f64 = 0.5;
const DONE: f64 = 0.3;
const DAY: i64 = 86_400;

/// Plans a start-up. `to` is the ammonia (mg/L as N) of one dose.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    if wish.with_fish {
        let mut plan = feed::plan(
            ground,
            &Wish {
                kind: Kind::Feed,
                ..wish.clone()
            },
        )?;
        plan.kind = Kind::StartUp;
        plan.cautions.insert(0, ground.words().start_fish.clone());
        plan.cautions.push(ground.words().start_course.clone());
        return Ok(plan);
    }
    let pace = ground.pace();
    let mut plan = Plan::new(Kind::StartUp);
    let dose = wish.to.unwrap_or(pace.cycling_dose.value);
    if !(dose > 0.0 && dose <= pace.cycling_dose.value) {
        let limit = &pace.cycling_dose;
        plan.to = vec![("total-ammonia".to_owned(), dose)];
        return Ok(plan.refuse(super::made::broken(ground, limit, limit.value, dose, None)));
    }
    let tan = Part::Ammonia.of(&ground.begin.state);
    plan.from = vec![("total-ammonia".to_owned(), tan)];
    plan.to = vec![("total-ammonia".to_owned(), dose)];
    let substance = ground
        .knowledge
        .pacing
        .substances
        .iter()
        .find(|s| s.used_as == Use::Ammonia)
        .ok_or_else(|| Trouble::Lacks(vec!["--substance".to_owned()]))?;
    let Some(steps) = doses(ground, wish, substance, dose) else {
        let limit = &pace.longest_plan;
        return Ok(plan.refuse(Refused {
            limit: limit.id.clone(),
            reason: ground.words().too_long.clone(),
            instead: limit.instead.clone(),
        }));
    };
    plan.steps = steps;
    plan.add_up();
    let highest = plan
        .steps
        .iter()
        .flat_map(|s| &s.expect)
        .filter(|e| e.id == "total-ammonia");
    let highest = highest.map(|e| e.high).fold(0.0, f64::max);
    plan.limits.push(check::kept(
        &pace.cycling_ammonia,
        pace.cycling_ammonia.value,
        highest,
    ));
    plan.limits.push(check::kept(
        &pace.cycling_dose,
        pace.cycling_dose.value,
        dose,
    ));
    plan.limits.push(check::kept(
        &pace.first_dose,
        pace.first_dose.value,
        first_share(&plan.steps),
    ));
    mark_the_pace(&mut plan.limits);
    let words = ground.words();
    plan.cautions.push(words.start_course.clone());
    plan.cautions.push(words.start_seed.clone());
    limit_cautions(ground, &mut plan);
    Ok(plan)
}

fn first_share(steps: &[Step]) -> f64 {
    let pure = |s: Option<&Step>| s.map_or(0.0, |s| s.amounts.iter().map(|a| a.pure).sum::<f64>());
    let (a, b) = (pure(steps.first()), pure(steps.get(1)));
    a / (a + b).max(1e-12)
}

/// The water of a start with so many bacteria, as a share of what a dose a day asks for.
fn water<'k>(ground: &Ground<'k>, seed: f64, dose: f64) -> Way<'k> {
    let state = ground.begin.with_bacteria(seed * dose, seed * dose);
    let mut way = ground.way(Kind::StartUp, Gas::Usual, &state);
    way.farm.load = 0.0;
    way.farm.plants = 0.0;
    way.farm.held = None;
    // What a dose takes when it is used up in about four days.
    way.farm.supply = ALKALINITY_WITH_CELLS * dose / 4.0;
    way
}

/// Doses whenever the likeliest course has used up the last one, until one is gone within a day.
fn doses(ground: &Ground<'_>, wish: &Wish, substance: &Dosable, dose: f64) -> Option<Vec<Step>> {
    let volume = ground.begin.farm.volume_l;
    let seed = &ground.knowledge.pacing.kinetics.seed;
    let mut ways = [
        water(ground, seed.value, dose),
        water(ground, seed.low, dose),
        water(ground, seed.high, dose),
    ];
    let pure = dose * volume / (1000.0 * substance.gives("total-ammonia"));
    let share = ground.pace().first_dose.value;
    let words = ground.words();
    let begin = clock::next(ground.site, ground.now());
    let mut steps: Vec<Step> = Vec::new();
    let mut now = 0.0;
    let mut given = i64::MIN;
    for day in 0..LONGEST {
        let at = if day == 0 {
            begin
        } else {
            clock::next(ground.site, begin + day * DAY)
        };
        let t = days_from(ground, at);
        for way in &mut ways {
            way.state = ground
                .course(way, &[], (t - now).max(0.0), PLANNING)?
                .last()?
                .y;
        }
        now = t;
        let middle = ways.first().map(|w| w.state)?;
        let (tan, nitrite) = (Part::Ammonia.of(&middle), Part::Nitrite.of(&middle));
        if !steps.is_empty()
            && tan < NEXT
            && nitrite < DONE
            && at - given <= DAY + DAY / 4
            && day > 3
        {
            steps.push(Step {
                at,
                text: words.do_start_done.clone(),
                ..Step::default()
            });
            return Some(steps);
        }
        if tan > NEXT && !steps.is_empty() || tan + dose > ground.pace().cycling_ammonia.value {
            continue;
        }
        let whole = amount(substance, pure, wish.purity);
        let levels = |ways: &[Way<'_>; 3]| -> (f64, f64) {
            let all = ways.iter().map(|w| Part::Ammonia.of(&w.state));
            (
                all.clone().fold(f64::INFINITY, f64::min),
                all.fold(0.0, f64::max),
            )
        };
        let mut step = |at: i64, text: &str, a: super::value::Amount, ways: &[Way<'_>; 3]| {
            let (low, high) = levels(ways);
            steps.push(Step {
                at,
                text: fill(text, &[("amount", amount_words(ground, &a))]),
                amounts: vec![a],
                expect: vec![Expect {
                    id: "total-ammonia".to_owned(),
                    low,
                    high: high.min(ground.pace().cycling_ammonia.value),
                }],
                go_on_if: vec![words.go_on_start.clone()],
                stop_if: vec![fill(
                    &words.stop_start,
                    &[("most", short(ground.pace().cycling_ammonia.value))],
                )],
                ..Step::default()
            });
        };
        let mut add = |pure: f64| {
            for way in &mut ways {
                // A slow course still has the last dose; nobody adds to it.
                if Part::Ammonia.of(&way.state) <= NEXT + 0.01 || given == i64::MIN {
                    let by = 1000.0 * pure * substance.gives("total-ammonia") / volume;
                    Part::Ammonia.add(&mut way.state, by);
                }
            }
        };
        if given == i64::MIN {
            let rest = amount(substance, pure * (1.0 - share), wish.purity);
            let first = amount(
                substance,
                (pure * share).min(rest.pure * share / (1.0 - share)),
                wish.purity,
            );
            let rise = dose * share;
            let later = clock::next(ground.site, at + 2 * 3600);
            add(first.pure);
            step(at, &words.do_start_ammonia, first, &ways);
            let mut add = |pure: f64| {
                for way in &mut ways {
                    let by = 1000.0 * pure * substance.gives("total-ammonia") / volume;
                    Part::Ammonia.add(&mut way.state, by);
                }
            };
            add(rest.pure);
            let text = fill(
                &words.do_start_rest,
                &[("low", short(0.8 * rise)), ("high", short(1.2 * rise))],
            );
            step(later, &text, rest, &ways);
        } else {
            add(whole.pure);
            step(at, &words.do_start_ammonia, whole, &ways);
        }
        given = at;
    }
    None
}
