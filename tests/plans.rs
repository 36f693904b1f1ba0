//! Each kind of plan on an ordinary farm, refusals, doses against PHREEQC, and plans that follow each other.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::indexing_slicing,
    clippy::cast_precision_loss
)]

#[path = "plans/judge.rs"]
mod judge;
#[path = "plans/world.rs"]
mod world;

use gillside::course::plan::{Doubt, Ground, Kind, Plan, Trouble, Wish, plan, replay};
use gillside::course::projection::{Action, FINE, Farm, Gas, Manner, Part, Readings, run};
use gillside::engine::Limits;
use gillside::site::{Chlorination, Makeup, Site};
use world::{NOW, WATER, given, greenhouse, made, on, rule_base};

fn kept(plan: &Plan) {
    assert!(plan.refused.is_none(), "{:?}", plan.refused);
    assert!(!plan.steps.is_empty());
}

fn to(kind: Kind, value: f64) -> Wish {
    Wish {
        to: Some(value),
        ..Wish::new(kind)
    }
}

fn pure(plan: &Plan) -> f64 {
    plan.total.iter().map(|a| a.pure).sum()
}

#[test]
fn alkalinity_rises_by_what_the_dose_gives_and_what_the_filter_takes() {
    let k = rule_base();
    let wish = Wish {
        substance: Some("KHCO3".into()),
        ..to(Kind::Alkalinity, 60.0)
    };
    on(&k, &greenhouse(), &[], &wish, |ground, made| {
        let plan = made.unwrap();
        kept(&plan);
        assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
        // 20 mg/L in 12 m3 is 240 g of CaCO3: 480 g of KHCO3, and what the rising pH lets the filter take besides.
        assert!((465.0..560.0).contains(&pure(&plan)), "{} g", pure(&plan));
        let last = &plan.steps.last().unwrap().expect[0];
        assert!(
            last.id == "alkalinity" && last.low < 60.0 && last.high > 52.0,
            "{last:?}"
        );
    });
}

#[test]
fn ph_goes_up_slowly_and_ends_where_it_was_asked() {
    let k = rule_base();
    let still = Site {
        plant_area_m2: None,
        crops: Vec::new(),
        ..greenhouse()
    };
    let wish = Wish {
        substance: Some("NaHCO3".into()),
        ..to(Kind::Ph, 7.0)
    };
    on(
        &k,
        &still,
        &[("total-ammonia", 0.2)],
        &wish,
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            // At the same carbon dioxide alkalinity goes with 10^pH: 40 to 100 mg/L is 0.4 up. 60.5 mg/L, 1.68 g each.
            let expected = 12.0 * 60.5 * 1.679;
            assert!(
                (pure(&plan) - expected).abs() < 0.05 * expected,
                "{} g, not {expected}",
                pure(&plan)
            );
            let ph = plan
                .steps
                .last()
                .unwrap()
                .expect
                .iter()
                .find(|e| e.id == "ph")
                .unwrap()
                .clone();
            assert!((ph.high - 7.0).abs() < 0.06, "{ph:?}");
        },
    );
}

#[test]
fn raising_ph_with_ammonia_high_is_refused_with_when_and_how_much() {
    let k = rule_base();
    let water = [
        ("ph", 6.8),
        ("total-ammonia", 5.0),
        ("temperature", 28.0),
        ("alkalinity", 60.0),
    ];
    let plan = made(&k, &greenhouse(), &water, &to(Kind::Ph, 7.8));
    let refused = plan.refused.expect("refused");
    assert_eq!(refused.limit, "un-ionized-ammonia");
    assert!(
        refused.reason.contains("mg/L as N by ") && refused.instead.contains("feed"),
        "{refused:?}"
    );
    assert!(plan.steps.is_empty());
}

#[test]
fn acid_is_never_planned_unasked_nor_into_water_with_little_alkalinity() {
    let k = rule_base();
    let unasked = made(
        &k,
        &greenhouse(),
        &[("ph", 7.6), ("alkalinity", 100.0)],
        &to(Kind::Ph, 7.2),
    );
    assert_eq!(unasked.refused.unwrap().limit, "strong-substance");
    let acid = Wish {
        substance: Some("HCl".into()),
        ..to(Kind::Ph, 6.9)
    };
    let little = made(
        &k,
        &greenhouse(),
        &[("ph", 7.2), ("alkalinity", 25.0)],
        &acid,
    );
    let limit = little.refused.unwrap().limit;
    assert!(
        limit == "alkalinity-left-by-acid" || limit == "ph-fall-per-day",
        "{limit}"
    );
    let still = Site {
        feed_kg_per_day: None,
        ..greenhouse()
    };
    let acid = Wish {
        to: Some(7.3),
        ..acid
    };
    on(
        &k,
        &still,
        &[
            ("feed", 0.0),
            ("ph", 7.6),
            ("alkalinity", 150.0),
            ("total-ammonia", 0.1),
        ],
        &acid,
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            assert!(plan.total[0].milliliters.is_some() && plan.cautions[0].contains("Goggles"));
        },
    );
}

