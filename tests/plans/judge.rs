//! Holds a plan to its limits by simulating its steps at a finer grain than the planner did, and measuring in its own way.

use gillside::course::plan::{Ground, Plan, replay};
use gillside::course::projection::{Extreme, FINE, Gas, Part, Point};

/// What reckoning more finely may add to a value: half a percent of the limit.
const SLACK: f64 = 0.005;

fn simulated(ground: &Ground<'_>, plan: &Plan, actions: bool, days: f64) -> Vec<Vec<Point>> {
    let actions = if actions {
        replay::actions(ground, &plan.steps)
    } else {
        Vec::new()
    };
    let state = ground.begin.state;
    let begin = &ground.begin;
    let few = begin.extreme(Extreme::Few, Extreme::Few);
    let many = begin.extreme(Extreme::Many, Extreme::Many);
    let uneven = begin.extreme(Extreme::Many, Extreme::Few);
    [
        (Gas::Usual, state),
        (Gas::Open, few),
        (Gas::Slow, few),
        (Gas::Slow, many),
        (Gas::Usual, uneven),
    ]
    .iter()
    .map(|(gas, state)| {
        ground
            .course(&ground.way(plan.kind, *gas, state), &actions, days, FINE)
            .expect("a plan can be simulated")
    })
    .collect()
}

/// The largest change upward (or downward) within a window, by trying every pair.
fn change(points: &[Point], of: impl Fn(&Point) -> f64, days: f64, up: bool) -> f64 {
    let mut worst = 0.0_f64;
    for (i, b) in points.iter().enumerate() {
        for a in points[..i]
            .iter()
            .rev()
            .take_while(|a| b.t - a.t <= days + 1e-9)
        {
            let rise = of(b) - of(a);
            worst = worst.max(if up { rise } else { -rise });
        }
    }
    worst
}

fn most(points: &[Point], of: impl Fn(&Point) -> f64, from: f64) -> f64 {
    points
        .iter()
        .filter(|p| p.t >= from - 1e-9)
        .map(of)
        .fold(f64::NEG_INFINITY, f64::max)
}

fn level(points: &[Point], part: Part, t: f64) -> f64 {
    let i = points.partition_point(|p| p.t <= t + 1e-9).max(1);
    let a = &points[i - 1];
    let Some(b) = points.get(i) else {
        return part.of(&a.y);
    };
    let share = ((t - a.t) / (b.t - a.t).max(1e-12)).clamp(0.0, 1.0);
    part.of(&a.y) + share * (part.of(&b.y) - part.of(&a.y))
}

/// The worst of one limit over a course; `None` for limits that are not about the water's course.
fn measured(id: &str, points: &[Point], from: f64) -> Option<f64> {
    let t = |p: &Point| Part::Temperature.of(&p.y);
    Some(match id {
        "ph-rise-per-dose" => points
            .windows(2)
            .filter(|w| w[1].after_deed)
            .map(|w| w[1].ph - w[0].ph)
            .fold(0.0, f64::max),
        "ph-rise-per-day" => change(points, |p| p.ph, 1.0, true),
        "ph-fall-per-day" => change(points, |p| p.ph, 1.0, false),
        "un-ionized-ammonia" => most(points, |p| p.un_ionized, 0.0),
        "carbon-dioxide" => most(points, |p| p.carbon_dioxide, 0.0),
        "temperature-rise-per-hour" => change(points, t, 1.0 / 24.0, true),
        "temperature-rise-per-day" => change(points, t, 1.0, true),
        "temperature-fall-per-hour" => change(points, t, 1.0 / 24.0, false),
        "temperature-fall-per-day" => change(points, t, 1.0, false),
        "chloride-with-plants" => most(points, |p| Part::Chloride.of(&p.y), 0.0),
        "sodium-with-plants" => most(points, |p| Part::Sodium.of(&p.y), 0.0),
        "feed-ammonia" => most(points, |p| Part::Ammonia.of(&p.y), from),
        "feed-nitrite" => most(points, |p| Part::Nitrite.of(&p.y), from),
        "alkalinity-rise-per-day" => points
            .iter()
            .map(|p| {
                Part::Alkalinity.of(&p.y) - level(points, Part::Alkalinity, (p.t - 1.0).max(0.0))
            })
            .fold(0.0, f64::max),
        "alkalinity-left-by-acid" => points
            .iter()
            .map(|p| Part::Alkalinity.of(&p.y))
            .fold(f64::INFINITY, f64::min),
        _ => return None,
    })
}

/// Everything that is wrong with a plan; empty for one that keeps its word.
pub fn faults(ground: &Ground<'_>, plan: &Plan) -> Vec<String> {
    let days = |at: i64| (at - ground.now()) as f64 / 86_400.0;
    let rise = plan.steps.get(1).map_or(0.0, |s| days(s.at));
    let mut faults = chained(ground, plan, rise);
    if !plan.steps.is_empty() {
        shape(ground, plan, &mut faults);
    }
    faults
}

