//! Alkalinity up, pH up and down: doses of a base or an acid that follow a path, each reckoned from where the water then is.

use super::check::{Measure, Rule, Track};
use super::ground::Ground;
use super::made::{
    Outcome, amount, amount_words, broken, days_from, limit_cautions, mark_the_pace, refusal, trial,
};
use super::value::{Amount, Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::{fill, short};
use super::{clock, replay};
use crate::course::projection::{Gas, Part};
use crate::knowledge::{Dosable, Side, Use};
use crate::water::carbonate::state::{self, CACO3_PER_EQ};

/// Doses a day that are tried: enough that the first is a quarter of its day; more where much has to be made up for.
const DOSES_A_DAY: [usize; 2] = [5, 10];
/// Lengths of plan that are tried, in days.
const LENGTHS: [usize; 8] = [1, 2, 3, 4, 6, 8, 11, 14];
/// Nearer than this to the aim there is nothing to do: pH, and mg/L as CaCO3.
const NEAR: (f64, f64) = (0.03, 1.5);

/// What the doses lead along.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Path {
    Alkalinity {
        from: f64,
        to: f64,
    },
    /// In equal factors: small doses first, where the water has little.
    Factors {
        from: f64,
        to: f64,
    },
    /// pH at the present carbon dioxide (mmol/L): where it settles once gas has.
    Ph {
        from: f64,
        to: f64,
        carbon_dioxide: f64,
    },
}

/// Plans alkalinity or pH.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let mut plan = Plan::new(wish.kind);
    let needed = ["temperature", "ph", "alkalinity", "total-ammonia"];
    let refused = ground.trust(&needed)?;
    let (ph, alkalinity) = (ground.begin.ph, Part::Alkalinity.of(&ground.begin.state));
    plan.from = vec![("alkalinity".to_owned(), alkalinity), ("ph".to_owned(), ph)];
    let to = aim(ground, wish, ph)?;
    plan.to = vec![(wish.kind.word().to_owned(), to)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    let near = match wish.kind {
        Kind::Ph => (to - ph).abs() < NEAR.0,
        _ => (to - alkalinity).abs() < NEAR.1,
    };
    if near {
        plan.notes.push(ground.words().already.clone());
        return Ok(plan);
    }
    let up = match wish.kind {
        Kind::Ph => to > ph,
        _ => to > alkalinity,
    };
    if !up && wish.kind == Kind::Alkalinity {
        return Err(Trouble::Usage(ground.words().alkalinity_down.clone()));
    }
    let substance = match choose(ground, wish, up)? {
        Ok(substance) => substance,
        Err(refused) => return Ok(plan.refuse(refused)),
    };
    let path = match (wish.kind, ground.chemistry()) {
        (Kind::Ph, Some(chem)) => Path::Ph {
            from: ph,
            to,
            carbon_dioxide: chem.carbon_dioxide(ph, Part::Carbon.of(&ground.begin.state)),
        },
        _ => Path::Alkalinity {
            from: alkalinity,
            to,
        },
    };
    let mut paths = vec![path];
    if let Path::Alkalinity { from, to } = path
        && from >= 1.0
    {
        paths.push(Path::Factors { from, to });
    }
    Ok(paced(ground, wish, plan, &paths, substance, up))
}

/// The value to go to: what is wished, else the near edge of the comfort band.
fn aim(ground: &Ground<'_>, wish: &Wish, ph: f64) -> Result<f64, Trouble> {
    let id = wish.kind.word();
    let own = match wish.kind {
        Kind::Ph => {
            let (low, high) = (ground.target(id, Side::Low), ground.target(id, Side::High));
            match (low, high) {
                (Some(low), _) if ph < low => Some(low),
                (_, Some(high)) if ph > high => Some(high),
                _ => Some(ph),
            }
        }
        _ => ground.target(id, Side::Low),
    };
    let to = wish
        .to
        .or(own)
        .ok_or_else(|| Trouble::Lacks(vec!["--to".to_owned()]))?;
    let range = if wish.kind == Kind::Ph {
        4.5..=9.5
    } else {
        0.0..=500.0
    };
    if range.contains(&to) {
        Ok(to)
    } else {
        Err(Trouble::Usage(fill(
            &ground.words().aim_out_of_range,
            &[
                ("value", short(to)),
                ("low", short(*range.start())),
                ("high", short(*range.end())),
            ],
        )))
    }
}