#[test]
fn chloride_is_ten_times_the_nitrite_ion_with_the_kind_salt() {
    let k = rule_base();
    let site = greenhouse();
    on(
        &k,
        &site,
        &[("nitrite", 2.0), ("calcium", 50.0)],
        &Wish::new(Kind::Chloride),
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            // 33 x 2 - 20 = 46 mg/L in 12 m3; plants grow, so calcium: 0.639 of dry CaCl2, 0.482 of the flakes.
            assert!(
                plan.total[0].substance.starts_with("CaCl2"),
                "{:?}",
                plan.total
            );
            let chloride = pure(&plan)
                * k.pacing
                    .substance(&plan.total[0].substance)
                    .unwrap()
                    .gives("chloride");
            assert!(
                (chloride - 552.0).abs() < 0.03 * 552.0,
                "{chloride} g of chloride"
            );
            assert!(plan.steps.len() >= 4);
        },
    );
    let salt = Wish {
        substance: Some("NaCl".into()),
        ..to(Kind::Chloride, 150.0)
    };
    assert_eq!(
        made(&k, &site, &[], &salt).refused.unwrap().limit,
        "sodium-with-plants"
    );
    let much = to(Kind::Chloride, 500.0);
    assert_eq!(
        made(&k, &site, &[], &much).refused.unwrap().limit,
        "chloride-with-plants"
    );
    let enough = made(&k, &site, &[("nitrite", 0.1)], &Wish::new(Kind::Chloride));
    assert!(enough.steps.is_empty() && enough.refused.is_none() && !enough.notes.is_empty());
}

#[test]
fn exchange_brings_a_reading_down_and_minds_the_new_water() {
    let k = rule_base();
    let wish = Wish {
        reading: Some("nitrate".into()),
        ..to(Kind::Exchange, 80.0)
    };
    let water = [
        ("feed", 0.0),
        ("nitrate", 160.0),
        ("alkalinity", 60.0),
        ("ph", 7.0),
        ("temperature", 23.0),
    ];
    let still = Site {
        feed_kg_per_day: None,
        plant_area_m2: None,
        ..greenhouse()
    };
    on(&k, &still, &water, &wish, |ground, made| {
        let plan = made.unwrap();
        kept(&plan);
        assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
        // Half of it out in many batches: ln 2 of the volume, 8.3 m3, a little less for what denitrifies.
        let liters: f64 = plan.steps.iter().filter_map(|s| s.liters).sum();
        assert!((7500.0..9200.0).contains(&liters), "{liters}");
    });
    let chlorinated = Site {
        makeup: Makeup {
            chlorination: Some(Chlorination::Chloramine),
            ..greenhouse().makeup
        },
        ..greenhouse()
    };
    assert_eq!(
        made(&k, &chlorinated, &water, &wish).refused.unwrap().limit,
        "residual-chlorine"
    );
    let measured = Wish {
        dechlorinated: true,
        ..wish.clone()
    };
    assert!(
        made(&k, &chlorinated, &water, &measured)
            .refused
            .is_none_or(|r| r.limit != "residual-chlorine")
    );
    let cold = Site {
        feed_kg_per_day: None,
        makeup: Makeup {
            temperature: Some(9.0),
            ..greenhouse().makeup
        },
        ..greenhouse()
    };
    let small = made(&k, &cold, &water, &wish);
    let largest = small
        .steps
        .iter()
        .filter_map(|s| s.liters)
        .fold(0.0, f64::max);
    assert!(
        largest <= 0.05 * 12_000.0,
        "{largest} L of cold water at once"
    );
}

