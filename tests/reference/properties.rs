//! What must hold for every water, not only for those in the tables.

use gillside::water::calculations::key::Kind;
use gillside::water::calculations::{self, SiteValues};
use gillside::water::carbonate::{Sample, dose, gas, mixture, sample, substance};
use gillside::water::{ammonia, biofilter, exchange, oxygen, respiration, sulfide};
use proptest::prelude::*;

/// A water that a farm could have.
fn water() -> impl Strategy<Value = Sample> {
    (0.0..40.0, 4.5..9.5, 5.0..500.0, 0.0..0.03).prop_map(|(t, ph, alkalinity, salts)| {
        let bare = Sample::new(t, ph, alkalinity);
        bare.with_ionic_strength(bare.ionic_strength + salts)
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1000))]

    #[test]
    fn ph_to_carbon_and_back(w in water()) {
        let carbon = w.carbon().unwrap();
        let ph = sample::ph_from_carbon(w.temperature, w.alkalinity, 1000.0 * carbon, w.ionic_strength).unwrap();
        prop_assert!((ph - w.ph).abs() < 1e-9, "{ph} for {w:?}");
    }

    #[test]
    fn ph_to_carbon_dioxide_and_back(w in water()) {
        let dissolved = w.carbon_dioxide().unwrap();
        let ph = gas::ph_from_carbon_dioxide(w.temperature, w.alkalinity, dissolved, w.ionic_strength).unwrap();
        prop_assert!((ph - w.ph).abs() < 1e-9, "{ph} for {w:?}");
    }

    #[test]
    fn a_dose_to_a_target_comes_to_the_target(w in water(), up in 0.05..0.8f64) {
        // Acid water of high alkalinity would hold more carbon dioxide than any water in air does; there no dose of this
        // size gets that far, and the function says so.
        prop_assume!(w.carbon_dioxide().unwrap() < 500.0);
        let base = substance::substance("KOH").unwrap();
        let target = w.ph + up;
        let grams = dose::to_target_closed(&w, base, target).unwrap();
        let ph = dose::ph_after_closed(&w, base, grams).unwrap();
        prop_assert!((ph - target).abs() < 1e-9);
    }

    #[test]
    fn more_hydroxide_more_ph_and_more_acid_less(w in water(), dose_mg in 0.0..50.0f64, more in 0.1..50.0f64) {
        for name in ["NaOH", "KOH", "Ca(OH)2"] {
            let base = substance::substance(name).unwrap();
            let after = |d| dose::ph_after_closed(&w, base, d);
            if let (Ok(less), Ok(greater)) = (after(dose_mg), after(dose_mg + more)) {
                prop_assert!(greater > less, "{name}");
            }
        }
        let acid = substance::substance("HCl").unwrap();
        let after = |d| dose::ph_after_closed(&w, acid, d);
        if let (Ok(less), Ok(greater)) = (after(dose_mg), after(dose_mg + more)) {
            prop_assert!(greater < less);
        }
    }

    #[test]
    fn every_base_ends_at_one_ph_in_air(w in water(), meq in 0.1..1.0f64) {
        let ph = |name: &str| {
            let s = substance::substance(name).unwrap();
            let grams = meq * s.molar_mass / s.equivalents;
            dose::ph_after_open(&w, s, grams, 5000.0).unwrap()
        };
        prop_assert!((ph("KOH") - ph("KHCO3")).abs() < 1e-9);
        prop_assert!((ph("KOH") - ph("K2CO3")).abs() < 1e-9);
    }

    #[test]
    fn carbon_dioxide_falls_with_ph_and_rises_with_alkalinity(w in water(), step in 0.01..1.0f64) {
        let here = w.carbon_dioxide().unwrap();
        let harder = Sample { alkalinity: w.alkalinity * (1.0 + step), ..w }.carbon_dioxide().unwrap();
        prop_assert!(here < harder);
        // A higher pH may be one that this alkalinity can't have.
        if let Ok(higher) = (Sample { ph: w.ph + step, ..w }).carbon_dioxide() {
            prop_assert!(higher < here);
        }
    }

    #[test]
    fn mixing_keeps_alkalinity_and_carbon(a in water(), b in water(), share in 0.0..1.0f64) {
        let b = Sample { temperature: a.temperature, ..b };
        let mixed = mixture::mix(&a, &b, share).unwrap();
        let blend = |x: f64, y: f64| x * (1.0 - share) + y * share;
        prop_assert!((mixed.alkalinity - blend(a.alkalinity, b.alkalinity)).abs() < 1e-9);
        let carbon = blend(a.carbon().unwrap(), b.carbon().unwrap());
        prop_assert!((mixed.carbon().unwrap() - carbon).abs() < 1e-9 * carbon);
    }

    #[test]
    fn mixing_keeps_mass(va in 1.0..1e5f64, a in 0.0..500.0f64, vb in 0.0..1e5f64, b in 0.0..500.0f64) {
        let mixed = exchange::mixed(va, a, vb, b).unwrap();
        let mass = va * a + vb * b;
        prop_assert!((mixed * (va + vb) - mass).abs() <= 1e-9 * mass.max(1.0));
        prop_assert!(mixed >= a.min(b) - 1e-9 && mixed <= a.max(b) + 1e-9);
    }

    #[test]
    fn the_exchange_that_was_asked_for_reaches_the_target(now in 0.0..200.0f64, makeup in 0.0..200.0f64, way in 0.01..0.99f64) {
        prop_assume!((now - makeup).abs() > 1e-3);
        let target = now + way * (makeup - now);
        let share = exchange::batch_to_reach(now, makeup, target).unwrap();
        let left = exchange::left_after_batches(share, 1.0).unwrap();
        prop_assert!((makeup + left * (now - makeup) - target).abs() < 1e-8);
        let volumes = exchange::flow_to_reach(now, makeup, target).unwrap();
        let left = exchange::left_after_flow(volumes).unwrap();
        prop_assert!((makeup + left * (now - makeup) - target).abs() < 1e-8);
        // A flow through always needs more water than one batch.
        prop_assert!(volumes >= share);
    }

    #[test]
    fn ammonia_bites_harder_in_warm_alkaline_fresh_water(t in 0.0..38.0f64, ph in 4.0..9.0f64, s in 0.0..30.0f64, step in 0.01..2.0f64) {
        let here = ammonia::fraction(t, ph, s).unwrap();
        prop_assert!((0.0..=1.0).contains(&here));
        prop_assert!(ammonia::fraction(t + step, ph, s).unwrap() > here);
        prop_assert!(ammonia::fraction(t, ph + step, s).unwrap() > here);
        prop_assert!(ammonia::fraction(t, ph, s + step).unwrap() < here);
        prop_assert!(sulfide::fraction(t, ph + step).unwrap() < sulfide::fraction(t, ph).unwrap());
    }

    #[test]
    fn oxygen_leaves_warm_salty_high_water(t in 0.0..38.0f64, s in 0.0..38.0f64, h in 0.0..4000.0f64, step in 0.01..2.0f64) {
        let p = oxygen::pressure_at(h).unwrap();
        let here = oxygen::solubility(t, s, p).unwrap();
        prop_assert!(oxygen::solubility(t + step, s, p).unwrap() < here);
        prop_assert!(oxygen::solubility(t, s + step, p).unwrap() < here);
        prop_assert!(oxygen::solubility(t, s, oxygen::pressure_at(h + 100.0 * step).unwrap()).unwrap() < here);
        let percent = oxygen::to_saturation(6.5, t, s, p).unwrap();
        prop_assert!((oxygen::from_saturation(percent, t, s, p).unwrap() - 6.5).abs() < 1e-12);
    }

    #[test]
    fn films_and_fish_work_harder_in_warm_water(t in 0.0..34.0f64, ph in 5.0..9.0f64, o in 0.5..10.0f64, n in 0.05..10.0f64, step in 0.01..2.0f64) {
        let here = biofilter::Conditions { temperature: t, ph, dissolved_oxygen: o, total_ammonia: n, alkalinity: None, adapted: true };
        let rate = |c: biofilter::Conditions| biofilter::areal_rate(&c).unwrap();
        let warmer = biofilter::Conditions { temperature: t + step, ..here };
        let airier = biofilter::Conditions { dissolved_oxygen: o + step, ..here };
        let fuller = biofilter::Conditions { total_ammonia: n + step, ..here };
        let milder = biofilter::Conditions { ph: (ph + step).min(9.0), ..here };
        prop_assert!(rate(warmer) > rate(here));
        prop_assert!(rate(airier) > rate(here));
        prop_assert!(rate(fuller) > rate(here));
        prop_assert!(rate(milder) >= rate(here));
        let fish = |t, g| respiration::oxygen_use(t, g, true).unwrap();
        prop_assert!(fish(t + step, 250.0) > fish(t, 250.0));
        prop_assert!(fish(t, 500.0) < fish(t, 250.0));
    }

    /// Whatever is given, in range or not, comes out as a finite number or an error: nothing panics, nothing is NaN.
    #[test]
    fn any_numbers_give_a_number_or_an_error(
        at in 0..calculations::all().count(),
        numbers in proptest::collection::vec(prop_oneof![0.0..15.0f64, -1e3..1e6f64, Just(0.0)], 12),
        pick in 0usize..20,
    ) {
        let calculation = calculations::all().nth(at).unwrap();
        let mut rivals: Vec<&str> = Vec::new();
        let mut given = Vec::new();
        for (key, number) in calculation.keys.iter().zip(&numbers) {
            if rivals.contains(&key.name) {
                continue;
            }
            rivals.extend(key.rivals);
            given.push(match key.kind {
                Kind::Number { .. } => format!("{}={number}", key.name),
                Kind::Word(words) => format!("{}={}", key.name, words[pick % words.len()]),
            });
        }
        if let Ok(answer) = calculations::evaluate(calculation.name, &given, &SiteValues::default()) {
            prop_assert!(answer.value.is_finite());
        }
    }
}

#[test]
fn many_small_batches_are_a_flow() {
    let batches = exchange::left_after_batches(0.0001, 10_000.0).unwrap();
    let flow = exchange::left_after_flow(1.0).unwrap();
    assert!((batches - flow).abs() < 1e-4);
}
