//! Tests of the rule language, from their TOML form.

use super::entry::{seconds, within};
use super::names::Names;
use crate::decode::{Node, Section};
use crate::fault::did_you_mean;
use crate::knowledge::{Bound, Change, Limit, LimitLevel, Over, Ramp, Side, SiteTest, Test};
use crate::vocabulary::ReadingId;

/// The keys of which exactly one says what kind of test it is.
const KINDS: [&str; 12] = [
    "reading", "odd", "stuck", "disagree", "sign", "event", "site", "finding", "cause", "all",
    "any", "not",
];

/// Reads one test; `causes` says whether a cause's standing may be asked for.
pub(super) fn test(node: &Node<'_>, names: &Names, causes: bool) -> Option<Test> {
    let mut section = node.section()?;
    let kind = KINDS
        .into_iter()
        .find(|k| section.has(k))
        .or_else(|| section.has("n_of").then_some("n_of"));
    let made = match kind {
        Some("reading") => reading(&mut section, names),
        Some("odd") => probe(&mut section, "odd", names),
        Some("stuck") => probe(&mut section, "stuck", names),
        Some("disagree") => probe(&mut section, "disagree", names),
        Some("sign") => sign(&mut section, names),
        Some("event") => event(&mut section, names),
        Some("site") => site(&mut section),
        Some("finding") => section
            .node("finding")
            .and_then(|n| names.finding(&n, &n.text()?))
            .map(Test::Finding),
        Some("cause") => cause(&mut section, names, causes),
        Some("all") => list(&mut section, "all", names, causes).map(Test::All),
        Some("any") => list(&mut section, "any", names, causes).map(Test::Any),
        Some("not") => section
            .node("not")
            .and_then(|n| test(&n, names, causes))
            .map(|t| Test::Not(Box::new(t))),
        Some(_) => n_of(&mut section, names, causes),
        None => {
            node.fault(
                "no-test",
                "this table is no test",
                "a test has one of `reading`, `sign`, `event`, `site`, `finding`, `odd`, `stuck`, `disagree`, `all`, `any`, `not`, `n_of`",
            );
            return None;
        }
    };
    section.finish();
    made
}

fn list(section: &mut Section<'_>, key: &str, names: &Names, causes: bool) -> Option<Vec<Test>> {
    let node = section.required(key)?;
    let inner: Vec<Test> = node
        .list()?
        .iter()
        .filter_map(|n| test(n, names, causes))
        .collect();
    if inner.is_empty() {
        node.fault(
            "no-test",
            format!("`{key}` holds no test"),
            "put at least one test in it",
        );
        return None;
    }
    Some(inner)
}

fn n_of(section: &mut Section<'_>, names: &Names, causes: bool) -> Option<Test> {
    let count = section
        .required("n_of")
        .and_then(|n| within(&n, 1.0, 50.0))?;
    let inner = list(section, "of", names, causes)?;
    // Checked to be 1 to 50 just above.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)]
    let count = count as usize;
    if count > inner.len() {
        section.fault_at_key(
            "n_of",
            "out-of-range",
            format!("`n_of` is {count} but there are {} tests", inner.len()),
            "ask for at most as many as there are",
        );
        return None;
    }
    Some(Test::NOf(count, inner))
}

fn reading(section: &mut Section<'_>, names: &Names) -> Option<Test> {
    let node = section.node("reading")?;
    let reading = names.reading(&node, &node.text()?)?;
    let changes = [
        ("rose_by", "surely_rose_by", Change::Rose),
        ("fell_by", "surely_fell_by", Change::Fell),
        ("swung_by", "surely_swung_by", Change::Swung),
        ("held_within", "surely_held_within", Change::Held),
    ];
    for (key, surely, change) in changes {
        if section.has(key) {
            let by = section.number(key)?;
            let usual_full = if change == Change::Held {
                by * 1.6
            } else {
                by * 1.5
            };
            let surely = section.number(surely).unwrap_or(usual_full);
            let within = section.required("within").and_then(|n| seconds(&n))?;
            let share = section.flag("share").unwrap_or(false);
            if surely <= by || by <= 0.0 {
                section.fault_at_key(
                    key,
                    "out-of-order",
                    format!("`{key}` must be above 0 and below its surely_… ({by}, {surely})"),
                    "put the two numbers in order",
                );
                return None;
            }
            return Some(Test::Changed {
                reading,
                change,
                by,
                surely,
                within,
                share,
            });
        }
    }
    for (key, side) in [("above_usual", Side::High), ("below_usual", Side::Low)] {
        if let Some(node) = section.node(key) {
            return Some(Test::Unusual {
                reading,
                spreads: super::entry::within(&node, 1.0, 50.0)?,
                side,
            });
        }
    }
    level(section, reading, names)
}

