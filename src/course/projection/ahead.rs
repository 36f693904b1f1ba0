//! When which limit is passed if nothing is done, as a range: the run that is kindest and the one that is harshest.

use super::begin::{Begin, Extreme};
use super::farm::Gas;
use super::readings::Readings;
use super::run::{Manner, ORDINARY, Point, run};
use super::state::{Part, State};
use crate::course::Projection;
use crate::engine::Limits;
use crate::history::memory::Memory;
use crate::knowledge::{Knowledge, LimitLevel, Side};
use crate::site::Site;

/// How far ahead is looked, days.
const AHEAD: f64 = 14.0;
/// Nitrite below this does no harm whatever the chloride, mg/L as N: it is within the error of the test.
const NO_NITRITE: f64 = 0.3;

/// One limit on the way: words, and the value of a point less the limit (passed when above zero).
struct Watch {
    words: String,
    excess: Box<dyn Fn(&Point) -> f64>,
}

/// The limits that will be passed within two weeks if nothing is done and that are not passed already. Empty where the
/// site has no volume or the log no temperature, pH and alkalinity.
pub fn projections(
    knowledge: &Knowledge,
    site: &Site,
    limits: &Limits<'_>,
    memory: &Memory,
) -> Vec<Projection> {
    let readings = Readings::new(&knowledge.vocabulary, Some(memory), memory.now());
    let area = area(knowledge, site);
    let Ok(begin) = Begin::new(knowledge, site, area, &readings) else {
        return Vec::new();
    };
    let courses = courses(&begin);
    if courses.is_empty() {
        return Vec::new();
    }
    watches(knowledge, limits, &begin)
        .iter()
        .filter_map(|watch| passed(watch, &courses, readings.now()))
        .collect()
}

/// Wetted area (m2) by the site file and the rule base's media.
pub fn area(knowledge: &Knowledge, site: &Site) -> Option<f64> {
    let per_m3 = |kind: &str| {
        let media = knowledge.media.iter().find(|m| m.id == kind)?;
        Some(1000.0 * media.area_m2_per_l)
    };
    site.biofilter_area(per_m3).map(|a| a.m2)
}

/// The runs that span what may come: bacteria as few and as many as may be, a change of temperature that stops soon or
/// goes on.
fn courses(begin: &Begin<'_>) -> Vec<Vec<Point>> {
    let (few, many) = (Extreme::Few, Extreme::Many);
    let starts: Vec<State> = match begin.capacity {
        Some(_) => vec![
            begin.extreme(few, few),
            begin.state,
            begin.extreme(many, many),
            begin.extreme(many, few),
        ],
        None => vec![begin.state],
    };
    let manner = Manner {
        gas: Gas::Usual,
        exact: ORDINARY,
        feed: begin.feed,
    };
    let mut courses = Vec::new();
    let drifts: &[f64] = if begin.farm.drift == 0.0 {
        &[1.0]
    } else {
        &[0.4, 1.2]
    };
    for factor in drifts {
        for start in &starts {
            let mut farm = begin.farm_with(start);
            farm.drift *= factor;
            courses.extend(run(&farm, start, &[], AHEAD, &manner));
        }
    }
    courses
}

