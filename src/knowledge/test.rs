//! The rule language: what a test may ask of the history of a farm. See `knowledge/README.md` for its TOML form.

use super::{CauseId, FindingId};
use crate::vocabulary::{EventId, ReadingId, SignId};
use serde::{Deserialize, Serialize};

/// Which of a species' limits.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum LimitLevel {
    /// Long-term fine on this side of it.
    Comfort,
    /// Harm begins.
    Stress,
    /// Deaths within hours to a day or two.
    Lethal,
}

/// The low or the high end of a band.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum Side {
    /// The low end.
    Low,
    /// The high end.
    High,
}

/// A named number that a site's species or targets give.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum Limit {
    /// A species' limit; only species files and house rules set it.
    Species(ReadingId, LimitLevel, Side),
    /// A comfort band: the site's, else the species', else the knowledge base's.
    Target(ReadingId, Side),
}

/// A number, or a name that is resolved when the rule base is compiled for a site.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub enum Bound {
    /// A number in the unit of the reading.
    Number(f64),
    /// A name.
    Named(Limit),
}

/// Where the degree is 0 and where it is 1; with no `full` the ramp is as wide as the reading's resolution, centered.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Ramp {
    /// Degree 0 here (or the middle of the ramp when `full` is absent).
    pub start: Bound,
    /// Degree 1 here.
    pub full: Option<Bound>,
}

/// Which value of a reading a level test looks at. Windows are in seconds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Over {
    /// The present one.
    Now,
    /// The lowest of a window.
    Lowest(i64),
    /// The highest of a window.
    Highest(i64),
    /// The median of a window.
    Middle(i64),
}

/// Kinds of change.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Change {
    /// Went up.
    Rose,
    /// Went down.
    Fell,
    /// Largest less smallest.
    Swung,
    /// Stayed within.
    Held,
}

/// What a site test asks.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum SiteTest {
    /// A flag is so.
    Is(bool),
    /// A word is so.
    Word(String),
    /// A list holds this word.
    Has(String),
    /// A number is below or above, as a ramp from the first to the second.
    Below(f64, f64),
    /// See [`SiteTest::Below`].
    Above(f64, f64),
}

/// One test. Its truth is an interval of degrees between 0 and 1.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Test {
    /// A value against bounds.
    Level {
        /// Of which reading.
        reading: ReadingId,
        /// Which value.
        over: Over,
        /// True below.
        below: Option<Ramp>,
        /// True above.
        above: Option<Ramp>,
        /// Must hold at every place; otherwise one place is enough.
        everywhere: bool,
    },
    /// A change within a window.
    Changed {
        /// Of which reading.
        reading: ReadingId,
        /// Which way.
        change: Change,
        /// Degree 0 up to here (for `Held`: degree 1 up to here).
        by: f64,
        /// Degree 1 from here (for `Held`: degree 0).
        surely: f64,
        /// Seconds.
        within: i64,
        /// The amounts are shares of the earlier value.
        share: bool,
    },
    /// Robust spreads above (positive) or below (negative) the farm's own usual value.
    Unusual {
        /// Of which reading.
        reading: ReadingId,
        /// How many spreads, always positive.
        spreads: f64,
        /// Above or below.
        side: Side,
    },
    /// A value that water cannot have was read.
    Odd {
        /// Of which reading.
        reading: ReadingId,
        /// Seconds.
        within: i64,
    },
    /// An often-read probe shows one value.
    Stuck {
        /// Of which reading.
        reading: ReadingId,
        /// Seconds.
        within: i64,
    },
    /// Two instruments or places disagree about shared water.
    Disagree {
        /// Of which reading.
        reading: ReadingId,
        /// By so much.
        by: f64,
        /// Seconds.
        within: i64,
    },
    /// A sign is seen; with a window, was seen at some time in it.
    Sign {
        /// Which.
        sign: SignId,
        /// Seconds; `None`: as long as the sign is good for.
        within: Option<i64>,
    },
    /// An event was noted.
    Event {
        /// Which.
        event: EventId,
        /// Seconds back.
        within: i64,
        /// Older than this, seconds.
        not_within: i64,
    },
    /// The site file says so.
    Site {
        /// Key, dotted for tables.
        key: String,
        /// What it asks.
        asks: SiteTest,
    },
    /// Another finding.
    Finding(FindingId),
    /// A cause's standing; only in steps, cautions and rounds.
    Cause {
        /// Causes of which one must be so likely together (one, or the members of a family).
        causes: Vec<CauseId>,
        /// Probability.
        likely: f64,
    },
    /// Minimum.
    All(Vec<Test>),
    /// Maximum.
    Any(Vec<Test>),
    /// Complement.
    Not(Box<Test>),
    /// The n-th largest.
    NOf(usize, Vec<Test>),
}

impl Test {
    /// Calls `visit` on this test and every test inside it.
    pub fn visit<'t>(&'t self, visit: &mut impl FnMut(&'t Test)) {
        visit(self);
        match self {
            Test::All(inner) | Test::Any(inner) | Test::NOf(_, inner) => {
                for test in inner {
                    test.visit(visit);
                }
            }
            Test::Not(inner) => inner.visit(visit),
            _ => {}
        }
    }

    /// The findings it refers to, in order.
    pub fn findings(&self) -> Vec<FindingId> {
        let mut found = Vec::new();
        self.visit(&mut |t| {
            if let Test::Finding(id) = t {
                found.push(*id);
            }
        });
        found
    }
}
