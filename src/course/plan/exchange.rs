//! Bringing a reading down (or up) by changing water, with the new water's own chemistry and temperature.

use super::base::{first_dose, wait_seconds};
use super::check::{self, Measure, Rule, Track};
use super::clock;
use super::ground::Ground;
use super::made::{Outcome, days_from, limit_cautions, mark_the_pace, refusal, trial};
use super::value::{Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::{degrees, fill, liters, short, warmer};
use crate::course::projection::{Action, Deed, Gas, NewWater, Part};
use crate::knowledge::Side;

/// Batches within a day: enough that the first is a quarter of its day.
const BATCHES_A_DAY: usize = 6;
/// Shares of the water a day that are tried, of the limit.
const TRIED: [f64; 6] = [1.0, 0.75, 0.5, 0.35, 0.2, 0.1];
/// The longest plan, in days.
const LONGEST: usize = 14;

/// Readings that the projection carries, and so plans go by.
const CARRIED: [(&str, Part); 7] = [
    ("total-ammonia", Part::Ammonia),
    ("nitrite", Part::Nitrite),
    ("nitrate", Part::Nitrate),
    ("alkalinity", Part::Alkalinity),
    ("chloride", Part::Chloride),
    ("sodium", Part::Sodium),
    ("temperature", Part::Temperature),
];

/// Plans an exchange.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let id = wish
        .reading
        .clone()
        .ok_or_else(|| Trouble::Lacks(vec!["--reading".to_owned()]))?;
    let carried = CARRIED
        .iter()
        .find(|(name, _)| *name == id)
        .map(|(_, part)| *part);
    let known = ground.knowledge.vocabulary.reading(&id);
    if known.is_none_or(|r| ground.knowledge.vocabulary[r].derived)
        || matches!(id.as_str(), "ph" | "feed" | "deaths")
    {
        let carried = CARRIED
            .iter()
            .map(|(n, _)| *n)
            .collect::<Vec<_>>()
            .join(", ");
        return Err(Trouble::Usage(format!(
            "`{}` is not something that water exchange is planned for; use {carried}, or another concentration",
            crate::fault::shown(&id)
        )));
    }
    let mut plan = Plan::new(Kind::Exchange);
    let refused = ground.trust(&[&id, "temperature", "ph"])?;
    let makeup = ground.makeup()?;
    let now = ground.readings.value(&id).unwrap_or(0.0);
    let own = ground
        .target(&id, Side::High)
        .filter(|high| now > *high)
        .or_else(|| ground.target(&id, Side::Low).filter(|low| now < *low));
    let want = wish
        .to
        .or(own)
        .ok_or_else(|| Trouble::Lacks(vec!["--to".to_owned()]))?;
    plan.from = vec![(id.clone(), now)];
    plan.to = vec![(id.clone(), want)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if !ground.makeup_is_clean(wish.dechlorinated) {
        let limit = &ground.pace().residual_chlorine;
        return Ok(plan.refuse(Refused {
            limit: limit.id.clone(),
            reason: words.exchange_chlorine.clone(),
            instead: limit.instead.clone(),
        }));
    }
    if (want - now).abs() < 1e-9 {
        plan.notes.push(words.already.clone());
        return Ok(plan);
    }
    let new = match wish.in_makeup {
        Some(value) => value,
        None => in_makeup(&id, &makeup),
    };
    if (now - want) * (want - new) <= 0.0 {
        return Ok(plan.refuse(Refused {
            limit: "makeup-water".to_owned(),
            reason: fill(
                &words.exchange_wrong_way,
                &[
                    ("new", ground.shown(&id, new)),
                    ("reading", ground.name(&id)),
                    ("now", ground.shown(&id, now)),
                    ("want", ground.shown(&id, want)),
                ],
            ),
            instead: words.exchange_wrong_way_instead.clone(),
        }));
    }
    Ok(paced(
        ground,
        plan,
        &Aim {
            id,
            part: carried,
            now,
            want,
            new,
        },
    ))
}

struct Aim {
    id: String,
    part: Option<Part>,
    now: f64,
    want: f64,
    new: f64,
}

fn in_makeup(id: &str, makeup: &NewWater) -> f64 {
    match id {
        "alkalinity" => makeup.alkalinity,
        "chloride" => makeup.chloride,
        "temperature" => makeup.temperature,
        _ => 0.0,
    }
}

/// What is unlike in the new water, in words; empty when it is much the same.
fn unlike(ground: &Ground<'_>) -> Vec<String> {
    let pace = ground.pace();
    let makeup = &ground.site.makeup;
    let t = Part::Temperature.of(&ground.begin.state);
    let mut what = Vec::new();
    if let Some(new) = makeup.temperature
        && (new - t).abs() > pace.makeup_temperature_gap.value
    {
        what.push(degrees(ground.site.units, new));
    }
    if let Some(new) = makeup.ph
        && (new - ground.begin.ph).abs() > pace.makeup_ph_gap.value
    {
        what.push(format!("pH {new:.1}"));
    }
    what
}

fn rules<'k>(ground: &Ground<'k>) -> Vec<Rule<'k>> {
    let pace = ground.pace();
    let temperature = Track::Part(Part::Temperature);
    let rule = |limit: &'k crate::knowledge::PaceLimit, track, measure| Rule {
        limit,
        bound: limit.for_fish(ground.warm()),
        track,
        measure,
        unless_anyway: true,
    };
    let mut rules = vec![
        rule(
            &pace.temperature_rise_per_hour,
            temperature,
            Measure::Rise(1.0),
        ),
        rule(
            &pace.temperature_rise_per_day,
            temperature,
            Measure::Rise(24.0),
        ),
        rule(
            &pace.temperature_fall_per_hour,
            temperature,
            Measure::Fall(1.0),
        ),
        rule(
            &pace.temperature_fall_per_day,
            temperature,
            Measure::Fall(24.0),
        ),
        rule(&pace.ph_rise_per_day, Track::Ph, Measure::Rise(24.0)),
        rule(&pace.ph_fall_per_day, Track::Ph, Measure::Fall(24.0)),
    ];
    rules.push(Rule {
        bound: ground.un_ionized_limit(),
        ..rule(
            &pace.un_ionized_ammonia,
            Track::UnIonized,
            Measure::Most(0.0),
        )
    });
    rules
}

