//! A test of the rule language in words.

use super::Book;
use crate::assessment::span;
use crate::engine::Limits;
use crate::knowledge::{
    Bound, Change, Knowledge, Limit, LimitLevel, Over, Ramp, Side, SiteTest, Test,
};
use crate::render::units;
use crate::site::Site;
use crate::vocabulary::{Reading, ReadingId};

/// Puts tests into words.
#[derive(Debug, Clone, Copy)]
pub(super) struct Tests<'a> {
    pub knowledge: &'a Knowledge,
    pub site: &'a Site,
    pub limits: &'a Limits<'a>,
}

impl<'a> Tests<'a> {
    pub fn of(book: &Book<'a>) -> Self {
        Self {
            knowledge: book.knowledge,
            site: book.site,
            limits: book.limits,
        }
    }

    /// The whole test as one clause.
    pub fn clause(&self, test: &Test) -> String {
        match test {
            Test::All(tests) => self.joined(tests, " and "),
            Test::Any(tests) => self.joined(tests, " or "),
            Test::Not(inner) => format!("not: {}", self.within(inner)),
            Test::NOf(n, tests) => format!("at least {n} of: {}", self.joined(tests, "; ")),
            leaf => self.leaf(leaf),
        }
    }

    fn joined(&self, tests: &[Test], word: &str) -> String {
        let parts: Vec<String> = tests.iter().map(|t| self.within(t)).collect();
        parts.join(word)
    }

    /// A part of a larger clause: in brackets when it has parts itself.
    fn within(&self, test: &Test) -> String {
        match test {
            Test::All(_) | Test::Any(_) | Test::NOf(..) => format!("({})", self.clause(test)),
            _ => self.clause(test),
        }
    }

    /// The head of a test with parts; a test without parts whole.
    pub fn head(&self, test: &Test) -> String {
        match test {
            Test::All(_) => "all of".to_owned(),
            Test::Any(_) => "any of".to_owned(),
            Test::Not(_) => "not".to_owned(),
            Test::NOf(n, _) => format!("at least {n} of"),
            leaf => self.leaf(leaf),
        }
    }