#[test]
fn warming_keeps_its_pace_and_stops_before_ammonia() {
    let k = rule_base();
    on(
        &k,
        &greenhouse(),
        &[("temperature", 17.5)],
        &to(Kind::Temperature, 24.0),
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            let days = (plan.steps.last().unwrap().at - NOW) as f64 / 86_400.0;
            assert!(
                (1.8..3.5).contains(&days),
                "6.5 C at 3 C a day take {days} days"
            );
        },
    );
    let water = [
        ("temperature", 18.0),
        ("ph", 7.8),
        ("total-ammonia", 1.9),
        ("alkalinity", 120.0),
    ];
    let refused = made(&k, &greenhouse(), &water, &to(Kind::Temperature, 29.0))
        .refused
        .unwrap();
    assert_eq!(refused.limit, "un-ionized-ammonia");
    let outside = made(&k, &greenhouse(), &[], &to(Kind::Temperature, 37.0))
        .refused
        .unwrap();
    assert_eq!(outside.limit, "species-temperature");
    // 1 C a day: cooling is the slower.
    let cool = made(
        &k,
        &greenhouse(),
        &[("temperature", 30.0)],
        &to(Kind::Temperature, 27.0),
    );
    kept(&cool);
    assert!(cool.steps.last().unwrap().at - NOW > 2 * 86_400);
}

#[test]
fn feed_is_cut_and_comes_back_in_quarters_two_days_apart() {
    let k = rule_base();
    let water = [
        ("total-ammonia", 1.6),
        ("nitrite", 0.6),
        ("alkalinity", 60.0),
        ("ph", 7.0),
    ];
    on(
        &k,
        &greenhouse(),
        &water,
        &Wish::new(Kind::Feed),
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            assert_eq!(
                plan.steps[0].feed_kg,
                Some(0.0),
                "ammonia above 1: none now"
            );
            for pair in plan.steps.windows(2) {
                let rise = pair[1].feed_kg.unwrap() - pair[0].feed_kg.unwrap();
                assert!(rise > 0.0 && rise <= 0.25 * 4.5 + 1e-9);
            }
        },
    );
}

#[test]
fn dechlorination_is_seven_to_one_and_tells_of_the_ammonia() {
    let k = rule_base();
    let site = Site {
        makeup: Makeup {
            chlorination: Some(Chlorination::Chloramine),
            ..greenhouse().makeup
        },
        ..greenhouse()
    };
    let wish = Wish {
        liters: Some(1000.0),
        ..Wish::new(Kind::Dechlorinate)
    };
    let plan = made(&k, &site, &[("residual-chlorine", 3.0)], &wish);
    kept(&plan);
    // 3 mg/L in 1 m3 is 3 g of chlorine: 21 g of the pentahydrate, and 15 % more; a quarter of it first.
    assert!((20.9..24.2).contains(&pure(&plan)), "{} g", pure(&plan));
    assert!(plan.steps[0].amounts[0].pure <= 0.2501 * pure(&plan));
    // 0.198 mg of N for each mg: 0.6 mg/L.
    assert!(
        plan.cautions
            .iter()
            .any(|c| c.contains("0.59") || c.contains("0.6 ")),
        "{:?}",
        plan.cautions
    );
    let vitamin = Wish {
        substance: Some("ascorbic-acid".into()),
        ..wish
    };
    let plan = made(&k, &site, &[("residual-chlorine", 3.0)], &vitamin);
    assert!(
        (7.3..8.6).contains(&pure(&plan)),
        "2.48 to 1: {} g",
        pure(&plan)
    );
}

#[test]
fn oxygen_says_first_what_saves_and_then_the_budget() {
    let k = rule_base();
    let site = Site {
        equipment: gillside::site::Equipment {
            pure_oxygen: Some(true),
            ..Default::default()
        },
        ..greenhouse()
    };
    let plan = made(
        &k,
        &site,
        &[("dissolved-oxygen", 2.8)],
        &Wish::new(Kind::Oxygen),
    );
    kept(&plan);
    assert_eq!(plan.steps[0].at, NOW, "now, whoever is on shift");
    assert_eq!(plan.steps[0].feed_kg, Some(0.0));
    assert!(
        plan.notes.iter().any(|n| n.starts_with("Demand"))
            && plan.notes.iter().any(|n| n.contains("minutes"))
    );
    assert!(
        plan.steps
            .iter()
            .any(|s| s.stop_if.iter().any(|t| t.contains("105")))
    );
}

