//! Feed cut, and restarted in step with what the filter can carry by the cautious reckoning.

use super::check::{self, Measure, Rule, Track};
use super::clock;
use super::ground::Ground;
use super::made::{Outcome, days_from, limit_cautions, mark_the_pace, trial};
use super::replay;
use super::value::{Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::{fill, kilograms, short};
use crate::course::projection::{ORDINARY, Part, Point};

/// The longest plan, in days.
const LONGEST: usize = 14;
/// How far past a rise the water is watched before it is believed, days.
const WATCHED: f64 = 4.0;
/// Margin to the limits by the cautious reckoning.
const AWAY: f64 = 0.95;

/// Plans feed.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let mut plan = Plan::new(Kind::Feed);
    let refused = ground.trust(&["total-ammonia", "nitrite", "temperature", "ph"])?;
    let usual = ground
        .begin
        .usual_feed_kg
        .ok_or_else(|| Trouble::Lacks(vec!["feed_kg_per_day".to_owned()]))?;
    let to = wish.to.unwrap_or(usual);
    if !(to >= 0.0 && to <= 10.0 * usual) {
        return Err(Trouble::Usage(fill(
            &words.aim_out_of_range,
            &[
                ("value", short(to)),
                ("low", "0".into()),
                ("high", short(10.0 * usual)),
            ],
        )));
    }
    plan.from = vec![
        ("feed".to_owned(), ground.begin.feed * usual),
        (
            "total-ammonia".to_owned(),
            Part::Ammonia.of(&ground.begin.state),
        ),
        ("nitrite".to_owned(), Part::Nitrite.of(&ground.begin.state)),
    ];
    plan.to = vec![("feed".to_owned(), to)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if ground.begin.capacity.is_none() {
        return Err(Trouble::Lacks(vec!["feed_kg_per_day".to_owned()]));
    }
    Ok(paced(ground, plan, usual, to / usual))
}

/// Whether the water stays within the limits of raised feed from one day to another, every way that things may go.
fn carries(ground: &Ground<'_>, steps: &[Step], from: f64, to: f64) -> bool {
    let pace = ground.pace();
    let actions = replay::actions(ground, steps);
    let within = |p: &Point| {
        p.t < from - 1e-9
            || (Part::Ammonia.of(&p.y) <= AWAY * pace.feed_ammonia.value
                && Part::Nitrite.of(&p.y) <= AWAY * pace.feed_nitrite.value)
    };
    ground.ways(Kind::Feed).iter().all(|way| {
        ground
            .course(way, &actions, to, ORDINARY)
            .is_some_and(|points| points.iter().all(within))
    })
}

/// Decides on each day that a rise may fall on: one level up, if the cautious course then stays within the limits.
fn levels(ground: &Ground<'_>, usual: f64, to: f64) -> Vec<(Step, f64)> {
    let pace = ground.pace();
    #[allow(clippy::cast_possible_truncation)] // a few days
    let apart = (pace.feed_step_days.value * 86_400.0) as i64;
    let feed = |at: i64, share: f64| Step {
        at,
        feed_kg: Some(share * usual),
        ..Step::default()
    };
    let first = clock::next(ground.site, ground.now());
    let last = first + i64::try_from(LONGEST).unwrap_or(14) * 86_400;
    let plain = |steps: &[(Step, f64)]| steps.iter().map(|s| s.0.clone()).collect::<Vec<_>>();
    // Now: the most, in quarters and no more than at present, that is carried from the first hour on.
    let present = ground.begin.feed;
    let mut level = 0.0;
    for quarters in [4.0, 3.0, 2.0, 1.0] {
        let share = quarters * pace.feed_step.value;
        if share > present + 1e-9 || share > to + 1e-9 {
            continue;
        }
        if carries(ground, &[feed(first, share)], 0.0, WATCHED + 1.0) {
            level = share;
            break;
        }
    }
    let mut steps = vec![(feed(first, level), level)];
    let mut at = first + apart;
    while at <= last && level < to - 1e-9 {
        let slot = clock::next(ground.site, at);
        let next = (level + pace.feed_step.value).min(to);
        let mut tried = steps.clone();
        tried.push((feed(slot, next), next));
        let t = days_from(ground, slot);
        if carries(ground, &plain(&tried), t, t + WATCHED) {
            steps = tried;
            level = next;
            at = slot + apart;
        } else {
            at = slot + 86_400;
        }
    }
    steps
}

fn paced(ground: &Ground<'_>, mut plan: Plan, usual: f64, to: f64) -> Plan {
    let pace = ground.pace();
    let words = ground.words();
    let refused = Refused {
        limit: pace.feed_ammonia.id.clone(),
        reason: words.feed_none_possible.clone(),
        instead: words.feed_none_possible_instead.clone(),
    };
    let mut levels = levels(ground, usual, to);
    // A rise that the days after the next one would not bear is taken back.
    while levels.len() > 1 && !holds(ground, &levels) {
        levels.pop();
    }
    let reached = levels.last().map_or(0.0, |l| l.1);
    if levels.len() == 1 && reached <= 0.0 && to > 0.0 && carried_now(ground) {
        return plan.refuse(refused);
    }
    let steps: Vec<Step> = levels.iter().map(|l| l.0.clone()).collect();
    // The limits hold from the first rise on: before it the plan only takes feed away.
    let from = levels.get(1).map_or(0.0, |l| days_from(ground, l.0.at));
    let rule = |limit, part, bound| Rule {
        limit,
        bound,
        track: Track::Part(part),
        measure: Measure::Most(from),
        unless_anyway: false,
    };
    let mut rules = vec![
        rule(&pace.feed_ammonia, Part::Ammonia, pace.feed_ammonia.value),
        rule(&pace.feed_nitrite, Part::Nitrite, pace.feed_nitrite.value),
    ];
    if levels.len() == 1 {
        // Feed is only cut, or left as it is: ammonia and nitrite may still be high from before.
        rules.clear();
    }
    let end = steps.last().map_or(1.0, |s| days_from(ground, s.at)) + WATCHED;
    let Some(Outcome::Keeps(tried)) = trial(ground, Kind::Feed, &steps, &rules, end) else {
        return plan.refuse(refused);
    };
    plan.limits = tried.kept(&rules);
    let largest = levels
        .windows(2)
        .map(|w| w.last().map_or(0.0, |b| b.1) - w.first().map_or(0.0, |a| a.1));
    let largest = largest.fold(0.0, f64::max);
    plan.limits
        .push(check::kept(&pace.feed_step, pace.feed_step.value, largest));
    let apart = steps.windows(2).map(|w| match w {
        [a, b] => days_from(ground, b.at) - days_from(ground, a.at),
        _ => f64::INFINITY,
    });
    if let Some(shortest) = apart.reduce(f64::min) {
        let mut kept = check::kept(&pace.feed_step_days, pace.feed_step_days.value, shortest);
        kept.is_floor = true;
        plan.limits.push(kept);
    }
    mark_the_pace(&mut plan.limits);
    let fasting = levels
        .get(1)
        .map(|l| days_from(ground, l.0.at))
        .unwrap_or(end);
    plan.steps = steps;
    tell(ground, &mut plan, usual, &tried);
    plan.cautions.push(words.feed_alkalinity.clone());
    if levels.first().is_some_and(|l| l.1 <= 0.0) && fasting > pace.days_without_feed.value {
        let days = short(pace.days_without_feed.value);
        plan.cautions
            .push(fill(&words.feed_fast, &[("days", days)]));
    }
    if reached < to - 1e-9 {
        let share = short(100.0 * reached);
        plan.notes
            .push(fill(&words.feed_not_full, &[("share", share)]));
    }
    limit_cautions(ground, &mut plan);
    plan
}

/// Whether the whole stays within the limits, from its first rise to some days past its last.
fn holds(ground: &Ground<'_>, levels: &[(Step, f64)]) -> bool {
    let steps: Vec<Step> = levels.iter().map(|l| l.0.clone()).collect();
    let at = |s: Option<&Step>| s.map_or(0.0, |s| days_from(ground, s.at));
    let (from, end) = (at(steps.get(1)), at(steps.last()) + WATCHED);
    carries(ground, &steps, from, end)
}

/// Whether ammonia and nitrite are low at present: then nothing but lack of capacity keeps feed at none.
fn carried_now(ground: &Ground<'_>) -> bool {
    let pace = ground.pace();
    Part::Ammonia.of(&ground.begin.state) <= pace.feed_ammonia.value
        && Part::Nitrite.of(&ground.begin.state) <= pace.feed_nitrite.value
        && ground.begin.feed <= 0.0
}

fn tell(ground: &Ground<'_>, plan: &mut Plan, usual: f64, tried: &super::made::Tried) {
    let words = ground.words();
    let pace = ground.pace();
    let units = ground.site.units;
    let ends: Vec<f64> = plan
        .steps
        .iter()
        .skip(1)
        .map(|s| days_from(ground, s.at))
        .chain(plan.steps.last().map(|s| days_from(ground, s.at) + 2.0))
        .collect();
    for (step, end) in plan.steps.iter_mut().zip(ends) {
        let kg = step.feed_kg.unwrap_or(0.0);
        step.text = if kg <= 0.0 {
            words.do_feed_none.clone()
        } else {
            fill(
                &words.do_feed,
                &[
                    ("feed", kilograms(units, kg)),
                    ("share", short(100.0 * kg / usual)),
                ],
            )
        };
        for (id, part) in [("total-ammonia", Part::Ammonia), ("nitrite", Part::Nitrite)] {
            step.expect.extend(tried.expect(id, Track::Part(part), end));
        }
        step.go_on_if.push(fill(
            &words.go_on_feed,
            &[
                ("ammonia", short(pace.feed_ammonia.value)),
                ("nitrite", short(pace.feed_nitrite.value)),
            ],
        ));
        step.stop_if.push(words.stop_feed.clone());
    }
}
