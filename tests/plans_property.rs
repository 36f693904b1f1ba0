//! Every plan keeps its limits: random sites, states and wishes, each plan simulated at a finer step than the planner used.
//!
//! The ordinary test tries [`CASES`]; `GILLSIDE_PLANS=100000 cargo test --release --test plans_property` tries as many as
//! it is told.

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

use std::collections::BTreeMap;

use gillside::course::plan::{Kind, Wish};
use gillside::knowledge::Knowledge;
use gillside::site::{Chlorination, Crop, Makeup, Site};

const CASES: u64 = 4000;

/// A small generator of its own (xorshift64*), so that a case is its number.
struct Dice(u64);

impl Dice {
    fn next(&mut self) -> f64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11) as f64 / (1u64 << 53) as f64
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.next()
    }

    /// Spread evenly over powers of ten.
    fn scale(&mut self, low: f64, high: f64) -> f64 {
        low * (high / low).powf(self.next())
    }

    fn chance(&mut self, p: f64) -> bool {
        self.next() < p
    }

    fn pick<T: Copy>(&mut self, all: &[T]) -> T {
        all[(self.next() * all.len() as f64) as usize % all.len()]
    }
}

fn site(d: &mut Dice, k: &Knowledge) -> Site {
    let volume = d.scale(300.0, 200_000.0);
    let feed = d.chance(0.85).then(|| volume / 1000.0 * d.scale(0.02, 1.0));
    let species = if d.chance(0.8) {
        let i = (d.next() * k.species.len() as f64) as usize;
        vec![k.species[i.min(k.species.len() - 1)].id.clone()]
    } else {
        Vec::new()
    };
    let shifts = match (d.next() * 4.0) as u8 {
        0 => Vec::new(),
        1 => vec![world::shift("day", 8, 17)],
        2 => vec![world::shift("early", 6, 14), world::shift("late", 14, 22)],
        _ => vec![world::shift("morning", 7, 10), world::shift("night", 22, 4)],
    };
    Site {
        species,
        crops: if d.chance(0.5) {
            vec![Crop::LeafyGreens]
        } else {
            Vec::new()
        },
        volume_l: Some(volume),
        feed_kg_per_day: feed,
        feed_protein_percent: d.chance(0.7).then(|| d.between(25.0, 50.0)),
        biofilter_area_m2: d
            .chance(0.7)
            .then(|| volume / 1000.0 * d.scale(20.0, 800.0)),
        plant_area_m2: d.chance(0.6).then(|| volume / 1000.0 * d.scale(0.5, 30.0)),
        aeration_kg_o2_per_day: d.chance(0.5).then(|| volume / 1000.0 * d.scale(0.05, 3.0)),
        elevation_m: d.chance(0.3).then(|| d.between(0.0, 2500.0)),
        makeup: Makeup {
            chlorination: Some(d.pick(&[
                Chlorination::None,
                Chlorination::None,
                Chlorination::Chlorine,
            ])),
            ph: Some(d.between(5.8, 8.6)),
            alkalinity: Some(d.scale(5.0, 350.0)),
            chloride: Some(d.scale(1.0, 200.0)),
            temperature: Some(d.between(4.0, 30.0)),
        },
        shift: shifts,
        ..Site::default()
    }
}

fn water(d: &mut Dice) -> Vec<(&'static str, f64)> {
    if d.chance(0.5) {
        return ordinary(d);
    }
    vec![
        ("temperature", d.between(6.0, 33.0)),
        ("ph", d.between(5.2, 8.8)),
        ("alkalinity", d.scale(3.0, 300.0)),
        ("total-ammonia", d.scale(0.02, 12.0)),
        ("nitrite", d.scale(0.01, 10.0)),
        ("nitrate", d.scale(1.0, 300.0)),
        ("chloride", d.scale(2.0, 300.0)),
        ("sodium", d.scale(2.0, 120.0)),
        ("dissolved-oxygen", d.between(2.5, 9.5)),
        ("iron", d.scale(0.05, 3.0)),
        ("potassium", d.scale(2.0, 180.0)),
        ("residual-chlorine", d.scale(0.02, 4.0)),
    ]
}

