//! One test without parts, resolved for a site, judged against the memory of a farm.

use super::Degree;
use crate::history::memory::{Memory, Series, Shift};
use crate::knowledge::{Change, Over, Side};
use crate::vocabulary::{EventId, ReadingId, SignId};

/// A ramp between two numbers: degree 0 at the first, 1 at the second.
pub type Slope = (f64, f64);

/// A resolved test.
#[derive(Debug, Clone, PartialEq)]
pub enum Leaf {
    /// A value against bounds.
    Level {
        /// Of which reading.
        reading: ReadingId,
        /// Which value.
        over: Over,
        /// True below.
        below: Option<Slope>,
        /// True above.
        above: Option<Slope>,
        /// Must hold at every place.
        everywhere: bool,
        /// Seconds the value counts as present.
        good_for: i64,
    },
    /// A change within a window.
    Changed {
        /// Of which reading.
        reading: ReadingId,
        /// Which way.
        change: Change,
        /// From no change to sure change.
        slope: Slope,
        /// Seconds.
        within: i64,
        /// Amounts are shares of the earlier value.
        share: bool,
        /// Absolute and relative resolution.
        resolution: (f64, f64),
        /// Seconds the value counts as present.
        good_for: i64,
    },
    /// Robust spreads above or below usual.
    Unusual {
        /// Of which reading.
        reading: ReadingId,
        /// How many.
        spreads: f64,
        /// Above or below.
        side: Side,
        /// Absolute and relative resolution: the least spread.
        resolution: (f64, f64),
        /// Seconds the value counts as present.
        good_for: i64,
    },
    /// A value that water cannot have.
    Odd(ReadingId, i64),
    /// One value over and over.
    Stuck(ReadingId, i64),
    /// Two instruments disagree by so much within so many seconds.
    Disagree(ReadingId, f64, i64),
    /// A sign within its window; `bool`: seen at some time is enough.
    Sign(SignId, i64, bool),
    /// An event between two ages.
    Event {
        /// Which.
        event: EventId,
        /// Seconds back.
        within: i64,
        /// Older than this.
        not_within: i64,
        /// Highest degree of one that was not noted.
        not_noted: f64,
    },
    /// Settled when the rule base was compiled.
    Fixed(Degree),
}

/// What a judgement looked at.
#[derive(Debug, Clone, PartialEq)]
pub enum Saw {
    /// Nothing that counts.
    Nothing,
    /// A value, its time and place number.
    Value {
        /// The value.
        value: f64,
        /// When it was read.
        time: i64,
        /// Place number, 0 for the whole loop.
        place: u16,
        /// It lies below its detection limit.
        below: bool,
    },
    /// A change from an earlier level over a span.
    Moved {
        /// From.
        early: f64,
        /// To.
        late: f64,
        /// Seconds.
        span: i64,
        /// Place number.
        place: u16,
    },
    /// A value and what is usual.
    Against {
        /// The value.
        value: f64,
        /// The median of the weeks before.
        usual: f64,
        /// Place number.
        place: u16,
    },
    /// Something at a time.
    At(i64),
}

/// The outcome of one test.
#[derive(Debug, Clone, PartialEq)]
pub struct Judged {
    /// How true.
    pub degree: Degree,
    /// Until when that stays so if nothing new is read.
    pub until: i64,
    /// What it looked at.
    pub saw: Saw,
}

impl Judged {
    fn unknown() -> Self {
        Self {
            degree: Degree::UNKNOWN,
            until: i64::MAX,
            saw: Saw::Nothing,
        }
    }
}

/// How far along a slope a value is.
fn along((start, full): Slope, value: f64) -> f64 {
    if (full - start).abs() < f64::EPSILON {
        return if value >= start { 1.0 } else { 0.0 };
    }
    ((value - start) / (full - start)).clamp(0.0, 1.0)
}

/// A value fades in steps from its `good_for` to three times that: each step has its own wake-up.
const FADE_STEPS: i64 = 4;