/// What is wrong with the course of the water; feed is raised from day `rise` on.
pub fn chained(ground: &Ground<'_>, plan: &Plan, from: f64) -> Vec<String> {
    let mut faults = Vec::new();
    if plan.steps.is_empty() {
        return faults;
    }
    let days = |at: i64| (at - ground.now()) as f64 / 86_400.0;
    let end = days(plan.steps.last().unwrap().at) + 1.0;
    let watched = plan
        .limits
        .iter()
        .any(|l| measured(&l.id, &[], 0.0).is_some());
    if watched {
        let courses = simulated(ground, plan, true, end);
        let idle = if plan.kind == gillside::course::plan::Kind::Exchange
            || plan.limits.iter().any(|l| l.without.is_some())
        {
            simulated(ground, plan, false, end)
        } else {
            Vec::new()
        };
        for kept in &plan.limits {
            for (way, points) in courses.iter().enumerate() {
                let Some(value) = measured(&kept.id, points, from) else {
                    continue;
                };
                let anyway = idle
                    .get(way)
                    .and_then(|p| measured(&kept.id, p, from))
                    .unwrap_or(0.0);
                let broken = if kept.is_floor {
                    value < kept.limit * (1.0 - SLACK)
                } else {
                    value > (kept.limit * (1.0 + SLACK)).max(anyway * 1.02)
                };
                if broken {
                    faults.push(format!(
                        "{} is {value}, limit {}, way {way}, shown {}",
                        kept.id, kept.limit, kept.reached
                    ));
                }
            }
        }
    }
    for kept in plan
        .limits
        .iter()
        .filter(|k| measured(&k.id, &[], 0.0).is_none())
    {
        let broken = if kept.is_floor {
            kept.reached < kept.limit - 1e-9
        } else {
            kept.reached > kept.limit * 1.0001
        };
        if broken {
            faults.push(format!(
                "{} is {}, limit {}",
                kept.id, kept.reached, kept.limit
            ));
        }
    }
    faults
}

/// Steps in order, in shifts, weighable, and strong substances only where they were asked for.
fn shape(ground: &Ground<'_>, plan: &Plan, faults: &mut Vec<String>) {
    use gillside::course::plan::Kind;
    for pair in plan.steps.windows(2) {
        if pair[1].at < pair[0].at {
            faults.push("steps out of order".to_owned());
        }
    }
    let mut total = 0.0;
    for step in &plan.steps {
        if step.text.is_empty() || step.text.contains('{') {
            faults.push(format!("words: `{}`", step.text));
        }
        for line in step
            .go_on_if
            .iter()
            .chain(&step.stop_if)
            .chain(&plan.cautions)
            .chain(&plan.notes)
        {
            if line.contains('{') {
                faults.push(format!("words: `{line}`"));
            }
        }
        for amount in &step.amounts {
            total += amount.grams;
            if !(amount.grams > 0.0 && amount.grams.is_finite()) {
                faults.push(format!("{} g", amount.grams));
            }
        }
        for e in &step.expect {
            if !(e.low <= e.high && e.low.is_finite() && e.high.is_finite()) {
                faults.push(format!("{} expected {} to {}", e.id, e.low, e.high));
            }
        }
        let emergency = matches!(plan.kind, Kind::Oxygen | Kind::Dechlorinate);
        if !emergency && !ground.site.shift.is_empty() {
            let time = jiff::Timestamp::from_second(step.at)
                .unwrap()
                .to_zoned_datetime(ground.site.timezone.clone())
                .time();
            if !ground.site.shift.iter().any(|s| s.covers(time)) && step.warmth.is_none() {
                faults.push(format!("{time} is in no shift"));
            }
        }
    }
    let sum: f64 = plan.total.iter().map(|a| a.grams).sum();
    if (sum - total).abs() > 1e-6 * total.max(1.0) {
        faults.push("the total is not the sum".to_owned());
    }
    let quarter = |f: f64| f <= 0.2501;
    let begin = plan.steps[0].at;
    let day: Vec<f64> = plan
        .steps
        .iter()
        .filter(|s| s.at < begin + 86_400)
        .map(|s| s.amounts.iter().map(|a| a.pure).sum::<f64>() + s.liters.unwrap_or(0.0))
        .collect();
    if day.len() > 1 && day[0] > 0.0 && !quarter(day[0] / day.iter().sum::<f64>()) {
        faults.push(format!(
            "the first dose is {} of {}",
            day[0],
            day.iter().sum::<f64>()
        ));
    }
}
