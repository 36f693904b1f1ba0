//! Chloride against nitrite: enough of it keeps nitrite out at the gills.

use super::base::{first_dose, levels, named, shares, wait_seconds, weighed};
use super::check::{self, Measure, Rule, Track};
use super::clock;
use super::ground::Ground;
use super::made::{
    Outcome, amount_words, broken, days_from, limit_cautions, mark_the_pace, refusal, trial,
};
use super::value::{Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::fill;
use crate::course::projection::Part;
use crate::knowledge::{Dosable, LimitLevel, Side, Use};

/// Doses within a day.
const DOSES_A_DAY: usize = 4;
/// Lengths of plan that are tried, in days.
const LENGTHS: [usize; 5] = [1, 2, 3, 5, 8];

/// Plans chloride.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let mut plan = Plan::new(Kind::Chloride);
    let needed: &[&str] = if wish.to.is_some() {
        &["chloride"]
    } else {
        &["nitrite", "chloride"]
    };
    let refused = ground.trust(needed)?;
    let nitrite = ground.readings.value("nitrite");
    let have = ground.readings.value("chloride").unwrap_or(0.0);
    plan.from = vec![("chloride".to_owned(), have)];
    plan.from.extend(nitrite.map(|n| ("nitrite".to_owned(), n)));
    let want = wish.to.unwrap_or(ratio(ground) * nitrite.unwrap_or(0.0));
    if !(0.0..=2000.0).contains(&want) {
        return Err(Trouble::Usage(fill(
            &ground.words().aim_out_of_range,
            &[
                ("value", want.to_string()),
                ("low", "0".into()),
                ("high", "2000".into()),
            ],
        )));
    }
    plan.to = vec![("chloride".to_owned(), want)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if want <= have {
        plan.notes.push(fill(
            &ground.words().chloride_enough,
            &[
                ("have", ground.shown("chloride", have)),
                ("want", ground.shown("chloride", want)),
            ],
        ));
        return Ok(plan);
    }
    let mut last = None;
    for substance in choices(ground, wish)? {
        match paced(ground, wish, plan.clone(), substance, want - have) {
            Ok(plan) => return Ok(plan),
            Err(refused) => last = last.or(Some(refused)),
        }
    }
    let limit = &ground.pace().longest_plan;
    Ok(plan.refuse(last.unwrap_or_else(|| Refused {
        limit: limit.id.clone(),
        reason: ground.words().too_long.clone(),
        instead: limit.instead.clone(),
    })))
}

/// Chloride for each nitrite-N: the species' own, or the most that any asks for when none is known.
fn ratio(ground: &Ground<'_>) -> f64 {
    let id = "chloride-to-nitrite";
    ground
        .species(id, LimitLevel::Stress, Side::Low)
        .or_else(|| {
            let reading = ground.knowledge.vocabulary.reading(id)?;
            let all = ground.knowledge.species.iter();
            all.filter_map(|s| s.limit(reading, LimitLevel::Stress, Side::Low))
                .reduce(f64::max)
        })
        .unwrap_or(66.0)
}

/// Salts to try: the one asked for; else those on the shelf, then the others, plants' friends before sodium.
fn choices<'g>(ground: &'g Ground<'_>, wish: &Wish) -> Result<Vec<&'g Dosable>, Trouble> {
    if let Some(name) = &wish.substance {
        let found = named(ground, name)?;
        if found.used_as != Use::Salt {
            let words = ground.words();
            return Err(Trouble::Usage(fill(
                &words.wrong_substance,
                &[
                    ("substance", found.name.clone()),
                    ("wanted", words.a_salt.clone()),
                ],
            )));
        }
        return Ok(vec![found]);
    }
    let shelf = ground.site.equipment.substances.as_deref().unwrap_or(&[]);
    let on_shelf = |s: &Dosable| shelf.iter().any(|n| s.is_called(n));
    let mut all: Vec<&Dosable> = ground
        .knowledge
        .pacing
        .substances
        .iter()
        .filter(|s| s.used_as == Use::Salt)
        .collect();
    let plants = ground.has_plants();
    // Calcium first where plants grow, plain salt where none do; what is on the shelf before what must be bought.
    let order = |s: &Dosable| match (s.gives("sodium") > 0.0, s.gives("calcium") > 0.0) {
        (true, _) => {
            if plants {
                3
            } else {
                0
            }
        }
        (_, true) => 1,
        _ => 2,
    };
    all.sort_by_key(|s| (!on_shelf(s), order(s)));
    Ok(all)
}

fn paced(
    ground: &Ground<'_>,
    wish: &Wish,
    mut plan: Plan,
    substance: &Dosable,
    rise: f64,
) -> Result<Plan, Refused> {
    let volume = ground.begin.farm.volume_l;
    let pure = rise * volume / (1000.0 * substance.gives("chloride"));
    let rules = rules(ground, substance);
    let mut last = None;
    for days in LENGTHS {
        let slots = clock::slots(
            ground.site,
            ground.now(),
            days,
            DOSES_A_DAY,
            wait_seconds(ground),
        );
        #[allow(clippy::cast_precision_loss)] // a few days
        let per_day = pure / days as f64;
        let doses: Vec<(i64, f64)> = slots
            .iter()
            .flatten()
            .copied()
            .zip(
                shares(ground, &slots)
                    .into_iter()
                    .flatten()
                    .map(|s| s * per_day),
            )
            .collect();
        let most = ground.pace().first_dose.value;
        let amounts = weighed(
            substance,
            wish.purity,
            &doses,
            slots.first().map_or(0, Vec::len),
            most,
        );
        let mut steps: Vec<Step> = doses
            .iter()
            .zip(amounts)
            .filter(|(_, a)| a.grams > 0.0)
            .map(|((at, _), amount)| Step {
                at: *at,
                amounts: vec![amount],
                ..Step::default()
            })
            .collect();
        let salinity = salinity_rise(&steps, volume);
        let limit = &ground.pace().salinity_rise_per_day;
        if salinity > limit.value {
            last = Some(broken(ground, limit, limit.value, salinity, None));
            continue;
        }
        let end = steps.last().map_or(1.0, |s| days_from(ground, s.at)) + 1.0;
        let tried = match trial(ground, Kind::Chloride, &steps, &rules, end) {
            Some(Outcome::Keeps(tried)) => tried,
            Some(Outcome::Breaks(rule, fared)) => {
                return Err(refusal(ground, rule, fared));
            }
            None => continue,
        };
        plan.limits = tried.kept(&rules);
        plan.limits.push(check::kept(limit, limit.value, salinity));
        plan.limits.push(first_dose(ground, &steps));
        if let Some(refused) = levels(ground, &mut plan, substance, &steps) {
            return Err(refused);
        }
        mark_the_pace(&mut plan.limits);
        tell(ground, &mut steps, &tried, &plan);
        plan.steps = steps;
        plan.add_up();
        cautions(ground, &mut plan);
        return Ok(plan);
    }
    Err(last.unwrap_or_else(|| Refused {
        limit: ground.pace().longest_plan.id.clone(),
        reason: ground.words().too_long.clone(),
        instead: ground.pace().longest_plan.instead.clone(),
    }))
}

fn rules<'k>(ground: &Ground<'k>, substance: &Dosable) -> Vec<Rule<'k>> {
    let pace = ground.pace();
    let rule = |limit: &'k crate::knowledge::PaceLimit, part| Rule {
        limit,
        bound: limit.value,
        track: Track::Part(part),
        measure: Measure::Most(0.0),
        unless_anyway: false,
    };
    let mut rules = Vec::new();
    if ground.has_plants() {
        rules.push(rule(&pace.chloride_with_plants, Part::Chloride));
        if substance.gives("sodium") > 0.0 {
            rules.push(rule(&pace.sodium_with_plants, Part::Sodium));
        }
    }
    rules
}