/// How much a value of this age has faded (0 to 1), and when that changes next.
fn fade(time: i64, now: i64, good_for: i64) -> (f64, i64) {
    let age = now - time;
    if age <= good_for {
        return (0.0, time + good_for + 1);
    }
    let step = (2 * good_for / FADE_STEPS).max(1);
    let steps = (age - good_for - 1) / step + 1;
    if steps >= FADE_STEPS {
        return (1.0, i64::MAX);
    }
    #[allow(clippy::cast_precision_loss)] // 0 to FADE_STEPS
    let share = steps as f64 / FADE_STEPS as f64;
    (share, time + good_for + 1 + steps * step)
}

/// A jump of the last reading alone, not yet confirmed by another, counts for no more than this.
const UNCONFIRMED: f64 = 0.6;
/// How much a value that stands alone is faded until it is borne out; more than half, so that it decides nothing alone.
const DOUBTED: f64 = 0.6;
/// How far back the farm's own usual reaches, what of it is too recent to be usual, and how many days must tell.
const USUAL_WINDOW: i64 = 35 * 86_400;
const USUAL_RECENT: i64 = 3 * 86_400;
const USUAL_DAYS: usize = 6;

impl Leaf {
    /// Judges the test at the memory's present.
    pub fn judge(&self, memory: &Memory) -> Judged {
        let now = memory.now();
        match self {
            Leaf::Fixed(degree) => Judged {
                degree: *degree,
                until: i64::MAX,
                saw: Saw::Nothing,
            },
            Leaf::Level {
                reading,
                everywhere,
                ..
            } => places(memory, *reading, *everywhere, |series, place| {
                self.level(series, place, now)
            }),
            Leaf::Changed {
                reading, change, ..
            } => places(
                memory,
                *reading,
                *change == Change::Held,
                |series, place| self.changed(series, place, now),
            ),
            Leaf::Unusual { reading, .. } => places(memory, *reading, false, |series, place| {
                self.unusual(series, place, now)
            }),
            Leaf::Odd(reading, within) => {
                let Some(track) = memory.reading(*reading) else {
                    return Judged::unknown();
                };
                match track.odd_since(now - within).next_back() {
                    Some((time, value)) => Judged {
                        degree: Degree::TRUE,
                        until: time + within + 1,
                        saw: Saw::Value {
                            value: *value,
                            time: *time,
                            place: 0,
                            below: false,
                        },
                    },
                    None if track.newest().is_some() => Judged {
                        degree: Degree::FALSE,
                        until: i64::MAX,
                        saw: Saw::Nothing,
                    },
                    None => Judged::unknown(),
                }
            }
            Leaf::Stuck(reading, within) => places(memory, *reading, false, |series, place| {
                stuck(series, place, now, *within)
            }),
            Leaf::Disagree(reading, by, within) => disagree(memory, *reading, *by, *within),
            Leaf::Sign(sign, window, ever) => sign_seen(memory, *sign, *window, *ever),
            Leaf::Event {
                event,
                within,
                not_within,
                not_noted,
            } => event_noted(memory, *event, (*within, *not_within), *not_noted),
        }
    }

    fn level(&self, series: &Series, place: u16, now: i64) -> Judged {
        let Leaf::Level {
            over,
            below,
            above,
            good_for,
            ..
        } = self
        else {
            return Judged::unknown();
        };
        let Some((time, last)) = series.last() else {
            return Judged::unknown();
        };
        let (value, keep) = match over {
            Over::Now => (Some(last), *good_for),
            Over::Lowest(window) => (
                series.extremes(*window).map(|e| e.0),
                (*good_for).max(*window),
            ),
            Over::Highest(window) => (
                series.extremes(*window).map(|e| e.1),
                (*good_for).max(*window),
            ),
            Over::Middle(window) => (series.middle(*window), (*good_for).max(*window)),
        };
        let Some(value) = value else {
            return Judged::unknown();
        };
        // Below detection at L is anything from 0 to L; half of it is kept, so the ends are 0 and twice what is kept.
        let hidden = *over == Over::Now && series.last_is_below();
        let (low, high) = if hidden {
            (0.0, value * 2.0)
        } else {
            (value, value)
        };
        let mut degree = Degree::TRUE;
        for slope in [below, above].into_iter().flatten() {
            degree = degree.and(Degree::between(along(*slope, low), along(*slope, high)));
        }
        let (faded, until) = fade(time, now, keep);
        Judged {
            degree: degree.faded(faded),
            until,
            saw: Saw::Value {
                value,
                time,
                place,
                below: hidden,
            },
        }
    }