/// A water such as farms have, so that most wishes can be granted.
fn ordinary(d: &mut Dice) -> Vec<(&'static str, f64)> {
    vec![
        ("temperature", d.between(14.0, 28.0)),
        ("ph", d.between(6.2, 7.6)),
        ("alkalinity", d.scale(15.0, 120.0)),
        ("total-ammonia", d.scale(0.05, 2.0)),
        ("nitrite", d.scale(0.02, 1.5)),
        ("nitrate", d.scale(5.0, 150.0)),
        ("chloride", d.scale(5.0, 80.0)),
        ("sodium", d.scale(2.0, 40.0)),
        ("dissolved-oxygen", d.between(5.0, 8.5)),
        ("iron", d.scale(0.05, 1.5)),
        ("potassium", d.scale(5.0, 60.0)),
        ("residual-chlorine", d.scale(0.02, 2.0)),
    ]
}

fn wish(d: &mut Dice, water: &[(&str, f64)]) -> Wish {
    let now = |id: &str| water.iter().find(|w| w.0 == id).unwrap().1;
    let kind = Kind::ALL[(d.next() * 10.0) as usize % 10].1;
    let mut wish = Wish::new(kind);
    wish.purity = if d.chance(0.6) {
        100.0
    } else {
        d.between(40.0, 99.0)
    };
    match kind {
        Kind::Ph => {
            wish.to = Some((now("ph") + d.between(-1.5, 1.5)).clamp(4.6, 9.4));
            if d.chance(0.7) {
                wish.substance = Some(
                    d.pick(&[
                        "KOH", "NaOH", "Ca(OH)2", "KHCO3", "K2CO3", "HCl", "H3PO4", "HNO3",
                        "H2SO4", "NaHCO3",
                    ])
                    .to_owned(),
                );
            }
        }
        Kind::Alkalinity => {
            wish.to = Some((now("alkalinity") + d.between(2.0, 120.0)).min(480.0));
            if d.chance(0.6) {
                wish.substance = Some(
                    d.pick(&[
                        "KHCO3", "NaHCO3", "K2CO3", "Na2CO3", "CaCO3", "Ca(OH)2", "KOH",
                    ])
                    .to_owned(),
                );
            }
        }
        Kind::Temperature => {
            wish.to = Some((now("temperature") + d.between(-12.0, 12.0)).clamp(0.5, 37.0))
        }
        Kind::Exchange => {
            let id = d.pick(&[
                "total-ammonia",
                "nitrite",
                "nitrate",
                "alkalinity",
                "chloride",
                "sodium",
                "potassium",
            ]);
            wish.reading = Some(id.to_owned());
            wish.to = Some(now(id) * d.between(0.1, 1.3));
        }
        Kind::Chloride => {
            if d.chance(0.5) {
                wish.to = Some(d.scale(10.0, 500.0));
            }
            if d.chance(0.5) {
                wish.substance = Some(d.pick(&["NaCl", "KCl", "CaCl2", "CaCl2.2H2O"]).to_owned());
            }
        }
        Kind::Supplement => {
            let id = d.pick(&["iron", "potassium"]);
            wish.reading = Some(id.to_owned());
            wish.to = Some(now(id) * d.between(0.9, 4.0));
        }
        Kind::StartUp => wish.with_fish = d.chance(0.5),
        _ => {}
    }
    wish
}

#[derive(Default)]
struct Count {
    made: BTreeMap<&'static str, [u64; 3]>,
    faults: Vec<String>,
    slowest: (f64, u64),
    refused: BTreeMap<String, u64>,
}

