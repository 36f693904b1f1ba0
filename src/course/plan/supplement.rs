//! Iron, potassium, calcium and magnesium for plants.

use super::base::{first_dose, named, shares, wait_seconds, weighed};
use super::check;
use super::clock;
use super::ground::Ground;
use super::made::{amount_words, broken, limit_cautions, mark_the_pace};
use super::value::{Expect, Kind, Plan, Refused, Step, Trouble, Wish};
use super::words::{fill, short};
use crate::knowledge::{Dosable, PaceLimit, Side, Use};

/// Doses within a day.
const DOSES_A_DAY: usize = 4;

/// Plans a supplement.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let pace = ground.pace();
    let id = wish.reading.as_deref().unwrap_or("");
    let (level, rise): (&PaceLimit, &PaceLimit) = match id {
        "iron" => (&pace.iron, &pace.iron_per_dose),
        "potassium" => (&pace.potassium, &pace.nutrient_rise_per_day),
        "calcium" => (&pace.calcium, &pace.nutrient_rise_per_day),
        "magnesium" => (&pace.magnesium, &pace.nutrient_rise_per_day),
        _ => return Err(Trouble::Usage(words.supplement_which.clone())),
    };
    let mut plan = Plan::new(Kind::Supplement);
    let refused = ground.trust(if id == "iron" {
        &["iron", "ph"]
    } else {
        std::slice::from_ref(&id)
    })?;
    let have = ground.readings.value(id).unwrap_or(0.0);
    let want = wish
        .to
        .or_else(|| ground.target(id, Side::Low))
        .ok_or_else(|| Trouble::Lacks(vec!["--to".to_owned()]))?;
    plan.from = vec![(id.to_owned(), have)];
    plan.to = vec![(id.to_owned(), want)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if want <= have {
        plan.notes.push(words.already.clone());
        return Ok(plan);
    }
    if want > level.value {
        return Ok(plan.refuse(broken(ground, level, level.value, want, None)));
    }
    let substance = choose(ground, wish, id)?;
    if let Some(refused) = chelate(ground, substance) {
        return Ok(plan.refuse(refused));
    }
    Ok(paced(
        ground,
        wish,
        plan,
        &Aim {
            id,
            have,
            want,
            level,
            rise,
        },
        substance,
    ))
}

struct Aim<'a> {
    id: &'a str,
    have: f64,
    want: f64,
    level: &'a PaceLimit,
    rise: &'a PaceLimit,
}

/// The substance that is asked for; else for iron the chelate that just holds at this pH, for others the one that brings
/// nothing unwanted.
fn choose<'g>(ground: &'g Ground<'_>, wish: &Wish, id: &str) -> Result<&'g Dosable, Trouble> {
    let words = ground.words();
    let fits = |s: &&Dosable| {
        s.gives(id) > 0.0 && matches!(s.used_as, Use::Iron | Use::Nutrient | Use::Salt)
    };
    if let Some(name) = &wish.substance {
        let found = named(ground, name)?;
        return if fits(&found) {
            Ok(found)
        } else {
            Err(Trouble::Usage(fill(
                &words.wrong_substance,
                &[
                    ("substance", found.name.clone()),
                    ("wanted", words.a_supplement.clone()),
                ],
            )))
        };
    }
    let mut all: Vec<&Dosable> = ground
        .knowledge
        .pacing
        .substances
        .iter()
        .filter(fits)
        .collect();
    let holds = |s: &Dosable| s.good_to_ph.is_none_or(|ph| ground.begin.ph <= ph);
    let shelf = ground.site.equipment.substances.as_deref().unwrap_or(&[]);
    all.sort_by_key(|s| {
        let salt = s.used_as == Use::Salt;
        (!holds(s), !shelf.iter().any(|n| s.is_called(n)), salt)
    });
    all.first()
        .copied()
        .ok_or_else(|| Trouble::Lacks(vec!["--substance".to_owned()]))
}

/// A chelate that does not hold iron at this pH.
fn chelate(ground: &Ground<'_>, substance: &Dosable) -> Option<Refused> {
    let words = ground.words();
    let ph = ground.begin.ph;
    substance.good_to_ph.filter(|top| ph > *top)?;
    Some(Refused {
        limit: "chelate-ph".to_owned(),
        reason: fill(&words.supplement_ph, &[("now", format!("{ph:.1}"))]),
        instead: words.supplement_ph_instead.clone(),
    })
}

fn paced(
    ground: &Ground<'_>,
    wish: &Wish,
    mut plan: Plan,
    aim: &Aim<'_>,
    substance: &Dosable,
) -> Plan {
    let words = ground.words();
    let volume = ground.begin.farm.volume_l;
    let gives = 1000.0 * substance.gives(aim.id) / volume;
    let pure = (aim.want - aim.have) / gives;
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // days, above zero
    let days = ((aim.want - aim.have) / aim.rise.value).ceil().max(1.0) as usize;
    let longest = &ground.pace().longest_plan;
    #[allow(clippy::cast_precision_loss)] // days
    if days as f64 > longest.value {
        return plan.refuse(broken(ground, longest, longest.value, days as f64, None));
    }
    let slots = clock::slots(
        ground.site,
        ground.now(),
        days,
        DOSES_A_DAY,
        wait_seconds(ground),
    );
    #[allow(clippy::cast_precision_loss)] // days
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
    let mut level = aim.have;
    for ((at, _), amount) in doses.iter().zip(amounts).filter(|(_, a)| a.grams > 0.0) {
        level += gives * amount.pure;
        let off = ground.readings.resolution(aim.id, level);
        let expect = Expect {
            id: aim.id.to_owned(),
            low: (level - off).max(0.0),
            high: level + off,
        };
        plan.steps.push(Step {
            at: *at,
            text: fill(
                &words.do_supplement,
                &[("amount", amount_words(ground, &amount))],
            ),
            go_on_if: vec![fill(
                &words.go_on_supplement,
                &[
                    ("reading", ground.name(aim.id)),
                    ("low", ground.shown(aim.id, expect.low)),
                    ("high", ground.shown(aim.id, expect.high)),
                ],
            )],
            stop_if: vec![words.stop_supplement.clone()],
            expect: vec![expect],
            amounts: vec![amount],
            ..Step::default()
        });
    }
    let within = |first: &Step| {
        let day = plan
            .steps
            .iter()
            .filter(|s| s.at >= first.at && s.at < first.at + 86_400);
        day.flat_map(|s| &s.amounts)
            .map(|a| gives * a.pure)
            .sum::<f64>()
    };
    let fastest = plan.steps.iter().map(within).fold(0.0, f64::max);
    plan.limits
        .push(check::kept(aim.rise, aim.rise.value, fastest));
    plan.limits
        .push(check::kept(aim.level, aim.level.value, level));
    plan.limits.push(first_dose(ground, &plan.steps));
    mark_the_pace(&mut plan.limits);
    plan.add_up();
    if let Some(ph) = substance.good_to_ph {
        plan.notes.push(fill(
            &words.supplement_chelate,
            &[("substance", substance.name.clone()), ("ph", short(ph))],
        ));
        plan.cautions.push(words.iron_color.clone());
    }
    plan.cautions.push(words.supplement_new_leaves.clone());
    limit_cautions(ground, &mut plan);
    plan
}