#[test]
fn a_new_filter_is_fed_ammonia_until_a_dose_is_gone_in_a_day() {
    let k = rule_base();
    let empty = Site {
        feed_kg_per_day: None,
        plant_area_m2: None,
        ..greenhouse()
    };
    let water = [
        ("total-ammonia", 0.0),
        ("nitrite", 0.0),
        ("ph", 7.6),
        ("alkalinity", 150.0),
    ];
    on(
        &k,
        &empty,
        &water,
        &Wish::new(Kind::StartUp),
        |ground, made| {
            let plan = made.unwrap();
            kept(&plan);
            assert_eq!(judge::faults(ground, &plan), Vec::<String>::new());
            let days = (plan.steps.last().unwrap().at - NOW) as f64 / 86_400.0;
            assert!((18.0..56.0).contains(&days), "ready on day {days}");
            // 2 mg/L of N in 12 m3: 24 g of N, 92 g of NH4Cl.
            let first: f64 = plan
                .steps
                .iter()
                .take(2)
                .flat_map(|s| &s.amounts)
                .map(|a| a.pure)
                .sum();
            assert!((87.0..92.0).contains(&first), "{first} g");
        },
    );
    let much = made(&k, &empty, &water, &to(Kind::StartUp, 8.0));
    assert_eq!(much.refused.unwrap().limit, "cycling-dose");
}

#[test]
fn supplements_fit_the_ph_and_stay_below_their_level() {
    let k = rule_base();
    let iron = Wish {
        reading: Some("iron".into()),
        ..to(Kind::Supplement, 1.8)
    };
    let plan = made(&k, &greenhouse(), &[("iron", 0.3), ("ph", 7.0)], &iron);
    kept(&plan);
    // 1.5 mg/L in 12 m3: 18 g of iron; at pH 7 DTPA holds, EDTA does not.
    assert_eq!(plan.total[0].substance, "Fe-DTPA");
    assert!(
        (18.0 / 0.11 - pure(&plan)).abs() < 0.05 * 164.0,
        "{}",
        pure(&plan)
    );
    let edta = Wish {
        substance: Some("Fe-EDTA".into()),
        ..iron
    };
    assert_eq!(
        made(&k, &greenhouse(), &[("iron", 0.3), ("ph", 7.0)], &edta)
            .refused
            .unwrap()
            .limit,
        "chelate-ph"
    );
    let much = Wish {
        reading: Some("potassium".into()),
        ..to(Kind::Supplement, 300.0)
    };
    assert_eq!(
        made(&k, &greenhouse(), &[("potassium", 20.0)], &much)
            .refused
            .unwrap()
            .limit,
        "potassium"
    );
    let some = Wish {
        reading: Some("potassium".into()),
        ..to(Kind::Supplement, 60.0)
    };
    let plan = made(&k, &greenhouse(), &[("potassium", 20.0)], &some);
    kept(&plan);
    assert_eq!(plan.total[0].substance, "K2SO4");
}

#[test]
fn a_stale_or_doubted_reading_needs_a_second_method() {
    let k = rule_base();
    let site = greenhouse();
    let limits = Limits::new(&k, &site);
    let mut engine = gillside::engine::Engine::new(&k, &site);
    let id = |name: &str| k.vocabulary.reading(name).unwrap();
    let values = WATER
        .iter()
        .map(|(n, v)| {
            (
                id(n),
                gillside::history::log::Value {
                    amount: *v,
                    below: false,
                },
            )
        })
        .collect();
    engine.observe(&gillside::history::log::Row {
        time: NOW - 4 * 86_400,
        values,
        ..Default::default()
    });
    let wish = to(Kind::Alkalinity, 55.0);
    let old = Readings::new(&k.vocabulary, Some(engine.memory()), NOW);
    let mut ground = Ground::new(&k, &site, &limits, old).unwrap();
    assert_eq!(
        plan(&ground, &wish).unwrap().refused.unwrap().limit,
        "stale-reading"
    );
    ground.confirmed = true;
    assert!(
        plan(&ground, &wish)
            .unwrap()
            .refused
            .is_none_or(|r| r.limit != "stale-reading")
    );

    let fresh = Readings::new(&k.vocabulary, None, NOW).with(given(&[]));
    let mut ground = Ground::new(&k, &site, &limits, fresh).unwrap();
    ground.doubts = vec![Doubt {
        reading: "ph".into(),
        cause: "The pH probe has drifted".into(),
        probability: 0.12,
    }];
    let refused = plan(&ground, &wish).unwrap().refused.unwrap();
    assert_eq!(refused.limit, "instrument-doubt");
    assert!(refused.reason.contains("The pH probe has drifted"));
    ground.doubts[0].probability = 0.09;
    assert!(
        plan(&ground, &wish)
            .unwrap()
            .refused
            .is_none_or(|r| r.limit != "instrument-doubt")
    );
}