/// The substance: what is asked for, else a gentle one that the farm has or that suits its plants.
fn choose<'g>(
    ground: &'g Ground<'_>,
    wish: &Wish,
    up: bool,
) -> Result<Result<&'g Dosable, Refused>, Trouble> {
    let wanted = if up { Use::Base } else { Use::Acid };
    let words = ground.words();
    if let Some(name) = &wish.substance {
        let found = named(ground, name)?;
        if found.used_as != wanted {
            let kind = if up { &words.a_base } else { &words.an_acid };
            return Err(Trouble::Usage(fill(
                &words.wrong_substance,
                &[("substance", found.name.clone()), ("wanted", kind.clone())],
            )));
        }
        return Ok(Ok(found));
    }
    let gentle = |s: &&&Dosable| s.used_as == wanted && !s.strong && !s.id.starts_with("CaCO3");
    let all = &ground.knowledge.pacing.substances;
    let shelf = ground.site.equipment.substances.iter().flatten();
    let on_shelf = shelf.filter_map(|n| ground.knowledge.pacing.substance(n));
    let sodium_is_bad = ground.has_plants();
    let suits = |s: &&Dosable| !(sodium_is_bad && s.gives("sodium") > 0.0);
    let mut on_shelf = on_shelf.collect::<Vec<_>>();
    on_shelf.sort_by(|a, b| b.gives("carbon").total_cmp(&a.gives("carbon")));
    let found = on_shelf
        .iter()
        .filter(gentle)
        .find(|s| suits(s))
        .copied()
        .or_else(|| all.iter().filter(|s| gentle(&s)).find(|s| suits(s)));
    Ok(found.ok_or_else(|| Refused {
        limit: "strong-substance".to_owned(),
        reason: words.acid_unasked.clone(),
        instead: words.acid_unasked_instead.clone(),
    }))
}

/// A substance by the name a person gives it.
pub(super) fn named<'g>(ground: &'g Ground<'_>, name: &str) -> Result<&'g Dosable, Trouble> {
    let pacing = &ground.knowledge.pacing;
    pacing.substance(name).ok_or_else(|| {
        let all = pacing.substances.iter().map(|s| s.id.as_str());
        let list = all.clone().collect::<Vec<_>>().join(", ");
        Trouble::Usage(format!(
            "no substance is called `{}`; {}",
            crate::fault::shown(name),
            crate::fault::did_you_mean(name, all, &format!("there are {list}"))
        ))
    })
}

/// The limits of such a plan.
fn rules<'k>(ground: &Ground<'k>, substance: &Dosable, up: bool, kind: Kind) -> Vec<Rule<'k>> {
    let pace = ground.pace();
    let rule = |limit, bound, track, measure| Rule {
        limit,
        bound,
        track,
        measure,
        unless_anyway: false,
    };
    let plain = |limit: &'k crate::knowledge::PaceLimit, track, measure| {
        rule(limit, limit.for_fish(ground.warm()), track, measure)
    };
    let mut rules = Vec::new();
    if up {
        rules.push(plain(&pace.ph_rise_per_dose, Track::Ph, Measure::Jump));
        rules.push(plain(&pace.ph_rise_per_day, Track::Ph, Measure::Rise(24.0)));
        let limit = ground.un_ionized_limit();
        rules.push(rule(
            &pace.un_ionized_ammonia,
            limit,
            Track::UnIonized,
            Measure::Most(0.0),
        ));
        if kind == Kind::Alkalinity {
            let track = Track::Part(Part::Alkalinity);
            rules.push(plain(
                &pace.alkalinity_rise_per_day,
                track,
                Measure::NetRise,
            ));
        }
        if substance.gives("sodium") > 0.0 && ground.has_plants() {
            let track = Track::Part(Part::Sodium);
            rules.push(plain(&pace.sodium_with_plants, track, Measure::Most(0.0)));
        }
    } else {
        // Where carbon runs out by itself pH falls by itself; the plan answers for what it adds to that.
        let fall = plain(&pace.ph_fall_per_day, Track::Ph, Measure::Fall(24.0));
        rules.push(fall);
        let limit = pace.carbon_dioxide.for_fish(ground.warm());
        let now = Track::CarbonDioxide;
        rules.push(Rule {
            unless_anyway: true,
            ..rule(&pace.carbon_dioxide, limit, now, Measure::Most(0.0))
        });
        let track = Track::Part(Part::Alkalinity);
        rules.push(plain(&pace.alkalinity_left_by_acid, track, Measure::Least));
        if substance.gives("chloride") > 0.0 && ground.has_plants() {
            let track = Track::Part(Part::Chloride);
            rules.push(plain(&pace.chloride_with_plants, track, Measure::Most(0.0)));
        }
    }
    rules
}

