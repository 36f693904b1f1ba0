//! One reading at one place over time: the newest values as they are, older ones by the hour, the oldest by the day.

use std::collections::VecDeque;

use super::bins::Bins;
use super::trend::{Shift, median, shift};
use super::{DAY, HOUR};

const RAW_KEPT: usize = 160;
const HOURS_KEPT: usize = 24 * 8;
const DAYS_KEPT: usize = 75;
/// Trends look at no more than so many points; a longer window is thinned by medians.
const TREND_POINTS: usize = 16;

/// A time and a value.
type Point = (i64, f64);

/// A series that is remembered in constant space.
#[derive(Debug, Clone)]
pub struct Series {
    raw: VecDeque<(i64, f64)>,
    forgot_raw: bool,
    hours: Bins,
    days: Bins,
    last_below: bool,
    same_since: i64,
    same_count: u32,
    /// Values among the newest, each with how often it was read, by rising value.
    levels: Vec<(f64, u16)>,
}

impl Default for Series {
    fn default() -> Self {
        Self {
            raw: VecDeque::new(),
            forgot_raw: false,
            hours: Bins::new(HOUR, HOURS_KEPT),
            days: Bins::new(DAY, DAYS_KEPT),
            last_below: false,
            same_since: i64::MIN,
            same_count: 0,
            levels: Vec::new(),
        }
    }
}

/// What is usual on this farm: the median and a robust spread of the weeks before.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Usual {
    /// Median of the days.
    pub middle: f64,
    /// Median absolute deviation of the days, scaled to a standard deviation.
    pub spread: f64,
}

impl Series {
    /// Adds a value; `below` says that it is a detection limit and the value lies under it.
    pub fn push(&mut self, time: i64, value: f64, below: bool) {
        let kept = if below { value / 2.0 } else { value };
        match self.raw.back() {
            Some((_, before)) if *before == kept => self.same_count += 1,
            _ => {
                self.same_since = time;
                self.same_count = 1;
            }
        }
        if self.raw.len() == RAW_KEPT {
            if let Some((_, old)) = self.raw.pop_front() {
                self.forget_level(old);
            }
            self.forgot_raw = true;
        }
        self.raw.push_back((time, kept));
        self.note_level(kept);
        self.hours.push(time, kept);
        self.days.push(time, kept);
        self.last_below = below;
    }

    fn note_level(&mut self, value: f64) {
        match self.levels.binary_search_by(|l| l.0.total_cmp(&value)) {
            Ok(at) => self.levels[at].1 = self.levels[at].1.saturating_add(1),
            Err(at) => self.levels.insert(at, (value, 1)),
        }
    }

    fn forget_level(&mut self, value: f64) {
        if let Ok(at) = self.levels.binary_search_by(|l| l.0.total_cmp(&value)) {
            self.levels[at].1 -= 1;
            if self.levels[at].1 == 0 {
                self.levels.remove(at);
            }
        }
    }

    /// The step in which this instrument reads about a value: the gap between neighboring values that were each read
    /// several times. A color scale of 20, 40, 80 has steps of 40 at 80, and one step is no change. 0 when it shows none.
    pub fn step(&self, about: f64) -> f64 {
        /// A value read this often is a mark of the scale.
        const MARK: u16 = 3;
        let mut below = None;
        let mut above = None;
        for (value, _) in self.levels.iter().filter(|l| l.1 >= MARK) {
            if *value > about {
                above = Some(*value);
                break;
            }
            if let Some((_, last)) = below {
                below = Some((Some(last), *value));
            } else {
                below = Some((None, *value));
            }
        }
        match (below, above) {
            (Some((Some(lower), mark)), _) => mark - lower,
            (Some((None, mark)), Some(above)) => above - mark,
            _ => 0.0,
        }
    }

    /// When the last value was read and what it was; a value under the detection limit counts as half of it.
    pub fn last(&self) -> Option<(i64, f64)> {
        self.raw.back().copied()
    }

    /// The value before the last one.
    pub fn before_last(&self) -> Option<(i64, f64)> {
        self.raw
            .len()
            .checked_sub(2)
            .and_then(|i| self.raw.get(i))
            .copied()
    }

    /// The newest values as they were read, oldest first.
    pub fn newest(&self) -> impl DoubleEndedIterator<Item = &(i64, f64)> {
        self.raw.iter()
    }

    /// Whether the last value was below its detection limit.
    pub fn last_is_below(&self) -> bool {
        self.last_below
    }

    /// Since when, and how many times in a row, the same value has been read.
    pub fn same(&self) -> (i64, u32) {
        (self.same_since, self.same_count)
    }

    fn raw_covers(&self, from: i64) -> bool {
        !self.forgot_raw || self.raw.front().is_some_and(|p| p.0 <= from)
    }

    /// Points from `from` on in the order of time, at the finest grain that is still kept, and the point before them.
    fn points(&self, from: i64) -> (Option<Point>, Vec<Point>) {
        if self.raw_covers(from) {
            let first = self.raw.partition_point(|p| p.0 < from);
            let before = first.checked_sub(1).and_then(|i| self.raw.get(i)).copied();
            return (before, self.raw.range(first..).copied().collect());
        }
        let bins = if self.hours.covers(from) {
            &self.hours
        } else {
            &self.days
        };
        let (before, bins) = bins.since(from);
        (
            before.map(|b| (b.time(), b.middle())),
            bins.map(|b| (b.time(), b.middle())).collect(),
        )
    }