#[test]
fn what_is_missing_is_named() {
    let k = rule_base();
    let site = greenhouse();
    let limits = Limits::new(&k, &site);
    let ground = Ground::new(&k, &site, &limits, Readings::new(&k.vocabulary, None, NOW)).unwrap();
    let lacks = plan(&ground, &to(Kind::Ph, 7.0)).unwrap_err();
    assert!(
        matches!(&lacks, Trouble::Lacks(ids) if ids.len() == 4),
        "{lacks:?}"
    );
    let nothing = Site::default();
    let limits = Limits::new(&k, &nothing);
    let none = Ground::new(
        &k,
        &nothing,
        &limits,
        Readings::new(&k.vocabulary, None, NOW),
    )
    .map(|_| ());
    assert_eq!(none, Err(Trouble::Lacks(vec!["volume_l".into()])));
    on(
        &k,
        &site,
        &[],
        &Wish {
            substance: Some("KHC03".into()),
            ..to(Kind::Ph, 7.0)
        },
        |_, made| {
            let text = made.unwrap_err().to_string();
            assert!(text.contains("did you mean `KHCO3`"), "{text}");
        },
    );
}

#[test]
fn substances_are_those_of_the_water_room() {
    use gillside::water::{carbonate::substance::substance, chlorine, nitrite};
    let k = rule_base();
    for s in &k.pacing.substances {
        if let Some(known) = substance(&s.id) {
            let alkalinity = known.equivalents.signum() / known.grams_per_caco3();
            assert!(
                (s.gives("alkalinity") - alkalinity).abs() < 2e-4,
                "{}",
                s.id
            );
            assert!(
                (s.gives("carbon") - 1000.0 * known.carbon / known.molar_mass).abs() < 2e-3,
                "{}",
                s.id
            );
        }
        if let Some(salt) = nitrite::salt_named(&s.id) {
            assert!(
                (s.gives("chloride") - salt.chloride()).abs() < 1e-4,
                "{}",
                s.id
            );
            let cation = salt.chloride() * salt.cation_per_chloride();
            assert!((s.gives(salt.cation) - cation).abs() < 1e-4, "{}", s.id);
        }
    }
    let per = |id: &str| k.pacing.substance(id).unwrap().per_chlorine.unwrap();
    let theirs = chlorine::thiosulfate(
        chlorine::Thiosulfate::Pentahydrate,
        chlorine::Product::Tetrathionate,
    );
    assert!((per("Na2S2O3*5H2O") - theirs).abs() < 0.01);
    assert!((per("ascorbic-acid") - chlorine::ascorbate(chlorine::Ascorbate::Acid)).abs() < 0.01);
}

/// Doses against PHREEQC: the same amounts in the same water, closed and at the carbon dioxide it had. The pH it gives
/// must lie between those of doses five percent smaller and larger.
#[test]
fn doses_are_within_five_percent_of_phreeqc() {
    let k = rule_base();
    let still = Site {
        volume_l: Some(1000.0),
        ..Site::default()
    };
    let text = include_str!("plans/phreeqc-doses.csv");
    let mut rows = 0;
    for row in text.lines().skip(1) {
        let cells: Vec<&str> = row.split(',').collect();
        let number = |i: usize| cells[i].parse::<f64>().unwrap();
        let water = [
            ("temperature", number(0)),
            ("ph", number(1)),
            ("alkalinity", number(2)),
            ("total-ammonia", 0.0),
            ("nitrite", 0.0),
            ("nitrate", 0.0),
            ("chloride", 0.0),
        ];
        let limits = Limits::new(&k, &still);
        let readings =
            Readings::new(&k.vocabulary, None, NOW).with(water.map(|(i, v)| (i.to_owned(), v)));
        let ground = Ground::new(&k, &still, &limits, readings).unwrap();
        let substance = k.pacing.substance(cells[3]).unwrap();
        let ph = |share: f64, gas: Gas| {
            let deeds = replay::deeds(substance, share * number(4), 1000.0);
            let actions: Vec<Action> = deeds
                .into_iter()
                .map(|deed| Action { at: 0.0, deed })
                .collect();
            let manner = Manner {
                gas,
                exact: FINE,
                feed: 1.0,
            };
            let points = run(
                &ground.begin.farm,
                &ground.begin.state,
                &actions,
                0.5,
                &manner,
            )
            .unwrap();
            if gas == Gas::Closed {
                points[1].ph
            } else {
                points.last().unwrap().ph
            }
        };
        for (gas, theirs) in [(Gas::Closed, number(5)), (Gas::Open, number(6))] {
            let (less, more) = (ph(0.95, gas), ph(1.05, gas));
            // Their print has four digits, and their solution's own start is off by as much.
            let (low, high) = (less.min(more) - 0.0005, less.max(more) + 0.0005);
            assert!(
                (low..=high).contains(&theirs),
                "{row}: {theirs} not in {low}..{high} ({gas:?})"
            );
        }
        rows += 1;
    }
    assert_eq!(rows, 30);
}