fn watches(knowledge: &Knowledge, limits: &Limits<'_>, begin: &Begin<'_>) -> Vec<Watch> {
    let words = &knowledge.vocabulary;
    let limit = |id: &str, level, side| {
        words
            .reading(id)
            .and_then(|r| limits.species(r, level, side))
    };
    let known = |id: &str| !begin.assumed.contains(&id);
    let filter = begin.capacity.is_some();
    let carbonate = known("ph") && known("alkalinity") && known("temperature");
    let mut all: Vec<Watch> = Vec::new();
    let mut watch = |words: String, excess: Box<dyn Fn(&Point) -> f64>| {
        all.push(Watch { words, excess });
    };
    let text = &knowledge.pacing.words;
    let say = |text: &str, limit: f64| text.replace("{limit}", &limit.to_string());
    let (high, low) = (Side::High, Side::Low);
    if filter && carbonate && known("total-ammonia") {
        let levels = [
            (LimitLevel::Comfort, &text.ahead_ammonia),
            (LimitLevel::Stress, &text.ahead_ammonia_stress),
        ];
        for (level, note) in levels {
            if let Some(top) = limit("un-ionized-ammonia", level, high) {
                watch(say(note, top), Box::new(move |p| p.un_ionized - top));
            }
        }
    }
    if filter && known("nitrite") && known("chloride") {
        if let Some(ratio) = limit("chloride-to-nitrite", LimitLevel::Stress, low) {
            watch(
                say(&text.ahead_chloride, ratio),
                Box::new(move |p| {
                    let nitrite = Part::Nitrite.of(&p.y);
                    if nitrite < NO_NITRITE {
                        -1.0
                    } else {
                        ratio * nitrite - Part::Chloride.of(&p.y)
                    }
                }),
            );
        }
    } else if filter
        && known("nitrite")
        && let Some(top) = limit("nitrite", LimitLevel::Stress, high)
    {
        watch(
            say(&text.ahead_nitrite, top),
            Box::new(move |p| Part::Nitrite.of(&p.y) - top),
        );
    }
    if known("dissolved-oxygen")
        && known("temperature")
        && let Some(least) = limit("dissolved-oxygen", LimitLevel::Stress, low)
    {
        watch(
            say(&text.ahead_oxygen, least),
            Box::new(move |p| least - Part::Oxygen.of(&p.y)),
        );
    }
    if filter && known("alkalinity") && begin.rising.is_some() {
        let half = knowledge.pacing.kinetics.alkalinity_half.value;
        watch(
            say(&text.ahead_alkalinity, half),
            Box::new(move |p| half - Part::Alkalinity.of(&p.y)),
        );
    }
    if filter
        && carbonate
        && begin.rising.is_some()
        && let Some(least) = limit("ph", LimitLevel::Stress, low)
    {
        watch(say(&text.ahead_ph, least), Box::new(move |p| least - p.ph));
    }
    if known("temperature") {
        if let Some(least) = limit("temperature", LimitLevel::Stress, low) {
            watch(
                say(&text.ahead_cold, least),
                Box::new(move |p| least - Part::Temperature.of(&p.y)),
            );
        }
        if let Some(top) = limit("temperature", LimitLevel::Stress, high) {
            watch(
                say(&text.ahead_warm, top),
                Box::new(move |p| Part::Temperature.of(&p.y) - top),
            );
        }
    }
    all
}

/// Days until it is passed in one course, between the points.
fn when(watch: &Watch, course: &[Point]) -> Option<f64> {
    course.windows(2).find_map(|pair| {
        let [a, b] = pair else { return None };
        let (before, after) = ((watch.excess)(a), (watch.excess)(b));
        (after > 0.0).then(|| {
            let share = if before < 0.0 {
                -before / (after - before)
            } else {
                0.0
            };
            a.t + share * (b.t - a.t)
        })
    })
}

fn passed(watch: &Watch, courses: &[Vec<Point>], now: i64) -> Option<Projection> {
    let first = courses.first()?.first()?;
    if (watch.excess)(first) > 0.0 {
        return None; // it is passed already: the findings say so
    }
    let times: Vec<Option<f64>> = courses.iter().map(|c| when(watch, c)).collect();
    let earliest = times.iter().flatten().copied().reduce(f64::min)?;
    let latest = times
        .iter()
        .copied()
        .collect::<Option<Vec<f64>>>()
        .and_then(|all| all.into_iter().reduce(f64::max));
    #[allow(clippy::cast_possible_truncation)] // two weeks in seconds
    let at = |days: f64| now + (days * 86_400.0).round() as i64;
    Some(Projection {
        limit: watch.words.clone(),
        earliest: at(earliest),
        latest: latest.map(at),
    })
}