fn level(section: &mut Section<'_>, reading: ReadingId, names: &Names) -> Option<Test> {
    let mut over = Over::Now;
    for (key, of) in [
        ("lowest_within", Over::Lowest as fn(i64) -> Over),
        ("highest_within", Over::Highest),
        ("middle_within", Over::Middle),
    ] {
        if let Some(node) = section.node(key) {
            over = of(seconds(&node)?);
        }
    }
    let below = ramp(section, "below", "surely_below", names);
    let above = ramp(section, "above", "surely_above", names);
    let everywhere = section.flag("everywhere").unwrap_or(false);
    if below.is_none() && above.is_none() {
        section.fault(
            "no-test",
            "a test of a reading asks nothing",
            "add `below`, `above`, `rose_by`, `fell_by`, `swung_by`, `held_within`, `above_usual` or `below_usual`",
        );
        return None;
    }
    for (ramp, key, rising) in [(&below, "below", false), (&above, "above", true)] {
        if let Some(Ramp {
            start: Bound::Number(start),
            full: Some(Bound::Number(full)),
        }) = ramp
            && ((rising && full <= start) || (!rising && full >= start))
        {
            section.fault_at_key(
                key,
                "out-of-order",
                format!("`{key}` {start} and `surely_{key}` {full} are in the wrong order"),
                "the sure one lies further out",
            );
        }
    }
    Some(Test::Level {
        reading,
        over,
        below,
        above,
        everywhere,
    })
}

fn ramp(section: &mut Section<'_>, key: &str, surely: &str, names: &Names) -> Option<Ramp> {
    let full = section.node(surely);
    let start = match (section.node(key), &full) {
        (Some(node), _) => bound(&node, names)?,
        (None, Some(node)) => {
            node.fault(
                "missing-key",
                format!("`{surely}` without `{key}`"),
                format!("add `{key} = …`"),
            );
            return None;
        }
        (None, None) => return None,
    };
    let full = match full {
        Some(node) => Some(bound(&node, names)?),
        None => None,
    };
    Some(Ramp { start, full })
}

fn bound(node: &Node<'_>, names: &Names) -> Option<Bound> {
    let crate::decode::Value::String(name) = node.value() else {
        return node.number().map(Bound::Number);
    };
    let parts: Vec<&str> = name.split('.').collect();
    match parts[..] {
        ["target", id, side] => {
            let reading = names.reading(node, id)?;
            Some(Bound::Named(Limit::Target(reading, side_of(node, side)?)))
        }
        ["species", id, which] => {
            let reading = names.reading(node, id)?;
            let (level, side) = which.rsplit_once('-').unwrap_or((which, ""));
            let level = match level {
                "comfort" => LimitLevel::Comfort,
                "stress" => LimitLevel::Stress,
                "lethal" => LimitLevel::Lethal,
                _ => {
                    node.fault(
                        "unknown-name",
                        format!("unknown limit `{which}`"),
                        "use comfort-, stress- or lethal- with low or high",
                    );
                    return None;
                }
            };
            Some(Bound::Named(Limit::Species(
                reading,
                level,
                side_of(node, side)?,
            )))
        }
        _ => {
            node.fault(
                "unknown-name",
                format!("`{name}` names no number"),
                "write a number, `species.READING.stress-low` or `target.READING.high`",
            );
            None
        }
    }
}