fn paced(ground: &Ground<'_>, mut plan: Plan, aim: &Aim) -> Plan {
    let pace = ground.pace();
    let unlike = unlike(ground);
    let batch = if unlike.is_empty() {
        &pace.exchange_per_batch
    } else {
        &pace.exchange_per_batch_unlike
    };
    let rules = rules(ground);
    let mut last = None;
    for share in TRIED {
        let a_day = share * pace.exchange_per_day.value;
        let Some(mut steps) = batches(ground, aim, a_day, batch.value) else {
            last = Some(never(ground, aim, a_day));
            continue;
        };
        let end = steps.last().map_or(1.0, |s| days_from(ground, s.at)) + 1.0;
        let tried = match trial(ground, Kind::Exchange, &steps, &rules, end) {
            Some(Outcome::Keeps(tried)) => tried,
            Some(Outcome::Breaks(rule, fared)) => {
                last = Some(refusal(ground, rule, fared));
                continue;
            }
            None => continue,
        };
        plan.limits = tried.kept(&rules);
        let volume = ground.begin.farm.volume_l;
        let largest = steps.iter().filter_map(|s| s.liters).fold(0.0, f64::max) / volume;
        plan.limits.push(check::kept(batch, batch.value, largest));
        let day = &pace.exchange_per_day;
        plan.limits
            .push(check::kept(day, day.value, within_a_day(&steps) / volume));
        plan.limits.push(first_dose(ground, &steps));
        mark_the_pace(&mut plan.limits);
        tell(ground, &mut steps, &tried, aim);
        plan.steps = steps;
        cautions(ground, &mut plan, aim, &unlike);
        return plan;
    }
    let refused = last.unwrap_or_else(|| never(ground, aim, pace.exchange_per_day.value));
    plan.refuse(refused)
}

fn never(ground: &Ground<'_>, aim: &Aim, a_day: f64) -> Refused {
    let words = ground.words();
    Refused {
        limit: ground.pace().exchange_per_day.id.clone(),
        reason: fill(
            &words.exchange_never,
            &[
                ("share", short(100.0 * a_day)),
                ("reading", ground.name(&aim.id)),
                (
                    "value",
                    format!("more than {}", ground.shown(&aim.id, aim.want)),
                ),
            ],
        ),
        instead: words.exchange_never_instead.clone(),
    }
}

/// The most liters within 24 hours.
fn within_a_day(steps: &[Step]) -> f64 {
    steps
        .iter()
        .map(|first| {
            let day = steps
                .iter()
                .filter(|s| s.at >= first.at && s.at < first.at + 86_400);
            day.filter_map(|s| s.liters).sum::<f64>()
        })
        .fold(0.0, f64::max)
}

