//! Holds courses of the water to limits: how far each limit is used, when, and whether doing nothing would use it as much.

use super::value::Kept;
use crate::course::projection::{Part, Point};
use crate::knowledge::PaceLimit;

/// What is watched.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Track {
    /// pH.
    Ph,
    /// Un-ionized ammonia, mg/L as N.
    UnIonized,
    /// Carbon dioxide, mg/L.
    CarbonDioxide,
    /// One number of the water.
    Part(Part),
}

/// How it is measured against the limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Measure {
    /// The largest rise at one action.
    Jump,
    /// The largest rise within so many hours.
    Rise(f64),
    /// The largest fall within so many hours.
    Fall(f64),
    /// The largest rise against 24 hours before (the start, in the first day).
    NetRise,
    /// The highest value from a day on.
    Most(f64),
    /// The lowest value.
    Least,
}

/// One limit as one plan keeps it.
#[derive(Debug, Clone, PartialEq)]
pub struct Rule<'k> {
    /// The limit.
    pub limit: &'k PaceLimit,
    /// Its value here.
    pub bound: f64,
    /// What.
    pub track: Track,
    /// How.
    pub measure: Measure,
    /// A plan may pass it where doing nothing passes it as far.
    pub unless_anyway: bool,
}

/// How a limit fared.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fared {
    /// The worst value.
    pub reached: f64,
    /// When, in days from the start.
    pub at: f64,
}

fn value(track: Track, p: &Point) -> f64 {
    match track {
        Track::Ph => p.ph,
        Track::UnIonized => p.un_ionized,
        Track::CarbonDioxide => p.carbon_dioxide,
        Track::Part(part) => part.of(&p.y),
    }
}

/// The lowest (or, with `sign` -1, highest) value within a window before each point, against the point: the largest rise.
fn largest_change(track: Track, points: &[Point], window: f64, sign: f64) -> Fared {
    let mut queue: std::collections::VecDeque<(f64, f64)> = std::collections::VecDeque::new();
    let mut worst = Fared {
        reached: 0.0,
        at: 0.0,
    };
    for p in points {
        let v = sign * value(track, p);
        while queue.back().is_some_and(|(_, kept)| *kept >= v) {
            queue.pop_back();
        }
        queue.push_back((p.t, v));
        while queue.front().is_some_and(|(t, _)| p.t - t > window + 1e-9) {
            queue.pop_front();
        }
        if let Some((_, least)) = queue.front()
            && v - least > worst.reached
        {
            worst = Fared {
                reached: v - least,
                at: p.t,
            };
        }
    }
    worst
}

/// The value of a track at a moment, between the points.
pub fn at(track: Track, points: &[Point], t: f64) -> Option<f64> {
    let after = points.partition_point(|p| p.t <= t + 1e-9);
    let a = points.get(after.checked_sub(1)?)?;
    let Some(b) = points.get(after) else {
        return Some(value(track, a));
    };
    let share = if b.t > a.t {
        (t - a.t) / (b.t - a.t)
    } else {
        0.0
    };
    Some(value(track, a) + share.clamp(0.0, 1.0) * (value(track, b) - value(track, a)))
}

impl Rule<'_> {
    /// How one course uses the limit.
    pub fn of(&self, points: &[Point]) -> Fared {
        let none = Fared {
            reached: 0.0,
            at: 0.0,
        };
        match self.measure {
            Measure::Jump => points
                .windows(2)
                .filter_map(|pair| match pair {
                    [a, b] if b.after_deed => Some(Fared {
                        reached: value(self.track, b) - value(self.track, a),
                        at: b.t,
                    }),
                    _ => None,
                })
                .fold(none, |w, f| if f.reached > w.reached { f } else { w }),
            Measure::Rise(hours) => largest_change(self.track, points, hours / 24.0, 1.0),
            Measure::Fall(hours) => largest_change(self.track, points, hours / 24.0, -1.0),
            Measure::NetRise => points.iter().fold(none, |worst, p| {
                let before = at(self.track, points, (p.t - 1.0).max(0.0));
                let first = points.first().map(|f| value(self.track, f));
                let base = if p.t <= 1.0 { first } else { before };
                let rise = base.map_or(0.0, |b| value(self.track, p) - b);
                if rise > worst.reached {
                    Fared {
                        reached: rise,
                        at: p.t,
                    }
                } else {
                    worst
                }
            }),
            Measure::Most(from) => points
                .iter()
                .filter(|p| p.t >= from - 1e-9)
                .map(|p| Fared {
                    reached: value(self.track, p),
                    at: p.t,
                })
                .fold(
                    Fared {
                        reached: f64::NEG_INFINITY,
                        at: from,
                    },
                    |w, f| {
                        if f.reached > w.reached { f } else { w }
                    },
                ),
            Measure::Least => points
                .iter()
                .map(|p| Fared {
                    reached: value(self.track, p),
                    at: p.t,
                })
                .fold(
                    Fared {
                        reached: f64::INFINITY,
                        at: 0.0,
                    },
                    |w, f| {
                        if f.reached < w.reached { f } else { w }
                    },
                ),
        }
    }

    /// Whether one value is worse than another.
    pub fn is_worse(&self, value: f64, than: f64) -> bool {
        if self.measure == Measure::Least {
            value < than
        } else {
            value > than
        }
    }

    /// How much of the limit a value uses: 1 is all of it.
    pub fn used(&self, reached: f64) -> f64 {
        let (over, under) = if self.measure == Measure::Least {
            (self.bound, reached)
        } else {
            (reached, self.bound)
        };
        if under > 1e-12 {
            over / under
        } else {
            f64::INFINITY
        }
    }

    /// Whether a value passes the limit by more than a share (below zero: comes so near).
    pub fn is_passed(&self, reached: f64, without: f64, slack: f64) -> bool {
        match self.measure {
            Measure::Least => {
                let bound = if self.unless_anyway {
                    self.bound.min(without)
                } else {
                    self.bound
                };
                reached < bound * (1.0 - slack)
            }
            _ => {
                let anyway = self.unless_anyway && without > self.bound;
                let bound = if anyway {
                    without * 1.001
                } else {
                    self.bound * (1.0 + slack)
                };
                reached > bound
            }
        }
    }

    /// The limit as the plan shows it.
    pub fn kept(&self, reached: f64, without: f64) -> Kept {
        let anyway = match self.measure {
            Measure::Least => without < self.bound,
            _ => without > self.bound,
        };
        Kept {
            is_floor: self.measure == Measure::Least,
            without: (self.unless_anyway && anyway).then_some(without),
            ..kept(self.limit, self.bound, reached)
        }
    }
}

/// A limit and what was reached of it.
pub fn kept(limit: &PaceLimit, bound: f64, reached: f64) -> Kept {
    Kept {
        id: limit.id.clone(),
        name: limit.name.clone(),
        limit: bound,
        reached: if reached.is_finite() { reached } else { 0.0 },
        without: None,
        unit: limit.unit.clone(),
        source: limit.source.clone(),
        contested: limit.contested.clone(),
        unpublished: limit.is_unpublished(),
        is_floor: false,
        set_the_pace: false,
    }
}