fn side_of(node: &Node<'_>, word: &str) -> Option<Side> {
    match word {
        "low" => Some(Side::Low),
        "high" => Some(Side::High),
        _ => {
            node.fault(
                "unknown-name",
                format!("`{word}` is neither low nor high"),
                "end the name in low or high",
            );
            None
        }
    }
}

fn probe(section: &mut Section<'_>, key: &str, names: &Names) -> Option<Test> {
    let node = section.node(key)?;
    let reading = names.reading(&node, &node.text()?)?;
    let within = section.required("within").and_then(|n| seconds(&n))?;
    Some(match key {
        "odd" => Test::Odd { reading, within },
        "stuck" => Test::Stuck { reading, within },
        _ => Test::Disagree {
            reading,
            by: section.required_number("by")?,
            within,
        },
    })
}

fn sign(section: &mut Section<'_>, names: &Names) -> Option<Test> {
    let node = section.node("sign")?;
    let sign = names.sign(&node, &node.text()?)?;
    let within = section.node("within").and_then(|n| seconds(&n));
    Some(Test::Sign { sign, within })
}

fn event(section: &mut Section<'_>, names: &Names) -> Option<Test> {
    let node = section.node("event")?;
    let event = names.event(&node, &node.text()?)?;
    let within = section.required("within").and_then(|n| seconds(&n))?;
    let not_within = section
        .node("not_within")
        .and_then(|n| seconds(&n))
        .unwrap_or(0);
    Some(Test::Event {
        event,
        within,
        not_within,
    })
}

/// The keys of the site file that tests may ask for.
const SITE_KEYS: [&str; 24] = [
    "species",
    "crops",
    "elevation_m",
    "volume_l",
    "biomass_kg",
    "feed_kg_per_day",
    "feed_protein_percent",
    "biofilter_area_m2",
    "plant_area_m2",
    "aeration_kg_o2_per_day",
    "heated",
    "covered_media",
    "makeup.chlorination",
    "makeup.ph",
    "makeup.alkalinity",
    "makeup.chloride",
    "makeup.temperature",
    "equipment.solids_filter",
    "equipment.standby_air",
    "equipment.pure_oxygen",
    "equipment.backup_power",
    "equipment.substances",
    "units",
    "warm",
];

fn site(section: &mut Section<'_>) -> Option<Test> {
    let node = section.node("site")?;
    let key = node.text()?;
    if !SITE_KEYS.contains(&key.as_str()) {
        node.fault(
            "unknown-key",
            format!("unknown site key `{key}`"),
            did_you_mean(&key, SITE_KEYS, "use a key of the site file"),
        );
        return None;
    }
    let asks = if let Some(node) = section.node("is") {
        match node.value() {
            crate::decode::Value::String(word) => SiteTest::Word(word.to_string()),
            _ => SiteTest::Is(node.flag()?),
        }
    } else if let Some(node) = section.node("has") {
        SiteTest::Has(node.text()?)
    } else if section.has("below") {
        let start = section.number("below")?;
        SiteTest::Below(start, section.number("surely_below").unwrap_or(start))
    } else if section.has("above") {
        let start = section.number("above")?;
        SiteTest::Above(start, section.number("surely_above").unwrap_or(start))
    } else {
        section.fault(
            "no-test",
            "a test of the site asks nothing",
            "add `is`, `has`, `below` or `above`",
        );
        return None;
    };
    Some(Test::Site { key, asks })
}

fn cause(section: &mut Section<'_>, names: &Names, allowed: bool) -> Option<Test> {
    let node = section.node("cause")?;
    let causes = names.causes(&node, &node.text()?);
    let likely = section
        .required("likely")
        .and_then(|n| within(&n, 0.0, 1.0))?;
    if !allowed {
        node.fault(
            "cause-in-finding",
            "a finding may not rest on a cause's standing",
            "rest it on readings, signs, events or other findings, so that nothing runs in a circle",
        );
        return None;
    }
    Some(Test::Cause { causes, likely })
}
