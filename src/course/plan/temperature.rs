//! Warming and cooling in steps that the fish and the ammonia allow.

use super::base::wait_seconds;
use super::check::{self, Measure, Rule, Track};
use super::clock;
use super::ground::Ground;
use super::made::{KEPT_AWAY, Outcome, days_from, limit_cautions, mark_the_pace, refusal, trial};
use super::value::{Kind, Plan, Refused, Step, Trouble, Warmth, Wish};
use super::words::{degrees, fill, short, warmer};
use crate::course::projection::Part;
use crate::knowledge::{LimitLevel, Side};

/// Steps within a day.
const STEPS_A_DAY: usize = 4;
/// The longest plan, in days.
const LONGEST: usize = 14;
/// Nearer than this there is nothing to do, C.
const NEAR: f64 = 0.1;

/// Plans a temperature.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let mut plan = Plan::new(Kind::Temperature);
    let refused = ground.trust(&["temperature", "ph", "total-ammonia"])?;
    let now = Part::Temperature.of(&ground.begin.state);
    let own = ground
        .target("temperature", Side::Low)
        .filter(|low| now < *low)
        .or_else(|| {
            ground
                .target("temperature", Side::High)
                .filter(|high| now > *high)
        });
    let to = wish
        .to
        .or(own)
        .ok_or_else(|| Trouble::Lacks(vec!["--to".to_owned()]))?;
    plan.from = vec![("temperature".to_owned(), now)];
    plan.to = vec![("temperature".to_owned(), to)];
    if !(0.0..=38.0).contains(&to) {
        return Err(Trouble::Usage(fill(
            &words.aim_out_of_range,
            &[
                ("value", short(to)),
                ("low", "0".into()),
                ("high", "38".into()),
            ],
        )));
    }
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if let Some(refused) = outside(ground, to) {
        return Ok(plan.refuse(refused));
    }
    if (to - now).abs() < NEAR {
        plan.notes.push(words.already.clone());
        return Ok(plan);
    }
    Ok(paced(ground, plan, now, to))
}

/// A target outside what the species bears without stress.
fn outside(ground: &Ground<'_>, to: f64) -> Option<Refused> {
    let bound = |side| ground.species("temperature", LimitLevel::Stress, side);
    let (low, high) = (bound(Side::Low), bound(Side::High));
    let bad = low.is_some_and(|l| to < l) || high.is_some_and(|h| to > h);
    let words = ground.words();
    let shown =
        |value: Option<f64>| value.map_or("-".to_owned(), |v| degrees(ground.site.units, v));
    bad.then(|| Refused {
        limit: "species-temperature".to_owned(),
        reason: fill(
            &words.temperature_outside,
            &[
                ("to", degrees(ground.site.units, to)),
                ("low", shown(low)),
                ("high", shown(high)),
            ],
        ),
        instead: words.temperature_outside_instead.clone(),
    })
}