/// The most salt that comes in within 24 hours, g/L.
pub(super) fn salinity_rise(steps: &[Step], volume_l: f64) -> f64 {
    let grams = |s: &Step| s.amounts.iter().map(|a| a.pure).sum::<f64>();
    steps
        .iter()
        .map(|first| {
            let day = steps
                .iter()
                .filter(|s| s.at >= first.at && s.at <= first.at + 86_400);
            day.map(grams).sum::<f64>() / volume_l
        })
        .fold(0.0, f64::max)
}

fn tell(ground: &Ground<'_>, steps: &mut [Step], tried: &super::made::Tried, plan: &Plan) {
    let words = ground.words();
    let want = plan.to.first().map_or(0.0, |t| t.1);
    for step in steps.iter_mut() {
        let Some(amount) = step.amounts.first() else {
            continue;
        };
        step.text = fill(&words.do_salt, &[("amount", amount_words(ground, amount))]);
        let t = days_from(ground, step.at) + 1.0 / 24.0;
        step.expect
            .extend(tried.expect("chloride", Track::Part(Part::Chloride), t));
        if let Some(e) = step.expect.first() {
            step.go_on_if.push(fill(
                &words.go_on_chloride,
                &[
                    ("low", ground.shown(&e.id, e.low)),
                    ("high", ground.shown(&e.id, e.high)),
                ],
            ));
        }
        step.stop_if.push(fill(
            &words.stop_chloride,
            &[("want", ground.shown("chloride", want))],
        ));
    }
}

fn cautions(ground: &Ground<'_>, plan: &mut Plan) {
    let words = ground.words();
    for text in [
        &words.chloride_cause,
        &words.chloride_unit,
        &words.chloride_stays,
        &words.chloride_species,
    ] {
        plan.cautions.push(text.clone());
    }
    if ground.has_plants() && ground.readings.value("sodium").is_none() {
        let name = ground.name("sodium");
        plan.notes
            .push(fill(&words.unmeasured, &[("reading", name)]));
    }
    limit_cautions(ground, plan);
}