/// A cold snap, the nitrite that follows it, and the three plans that follow that: chloride, feed, temperature. Put
/// together they are one course of the water, and it keeps every limit that any of them names.
#[test]
fn plans_that_follow_each_other_do_not_contradict_each_other() {
    let k = rule_base();
    let site = greenhouse();
    let limits = Limits::new(&k, &site);
    let water = [
        ("temperature", 17.0),
        ("ph", 6.9),
        ("alkalinity", 44.0),
        ("total-ammonia", 0.6),
        ("nitrite", 1.2),
        ("calcium", 60.0),
        ("dissolved-oxygen", 7.9),
    ];
    let readings = Readings::new(&k.vocabulary, None, NOW).with(given(&water));
    let ground = Ground::new(&k, &site, &limits, readings).unwrap();
    let plans: Vec<Plan> = [
        Wish::new(Kind::Chloride),
        Wish::new(Kind::Feed),
        to(Kind::Temperature, 23.0),
    ]
    .iter()
    .map(|wish| plan(&ground, wish).unwrap())
    .collect();
    plans.iter().for_each(kept);
    let mut steps: Vec<_> = plans.iter().flat_map(|p| p.steps.clone()).collect();
    steps.sort_by_key(|s| s.at);
    let mut limits_kept = plans[0].limits.clone();
    limits_kept.extend(plans[1].limits.clone());
    limits_kept.extend(plans[2].limits.clone());
    let chain = Plan {
        steps,
        limits: limits_kept,
        ..Plan::new(Kind::Feed)
    };
    // The first rise of feed is the feed plan's second step.
    let rise = plans[1]
        .steps
        .get(1)
        .map_or(14.0, |s| (s.at - NOW) as f64 / 86_400.0);
    let faults = judge::chained(&ground, &chain, rise);
    assert_eq!(faults, Vec::<String>::new());
    // Chloride protects from its last dose on: 33 times nitrite as N, in the likeliest course of all three together.
    let farm: Farm<'_> = replay::farm(&ground, Kind::Feed, &ground.begin.state);
    let actions = replay::actions(&ground, &chain.steps);
    let manner = Manner {
        gas: Gas::Usual,
        exact: FINE,
        feed: ground.begin.feed,
    };
    let points = run(&farm, &ground.begin.state, &actions, 6.0, &manner).unwrap();
    let dosed = plans[0].steps.last().unwrap();
    let from = (dosed.at - NOW) as f64 / 86_400.0 + 0.01;
    for p in points.iter().filter(|p| p.t >= from) {
        let (chloride, nitrite) = (Part::Chloride.of(&p.y), Part::Nitrite.of(&p.y));
        assert!(
            chloride >= 0.97 * 33.0 * nitrite.min(1.2),
            "day {}: {chloride} for {nitrite}",
            p.t
        );
    }
}

#[test]
fn a_plan_takes_little_time() {
    let k = rule_base();
    for (kind, value) in [
        (Kind::Alkalinity, 100.0),
        (Kind::Ph, 7.2),
        (Kind::Feed, 4.5),
        (Kind::Temperature, 28.0),
    ] {
        let started = std::time::Instant::now();
        let plan = made(&k, &greenhouse(), &[], &to(kind, value));
        let took = started.elapsed();
        println!(
            "{}: {took:?}, {} steps, {:?}",
            kind.word(),
            plan.steps.len(),
            plan.refused.map(|r| r.limit)
        );
        // 50 ms in release; this build is not.
        assert!(took.as_millis() < 3000, "{}: {took:?}", kind.word());
    }
}