/// The shortest plan that keeps every limit, or the refusal of the longest.
fn paced(
    ground: &Ground<'_>,
    wish: &Wish,
    mut plan: Plan,
    paths: &[Path],
    substance: &Dosable,
    up: bool,
) -> Plan {
    let rules = rules(ground, substance, up, wish.kind);
    let wait = wait_seconds(ground);
    let (mut last, mut level_met) = (None, false);
    let tries = LENGTHS.iter().flat_map(|days| {
        let doses = DOSES_A_DAY.iter().map(move |doses| (*days, *doses));
        doses.flat_map(|(days, doses)| paths.iter().map(move |path| (days, doses, path)))
    });
    // Longer is gentler up to a point; where lengths bring nothing any more, no other does either.
    let (mut length, mut best, mut best_before, mut in_vain) = (0, f64::INFINITY, f64::INFINITY, 0);
    for (days, doses, path) in tries {
        if days != length {
            in_vain = if best < 0.97 * best_before {
                0
            } else {
                in_vain + 1
            };
            if in_vain >= 4 {
                break;
            }
            (length, best_before) = (days, best.min(best_before));
        }
        let slots = clock::slots(ground.site, ground.now(), days, doses, wait);
        let Some(mut steps) = along(ground, wish, path, substance, &slots) else {
            continue;
        };
        let end = steps.last().map_or(1.0, |s| days_from(ground, s.at)) + 1.0;
        let tried = match trial(ground, wish.kind, &steps, &rules, end) {
            Some(Outcome::Keeps(tried)) => tried,
            Some(Outcome::Breaks(rule, fared)) => {
                best = best.min(rule.used(fared.reached));
                // A level that is passed at any pace says more than a pace that is too fast.
                let level = matches!(rule.measure, Measure::Most(_) | Measure::Least);
                if level || !level_met {
                    last = Some(refusal(ground, rule, fared));
                }
                level_met |= level;
                continue;
            }
            None => continue,
        };
        plan.limits = tried.kept(&rules);
        plan.limits.push(first_dose(ground, &steps));
        if let Some(refused) = levels(ground, &mut plan, substance, &steps) {
            return plan.refuse(refused);
        }
        mark_the_pace(&mut plan.limits);
        tell(ground, &mut steps, &tried, up);
        plan.steps = steps;
        plan.add_up();
        cautions(ground, &mut plan, substance, up);
        return plan;
    }
    let refused = last.unwrap_or_else(|| Refused {
        limit: ground.pace().longest_plan.id.clone(),
        reason: ground.words().too_long.clone(),
        instead: ground.pace().longest_plan.instead.clone(),
    });
    plan.refuse(refused)
}

/// Seconds between two doses.
pub(super) fn wait_seconds(ground: &Ground<'_>) -> i64 {
    #[allow(clippy::cast_possible_truncation)] // hours of a day
    let wait = (3600.0 * ground.pace().wait_between_doses.value) as i64;
    wait
}

/// Shares of a day's dose: the first day begins with a quarter at most.
pub(super) fn shares(ground: &Ground<'_>, slots: &[Vec<i64>]) -> Vec<Vec<f64>> {
    let most = ground.pace().first_dose.value;
    slots
        .iter()
        .enumerate()
        .map(|(day, times)| {
            #[allow(clippy::cast_precision_loss)] // a handful
            let n = times.len() as f64;
            times
                .iter()
                .enumerate()
                .map(|(i, _)| match (day, i, times.len()) {
                    (0, 0, _) => most.min(1.0 / n),
                    (0, _, len) if len > 1 => (1.0 - most.min(1.0 / n)) / (n - 1.0),
                    _ => 1.0 / n,
                })
                .collect()
        })
        .collect()
}