    fn reading(&self, id: ReadingId) -> &'a Reading {
        &self.knowledge.vocabulary[id]
    }

    fn leaf(&self, test: &Test) -> String {
        let words = &self.knowledge.vocabulary;
        match test {
            Test::Level {
                reading,
                over,
                below,
                above,
                everywhere,
            } => self.level(*reading, *over, (*below, *above), *everywhere),
            Test::Changed {
                reading,
                change,
                by,
                surely,
                within,
                share,
            } => self.changed(*reading, *change, (*by, *surely), *within, *share),
            Test::Unusual {
                reading,
                spreads,
                side,
            } => format!(
                "{} is {spreads} spreads {} what is usual on this farm",
                self.reading(*reading).name,
                if *side == Side::High {
                    "above"
                } else {
                    "below"
                }
            ),
            Test::Odd { reading, within } => format!(
                "a value of {} that water can't have was read within {}",
                self.reading(*reading).name,
                span(*within)
            ),
            Test::Stuck { reading, within } => format!(
                "{} is read often and shows one value for {}",
                self.reading(*reading).name,
                span(*within)
            ),
            Test::Disagree {
                reading,
                by,
                within,
            } => format!(
                "two readings of {} of the same water differ by {} within {}",
                self.reading(*reading).name,
                units::difference(self.reading(*reading), *by, self.site.units),
                span(*within)
            ),
            Test::Sign { sign, within } => {
                let when =
                    within.map_or_else(String::new, |w| format!(" (at some time in {})", span(w)));
                format!("{}{when}", words[*sign].name)
            }
            Test::Event {
                event,
                within,
                not_within,
            } => {
                let not = match not_within {
                    0 => String::new(),
                    recent => format!(", not within the last {}", span(*recent)),
                };
                format!("{} (within {}{not})", words[*event].name, span(*within))
            }
            Test::Site { key, asks } => site(key, asks),
            Test::Finding(id) => {
                format!("{} [{}]", self.knowledge[*id].name, self.knowledge[*id].id)
            }
            Test::Cause { causes, likely } => {
                let ids: Vec<&str> = causes
                    .iter()
                    .map(|c| self.knowledge[*c].id.as_str())
                    .collect();
                format!(
                    "the probability of {} is {likely} or more",
                    ids.join(" or ")
                )
            }
            Test::All(_) | Test::Any(_) | Test::Not(_) | Test::NOf(..) => self.head(test),
        }
    }

    fn level(
        &self,
        id: ReadingId,
        over: Over,
        (below, above): (Option<Ramp>, Option<Ramp>),
        everywhere: bool,
    ) -> String {
        let name = &self.reading(id).name;
        let what = match over {
            Over::Now => name.clone(),
            Over::Lowest(window) => format!("the lowest {name} of {}", span(window)),
            Over::Highest(window) => format!("the highest {name} of {}", span(window)),
            Over::Middle(window) => format!("the middle {name} of {}", span(window)),
        };
        let sides: Vec<String> = [("below", below), ("above", above)]
            .into_iter()
            .filter_map(|(word, ramp)| Some(self.ramp(id, word, ramp?)))
            .collect();
        let where_ = if everywhere { " at every place" } else { "" };
        format!("{what} is {}{where_}", sides.join(" and "))
    }

    fn ramp(&self, id: ReadingId, word: &str, ramp: Ramp) -> String {
        let start = self.bound(id, ramp.start);
        match ramp.full {
            Some(full) => format!("{word} {start} (surely {word} {})", self.bound(id, full)),
            None => format!("{word} {start}"),
        }
    }

    fn bound(&self, id: ReadingId, bound: Bound) -> String {
        let reading = self.reading(id);
        let here = self
            .limits
            .resolve(bound)
            .map(|value| units::amount(reading, value, self.site.units));
        match (bound, here) {
            (Bound::Number(_), Some(value)) => value,
            (Bound::Number(value), None) => value.to_string(),
            (Bound::Named(limit), here) => {
                let here =
                    here.map_or_else(|| "no number here".to_owned(), |v| format!("{v} here"));
                format!("{} ({here})", self.limit(limit))
            }
        }
    }

    /// A named limit as it is written in the rule base.
    pub fn limit(&self, limit: Limit) -> String {
        match limit {
            Limit::Species(reading, level, side) => format!(
                "species.{}.{}-{}",
                self.reading(reading).id,
                level_word(level),
                side_word(side)
            ),
            Limit::Target(reading, side) => {
                format!("target.{}.{}", self.reading(reading).id, side_word(side))
            }
        }
    }

    fn changed(
        &self,
        id: ReadingId,
        change: Change,
        (by, surely): (f64, f64),
        within: i64,
        share: bool,
    ) -> String {
        let reading = self.reading(id);
        let amount = |value: f64| match share {
            true => format!("{:.0}%", value * 100.0),
            false => units::difference(reading, value, self.site.units),
        };
        let verb = match change {
            Change::Rose => "rose by",
            Change::Fell => "fell by",
            Change::Swung => "swung by",
            Change::Held => "held within",
        };
        let sure = if (surely - by).abs() > f64::EPSILON && change != Change::Held {
            format!(" (surely {})", amount(surely))
        } else {
            String::new()
        };
        format!(
            "{} {verb} {}{sure} in {}",
            reading.name,
            amount(by),
            span(within)
        )
    }
}

fn site(key: &str, asks: &SiteTest) -> String {
    let says = match asks {
        SiteTest::Is(value) => format!("is {value}"),
        SiteTest::Word(word) => format!("is {word}"),
        SiteTest::Has(word) => format!("has {word}"),
        SiteTest::Below(start, full) if start == full => format!("is below {start}"),
        SiteTest::Above(start, full) if start == full => format!("is above {start}"),
        SiteTest::Below(start, full) => format!("is below {start} (surely {full})"),
        SiteTest::Above(start, full) => format!("is above {start} (surely {full})"),
    };
    format!("`{key}` of the site file {says}")
}

pub(super) fn level_word(level: LimitLevel) -> &'static str {
    match level {
        LimitLevel::Comfort => "comfort",
        LimitLevel::Stress => "stress",
        LimitLevel::Lethal => "lethal",
    }
}

pub(super) fn side_word(side: Side) -> &'static str {
    match side {
        Side::Low => "low",
        Side::High => "high",
    }
}
