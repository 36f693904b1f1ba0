//! Single states that anybody would check first.

use gillside::assessment::Assessor;
use gillside::diagnosis::Occasion;
use gillside::engine::Engine;
use gillside::history::log::{Row, Value};
use gillside::knowledge::{Knowledge, When};
use gillside::site::Site;

use super::{Page, rule_base};

const NOW: i64 = 1_700_000_000;

/// What somebody tells, and nothing else known.
fn told<T>(
    knowledge: &Knowledge,
    readings: &[(&str, f64)],
    signs: &[(&str, bool)],
    events: &[(&str, i64)],
    look: impl Fn(&Page<'_>) -> T,
) -> T {
    let words = &knowledge.vocabulary;
    let site = Site::default();
    let row = Row {
        time: NOW,
        values: readings
            .iter()
            .map(|(id, amount)| {
                let value = Value {
                    amount: *amount,
                    below: false,
                };
                (words.reading(id).unwrap(), value)
            })
            .collect(),
        signs: signs
            .iter()
            .map(|(id, seen)| (words.sign(id).unwrap(), *seen))
            .collect(),
        ..Row::default()
    };
    let mut engine = Engine::new(knowledge, &site);
    engine.observe(&row);
    engine.tell(|memory| {
        for (id, ago) in events {
            memory.happened(words.event(id).unwrap(), NOW - ago);
        }
    });
    let assessor = Assessor::new(knowledge, &site, Occasion::Walk);
    look(&Page::of(&assessor, &engine))
}

#[test]
fn gasping_with_nothing_known_gets_people_air_feed_and_a_look_at_the_pumps() {
    let knowledge = rule_base();
    for sign in ["fish-gasping", "fish-dying-fast"] {
        told(&knowledge, &[], &[(sign, true)], &[], |page| {
            let aid = page.aid();
            assert_eq!(aid.first(), Some(&"people-first"), "{sign}");
            let at = |id: &str| {
                aid.iter()
                    .position(|a| *a == id)
                    .unwrap_or_else(|| panic!("{sign}: no {id} in {aid:?}"))
            };
            assert!(
                at("air-on-full") <= 2 && at("feed-off") <= 4,
                "{sign}: {aid:?}"
            );
            assert!(aid.len() <= 5);
        });
    }
    told(&knowledge, &[], &[("fish-gasping", true)], &[], |page| {
        assert_eq!(page.aid().get(1), Some(&"air-on-full"));
        assert!(page.aid().contains(&"flow-check"), "{:?}", page.aid());
    });
}

#[test]
fn what_flows_in_is_stopped_before_anything_but_people() {
    let knowledge = rule_base();
    let dying = ("fish-dying-fast", true);
    let good = [
        ("dissolved-oxygen", 7.5),
        ("total-ammonia", 0.1),
        ("nitrite", 0.02),
    ];
    told(
        &knowledge,
        &good,
        &[dying, ("fish-darting", true), ("small-animals-dying", true)],
        &[("pesticide-sprayed", 7200)],
        |page| {
            assert_eq!(
                page.aid().get(1),
                Some(&"stop-inflow-suspect"),
                "{:?}",
                page.aid()
            );
        },
    );
    told(
        &knowledge,
        &good,
        &[
            ("fish-gasping", true),
            ("pale-gills", true),
            ("chlorine-smell", true),
        ],
        &[("undechlorinated-top-up", 3600)],
        |page| {
            assert_eq!(
                page.aid().get(1),
                Some(&"stop-inflow-suspect"),
                "{:?}",
                page.aid()
            );
            assert!(
                page.avoid().contains(&"same-water-again"),
                "{:?}",
                page.avoid()
            );
        },
    );
    told(
        &knowledge,
        &good,
        &[
            dying,
            ("rotten-egg-smell", true),
            ("stirred-sediment", true),
        ],
        &[("sediment-stirred", 1800)],
        |page| {
            assert_eq!(
                page.aid().get(1),
                Some(&"isolate-anoxic-source"),
                "{:?}",
                page.aid()
            );
            assert!(page.avoid().contains(&"enter-pit"), "{:?}", page.avoid());
        },
    );
}

#[test]
fn surplus_gas_gets_splash_and_no_deep_air() {
    let knowledge = rule_base();
    let readings = [
        ("dissolved-oxygen", 11.5),
        ("temperature", 18.0),
        ("total-gas-pressure", 118.0),
    ];
    let signs = [
        ("fish-gasping", true),
        ("bubbles-in-fins", true),
        ("fine-bubbles-in-water", true),
        ("pump-sucking-air", true),
    ];
    told(&knowledge, &readings, &signs, &[], |page| {
        assert!(
            page.aid().contains(&"splash-at-surface"),
            "{:?}",
            page.aid()
        );
        for id in ["air-on-full", "backup-oxygen"] {
            assert!(!page.all_steps().contains(&id), "{:?}", page.all_steps());
        }
    });
}

#[test]
fn brown_gills_get_air_and_chloride_before_anything_but_people() {
    let knowledge = rule_base();
    let readings = [
        ("dissolved-oxygen", 7.0),
        ("nitrite", 1.5),
        ("chloride", 12.0),
    ];
    told(
        &knowledge,
        &readings,
        &[("fish-gasping", true), ("brown-gills", true)],
        &[],
        |page| {
            assert_eq!(
                page.aid().get(..3),
                Some(&["people-first", "air-on-full", "chloride-dose"][..])
            );
        },
    );
}

#[test]
fn suspicion_of_a_reportable_disease_holds_everything_first() {
    let knowledge = rule_base();
    let readings = [
        ("temperature", 22.0),
        ("ph", 7.4),
        ("dissolved-oxygen", 7.5),
        ("total-ammonia", 0.1),
        ("nitrite", 0.02),
        ("deaths", 340.0),
    ];
    let signs = [
        ("fish-dying-slow", true),
        ("skin-sores", true),
        ("bulging-eyes", true),
        ("fish-dark", true),
        ("fish-sluggish", true),
        ("fish-off-feed", true),
        ("fish-gasping", false),
        ("rotten-egg-smell", false),
        ("white-spots", false),
        ("cotton-tufts", false),
        ("fish-rubbing", false),
    ];
    told(
        &knowledge,
        &readings,
        &signs,
        &[("fish-added", 12 * 86_400)],
        |page| {
            let p = page.probability("reportable-disease-suspicion");
            assert!(p >= 0.1, "the state is none of a reportable disease: {p}");
            let hold = "hold-movements-call-authority";
            let place = if page.aid().is_empty() {
                page.steps(When::Now).first().copied()
            } else {
                page.aid().get(1).copied()
            };
            assert_eq!(place, Some(hold));
            assert!(page.avoid().contains(&"discharge-water"));
            assert!(page.cautions.contains(&"hold-the-harvest"));
        },
    );
}

#[test]
fn poison_treatment_and_unexplained_deaths_hold_the_harvest() {
    let knowledge = rule_base();
    let fine = [
        ("dissolved-oxygen", 7.5),
        ("total-ammonia", 0.1),
        ("nitrite", 0.02),
    ];
    let held = |signs: &[(&str, bool)], events: &[(&str, i64)]| {
        told(&knowledge, &fine, signs, events, |p| {
            p.cautions.contains(&"hold-the-harvest")
        })
    };
    assert!(held(
        &[("fish-dying-fast", true)],
        &[("pesticide-sprayed", 7200)]
    ));
    assert!(held(&[], &[("fish-treated", 5 * 86_400)]));
    assert!(held(&[], &[("antibiotic-given", 5 * 86_400)]));
    assert!(held(&[("fish-dying-fast", true)], &[]));
    assert!(held(&[("fish-dying-slow", true)], &[]));
    assert!(!held(
        &[("fish-dying-slow", false), ("fish-dying-fast", false)],
        &[]
    ));
}
