//! Random farms and rows, the same in every run.

use gillside::history::log::{Row, Value};
use gillside::knowledge::Knowledge;
use gillside::site::{Chlorination, Site};
use gillside::vocabulary::{EventId, ReadingId, SignId};

/// `SplitMix64` (Steele, Lea, Flood 2014): small, and the same everywhere.
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Self {
        Self(seed)
    }

    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// From 0 up to 1.
    #[allow(clippy::cast_precision_loss)]
    pub fn share(&mut self) -> f64 {
        (self.next() >> 11) as f64 / (1u64 << 53) as f64
    }

    pub fn chance(&mut self, of: f64) -> bool {
        self.share() < of
    }

    /// From 0 up to `end`, which is above 0.
    pub fn below(&mut self, end: usize) -> usize {
        usize::try_from(self.next() % u64::try_from(end).unwrap()).unwrap()
    }

    fn maybe<T>(&mut self, value: T) -> Option<T> {
        self.chance(0.5).then_some(value)
    }

    fn flag(&mut self) -> Option<bool> {
        let yes = self.chance(0.5);
        self.maybe(yes)
    }
}

/// A farm of which about half is known.
pub fn site(knowledge: &Knowledge, dice: &mut Dice) -> Site {
    let mut site = Site::default();
    if dice.chance(0.8) {
        let species = &knowledge.species;
        for _ in 0..=dice.below(2) {
            site.species
                .push(species[dice.below(species.len())].id.clone());
        }
    }
    let volume = 200.0 * 1000f64.powf(dice.share());
    site.volume_l = dice.maybe(volume);
    let biomass = volume / 1000.0 * 80.0 * dice.share();
    site.biomass_kg = dice.maybe(biomass);
    let feed = biomass * 0.03 * dice.share();
    site.feed_kg_per_day = dice.maybe(feed);
    let area = 50.0 * dice.share();
    site.plant_area_m2 = dice.maybe(area);
    site.biofilter_area_m2 = dice.maybe(area * 20.0 + 1.0);
    site.heated = dice.flag();
    site.covered_media = dice.flag();
    let kinds = [
        Chlorination::None,
        Chlorination::Chlorine,
        Chlorination::Chloramine,
        Chlorination::Unknown,
    ];
    let kind = kinds[dice.below(4)];
    site.makeup.chlorination = dice.maybe(kind);
    let (ph, alkalinity, chloride) = (
        6.0 + 3.0 * dice.share(),
        250.0 * dice.share(),
        100.0 * dice.share(),
    );
    site.makeup.ph = dice.maybe(ph);
    site.makeup.alkalinity = dice.maybe(alkalinity);
    site.makeup.chloride = dice.maybe(chloride);
    site.equipment.solids_filter = dice.flag();
    site.equipment.standby_air = dice.flag();
    site.equipment.pure_oxygen = dice.flag();
    site.equipment.backup_power = dice.flag();
    site
}

/// What kind of days a farm has.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Days {
    /// Anything may be read, seen and done.
    Wild,
    /// Good water, and now and then one thing that is odd.
    Calm,
    /// Good water, and fish that show something.
    Sick,
}

impl Days {
    pub fn random(dice: &mut Dice) -> Self {
        match dice.below(4) {
            0 | 1 => Self::Wild,
            2 => Self::Calm,
            _ => Self::Sick,
        }
    }
}

/// Good water for most fish of a planted loop.
const GOOD: [(&str, f64); 9] = [
    ("dissolved-oxygen", 7.0),
    ("temperature", 22.0),
    ("ph", 6.9),
    ("total-ammonia", 0.15),
    ("nitrite", 0.03),
    ("nitrate", 40.0),
    ("alkalinity", 80.0),
    ("chloride", 60.0),
    ("conductivity", 800.0),
];

/// A value anywhere in what is plausible, low ones more often: poisons and nutrients live near zero.
fn value(range: (f64, f64), dice: &mut Dice) -> f64 {
    let bend = [1.0, 2.0, 4.0, 8.0][dice.below(4)];
    range.0 + (range.1 - range.0) * dice.share().powf(bend)
}

/// A row some time after the last one: readings, signs looked for, and events, each known or not.
pub fn row(knowledge: &Knowledge, days: Days, after: i64, dice: &mut Dice) -> Row {
    let words = &knowledge.vocabulary;
    let gap = [600, 3600, 6 * 3600, 86_400, 4 * 86_400][dice.below(5)];
    #[allow(clippy::cast_possible_truncation)]
    let wait = (f64::from(gap) * (0.2 + dice.share())) as i64;
    let mut row = Row {
        time: after + wait,
        ..Row::default()
    };
    let (known, looked, seen, happened) = match days {
        Days::Wild => (dice.share().powi(2), dice.share().powi(2), 0.3, 0.4),
        Days::Calm => (0.01, 0.1, 0.01, 0.02),
        Days::Sick => (0.01, 0.5, 0.2, 0.05),
    };
    let seen = seen * dice.share();
    for (n, reading) in words.readings.iter().enumerate() {
        let id = ReadingId(u16::try_from(n).unwrap());
        let good = GOOD.iter().find(|(id, _)| *id == reading.id);
        let amount = match good {
            _ if reading.derived => continue,
            _ if dice.chance(known) => value(reading.plausible, dice),
            Some((_, good)) if days != Days::Wild && dice.chance(0.9) => {
                good * (0.97 + 0.06 * dice.share())
            }
            _ => continue,
        };
        row.values.push((
            id,
            Value {
                amount,
                below: false,
            },
        ));
    }
    for (n, sign) in words.signs.iter().enumerate() {
        let of_fish = FISH.iter().any(|word| sign.id.contains(word));
        if dice.chance(looked) && (of_fish || days != Days::Sick) {
            let id = SignId(u16::try_from(n).unwrap());
            row.signs.push((id, dice.chance(seen)));
        }
    }
    if dice.chance(happened) {
        for _ in 0..=dice.below(3) {
            let event = dice.below(words.events.len());
            row.events.push(EventId(u16::try_from(event).unwrap()));
        }
    }
    row
}

/// Words in the ids of signs that fish show.
const FISH: [&str; 9] = [
    "fish", "gills", "skin", "fins", "eyes", "tufts", "spots", "slime", "tank",
];