    fn changed(&self, series: &Series, place: u16, now: i64) -> Judged {
        let Leaf::Changed {
            change,
            slope,
            within,
            share,
            resolution,
            good_for,
            ..
        } = self
        else {
            return Judged::unknown();
        };
        let (Some((time, _)), Some(shift)) = (series.last(), series.shift(*within)) else {
            return Judged::unknown();
        };
        let about = shift
            .early
            .max(shift.early + shift.change)
            .max(shift.early + shift.jump);
        let least = resolution
            .0
            .max(resolution.1 * shift.early.abs())
            .max(series.step(about));
        let scale = if *share {
            shift.early.abs().max(least).max(f64::MIN_POSITIVE)
        } else {
            1.0
        };
        // Twice the resolution is what two honest readings of the same water may differ by.
        let real = |amount: f64| {
            if amount.abs() < 2.0 * least - 1e-9 {
                0.0
            } else {
                amount
            }
        };
        let degree = moved(*change, *slope, &shift, scale, *within, &real);
        let (faded, until) = fade(time, now, (*good_for).max(*within));
        Judged {
            degree: degree.faded(faded),
            until,
            saw: Saw::Moved {
                early: shift.early,
                late: shift.early + shift.change,
                span: shift.span,
                place,
            },
        }
    }

    fn unusual(&self, series: &Series, place: u16, now: i64) -> Judged {
        let Leaf::Unusual {
            spreads,
            side,
            resolution,
            good_for,
            ..
        } = self
        else {
            return Judged::unknown();
        };
        let Some((time, value)) = series.last() else {
            return Judged::unknown();
        };
        let Some(usual) = series.usual(USUAL_WINDOW, USUAL_RECENT, USUAL_DAYS) else {
            return Judged::unknown();
        };
        let least = resolution
            .0
            .max(resolution.1 * usual.middle.abs())
            .max(series.step(usual.middle));
        let spread = usual.spread.max(least).max(f64::MIN_POSITIVE);
        let away = match side {
            Side::High => value - usual.middle,
            Side::Low => usual.middle - value,
        };
        let degree = Degree::known(along((spreads - 1.0, spreads + 1.0), away / spread));
        let (faded, until) = fade(time, now, *good_for);
        Judged {
            degree: degree.faded(faded),
            until,
            saw: Saw::Against {
                value,
                usual: usual.middle,
                place,
            },
        }
    }
}

/// How true a change is. A gradual change or a confirmed step counts in full; a jump of the last reading alone counts
/// up to [`UNCONFIRMED`].
fn moved(
    change: Change,
    slope: Slope,
    shift: &Shift,
    scale: f64,
    within: i64,
    real: &impl Fn(f64) -> f64,
) -> Degree {
    let signed = |sign: f64| {
        let steady = along(slope, sign * real(shift.change) / scale);
        let jump = along(slope, sign * real(shift.jump) / scale).min(UNCONFIRMED);
        Degree::known(steady.max(jump))
    };
    match change {
        Change::Rose => signed(1.0),
        Change::Fell => signed(-1.0),
        Change::Swung => Degree::known(along(slope, real(shift.swing) / scale)),
        // Two points close together don't show that a value held.
        Change::Held if shift.span < within / 3 => Degree {
            lo: 0.0,
            hi: 1.0 - along(slope, real(shift.swing) / scale),
        },
        Change::Held => Degree::known(
            1.0 - along(
                slope,
                real(shift.change.abs().max(shift.jump.abs())) / scale,
            ),
        ),
    }
}

