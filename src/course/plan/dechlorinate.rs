//! Taking chlorine or chloramine out of water, with the ammonia that chloramine leaves.

use super::base::named;
use super::check;
use super::clock;
use super::ground::Ground;
use super::made::{amount, amount_words, limit_cautions};
use super::value::{Expect, Kind, Plan, Step, Trouble, Wish};
use super::words::{fill, liters, short};
use crate::knowledge::{Dosable, Use};
use crate::site::Chlorination;
use crate::water::chlorine;

/// Minutes until the first quarter's answer is read.
const MINUTES: i64 = 10;

/// Plans taking chlorine out. The aim is always none; `liters` is the water treated, the whole water where not said.
///
/// # Errors
/// [`Trouble`].
pub fn plan(ground: &Ground<'_>, wish: &Wish) -> Result<Plan, Trouble> {
    let words = ground.words();
    let mut plan = Plan::new(Kind::Dechlorinate);
    let refused = ground.trust(&["residual-chlorine"])?;
    let residual = ground.readings.value("residual-chlorine").unwrap_or(0.0);
    plan.from = vec![("residual-chlorine".to_owned(), residual)];
    plan.to = vec![("residual-chlorine".to_owned(), 0.0)];
    if let Some(refused) = refused {
        return Ok(plan.refuse(refused));
    }
    if residual <= 0.0 {
        plan.notes.push(words.dechlorinate_none.clone());
        return Ok(plan);
    }
    let volume = wish.liters.unwrap_or(ground.begin.farm.volume_l);
    if !(volume > 0.0 && volume.is_finite()) {
        return Err(Trouble::Lacks(vec!["--liters".to_owned()]));
    }
    let substance = choose(ground, wish)?;
    let margin = &ground.pace().dechlorinator_margin;
    let per = substance.per_chlorine.unwrap_or(0.0);
    let grams = chlorine::dose(residual, volume, per * margin.value)
        .map_err(|e| Trouble::Usage(e.to_string()))?;
    let quarter = &ground.pace().first_dose;
    let rest = amount(substance, grams * (1.0 - quarter.value), wish.purity);
    let share = quarter.value / (1.0 - quarter.value);
    let first = amount(
        substance,
        (grams * quarter.value).min(rest.pure * share),
        wish.purity,
    );
    let at = clock::next(ground.site, ground.now());
    let left = residual * (1.0 - first.pure / (volume * per / 1000.0) / residual).max(0.0);
    let expect = |low: f64, high: f64| Expect {
        id: "residual-chlorine".to_owned(),
        low,
        high,
    };
    let near = expect(0.9 * left, 1.15 * left);
    let place = liters(ground.site.units, volume);
    plan.steps = vec![
        Step {
            at,
            text: fill(
                &words.do_dechlorinate_first,
                &[("amount", amount_words(ground, &first)), ("liters", place)],
            ),
            amounts: vec![first.clone()],
            go_on_if: vec![fill(
                &words.go_on_dechlorinate,
                &[("low", short(near.low)), ("high", short(near.high))],
            )],
            expect: vec![near],
            stop_if: vec![words.stop_dechlorinate.clone()],
            ..Step::default()
        },
        Step {
            at: at + 60 * MINUTES,
            text: fill(
                &words.do_dechlorinate_rest,
                &[("amount", amount_words(ground, &rest))],
            ),
            amounts: vec![rest.clone()],
            expect: vec![expect(0.0, 0.0)],
            go_on_if: vec![words.go_on_dechlorinated.clone()],
            stop_if: vec![words.stop_dechlorinate.clone()],
            ..Step::default()
        },
    ];
    let given = (first.pure + rest.pure) / (volume * per * residual / 1000.0);
    plan.limits.push(check::kept(margin, margin.value, given));
    plan.limits.push(check::kept(
        quarter,
        quarter.value,
        first.pure / (first.pure + rest.pure),
    ));
    plan.add_up();
    cautions(ground, &mut plan, substance, residual);
    Ok(plan)
}

fn choose<'g>(ground: &'g Ground<'_>, wish: &Wish) -> Result<&'g Dosable, Trouble> {
    let words = ground.words();
    let all = || {
        ground
            .knowledge
            .pacing
            .substances
            .iter()
            .filter(|s| s.used_as == Use::Reducer)
    };
    if let Some(name) = &wish.substance {
        let found = named(ground, name)?;
        return if found.used_as == Use::Reducer {
            Ok(found)
        } else {
            Err(Trouble::Usage(fill(
                &words.wrong_substance,
                &[
                    ("substance", found.name.clone()),
                    ("wanted", words.a_dechlorinator.clone()),
                ],
            )))
        };
    }
    let shelf = ground.site.equipment.substances.as_deref().unwrap_or(&[]);
    all()
        .find(|s| shelf.iter().any(|n| s.is_called(n)))
        .or_else(|| all().next())
        .ok_or_else(|| Trouble::Lacks(vec!["--substance".to_owned()]))
}

fn cautions(ground: &Ground<'_>, plan: &mut Plan, substance: &Dosable, residual: f64) {
    let words = ground.words();
    let kind = ground.site.makeup.chlorination;
    if matches!(kind, None | Some(Chlorination::Unknown)) {
        plan.cautions.push(words.dechlorinate_unknown.clone());
    }
    if kind != Some(Chlorination::Chlorine)
        && let Ok(ammonia) = chlorine::ammonia_left(residual)
    {
        let free = ground
            .chemistry()
            .map_or(0.0, |c| c.un_ionized(ground.begin.ph, ammonia));
        plan.cautions.push(fill(
            &words.dechlorinate_ammonia,
            &[("ammonia", short(ammonia)), ("free", short(free))],
        ));
    }
    let acid = substance.gives("alkalinity") < 0.0;
    plan.cautions.push(if acid {
        words.dechlorinate_acid.clone()
    } else {
        words.dechlorinate_oxygen.clone()
    });
    plan.cautions.push(words.dechlorinate_fish.clone());
    limit_cautions(ground, plan);
}