/// Doses along the path: at each time what brings the water, as it would then be, to where the path is.
fn along(
    ground: &Ground<'_>,
    wish: &Wish,
    path: &Path,
    substance: &Dosable,
    slots: &[Vec<i64>],
) -> Option<Vec<Step>> {
    let volume = ground.begin.farm.volume_l;
    #[allow(clippy::cast_precision_loss)] // a fortnight
    let days = slots.len() as f64;
    let gives = 1000.0 * substance.gives("alkalinity");
    let mut way = ground.way(wish.kind, Gas::Usual, &ground.begin.state);
    let (mut now, mut share) = (0.0, 0.0);
    let mut pure: Vec<(i64, f64)> = Vec::new();
    for (times, parts) in slots.iter().zip(shares(ground, slots)) {
        for (at, part) in times.iter().zip(parts) {
            let t = days_from(ground, *at);
            way.state = ground
                .course(&way, &[], t - now, super::made::PLANNING)?
                .last()?
                .y;
            now = t;
            share += part / days;
            let wanted = wanted(ground, path, share)?;
            let grams = ((wanted - Part::Alkalinity.of(&way.state)) / gives * volume).max(0.0);
            pure.push((*at, grams));
            for deed in replay::deeds(substance, grams, volume) {
                if let crate::course::projection::Deed::Add(part, by) = deed {
                    part.add(&mut way.state, by);
                }
            }
        }
    }
    let first_day = slots.first().map_or(0, Vec::len);
    let most = ground.pace().first_dose.value;
    let amounts = weighed(substance, wish.purity, &pure, first_day, most);
    let steps = pure
        .iter()
        .zip(amounts)
        .filter(|(_, a)| a.grams > 0.0)
        .map(|((at, _), amount)| Step {
            at: *at,
            amounts: vec![amount],
            ..Step::default()
        })
        .collect();
    Some(steps)
}

/// Amounts as they are weighed, the first held to its share of the first day's.
pub(super) fn weighed(
    substance: &Dosable,
    purity: f64,
    pure: &[(i64, f64)],
    first_day: usize,
    most: f64,
) -> Vec<Amount> {
    let mut amounts: Vec<Amount> = pure
        .iter()
        .map(|(_, g)| amount(substance, *g, purity))
        .collect();
    let rest: f64 = amounts.iter().take(first_day).skip(1).map(|a| a.pure).sum();
    if let Some(first) = amounts.first_mut() {
        // A lone dose is a quarter of what its day could have had.
        let top = if first_day > 1 {
            rest * most / (1.0 - most)
        } else {
            first.pure * most
        };
        if first.pure > top {
            *first = amount(substance, top, purity);
        }
    }
    amounts
}

/// Alkalinity (mg/L as CaCO3) where the path is at a share of the way.
fn wanted(ground: &Ground<'_>, path: &Path, share: f64) -> Option<f64> {
    match *path {
        Path::Alkalinity { from, to } => Some(from + (to - from) * share),
        Path::Factors { from, to } => Some(from * (to / from).powf(share)),
        Path::Ph {
            from,
            to,
            carbon_dioxide,
        } => {
            let chem = ground.chemistry()?;
            let ph = from + (to - from) * share;
            let [free, ..] = state::carbon_shares(&chem.carbonate, ph);
            let carbon = carbon_dioxide / free / 1000.0;
            let phosphorus = ground.begin.farm.phosphorus;
            Some(CACO3_PER_EQ * state::alkalinity(&chem.carbonate, ph, carbon, phosphorus))
        }
    }
}

/// How the first dose fared as a share of its day.
pub(super) fn first_dose(ground: &Ground<'_>, steps: &[Step]) -> super::value::Kept {
    let limit = &ground.pace().first_dose;
    let first = steps.first();
    let begin = first.map_or(0, |s| s.at);
    let grams = |s: &Step| s.amounts.iter().map(|a| a.pure).sum::<f64>() + s.liters.unwrap_or(0.0);
    let day: f64 = steps
        .iter()
        .filter(|s| s.at < begin + 86_400)
        .map(grams)
        .sum();
    let alone = steps.iter().filter(|s| s.at < begin + 86_400).count() == 1;
    let share = first.map_or(0.0, grams) / day.max(1e-12);
    super::check::kept(limit, limit.value, if alone { limit.value } else { share })
}

