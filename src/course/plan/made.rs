//! A plan while it is made: steps are simulated every way things may go, and held to the rules.

use super::check::{Fared, Rule, Track, at};
use super::ground::Ground;
use super::replay;
use super::value::{Amount, Expect, Kept, Kind, Plan, Refused, Step};
use super::words::{fill, short};
use crate::course::projection::{Exact, ORDINARY, Part, Point};
use crate::knowledge::Dosable;

/// For making plans: steps of at most an hour and a half, so that nothing between them is missed.
pub const PLANNING: Exact = Exact {
    longest: 0.0625,
    ..ORDINARY
};

/// A plan keeps this share away from every limit, so that neither rounding nor a finer reckoning passes it.
pub const KEPT_AWAY: f64 = 0.03;

/// Steps as they were tried.
#[derive(Debug, Clone)]
pub struct Tried {
    /// The courses, one a way.
    pub courses: Vec<Vec<Point>>,
    /// Each rule's worst over the ways, and what doing nothing comes to.
    pub fared: Vec<(Fared, f64)>,
}

/// What comes of trying steps.
#[derive(Debug, Clone)]
pub enum Outcome<'r, 'k> {
    /// Every rule holds, every way.
    Keeps(Tried),
    /// A rule is broken one way; no further way was tried.
    Breaks(&'r Rule<'k>, Fared),
}

/// Runs steps every way and measures them; `None` when a course can't be reckoned.
pub fn trial<'r, 'k>(
    ground: &Ground<'_>,
    kind: Kind,
    steps: &[Step],
    rules: &'r [Rule<'k>],
    days: f64,
) -> Option<Outcome<'r, 'k>> {
    let actions = replay::actions(ground, steps);
    let anyway = rules.iter().any(|r| r.unless_anyway);
    let mut tried = Tried {
        courses: Vec::new(),
        fared: Vec::new(),
    };
    for way in ground.ways(kind) {
        let course = ground.course(&way, &actions, days, PLANNING)?;
        let idle = if anyway {
            Some(ground.course(&way, &[], days, PLANNING)?)
        } else {
            None
        };
        let here: Vec<(Fared, f64)> = rules
            .iter()
            .map(|rule| {
                let without = idle.as_ref().filter(|_| rule.unless_anyway);
                (
                    rule.of(&course),
                    without.map_or(rule.bound, |i| rule.of(i).reached),
                )
            })
            .collect();
        let broken = rules
            .iter()
            .zip(&here)
            .filter(|(rule, (fared, without))| rule.is_passed(fared.reached, *without, -KEPT_AWAY))
            .min_by(|a, b| a.1.0.at.total_cmp(&b.1.0.at));
        if let Some((rule, (fared, _))) = broken {
            return Some(Outcome::Breaks(rule, *fared));
        }
        tried.fared = if tried.fared.is_empty() {
            here
        } else {
            let pairs = rules.iter().zip(tried.fared.iter().zip(here));
            pairs
                .map(|(rule, (a, b))| {
                    if rule.is_worse(b.0.reached, a.0.reached) {
                        b
                    } else {
                        *a
                    }
                })
                .collect()
        };
        tried.courses.push(course);
    }
    Some(Outcome::Keeps(tried))
}