fn case(k: &Knowledge, number: u64, count: &mut Count) {
    let mut d = Dice(number.wrapping_mul(0x9E37_79B9_7F4A_7C15) | 1);
    for _ in 0..3 {
        d.next();
    }
    let site = site(&mut d, k);
    let water = water(&mut d);
    let wish = wish(&mut d, &water);
    let started = std::time::Instant::now();
    world::on(k, &site, &water, &wish, |ground, made| {
        let took = started.elapsed().as_secs_f64();
        if took > count.slowest.0 {
            count.slowest = (took, number);
        }
        let tally = count.made.entry(wish.kind.word()).or_default();
        match made {
            Err(_) => tally[2] += 1,
            Ok(plan) if plan.refused.is_some() => {
                tally[1] += 1;
                let refused = plan.refused.as_ref().unwrap();
                *count
                    .refused
                    .entry(format!("{} {}", wish.kind.word(), refused.limit))
                    .or_default() += 1;
                if !plan.steps.is_empty()
                    || refused.reason.is_empty()
                    || refused.instead.is_empty()
                    || refused.reason.contains('{')
                {
                    count
                        .faults
                        .push(format!("{number}: a refusal without words: {refused:?}"));
                }
            }
            Ok(plan) => {
                tally[0] += 1;
                for fault in judge::faults(ground, &plan) {
                    count
                        .faults
                        .push(format!("{number} {}: {fault}", wish.kind.word()));
                }
                let strong = plan
                    .steps
                    .iter()
                    .flat_map(|s| &s.amounts)
                    .any(|a| k.pacing.substance(&a.substance).unwrap().strong);
                if strong && wish.substance.is_none() {
                    count
                        .faults
                        .push(format!("{number}: a strong substance nobody asked for"));
                }
            }
        }
    });
}

#[test]
fn every_plan_keeps_its_limits() {
    let k = world::rule_base();
    let cases = std::env::var("GILLSIDE_PLANS")
        .ok()
        .and_then(|n| n.parse().ok())
        .unwrap_or(CASES);
    let from = std::env::var("GILLSIDE_FROM")
        .ok()
        .and_then(|n| n.parse().ok())
        .unwrap_or(0);
    let threads = std::thread::available_parallelism().map_or(2, |n| n.get() as u64);
    let counts: Vec<Count> = std::thread::scope(|s| {
        let running: Vec<_> = (0..threads)
            .map(|t| {
                let k = &k;
                s.spawn(move || {
                    let mut count = Count::default();
                    for number in (from + 1 + t..=from + cases).step_by(threads as usize) {
                        case(k, number, &mut count);
                    }
                    count
                })
            })
            .collect();
        running.into_iter().map(|r| r.join().unwrap()).collect()
    });
    let mut made: BTreeMap<&str, [u64; 3]> = BTreeMap::new();
    for (kind, n) in counts.iter().flat_map(|c| &c.made) {
        let sum = made.entry(kind).or_default();
        (0..3).for_each(|i| sum[i] += n[i]);
    }
    println!("plans, refusals, troubles: {made:?}");
    let mut refused: BTreeMap<&str, u64> = BTreeMap::new();
    for (limit, n) in counts.iter().flat_map(|c| &c.refused) {
        *refused.entry(limit).or_default() += n;
    }
    println!("refused for: {refused:?}");
    println!(
        "slowest: {:?}",
        counts
            .iter()
            .map(|c| c.slowest)
            .fold((0.0, 0), |a, b| if b.0 > a.0 { b } else { a })
    );
    let faults: Vec<&String> = counts.iter().flat_map(|c| &c.faults).collect();
    assert!(
        faults.is_empty(),
        "{} faults, such as\n{}",
        faults.len(),
        faults
            .iter()
            .take(25)
            .map(|f| f.as_str())
            .collect::<Vec<_>>()
            .join("\n")
    );
    // A planner that refuses everything keeps every limit; each must make a fair share of plans.
    for (kind, n) in &made {
        assert!(
            n[0] * 20 >= n.iter().sum::<u64>(),
            "`{kind}` hardly ever makes a plan: {n:?}"
        );
    }
}