/// Judges every place that still tells something; one place is enough, or all must agree.
fn places(
    memory: &Memory,
    reading: ReadingId,
    everywhere: bool,
    judge: impl Fn(&Series, u16) -> Judged,
) -> Judged {
    let Some(track) = memory.reading(reading) else {
        return Judged::unknown();
    };
    let mut chosen: Option<Judged> = None;
    let mut until = i64::MAX;
    for (place, series) in track.places() {
        let judged = judge(series, place);
        until = until.min(judged.until);
        if judged.degree.is_unknown() {
            continue;
        }
        chosen = Some(match chosen {
            None => judged,
            Some(held) => {
                let better = if everywhere {
                    (judged.degree.lo + judged.degree.hi) < (held.degree.lo + held.degree.hi)
                } else {
                    (judged.degree.lo + judged.degree.hi) > (held.degree.lo + held.degree.hi)
                };
                let degree = if everywhere {
                    held.degree.and(judged.degree)
                } else {
                    held.degree.or(judged.degree)
                };
                let saw = if better { judged.saw } else { held.saw };
                Judged { degree, until, saw }
            }
        });
    }
    // A value that nothing bears out yet is read again before it is believed.
    let doubt = if memory.is_doubtful(reading) {
        DOUBTED
    } else {
        0.0
    };
    match chosen {
        Some(judged) => Judged {
            until,
            degree: judged.degree.faded(doubt),
            ..judged
        },
        None => Judged {
            until,
            ..Judged::unknown()
        },
    }
}

/// So many equal values in a row make a probe that is read often look stuck.
const STUCK_READINGS: u32 = 12;

fn stuck(series: &Series, place: u16, now: i64, within: i64) -> Judged {
    let Some((time, value)) = series.last() else {
        return Judged::unknown();
    };
    let (since, count) = series.same();
    let often = series.newest().count() >= usize::try_from(STUCK_READINGS).unwrap_or(usize::MAX);
    if !often {
        return Judged::unknown();
    }
    let degree = Degree::of(count >= STUCK_READINGS && time - since >= within);
    let (faded, until) = fade(time, now, within);
    Judged {
        degree: degree.faded(faded),
        until,
        saw: Saw::Value {
            value,
            time,
            place,
            below: false,
        },
    }
}

fn disagree(memory: &Memory, reading: ReadingId, by: f64, within: i64) -> Judged {
    let now = memory.now();
    let Some(track) = memory.reading(reading) else {
        return Judged::unknown();
    };
    let worst = track
        .disagreements_since(now - within)
        .max_by(|a, b| a.1.abs().total_cmp(&b.1.abs()));
    match worst {
        Some((time, difference)) => Judged {
            degree: Degree::known(along((by * 0.75, by * 1.5), difference.abs())),
            until: time + within + 1,
            saw: Saw::At(*time),
        },
        None => Judged::unknown(),
    }
}

fn sign_seen(memory: &Memory, sign: SignId, window: i64, ever: bool) -> Judged {
    let now = memory.now();
    let Some(track) = memory.sign(sign) else {
        return Judged::unknown();
    };
    // The newest look at each place counts, or with `ever` any time it was seen.
    let mut judged = Judged::unknown();
    let mut places: Vec<u16> = Vec::new();
    let mut until = i64::MAX;
    for (time, place, seen) in track.since(now - window).rev() {
        if !ever && places.contains(place) {
            continue;
        }
        places.push(*place);
        until = until.min(time + window + 1);
        if *seen && judged.degree != Degree::TRUE {
            judged.degree = Degree::TRUE;
            judged.saw = Saw::At(*time);
        } else if !*seen && judged.degree.is_unknown() {
            judged.degree = Degree::FALSE;
            judged.saw = Saw::At(*time);
        }
    }
    Judged { until, ..judged }
}

fn event_noted(
    memory: &Memory,
    event: EventId,
    (within, not_within): (i64, i64),
    not_noted: f64,
) -> Judged {
    let now = memory.now();
    let Some(track) = memory.event(event) else {
        return Judged::unknown();
    };
    let upto = now - not_within;
    // An event that is younger than `not_within` will count later: that is a wake-up too.
    let coming = track
        .between(upto, now)
        .next()
        .map_or(i64::MAX, |t| t + not_within);
    if let Some(time) = track.between(now - within - 1, upto).next_back() {
        return Judged {
            degree: Degree::TRUE,
            until: (time + within + 1).min(coming),
            saw: Saw::At(*time),
        };
    }
    let degree = if track.denied_since(now - within) {
        Degree::FALSE
    } else if memory.does_keep_events() {
        Degree {
            lo: 0.0,
            hi: not_noted,
        }
    } else {
        Degree::UNKNOWN
    };
    Judged {
        degree,
        until: coming,
        saw: Saw::Nothing,
    }
}