/// Batches until the reading is there in the likeliest course; `None` when it is not within the longest plan.
fn batches(ground: &Ground<'_>, aim: &Aim, a_day: f64, most: f64) -> Option<Vec<Step>> {
    let makeup = ground.makeup().ok()?;
    let volume = ground.begin.farm.volume_l;
    let slots = clock::slots(
        ground.site,
        ground.now(),
        LONGEST,
        BATCHES_A_DAY,
        wait_seconds(ground),
    );
    let mut way = ground.way(Kind::Exchange, Gas::Usual, &ground.begin.state);
    let mut now = 0.0;
    let mut other = aim.now;
    let down = aim.want < aim.now;
    let mut steps = Vec::new();
    for (day, times) in slots.iter().enumerate() {
        #[allow(clippy::cast_precision_loss)] // a handful
        let each = (a_day / times.len() as f64).min(most);
        for (i, at) in times.iter().enumerate() {
            let quarter = ground.pace().first_dose.value * a_day;
            let share = if day == 0 && i == 0 {
                each.min(quarter)
            } else {
                each
            };
            // Whole ten liters, rounded down.
            let liters = (share * volume / 10.0).floor() * 10.0;
            let liters = if liters < 10.0 {
                share * volume
            } else {
                liters
            };
            let share = liters / volume;
            let t = days_from(ground, *at);
            let actions = [Action {
                at: t - now,
                deed: Deed::Exchange(share, makeup),
            }];
            way.state = ground
                .course(&way, &actions, t - now, super::made::PLANNING)?
                .last()?
                .y;
            now = t;
            other += share * (aim.new - other);
            steps.push(Step {
                at: *at,
                liters: Some(liters),
                ..Step::default()
            });
            let level = aim.part.map_or(other, |p| p.of(&way.state));
            if (level <= aim.want) == down {
                return Some(hold_first(ground, steps));
            }
        }
    }
    None
}

/// Where the aim is reached on the first day, the first batch is still no more than its share of that day.
fn hold_first(ground: &Ground<'_>, mut steps: Vec<Step>) -> Vec<Step> {
    let most = ground.pace().first_dose.value;
    let begin = steps.first().map_or(0, |s| s.at);
    let day = |s: &&Step| s.at < begin + 86_400;
    let rest: f64 = steps
        .iter()
        .filter(day)
        .skip(1)
        .filter_map(|s| s.liters)
        .sum();
    let alone = steps.iter().filter(day).count() == 1;
    if let Some(first) = steps.first_mut()
        && let Some(liters) = first.liters
    {
        let top = if alone {
            liters * most
        } else {
            rest * most / (1.0 - most)
        };
        first.liters = Some(liters.min(top));
        if alone && steps.len() == 1 {
            let left = liters - liters.min(top);
            let later = clock::next(ground.site, begin + wait_seconds(ground));
            steps.push(Step {
                at: later,
                liters: Some(left),
                ..Step::default()
            });
        }
    }
    steps
}

fn tell(ground: &Ground<'_>, steps: &mut [Step], tried: &super::made::Tried, aim: &Aim) {
    let words = ground.words();
    let units = ground.site.units;
    let warmth = ground.site.makeup.temperature.unwrap_or(0.0);
    for step in steps.iter_mut() {
        let amount = liters(units, step.liters.unwrap_or(0.0));
        step.text = fill(
            &words.do_exchange,
            &[
                ("out", amount.clone()),
                ("new", amount),
                ("temperature", degrees(units, warmth)),
            ],
        );
        let t = days_from(ground, step.at) + 1.0 / 24.0;
        if let Some(part) = aim.part {
            step.expect
                .extend(tried.expect(&aim.id, Track::Part(part), t));
        }
        if let Some(e) = step.expect.first() {
            let hour = ground.pace().temperature_fall_per_hour.value;
            step.go_on_if.push(fill(
                &words.go_on_exchange,
                &[
                    ("reading", ground.name(&e.id)),
                    ("low", ground.shown(&e.id, e.low)),
                    ("high", ground.shown(&e.id, e.high)),
                    ("warmth", warmer(units, hour)),
                ],
            ));
        }
        for (id, track) in [
            ("temperature", Track::Part(Part::Temperature)),
            ("ph", Track::Ph),
            ("un-ionized-ammonia", Track::UnIonized),
        ] {
            if id != aim.id {
                step.expect.extend(tried.expect(id, track, t));
            }
        }
        step.stop_if.push(words.stop_exchange.clone());
    }
}

fn cautions(ground: &Ground<'_>, plan: &mut Plan, aim: &Aim, unlike: &[String]) {
    let words = ground.words();
    plan.cautions.push(words.exchange_chlorine_each.clone());
    if !unlike.is_empty() {
        let what = unlike.join(", ");
        plan.cautions
            .push(fill(&words.exchange_unlike, &[("what", what)]));
    }
    if aim.new == 0.0 {
        let name = ground.name(&aim.id);
        plan.notes
            .push(fill(&words.exchange_assumed, &[("reading", name)]));
    }
    limit_cautions(ground, plan);
}