    /// Lowest and highest value within `window` seconds before the last value.
    pub fn extremes(&self, window: i64) -> Option<(f64, f64)> {
        let from = self.last()?.0 - window;
        let mut range = (f64::INFINITY, f64::NEG_INFINITY);
        let mut widen = |low: f64, high: f64| range = (range.0.min(low), range.1.max(high));
        if self.raw_covers(from) {
            for (_, v) in self.raw.iter().rev().take_while(|p| p.0 >= from) {
                widen(*v, *v);
            }
        } else {
            let bins = if self.hours.covers(from) {
                &self.hours
            } else {
                &self.days
            };
            for bin in bins.since(from).1.filter(|b| b.last() >= from) {
                widen(bin.low, bin.high);
            }
        }
        Some(range)
    }

    /// The median within `window` seconds before the last value.
    pub fn middle(&self, window: i64) -> Option<f64> {
        let from = self.last()?.0 - window;
        let mut values: Vec<f64> = self.points(from).1.iter().map(|p| p.1).collect();
        median(&mut values)
    }

    /// How the series moved within `window` seconds before the last value. Where the window begins between two points
    /// the level there is interpolated, so that sparse logs have a start to compare with.
    pub fn shift(&self, window: i64) -> Option<Shift> {
        let from = self.last()?.0 - window;
        let (before, mut points) = self.points(from);
        if let (Some((t0, v0)), Some((t1, v1))) = (before, points.first().copied())
            && t1 - from > window / 4
            && t1 > t0
        {
            #[allow(clippy::cast_precision_loss)] // times are far below 2^53 seconds
            let share = (from - t0) as f64 / (t1 - t0) as f64;
            points.insert(0, (from, v0 + share * (v1 - v0)));
        }
        shift(&thinned(points))
    }

    /// Whether the last value lies far outside what is usual here while the one before it did not; `None` where there is
    /// no usual yet.
    pub fn outlier(&self) -> Option<bool> {
        /// Weeks make a usual; the last reading but one may be of yesterday.
        const WINDOW: i64 = 35 * DAY;
        const DAYS: usize = 6;
        /// So many robust spreads away is far outside.
        const FAR: f64 = 6.0;
        let usual = self.usual(WINDOW, DAY / 2, DAYS)?;
        let (last, before) = (self.last()?.1, self.before_last()?.1);
        // A spread smaller than a twentieth of the level would make an outlier of ordinary wobble.
        let spread = usual
            .spread
            .max(self.step(usual.middle))
            .max(0.05 * usual.middle.abs());
        let far = |value: f64| (value - usual.middle).abs() > FAR * spread;
        Some(far(last) && !far(before))
    }

    /// What was usual in the `window` seconds that ended `recent` seconds before the last value; at least `days` days
    /// must tell.
    pub fn usual(&self, window: i64, recent: i64, days: usize) -> Option<Usual> {
        let last = self.last()?.0;
        let (_, bins) = self.days.since(last - window);
        let mut values: Vec<f64> = bins
            .filter(|b| b.time() <= last - recent)
            .map(|b| b.middle())
            .collect();
        if values.len() < days {
            return None;
        }
        let middle = median(&mut values)?;
        for value in &mut values {
            *value = (*value - middle).abs();
        }
        /// Scales a median absolute deviation to the standard deviation of a normal distribution.
        const MAD_TO_SIGMA: f64 = 1.4826;
        Some(Usual {
            middle,
            spread: MAD_TO_SIGMA * median(&mut values)?,
        })
    }
}

/// At most [`TREND_POINTS`] points: longer runs are cut into equal parts, each its median time and value.
fn thinned(points: Vec<(i64, f64)>) -> Vec<(i64, f64)> {
    if points.len() <= TREND_POINTS {
        return points;
    }
    let count = points.len();
    (0..TREND_POINTS)
        .filter_map(|part| {
            let run = &points[part * count / TREND_POINTS..(part + 1) * count / TREND_POINTS];
            let mut values: Vec<f64> = run.iter().map(|p| p.1).collect();
            let (first, last) = (run.first()?.0, run.last()?.0);
            // The two ends keep their own times, so that the span of the window stays what it is.
            let time = match part {
                0 => first,
                p if p == TREND_POINTS - 1 => last,
                _ => first + (last - first) / 2,
            };
            Some((time, median(&mut values)?))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sparse_windows_interpolate_their_start() {
        let mut series = Series::default();
        series.push(0, 5.6, false);
        series.push(5 * DAY, 3.6, false);
        let shift = series.shift(3 * DAY);
        assert!(
            shift.is_some_and(|s| (s.change + 1.2).abs() < 1e-9),
            "{shift:?}"
        );
    }

    #[test]
    fn a_color_scale_has_steps() {
        let mut series = Series::default();
        for (at, value) in [20.0, 40.0, 20.0, 40.0, 80.0, 20.0, 80.0, 40.0, 80.0]
            .into_iter()
            .enumerate()
        {
            series.push(i64::try_from(at).unwrap_or(0), value, false);
        }
        assert_eq!(series.step(80.0), 40.0);
        assert_eq!(series.step(500.0), 40.0);
        assert_eq!(series.step(30.0), 20.0);
        assert_eq!(Series::default().step(1.0), 0.0);
    }

    #[test]
    fn memory_is_flat_and_still_knows_weeks() {
        let mut series = Series::default();
        for minute in 0..(60 * 24 * 40_i32) {
            series.push(
                i64::from(minute) * 60,
                20.0 + f64::from(minute % 3) * 0.1,
                false,
            );
        }
        assert!(series.raw.len() <= RAW_KEPT);
        let usual = series.usual(35 * DAY, 3 * DAY, 5);
        assert!(usual.is_some_and(|u| (u.middle - 20.1).abs() < 0.05));
    }
}