fn paced(ground: &Ground<'_>, mut plan: Plan, now: f64, to: f64) -> Plan {
    let pace = ground.pace();
    let up = to > now;
    let (hour, day) = if up {
        (
            &pace.temperature_rise_per_hour,
            &pace.temperature_rise_per_day,
        )
    } else {
        (
            &pace.temperature_fall_per_hour,
            &pace.temperature_fall_per_day,
        )
    };
    let track = Track::Part(Part::Temperature);
    let change = |h| {
        if up {
            Measure::Rise(h)
        } else {
            Measure::Fall(h)
        }
    };
    let rule = |limit, bound, track, measure| Rule {
        limit,
        bound,
        track,
        measure,
        unless_anyway: false,
    };
    let mut rules = vec![
        rule(hour, hour.value, track, change(1.0)),
        rule(day, day.value, track, change(24.0)),
    ];
    if up {
        let limit = ground.un_ionized_limit();
        rules.push(rule(
            &pace.un_ionized_ammonia,
            limit,
            Track::UnIonized,
            Measure::Most(0.0),
        ));
    }
    let away = 1.0 - KEPT_AWAY - 0.005;
    let (per_hour, a_day) = (away * hour.value, away * day.value);
    let mut steps = Vec::new();
    let mut at_now = now;
    let slots = clock::slots(
        ground.site,
        ground.now(),
        LONGEST,
        STEPS_A_DAY,
        wait_seconds(ground),
    );
    for (index, times) in slots.iter().enumerate() {
        #[allow(clippy::cast_precision_loss)] // a handful
        let n = times.len() as f64;
        for (i, at) in times.iter().enumerate() {
            let left = (to - at_now).abs();
            if left < 1e-9 {
                break;
            }
            let first = index == 0 && i == 0;
            let quarter = pace.first_dose.value;
            let step = a_day * if first { quarter.min(1.0 / n) } else { 1.0 / n };
            // A single step is still made within the time to the next one.
            let step = step.min(left).min(per_hour * 8.0);
            let step = if first {
                step.min(left * quarter.max(1.0 / n))
            } else {
                step
            };
            let by = step.copysign(to - at_now);
            at_now += by;
            steps.push(Step {
                at: *at,
                warmth: Some(Warmth {
                    to: at_now,
                    by,
                    per_hour,
                }),
                ..Step::default()
            });
        }
    }
    if (to - at_now).abs() > NEAR {
        let limit = &pace.longest_plan;
        let days = (to - now).abs() / a_day;
        return plan.refuse(super::made::broken(ground, limit, limit.value, days, None));
    }
    let steps = untangled(steps);
    let end = steps.last().map_or(1.0, |s| days_from(ground, s.at)) + 1.0;
    let tried = match trial(ground, Kind::Temperature, &steps, &rules, end) {
        Some(Outcome::Keeps(tried)) => tried,
        Some(Outcome::Breaks(rule, fared)) => {
            let refused = refusal(ground, rule, fared);
            return plan.refuse(refused);
        }
        None => {
            let limit = &pace.longest_plan;
            return plan.refuse(Refused {
                limit: limit.id.clone(),
                reason: ground.words().too_long.clone(),
                instead: limit.instead.clone(),
            });
        }
    };
    plan.limits = tried.kept(&rules);
    let quarter = &pace.first_dose;
    plan.limits
        .push(check::kept(quarter, quarter.value, first_share(&steps)));
    mark_the_pace(&mut plan.limits);
    plan.steps = steps;
    tell(ground, &mut plan, &tried, up);
    plan.cautions
        .push(ground.words().temperature_filter.clone());
    limit_cautions(ground, &mut plan);
    plan
}

/// A step that would still be going on when the next begins waits for nothing: the next begins when it is done.
fn untangled(mut steps: Vec<Step>) -> Vec<Step> {
    let mut free = i64::MIN;
    for step in &mut steps {
        step.at = step.at.max(free);
        if let Some(w) = step.warmth {
            #[allow(clippy::cast_possible_truncation)] // hours
            let long = (3600.0 * w.by.abs() / w.per_hour).ceil() as i64;
            free = step.at + long;
        }
    }
    steps
}

/// The first step as a share of its day.
fn first_share(steps: &[Step]) -> f64 {
    let by = |s: &Step| s.warmth.map_or(0.0, |w| w.by.abs());
    let begin = steps.first().map_or(0, |s| s.at);
    let day: f64 = steps.iter().filter(|s| s.at < begin + 86_400).map(by).sum();
    let first = steps.first().map_or(0.0, by);
    if (day - first).abs() < 1e-12 {
        0.25
    } else {
        first / day
    }
}

fn tell(ground: &Ground<'_>, plan: &mut Plan, tried: &super::made::Tried, up: bool) {
    let words = ground.words();
    let units = ground.site.units;
    let resolution = ground.readings.resolution("temperature", 0.0);
    for step in &mut plan.steps {
        let Some(warmth) = step.warmth else { continue };
        let hours = warmth.by.abs() / warmth.per_hour;
        let text = if up { &words.do_warm } else { &words.do_cool };
        step.text = fill(
            text,
            &[
                ("by", warmer(units, warmth.by.abs())),
                ("to", degrees(units, warmth.to)),
                ("hours", short((10.0 * hours).ceil() / 10.0)),
            ],
        );
        let t = days_from(ground, step.at) + hours / 24.0;
        step.expect.push(super::value::Expect {
            id: "temperature".to_owned(),
            low: warmth.to - resolution,
            high: warmth.to + resolution,
        });
        step.expect
            .extend(tried.expect("un-ionized-ammonia", Track::UnIonized, t));
        step.go_on_if.push(fill(
            &words.go_on_temperature,
            &[
                ("low", degrees(units, warmth.to - resolution)),
                ("high", degrees(units, warmth.to + resolution)),
                ("ammonia", short(ground.un_ionized_limit())),
            ],
        ));
        let rate = ground.pace().temperature_rise_per_hour.value;
        step.stop_if.push(fill(
            &words.stop_temperature,
            &[("rate", warmer(units, rate))],
        ));
    }
}