/// Levels of what comes with a substance and that the projection does not carry: kept by arithmetic.
pub(super) fn levels(
    ground: &Ground<'_>,
    plan: &mut Plan,
    substance: &Dosable,
    steps: &[Step],
) -> Option<Refused> {
    let pace = ground.pace();
    let pure: f64 = steps.iter().flat_map(|s| &s.amounts).map(|a| a.pure).sum();
    for (id, limit) in [
        ("potassium", &pace.potassium),
        ("calcium", &pace.calcium),
        ("magnesium", &pace.magnesium),
    ] {
        let added = 1000.0 * substance.gives(id) * pure / ground.begin.farm.volume_l;
        if added <= 0.0 {
            continue;
        }
        let reached = ground.readings.value(id).unwrap_or(0.0) + added;
        if reached > limit.value {
            return Some(broken(ground, limit, limit.value, reached, None));
        }
        plan.limits
            .push(super::check::kept(limit, limit.value, reached));
        if ground.readings.value(id).is_none() {
            let words = &ground.words().unmeasured;
            plan.notes
                .push(fill(words, &[("reading", ground.name(id))]));
        }
    }
    None
}

/// Writes what to do at each step, what is expected, when to go on, when to stop.
fn tell(ground: &Ground<'_>, steps: &mut [Step], tried: &super::made::Tried, up: bool) {
    let words = ground.words();
    let wait = wait_seconds(ground);
    for step in steps.iter_mut() {
        let Some(amount) = step.amounts.first().cloned() else {
            continue;
        };
        let substance = ground.knowledge.pacing.substance(&amount.substance);
        let strong = substance.is_some_and(|s| s.strong);
        let text = match (up, strong, amount.substance.as_str()) {
            (true, true, _) => &words.do_strong_base,
            (true, false, _) => &words.do_base,
            (false, ..) => &words.do_acid,
        };
        step.text = fill(text, &[("amount", amount_words(ground, &amount))]);
        let t = days_from(ground, step.at + wait);
        for (id, track) in [
            ("alkalinity", Track::Part(Part::Alkalinity)),
            ("ph", Track::Ph),
            ("un-ionized-ammonia", Track::UnIonized),
        ] {
            step.expect.extend(tried.expect(id, track, t));
        }
        let hours = short(ground.pace().wait_between_doses.value);
        for expect in step.expect.iter().filter(|e| e.id != "un-ionized-ammonia") {
            step.go_on_if.push(fill(
                &words.go_on_reads,
                &[
                    ("reading", ground.name(&expect.id)),
                    ("low", ground.shown(&expect.id, expect.low)),
                    ("high", ground.shown(&expect.id, expect.high)),
                    ("hours", hours.clone()),
                ],
            ));
        }
        let (jump, pace) = (
            ground.pace().ph_rise_per_dose.value,
            if up {
                ground.pace().ph_rise_per_day.value
            } else {
                ground.pace().ph_fall_per_day.value
            },
        );
        let text = if up {
            &words.stop_ph_up
        } else {
            &words.stop_ph_down
        };
        step.stop_if
            .push(fill(text, &[("jump", short(jump)), ("pace", short(pace))]));
        step.stop_if.push(words.stop_fish.clone());
    }
}

fn cautions(ground: &Ground<'_>, plan: &mut Plan, substance: &Dosable, up: bool) {
    let words = ground.words();
    if substance.strong {
        let text = if up {
            &words.strong_base_people
        } else {
            &words.acid_people
        };
        plan.cautions.push(text.clone());
    }
    if !up {
        plan.cautions.push(words.acid_rebound.clone());
    }
    if substance.id == "CaCO3" {
        plan.cautions.push(words.lime_slow.clone());
    }
    plan.cautions.push(if up {
        words.base_besides.clone()
    } else {
        words.acid_cause.clone()
    });
    limit_cautions(ground, plan);
}