impl Tried {
    /// The limits as the plan shows them.
    pub fn kept(&self, rules: &[Rule<'_>]) -> Vec<Kept> {
        rules
            .iter()
            .zip(&self.fared)
            .map(|(rule, (fared, without))| rule.kept(fared.reached, *without))
            .collect()
    }

    /// What is expected of a track at a moment (days): lowest and highest over the ways.
    pub fn expect(&self, id: &str, track: Track, days: f64) -> Option<Expect> {
        let values: Vec<f64> = self
            .courses
            .iter()
            .filter_map(|c| at(track, c, days))
            .collect();
        let low = values.iter().copied().reduce(f64::min)?;
        let high = values.iter().copied().reduce(f64::max)?;
        Some(Expect {
            id: id.to_owned(),
            low,
            high,
        })
    }
}

/// Days from now.
pub fn days_from(ground: &Ground<'_>, at: i64) -> f64 {
    #[allow(clippy::cast_precision_loss)] // plans are weeks
    let seconds = (at - ground.now()) as f64;
    seconds / 86_400.0
}

/// Why a plan is refused: which limit, when, by how much.
pub fn refusal(ground: &Ground<'_>, rule: &Rule<'_>, fared: Fared) -> Refused {
    #[allow(clippy::cast_possible_truncation)] // plans are weeks
    let when = ground.now() + (fared.at * 86_400.0) as i64;
    broken(ground, rule.limit, rule.bound, fared.reached, Some(when))
}

/// The words for a limit that would be passed.
pub fn broken(
    ground: &Ground<'_>,
    limit: &crate::knowledge::PaceLimit,
    bound: f64,
    reached: f64,
    when: Option<i64>,
) -> Refused {
    let words = ground.words();
    let text = if when.is_some() {
        &words.broken_at
    } else {
        &words.broken
    };
    Refused {
        limit: limit.id.clone(),
        reason: fill(
            text,
            &[
                ("limit", limit.name.clone()),
                ("value", short(reached)),
                ("bound", short(bound)),
                ("unit", limit.unit.clone()),
                (
                    "when",
                    when.map_or(String::new(), |w| clock_time(ground, w)),
                ),
            ],
        ),
        instead: limit.instead.clone(),
    }
}

/// A time for the middle of a sentence, in the site's zone.
pub fn clock_time(ground: &Ground<'_>, at: i64) -> String {
    jiff::Timestamp::from_second(at).map_or_else(
        |_| String::new(),
        |t| {
            t.to_zoned_datetime(ground.site.timezone.clone())
                .strftime("%a %b %-d, %H:%M")
                .to_string()
        },
    )
}

/// An amount of a substance as it is weighed: rounded down.
pub fn amount(substance: &Dosable, pure_grams: f64, purity: f64) -> Amount {
    let share = (purity / 100.0).clamp(0.01, 1.0);
    let strength = substance.liquid.map_or(1.0, |(percent, _)| percent / 100.0);
    // A liquid's purity is its strength; 100 percent stands for "as it is usually sold".
    let share = if substance.liquid.is_some() && purity >= 100.0 {
        strength
    } else {
        share
    };
    let grams = super::words::weighable(pure_grams.max(0.0) / share);
    Amount {
        substance: substance.id.clone(),
        name: substance.name.clone(),
        grams,
        pure: grams * share,
        milliliters: substance.liquid.map(|(_, density)| grams / density),
    }
}

/// "200 g of potassium bicarbonate", with milliliters where it is a liquid.
pub fn amount_words(ground: &Ground<'_>, amount: &Amount) -> String {
    let weight = super::words::grams(ground.site.units, amount.grams);
    match amount.milliliters {
        Some(ml) => format!("{weight} ({} mL) of {}", short(ml), amount.name),
        None => format!("{weight} of {}", amount.name),
    }
}

/// Marks the limit that was used most as the one that set the pace.
pub fn mark_the_pace(kept: &mut [Kept]) {
    let share = |k: &Kept| {
        let (over, under) = if k.is_floor {
            (k.limit, k.reached)
        } else {
            (k.reached, k.limit)
        };
        if under > 1e-12 { over / under } else { 0.0 }
    };
    let best = kept
        .iter()
        .enumerate()
        .max_by(|a, b| share(a.1).total_cmp(&share(b.1)))
        .map(|(i, _)| i);
    if let Some(k) = best.and_then(|i| kept.get_mut(i)) {
        k.set_the_pace = true;
    }
}

/// Cautions that rest on the limits themselves: unpublished ones, contested ones.
pub fn limit_cautions(ground: &Ground<'_>, plan: &mut Plan) {
    let words = ground.words();
    let unpublished: Vec<String> = plan
        .limits
        .iter()
        .filter(|k| k.unpublished)
        .map(|k| k.name.clone())
        .collect();
    if !unpublished.is_empty() {
        plan.cautions.push(fill(
            &words.unpublished,
            &[("limits", unpublished.join(", "))],
        ));
    }
    for k in plan
        .limits
        .iter()
        .filter(|k| !k.contested.is_empty() && k.set_the_pace)
    {
        plan.cautions.push(fill(
            &words.contested,
            &[("limit", k.name.clone()), ("others", k.contested.clone())],
        ));
    }
    for k in plan.limits.iter().filter(|k| k.without.is_some()) {
        plan.cautions.push(fill(
            &words.anyway,
            &[
                ("limit", k.name.clone()),
                ("value", short(k.without.unwrap_or(0.0))),
                ("unit", k.unit.clone()),
            ],
        ));
    }
    for id in &ground.begin.assumed {
        let used = matches!(*id, "temperature" | "ph" | "alkalinity");
        if used {
            plan.notes.push(fill(
                &words.assumed,
                &[
                    ("reading", ground.name(id)),
                    ("value", ground.shown(id, assumed(ground, id))),
                ],
            ));
        }
    }
}

fn assumed(ground: &Ground<'_>, id: &str) -> f64 {
    let state = &ground.begin.state;
    match id {
        "temperature" => Part::Temperature.of(state),
        "alkalinity" => Part::Alkalinity.of(state),
        _ => ground.begin.ph,
    }
}
